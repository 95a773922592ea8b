"""What pulls a crack at a hole open: hoop stress along the shell, axial round it.

A crack round the shell does not bulge, and is never computed from pressure alone: the
panel must carry its bending stresses, as for any crack of that direction.
"""

from __future__ import annotations

from repairs.analysis.inputs import SPECS, Inputs
from repairs.analysis.loads import panel_loads
from repairs.analysis.loads.longitudinal import (
    longitudinal_loads,
    longitudinal_needed,
    reach_needed,
)
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods.crack_case import mean_tension, spectrum_reach
from repairs.analysis.note import Note
from repairs.analysis.types import Applicability

ALONG, ROUND = "longitudinal", "circumferential"


def runs_round(inputs: Inputs) -> bool:
    """Return whether the crack runs round a pressurised shell."""
    pressed = inputs.word("pressurised") == "yes"
    return pressed and inputs.word("crack_direction") == ROUND


def needed(inputs: Inputs) -> tuple[str, ...]:
    """Return the names of the load inputs the crack's direction needs."""
    if runs_round(inputs):
        return (*longitudinal_needed(inputs), *reach_needed(inputs))
    return panel_loads.needed(inputs)


def loads_at_hole(inputs: Inputs, note: Note) -> PanelLoads:
    """Write down and return the loads across the crack."""
    if runs_round(inputs):
        return longitudinal_loads(inputs, note, spectrum_reach(inputs))
    return panel_loads.panel_loads(inputs, note)


def direction_tests(inputs: Inputs) -> tuple[Applicability, ...]:
    """Test the direction of a crack in a pressurised shell, and what pulls it open."""
    if inputs.word("pressurised") != "yes":
        return ()
    title = SPECS["crack_direction"].title
    known = apply.word_among(inputs, "crack_direction", title, (ALONG, ROUND))
    return known, *opened_tests(inputs)


def opened_tests(inputs: Inputs) -> tuple[Applicability, ...]:
    """Test that stress along the section opens a crack that runs round the shell."""
    return (mean_tension(inputs),) if runs_round(inputs) else ()
