r"""Through crack from an edge of a strip, or from a cut-out's corner.

.. math:: K = F(a/W)\,\sigma\sqrt{\pi a}

with a from the edge, the whole strip's tension, or its bending in its own plane on
outer-fibre stress; Tada's factors. Both are for free ends: a strip that stiffeners hold
straight has a lower K. Residual strength is the smallest of fracture, yield of the
section left, and in tension its collapse, which the bending of a one-sided crack
brings on sooner. At the corner of a cut-out the local stress must be stated.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from repairs.analysis.growth.laws import RecordedLaw
from repairs.analysis.growth.path import CrackPath, Start, write_law
from repairs.analysis.inputs import Inputs
from repairs.analysis.inspection.flaws import FlawKind, FlawLocation, rogue_flaw
from repairs.analysis.intensity import through as si
from repairs.analysis.loads import panel_loads
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods.crack_case import (
    COUNTED,
    MEASURED,
    CrackCase,
    evaluated,
)
from repairs.analysis.note import Note
from repairs.analysis.strength import residual as rs
from repairs.analysis.surroundings import ObstacleKind
from repairs.analysis.types import (
    INCH,
    ROOT_1000,
    Applicability,
    EdgeLength,
    GrossStress,
    Reference,
    Result,
    Use,
)

REQUIRED: tuple[str, ...] = (
    "element",
    "pressurised",
    "crack_origin",
    "load_kind",
    "surroundings",
    "thickness",
    "strip_width",
    "yield_strength",
    "tension_strength",
    "toughness",
    "growth_law",
)
CORNER = "cut_out_corner"
CORNER_TEST = "local stress at the corner of the cut-out"
LONGEST = 0.95 * (1 - 1e-9)
FREE_ENDS = "Free ends: a strip held straight by stiffeners or its joint has a lower K."
AS_THROUGH = "A crack from an edge is taken as through, whatever its depth."
CORNER_FLAW = "The corner flaw assumed at the edge is grown as a through crack."
LOCAL_WHOLE = (
    "The local stress at the corner is taken along the whole crack, though it fades "
    "with distance."
)


@dataclass(frozen=True, slots=True)
class EdgeForm:
    """One loading of a strip with an edge crack: factor, section left, its words."""

    factor: Callable[[EdgeLength, float], float]
    reference: Reference
    on: str
    bending: bool


TENSION = EdgeForm(si.edge_crack_tada, si.EDGE_TADA, "gross", bending=False)
BENDING = EdgeForm(
    si.edge_crack_bending_tada, si.EDGE_BENDING_TADA, "outer fibre", bending=True
)


@dataclass(frozen=True)
class Strip:
    """A strip with a crack of length a from its edge [mm]."""

    form: EdgeForm
    width: float
    thickness: float
    yield_strength: float
    tension_strength: float
    toughness: float
    law: RecordedLaw

    def factor(self, a: float) -> float:
        """Return F [-]."""
        return self.form.factor(EdgeLength(a), self.width)

    def candidates(self, a: float) -> dict[str, GrossStress | None]:
        """Return every strength that may govern, on the stress of the form [MPa]."""
        fracture = rs.fracture_strength(self.toughness, self.factor(a), a)
        if self.form.bending:
            left = 1 - a / self.width
            outer = GrossStress(self.yield_strength * left**2)
            return {rs.FRACTURE: fracture, rs.NET_SECTION: outer}
        return {
            rs.FRACTURE: fracture,
            rs.NET_SECTION: rs.net_section_yield(self.yield_strength, a, self.width),
            rs.COLLAPSE: rs.edge_crack_collapse(
                self.yield_strength, self.tension_strength, a, self.width
            ),
        }

    def path(self, loads: PanelLoads) -> CrackPath:
        """Return the path of a crack across the strip."""
        return CrackPath(
            "a",
            1.0,
            self.factor,
            lambda a: rs.weakest(self.candidates(a)),
            loads,
            self.law,
            LONGEST * self.width,
            "the range of the edge-crack factor",
            self.form.on,
        )


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs for a use."""
    more = COUNTED if use is Use.NO_KNOWN_CRACK else MEASURED
    return (*REQUIRED, *panel_loads.recorded_needed(inputs), *more)


def corner_stated(inputs: Inputs) -> Applicability:
    """Test that a crack at a cut-out's corner has the stress there stated."""
    wanted = "its ratio to the panel's stress stated, with its source"
    if inputs.word("crack_origin") != CORNER:
        return Applicability(CORNER_TEST, "not at such a corner", wanted, True)
    ratio = inputs.maybe("corner_stress_ratio")
    if ratio is None:
        return Applicability(CORNER_TEST, apply.NOT_RECORDED, wanted, False)
    return Applicability(CORNER_TEST, f"{ratio.value:.3g}", wanted, ratio.value >= 1)


def load_fits(inputs: Inputs) -> Applicability:
    """Test that the strip is loaded as one of the two solutions has it."""
    kind = inputs.word("load_kind")
    wanted = "tension or bending in the plane of the strip"
    if kind is None:
        return Applicability("kind of load", apply.NOT_RECORDED, wanted, None)
    met = kind in ("tension", "bending")
    return Applicability("kind of load", kind.replace("_", " "), wanted, met)


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    around = inputs.surroundings()
    width, size = inputs.maybe("strip_width"), _length(inputs, use)
    share = size / width.value if width and size is not None else None
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        apply.word_is(inputs, "pressurised", "panel is pressurised", "no"),
        apply.word_among(
            inputs, "crack_origin", "where the crack starts", ("edge", CORNER)
        ),
        corner_stated(inputs),
        load_fits(inputs),
        apply.clear_of(around, ObstacleKind.JOINT, 1.0, "not in a joint row"),
        apply.clear_of(around, ObstacleKind.REPAIR, 1.0, "not at a repair"),
        apply.at_most("crack length over strip width", share, 0.95, ""),
    )


def _length(inputs: Inputs, use: Use) -> float | None:
    if use is Use.NO_KNOWN_CRACK:
        return 0.05 * INCH
    measured, more = (inputs.maybe(name) for name in MEASURED)
    return measured.value + more.value if measured and more else None


def strip_of(inputs: Inputs, note: Note) -> Strip:
    """Write the strip's data down and return it."""
    width = note.given("W", "width of the strip", inputs.number("strip_width"))
    strength = note.given(
        "F_ty", "tension yield strength", inputs.number("yield_strength")
    )
    ultimate = note.given(
        "F_tu", "tension ultimate strength", inputs.number("tension_strength")
    )
    toughness = note.toughness(inputs.number("toughness"))
    law = inputs.law()
    assert law is not None, "evaluate() has checked that growth_law is there"
    write_law(note, law)
    note.text(FREE_ENDS)
    form = BENDING if inputs.word("load_kind") == "bending" else TENSION
    thickness = inputs.number("thickness").value
    return Strip(form, width, thickness, strength, ultimate, toughness, law)


def local_loads(inputs: Inputs, note: Note, found: PanelLoads) -> PanelLoads:
    """Return the panel's loads, at a cut-out's corner times the stress stated there."""
    if inputs.word("crack_origin") != CORNER:
        return found
    ratio = note.given("k", CORNER_TEST, inputs.number("corner_stress_ratio"))
    note.text(LOCAL_WHOLE)
    local = found.on_section(1 / ratio)
    panel_loads.write_requirements(local, note)
    return local


def write_strength(strip: Strip, path: CrackPath, note: Note, a: float) -> rs.Strength:
    """Write K and every strength at a size, and return the one that governs."""
    factor, top = strip.factor(a), path.loads.cycle.maximum
    words = "bending" if strip.form.bending else "tension"
    note.step(
        "F",
        f"edge crack, {words}",
        f"a/W = {a / strip.width:.4f}",
        factor,
        "-",
        strip.form.reference,
    )
    note.step(
        "K_max",
        "σ F √(π a)",
        f"{top:.2f} · {factor:.4f} · √(π · {a:.2f})",
        si.intensity(factor, top, a) / ROOT_1000,
        "MPa√m",
    )
    for what, stress in strip.candidates(a).items():
        note.step("S", f"{what}, {strip.form.on}", f"a = {a:.2f}", stress, "MPa")
    strength = path.strength(a)
    note.step(
        "S",
        f"residual strength, {strip.form.on}: {strength.governing}",
        "",
        strength.stress,
        "MPa",
    )
    return strength


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the crack, or the edge without known crack; the tests have passed."""
    found = local_loads(inputs, note, panel_loads.panel_loads(inputs, note))
    strip = strip_of(inputs, note)
    path = strip.path(found)

    def measured() -> float:
        length = note.given("a", "measured length", inputs.number(MEASURED[0]))
        return length + note.given("u", "its uncertainty", inputs.number(MEASURED[1]))

    def known(length: float) -> Start:
        if inputs.word("crack_through") != "yes":
            note.text(AS_THROUGH)
        return Start(length)

    def assumed() -> Start:
        flaw = rogue_flaw(FlawLocation.HOLE, strip.thickness)
        note.step(
            "a₀", f"assumed {flaw.kind} flaw", "", flaw.length, "mm", flaw.reference
        )
        if flaw.kind is not FlawKind.THROUGH:
            note.text(CORNER_FLAW)
        return Start(flaw.length)

    crack = CrackCase(
        path, lambda a: write_strength(strip, path, note, a), measured, known, assumed
    )
    return evaluated(inputs, use, note, draft, crack)
