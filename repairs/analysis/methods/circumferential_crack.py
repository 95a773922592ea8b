r"""Through crack round a pressurised skin: axial stress of pressure and of bending.

.. math:: K = F_w\,\sigma_x\sqrt{\pi a},\qquad
          \sigma_x = \frac{pR}{2t} + \sigma_{bending}

Never from pressure alone: the panel must carry its limit bending stress, its 1 g
stress, and how far a flight's stresses reach from it. Such a crack does not bulge; the
linear shell factor is written beside. No relief by stringers, which are taken as whole
where the crack crosses them.
"""

from __future__ import annotations

from repairs.analysis.errors import OutOfRangeError
from repairs.analysis.growth.path import CrackPath
from repairs.analysis.inputs import Inputs
from repairs.analysis.intensity.bulging import (
    CIRCUMFERENTIAL,
    circumferential_factor,
    shell_parameter,
)
from repairs.analysis.loads.longitudinal import (
    longitudinal_loads,
    longitudinal_needed,
    reach_needed,
)
from repairs.analysis.loads.panel_loads import PRESSURE_INPUTS
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
from repairs.analysis.types import Applicability, HalfLength, Result, Use

REQUIRED: tuple[str, ...] = (
    *SKIN_INPUTS,
    "crack_direction",
    "panel_width",
    *PRESSURE_INPUTS,
)
NO_BULGING = (
    "A crack round the shell does not bulge as one along it does: no bulging factor."
)


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs for a use."""
    loads = (*longitudinal_needed(inputs), *reach_needed(inputs))
    every = (*REQUIRED, *loads, *crack_needed(inputs, use))
    return tuple(dict.fromkeys(every))


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    keep = clearance(inputs)
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        apply.word_is(inputs, "pressurised", "panel is pressurised", "yes"),
        apply.word_is(
            inputs, "crack_direction", "direction of the crack", "circumferential"
        ),
        away_from_edges(inputs),
        alone(inputs, use),
        stiffener_whole(inputs),
        tips_clear(inputs, use, lambda a: keep, clearance_rule(inputs)),
        thin_shell(inputs),
        mean_tension(inputs),
    )


def prepared(inputs: Inputs, note: Note) -> tuple[Sheet, CrackPath]:
    """Write loads and sheet down; return the sheet and the path of a crack in it."""
    found = longitudinal_loads(inputs, note, spectrum_reach(inputs))
    note.given("c_min", "clearance in √(R t)", inputs.number("clearance_multiple"))
    thickness = inputs.number("thickness").value
    sheet = sheet_of(inputs, note, thickness, width_from="panel_width", curved=False)
    note.text(NO_BULGING)
    keep = clearance(inputs) or 0.0
    reach = reach_of(inputs, lambda distance: distance - keep)
    return sheet, sheet.path(found, inputs, None, reach=reach)


def write_shell_beside(inputs: Inputs, use: Use, note: Note) -> None:
    """Write the linear shell factor of such a crack down, for comparison."""
    length = half_length_of(inputs, use) or 0.0
    radius, thickness = (inputs.number(n).value for n in ("radius", "thickness"))
    parameter = shell_parameter(HalfLength(length), radius, thickness)
    try:
        factor = circumferential_factor(parameter)
    except OutOfRangeError:
        return
    note.beside(
        "F_sh",
        "linear shell factor of a crack round a cylinder, not used",
        f"a / √(R t) = {parameter:.3f}",
        factor,
        "-",
        CIRCUMFERENTIAL,
    )


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the crack, or skin without known crack; the tests have passed."""
    sheet, path = prepared(inputs, note)
    write_shell_beside(inputs, use, note)
    return evaluated(inputs, use, note, draft, in_sheet(inputs, note, sheet, path))
