r"""An open or trimmed hole in a strip: net section, stress-life, crack from the hole.

.. math:: K_{tn} = 3 - 3.13x + 3.66x^2 - 1.53x^3,\qquad x = D/W

on net stress. W is the strip's width, or twice the distance to the nearest edge if
that is less. A crack is one crack, from one side; for a pressurised skin the bulging of
hole and crack together is counted in. A hole that a fastener loads is refused: its
bearing load is not recorded.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace

from repairs.analysis.errors import within
from repairs.analysis.growth.laws import WalkerLaw
from repairs.analysis.growth.path import (
    CrackPath,
    Start,
    curves,
    grow,
    repeat_after,
    with_found_lives,
    with_margins,
    write_law,
)
from repairs.analysis.growth.two_directions import grow_part_through
from repairs.analysis.inputs import Inputs
from repairs.analysis.inspection import intervals
from repairs.analysis.inspection.flaws import FlawKind, FlawLocation, rogue_flaw
from repairs.analysis.intensity import holes as hi
from repairs.analysis.intensity import through as si
from repairs.analysis.intensity.bulging import (
    BULGING_HANDBOOK,
    bulging_handbook,
    shell_parameter,
)
from repairs.analysis.intensity.part_through import (
    CORNER_ANGLES,
    CORNER_AT_HOLE,
    PartThrough,
    corner_crack_at_hole,
)
from repairs.analysis.loads import panel_loads
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.note import Note
from repairs.analysis.strength import residual as rs
from repairs.analysis.stress_life import left as fatigue
from repairs.analysis.surroundings import ObstacleKind
from repairs.analysis.types import (
    ROOT_1000,
    Applicability,
    EdgeLength,
    Grade,
    GrossStress,
    HalfLength,
    Reference,
    Result,
    Use,
)

HOLE_KT = Reference(
    "Roark, Formulas for Stress and Strain, Table 17.1, central hole in a strip, as in "
    "a public transcription",
    Grade.QUOTED,
)
NET_ULTIMATE = "net section, ultimate"
BULGING_WITH_HOLE = "Bulging of hole and crack together, half-length (D + c)/2."
AS_THROUGH = (
    "The corner flaw is grown as a through crack: hole radius over thickness or width "
    "is outside the corner solution. Shortens the life."
)
LARGEST_REACH = 0.45 * (1 - 1e-9)
"""End of the width terms' range, just inside."""
REQUIRED: tuple[str, ...] = (
    "element",
    "pressurised",
    "hole_load",
    "hole_cracked",
    "surroundings",
    "thickness",
    "hole_diameter",
    "edge_distance",
    "strip_width",
    "toughness",
    "growth_law",
    "life_base",
    "accumulated_cycles",
    *fatigue.INPUTS,
)


CRACK_INPUTS = ("edge_crack_length", "edge_crack_uncertainty", "both_sides")


def cracked(inputs: Inputs, use: Use) -> bool:
    """Return whether a known crack at the hole is what is evaluated."""
    return use is Use.FOUND_DAMAGE and inputs.word("hole_cracked") == "yes"


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs; a known crack needs its sizes."""
    crack = CRACK_INPUTS if cracked(inputs, use) else ()
    return REQUIRED + panel_loads.needed(inputs) + crack


def width_of(inputs: Inputs) -> float | None:
    """Return the width that counts [mm], None while it is unknown."""
    strip, edge = inputs.maybe("strip_width"), inputs.maybe("edge_distance")
    return min(strip.value, 2 * edge.value) if strip and edge else None


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    one_side = (
        apply.word_is(inputs, "both_sides", "cracks on both sides of the hole", "no"),
    )
    width, diameter = width_of(inputs), inputs.maybe("hole_diameter")
    share = diameter.value / width if width and diameter else None
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        apply.word_is(
            inputs,
            "hole_load",
            "load on the hole (no bearing load is recorded)",
            "open",
        ),
        apply.clear_of(
            inputs.surroundings(), ObstacleKind.JOINT, 1.0, "not in a joint row"
        ),
        apply.at_most("hole diameter over width that counts", share, 0.5, ""),
        *(one_side if cracked(inputs, use) else ()),
    )


def hole_kt(diameter: float, width: float) -> float:
    r"""Return Kt of a central hole in a strip, on net stress.

    .. math:: K_{tn} = 3 - 3.13x + 3.66x^2 - 1.53x^3,\quad x = D/W

    Parameters
    ----------
    diameter
        Hole diameter D [mm].
    width
        Full width W [mm].

    Returns
    -------
    float
        Kt on net stress [-].

    Notes
    -----
    Range 0 <= D/W <= 0.5 here. One-way tension: hoop tension with half of it across
    has a lower Kt.

    References
    ----------
    .. [1] See `HOLE_KT`.
    """
    x = within("Hole diameter over width", diameter / width, 0, 0.5, "strip with hole")
    return 3 - 3.13 * x + 3.66 * x**2 - 1.53 * x**3


@dataclass(frozen=True)
class Hole:
    """A hole in a strip [mm]; no radius = flat."""

    diameter: float
    width: float
    thickness: float
    radius: float | None
    yield_strength: float
    toughness: float
    law: WalkerLaw

    def factor(self, c: float) -> float:
        """Return F of one crack from the hole, bulging included [-]."""
        flat = hi.hole_single(EdgeLength(c), self.diameter, self.width)
        if self.radius is None:
            return flat
        whole = HalfLength((self.diameter + c) / 2)
        parameter = shell_parameter(whole, self.radius, self.thickness)
        return flat * bulging_handbook(parameter)

    def strength(self, c: float) -> rs.Strength:
        """Return residual strength with one crack, on gross stress."""
        return rs.weakest(
            {
                rs.FRACTURE: rs.fracture_strength(self.toughness, self.factor(c), c),
                rs.NET_SECTION: rs.net_section_yield(
                    self.yield_strength, self.diameter + c, self.width
                ),
            }
        )

    def path(self, loads: PanelLoads, inputs: Inputs) -> CrackPath:
        """Return the path of a crack from this hole, inside its bay."""
        ends = [
            (
                LARGEST_REACH * self.width - self.diameter / 2,
                "the range of the width correction",
            )
        ]
        if self.radius is not None:
            reach = (
                10 * (1 - 1e-9) * (self.radius * self.thickness) ** 0.5 - self.diameter
            )
            ends.append((reach, "the range of the bulging factor"))
        around = inputs.surroundings()
        if around is not None:
            room, what = around.largest_half_length(0.0)
            ends.append((room - self.diameter / 2, what))
        largest, end = min(ends)
        return CrackPath(
            "c", 1.0, self.factor, self.strength, loads, self.law, largest, end
        )


def hole_of(inputs: Inputs, note: Note) -> Hole:
    """Write the hole's data down and return it."""
    diameter = note.given("D", "hole diameter", inputs.number("hole_diameter"))
    note.given("e", "hole centre to nearest free edge", inputs.number("edge_distance"))
    note.given("W₀", "width of the strip", inputs.number("strip_width"))
    width = width_of(inputs)
    law = inputs.law()
    assert width is not None, "evaluate() has checked the width"
    assert law is not None, "evaluate() has checked the growth law"
    note.step("W", "smaller of W₀ and 2e", "", width, "mm")
    strength = note.given(
        "F_ty", "tension yield strength", inputs.number("yield_strength")
    )
    toughness = note.toughness(inputs.number("toughness"))
    write_law(note, law)
    radius = inputs.maybe("radius") if inputs.word("pressurised") == "yes" else None
    if radius:
        note.text(BULGING_WITH_HOLE)
    return Hole(
        diameter,
        width,
        inputs.number("thickness").value,
        radius.value if radius else None,
        strength,
        toughness,
        law,
    )


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the hole, cracked or not; the tests have passed."""
    found = panel_loads.panel_loads(inputs, note)
    hole = hole_of(inputs, note)
    path = hole.path(found, inputs)
    if cracked(inputs, use):
        measured = note.given(
            "c", "crack from the hole edge", inputs.number("edge_crack_length")
        )
        more = note.given(
            "u", "its uncertainty", inputs.number("edge_crack_uncertainty")
        )
        c = measured + more
        strength = _write_strength(hole, path, note, c)
        known = with_margins(found, note, strength, draft)
        return with_found_lives(inputs, note, path, c, known)
    draft = _static(inputs, note, found, hole, draft)
    kt = hole_kt(hole.diameter, hole.width)
    note.step(
        "Kt",
        "3 − 3.13x + 3.66x² − 1.53x³, on net stress",
        f"x = D/W = {hole.diameter / hole.width:.4f}",
        kt,
        "-",
        HOLE_KT,
    )
    net = found.on_section(1 - hole.diameter / hole.width).cycle
    left = fatigue.stress_life_left(inputs, note, kt, net, found.cycle)
    return _with_growth(inputs, use, note, hole, path, left, draft)


def _static(
    inputs: Inputs, note: Note, found: PanelLoads, hole: Hole, draft: Result
) -> Result:
    """Fill static margins of the net section."""
    ultimate = note.given(
        "F_tu", "tension ultimate strength", inputs.number("tension_strength")
    )
    gross = GrossStress(ultimate * (1 - hole.diameter / hole.width))
    note.step(
        "S",
        "F_tu (1 − D/W), gross",
        f"{ultimate:.1f} (1 − {hole.diameter:.2f} / {hole.width:.1f})",
        gross,
        "MPa",
    )
    return with_margins(found, note, rs.Strength(gross, NET_ULTIMATE), draft)


def _write_strength(hole: Hole, path: CrackPath, note: Note, c: float) -> rs.Strength:
    factor, top = hole.factor(c), path.loads.cycle.maximum
    note.step(
        "F",
        "one crack at a hole, width and bulging included",
        f"c/r = {2 * c / hole.diameter:.3f}",
        factor,
        "-",
        hi.HOLE_SINGLE,
    )
    if hole.radius is not None:
        note.step("", "bulging in F", "", None, "", BULGING_HANDBOOK)
    note.step(
        "K_max",
        "σ F √(π c)",
        f"{top:.2f} · {factor:.4f} · √(π · {c:.2f})",
        si.intensity(factor, top, c) / ROOT_1000,
        "MPa√m",
    )
    strength = hole.strength(c)
    note.step(
        "S",
        f"residual strength, gross: {strength.governing}",
        "",
        strength.stress,
        "MPa",
    )
    return strength


def corner_factors(hole: Hole) -> Callable[[float, float], tuple[float, float]]:
    """Return factors at the surface and the bore of a corner crack at the hole."""

    def factors(depth: float, length: float) -> tuple[float, float]:
        crack = PartThrough(depth, length, hole.thickness)
        at_surface, at_bore = (
            corner_crack_at_hole(crack, hole.diameter / 2, hole.width / 2, angle)
            for angle in CORNER_ANGLES
        )
        return at_surface, at_bore

    return factors


def flaw_start(hole: Hole, path: CrackPath, note: Note) -> Start:
    """Write the assumed flaw at the hole down; return the through crack it becomes."""
    flaw = rogue_flaw(FlawLocation.HOLE, hole.thickness)
    note.step("c₀", f"assumed {flaw.kind} flaw", "", flaw.length, "mm", flaw.reference)
    radius, reach = hole.diameter / 2, (hole.diameter / 2 + hole.thickness * 2)
    fits = 0.5 <= radius / hole.thickness <= 3 and reach <= hole.width / 4
    if flaw.kind is FlawKind.THROUGH:
        return Start(flaw.length)
    if not fits:
        note.warn(AS_THROUGH)
        return Start(flaw.length)
    grown = grow_part_through(
        hole.law,
        corner_factors(hole),
        path.loads.cycle,
        (flaw.depth, flaw.length),
        hole.thickness,
    )
    note.step(
        "N_bt",
        "cycles until the corner crack is through, 10° and 80°",
        f"a {flaw.depth:.2f} to {hole.thickness:.2f} mm",
        grown.cycles,
        "cycles",
        CORNER_AT_HOLE,
    )
    return Start(grown.length, grown.cycles)


def _with_growth(
    inputs: Inputs,
    use: Use,
    note: Note,
    hole: Hole,
    path: CrackPath,
    left: fatigue.StressLife,
    draft: Result,
) -> Result:
    """Fill lives, threshold and repeat from stress-life and from growth."""
    start = flaw_start(hole, path, note)
    _write_strength(hole, path, note, start.length)
    grown = grow(inputs, note, path, start, path.loads.residual)
    base = inputs.word("life_base") or ""
    growth = intervals.life(
        "growth of the flaw assumed at the hole", grown.cycles, base, grown.remark
    )
    known = use is Use.FOUND_DAMAGE
    chosen = fatigue.governing_life(inputs, note, left, growth, base, propose=not known)
    lived = intervals.life("mean stress-life left", left.remaining, base, left.remark)
    if known:
        note.warn(intervals.FOUND_DAMAGE_LIFE)
    return replace(
        draft,
        lives=(lived, growth),
        life_cycles=chosen.life.cycles,
        life_base=base,
        life_after_factor_cycles=chosen.after_factor,
        scatter_factor=chosen.factor,
        threshold=chosen.threshold,
        repeat=None if known else repeat_after(inputs, note, path, grown.end),
        missing=intervals.still_missing(inputs),
        curves=curves(path, start.length, base),
    )
