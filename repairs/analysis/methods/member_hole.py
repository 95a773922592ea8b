"""A fastener hole in a member's flange or web: cracks from it, or a flaw assumed there.

The hole of the skin methods, in a strip as wide as the flange or twice the distance to
its edge, under the member's own stress; flat, so without bulging.
"""

from __future__ import annotations

from repairs.analysis.inputs import SPECS, Inputs
from repairs.analysis.intensity.loaded_hole import CrackedHole
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods import member_stress
from repairs.analysis.methods.hole import cracks_of
from repairs.analysis.methods.hole_geometry import (
    CORNER_INPUTS,
    CRACK_INPUTS,
    Hole,
    flat_hole,
)
from repairs.analysis.methods.hole_growth import with_assumed_flaw, with_known_crack
from repairs.analysis.methods.loaded_hole import with_bearing, without_bearing
from repairs.analysis.methods.member_common import own_needed
from repairs.analysis.note import Note
from repairs.analysis.stress_life.left import StressLife
from repairs.analysis.types import Applicability, Result, Use

NO_STRESS_LIFE = "stress-life of a member is not part of this method"
COMMON = (
    "element",
    "load_kind",
    "hole_load",
    "hole_diameter",
    "edge_distance",
    "member_width",
    "member_thickness",
    "yield_strength",
    "tension_strength",
    "toughness",
    "growth_law",
)


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs."""
    pin = ("load_transfer",) if inputs.word("hole_load") == "loaded" else ()
    if use is Use.NO_KNOWN_CRACK:
        sizes: tuple[str, ...] = ("member_holes", "life_base", "accumulated_cycles")
    else:
        depth = CORNER_INPUTS if inputs.word("crack_through") == "no" else ()
        sizes = ("crack_origin", "hole_cracked", *CRACK_INPUTS, *depth)
    names = (*COMMON, *pin, *member_stress.needed(inputs), *sizes)
    return own_needed(inputs, names)


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    sides: tuple[Applicability, ...] = ()
    if use is Use.FOUND_DAMAGE:
        title = SPECS["both_sides"].title
        sides = (apply.word_among(inputs, "both_sides", title, ("yes", "no")),)
        here = apply.word_is(
            inputs, "crack_origin", "where the crack starts", "fastener_hole"
        )
    else:
        here = apply.word_is(inputs, "member_holes", SPECS["member_holes"].title, "yes")
    width, diameter = _width(inputs), inputs.maybe("hole_diameter")
    share = diameter.value / width if width and diameter else None
    return (
        *member_stress.tests(inputs, use),
        here,
        *sides,
        apply.word_among(
            inputs, "hole_load", SPECS["hole_load"].title, ("open", "loaded")
        ),
        apply.at_most("hole diameter over width that counts", share, 0.5, ""),
    )


def _width(inputs: Inputs) -> float | None:
    flange, edge = inputs.maybe("member_width"), inputs.maybe("edge_distance")
    return min(flange.value, 2 * edge.value) if flange and edge else None


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the hole; the tests have passed."""
    loads = member_stress.member_loads(inputs, use, note)
    hole = _read(inputs, use, note)
    path = hole.path(loads, Inputs({}))  # the skin's bay does not bound a member
    if use is Use.FOUND_DAMAGE:
        done = with_known_crack(inputs, note, hole, path, draft)
    else:
        left = StressLife(None, NO_STRESS_LIFE)
        done = with_assumed_flaw(inputs, use, note, hole, path, left, draft)
    open_ = hole.at.bearing and not hole.bearing_strength
    return without_bearing(inputs, done) if open_ else done


def _read(inputs: Inputs, use: Use, note: Note) -> Hole:
    """Write the hole and its flange down and return them."""

    def given(symbol: str, name: str) -> float:
        return note.given(symbol, SPECS[name].title, inputs.number(name))

    diameter = given("D", "hole_diameter")
    flange = given("b", "member_width")
    given("e", "edge_distance")
    width = _width(inputs)
    assert width is not None, "evaluate() has checked the width"
    note.step("W", "smaller of b and 2e", "", width, "mm")
    loaded = inputs.word("hole_load") == "loaded"
    transfer = given("λ", "load_transfer") if loaded else 0.0
    at = CrackedHole(diameter, width, cracks_of(inputs, use), transfer, flange)
    hole = flat_hole(inputs, note, at, given("t", "member_thickness"))
    return with_bearing(inputs, note, hole) if transfer else hole
