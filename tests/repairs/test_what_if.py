"""What if a number were another: beside the record's, marked, and never kept."""

from __future__ import annotations

import re

import pytest
from django.urls import reverse

from fleet.models import HistoryHead
from fleet.services.materials import demo_values_load
from repairs.measured import Typed
from repairs.models import Evaluation, Finding
from repairs.services.evaluation_gathered import Choice
from repairs.services.evaluation_prepare import choice_from, evaluation_prepare
from repairs.services.evaluation_sensitivity import moves_of
from repairs.services.evaluation_what_if import what_if_read
from repairs.services.evaluations import Use, evaluation_make
from repairs.services.stated import Document, input_state
from tests.factories import FIXTURES, NOW, TODAY
from tests.forms import form_on
from tests.queries import assert_same_queries
from tests.record_rows import World, found, world_make

pytestmark = pytest.mark.django_db
CRACK = (
    Typed("length_mm", "0.94 ± 0.02 in"),
    Typed("direction", "longitudinal"),
    Typed("origin", "skin"),
)
SAID = "What if, not recorded."


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
def page(client, world, finding):
    """The text of the evaluate page for what was typed."""
    client.force_login(world.engineer)
    address = reverse("evaluation_new", args=[finding.pk])

    def opened(**typed: str) -> str:
        answer = client.get(address, {"use": "found_damage", **typed})
        assert answer.status_code == 200
        return answer.content.decode()

    return opened


def prepared(finding, **instead):
    values, wrong = what_if_read(instead, {})
    assert wrong == {}
    return evaluation_prepare(
        subject=finding,
        choice=choice_from(finding),
        as_of=TODAY,
        instead=values,
    ).result


def test_without_a_change_the_record_stands_alone(page):
    text = page()
    assert SAID not in text
    assert "not recorded</th>" not in text
    assert "as the record stands</th>" in text
    assert "≠" not in text


def test_a_changed_number_is_shown_beside_the_record_and_never_kept(page, finding):
    before = HistoryHead.objects.get().sequence
    text = page(if_crack_length="1.5 in")
    assert SAID in text
    recorded, other = prepared(finding), prepared(finding, crack_length="38.1 mm")
    assert f"{recorded.residual_strength_mpa:.1f} MPa" in text
    assert f"<b>≠ {other.residual_strength_mpa:.1f} MPa</b>" in text
    assert other.residual_strength_mpa < recorded.residual_strength_mpa
    assert 'value="1.5 in"' in text
    assert HistoryHead.objects.get().sequence == before
    assert not Evaluation.objects.exists()


def test_the_kept_evaluation_stands_in_a_column_of_its_own(page, world, finding):
    row = evaluation_make(
        subject=finding,
        choice=Choice(Use.FOUND_DAMAGE),
        as_of=TODAY,
        actor=world.engineer,
        at=NOW,
    )
    text = page(if_thickness="0.08 in")
    heads = re.search(r'<table class="list beside"><thead>(.*?)</thead>', text, re.S)
    assert heads is not None
    assert ["record" in heads[1], "what if" in heads[1], row.number in heads[1]] == [
        True,
        True,
        True,
    ]


def test_bad_input_is_told_beside_its_field_and_nothing_typed_is_lost(page):
    text = page(if_crack_length="40 psi", if_thickness="0", if_radius="1500 mm")
    assert "The what-if is not calculated" in text
    assert "“psi” in “40 psi” is not a unit of length" in text
    assert "Skin thickness before the damage is above zero; “0” is not." in text
    for typed in ("40 psi", "0", "1500 mm"):
        assert f'value="{typed}"' in text
    assert SAID not in text
    assert "as the record stands</th>" in text


def test_what_is_no_input_of_the_use_is_set_aside_and_kept(page):
    text = page(if_blend_length="0.5 in", if_crack_length="30 mm")
    assert "Set aside, for it is no input here: full length of the blend" in text
    assert 'type="hidden" name="if_blend_length" value="0.5 in"' in text
    assert SAID in text


def test_numbers_no_method_is_for_end_in_words_not_in_a_fault(page):
    text = page(if_crack_length="9000 mm")
    assert SAID in text
    assert "no number" in text
    assert page(if_radius="1 mm", if_thickness="900 mm").count(SAID) == 1


def test_what_is_missing_can_be_tried(page, finding):
    text = page(use="no_known_crack")
    assert "missing" in text
    assert "Choose it" in text
    tried = page(use="no_known_crack", if_detectable_length="0.5 in")
    assert re.search(r"Repeat interval.*?≠ [\d,]+ FC", tried, re.S)


def test_keeping_keeps_only_what_the_record_says(client, world, finding):
    client.force_login(world.engineer)
    address = reverse("evaluation_new", args=[finding.pk])
    asked = f"{address}?use=found_damage&if_crack_length=80+mm"
    answer = client.post(asked, form_on(client, asked))
    row = Evaluation.objects.get()
    assert answer["Location"] == reverse("evaluation", args=[row.pk])
    assert row.use == "found_damage"
    assert "what if" not in row.inputs
    assert row.residual_strength_mpa == prepared(finding).residual_strength_mpa


def test_a_bare_number_is_in_the_unit_beside_it_and_its_spread_goes_with_it():
    values, wrong = what_if_read({"crack_length": "24 ± 1", "thickness": ""}, {})
    assert wrong == {}
    assert (values["crack_length"].value, values["crack_length"].unit) == (24.0, "mm")
    assert values["crack_length_uncertainty"].value == 1.0
    assert values["crack_length"].source == "what if, not recorded"


def test_a_scatter_factor_and_a_word_can_be_tried_too():
    values, wrong = what_if_read({"repeat_policy": "3", "load_kind": "shear"}, {})
    assert wrong == {}
    assert values["repeat_policy"].factor.value == 3.0
    assert values["load_kind"].value == "shear"
    _, wrong = what_if_read({"repeat_policy": "0.5", "load_kind": "wind"}, {})
    assert "0.5 is below 1" in wrong["repeat_policy"]
    assert "is no answer here" in wrong["load_kind"]


def test_the_sensitivity_is_calculated_on_demand(page):
    assert 'id="moves"' not in page()
    text = page(sensitivity="1")
    assert text.count('class="chart"') >= 4
    assert "crack length, tip to tip" in text
    assert "±0.508 mm" in text
    assert "±10 %" in text
    of_other = page(sensitivity="1", if_crack_length="40 mm")
    assert "of the what-if, not recorded" in of_other


def test_the_bars_hold_what_the_calculation_says(finding):
    """Route: the same inputs calculated again, one by one, by the what-if."""
    base = evaluation_prepare(subject=finding, choice=choice_from(finding), as_of=TODAY)
    moves = moves_of(base)
    row = next(row for row in moves.rows if row.title == "shell radius")
    radius = base.inputs.number("radius").value
    less = prepared(finding, radius=f"{0.9 * radius!r} mm").margin_residual
    more = prepared(finding, radius=f"{1.1 * radius!r} mm").margin_residual
    assert row.answers[0] == (f"{less:+.2f}", f"{more:+.2f}")
    assert less > more  # a larger radius is a higher hoop stress


def test_what_is_stated_costs_no_query_a_row(client, world, finding):
    def state(*names: str) -> None:
        for name in names:
            input_state(
                subject=finding,
                name=name,
                entered="12 mm",
                document=Document("STR-1", "2"),
                actor=world.engineer,
                at=NOW,
                on=TODAY,
            )

    client.force_login(world.engineer)
    state("hole_pitch")
    page = reverse("evaluation_new", args=[finding.pk])
    more = ("fastener_pitch", "fastener_diameter", "member_width", "member_length")
    assert_same_queries(client, page, lambda: state(*more), ceiling=60)


def test_the_note_prints_as_a_document(client, world, finding):
    row = evaluation_make(
        subject=finding,
        choice=Choice(Use.FOUND_DAMAGE),
        as_of=TODAY,
        actor=world.engineer,
        at=NOW,
    )
    client.force_login(world.users["auditor"])
    text = client.get(reverse("evaluation_note", args=[row.pk])).content.decode()
    assert "Unapproved calculation, unchecked." in text
    assert row.content_digest[:16] in text
    for part in ("Subject", "Margins", "Inputs", "Applicability", "Calculation"):
        assert f"<h2>{part}" in text
    assert "crack length, tip to tip" in text
    assert "0.508 mm" in text
    assert "Signatures" in text
    assert "No finding is not no damage" in text
    assert "style=" not in text
