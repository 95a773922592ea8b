"""A plain skin with a centre crack, and the through crack an assumed flaw becomes."""

from __future__ import annotations

from dataclasses import dataclass

from repairs.analysis.growth.laws import WalkerLaw
from repairs.analysis.growth.path import CrackPath, Start, write_law
from repairs.analysis.growth.two_directions import grow_part_through
from repairs.analysis.inputs import Inputs
from repairs.analysis.inspection.flaws import AssumedFlaw, FlawKind
from repairs.analysis.intensity import through as si
from repairs.analysis.intensity.bulging import (
    BULGING_HANDBOOK,
    bulging_handbook,
    shell_parameter,
)
from repairs.analysis.intensity.part_through import (
    ANGLES,
    SURFACE_ANGLES,
    SURFACE_CRACK,
    PartThrough,
    surface_crack,
)
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.note import Note
from repairs.analysis.strength import residual as rs
from repairs.analysis.types import ROOT_1000, GrossStress, HalfLength

LONGEST_SHELL_PARAMETER = 5.0 * (1 - 1e-9)
WIDEST_SECANT = 0.35 * (1 - 1e-9)
"""Ends of both ranges, just inside: rounding must not step over them."""
NO_RELIEF = "Plain sheet: no relief by frames, tear straps or stringers."


@dataclass(frozen=True)
class Sheet:
    """A skin with a centre crack of half-length a [mm]; no radius = flat."""

    radius: float | None
    thickness: float
    width: float
    yield_strength: float
    toughness: float
    law: WalkerLaw

    def bulging(self, a: float) -> float:
        """Return the bulging factor [-], 1 for a flat sheet."""
        if self.radius is None:
            return 1.0
        parameter = shell_parameter(HalfLength(a), self.radius, self.thickness)
        return bulging_handbook(parameter)

    def factor(self, a: float) -> float:
        """Return bulging times width factor [-]."""
        return self.bulging(a) * si.centre_crack_secant(HalfLength(a), self.width)

    def candidates(self, a: float) -> dict[str, GrossStress | None]:
        """Return every strength that may govern, on gross stress [MPa]."""
        return {
            rs.FRACTURE: rs.fracture_strength(self.toughness, self.factor(a), a),
            rs.NET_SECTION: rs.net_section_yield(
                self.yield_strength, 2 * a, self.width
            ),
            rs.SHORT_CRACK: rs.short_crack_line(
                self.toughness, self.yield_strength, HalfLength(a), self.width
            ),
        }

    def path(
        self,
        loads: PanelLoads,
        inputs: Inputs,
        keep: float | None,
        section: str = "gross",
    ) -> CrackPath:
        """Return the path of a crack here, as far as every part of it is valid."""
        ends = [(WIDEST_SECANT * self.width, "the range of the width correction")]
        if self.radius is not None:
            reach = LONGEST_SHELL_PARAMETER * (self.radius * self.thickness) ** 0.5
            ends.append((reach, "the range of the bulging factor"))
        around = inputs.surroundings()
        if around is not None and keep is not None:
            ends.append(around.largest_half_length(keep))
        largest, end = min(ends)
        return CrackPath(
            "2a",
            2.0,
            self.factor,
            lambda a: rs.weakest(self.candidates(a)),
            loads,
            self.law,
            largest,
            end,
            section,
        )


def sheet_of(inputs: Inputs, note: Note, thickness: float) -> Sheet:
    """Write the sheet's data down; `thickness` is what carries load."""
    width = note.given(
        "W", "panel length along the crack", inputs.number("panel_length")
    )
    strength = note.given(
        "F_ty", "tension yield strength", inputs.number("yield_strength")
    )
    toughness = note.toughness(inputs.number("toughness"))
    law = inputs.law()
    assert law is not None, "evaluate() has checked that growth_law is there"
    write_law(note, law)
    note.text(NO_RELIEF)
    radius = inputs.maybe("radius") if inputs.word("pressurised") == "yes" else None
    return Sheet(
        radius.value if radius else None, thickness, width, strength, toughness, law
    )


def write_strength(sheet: Sheet, path: CrackPath, note: Note, a: float) -> rs.Strength:
    """Write K and every strength at a size, and return the one that governs."""
    width = si.centre_crack_secant(HalfLength(a), sheet.width)
    bulging = sheet.bulging(a)
    if sheet.radius is not None:
        parameter = shell_parameter(HalfLength(a), sheet.radius, sheet.thickness)
        note.step(
            "l",
            "a / √(R t)",
            f"{a:.2f} / √({sheet.radius:.1f} · {sheet.thickness:.3f})",
            parameter,
            "-",
        )
        note.step(
            "F_b",
            "√(1 + 0.52 l + 1.29 l² − 0.074 l³)",
            f"l = {parameter:.4f}",
            bulging,
            "-",
            BULGING_HANDBOOK,
        )
    note.step(
        "F_w",
        "√sec(π a / W)",
        f"√sec(π · {a:.2f} / {sheet.width:.0f})",
        width,
        "-",
        si.SECANT,
    )
    top = path.loads.cycle.maximum
    note.step(
        "K_max",
        "σ F_b F_w √(π a)",
        f"{top:.2f} · {bulging:.4f} · {width:.4f} · √(π · {a:.2f})",
        si.intensity(bulging * width, top, a) / ROOT_1000,
        "MPa√m",
    )
    found = sheet.candidates(a)
    note.step(
        "S_fr",
        "K_c / (F_b F_w √(π a))",
        f"{sheet.toughness:.0f} / ({bulging * width:.4f} √(π · {a:.2f}))",
        found[rs.FRACTURE],
        "MPa",
    )
    note.step(
        "S_net",
        "F_ty (1 − 2a / W)",
        f"{sheet.yield_strength:.1f} (1 − {2 * a:.2f} / {sheet.width:.0f})",
        found[rs.NET_SECTION],
        "MPa",
    )
    if found[rs.SHORT_CRACK] is not None:
        note.step(
            "S_sc",
            "F_ty (1 − 2a / 6a₁), 2a₁ = (9/2π)(K_c / F_ty)²",
            f"2a = {2 * a:.2f}",
            found[rs.SHORT_CRACK],
            "MPa",
            rs.FEDDERSEN,
        )
    strength = path.strength(a)
    note.step(
        "S",
        f"residual strength, gross: {strength.governing}",
        "",
        strength.stress,
        "MPa",
    )
    return strength


def flaw_start(sheet: Sheet, path: CrackPath, note: Note, flaw: AssumedFlaw) -> Start:
    """Write an assumed flaw down and return the through crack it becomes."""
    half = flaw.length / 2
    note.step(
        "a₀",
        f"half of the assumed {flaw.kind} flaw",
        f"{flaw.length:.2f} / 2",
        half,
        "mm",
        flaw.reference,
    )
    if flaw.kind is FlawKind.THROUGH:
        return Start(half)

    def factors(depth: float, length: float) -> tuple[float, float]:
        crack = PartThrough(depth, length, sheet.thickness)
        at_surface, deepest = (
            surface_crack(crack, sheet.width / 2, angle) for angle in SURFACE_ANGLES
        )
        return at_surface, deepest

    grown = grow_part_through(
        sheet.law, factors, path.loads.cycle, (flaw.depth, half), sheet.thickness
    )
    note.step("F", "surface crack at 10° and 90°", "", None, "-", SURFACE_CRACK)
    note.step(
        "N_bt",
        "cycles until the surface crack is through",
        f"a {flaw.depth:.2f} to {sheet.thickness:.2f} mm",
        grown.cycles,
        "cycles",
        ANGLES,
    )
    return Start(grown.length, grown.cycles)
