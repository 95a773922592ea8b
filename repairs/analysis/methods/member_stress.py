"""Stresses of a member in tension or bending, from what an engineer states of it."""

from __future__ import annotations

from repairs.analysis.errors import within
from repairs.analysis.inputs import SPECS, Inputs
from repairs.analysis.loads.panel_loads import (
    PanelLoads,
    flight_needed,
    read_flight,
    write_requirements,
)
from repairs.analysis.loads.shell import unpressurised_requirements
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods.member_common import is_member
from repairs.analysis.note import Note
from repairs.analysis.strength.section import SECTION
from repairs.analysis.types import Applicability, GrossStress, Use

TENSION, BENDING = "tension", "bending"
STRESSED = {
    TENSION: ("member_limit_force", "member_area", "member_lost_area"),
    BENDING: ("member_limit_moment", "member_inertia", "member_extreme_fibre"),
}


def needed(inputs: Inputs) -> tuple[str, ...]:
    """Return the inputs the stresses of this load kind need."""
    stressed = STRESSED.get(inputs.word("load_kind") or "", ())
    return (*stressed, "ultimate_factor", *flight_needed(inputs))


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Test what every crack in a member must be: a crack, pulled open."""
    failed = inputs.word("member_failed") == "yes"
    whole = apply.word_is(inputs, "member_failed", "member has failed", "no")
    crack = apply.word_is(inputs, "damage_type", SPECS["damage_type"].title, "crack")
    return (
        is_member(inputs),
        *((crack,) if use is Use.FOUND_DAMAGE else ()),
        *((whole,) if failed else ()),
        apply.word_among(
            inputs, "load_kind", SPECS["load_kind"].title, tuple(STRESSED)
        ),
    )


def member_loads(inputs: Inputs, use: Use, note: Note) -> PanelLoads:
    """Write the member's stresses down: limit, ultimate and the cycle of a flight.

    A crack takes no area: its K is on the stress beside it. Any other loss does.
    """
    stress = _limit_stress(inputs, use, note)
    factor = note.given(
        "k_ult", "factor of static ultimate", inputs.number("ultimate_factor")
    )
    flown = read_flight(inputs, note)
    residual, ultimate = unpressurised_requirements(stress, factor)
    found = PanelLoads(residual, ultimate, flown.cycle, flown)
    write_requirements(found, note)
    return found


def _limit_stress(inputs: Inputs, use: Use, note: Note) -> GrossStress:
    """Return the largest limit stress of the flange or web [MPa]."""

    def given(symbol: str, name: str) -> float:
        return note.given(symbol, SPECS[name].title, inputs.number(name))

    if inputs.word("load_kind") == TENSION:
        force, area = given("P", "member_limit_force"), given("A", "member_area")
        lost = given("ΔA", "member_lost_area") if use is Use.NO_KNOWN_CRACK else 0.0
        within("Limit force in tension, N", force, 1e-9, 1e12, "tension is positive")
        stress, formula = force / (area - lost), "P / A"
    else:
        moment = given("M", "member_limit_moment")
        inertia, fibre = (
            given("I", "member_inertia"),
            given("c", "member_extreme_fibre"),
        )
        stress, formula = abs(moment) * fibre / inertia, "M c / I, over the whole width"
    note.step("σ_lim", formula, "", stress, "MPa", SECTION)
    return GrossStress(stress)
