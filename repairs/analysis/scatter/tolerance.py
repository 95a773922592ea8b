r"""One-sided tolerance factors of the normal distribution, by the non-central t.

With confidence C at least a share p of all items lies above :math:`\bar x - k s`,

.. math:: k = t'_C(n - 1;\, z_p\sqrt n)\,/\,\sqrt n

Used on log life, and on strengths where the record's statistics are normal.

References
----------
.. [1] CMH-17-1G (MIL-HDBK-17), tables of k_A and k_B; ISO 16269-6.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from statistics import mean, stdev

from scipy.special import nctdtrit

from repairs.analysis.errors import within
from repairs.analysis.scatter.factors import quantile
from repairs.analysis.types import Grade, Reference

TOLERANCE = Reference(
    "One-sided normal tolerance factor by the non-central t, exact; reproduces the "
    "tables of CMH-17-1G",
    Grade.DERIVED,
)
A_BASIS = (0.99, 0.95)
"""Share above and confidence of an A-basis value (25.613: a single member)."""
B_BASIS = (0.90, 0.95)
"""Share above and confidence of a B-basis value (25.613: redundant structure)."""


def tolerance_factor(tests: int, survival: float, confidence: float) -> float:
    """Return k of n tests.

    Parameters
    ----------
    tests
        n, number of independent results [-].
    survival
        p, share that lies above [-].
    confidence
        C, one-sided [-].

    Returns
    -------
    float
        k, times the sample's standard deviation [-].

    Notes
    -----
    Range n >= 2, 0.5 <= p <= 0.999999, 0.5 <= C <= 0.999.

    References
    ----------
    .. [1] See `TOLERANCE`.
    """
    within("Number of tests", tests, 2, 1e5, "a sample with a deviation")
    within("Survival", survival, 0.5, 0.999999, "a lower bound")
    within("Confidence", confidence, 0.5, 0.999, "a lower bound")
    root = math.sqrt(tests)
    return float(nctdtrit(tests - 1, quantile(survival) * root, confidence) / root)


def lower_bound(values: Sequence[float], survival: float, confidence: float) -> float:
    """Return mean minus k deviations of a normal sample, in the values' unit.

    Parameters
    ----------
    values
        Independent results of one population.
    survival, confidence
        As `tolerance_factor` [-].

    Returns
    -------
    float
        Lower tolerance bound.

    Notes
    -----
    Range of `tolerance_factor`. For lives pass their logarithms.

    References
    ----------
    .. [1] See `TOLERANCE`.
    """
    factor = tolerance_factor(len(values), survival, confidence)
    return mean(values) - factor * stdev(values)


def factor_from_tests(
    lives: Sequence[float], survival: float, confidence: float
) -> float:
    """Return the scatter factor of tested lives, deviation estimated from them too.

    Parameters
    ----------
    lives
        Lives of at least two tests, all failed [cycles].
    survival, confidence
        As `tolerance_factor` [-].

    Returns
    -------
    float
        Divisor of the geometric mean of the lives [-].

    Notes
    -----
    Range of `tolerance_factor`. Large for few tests: with two, confidence costs more
    than scatter. A known deviation of the material gives less (`scatter`).

    References
    ----------
    .. [1] See `TOLERANCE`.
    """
    logs = [math.log10(life) for life in lives]
    return float(10 ** (mean(logs) - lower_bound(logs, survival, confidence)))
