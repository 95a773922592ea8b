r"""A nick in a sheet's edge that is still there: a crack across the sheet.

It is an edge crack of its depth through the whole thickness,
:math:`K = F(a/W)\,\sigma\sqrt{\pi a}` (Tada), which a corner crack of that depth is
not worse than. A nick at a hole is a crack of that hole.
"""

from __future__ import annotations

from repairs.analysis.growth.path import with_found_lives, with_margins
from repairs.analysis.inputs import Inputs
from repairs.analysis.intensity import through as si
from repairs.analysis.loads import panel_loads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods.depth_flaw import swing, write_cautions
from repairs.analysis.methods.edge_crack import load_fits, strip_of, write_strength
from repairs.analysis.methods.section_left import (
    FOUND_INPUTS,
    as_found,
    earlier_depth,
    still_there,
)
from repairs.analysis.note import Note
from repairs.analysis.surroundings import ObstacleKind
from repairs.analysis.types import Applicability, Result, Use

STRIP_INPUTS = (
    "element",
    "pressurised",
    "nick_at",
    "load_kind",
    "surroundings",
    "thickness",
    "strip_width",
    "yield_strength",
    "tension_strength",
    "toughness",
    "growth_law",
)
AT_EDGE = (
    "edge; one at a hole is a crack at that hole: record it so, with the hole's "
    "diameter and edge distance"
)
THROUGH_AT_ONCE = (
    "The nick is taken as a crack through the whole thickness, of its greatest depth "
    "from the edge."
)
LOWEST_PUBLISHED = 1.5
EDGE_DISTANCE = (
    "Edge distance left at the hole is {ratio:.2f} diameters; the fastener's load is "
    "not recorded and its bearing not checked."
)
BELOW_PUBLISHED = (
    "Edge distance left is below 1.5 hole diameters, the least that bearing strengths "
    "are published for. Needs an engineer."
)
NO_EDGE_DISTANCE = (
    "Edge distance left at fastener holes is not recorded; their bearing is not "
    "checked."
)


def at_an_edge(inputs: Inputs) -> Applicability:
    """Test that the nick lies at an edge and not at a hole."""
    test, word = "where the nick lies", inputs.word("nick_at")
    if word is None or word == "unknown":
        return Applicability(test, word or apply.NOT_RECORDED, AT_EDGE, None)
    return Applicability(test, word, AT_EDGE, word == "edge")


def strip_tests(inputs: Inputs) -> tuple[Applicability, ...]:
    """Test what a nick needs of its strip, as found and blended."""
    around = inputs.surroundings()
    return (
        at_an_edge(inputs),
        apply.word_is(inputs, "pressurised", "panel is pressurised", "no"),
        load_fits(inputs),
        apply.clear_of(around, ObstacleKind.JOINT, 1.0, "not in a joint row"),
        apply.clear_of(around, ObstacleKind.REPAIR, 1.0, "not at a repair"),
    )


def write_edge_distance(inputs: Inputs, note: Note) -> None:
    """Write what is left of a hole's edge distance, or that nobody recorded it."""
    left, diameter = (
        inputs.maybe(name) for name in ("remaining_edge_distance", "hole_diameter")
    )
    if left is None or diameter is None:
        note.warn(NO_EDGE_DISTANCE)
        return
    distance = note.given("e", "edge distance left at the hole", left)
    ratio = distance / note.given("D", "diameter of the hole", diameter)
    note.step("e/D", "edge distance over diameter", "", ratio, "-")
    note.warn(EDGE_DISTANCE.format(ratio=ratio))
    if ratio < LOWEST_PUBLISHED:
        note.warn(BELOW_PUBLISHED, bars=True)


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs."""
    del use
    return (*STRIP_INPUTS, *FOUND_INPUTS, *panel_loads.needed(inputs))


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        as_found(inputs, use),
        still_there(inputs),
        *strip_tests(inputs),
    )


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the nick as a crack; the tests have passed."""
    del use
    strip = strip_of(inputs, note)
    path = strip.path(panel_loads.panel_loads(inputs, note))
    note.text(THROUGH_AT_ONCE)
    length = note.given("d", "depth from the edge", inputs.number("damage_depth"))
    length += note.given(
        "u_d", "its uncertainty", inputs.number("damage_depth_uncertainty")
    )
    length += earlier_depth(inputs, note)
    draft = with_margins(
        path.loads, note, write_strength(strip, path, note, length), draft
    )
    cycle = path.loads.cycle
    largest = si.intensity(strip.factor(length), cycle.maximum, length)
    write_cautions(inputs, note, largest * swing(cycle))
    write_edge_distance(inputs, note)
    return with_found_lives(inputs, note, path, length, draft)
