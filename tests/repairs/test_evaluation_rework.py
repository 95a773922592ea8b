"""Corrosion, scratches, wear, nicks and dents: from the record to a result."""

from __future__ import annotations

import json

import pytest

from fleet.services.materials import demo_values_load
from repairs.measured import Typed
from repairs.models import Finding
from repairs.selectors.latest import measured_of
from repairs.services.evaluation_gathered import Choice
from repairs.services.evaluation_prepare import Prepared, default_use
from repairs.services.evaluation_prepare import evaluation_prepare as prepare
from tests.factories import FIXTURES, NOW, TODAY
from tests.record_rows import World, found, world_make

pytestmark = pytest.mark.django_db
DEPTH = Typed("depth_mm", "0.20 ± 0.05 mm")
SIZE = (Typed("length_mm", "0.1 in"), Typed("width_mm", "0.1 in"), DEPTH)
AS_FOUND = {
    "corrosion": (*SIZE, Typed("corrosion_type", "pitting")),
    "scratch": (Typed("length_mm", "1 in"), DEPTH, Typed("direction", "longitudinal")),
    "gouge": (Typed("length_mm", "1 in"), DEPTH, Typed("root_radius_mm", "1 mm")),
    "wear": (Typed("length_mm", "1 in"), DEPTH, Typed("cause_removed", "yes")),
}
METHODS = {
    "corrosion": "corrosion-as-found",
    "scratch": "scratch-as-found",
    "gouge": "scratch-as-found",
    "wear": "wear-as-found",
}


@pytest.fixture
def world() -> World:
    made = world_make()
    demo_values_load(
        path=FIXTURES / "materials.toml",
        operator=made.operator,
        person=made.assessor,
        second_person=made.approver,
        on=TODAY,
        actor=made.engineer,
        at=NOW,
    )
    return made


def damaged(world: World, damage: str, typed: tuple[Typed, ...]) -> Finding:
    return found(
        world,
        damage_type=damage,
        typed=typed,
        element="skin",
        place_entered="STA 630, 5 in below S-8R",
    )


def prepared(finding: Finding) -> Prepared:
    choice = Choice(default_use(finding))
    return prepare(subject=finding, choice=choice, as_of=TODAY)


def words(result: Prepared) -> str:
    return json.dumps([result.result.outcome, *result.result.warnings])


@pytest.mark.parametrize("damage", AS_FOUND)
def test_damage_as_found_has_lives_and_no_interval(world, damage):
    made = prepared(damaged(world, damage, AS_FOUND[damage]))
    assert made.result.outcome == "computed", words(made)
    assert made.result.method == METHODS[damage]
    assert made.result.use == "found_damage"
    assert {life.base for life in made.result.lives} == {"from finding"}
    assert made.result.threshold is made.result.repeat is None


def test_without_the_uncertainty_of_its_depth_a_scratch_is_incomplete(world):
    bare = (Typed("length_mm", "1 in"), Typed("depth_mm", "0.2 mm"))
    made = prepared(damaged(world, "scratch", bare))
    assert [m.name for m in made.result.missing] == ["damage_depth_uncertainty"]


def test_a_nick_in_pressurised_skin_is_refused_with_the_reason(world):
    nick = (DEPTH, Typed("length_mm", "2 mm"), Typed("at", "edge"))
    made = prepared(damaged(world, "nick", nick))
    assert made.result.outcome == "not_covered"
    assert "panel is pressurised, yes; required no" in made.result.warnings[0]


def test_a_nicks_blend_and_strip_are_read(world):
    nick = (
        DEPTH,
        Typed("length_mm", "2 mm"),
        Typed("at", "edge"),
        Typed("strip_width_mm", "100 mm"),
        Typed("blend_depth_mm", "0.5 mm"),
        Typed("remaining_edge_distance_mm", "9 mm"),
    )
    made = prepared(damaged(world, "nick", nick))
    assert made.inputs.number("strip_width").value == pytest.approx(100)
    assert made.inputs.number("blend_depth").value == pytest.approx(0.5)
    assert made.inputs.number("remaining_edge_distance").value == pytest.approx(9)


def test_a_crack_from_corrosion_is_that_of_the_thickness_left(world):
    crack = (
        Typed("length_mm", "0.94 ± 0.02 in"),
        Typed("direction", "longitudinal"),
        Typed("origin", "corrosion_pit"),
    )
    finding = damaged(world, "crack", crack)
    bare = prepared(finding)
    unanswered = "Crack in corroded skin is not answered"
    assert any(unanswered in reason for reason in bare.result.barred)
    thin = damaged(world, "crack", (*crack, Typed("remaining_thickness_mm",
                                                  "1.20 ± 0.02 mm")))  # fmt: skip
    made = prepared(thin)
    assert measured_of(thin).values["remaining_thickness_mm"].value == 1.2
    assert made.result.outcome == "computed", words(made)
    assert made.result.margin_residual < bare.result.margin_residual
    assert not any("not answered" in b for b in made.result.barred)


@pytest.mark.parametrize("damage", ["lightning", "heat", "crease"])
def test_screened_damage_says_why_and_what_instead(world, damage):
    typed = {
        "lightning": (Typed("diameter_mm", "4 mm"), Typed("depth_mm", "0.2 mm")),
        "heat": SIZE[:2],
        "crease": (Typed("length_mm", "5 in"), Typed("height_mm", "1 mm")),
    }[damage]
    made = prepared(damaged(world, damage, typed))
    assert made.result.outcome == "not_covered"
    assert "approval" in " ".join(made.result.warnings)
