r"""A row of cracked holes: lead crack, ligament and section, whichever gives way first.

.. math:: S = \min\Bigl(\frac{K_c}{F\sqrt{\pi c}},\;
          S_y\sqrt{\frac{2L}{a\beta_a^2 + l\beta_l^2}},\;
          S_y\,\frac{p - D - 2c}{p}\Bigr)

Every hole counts as cracked on both sides to the largest size, in a row without end:
a bound from above on what several cracks, or an unknown number of them, can do. L is
from tip to tip. Once a crack is longer than the pitch it is the lead crack.
"""

from __future__ import annotations

from dataclasses import replace

from repairs.analysis.growth.path import Start
from repairs.analysis.inputs import SPECS, Inputs
from repairs.analysis.inspection.flaws import FlawLocation, rogue_flaw
from repairs.analysis.intensity.loaded_hole import CrackedHole
from repairs.analysis.intensity.rows import HOLE_ROW
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods import hole_loads
from repairs.analysis.methods.crack_case import CrackCase, evaluated
from repairs.analysis.methods.hole_geometry import hole_in_sheet, write_strength
from repairs.analysis.methods.loaded_hole import with_bearing, without_bearing
from repairs.analysis.methods.row_geometry import (
    LeadRow,
    Row,
    correction_for,
    write_lead,
    write_link_up,
)
from repairs.analysis.note import Note
from repairs.analysis.strength.residual import Strength
from repairs.analysis.types import Applicability, Result, Use

COUNT_UNKNOWN = (
    "Number of cracks not recorded: every hole of the row is taken as cracked on both "
    "sides to the largest size, a row without end."
)
COUNT_KNOWN = (
    "{count:.0f} cracks recorded: each is taken as large as the largest, on both sides "
    "of its hole, in a row without end."
)
FLAW_EVERYWHERE = (
    "Sister rows: the assumed flaw is taken at every hole, through the thickness and "
    "on both sides."
)
COUNTED = ("life_base", "accumulated_cycles")
GEOMETRY = (
    "element",
    "pressurised",
    "hole_load",
    "surroundings",
    "thickness",
    "hole_diameter",
    "hole_pitch",
    "toughness",
    "growth_law",
    "yield_strength",
)
LEAD_INPUTS = ("crack_length_uncertainty", "ligament")


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs.

    Either the pitch, for the bound, or a count of one, for which there is no row.
    """
    count = () if "hole_pitch" in inputs else ("crack_count",)
    loaded = ("load_transfer", "edge_distance")
    pin = loaded if inputs.word("hole_load") == "loaded" else ()
    direction = ("crack_direction",) if inputs.word("pressurised") == "yes" else ()
    sizes = COUNTED
    if use is Use.FOUND_DAMAGE:
        width = width_name(inputs)
        lead = (*LEAD_INPUTS, width) if is_lead(inputs, use) else ()
        sizes = ("edge_crack_length", "edge_crack_uncertainty", *lead)
    loads = hole_loads.needed(inputs)
    return tuple(dict.fromkeys((*GEOMETRY, *count, *pin, *direction, *loads, *sizes)))


def width_name(inputs: Inputs) -> str:
    """Return the panel's size along the crack: its length, or its width round it."""
    return "panel_width" if hole_loads.runs_round(inputs) else "panel_length"


def is_lead(inputs: Inputs, use: Use) -> bool:
    """Return whether the crack found is longer than the pitch."""
    length, pitch = inputs.maybe("crack_length"), inputs.maybe("hole_pitch")
    known = use is Use.FOUND_DAMAGE and length is not None and pitch is not None
    return bool(known and length and pitch and length.value > pitch.value)


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    del use
    diameter, pitch = inputs.maybe("hole_diameter"), inputs.maybe("hole_pitch")
    share = diameter.value / pitch.value if diameter and pitch else None
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        _several(inputs),
        apply.word_among(
            inputs, "hole_load", SPECS["hole_load"].title, ("open", "loaded")
        ),
        apply.at_most("hole diameter over pitch", share, 0.5, ""),
        *hole_loads.direction_tests(inputs),
    )


def _several(inputs: Inputs) -> Applicability:
    count = inputs.maybe("crack_count")
    test, wanted = "number of cracks in the row", "at least 2, or not known"
    if count is None:
        known = True if "hole_pitch" in inputs else None
        return Applicability(test, apply.NOT_RECORDED, wanted, known)
    return Applicability(test, f"{count.value:.0f}", wanted, count.value >= 2)


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the row; the tests have passed."""
    found = hole_loads.loads_at_hole(inputs, note)
    row = _read(inputs, note)
    c = 0.0
    if use is Use.FOUND_DAMAGE:
        c = _largest(inputs, note)
        row = _with_ligament(inputs, note, row, c)
    if is_lead(inputs, use):
        case = _lead(inputs, note, row, c, found)
    else:
        case = _alike(inputs, note, row, c, found)
    done = evaluated(inputs, use, note, draft, case)
    open_ = row.hole.at.bearing and not row.hole.bearing_strength
    return without_bearing(inputs, done) if open_ else done


def _largest(inputs: Inputs, note: Note) -> float:
    measured = note.given(
        "c", "largest crack from its hole edge", inputs.number("edge_crack_length")
    )
    more = note.given("u", "its uncertainty", inputs.number("edge_crack_uncertainty"))
    return measured + more


def _with_ligament(inputs: Inputs, note: Note, row: Row, c: float) -> Row:
    """Return the row with its measured ligament, if there is one."""
    ligament = inputs.maybe("ligament")
    if ligament is None:
        return row
    note.given("L", "ligament from tip to tip, as measured", ligament)
    return replace(row, measured_at=c, measured=ligament.value)


def _alike(
    inputs: Inputs, note: Note, row: Row, c: float, found: PanelLoads
) -> CrackCase:
    """Return equal cracks at every hole: those measured, or the assumed flaw."""
    path = row.path(found, inputs)

    def write(length: float) -> Strength:
        strength = write_strength(row.hole, path, note, length)
        write_link_up(row, note, length)
        return strength

    return CrackCase(path, write, lambda: c, Start, lambda: _assumed(note, row))


def _assumed(note: Note, row: Row) -> Start:
    """Return the flaw assumed at every hole of a row."""
    flaw = rogue_flaw(FlawLocation.HOLE, row.hole.thickness)
    note.step("c₀", f"assumed {flaw.kind} flaw", "", flaw.length, "mm", flaw.reference)
    note.warn(FLAW_EVERYWHERE)
    return Start(flaw.length)


def _lead(
    inputs: Inputs, note: Note, row: Row, c: float, found: PanelLoads
) -> CrackCase:
    """Return a lead crack longer than the pitch, with cracks c ahead of it."""
    length = note.given("2a", "lead crack, tip to tip", inputs.number("crack_length"))
    more = note.given("u", "its uncertainty", inputs.number("crack_length_uncertainty"))
    along = width_name(inputs)
    width = note.given("W", SPECS[along].title, inputs.number(along))
    a = (length + more) / 2
    lead = LeadRow(row, width, a, c, inputs.number("ligament").value)
    path = lead.path(found, inputs)
    return CrackCase(
        path,
        lambda size: write_lead(lead, path, note, size),
        lambda: a,
        Start,
        lambda: Start(a),
    )


def _read(inputs: Inputs, note: Note) -> Row:
    """Write the row's data down and return it."""
    count = inputs.maybe("crack_count")
    words = COUNT_KNOWN.format(count=count.value) if count else COUNT_UNKNOWN
    note.warn(words)
    diameter = note.given("D", "hole diameter", inputs.number("hole_diameter"))
    pitch = note.given("p", SPECS["hole_pitch"].title, inputs.number("hole_pitch"))
    transfer = 0.0
    if inputs.word("hole_load") == "loaded":
        transfer = note.given(
            "λ", SPECS["load_transfer"].title, inputs.number("load_transfer")
        )
    at = CrackedHole(diameter, pitch, 2, transfer, pitch)
    hole = hole_in_sheet(inputs, note, at)
    if transfer:
        hole = with_bearing(inputs, note, hole)
    note.step("F", "row as strips one pitch wide", "", None, "", HOLE_ROW)
    return Row(hole, correction_for(inputs, note))
