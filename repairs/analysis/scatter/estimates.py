r"""Lives estimated from failures and suspensions: lognormal and two-parameter Weibull.

Both are of one family: with y = ln t, :math:`y = \mu + \sigma z`, z normal (lognormal
life) or smallest extreme value (Weibull, :math:`\eta = e^\mu`,
:math:`\beta = 1/\sigma`). Maximum likelihood; a suspension (an item taken out, or still
flying, uncracked) counts by its survival, and leaving it out shortens the life found. A
crack found at an inspection counts by the chance that it began since the one before.

References
----------
.. [1] Nelson, Applied Life Data Analysis; Lawless; Meeker and Escobar: likelihood,
   information and likelihood-ratio bounds of location-scale families.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from scipy.optimize import brentq, minimize, minimize_scalar
from scipy.special import chdtri

from repairs.analysis.errors import AnalysisError, within
from repairs.analysis.scatter.factors import quantile
from repairs.analysis.scatter.likelihood import (
    Array,
    LifeModel,
    Lives,
    log_likelihood,
    log_survival,
    slopes,
)

__all__ = [
    "LifeEstimate",
    "LifeModel",
    "Lives",
    "fit",
    "known_shape_lower",
    "lower_life",
    "normal_lower_life",
]

TOO_FEW = (
    "{failures} failures are too few to fit two parameters; at least 3, not all alike, "
    "are needed. With a shape known beforehand use the bound for a known shape."
)
NOT_FITTED = "The likelihood has no maximum that could be found: {message}"
SPREAD = math.log(1e4)
"""Widest search about the estimate, in ln of life."""


@dataclass(frozen=True, slots=True)
class LifeEstimate:
    """A fitted distribution of life, with the uncertainty of its parameters.

    `location` and `scale` are mu and sigma of ln life; `covariance` is that of
    (mu, ln sigma) from the observed information.
    """

    model: LifeModel
    location: float
    scale: float
    log_likelihood: float
    covariance: tuple[tuple[float, float], tuple[float, float]]
    lives: Lives

    @property
    def median(self) -> float:
        """Life that half survive, in the unit of the lives."""
        return self.life_at(0.5)

    @property
    def characteristic(self) -> float:
        """Weibull's eta, life that 36.8 % survive; the median of a lognormal."""
        return math.exp(self.location)

    @property
    def shape(self) -> float:
        """Weibull's beta, one over sigma [-]."""
        return 1 / self.scale

    @property
    def log10_deviation(self) -> float:
        """Standard deviation of log10 life [-], as scatter factors take it."""
        spread = math.pi / math.sqrt(6) if self.model is LifeModel.WEIBULL else 1.0
        return self.scale * spread / math.log(10)

    def life_at(self, survival: float) -> float:
        """Return the life that a share of items survives, best estimate."""
        return math.exp(self.location + self.scale * _standard(self.model, survival))

    def survival(self, life: float) -> float:
        """Return the share of items that survives a life [-]."""
        z = np.array([(math.log(life) - self.location) / self.scale])
        return math.exp(float(log_survival(self.model, z)[0]))


def fit(lives: Lives, model: LifeModel) -> LifeEstimate:
    """Fit a distribution of life by maximum likelihood.

    Parameters
    ----------
    lives
        Failures, suspensions, between two looks [cycles, or any one unit].
    model
        Lognormal or Weibull.

    Returns
    -------
    LifeEstimate
        Parameters and their covariance.

    Notes
    -----
    Range: at least 3 failures or cracks found, not all alike. Maximum likelihood is
    biased in small samples: Weibull's shape comes out high, by about 1.4/n for n
    failures without suspensions.

    References
    ----------
    .. [1] See the module.
    """
    middles = [math.sqrt(max(low, high / 4) * high) for low, high in lives.between]
    known = [*lives.failures, *middles]
    if len(known) < 3 or len({*lives.failures, *lives.between}) < 2:
        raise AnalysisError(TOO_FEW.format(failures=len(known)))
    failed = np.log(np.array(known))
    start = np.array([failed.mean(), math.log(max(float(failed.std()), 0.1))])

    def against(x: Array) -> tuple[float, Array]:
        slope, _ = slopes(lives, model, x)
        return -log_likelihood(lives, model, float(x[0]), math.exp(x[1])), -slope

    def curvature(x: Array) -> Array:
        return -slopes(lives, model, x)[1]

    found = minimize(
        against, start, jac=True, hess=curvature, method="trust-exact", tol=1e-10
    )
    location, scale = float(found.x[0]), math.exp(float(found.x[1]))
    slope, curve = slopes(lives, model, found.x)
    if not float(np.abs(slope).max()) < 1e-6 * len(known):
        raise AnalysisError(NOT_FITTED.format(message=found.message))
    (a, b), (c, d) = np.linalg.inv(-curve)
    return LifeEstimate(
        model,
        location,
        scale,
        log_likelihood(lives, model, location, scale)
        - float(np.log(np.array(lives.failures)).sum()),
        ((float(a), float(b)), (float(c), float(d))),
        lives,
    )


def lower_life(estimate: LifeEstimate, survival: float, confidence: float) -> float:
    r"""Return the life a share of items survives, lower bound by likelihood ratio [1]_.

    .. math:: 2\,[\ell(\hat\mu, \hat\sigma) - \max_\sigma \ell(y_p, \sigma)]
              = \chi^2_1(2C - 1)

    Parameters
    ----------
    estimate
        Fitted distribution.
    survival
        Share that survives, as 0.999 [-].
    confidence
        C, one-sided, as 0.95 [-].

    Returns
    -------
    float
        Life, in the unit of the lives.

    Notes
    -----
    Range 0 < survival < 1, 0.5 < C < 1. Large-sample bound: for 5 failures and 99 %
    survival a tolerance factor of the lognormal is lower and is exact.

    References
    ----------
    .. [1] Meeker and Escobar; Lawless.
    """
    within("Confidence", confidence, 0.501, 0.9999, "a lower bound")
    allowed = float(chdtri(1, 2 - 2 * confidence)) / 2
    standard = _standard(estimate.model, survival)
    lives, model = estimate.lives, estimate.model
    best = log_likelihood(lives, model, estimate.location, estimate.scale)

    def shortfall(log_life: float) -> float:
        def at(log_scale: float) -> float:
            scale = math.exp(log_scale)
            return -log_likelihood(lives, model, log_life - scale * standard, scale)

        centre = math.log(estimate.scale)
        found = minimize_scalar(
            at, bounds=(centre - 3, centre + 3), method="bounded",
            options={"xatol": 1e-10},
        )  # fmt: skip
        return best + float(found.fun) - allowed

    middle = estimate.location + estimate.scale * standard
    return math.exp(brentq(shortfall, middle - SPREAD, middle, xtol=1e-10))


def normal_lower_life(
    estimate: LifeEstimate, survival: float, confidence: float
) -> float:
    """Return the same bound from the parameters' covariance, even in ln life.

    Parameters
    ----------
    estimate, survival, confidence
        As `lower_life` [-].

    Returns
    -------
    float
        Life, in the unit of the lives.

    Notes
    -----
    Range as `lower_life`. Quick, and too high in small samples: shown beside only.

    References
    ----------
    .. [1] Delta method on (mu, ln sigma).
    """
    slope = estimate.scale * _standard(estimate.model, survival)
    (a, b), (_, d) = estimate.covariance
    error = math.sqrt(a + 2 * slope * b + slope**2 * d)
    return math.exp(estimate.location + slope - quantile(confidence) * error)


def known_shape_lower(lives: Lives, shape: float, confidence: float) -> float:
    r"""Return a lower bound of Weibull's eta with the shape known beforehand [1]_.

    .. math:: \eta \ge \Bigl[\frac{2\sum t_i^\beta}
              {\chi^2_C(2r + 2)}\Bigr]^{1/\beta}

    Parameters
    ----------
    lives
        Failures (r of them, none is allowed) and suspensions; a crack found between two
        looks counts as a failure at the first, which is safe.
    shape
        Weibull's beta, from earlier failures of such parts [-].
    confidence
        C, one-sided [-].

    Returns
    -------
    float
        Life, in the unit of the lives.

    Notes
    -----
    Range 0.5 <= beta <= 20. For suspensions at set times; rests wholly on the shape.

    References
    ----------
    .. [1] Exact for t to the power beta, which is exponential; Nelson.
    """
    within("Weibull shape", shape, 0.5, 20, "lives of structure")
    within("Confidence", confidence, 0.501, 0.9999, "a lower bound")
    first = (low for low, _ in lives.between)
    every = np.array((*lives.failures, *lives.suspensions, *first))
    failed = len(lives.failures) + len(lives.between)
    if every.size == 0:
        raise AnalysisError(TOO_FEW.format(failures=0))
    total = float((every**shape).sum())
    bound = float(chdtri(2 * failed + 2, 1 - confidence))
    return float((2 * total / bound) ** (1 / shape))


def _standard(model: LifeModel, survival: float) -> float:
    """Return z of a survival: normal, or smallest extreme value."""
    within("Survival", survival, 1e-12, 1 - 1e-12, "a probability")
    if model is LifeModel.LOGNORMAL:
        return -quantile(survival)
    return math.log(-math.log(survival))
