r"""Probability of detection against flaw size: three curves of two parameters.

With x = ln a, all are :math:`g(POD) = (x - \mu)/\tau`, g the normal quantile or the
log-odds:

.. math::
    \text{log-normal}\; \Phi\!\left(\frac{\ln a - \mu}{s}\right),\quad
    \text{log-logistic}\; \frac{1}{1 + e^{-\pi(\ln a - \mu)/(\sqrt 3 s)}},\quad
    \text{log-odds}\; \frac{1}{1 + e^{-(\alpha + \beta\ln a)}}

A curve belongs to what it was measured on: method, what its size means, the sizes
tried. There is no default curve and no default detectable size. It goes to one for
large flaws; what keeps an inspection from being done at all stands in the plan.

References
----------
.. [1] MIL-HDBK-1823A; USAF Damage Tolerant Design Handbook, 3.1.2.1 and 3.1.2.4.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import StrEnum

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy.special import betaincinv, expit, log_expit, log_ndtr, logit, ndtr, ndtri

from repairs.analysis.errors import WITHOUT_SOURCE, InputError, within
from repairs.analysis.types import Grade, Reference

Array = NDArray[np.float64]
POD_CURVES = Reference(
    "USAF Damage Tolerant Design Handbook, 3.1.2.4: log-normal (the Air Force's) and "
    "log-odds, there called indistinguishable",
    Grade.PRINT,
)
BINOMIAL = Reference(
    "One-sided binomial bound (Clopper and Pearson), exact; 29 of 29 as used for "
    "demonstrations at one size",
    Grade.DERIVED,
)
NO_SIZES = (
    "The sizes tried run from {low} to {high} mm; a rising positive range is due."
)
NO_FLAWS = "The number of flaws tried reads {flaws}; a whole number above zero is due."


class Technique(StrEnum):
    """How an inspection looks."""

    GENERAL_VISUAL = "general visual"
    DETAILED_VISUAL = "detailed visual"
    PENETRANT = "penetrant"
    MAGNETIC_PARTICLE = "magnetic particle"
    EDDY_CURRENT_SURFACE = "eddy current, surface"
    EDDY_CURRENT_LOW_FREQUENCY = "eddy current, low frequency, hidden layer"
    EDDY_CURRENT_BOLT_HOLE = "eddy current, bolt hole, fastener out"
    ULTRASONIC = "ultrasonic"
    RADIOGRAPHIC = "radiographic"


class SizeMeaning(StrEnum):
    """What the size of a detection curve is; comparing two meanings is an error."""

    BEYOND_COVER = "length beyond the fastener head, doubler or other cover"
    FROM_EDGE = "length from the edge of hole or part"
    TIP_TO_TIP = "length tip to tip"
    DEPTH = "depth"


class Link(StrEnum):
    """The function that makes a curve a straight line in ln a."""

    NORMAL = "normal"
    LOGISTIC = "logistic"

    def value_of(self, probability: Array) -> Array:
        """Return g of a probability [-]."""
        if self is Link.NORMAL:
            return np.asarray(ndtri(probability))
        return np.asarray(logit(probability))

    def probability(self, z: Array) -> Array:
        """Return the probability of g [-]."""
        return np.asarray(ndtr(z) if self is Link.NORMAL else expit(z))

    def log_probability(self, z: Array) -> Array:
        """Return ln of the probability of g; that of a miss is at -g [-]."""
        return np.asarray(log_ndtr(z) if self is Link.NORMAL else log_expit(z))


@dataclass(frozen=True, slots=True)
class Study:
    """What a detection curve was measured on, without which it is no curve.

    `smallest` and `largest` are the sizes tried [mm], `flaws` their number.
    """

    technique: Technique
    size: SizeMeaning
    smallest: float
    largest: float
    flaws: int
    source: str
    grade: Grade

    def __post_init__(self) -> None:
        if not self.source.strip():
            raise InputError(WITHOUT_SOURCE.format(what=f"A {self.technique} curve"))
        if not 0 < self.smallest < self.largest < math.inf:
            raise InputError(NO_SIZES.format(low=self.smallest, high=self.largest))
        if self.flaws < 1:
            raise InputError(NO_FLAWS.format(flaws=self.flaws))


@dataclass(frozen=True, slots=True)
class DetectionCurve:
    """Probability of detection by size.

    `location` is ln of the size found half the time, `scale` is tau, one over the
    slope of g against ln a.
    """

    link: Link
    location: float
    scale: float
    study: Study

    def __post_init__(self) -> None:
        within("ln of the size found half the time", self.location, -15, 15, "mm")
        within("Scale of the detection curve", self.scale, 1e-4, 10, "a rising curve")

    def fitted(self, sizes: ArrayLike) -> Array:
        """Return the curve as its formula runs, also beyond what was tried [-]."""
        with np.errstate(divide="ignore"):  # a size of nothing is never found
            x = np.log(np.maximum(np.asarray(sizes, dtype=np.float64), 0.0))
        return self.link.probability((x - self.location) / self.scale)

    def pod(self, sizes: ArrayLike) -> Array:
        """Return the probability that may be counted on [-], shape of `sizes`.

        None below the smallest size tried; above the largest, no more than there.
        """
        a = np.asarray(sizes, dtype=np.float64)
        counted = self.fitted(np.minimum(a, self.study.largest))
        return np.where(a >= self.study.smallest, counted, 0.0)

    def size_at(self, probability: float) -> float:
        """Return the size found with a probability in (0, 1), by the formula [mm]."""
        within("Probability", probability, 1e-9, 1 - 1e-9, "a share found")
        return math.exp(
            self.location
            + self.scale * float(self.link.value_of(np.array(probability)))
        )

    @property
    def a50(self) -> float:
        """Size found half the time [mm]."""
        return self.size_at(0.5)

    @property
    def a90(self) -> float:
        """Size found nine times in ten, best estimate without confidence [mm]."""
        return self.size_at(0.9)


def log_normal(mu: float, deviation: float, study: Study) -> DetectionCurve:
    r"""Return :math:`\Phi((\ln a - \mu)/s)`.

    Parameters
    ----------
    mu
        Mean of ln a, a in mm.
    deviation
        s, standard deviation of ln a [-].
    study
        What it was measured on.

    Returns
    -------
    DetectionCurve
        a90 = exp(mu + 1.28155 s).

    Notes
    -----
    Range s > 0.

    References
    ----------
    .. [1] See `POD_CURVES`.
    """
    return DetectionCurve(Link.NORMAL, mu, deviation, study)


def log_logistic(mu: float, deviation: float, study: Study) -> DetectionCurve:
    r"""Return :math:`1/(1 + e^{-\pi(\ln a - \mu)/(\sqrt 3 s)})`.

    Parameters
    ----------
    mu
        Mean of ln a, a in mm.
    deviation
        s, standard deviation of ln a [-].
    study
        What it was measured on.

    Returns
    -------
    DetectionCurve
        a90 = exp(mu + 1.21139 s).

    Notes
    -----
    Range s > 0. The same curve as `log_odds` with beta = pi / (s sqrt 3).

    References
    ----------
    .. [1] See `POD_CURVES`.
    """
    return DetectionCurve(Link.LOGISTIC, mu, deviation * math.sqrt(3) / math.pi, study)


def log_odds(alpha: float, slope: float, study: Study) -> DetectionCurve:
    r"""Return :math:`1/(1 + e^{-(\alpha + \beta\ln a)})`.

    Parameters
    ----------
    alpha
        Log-odds at 1 mm [-]; a source in inches needs alpha - beta ln 25.4.
    slope
        beta, log-odds per unit of ln a [-].
    study
        What it was measured on.

    Returns
    -------
    DetectionCurve
        a90 = exp((ln 9 - alpha) / beta).

    Notes
    -----
    Range beta > 0.

    References
    ----------
    .. [1] See `POD_CURVES`.
    """
    within("Slope of the log-odds", slope, 0.1, 1e4, "a rising curve")
    return DetectionCurve(Link.LOGISTIC, -alpha / slope, 1 / slope, study)


def demonstrated(hits: int, trials: int, confidence: float) -> float:
    r"""Return the detection probability shown by hits at one size, lower bound.

    .. math:: p_L = B^{-1}(1 - C;\; h,\; n - h + 1)

    Parameters
    ----------
    hits
        h, flaws found.
    trials
        n, flaws tried, each once and of one size.
    confidence
        C, one-sided [-].

    Returns
    -------
    float
        Probability [-]; 0 without a hit.

    Notes
    -----
    Range 0 <= h <= n, independent trials: one flaw looked at five times is one trial.

    References
    ----------
    .. [1] See `BINOMIAL`.
    """
    within("Trials", trials, 1, 1e6, "a count")
    within("Hits", hits, 0, trials, "no more than the trials")
    within("Confidence", confidence, 0.5, 0.9999, "a lower bound")
    if hits == 0:
        return 0.0
    return float(betaincinv(hits, trials - hits + 1, 1 - confidence))


def trials_needed(misses: int, probability: float, confidence: float) -> int:
    """Return how many trials with so many misses show a probability at one size.

    Parameters
    ----------
    misses
        Flaws not found.
    probability, confidence
        To be shown, one-sided [-].

    Returns
    -------
    int
        Smallest number of trials: 29, 46 for 90/95 with none, one missed.

    Notes
    -----
    Range 0.01 <= p <= 0.999. Deciding on more trials after a miss is another test.

    References
    ----------
    .. [1] See `BINOMIAL`.
    """
    within("Misses", misses, 0, 1000, "a count")
    within("Probability", probability, 0.01, 0.999, "a share found")
    enough = misses + 1
    while demonstrated(enough - misses, enough, confidence) < probability:
        enough *= 2
    short = enough // 2
    while enough - short > 1:
        middle = (enough + short) // 2
        shown = middle > misses and (
            demonstrated(middle - misses, middle, confidence) >= probability
        )
        short, enough = (short, middle) if shown else (middle, enough)
    return enough
