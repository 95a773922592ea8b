r"""An open or trimmed hole in a strip: net section, stress-life, cracks from the hole.

.. math:: K_{tn} = 3 - 3.13x + 3.66x^2 - 1.53x^3,\qquad x = D/W

on net stress. One crack or two equal ones; for a pressurised skin the bulging of hole
and cracks together is counted in. A hole that a fastener loads is another method.
"""

from __future__ import annotations

from repairs.analysis.growth.path import with_margins
from repairs.analysis.inputs import Inputs
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods import hole_loads
from repairs.analysis.methods.hole_geometry import (
    BEARING,
    GEOMETRY,
    Hole,
    crack_tests,
    cracked,
    read_hole,
    slender_test,
    state_needed,
    strip_name,
)
from repairs.analysis.methods.hole_growth import with_assumed_flaw, with_known_crack
from repairs.analysis.note import Note
from repairs.analysis.strength import residual as rs
from repairs.analysis.stress_life import left as fatigue
from repairs.analysis.stress_life.flown import flown_life_left
from repairs.analysis.stress_life.severity import HOLE_KT, hole_kt
from repairs.analysis.surroundings import ObstacleKind
from repairs.analysis.types import Applicability, GrossStress, Result, Use

NET_ULTIMATE = "net section, ultimate"
UNCRACKED = ("life_base", "accumulated_cycles", *fatigue.INPUTS)


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs; a known crack needs its sizes."""
    more = state_needed(inputs, use, UNCRACKED)
    names = (*GEOMETRY, strip_name(inputs), *hole_loads.needed(inputs), *more)
    return tuple(dict.fromkeys(names))


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        apply.word_is(inputs, "hole_load", "load of a fastener on the hole", "open"),
        apply.clear_of(
            inputs.surroundings(), ObstacleKind.JOINT, 1.0, "not in a joint row"
        ),
        slender_test(inputs),
        *crack_tests(inputs, use),
    )


def cracks_of(inputs: Inputs, use: Use) -> int:
    """Return how many cracks start at the hole: an assumed flaw is on one side."""
    return 2 if cracked(inputs, use) and inputs.word("both_sides") == "yes" else 1


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the hole, cracked or not; the tests have passed."""
    found = hole_loads.loads_at_hole(inputs, note)
    hole = read_hole(inputs, note, cracks_of(inputs, use))
    path = hole.path(found, inputs)
    if cracked(inputs, use):
        return with_known_crack(inputs, note, hole, path, draft)
    draft = static(inputs, note, found, hole, draft)
    kt = hole_kt(hole.at.diameter, hole.at.width)
    note.step(
        "Kt",
        "3 − 3.13x + 3.66x² − 1.53x³, on net stress",
        f"x = D/W = {hole.gone:.4f}",
        kt,
        "-",
        HOLE_KT,
    )
    net = found.on_section(1 - hole.gone).flown
    left = flown_life_left(inputs, note, kt, net, found.flown)
    return with_assumed_flaw(inputs, use, note, hole, path, left, draft)


def static(
    inputs: Inputs, note: Note, found: PanelLoads, hole: Hole, draft: Result
) -> Result:
    """Fill static margins of the net section, and of bearing where it is loaded."""
    ultimate = note.given(
        "F_tu", "tension ultimate strength", inputs.number("tension_strength")
    )
    gross = GrossStress(ultimate * (1 - hole.gone))
    note.step(
        "S",
        "F_tu (1 − D/W), gross",
        f"{ultimate:.1f} (1 − {hole.at.diameter:.2f} / {hole.at.width:.1f})",
        gross,
        "MPa",
    )
    candidates: dict[str, GrossStress | None] = {NET_ULTIMATE: gross}
    if hole.at.bearing:
        candidates[BEARING] = hole.bearing_limit()
    return with_margins(found, note, rs.weakest(candidates), draft)
