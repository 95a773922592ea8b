"""A hole with one or two cracks, open or loaded by its fastener: factor and strength.

W is the width of the strip, or twice the distance to the nearest edge if that is less.
In a row of holes whose pitch is stated the strip is one pitch wide.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

from repairs.analysis.growth.laws import RecordedLaw
from repairs.analysis.growth.path import CrackPath, write_law
from repairs.analysis.inputs import SPECS, Inputs
from repairs.analysis.intensity import holes as hi
from repairs.analysis.intensity import through as si
from repairs.analysis.intensity.bulging import (
    BULGING_HANDBOOK,
    bulging_handbook,
    shell_parameter,
)
from repairs.analysis.intensity.loaded_hole import (
    SUPERPOSED,
    CrackedHole,
    through_factor,
)
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods.hole_loads import (
    direction_tests,
    opened_tests,
    runs_round,
)
from repairs.analysis.note import Note
from repairs.analysis.strength import residual as rs
from repairs.analysis.types import (
    ROOT_1000,
    Applicability,
    EdgeLength,
    GrossStress,
    HalfLength,
    Use,
)

BEARING = "bearing at the hole"
BULGING_WITH_HOLE = "Bulging of hole and cracks together, half of their whole length."
LARGEST_REACH = 0.45 * (1 - 1e-9)
"""End of the width terms' range, just inside."""
GEOMETRY = (
    "element",
    "pressurised",
    "hole_load",
    "surroundings",
    "thickness",
    "hole_diameter",
    "edge_distance",
    "toughness",
    "growth_law",
    "yield_strength",
)
CRACK_INPUTS = ("edge_crack_length", "edge_crack_uncertainty", "both_sides")
CORNER_INPUTS = ("crack_depth", "crack_depth_uncertainty")


def cracked(inputs: Inputs, use: Use) -> bool:
    """Return whether a known crack at the hole is what is evaluated."""
    return use is Use.FOUND_DAMAGE and inputs.word("hole_cracked") == "yes"


def state_needed(
    inputs: Inputs, use: Use, uncracked: tuple[str, ...]
) -> tuple[str, ...]:
    """Return what a use needs: of damage found, first whether the hole is cracked."""
    if use is not Use.FOUND_DAMAGE:
        return uncracked
    return (
        "hole_cracked",
        *(crack_needed(inputs) if cracked(inputs, use) else uncracked),
    )


def crack_needed(inputs: Inputs) -> tuple[str, ...]:
    """Return the inputs a known crack at a hole needs."""
    depth = CORNER_INPUTS if inputs.word("crack_through") == "no" else ()
    direction = ("crack_direction",) if inputs.word("pressurised") == "yes" else ()
    return CRACK_INPUTS + depth + direction


def strip_name(inputs: Inputs) -> str:
    """Return the input the strip is from: measured, else one pitch of a row."""
    pitch = inputs.maybe("strip_width") is None and inputs.maybe("hole_pitch")
    return "hole_pitch" if pitch else "strip_width"


def width_of(inputs: Inputs) -> float | None:
    """Return the width that counts [mm], None while it is unknown."""
    strip, edge = inputs.maybe(strip_name(inputs)), inputs.maybe("edge_distance")
    return min(strip.value, 2 * edge.value) if strip and edge else None


def slender_test(inputs: Inputs) -> Applicability:
    """Test that the hole takes no more than half of the width that counts."""
    width, diameter = width_of(inputs), inputs.maybe("hole_diameter")
    share = diameter.value / width if width and diameter else None
    return apply.at_most("hole diameter over width that counts", share, 0.5, "")


def crack_tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Test what is known of cracks at the hole, and their direction."""
    if use is not Use.FOUND_DAMAGE:
        return opened_tests(inputs)
    known = apply.word_among(
        inputs, "hole_cracked", SPECS["hole_cracked"].title, ("yes", "no")
    )
    if not cracked(inputs, use):
        return (known,)
    sides = apply.word_among(
        inputs, "both_sides", SPECS["both_sides"].title, ("yes", "no")
    )
    return known, sides, *direction_tests(inputs)


@dataclass(frozen=True)
class Hole:
    """A hole in a sheet [mm]; no radius = flat. `at` holds cracks and load transfer."""

    at: CrackedHole
    thickness: float
    radius: float | None
    yield_strength: float
    toughness: float
    law: RecordedLaw
    bearing_strength: float | None = None

    @property
    def gone(self) -> float:
        """Hole diameter over width [-]."""
        return self.at.diameter / self.at.width

    def bulging(self, c: float) -> float:
        """Return the bulging factor of hole and cracks together, 1 if flat [-]."""
        if self.radius is None:
            return 1.0
        whole = HalfLength((self.at.diameter + self.at.cracks * c) / 2)
        return bulging_handbook(shell_parameter(whole, self.radius, self.thickness))

    def factor(self, c: float) -> float:
        """Return F of the cracks on gross stress, bulging included [-]."""
        return through_factor(EdgeLength(c), self.at) * self.bulging(c)

    def bearing_limit(self) -> GrossStress | None:
        """Return the gross stress at bearing failure, None where it is not known."""
        if self.bearing_strength is None or self.at.bearing == 0:
            return None
        return GrossStress(self.bearing_strength / self.at.bearing)

    def strength(self, c: float) -> rs.Strength:
        """Return residual strength with the cracks, on gross stress."""
        removed = self.at.diameter + self.at.cracks * c
        return rs.weakest(
            {
                rs.FRACTURE: rs.fracture_strength(self.toughness, self.factor(c), c),
                rs.NET_SECTION: rs.net_section_yield(
                    self.yield_strength, removed, self.at.width
                ),
                **({BEARING: self.bearing_limit()} if self.at.bearing else {}),
            }
        )

    def path(self, loads: PanelLoads, inputs: Inputs) -> CrackPath:
        """Return the path of the cracks from this hole, inside their bay."""
        diameter, cracks = self.at.diameter, self.at.cracks
        ends = [
            (
                LARGEST_REACH * self.at.width - diameter / 2,
                "the range of the width correction",
            )
        ]
        if self.radius is not None:
            widest = 10 * (1 - 1e-9) * (self.radius * self.thickness) ** 0.5
            ends.append(
                ((widest - diameter) / cracks, "the range of the bulging factor")
            )
        around = inputs.surroundings()
        if around is not None and not runs_round(inputs):
            room, what = around.largest_half_length(0.0)
            ends.append((room - diameter / 2, what))
        largest, end = min(ends)
        return CrackPath(
            "c", 1.0, self.factor, self.strength, loads, self.law, largest, end
        )


def read_hole(
    inputs: Inputs, note: Note, cracks: int = 1, transfer: float = 0.0
) -> Hole:
    """Write the hole's data down and return it."""
    diameter = note.given("D", "hole diameter", inputs.number("hole_diameter"))
    note.given("e", "hole centre to nearest free edge", inputs.number("edge_distance"))
    strip = note.given(
        "W₀", "width of the strip, or pitch", inputs.number(strip_name(inputs))
    )
    width = width_of(inputs)
    assert width is not None, "evaluate() has checked the width"
    note.step("W", "smaller of W₀ and 2e", "", width, "mm")
    at = CrackedHole(diameter, width, cracks, transfer, strip if transfer else 0.0)
    return hole_in_sheet(inputs, note, at)


def flat_hole(inputs: Inputs, note: Note, at: CrackedHole, thickness: float) -> Hole:
    """Write the material down and return the hole in a flat strip."""
    law = inputs.law()
    assert law is not None, "evaluate() has checked the growth law"
    strength = note.given(
        "F_ty", "tension yield strength", inputs.number("yield_strength")
    )
    toughness = note.toughness(inputs.number("toughness"))
    write_law(note, law)
    return Hole(at, thickness, None, strength, toughness, law)


def hole_in_sheet(inputs: Inputs, note: Note, at: CrackedHole) -> Hole:
    """Write the sheet's data down and return the hole in it, bulging if pressurised."""
    flat = flat_hole(inputs, note, at, inputs.number("thickness").value)
    bulges = inputs.word("pressurised") == "yes" and not runs_round(inputs)
    radius = inputs.maybe("radius") if bulges else None
    if radius is None:
        return flat
    note.text(BULGING_WITH_HOLE)
    return replace(flat, radius=radius.value)


def write_strength(hole: Hole, path: CrackPath, note: Note, c: float) -> rs.Strength:
    """Write K and every strength at a crack length; return the one that governs."""
    factor, top = path.factor(c), path.loads.cycle.maximum
    _write_factor(hole, note, c, factor)
    note.step(
        "K_max",
        "σ F √(π c)",
        f"{top:.2f} · {factor:.4f} · √(π · {c:.2f})",
        si.intensity(factor, top, c) / ROOT_1000,
        "MPa√m",
    )
    strength = path.strength(c)
    for what, stress in strength.each:
        note.step("S", f"{what}, gross", "", stress, "MPa")
    note.step(
        "S",
        f"residual strength, gross: {strength.governing}",
        "",
        strength.stress,
        "MPa",
    )
    return strength


def _write_factor(hole: Hole, note: Note, c: float, factor: float) -> None:
    """Write F and the sources of what it is made of."""
    one = hole.at.cracks == 1
    words = "one crack" if one else "two equal cracks"
    note.step(
        "F",
        f"{words} at a hole, width, bearing and bulging included",
        f"c/r = {2 * c / hole.at.diameter:.3f}",
        factor,
        "-",
        hi.HOLE_SINGLE if one else hi.HOLE_DOUBLE,
    )
    if hole.at.bearing:
        source = hi.HOLE_BEARING if one else hi.HOLE_DOUBLE_BEARING
        note.step("", "bearing part of F", "", None, "", source)
        note.step("", "both parts added", "", None, "", SUPERPOSED)
    if hole.radius is not None:
        note.step("", "bulging in F", "", hole.bulging(c), "-", BULGING_HANDBOOK)
