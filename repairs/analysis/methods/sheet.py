"""A plain skin with a centre crack, and the through crack an assumed flaw becomes."""

from __future__ import annotations

from dataclasses import dataclass

from repairs.analysis.errors import OutOfRangeError
from repairs.analysis.growth.laws import RecordedLaw
from repairs.analysis.growth.path import CrackPath, Start, write_law
from repairs.analysis.growth.two_directions import TwoFactors, grow_part_through
from repairs.analysis.inputs import SPECS, Inputs
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
DEPTH_INPUTS = ("crack_depth", "damage_depth_uncertainty")
TAKEN_AS_THROUGH = "A crack without a measured depth is taken as through."
STRENGTH_AS_THROUGH = (
    "Strength is that of a through crack of the length measured on the surface: lower "
    "than its own."
)
FLAW_AS_THROUGH = (
    "The part-through crack is taken as through at once: it leaves the range of the "
    "surface-crack solution, or would not stand once through. Shortens the life."
)


@dataclass(frozen=True)
class Sheet:
    """A skin with a centre crack of half-length a [mm]; no radius = flat.

    `skew` raises K for a crack whose direction to the stress is not known [-].
    """

    radius: float | None
    thickness: float
    width: float
    yield_strength: float
    toughness: float
    law: RecordedLaw
    skew: float = 1.0

    def bulging(self, a: float) -> float:
        """Return the bulging factor [-], 1 for a flat sheet."""
        if self.radius is None:
            return 1.0
        parameter = shell_parameter(HalfLength(a), self.radius, self.thickness)
        return bulging_handbook(parameter)

    def factor(self, a: float) -> float:
        """Return bulging times width factor, times that of a skew crack [-]."""
        width = si.centre_crack_secant(HalfLength(a), self.width)
        return self.bulging(a) * width * self.skew

    def raised(self, a: float) -> float:
        """Return what raises K in a sheet of any width: bulging and skew [-]."""
        return self.bulging(a) * self.skew

    def candidates(self, a: float) -> dict[str, GrossStress | None]:
        """Return every strength that may govern, on gross stress [MPa]."""
        return {
            rs.FRACTURE: rs.fracture_strength(self.toughness, self.factor(a), a),
            rs.NET_SECTION: rs.net_section_yield(
                self.yield_strength, 2 * a, self.width
            ),
            rs.SHORT_CRACK: rs.short_crack_line(
                self.toughness / self.raised(a),
                self.yield_strength,
                HalfLength(a),
                self.width,
            ),
        }

    def path(
        self,
        loads: PanelLoads,
        inputs: Inputs,
        keep: float | None,
        section: str = "gross",
        reach: tuple[float, str] | None = None,
    ) -> CrackPath:
        """Return the path of a crack here, as far as every part of it is valid.

        `reach` is where the surroundings end it [mm]; without one, a crack along the
        section is followed to its frames and obstacles.
        """
        ends = [(WIDEST_SECANT * self.width, "the range of the width correction")]
        if self.radius is not None:
            longest = LONGEST_SHELL_PARAMETER * (self.radius * self.thickness) ** 0.5
            ends.append((longest, "the range of the bulging factor"))
        around = inputs.surroundings()
        if reach is not None:
            ends.append(reach)
        elif around is not None and keep is not None:
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


def sheet_of(
    inputs: Inputs,
    note: Note,
    thickness: float,
    *,
    width_from: str = "panel_length",
    curved: bool = True,
    stiffened: bool = False,
) -> Sheet:
    """Write the sheet's data down; `thickness` is what carries load.

    `width_from` names the panel's size along the crack; a crack that does not bulge is
    not `curved`.
    """
    width = note.given("W", SPECS[width_from].title, inputs.number(width_from))
    strength = note.given(
        "F_ty", "tension yield strength", inputs.number("yield_strength")
    )
    toughness = note.toughness(inputs.number("toughness"))
    law = inputs.law()
    assert law is not None, "evaluate() has checked that growth_law is there"
    write_law(note, law)
    if not stiffened:
        note.text(NO_RELIEF)
    bulges = curved and inputs.word("pressurised") == "yes"
    radius = inputs.maybe("radius") if bulges else None
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
    top, factor = path.loads.cycle.maximum, sheet.factor(a)
    skew, product = "", f"{bulging:.4f} · {width:.4f}"
    if sheet.skew != 1:
        skew, product = " F_s", f"{product} · {sheet.skew:.4f}"
    note.step(
        "K_max",
        f"σ F_b F_w{skew} √(π a)",
        f"{top:.2f} · {product} · √(π · {a:.2f})",
        si.intensity(factor, top, a) / ROOT_1000,
        "MPa√m",
    )
    found = sheet.candidates(a)
    note.step(
        "S_fr",
        f"K_c / (F_b F_w{skew} √(π a))",
        f"{sheet.toughness:.0f} / ({factor:.4f} √(π · {a:.2f}))",
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
            f"F_ty (1 − 2a / 6a₁), 2a₁ = (9/2π)(K_c / F_b{skew} F_ty)²",
            f"2a = {2 * a:.2f}, K_c over {sheet.raised(a):.4f}",
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
    return surface_start(sheet, path, note, flaw.depth, half)


def found_start(
    inputs: Inputs, sheet: Sheet, path: CrackPath, note: Note, half: float
) -> Start:
    """Return the through crack a measured one is, or becomes if its depth is known."""
    if not depth_counts(inputs):
        if inputs.word("crack_through") != "yes":
            note.text(TAKEN_AS_THROUGH)
        return Start(half)
    deep = note.given("a_d", "crack depth", inputs.number(DEPTH_INPUTS[0]))
    deep += note.given("u", "its uncertainty", inputs.number(DEPTH_INPUTS[1]))
    if deep >= sheet.thickness:
        return Start(half)
    note.text(STRENGTH_AS_THROUGH)
    return surface_start(sheet, path, note, deep, half)


def depth_counts(inputs: Inputs) -> bool:
    """Return whether a depth was measured of a crack that is not through."""
    return "crack_depth" in inputs and inputs.word("crack_through") != "yes"


def surface_factors(sheet: Sheet) -> TwoFactors:
    """Return factors at the surface and the deepest point of a surface crack."""

    def factors(depth: float, length: float) -> tuple[float, float]:
        crack = PartThrough(depth, length, sheet.thickness)
        at_surface, deepest = (
            sheet.skew * surface_crack(crack, sheet.width / 2, angle)
            for angle in SURFACE_ANGLES
        )
        return at_surface, deepest

    return factors


def surface_start(
    sheet: Sheet, path: CrackPath, note: Note, depth: float, half: float
) -> Start:
    """Grow a surface crack through the thickness, or take it as through at once.

    As through where the solution ends, and where a through crack of the length it
    breaks through with would not bear what is required.
    """
    law, cycle = path.growth()
    try:
        grown = grow_part_through(
            law,
            surface_factors(sheet),
            cycle,
            (depth, half),
            sheet.thickness,
        )
    except OutOfRangeError:
        note.warn(FLAW_AS_THROUGH)
        return Start(half)
    if not stands(path, grown.length):
        note.warn(FLAW_AS_THROUGH)
        return Start(half)
    note.step("F", "surface crack at 10° and 90°", "", None, "-", SURFACE_CRACK)
    note.step(
        "N_bt",
        "cycles until the surface crack is through",
        f"a {depth:.2f} to {sheet.thickness:.2f} mm",
        grown.cycles,
        "cycles",
        ANGLES,
    )
    return Start(grown.length, grown.cycles)


def stands(path: CrackPath, length: float) -> bool:
    """Return whether a through crack is in range and bears both requirements."""
    if length >= path.largest:
        return False
    needed = (path.loads.residual, path.loads.ultimate)
    return path.strength(length).stress > max(r.governing[0] for r in needed)
