"""A row of cracked holes, and a lead crack in it: factor, ligament and strength."""

from __future__ import annotations

import math
from dataclasses import dataclass

from repairs.analysis.growth.path import CrackPath
from repairs.analysis.inputs import Inputs
from repairs.analysis.intensity import through as si
from repairs.analysis.intensity.bulging import BULGING_HANDBOOK
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.methods.hole_geometry import LARGEST_REACH, Hole
from repairs.analysis.methods.sheet import Sheet
from repairs.analysis.note import Note
from repairs.analysis.strength import link_up as lu
from repairs.analysis.strength import residual as rs
from repairs.analysis.types import ROOT_1000, EdgeLength, GrossStress, HalfLength

CORRECTED = "link-up, with the test-based correction"
NO_CORRECTION = (
    "No test-based correction of link-up is read for this alloy: Swift's stress "
    "stands, which tests of 2024-T3 undercut by up to a quarter."
)
MEETING = "cracks that meet"
JUST_INSIDE = 1 - 1e-6
"""A ligament ends just before the tips meet."""


def correction_for(inputs: Inputs, note: Note) -> lu.Correction | None:
    """Return the link-up correction of the skin's alloy, A-basis, None if unread."""
    family = inputs.family()
    name = family.material if family is not None else ""
    for correction in lu.CORRECTIONS.values():
        alloy, basis = correction.name.split(", ")
        if basis == "A-basis" and alloy in name:
            note.step(
                "", f"link-up corrected: {correction.name}, only where it lowers", "",
                None, "", lu.CORRECTIONS_SOURCE,
            )  # fmt: skip
            return correction
    note.warn(NO_CORRECTION)
    return None


def links(
    ligament: lu.Ligament, yield_strength: float, correction: lu.Correction | None
) -> dict[str, GrossStress | None]:
    """Return Swift's stress, and the corrected one where that is lower [MPa]."""
    swift = lu.swift_link_up(ligament, yield_strength)
    lower = correction is not None and correction.divisor(ligament.length) > 1
    if correction is None or not lower:
        return {lu.LINK_UP: swift}
    lowered = lu.corrected_link_up(ligament, yield_strength, correction.name)
    return {lu.LINK_UP: swift, CORRECTED: lowered}


@dataclass(frozen=True)
class Row:
    """Equal cracks on both sides of every hole; one pitch is the hole's strip.

    `measured` is the ligament at a crack length of `measured_at` [mm]; without it the
    ligament is what pitch, holes and cracks leave.
    """

    hole: Hole
    correction: lu.Correction | None = None
    measured_at: float = 0.0
    measured: float | None = None

    def ligament(self, c: float) -> float:
        """Return the ligament from tip to tip [mm]; both tips close it."""
        if self.measured is not None:
            return self.measured - 2 * (c - self.measured_at)
        return self.hole.at.width - self.hole.at.diameter - 2 * c

    def pair(self, c: float) -> lu.Ligament:
        """Return two equal neighbours and the ligament between them."""
        factor, a = self.hole.factor(c), self.hole.at.diameter / 2 + c
        return lu.Ligament(
            lu.LeadCrack(HalfLength(a), factor * math.sqrt(c / a)),
            lu.NextCrack(EdgeLength(c), factor),
            self.ligament(c),
        )

    def strength(self, c: float) -> rs.Strength:
        """Return what gives way first, on gross stress."""
        alone = dict(self.hole.strength(c).each)
        joined = links(self.pair(c), self.hole.yield_strength, self.correction)
        return rs.weakest({**alone, **joined})

    def path(self, loads: PanelLoads, inputs: Inputs) -> CrackPath:
        """Return the path of all cracks growing alike, until they meet."""
        base = self.hole.path(loads, inputs)
        meet = JUST_INSIDE * self._meeting()
        largest, end = min((base.largest, base.end_of_method), (meet, MEETING))
        return CrackPath(
            "c", 1.0, base.factor, self.strength, loads, base.law, largest, end
        )

    def _meeting(self) -> float:
        """Return the crack length at which no ligament is left [mm]."""
        if self.measured is not None:
            return self.measured_at + self.measured / 2
        return (self.hole.at.width - self.hole.at.diameter) / 2


@dataclass(frozen=True)
class LeadRow:
    """A lead crack of half-length a0 through holes of the row, cracks c ahead of it.

    Both tips close the measured ligament alike: the smaller crack grows no faster.
    """

    row: Row
    panel_width: float
    half_length: float
    ahead: float
    ligament: float

    @property
    def sheet(self) -> Sheet:
        """The skin with the lead crack in it."""
        hole = self.row.hole
        return Sheet(
            hole.radius,
            hole.thickness,
            self.panel_width,
            hole.yield_strength,
            hole.toughness,
            hole.law,
        )

    def next_length(self, a: float) -> float:
        """Return the crack at the next hole when the lead crack is a [mm]."""
        at = self.row.hole.at
        grown = max(self.ahead + a - self.half_length, self.ahead / 2)
        return min(grown, LARGEST_REACH * at.width - at.diameter / 2)

    def pair(self, a: float) -> lu.Ligament:
        """Return lead crack, next crack and the ligament between them."""
        other = self.next_length(a)
        return lu.Ligament(
            lu.LeadCrack(HalfLength(a), self.sheet.factor(a)),
            lu.NextCrack(EdgeLength(other), self.row.hole.factor(other)),
            self.ligament - 2 * (a - self.half_length),
        )

    def strength(self, a: float) -> rs.Strength:
        """Return what gives way first, on gross stress."""
        hole, sheet = self.row.hole, self.sheet
        at, other = hole.at, self.next_length(a)
        whole = rs.net_section_yield(hole.yield_strength, 2 * a, self.panel_width)
        left = 1 - (at.diameter + 2 * other) / at.width
        return rs.weakest(
            {
                rs.FRACTURE: rs.fracture_strength(hole.toughness, sheet.factor(a), a),
                rs.NET_SECTION: GrossStress(whole * left),
                **links(self.pair(a), hole.yield_strength, self.row.correction),
            }
        )

    def path(self, loads: PanelLoads, inputs: Inputs) -> CrackPath:
        """Return the path of the lead crack until it meets the next one."""
        base = self.sheet.path(loads, inputs, 0.0)
        meet = self.half_length + JUST_INSIDE * self.ligament / 2
        largest, end = min((base.largest, base.end_of_method), (meet, MEETING))
        return CrackPath(
            "2a", 2.0, base.factor, self.strength, loads, base.law, largest, end
        )


def write_link_up(row: Row, note: Note, c: float) -> None:
    """Write the ligament and the criterion of link-up down."""
    pair = row.pair(c)
    note.step("L", "ligament from tip to tip", f"c = {c:.2f} mm", pair.length, "mm")
    note.step(
        "S_link",
        "F_ty √(2L / (a β_a² + l β_l²))",
        f"L = {pair.length:.2f} mm",
        lu.swift_link_up(pair, row.hole.yield_strength),
        "MPa",
        lu.SWIFT,
    )


def write_lead(lead: LeadRow, path: CrackPath, note: Note, a: float) -> rs.Strength:
    """Write K and every strength of the lead crack; return the one that governs."""
    pair, top = lead.pair(a), path.loads.cycle.maximum
    factor = pair.lead.factor
    note.step(
        "F_a",
        "lead crack: bulging and width",
        f"a = {a:.2f} mm",
        factor,
        "-",
        si.SECANT,
    )
    if lead.row.hole.radius is not None:
        note.step("", "bulging in F_a", "", None, "", BULGING_HANDBOOK)
    note.step(
        "F_l", "next crack at its hole", f"l = {pair.other.c_edge:.2f} mm",
        pair.other.factor, "-",
    )  # fmt: skip
    note.step(
        "K_max",
        "σ F_a √(π a)",
        f"{top:.2f} · {factor:.4f} · √(π · {a:.2f})",
        si.intensity(factor, top, a) / ROOT_1000,
        "MPa√m",
    )
    strength = path.strength(a)
    for what, stress in strength.each:
        source = lu.SWIFT if what == lu.LINK_UP else None
        note.step("S", f"{what}, gross", "", stress, "MPa", source)
    note.step(
        "S",
        f"residual strength, gross: {strength.governing}",
        "",
        strength.stress,
        "MPa",
    )
    return strength
