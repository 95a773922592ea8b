"""Damage in structural members, from the record and what an engineer states."""

from __future__ import annotations

import json

import pytest

from repairs.analysis.types import Use
from repairs.measured import Typed
from repairs.models import Evaluation, Finding
from repairs.services.evaluation_inputs import Choice
from repairs.services.evaluations import evaluation_data, evaluation_make
from repairs.services.stated import Document, input_state
from tests.factories import NOW, TODAY
from tests.record_rows import World, found, world_make

pytestmark = pytest.mark.django_db
CRACK = (
    Typed("length_mm", "4.0 ± 0.5 mm"),
    Typed("direction", "longitudinal"),
    Typed("origin", "edge"),
)
TENSION = {
    "load_kind": "tension",
    "member_failed": "no",
    "member_area": "130 mm2",
    "member_lost_area": "10 mm2",
    "member_limit_force": "18000 N",
    "member_yield": "400 MPa",
    "member_ultimate": "470 MPa",
}


@pytest.fixture
def world() -> World:
    return world_make()


def stringer(world: World, **changes: object) -> Finding:
    entry: dict[str, object] = {
        "damage_type": "crack",
        "typed": CRACK,
        "element": "stringer",
        "place_entered": "STA 630, S-8R",
    }
    return found(world, **(entry | changes))


def state(world: World, finding: Finding, **texts: str) -> None:
    for name, entered in texts.items():
        input_state(
            subject=finding,
            name=name,
            entered=entered,
            document=Document("STRESS-REPORT-9", "31", "B"),
            actor=world.engineer,
            at=NOW,
            on=TODAY,
        )


def evaluated(world: World, finding: Finding) -> Evaluation:
    return evaluation_make(
        subject=finding,
        choice=Choice(Use.FOUND_DAMAGE),
        as_of=TODAY,
        actor=world.engineer,
        at=NOW,
    )


def test_a_cracked_stringer_asks_for_its_own_numbers_not_the_skins(world):
    row = evaluated(world, stringer(world))
    assert row.outcome == "missing_input"
    inputs = evaluation_data(row)["inputs"]
    assert inputs["criticality"]["value"]
    for name in ("yield_strength", "toughness", "growth_law", "load_kind", "thickness"):
        assert name not in inputs, name
    missing = {m["name"]: m["where"] for m in json.loads(row.outputs)["missing"]}
    assert "stated input" in missing["load_kind"]


def test_stated_numbers_make_a_static_result_that_says_so(world):
    finding = stringer(world)
    state(world, finding, **TENSION)
    row = evaluated(world, finding)
    data = json.loads(row.outputs)
    assert row.outcome == "computed", data["warnings"]
    assert row.margin_ultimate == pytest.approx(470 / (1.5 * 18_000 / 120) - 1)
    assert any("Static only" in w for w in data["warnings"])
    assert row.threshold_cycles is row.repeat_cycles is None
    # The crack itself is not answered: no width, toughness or growth law is known.
    assert "Crack in a member's flange" in row.barred_reason


def test_a_member_of_the_panels_material_may_use_its_growth_law(world):
    finding = stringer(world)
    state(
        world,
        finding,
        **TENSION,
        member_of_panel_material="yes",
        member_width="30 mm",
        member_toughness="90 MPa√m",
        cycle_max_stress="70 MPa",
        cycle_ratio="0.1",
    )
    row = evaluated(world, finding)
    data = json.loads(row.outputs)
    assert row.outcome == "computed", data["warnings"]
    inputs = evaluation_data(row)["inputs"]
    assert "growth_law" in inputs
    assert inputs["yield_strength"]["value"] == pytest.approx(400)
    assert "STRESS-REPORT-9" in inputs["yield_strength"]["source"]
    assert row.life_cycles is not None
    assert row.life_base == "from finding"


def test_a_fairing_has_no_member_method(world):
    row = evaluated(world, stringer(world, element="fairing"))
    assert "member" not in row.method
