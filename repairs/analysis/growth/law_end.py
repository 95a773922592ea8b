"""How far a growth law reaches along a crack's path: Forman's ends at its own Kc."""

from __future__ import annotations

import math

import numpy as np
from scipy.optimize import brentq

from repairs.analysis.growth.laws import FormanLaw, GrowthLaw
from repairs.analysis.growth.separable import Factor

STEPS = 64
SHORT_OF = 1 - 1e-6
"""Share of Kc at which growth is ended: at Kc itself the rate has no end."""
LAW_ENDS = "the growth law, its Kc reached by a flight's largest stress"


def law_end(
    law: GrowthLaw, factor: Factor, largest_stress: float, low: float, high: float
) -> float | None:
    """Return the length where a flight's largest K reaches the Kc of Forman's fit.

    Parameters
    ----------
    law
        Growth law; any but Forman's has no end.
    factor
        F(a) [-].
    largest_stress
        Of a flight [MPa].
    low, high
        Lengths to search between [mm].

    Returns
    -------
    float or None
        First such length [mm]; None if there is none in the range.

    Notes
    -----
    Range of `factor`. A crossing and its return between two of the lengths looked at,
    equally spaced in the root of the length, is not seen.
    """
    if not isinstance(law, FormanLaw) or not 0 < low < high:
        return None
    allowed = law.toughness * SHORT_OF

    def over(length: float) -> float:
        return largest_stress * factor(length) * math.sqrt(math.pi * length) - allowed

    lengths = np.linspace(math.sqrt(low), math.sqrt(high), STEPS) ** 2
    lengths[-1] = high
    before = low
    for length in map(float, lengths):
        if over(length) >= 0:
            return before if length == before else float(brentq(over, before, length))
        before = length
    return None
