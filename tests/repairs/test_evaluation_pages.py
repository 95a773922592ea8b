"""The pages of evaluations: who sees them, what they say, and that they print."""

from __future__ import annotations

import json

import pytest
from django.urls import reverse

from fleet.services.materials import demo_values_load
from repairs.measured import Typed
from repairs.models import Evaluation, Finding
from repairs.services.evaluation_gathered import Choice
from repairs.services.evaluations import Use, evaluation_make
from tests.factories import FIXTURES, NOW, TODAY
from tests.record_rows import World, found, world_make

pytestmark = pytest.mark.django_db
CRACK = (
    Typed("length_mm", "0.94 ± 0.02 in"),
    Typed("direction", "longitudinal"),
    Typed("origin", "skin"),
)


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


@pytest.fixture
def finding(world) -> Finding:
    return found(
        world,
        damage_type="crack",
        typed=CRACK,
        element="skin",
        place_entered="STA 630, 5 in below S-8R",
    )


@pytest.fixture
def made(world, finding) -> Evaluation:
    return evaluation_make(
        subject=finding,
        choice=Choice(Use.FOUND_DAMAGE),
        as_of=TODAY,
        actor=world.engineer,
        at=NOW,
    )


def address(name: str, pk: int) -> str:
    return reverse(name, args=[pk])


def pages(made: Evaluation) -> list[str]:
    return [
        address("evaluation", made.pk),
        address("evaluation_new", made.finding_id),
    ]


def test_an_outsider_does_not_find_them(client, world, made):
    client.force_login(world.outsider)
    for page in pages(made):
        assert client.get(page).status_code == 404
    assert client.post(address("evaluation_again", made.pk)).status_code == 404
    assert client.post(address("evaluation_new", made.finding_id)).status_code == 404
    assert client.get(address("evaluation_new_repair", 1)).status_code == 404
    assert Evaluation.objects.count() == 1


@pytest.mark.parametrize("role", ["recorder", "planner", "manager", "auditor"])
def test_every_role_reads_and_only_engineers_evaluate(client, world, made, role):
    client.force_login(world.users[role])
    assert client.get(address("evaluation", made.pk)).status_code == 200
    new = address("evaluation_new", made.finding_id)
    assert client.get(new).status_code == 403
    assert client.post(new, {"use": "found_damage"}).status_code == 403
    assert client.post(address("evaluation_again", made.pk)).status_code == 403
    assert Evaluation.objects.count() == 1


def test_without_a_sign_in_there_is_nothing_to_see(client, made):
    for page in pages(made):
        answer = client.get(page)
        assert answer.status_code == 302
        assert "/sign-in/" in answer["Location"]


def test_the_page_says_unapproved_and_shows_the_whole_note(client, world, made):
    client.force_login(world.engineer)
    text = client.get(address("evaluation", made.pk)).content.decode()
    assert "Unapproved calculation, unchecked." in text
    note = json.loads(made.note)
    assert f"{len(note)} lines" in text
    for line in note:
        assert f'<td class="num mut">{line["number"]}</td>' in text
    assert "USAF Damage Tolerant Design Handbook, Table 11.3.13" in text
    assert "from memory" in text
    assert "Barred from approval." in text
    assert text.count('class="chart"') == 2
    assert "crack length 2a, mm" in text
    assert "strength, gross, MPa" in text
    assert "not shown" in text
    assert "evaluation made" in text
    assert "style=" not in text


def test_what_is_not_covered_shows_no_number(client, world):
    dent = found(world)
    row = evaluation_make(
        subject=dent,
        choice=Choice(Use.FOUND_DAMAGE),
        as_of=TODAY,
        actor=None,
        at=NOW,
    )
    client.force_login(world.engineer)
    text = client.get(address("evaluation", row.pk)).content.decode()
    assert "There is no number; this needs an engineer." in text
    for figure in ("Residual strength", "Margin", "Life, ", "Threshold"):
        assert figure not in text


def test_the_form_shows_what_will_be_used_before_it_is_made(client, world, finding):
    client.force_login(world.engineer)
    text = client.get(address("evaluation_new", finding.pk)).content.decode()
    assert "as the record stands; change a number to see what if" in text
    assert "crack length, tip to tip" in text
    assert "panel UPPER SIDE R" in text
    assert "penetrant, open skin: 6.35 mm" in text
    assert not Evaluation.objects.exists()


def test_posting_makes_it_and_goes_to_its_page(client, world, finding):
    client.force_login(world.engineer)
    size = finding.aircraft.variant.aircraft_type.detectable_sizes.get(
        method="penetrant"
    )
    answer = client.post(
        address("evaluation_new", finding.pk),
        {"use": "no_known_crack", "detectable": size.pk, "life_used_reason": ""},
    )
    row = Evaluation.objects.get()
    assert answer.status_code == 302
    assert answer["Location"] == address("evaluation", row.pk)
    assert (row.use, row.entered_by) == ("no_known_crack", world.engineer)
    assert row.repeat_cycles is not None
    text = client.get(answer["Location"]).content.decode()
    assert "Repeat interval" in text
    assert f"?evaluation={row.pk}" in text
    assert address("evaluation_sign", row.pk) in text


def test_a_use_nobody_offers_is_refused_beside_the_field(client, world, finding):
    client.force_login(world.engineer)
    answer = client.post(address("evaluation_new", finding.pk), {"use": "luck"})
    assert answer.status_code == 200
    assert "errorlist" in answer.content.decode()
    assert not Evaluation.objects.exists()


def test_evaluating_again_supersedes(client, world, made):
    client.force_login(world.engineer)
    answer = client.post(address("evaluation_again", made.pk))
    new = Evaluation.objects.get(replaces=made)
    assert answer["Location"] == address("evaluation", new.pk)
    old = client.get(address("evaluation", made.pk)).content.decode()
    assert "superseded" in old
    assert "Evaluate again" not in old
    again = client.post(address("evaluation_again", made.pk), follow=True)
    assert "was superseded by" in again.content.decode()
    assert Evaluation.objects.count() == 2
