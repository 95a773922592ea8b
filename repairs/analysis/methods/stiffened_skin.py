"""A skin with stiffeners and a crack: factor, strength, path, arrest."""

from __future__ import annotations

import math
from bisect import bisect_right
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from repairs.analysis.errors import AnalysisError, within
from repairs.analysis.growth.path import CrackPath
from repairs.analysis.inputs import Inputs
from repairs.analysis.intensity import through as si
from repairs.analysis.intensity.stiffened_sheet import (
    CrackCentre,
    StiffenedCrack,
    StiffenedSheet,
)
from repairs.analysis.intensity.stiffened_table import (
    LONGEST,
    StiffenedTable,
)
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.methods.sheet import (
    LONGEST_SHELL_PARAMETER,
    WIDEST_SECANT,
    Sheet,
)
from repairs.analysis.note import Note
from repairs.analysis.strength import residual as rs
from repairs.analysis.strength import stiffened as sp
from repairs.analysis.strength.stiffened import Arrest, StiffenedPanel
from repairs.analysis.types import GrossStress, HalfLength

NO_LOAD = 1e-3
"""Share of a bay's load below which a fastener counts as not loaded."""
TRIALS = 50
"""Lengths, beside the table's, at which the least strength on the way is looked for;
a dip between them is missed by less than 0.5 %."""


@dataclass(frozen=True)
class StiffenedSkin:
    """A skin with its stiffeners, their table, and a crack of half-length a [mm]."""

    sheet: Sheet
    panel: StiffenedPanel
    stiffened: StiffenedSheet
    centre: CrackCentre
    table: StiffenedTable
    stated_bulging: float | None

    def bulging(self, a: float) -> float:
        """Return the bulging factor: stated, or that of a plain shell [-]."""
        if self.stated_bulging is not None:
            return self.stated_bulging
        return self.sheet.bulging(a)

    def too_short(self, a: float) -> bool:
        """Return whether a crack is too short for the table and counted as plain.

        Whole stiffeners only lower K, so that F = 1 bounds it; a broken one does not.
        """
        broken = self.centre is CrackCentre.BROKEN_STIFFENER
        return not broken and a < self.table.lengths[0]

    def alone(self, a: float) -> StiffenedCrack:
        """Return the effect of the stiffeners alone."""
        if self.too_short(a):
            return StiffenedCrack(1.0, 1.0, 0.0)
        return self.table.at(HalfLength(a))

    def effect(self, a: HalfLength) -> StiffenedCrack:
        """Return the effect of the stiffeners with bulging and width on K."""
        return self._raised(self.alone(a), self.bulging(a), a)

    def _raised(
        self, alone: StiffenedCrack, bulging: float, a: HalfLength
    ) -> StiffenedCrack:
        unit = self.stiffened.pitch * self.sheet.thickness
        force = alone.fastener_area if alone.fastener_area > NO_LOAD * unit else 0.0
        width = si.centre_crack_secant(a, self.sheet.width)
        return StiffenedCrack(alone.factor * bulging * width, alone.stiffener, force)

    def factor(self, a: float) -> float:
        """Return F [-]."""
        alone = 1.0 if self.too_short(a) else self.table.factor_at(a)
        width = si.centre_crack_secant(HalfLength(a), self.sheet.width)
        return alone * self.bulging(a) * width

    def strength(self, a: float) -> rs.Strength:
        """Return the strength at a half-length, and which element governs."""
        half, skin = HalfLength(a), self.sheet
        alone, bulging = self.alone(a), self.bulging(a)
        effect = self._raised(alone, bulging, half)
        panel = dict(sp.panel_strength(self.panel, effect, half).each)
        panel[rs.NET_SECTION] = rs.net_section_yield(
            skin.yield_strength, 2 * a, skin.width
        )
        raised = max(1.0, alone.factor * bulging)
        panel[rs.SHORT_CRACK] = rs.short_crack_line(
            skin.toughness / raised, skin.yield_strength, half, skin.width
        )
        return rs.weakest(panel)

    def least_from(self, start: float, end: float) -> Callable[[float], rs.Strength]:
        """Return the least strength met on the way from a start: no arrest counts."""
        knots = [a for a in self.table.lengths if start < a < end]
        lengths = sorted([*np.linspace(start, end, TRIALS).tolist(), *knots])
        least: list[rs.Strength] = []
        for a in lengths:
            here = self.strength(a)
            low = min(least[-1], here, key=_stress) if least else here
            least.append(low)

        def strength(a: float) -> rs.Strength:
            here = self.strength(a)
            before = bisect_right(lengths, a) - 1
            if before < 0 or here.stress <= least[before].stress:
                return here
            return least[before]

        return strength

    def ends(self) -> list[tuple[float, str]]:
        """Return where each part of the solution ends [mm]."""
        found = [
            (
                LONGEST * (1 - 1e-9) * self.stiffened.pitch,
                "the stiffened panel's table",
            ),
            (WIDEST_SECANT * self.sheet.width, "the range of the width correction"),
        ]
        if self.stated_bulging is None and self.sheet.radius is not None:
            root = math.sqrt(self.sheet.radius * self.sheet.thickness)
            found.append(
                (LONGEST_SHELL_PARAMETER * root, "the range of the bulging factor")
            )
        return found

    def path(
        self, loads: PanelLoads, start: float, reach: float, what: str
    ) -> CrackPath:
        """Return the path of a crack from a start, as far as all of it is valid."""
        largest, end = min([*self.ends(), (reach, what)])
        return CrackPath(
            "2a",
            2.0,
            self.factor,
            self.least_from(start, max(start, largest)),
            loads,
            self.sheet.law,
            largest,
            end,
            smallest=self.table.lengths[0],
            kinks=self.table.lengths,
        )

    def arrest(self, start: float) -> Arrest | None:
        """Return what stops a skin fracture at the next stiffener, None if nothing."""
        near, far = (0.25, 0.75) if self.centre is CrackCentre.MID_BAY else (0.5, 1.2)
        pitch = self.stiffened.pitch
        low, high = max(start, near * pitch), far * pitch
        if low >= (near + far) / 2 * pitch or high > min(self.ends())[0]:
            return None
        try:
            return sp.arrest(self.panel, self.effect, HalfLength(low), HalfLength(high))
        except AnalysisError:
            return None


def _stress(strength: rs.Strength) -> GrossStress:
    return strength.stress


def stated_bulging(inputs: Inputs, note: Note) -> float | None:
    """Write a stated bulging factor down and return it; below 1 it is refused."""
    stated = inputs.maybe("stiffened_bulging")
    if stated is None:
        return None
    given = note.given("F_b", "bulging between stiffeners", stated)
    return within("Bulging factor stated", given, 1, 10, "a factor that raises K")
