r"""Least limit manoeuvring load factors of the rules, by category.

A type's own factors are a record; these are what a rule asks at least.
"""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum

from repairs.analysis.errors import within
from repairs.analysis.types import Grade, Reference

POUND = 4.4482216152605
"""N in one pound force, exact."""
TRANSPORT_FACTORS = Reference(
    "14 CFR 25.337(b) and (c), text of April 2026", Grade.PRINT
)
SMALL_FACTORS = Reference(
    "14 CFR 23.337 before part 23 was rewritten (amendment 23-64), as quoted in a "
    "public aircraft-design code; limits 3.8/-1.52, 4.4/-1.76, 6/-3 quoted in a public "
    "question bank",
    Grade.QUOTED,
)


class Category(StrEnum):
    """Certification category; commuter counts as normal."""

    TRANSPORT = "transport"
    NORMAL = "normal"
    UTILITY = "utility"
    ACROBATIC = "acrobatic"


@dataclass(frozen=True, slots=True)
class Factors:
    """Limit factors: positive, and negative at speeds to V_C, with their rule."""

    positive: float
    negative: float
    reference: Reference


_SMALL = {
    Category.NORMAL: (None, 0.4),
    Category.UTILITY: (4.4, 0.4),
    Category.ACROBATIC: (6.0, 0.5),
}


def weight_formula(weight: float) -> float:
    r"""Return :math:`2.1 + 24\,000/(W + 10\,000)`, W in pounds.

    Parameters
    ----------
    weight
        Design maximum take-off weight [N].

    Returns
    -------
    float
        Load factor before its bounds [-].

    Notes
    -----
    Range W > 0.

    References
    ----------
    .. [1] See `TRANSPORT_FACTORS`.
    """
    within("Take-off weight, N", weight, 1, 1e8, "a weight")
    return 2.1 + 24_000 / (weight / POUND + 10_000)


def manoeuvre_limits(weight: float, category: Category) -> Factors:
    """Return the least limit manoeuvring factors of a category.

    Parameters
    ----------
    weight
        Design maximum take-off weight [N].
    category
        Transport: the formula between 2.5 and 3.8, and -1.0. Normal and commuter: the
        formula, at most 3.8; utility 4.4; acrobatic 6.0; negative 0.4 of it, 0.5 for
        acrobatic.

    Returns
    -------
    Factors
        Positive and negative [-].

    Notes
    -----
    Range: small categories to 19,000 lb. Positive to V_D; negative see `negative_at`.

    References
    ----------
    .. [1] See `TRANSPORT_FACTORS`, `SMALL_FACTORS`.
    """
    formula = weight_formula(weight)
    if category is Category.TRANSPORT:
        return Factors(min(max(formula, 2.5), 3.8), -1.0, TRANSPORT_FACTORS)
    within("Take-off weight, lb", weight / POUND, 1, 19_000, "small aeroplanes")
    fixed, share = _SMALL[category]
    positive = min(formula, 3.8) if fixed is None else fixed
    return Factors(positive, -share * positive, SMALL_FACTORS)


def negative_at(speed: float, cruise: float, dive: float) -> float:
    """Return the negative limit factor of a transport aeroplane at a speed [-].

    Parameters
    ----------
    speed
        Equivalent airspeed [any unit, as the other two].
    cruise, dive
        V_C and V_D.

    Returns
    -------
    float
        -1.0 to V_C, then linear to 0 at V_D [-].

    Notes
    -----
    Range 0 <= V <= V_D, V_C < V_D. Where lift ends first, it limits the factor.

    References
    ----------
    .. [1] 14 CFR 25.337(c); see `TRANSPORT_FACTORS`.
    """
    within("V_C over V_D", cruise / dive, 0.1, 1 - 1e-9, "design speeds")
    within("Speed over V_D", speed / dive, 0, 1, "the envelope")
    return -min(1.0, (dive - speed) / (dive - cruise))
