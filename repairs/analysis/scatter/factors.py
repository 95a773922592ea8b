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
from enum import StrEnum
from statistics import NormalDist

from repairs.analysis.errors import UNKNOWN_FORM, InputError, within
from repairs.analysis.types import Grade, Sourced


class Form(StrEnum):
    """How a factor is made from scatter: confidence on the mean, or one future item."""

    CONFIDENCE = "confidence"
    PREDICTIVE = "predictive"


class Multiplied(StrEnum):
    """What life a factor divides; one made for one life is wrong on another."""

    TEST_MEAN = "geometric mean of the lives tested"
    ANALYSIS_MEDIAN = "median life by analysis with S-N data"
    GROWTH = "crack growth life by analysis"
    CHARACTERISTIC = "Weibull characteristic life"


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


@dataclass(frozen=True, slots=True)
class Scatter:
    """Scatter of life with its source, and what is asked of the factor.

    Parameters
    ----------
    log_deviation
        s, standard deviation of log10 life [-].
    tests
        n, tests behind the mean [-].
    survival, confidence
        p and C [-]; the predictive form has no confidence.
    locations
        Alike locations or aircraft, the first of which is to survive [-].
    """

    log_deviation: Sourced
    tests: int
    survival: float
    confidence: float
    locations: int = 1


def policy_of_scatter(
    scatter: Scatter, form: Form, multiplies: Multiplied, *, severity_inside: bool
) -> FatiguePolicy:
    """Return a factor from scatter, with all that it means.

    Parameters
    ----------
    scatter
        Deviation with source, tests, survival, confidence, locations [-].
    form
        Confidence on the mean, or prediction of one future item.
    multiplies
        The life it divides.
    severity_inside
        Whether the severity of the spectrum is already inside the deviation.

    Returns
    -------
    FatiguePolicy
        Factor, graded as the deviation is.

    Notes
    -----
    Range of the form. Not to be stacked on a fixed factor.

    References
    ----------
    .. [1] See the module.
    """
    deviation = scatter.log_deviation.value
    z = quantile(first_of_fleet(scatter.survival, scatter.locations))
    if form is Form.CONFIDENCE:
        factor = factor_confidence(deviation, z, scatter.confidence, scatter.tests)
    else:
        factor = factor_predictive(deviation, z, scatter.tests)
    source = (
        f"{form} form, s = {deviation:g} ({scatter.log_deviation.source}), "
        f"n = {scatter.tests}, p = {scatter.survival:g}"
    )
    if form is Form.CONFIDENCE:
        source += f", C = {scatter.confidence:g}"
    if scatter.locations > 1:
        source += f", first of {scatter.locations}"
    return FatiguePolicy(
        Sourced(factor, "-", source, scatter.log_deviation.grade),
        multiplies,
        deviation,
        scatter.tests,
        scatter.survival,
        scatter.confidence if form is Form.CONFIDENCE else None,
        severity_inside,
    )


def life_factor_of_error(error: float, survival: float) -> float:
    r"""Return how far a survival lies below the median, :math:`10^{s z_p}`.

    Parameters
    ----------
    error
        Standard error of log10 life about a curve, or a known deviation, s [-].
    survival
        p [-].

    Returns
    -------
    float
        Median life over the life that a share p survives [-].

    Notes
    -----
    Range s > 0. A handbook curve's error holds lots and laboratories: the factor is
    shown beside a scatter factor and is never multiplied with it.

    References
    ----------
    .. [1] Normal distribution of log life.
    """
    within("Standard deviation of log life", error, 1e-6, 2, "log10 cycles")
    return float(10 ** (error * quantile(survival)))


def _fixed(
    value: float,
    source: str,
    what: Multiplied,
    tests: int | None = None,
    severity: bool | None = None,
    grade: Grade = Grade.QUOTED,
) -> FatiguePolicy:
    return FatiguePolicy(
        Sourced(value, "-", source, grade),
        what,
        tests=tests,
        severity_inside=severity,
    )


_SMALL = (
    "FAA AC 23-13A, {place}, as quoted in a public engineering code; its flight "
    "spectra carry 1.5 deviations of severity themselves, so average usage is not "
    "covered"
)
_HARMONISED = "before harmonisation, {who}; JAR NPA 25C-271 comment document"
_MILITARY = "DEF STAN 00-970, {how} usage, one test; from memory, unverified"
PUBLISHED_FACTORS: dict[str, FatiguePolicy] = {
    "AC 23-13A, analysis": _fixed(
        8.0,
        _SMALL.format(place="paragraph 2-26"),
        Multiplied.ANALYSIS_MEDIAN,
        severity=False,
    ),
    **{
        f"AC 23-13A, full-scale tests: {tests}": _fixed(
            value, _SMALL.format(place="Table 2"), Multiplied.TEST_MEAN, tests, False
        )
        for tests, value in ((1, 4.96), (2, 4.0), (3, 3.7), (4, 3.54))
    },
    "AC 25.571-1D, base factor on tests": _fixed(
        3.0,
        "FAA AC 25.571-1D, before its adjustments, as quoted in a public code",
        Multiplied.TEST_MEAN,
    ),
    "FAA practice on test life before harmonisation": _fixed(
        3.0, _HARMONISED.format(who="FAA"), Multiplied.TEST_MEAN
    ),
    "JAA practice on test life before harmonisation": _fixed(
        5.0, _HARMONISED.format(who="JAA"), Multiplied.TEST_MEAN
    ),
    "DEF STAN 00-970, monitored": _fixed(
        10 / 3, _MILITARY.format(how="monitored"), Multiplied.TEST_MEAN, 1,
        grade=Grade.MEMORY,
    ),
    "DEF STAN 00-970, not monitored": _fixed(
        5.0, _MILITARY.format(how="unmonitored"), Multiplied.TEST_MEAN, 1,
        grade=Grade.MEMORY,
    ),
}  # fmt: skip
"""Fixed factors of published guidance, to be chosen by name; none is a default.

`severity_inside` is False where the guidance puts severity into its spectra: with a
spectrum of average usage such a factor is too small. None = the quotation is silent.
"""


def published_factor(name: str) -> FatiguePolicy:
    """Return a published fixed factor, else refuse with the names there are."""
    if name not in PUBLISHED_FACTORS:
        known = ", ".join(PUBLISHED_FACTORS)
        raise InputError(UNKNOWN_FORM.format(name=name, known=known))
    return PUBLISHED_FACTORS[name]
