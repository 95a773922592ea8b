r"""Longitudinal through crack in plain pressurised skin.

.. math:: K = F_b(l)\,F_w\,\frac{pR}{t}\sqrt{\pi a},\qquad l = a/\sqrt{Rt}

with the handbook's bulging factor and the secant width correction; residual strength
is the smallest of fracture, net-section yield and the short-crack line. Growth is one
pressure cycle a flight. No relief by frames, tear straps or stringers.

Valid for skin between frames, joint rows, cut-outs and repairs, both tips at least a
stated multiple of sqrt(R t) from any of them; a growing crack is followed no further
than to where that ceases to hold.
"""

from __future__ import annotations

from repairs.analysis.growth.path import CrackPath
from repairs.analysis.inputs import Inputs
from repairs.analysis.loads import panel_loads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods.crack_case import (
    SKIN_INPUTS,
    alone,
    away_from_edges,
    crack_needed,
    evaluated,
    in_sheet,
)
from repairs.analysis.methods.sheet import Sheet, sheet_of
from repairs.analysis.note import Note
from repairs.analysis.surroundings import ObstacleKind
from repairs.analysis.types import Applicability, Result, Use

REQUIRED: tuple[str, ...] = (
    *SKIN_INPUTS,
    "crack_direction",
    "panel_length",
    *panel_loads.PRESSURE_INPUTS,
)


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs for a use."""
    return REQUIRED + crack_needed(inputs, use)


def clearance(inputs: Inputs) -> float | None:
    """Return the distance a tip must keep [mm], None while R or t is unknown."""
    radius, thickness = inputs.maybe("radius"), inputs.maybe("thickness")
    if radius is None or thickness is None:
        return None
    multiple = inputs.number("clearance_multiple").value
    return float(multiple * (radius.value * thickness.value) ** 0.5)


def clearance_rule(inputs: Inputs) -> str:
    """Return the rule behind the clearance, as it is shown."""
    return f"{inputs.number('clearance_multiple').value:g} sqrt(R t)"


def thin_shell(inputs: Inputs) -> Applicability:
    """Test that the shell is thin."""
    radius, thickness = inputs.maybe("radius"), inputs.maybe("thickness")
    slender = radius.value / thickness.value if radius and thickness else None
    return apply.at_least("thin shell, radius over thickness", slender, 20, "")


def shell_tests(inputs: Inputs) -> tuple[Applicability, ...]:
    """Test the distances and the shape a plain-shell crack solution needs."""
    around, keep, rule = (
        inputs.surroundings(),
        clearance(inputs),
        clearance_rule(inputs),
    )
    return (
        *(apply.clear_of(around, kind, keep, rule) for kind in ObstacleKind),
        apply.inside_one_bay(around),
        thin_shell(inputs),
    )


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        apply.word_is(inputs, "pressurised", "panel is pressurised", "yes"),
        apply.word_is(
            inputs, "crack_direction", "direction of the crack", "longitudinal"
        ),
        away_from_edges(inputs),
        alone(inputs, use),
        *shell_tests(inputs),
    )


def prepared(inputs: Inputs, note: Note) -> tuple[Sheet, CrackPath]:
    """Write loads and sheet down; return the sheet and the path of a crack in it."""
    found = panel_loads.panel_loads(inputs, note)
    note.given("c_min", "clearance in √(R t)", inputs.number("clearance_multiple"))
    sheet = sheet_of(inputs, note, inputs.number("thickness").value)
    return sheet, sheet.path(found, inputs, clearance(inputs))


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the crack, or skin without known crack; the tests have passed."""
    sheet, path = prepared(inputs, note)
    return evaluated(inputs, use, note, draft, in_sheet(inputs, note, sheet, path))
