r"""Through crack in skin that carries no pressure, away from edges and holes.

.. math:: K = F_s\,F_w\,\sigma\sqrt{\pi a},\qquad F_w = \sqrt{\sec(\pi a/W)}

The recorded stress is taken whole across the crack, whatever its direction: along the
load K would be next to nothing. A crack that is skew to it, or whose direction is not
known, gets the bound of a turning crack on top; so does any crack in a shear panel,
whose largest principal stress is the shear stress. W is the panel's, or twice the
distance of the crack's middle from the nearest edge or joint if that is less.

Residual strength is the smallest of fracture, net-section yield (stricter than plastic
collapse on flow stress for a crack in the middle) and the short-crack line.
"""

from __future__ import annotations

import math
from dataclasses import replace

from repairs.analysis.growth.path import CrackPath
from repairs.analysis.inputs import Inputs
from repairs.analysis.intensity.skew import TANGENTIAL, skew_bound
from repairs.analysis.loads import panel_loads
from repairs.analysis.loads.longitudinal import (
    LONGITUDINAL_INPUTS,
    longitudinal_loads,
    longitudinal_needed,
    reach_needed,
)
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods.crack_case import (
    SKIN_INPUTS,
    alone,
    away_from_edges,
    crack_needed,
    evaluated,
    in_sheet,
    mean_tension,
    reach_of,
    spectrum_reach,
    stiffener_whole,
    tips_clear,
)
from repairs.analysis.methods.sheet import Sheet, sheet_of
from repairs.analysis.note import Note
from repairs.analysis.types import Applicability, Grade, Reference, Result, Use

REQUIRED: tuple[str, ...] = (*SKIN_INPUTS, "panel_length")
STRAIGHT = ("longitudinal", "circumferential")
IN_SHEAR = ("shear", "torsion")
LIGAMENT_RULE = "one crack length"
LIGAMENT = Reference(
    "company rule of this program, not published: a tip one crack length from the next "
    "boundary; compounding of stronger interactions is warned of in public notes",
    Grade.RECORDED,
)
ACROSS = "The recorded stress is taken whole across the crack, whatever its direction."
ANY_DIRECTION = (
    "Direction of the crack to the stress not known: the largest K of any direction."
)


def around(inputs: Inputs) -> bool:
    """Return whether the crack runs round a shell whose axial stress is recorded."""
    return (
        inputs.word("crack_direction") == "circumferential"
        and "limit_flight_stress" not in inputs
        and any(name in inputs for name in LONGITUDINAL_INPUTS)
    )


def loads_needed(inputs: Inputs) -> tuple[str, ...]:
    """Return the names of the load inputs this crack needs."""
    if around(inputs):
        return (*longitudinal_needed(inputs), *reach_needed(inputs))
    return panel_loads.recorded_needed(inputs)


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs for a use."""
    return REQUIRED + loads_needed(inputs) + crack_needed(inputs, use)


def kind_is_not(inputs: Inputs, barred: tuple[str, ...]) -> Applicability:
    """Test the kind of load; none recorded is taken as tension, which is the worst."""
    kind = inputs.word("load_kind")
    shown = kind.replace("_", " ") if kind else "not recorded, taken as tension"
    limit = f"not {' or '.join(barred)}"
    return Applicability("kind of load", shown, limit, kind not in barred)


def opened(inputs: Inputs) -> Applicability:
    """Test that a flight opens the crack at all."""
    if around(inputs):
        return mean_tension(inputs)
    top = panel_loads.largest_stress(inputs)
    return apply.above("largest stress of a flight across the crack", top, 0.0, "MPa")


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        apply.word_is(inputs, "pressurised", "panel is pressurised", "no"),
        away_from_edges(inputs),
        alone(inputs, use),
        stiffener_whole(inputs),
        kind_is_not(inputs, ("compression",)),
        tips_clear(inputs, use, lambda a: 2 * a, LIGAMENT_RULE),
        opened(inputs),
    )


def loads_of(inputs: Inputs, note: Note) -> PanelLoads:
    """Write down and return the loads across the crack."""
    if around(inputs):
        return longitudinal_loads(inputs, note, spectrum_reach(inputs))
    return panel_loads.panel_loads(inputs, note)


def skew_of(inputs: Inputs, note: Note) -> float:
    """Write down and return the factor on K of a direction not across the stress."""
    shear = inputs.word("load_kind") in IN_SHEAR
    if not shear and inputs.word("crack_direction") in STRAIGHT:
        note.text(ACROSS)
        return 1.0
    ratio = -1.0 if shear else 0.0
    bound = skew_bound(ratio)
    note.step("F_s", ANY_DIRECTION, f"S₂/S₁ = {ratio:g}", bound, "-", TANGENTIAL)
    return bound


def prepared(inputs: Inputs, note: Note) -> tuple[Sheet, CrackPath]:
    """Write loads and sheet down; return the sheet and the path of a crack in it."""
    found = loads_of(inputs, note)
    sheet = sheet_of(inputs, note, inputs.number("thickness").value)
    room, what = reach_of(inputs, lambda distance: 2 * distance)
    if room < sheet.width:
        note.step("W", f"twice the distance to {what}, less than W", "", room, "mm")
        sheet = replace(sheet, width=room)
    sheet = replace(sheet, skew=skew_of(inputs, note))
    reach = reach_of(inputs, lambda distance: distance / 3)
    if math.isfinite(reach[0]):
        words = f"followed to {LIGAMENT_RULE} from {reach[1]}"
        note.step("", words, "", None, "", LIGAMENT)
    return sheet, sheet.path(found, inputs, None, reach=reach)


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the crack, or skin without known crack; the tests have passed."""
    sheet, path = prepared(inputs, note)
    return evaluated(inputs, use, note, draft, in_sheet(inputs, note, sheet, path))
