r"""Scatter factors on life and the fatigue policy of a type.

Log-life is normal, standard deviation s. With p the survival asked for and C the
confidence,

.. math::
    \text{(a)}\; 10^{\,s(z_p + z_C/\sqrt n)}\qquad
    \text{(b)}\; 10^{\,s z_p\sqrt{1 + 1/n}}

(a) puts confidence C on the mean of n tests, (b) predicts one future item from it.
There is no default factor: a type's fatigue policy states it, or there is none.

References
----------
.. [1] Impellizzeri, ASTM STP 404 (idea of form b).
.. [2] FAA AC 23-13A, Table 2, as quoted in a public engineering code.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from statistics import NormalDist

from repairs.analysis.errors import within
from repairs.analysis.types import Sourced


@dataclass(frozen=True, slots=True)
class FatiguePolicy:
    """A factor with all that it means; without one there is no threshold.

    Parameters
    ----------
    factor
        Divisor with its source [-].
    multiplies
        What it is applied to, in words, as "mean stress-life".
    log_deviation
        s assumed, standard deviation of log10 life [-]; None = not stated.
    tests, survival, confidence
        n, p and C behind the factor; None = not stated.
    severity_inside
        Whether the severity of the spectrum is already inside the factor.
    """

    factor: Sourced
    multiplies: str
    log_deviation: float | None = None
    tests: int | None = None
    survival: float | None = None
    confidence: float | None = None
    severity_inside: bool | None = None

    def __post_init__(self) -> None:
        within("Scatter factor", self.factor.value, 1, 100, "a divisor of life")


def quantile(probability: float) -> float:
    """Return the normal quantile of a probability in (0, 1) [-]."""
    within("Probability", probability, 1e-12, 1 - 1e-12, "a probability")
    return NormalDist().inv_cdf(probability)


def factor_confidence(
    log_deviation: float, z_survival: float, confidence: float, tests: int
) -> float:
    r"""Return form (a), confidence on the mean: :math:`10^{s(z_p + z_C/\sqrt n)}`.

    Parameters
    ----------
    log_deviation
        s, standard deviation of log10 life [-].
    z_survival
        Normal quantile of the survival asked for [-].
    confidence
        C, as 0.95 [-].
    tests
        n, whole number of tests [-].

    Returns
    -------
    float
        Factor [-].

    Notes
    -----
    Range s > 0, n >= 1. Not to be stacked on a curve's own deviation.

    References
    ----------
    .. [1] OEIS A375221 prints 4.0031307596 for s = log10(6)/6, z = 3, C = 0.95, n = 1.
    """
    within("Standard deviation of log life", log_deviation, 1e-6, 2, "log10 cycles")
    within("Number of tests", tests, 1, 1e6, "a count")
    return float(
        10 ** (log_deviation * (z_survival + quantile(confidence) / math.sqrt(tests)))
    )


def factor_predictive(log_deviation: float, z_survival: float, tests: int) -> float:
    r"""Return form (b), one future item: :math:`10^{s z_p\sqrt{1 + 1/n}}`.

    Parameters
    ----------
    log_deviation
        s, standard deviation of log10 life [-].
    z_survival
        Normal quantile of the survival asked for [-].
    tests
        n, whole number of tests [-].

    Returns
    -------
    float
        Factor [-].

    Notes
    -----
    Range s > 0, n >= 1.

    References
    ----------
    .. [1] FAA AC 23-13A, Table 2, as quoted: 4.96, 4.0, 3.7, 3.54 for n = 1 to 4 with
       s z = 0.4917.
    """
    within("Standard deviation of log life", log_deviation, 1e-6, 2, "log10 cycles")
    within("Number of tests", tests, 1, 1e6, "a count")
    return float(10 ** (log_deviation * z_survival * math.sqrt(1 + 1 / tests)))


def first_of_fleet(survival: float, locations: int) -> float:
    """Return the survival each of m alike locations needs for the first of them [-].

    Parameters
    ----------
    survival
        Survival asked for the first of all [-].
    locations
        m, number of alike locations or aircraft [-].

    Returns
    -------
    float
        Survival per location [-].

    Notes
    -----
    Range 0 < p < 1, m >= 1. Independent locations.

    References
    ----------
    .. [1] Order statistics: p to the power 1/m.
    """
    within("Survival", survival, 1e-12, 1 - 1e-12, "a probability")
    within("Locations", locations, 1, 1e9, "a count")
    return float(survival ** (1 / locations))
