r"""A scratch or gouge that is still there: a sharp flaw along all of its length.

Its depth, the uncertainty of that included, is an edge crack across the thickness,
:math:`K = F(a/t)\,\sigma\sqrt{\pi a}`; a root radius takes nothing off. It is taken
across the hoop stress of a pressurised skin, or across the recorded stress, whatever
its direction; a circumferential one in pressurised skin needs the stress along the
section. The thinned section is checked as well, and the lesser holds.
"""

from __future__ import annotations

from repairs.analysis.inputs import Inputs
from repairs.analysis.loads import panel_loads
from repairs.analysis.loads.longitudinal import (
    longitudinal_loads,
    longitudinal_needed,
    reach_needed,
)
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods import depth_flaw
from repairs.analysis.methods.crack_case import mean_tension, spectrum_reach
from repairs.analysis.methods.flat_crack import kind_is_not
from repairs.analysis.methods.section_left import (
    FOUND_INPUTS,
    as_found,
    found_section,
    needed,
    place_tests,
    static_strength,
    still_there,
)
from repairs.analysis.note import Note
from repairs.analysis.types import Applicability, Result, Use

REQUIRED: tuple[str, ...] = (
    "element",
    "pressurised",
    "clad",
    "surroundings",
    "thickness",
    *FOUND_INPUTS,
    *depth_flaw.INPUTS,
)
ACROSS = (
    "Taken across the {stress} over all of its length, whatever its direction: along "
    "the load it would open far less."
)
SHARP = "Taken as sharp: a root radius is no relief while torn metal is still there."
IN_CLADDING = (
    "Recorded as not through the cladding: its whole depth is taken as a flaw all the "
    "same."
)


def round_the_section(inputs: Inputs) -> bool:
    """Return whether it runs round a pressurised section, across the axial stress."""
    return (
        inputs.word("pressurised") == "yes"
        and inputs.word("damage_direction") == "circumferential"
    )


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs."""
    del use
    every = (*REQUIRED, *panel_loads.needed(inputs), *needed(inputs))
    if round_the_section(inputs):
        every += (*longitudinal_needed(inputs), *reach_needed(inputs))
    return tuple(dict.fromkeys(every))


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    axial = (mean_tension(inputs),) if round_the_section(inputs) else ()
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        as_found(inputs, use),
        still_there(inputs),
        kind_is_not(inputs, ("compression", "shear", "torsion")),
        *axial,
        *place_tests(inputs),
    )


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the scratch as it was found; the tests have passed."""
    del use
    found = panel_loads.panel_loads(inputs, note)
    section = found_section(inputs, note)
    draft = static_strength(inputs, note, found, section, draft)
    note.text(SHARP)
    if inputs.word("through_clad") == "no":
        note.text(IN_CLADDING)
    across, stress = found, "recorded stress"
    if round_the_section(inputs):
        across = longitudinal_loads(inputs, note, spectrum_reach(inputs))
        stress = "stress along the section"
    elif inputs.word("pressurised") == "yes":
        stress = "hoop stress"
    note.text(ACROSS.format(stress=stress))
    note.step("", depth_flaw.LOSS_OF_LIFE, "", None, "", depth_flaw.SCRATCHED)
    return depth_flaw.evaluated(inputs, note, across, section, draft)
