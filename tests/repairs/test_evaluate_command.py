"""manage.py evaluate: its note, its JSON, and what it refuses."""

from __future__ import annotations

import json
import math
from io import StringIO

import pytest
from django.core.management import CommandError, call_command

from fleet.services.history import Writing
from fleet.services.materials import demo_values_load
from repairs.evaluation_text import number_text
from repairs.measured import Typed
from repairs.models import Evaluation
from tests.factories import FIXTURES, NOW, TODAY, aircraft_make
from tests.record_rows import World, found, world_make

pytestmark = pytest.mark.django_db
ISSUE_KEYS = {
    "use", "method", "version", "inputs", "residual_strength_mpa",
    "required_residual_mpa", "residual_case", "margin_residual", "ultimate_mpa",
    "ultimate_case", "margin_ultimate", "life_cycles", "scatter_factor",
    "threshold_cycles", "repeat_cycles", "applicability", "warnings", "note", "state",
}  # fmt: skip
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


def cracked(world: World):
    return found(
        world,
        damage_type="crack",
        typed=CRACK,
        element="skin",
        place_entered="STA 630, 5 in below S-8R",
    )


def evaluate(*args: str) -> str:
    out = StringIO()
    call_command("evaluate", *args, stdout=out)
    return out.getvalue()


def test_json_has_the_promised_keys_and_says_unapproved(world):
    finding = cracked(world)
    data = json.loads(evaluate(finding.number, "--format", "json"))
    assert data.keys() >= ISSUE_KEYS
    assert data["use"] == "found_damage"
    assert data["state"] == "unchecked"
    assert data["unapproved"] is True
    assert data["warnings"][0] == "Unapproved calculation."
    assert data["margin_residual"] == pytest.approx(
        data["residual_strength_mpa"] / data["required_residual_mpa"] - 1
    )
    assert {
        "symbol",
        "formula",
        "substitution",
        "value",
        "unit",
        "source",
        "grade",
    } <= (data["note"][0].keys())


def test_note_reads_line_by_line(world):
    text = evaluate(cracked(world).number)
    assert "UNAPPROVED CALCULATION" in text
    assert "Longitudinal through crack in pressurised skin" in text
    assert "margin, residual" in text
    assert "1.15 × (normal operating differential" in text
    assert "F_b = √(1 + 0.52 l + 1.29 l² − 0.074 l³)" in text
    assert "USAF Damage Tolerant Design Handbook, Table 11.3.13" in text
    assert "memory]" in text
    assert "met       structural item: skin" in text


def test_the_note_gives_the_life_before_and_after_the_factor(world):
    data, text = (
        evaluate(cracked(world).number, "--format", form) for form in ("json", "note")
    )
    shown = json.loads(data)
    after = math.floor(shown["life_cycles"] / shown["scatter_factor"])
    assert shown["life_after_factor_cycles"] == after
    said = " ".join(text.split())
    assert f"life before factor {shown['life_cycles']:,} FC from finding" in said
    assert f"life after factor {after:,} FC" in said


def test_the_same_question_is_answered_by_the_evaluation_in_force(world):
    finding = cracked(world)
    first = json.loads(evaluate(finding.number, "--format", "json"))
    again = json.loads(evaluate(finding.number, "--format", "json"))
    assert first == again
    assert Evaluation.objects.count() == 1
    evaluate(finding.number, "--again")
    assert Evaluation.objects.count() == 2


def test_use_and_inspection_method_are_chosen(world):
    number = cracked(world).number
    text = evaluate(
        number, "--use", "no_known_crack", "--detectable", "penetrant, open skin"
    )
    row = Evaluation.objects.get()
    assert row.use == "no_known_crack"
    assert row.repeat_cycles is not None
    assert f"{row.repeat_cycles:,}" in text


def test_what_no_method_covers_is_never_a_number(world):
    data = json.loads(evaluate(found(world).number, "--format", "json"))
    assert data["outcome"] == "not_covered"
    assert data["residual_strength_mpa"] is data["life_cycles"] is None
    text = evaluate(found(world).number)
    assert "Needs an engineer" in text
    assert "No result: not covered." in text


def test_a_number_nobody_has_or_several_have_is_refused(world):
    with pytest.raises(CommandError, match="no finding or repair “F-9999”"):
        evaluate("F-9999")
    with pytest.raises(CommandError, match="of operator NRT"):
        evaluate("F-9999", "--operator", "NRT")
    finding = found(world)
    other = world.outsider.open_memberships[0].operator
    aircraft_make(other, world.variant, "Q7-OTH")
    twin = type(finding)(
        **{
            field.attname: getattr(finding, field.attname)
            for field in finding._meta.concrete_fields
            if not field.primary_key and field.attname != "client_key"
        }
    )
    twin.operator, twin.entered_at = other, None
    with Writing(actor=None, action="finding_copy", at=NOW) as w:
        w.create(twin)
    with pytest.raises(CommandError, match="--operator CODE"):
        evaluate(finding.number)
    assert "No result" in evaluate(finding.number, "--operator", "NRT")


def test_a_detectable_size_nobody_recorded_is_refused(world):
    with pytest.raises(CommandError, match=r"it has: .+penetrant"):
        evaluate(cracked(world).number, "--detectable", "crystal ball, anywhere")


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (None, "—"),
        (0.0, "0"),
        (34000, "34,000"),
        (12345.6, "12,346"),
        (293.583, "293.6"),
        (68.4746, "68.47"),
        (1.0215, "1.0215"),
        (3.1158e-8, "3.116·10⁻⁸"),
        (-0.25, "-0.25"),
    ],
)
def test_numbers_are_written_for_a_reader(value, text):
    assert number_text(value) == text
