"""Inputs stated from a document: read in their unit, bounded, replaced, taken back."""

from __future__ import annotations

import re

import pytest
from django.core.exceptions import ValidationError
from django.urls import reverse

from fleet.models import HistoryEntry
from repairs.models import Finding, StatedInput
from repairs.selectors.evaluations import stale_reasons
from repairs.selectors.stated import stated_inputs
from repairs.services.evaluation_gathered import Choice
from repairs.services.evaluation_prepare import choice_from, evaluation_prepare
from repairs.services.evaluations import Use, evaluation_make, method_versions
from repairs.services.stated import (
    Document,
    input_state,
    input_take_back,
    statable,
    stated_lines,
)
from tests.factories import NOW, TODAY
from tests.forms import form_on
from tests.record_rows import CRACK, World, found, world_make

pytestmark = pytest.mark.django_db
DRAWING = Document("ARD-STR-53-17", "sheet 2", "C")


@pytest.fixture
def world() -> World:
    return world_make()


@pytest.fixture
def finding(world) -> Finding:
    return found(
        world,
        damage_type="crack",
        typed=CRACK,
        element="skin",
        place_entered="STA 630, 5 in below S-8R",
    )


def state(world, finding, name="thickness", entered="0.063 in", **more) -> StatedInput:
    given = {"document": DRAWING, "actor": world.engineer, "at": NOW, "on": TODAY}
    return input_state(subject=finding, name=name, entered=entered, **(given | more))


def used(finding, name):
    prepared = evaluation_prepare(
        subject=finding, choice=choice_from(finding), as_of=TODAY
    )
    return prepared.inputs.values.get(name)


@pytest.mark.parametrize(
    ("name", "entered", "value", "uncertainty"),
    [
        ("thickness", "0.063 in", 1.6002, None),
        ("thickness", "1.6 mm ± 0.05 mm", 1.6, 0.05),
        ("hole_pitch", "0.8 in ± 0.02", 20.32, 0.508),
        ("ultimate_running_load", "350 N/mm", 350.0, None),
        ("limit_flight_stress", "12 ksi", 82.737087, None),
        ("limit_flight_stress", "-12 ksi", -82.737087, None),
        ("member_limit_force", "2.5 kip", 11120.554, None),
        ("member_inertia", "1.2e5 mm4", 120000.0, None),
        ("load_transfer", "12 %", 0.12, None),
        ("fastener_flexibility", "0.00002 mm/N", 2e-5, None),
    ],
)
def test_what_is_typed_is_kept_and_read_in_its_unit(
    world, finding, name, entered, value, uncertainty
):
    # 1 in = 25.4 mm, 1 ksi = 6.894757 MPa, 1 kip = 4448.222 N (NIST SP 811).
    row = state(world, finding, name, entered)
    assert row.entered == entered
    assert row.value == pytest.approx(value, rel=1e-6)
    assert row.uncertainty == pytest.approx(uncertainty)
    assert row.person == world.assessor


@pytest.mark.parametrize(
    ("name", "entered", "part"),
    [
        ("thickness", "0.063", "has no unit; write 0.063 mm"),
        ("thickness", "12 ksi", "is not a unit of length"),
        ("thickness", "0 mm", "is above zero; “0 mm” is not"),
        ("thickness", "thin", "is not a number"),
        ("load_transfer", "1.2", "1.2 is above 1"),
        ("cycle_ratio", "0.1 MPa", "is not a unit of this"),
        ("thickness", " ", "Nothing was stated"),
        ("load_kind", "wind", "is no answer here; state one of: tension"),
    ],
)
def test_what_cannot_be_stated_is_refused_with_what_is_expected(
    world, finding, name, entered, part
):
    with pytest.raises(ValidationError, match=re.escape(part)):
        state(world, finding, name, entered)
    assert not StatedInput.objects.exists()


def test_a_flight_may_press_on_the_ground_what_it_pulls_in_the_air(world, finding):
    row = state(world, finding, "flight_smallest_share", "-0.2")
    assert row.value == -0.2


def test_only_what_may_be_stated_is(world, finding):
    with pytest.raises(ValidationError, match="is no input that may be stated"):
        state(world, finding, "toughness", "100 MPa√m")
    names = {spec.name for spec in statable()}
    assert {"thickness", "load_kind", "hole_pitch"} <= names
    assert not names & {"crack_length", "growth_law", "life_base", "damage_type"}


def test_a_person_states_not_a_login(world, finding):
    world.engineer.person = None
    with pytest.raises(ValidationError, match="no person behind it"):
        state(world, finding)


def test_it_goes_before_the_types_value_here_only(world, finding):
    other = found(
        world, damage_type="crack", typed=CRACK, place_entered="STA 610, S-9R"
    )
    before = used(other, "thickness")
    state(world, finding)
    assert used(finding, "thickness").value == pytest.approx(1.6002)
    source = used(finding, "thickness").source
    assert source.startswith("ARD-STR-53-17, rev C, page sheet 2; stated by ")
    assert used(other, "thickness") == before


def test_a_later_statement_replaces_and_a_taking_back_ends_it(world, finding):
    types = used(finding, "thickness")
    first = state(world, finding)
    second = state(world, finding, entered="1.8 mm")
    assert second.replaces == first
    assert used(finding, "thickness").value == 1.8
    back = input_take_back(
        stated=second, reason="wrong sheet", actor=world.engineer, at=NOW, on=TODAY
    )
    assert back.replaces == second
    assert used(finding, "thickness") == types
    assert not stated_inputs(finding).exists()
    third = state(world, finding, entered="1.7 mm")
    assert third.replaces == back
    told = [(line.value, line.holds) for line in stated_lines(finding, "thickness")]
    assert told == [
        ("1.7 mm", True),
        ("taken back", False),
        ("1.8 mm", False),
        ("0.063 in (1.6002 mm)", False),
    ]
    assert [line.row for line in stated_lines(finding)] == [third]
    entry = HistoryEntry.objects.get(action="input_withdraw")
    assert entry.reason == "wrong sheet"


def test_what_holds_no_longer_is_not_taken_back_again(world, finding):
    first = state(world, finding)
    state(world, finding, entered="1.8 mm")
    with pytest.raises(ValidationError, match="no longer holds"):
        input_take_back(
            stated=first, reason="late", actor=world.engineer, at=NOW, on=TODAY
        )
    with pytest.raises(ValidationError, match="Say why"):
        input_take_back(
            stated=first, reason=" ", actor=world.engineer, at=NOW, on=TODAY
        )


def test_every_later_statement_makes_an_evaluation_stale(world, finding):
    first = state(world, finding)
    input_take_back(stated=first, reason="no", actor=world.engineer, at=NOW, on=TODAY)
    row = evaluation_make(
        subject=finding,
        choice=Choice(Use.FOUND_DAMAGE),
        as_of=TODAY,
        actor=world.engineer,
        at=NOW,
    )
    assert stale_reasons(row, method_versions()) == []
    state(world, finding, entered="1.9 mm", at=NOW.replace(hour=NOW.hour + 1))
    assert "an input was stated since" in stale_reasons(row, method_versions())


def address(finding, name="thickness") -> str:
    return reverse("input_state", args=[finding.pk, name])


def test_the_form_states_and_keeps_what_was_typed_when_refused(client, world, finding):
    client.force_login(world.engineer)
    page = address(finding)
    sent = form_on(client, page) | {
        "entered": "0.063",
        "document": "ARD-STR-53-17",
        "page": "sheet 2",
    }
    answer = client.post(page, sent)
    text = answer.content.decode()
    assert "has no unit; write 0.063 mm" in text
    assert 'value="0.063"' in text
    assert 'value="ARD-STR-53-17"' in text
    answer = client.post(page, form_on(client, page) | sent | {"entered": "0.063 in"})
    assert answer["Location"] == reverse("evaluation_new", args=[finding.pk])
    text = client.get(answer["Location"]).content.decode()
    assert "0.063 in (1.6002 mm)" in text
    assert "stated by" in text
    row = StatedInput.objects.get()
    back = reverse("input_take_back", args=[row.pk])
    assert back in text
    client.post(back, form_on(client, back) | {"reason": "wrong sheet"})
    assert StatedInput.objects.get(replaces=row).value is None


def test_a_word_is_chosen_and_an_unknown_input_is_not_found(client, world, finding):
    client.force_login(world.engineer)
    page = address(finding, "load_kind")
    assert "pressure</option>" in client.get(page).content.decode()
    sent = {"entered": "pressure", "document": "STR-1", "page": "2"}
    client.post(page, form_on(client, page) | sent)
    assert StatedInput.objects.get().word == "pressure"
    assert client.get(address(finding, "toughness")).status_code == 404


def test_only_those_who_evaluate_state(client, world, finding):
    client.force_login(world.users["planner"])
    assert client.get(address(finding)).status_code == 403
    client.force_login(world.outsider)
    assert client.get(address(finding)).status_code == 404
