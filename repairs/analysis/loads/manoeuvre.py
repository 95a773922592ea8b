r"""Least limit manoeuvring load factors of the rules, by category.

A type's own factors are a record; these are what a rule asks at least. The transport
formula and its run-out to the dive speed stand in `spectra.gust_loads`.
"""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum

from repairs.analysis.errors import within
from repairs.analysis.spectra.gust_loads import MANOEUVRE, manoeuvre_limit
from repairs.analysis.types import Grade, Reference

SMALL_FACTORS = Reference(
    "14 CFR 23.337 before part 23 was rewritten (amendment 23-64), formula quoted in a "
    "public aircraft-design code, factors in a public question bank",
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


_SMALL: dict[Category, tuple[float | None, float]] = {
    Category.NORMAL: (None, 0.4),
    Category.UTILITY: (4.4, 0.4),
    Category.ACROBATIC: (6.0, 0.5),
}
"""Positive factor, None = by weight; negative as a share of it."""


def manoeuvre_limits(takeoff_weight_lb: float, category: Category) -> Factors:
    r"""Return the least limit manoeuvring factors of a category.

    .. math:: 2.1 + \frac{24\,000}{W + 10\,000}

    Parameters
    ----------
    takeoff_weight_lb
        W, design maximum take-off weight [lb].
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
    Range: small categories to 19,000 lb, where the formula stays above 2.5. Positive
    to V_D; the transport's negative factor runs out from V_C to V_D.

    References
    ----------
    .. [1] See `gust_loads.MANOEUVRE`, `SMALL_FACTORS`.
    """
    by_weight = manoeuvre_limit(takeoff_weight_lb)
    if category is Category.TRANSPORT:
        return Factors(by_weight, -1.0, MANOEUVRE)
    within("Take-off weight, lb", takeoff_weight_lb, 1, 19_000, "small aeroplanes")
    fixed, share = _SMALL[category]
    positive = by_weight if fixed is None else fixed
    return Factors(positive, -share * positive, SMALL_FACTORS)
