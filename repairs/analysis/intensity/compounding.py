r"""Compounding: one crack near several boundaries from solutions of each alone.

References
----------
.. [1] Cartwright and Rooke, compounded stress-intensity factors; both rules in public
   university notes.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from repairs.analysis.errors import InputError, within
from repairs.analysis.types import Grade, Reference

COMPOUNDING = Reference(
    "Cartwright and Rooke, compounding of boundaries, in public university notes",
    Grade.QUOTED,
)
COUNTED_TWICE = (
    "Boundary {name!r} is given twice. A factor that already holds a boundary, as a "
    "width, must not meet it again."
)
STRONG = 2.0
"""Strongest single boundary compounding is used for: ligament about a crack length."""


@dataclass(frozen=True, slots=True)
class Boundary:
    """What one boundary alone does to K: named, so that none is counted twice."""

    name: str
    ratio: float


@dataclass(frozen=True, slots=True)
class Compounded:
    """K over K without boundaries, by both rules [-]."""

    product: float
    total: float

    @property
    def higher(self) -> float:
        """The higher of both rules [-]."""
        return max(self.product, self.total)


def compound(*boundaries: Boundary) -> Compounded:
    r"""Return how boundaries raise or lower K together [1]_.

    .. math::
        \frac{K}{K_0} = \prod_n \frac{K_n}{K_0}\quad\text{and}\quad
        \frac{K}{K_0} = 1 + \sum_n\Bigl(\frac{K_n}{K_0} - 1\Bigr)

    Parameters
    ----------
    boundaries
        Each boundary's K over K without it [-].

    Returns
    -------
    Compounded
        Both rules [-]; they part where boundaries act on each other, which neither
        knows.

    Notes
    -----
    Range 0.1 <= ratio <= 2 each. A stronger boundary needs a solution of its own.

    References
    ----------
    .. [1] See `COMPOUNDING`.
    """
    names = [boundary.name for boundary in boundaries]
    for name in names:
        if names.count(name) > 1:
            raise InputError(COUNTED_TWICE.format(name=name))
    ratios = [
        within(
            f"Effect of {boundary.name} on K",
            boundary.ratio,
            0.1,
            STRONG,
            "compounding of weak boundaries",
            "Use a solution that holds this boundary.",
        )
        for boundary in boundaries
    ]
    return Compounded(math.prod(ratios), 1 + sum(ratio - 1 for ratio in ratios))
