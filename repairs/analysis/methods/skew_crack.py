r"""Crack in pressurised skin that is diagonal or of unknown direction: a bound.

.. math:: K = F_s\,F_b(l)\,F_w\,\sigma_1\sqrt{\pi a}

The whole length is taken across the largest principal stress of the skin, with the
bulging of a crack along the shell and the bound of a turning crack. Axial, hoop and
shear stress must be recorded: without them nothing is computed.
"""

from __future__ import annotations

from dataclasses import replace

from repairs.analysis.growth.path import CrackPath
from repairs.analysis.inputs import Inputs
from repairs.analysis.intensity.skew import TANGENTIAL, skew_bound
from repairs.analysis.loads.longitudinal import REACH_INPUTS
from repairs.analysis.loads.panel_loads import PRESSURE_INPUTS
from repairs.analysis.loads.skew import SKEW_INPUTS, skew_loads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods.crack_case import (
    SKIN_INPUTS,
    alone,
    away_from_edges,
    crack_needed,
    evaluated,
    half_length_of,
    in_sheet,
    mean_tension,
    reach_of,
    spectrum_reach,
    stiffener_whole,
    tips_clear,
)
from repairs.analysis.methods.sheet import Sheet, sheet_of
from repairs.analysis.methods.skin_crack import clearance, clearance_rule, thin_shell
from repairs.analysis.note import Note
from repairs.analysis.types import Applicability, Result, Use

REQUIRED: tuple[str, ...] = (
    *SKIN_INPUTS,
    "panel_length",
    "panel_width",
    *PRESSURE_INPUTS,
    *SKEW_INPUTS,
    *REACH_INPUTS,
)
STRAIGHT = ("longitudinal", "circumferential")
BOUND = (
    "Conservative bound: the whole length across the largest principal stress, bulging "
    "as if along the shell, turned to the worst direction."
)


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs for a use."""
    return REQUIRED + crack_needed(inputs, use)


def direction(inputs: Inputs) -> Applicability:
    """Test that no better method is for the direction; an unknown one is meant here."""
    word = inputs.word("crack_direction") or "unknown"
    return Applicability(
        "direction of the crack", word, "diagonal or unknown", word not in STRAIGHT
    )


def between_frames(inputs: Inputs, use: Use) -> Applicability:
    """Test that no tip reaches a frame, whichever way the crack runs."""
    test, wanted = "inside one bay", "no tip at or beyond a frame"
    around, length = inputs.surroundings(), half_length_of(inputs, use)
    if around is None or length is None:
        return Applicability(test, apply.NOT_RECORDED, wanted, None)
    room = replace(around, half_along=length).frame_room()
    if room is None:
        return Applicability(test, "no frames round it", wanted, False)
    value = f"{room:.1f} mm from a frame of {around.bay_label}"
    return Applicability(test, value, wanted, room > 0)


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    keep = clearance(inputs)
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        apply.word_is(inputs, "pressurised", "panel is pressurised", "yes"),
        direction(inputs),
        away_from_edges(inputs),
        alone(inputs, use),
        stiffener_whole(inputs),
        tips_clear(inputs, use, lambda a: keep, clearance_rule(inputs)),
        between_frames(inputs, use),
        thin_shell(inputs),
        mean_tension(inputs),
    )


def prepared(inputs: Inputs, note: Note) -> tuple[Sheet, CrackPath]:
    """Write loads and sheet down; return the sheet and the path of a crack in it."""
    note.text(BOUND)
    found = skew_loads(inputs, note, spectrum_reach(inputs))
    note.given("c_min", "clearance in √(R t)", inputs.number("clearance_multiple"))
    smaller = min(
        ("panel_length", "panel_width"), key=lambda name: inputs.number(name).value
    )
    thickness = inputs.number("thickness").value
    sheet = sheet_of(inputs, note, thickness, width_from=smaller)
    bound = skew_bound(found.ratio)
    note.step(
        "F_s",
        "largest K of any direction over K across σ₁",
        f"S₂/S₁ = {found.ratio:.3f}",
        bound,
        "-",
        TANGENTIAL,
    )
    sheet = replace(sheet, skew=bound)
    keep, around = clearance(inputs) or 0.0, inputs.surroundings()
    ends = [reach_of(inputs, lambda distance: distance - keep)]
    if around is not None and around.bay is not None:
        middle = replace(around, half_along=0.0, obstacles=())
        ends.append(middle.largest_half_length(0.0))
    return sheet, sheet.path(found.panel, inputs, None, reach=min(ends))


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the crack, or skin without known crack; the tests have passed."""
    sheet, path = prepared(inputs, note)
    return evaluated(inputs, use, note, draft, in_sheet(inputs, note, sheet, path))
