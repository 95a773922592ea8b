"""Wear whose cause is gone: thickness lost, as a smooth dish with a flaw in it.

While what wears it is still there the loss goes on and no life follows.
"""

from __future__ import annotations

from repairs.analysis.inputs import Inputs
from repairs.analysis.inspection.intervals import FROM_FINDING
from repairs.analysis.loads import panel_loads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods import rework_lives
from repairs.analysis.methods.blend_out import dished
from repairs.analysis.methods.section_left import (
    FOUND_INPUTS,
    as_found,
    found_section,
    needed,
    place_tests,
    still_there,
)
from repairs.analysis.note import Note
from repairs.analysis.types import Applicability, Result, Use

REQUIRED: tuple[str, ...] = (
    "element",
    "cause_removed",
    "pressurised",
    "surroundings",
    "thickness",
    "damage_length",
    "panel_length",
    *FOUND_INPUTS,
    *rework_lives.INPUTS,
)
SMOOTH = "Taken as a smooth dish of its whole length; a step in it would be worse."


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs."""
    del use
    return REQUIRED + panel_loads.needed(inputs) + needed(inputs)


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        as_found(inputs, use),
        still_there(inputs),
        apply.word_is(inputs, "cause_removed", "what wears it is removed", "yes"),
        *place_tests(inputs),
    )


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the worn skin as it was found; the tests have passed."""
    found = panel_loads.panel_loads(inputs, note)
    section = found_section(inputs, note)
    note.text(SMOOTH)
    length = note.given("L", "length of the wear", inputs.number("damage_length"))
    return dished(inputs, use, note, draft, found, section, length, FROM_FINDING)
