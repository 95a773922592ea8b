"""The effect of stiffeners over crack length, solved once for a panel and kept.

One model, large enough for the longest crack, serves every length: the crack's own
compliance is summed as the crack lengthens, so that only a small system is solved at
each length. Between the lengths solved a monotone cubic is read.
"""

from __future__ import annotations

import bisect
from dataclasses import dataclass
from functools import lru_cache

import numpy as np
from scipy.interpolate import PchipInterpolator

from repairs.analysis.errors import within
from repairs.analysis.intensity.stiffened_sheet import (
    CrackCentre,
    GrowingCrack,
    StiffenedCrack,
    StiffenedSheet,
)
from repairs.analysis.types import HalfLength

SHORTEST, LONGEST = 0.02, 1.3
"""Half-lengths over stiffener pitch that a table spans."""


@dataclass(frozen=True, slots=True, eq=False)
class StiffenedTable:
    """F and both load ratios of a panel at its table's half-lengths [mm]."""

    lengths: tuple[float, ...]
    cubics: tuple[tuple[tuple[float, float, float, float], ...], ...]

    def at(self, half_length: HalfLength) -> StiffenedCrack:
        """Return the effect at a half-length inside the table [mm]."""
        return StiffenedCrack(*(self._read(half_length, rows) for rows in self.cubics))

    def factor_at(self, half_length: float) -> float:
        """Return F alone at a half-length inside the table [mm]."""
        return self._read(half_length, self.cubics[0])

    def _read(
        self, half_length: float, rows: tuple[tuple[float, float, float, float], ...]
    ) -> float:
        low, high = self.lengths[0], self.lengths[-1]
        within("Half-length, mm", half_length, low, high, "the stiffened panel's table")
        where = min(bisect.bisect_right(self.lengths, half_length), len(rows)) - 1
        step = half_length - self.lengths[where]
        a, b, c, d = rows[where]
        return ((a * step + b) * step + c) * step + d


def shares_of(centre: CrackCentre) -> list[float]:
    """Return the half-lengths over pitch solved: close together at a stiffener."""
    near = 0.5 if centre is CrackCentre.MID_BAY else 1.0
    coarse = np.geomspace(SHORTEST, 0.2, 6).tolist()
    fine = [near + d for d in (-0.08, -0.05, -0.03, -0.015, 0, 0.015, 0.03, 0.05, 0.08)]
    regular = [s for s in np.linspace(0.25, LONGEST, 15) if abs(s - near) > 0.1]
    return sorted([*coarse, *regular, *fine])


@lru_cache(maxsize=64)
def stiffened_table(sheet: StiffenedSheet, centre: CrackCentre) -> StiffenedTable:
    """Return the effect of a panel's stiffeners over crack length.

    Parameters
    ----------
    sheet
        Sheet, stiffeners and fasteners [mm, MPa].
    centre
        Mid-bay, or at a stiffener, intact or broken.

    Returns
    -------
    StiffenedTable
        F, stiffener and fastener loads on half-length [-].

    Notes
    -----
    Range 0.02 <= a/b <= 1.3. F and stiffener load are within 1.2 % of
    `stiffened_crack`; the fastener load of a broken stiffener is up to a third lower,
    because the larger model has no end close by that takes load.

    References
    ----------
    .. [1] See `COMPATIBILITY`.
    """
    lengths = [share * sheet.pitch for share in shares_of(centre)]
    crack = GrowingCrack(sheet, HalfLength(lengths[-1]), centre)
    found = [crack.grown_to(HalfLength(length)) for length in lengths]
    values = [
        [effect.factor for effect in found],
        [effect.stiffener for effect in found],
        [effect.fastener_area for effect in found],
    ]
    cubics = tuple(
        tuple(tuple(row) for row in PchipInterpolator(lengths, line).c.T.tolist())
        for line in values
    )
    return StiffenedTable(tuple(lengths), cubics)  # type: ignore[arg-type]
