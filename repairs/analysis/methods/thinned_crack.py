"""A crack in corroded skin: the plain crack's method on the thickness that is left.

The thickness left is taken of the whole panel, which a patch of corrosion is not:
stresses are raised by what is lost and bulging is that of the thinner sheet. Toughness
stays that of the whole sheet.
"""

from __future__ import annotations

from dataclasses import replace

from repairs.analysis.errors import within
from repairs.analysis.growth.path import CrackPath
from repairs.analysis.inputs import Inputs
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods.crack_case import evaluated, in_sheet
from repairs.analysis.methods.section_left import as_found, needed
from repairs.analysis.methods.sheet import LONGEST_SHELL_PARAMETER, Sheet
from repairs.analysis.methods.stop_drilled import plain_method
from repairs.analysis.note import Note
from repairs.analysis.strength import residual as rs
from repairs.analysis.types import Applicability, Result, Use

THINNED_INPUTS = ("remaining_thickness", "gauge_uncertainty")
WHOLE_PANEL = (
    "The thickness left is taken of the whole panel; toughness is that of the whole "
    "sheet."
)
ON_LEFT = "on the thickness left"
BULGING_ENDS = "the range of the bulging factor on the thickness left"
A_THICKNESS = "corroded skin has some thickness left"


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs: the plain crack's, and what is left."""
    plain = plain_method(inputs).required(inputs, use)
    clad = ("clad", *needed(inputs))
    return tuple(dict.fromkeys((*plain, *THINNED_INPUTS, *clad)))


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the plain crack's tests, and that this one starts in corrosion."""
    plain: tuple[Applicability, ...] = plain_method(inputs).tests(inputs, use)
    origin = apply.word_is(
        inputs, "crack_origin", "crack starts in corrosion", "corrosion_pit"
    )
    return (*plain, as_found(inputs, use), origin)


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the crack on the thickness left; the tests have passed."""
    sheet, path = plain_method(inputs).prepared(inputs, note)
    left = thickness_left(inputs, note)
    note.text(WHOLE_PANEL)
    thin = replace(sheet, thickness=left)
    thinned = on_thickness(thin, path, left / inputs.number("thickness").value)
    return evaluated(inputs, use, note, draft, in_sheet(inputs, note, thin, thinned))


def thickness_left(inputs: Inputs, note: Note) -> float:
    """Write down and return the thickness that carries load [mm]."""
    left = note.given(
        "t_min", "smallest thickness measured", inputs.number(THINNED_INPUTS[0])
    )
    left -= note.given(
        "u_t", "uncertainty of the gauge", inputs.number(THINNED_INPUTS[1])
    )
    if inputs.word("clad") == "yes":
        left -= note.given(
            "t_cl", "cladding of one side, not counted", inputs.number("clad_thickness")
        )
    nominal = inputs.number("thickness").value
    within("Thickness left, mm", left, 0.01, nominal, A_THICKNESS, "Measure it again.")
    note.step("t_left", "t_min − u_t − t_cl", "", left, "mm")
    return left


def on_thickness(thin: Sheet, path: CrackPath, share: float) -> CrackPath:
    """Return a path on the thickness left: raised stresses, more bulging."""
    largest, end = path.largest, path.end_of_method
    if thin.radius is not None:
        longest = LONGEST_SHELL_PARAMETER * (thin.radius * thin.thickness) ** 0.5
        largest, end = min((largest, end), (longest, BULGING_ENDS))
    return replace(
        path,
        factor=thin.factor,
        strength=lambda a: rs.weakest(thin.candidates(a)),
        loads=path.loads.on_section(share),
        largest=largest,
        end_of_method=end,
        section=ON_LEFT,
    )
