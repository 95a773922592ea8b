"""Recording damage: nothing is refused, every doubt is asked, every step is guarded."""

from __future__ import annotations

import datetime as dt
import uuid

import pytest
from django.core.exceptions import ValidationError

from fleet.due import Counters, Standing
from fleet.location.place import LocationRefused
from fleet.models import HistoryEntry
from fleet.selectors.verify import problems
from repairs.measured import Typed
from repairs.models import Approval, Finding, FindingQuestion, LimitCheck
from repairs.plausibility import counter_questions
from repairs.selectors.signatures import approval_agrees
from repairs.services.assessing import (
    finding_assess,
    finding_close,
    finding_link,
    finding_void,
)
from repairs.services.findings import (
    finding_question_answer,
    finding_relocate,
)
from repairs.services.measuring import Measuring, measurement_record
from repairs.services.reports import Reportability
from tests.factories import NOW, program
from tests.record_rows import (
    CRACK,
    DATA,
    DENT,
    FOUND,
    assessed,
    found,
)

pytestmark = pytest.mark.django_db


def codes(finding: Finding) -> list[str]:
    return list(finding.questions.values_list("code", flat=True))


def test_a_finding_is_placed_measured_and_told_of_in_one_entry(world):
    before = HistoryEntry.objects.count()
    finding = found(world)
    assert finding.number == "F-0001"
    assert finding.state == "reported"
    assert finding.place_entered == "STA 640+10, 4 in below S-7R"
    assert finding.section.code == "FUS"
    assert finding.x1_mm == pytest.approx(650 * 25.4)
    assert finding.criticality == "principal"
    values = {v.quantity: v for v in finding.measurements.get().values.all()}
    assert values["depth_mm"].value == pytest.approx(1.016)  # 0.040 x 25.4
    assert values["depth_mm"].entered == "0.040 in"
    assert values["depth_mm"].worked_out == 45.0
    assert codes(finding) == []
    assert HistoryEntry.objects.count() == before + 1
    entry = HistoryEntry.objects.last()
    assert (entry.action, entry.stream) == (
        "finding_record",
        f"aircraft:{world.aircraft.pk}",
    )
    assert list(problems()) == []


def test_counters_come_from_usage_and_stay_as_a_fact(world):
    finding = found(world)
    # Opening 10,000 FC and 600,000 minutes, then 20 days of 4 flights and 200 minutes.
    assert (finding.at_cycles, finding.at_minutes) == (10_080, 604_000)
    assert finding.counters_source == "usage, as of 2024-12-20"
    assert not finding.counters_ahead


def test_counters_ahead_of_usage_are_flagged_up_to_the_highest_rate(world):
    day = FOUND + dt.timedelta(days=2)
    near = found(world, found_on=day, at=Counters(cycles=10_088))
    assert near.counters_ahead
    assert codes(near) == []
    far = found(world, found_on=day, at=Counters(cycles=10_089))
    assert far.counters_ahead
    assert codes(far) == ["counters_ahead"]
    assert "9 FC above usage" in far.questions.get().asked


def test_counters_below_usage_are_asked_about(world):
    finding = found(world, at=Counters(cycles=10_079))
    assert codes(finding) == ["counters_below"]
    assert "1 FC below usage" in finding.questions.get().asked


def test_hours_put_in_for_flights_without_hours_are_not_held_against_the_log():
    # 604,000 min flown, of which 200 stand in for a flight whose hours are unknown.
    standing = Standing(
        Counters(minutes=604_000), current_to=FOUND, reconstructed_minutes=200
    )
    for stated, asked in ((604_000, 0), (603_800, 0), (603_799, 1)):
        at = Counters(minutes=stated)
        assert len(counter_questions(at, standing, found_on=FOUND)) == asked


def test_before_the_data_begin_usage_says_nothing_of_counters(world):
    day = world.aircraft.data_from - dt.timedelta(days=30)
    stated = found(world, found_on=day, at=Counters(cycles=9_000))
    assert not stated.counters_ahead
    assert codes(stated) == []
    unstated = found(world, found_on=day)
    assert unstated.at_cycles is None
    assert unstated.counters_source == "not stated; usage begins on 2024-12-01"


def test_a_location_that_cannot_be_read_is_saved_to_be_placed(world):
    finding = found(world, place_entered="  somewhere aft of the door ")
    assert finding.section is None
    assert finding.place_text == ""
    assert finding.place_entered == "somewhere aft of the door"
    with pytest.raises(ValidationError, match="is to be placed"):
        assessed(world, finding)


def test_a_finding_is_placed_later_and_what_it_said_before_stays_in_history(world):
    finding = found(world, place_entered="aft of the door")
    with pytest.raises(LocationRefused):
        finding_relocate(
            finding=finding, place_entered="FR", actor=world.engineer, at=NOW
        )
    placed = finding_relocate(
        finding=finding, place_entered="STA 650 S-7R", actor=world.engineer, at=NOW
    )
    assert placed.place_text == "STA 640+10 S-7R"
    assert placed.panel is not None
    assert '"place_entered":["aft of the door","STA 650 S-7R"]' in (
        HistoryEntry.objects.last().items.first().changes
    )
    assert list(problems()) == []


def test_the_same_form_sent_twice_is_one_finding(world):
    key = uuid.uuid4()
    first = found(world, client_key=key)
    again = found(world, client_key=key)
    assert first.pk == again.pk
    assert Finding.objects.count() == 1


def test_numbers_are_given_once_each_per_operator(world):
    assert [found(world).number for _ in range(3)] == ["F-0001", "F-0002", "F-0003"]


@pytest.mark.parametrize(
    ("sizes", "code", "words"),
    [
        # A public report: 3.2 wide, .0115 deep, "width/depth = 27.82"; 3.2 / 0.0115 is
        # 278.3, so the depth has a slipped decimal.
        (
            ("7 in", "3.2 in", ".0115 in", 27.82),
            "ratio_differs-1",
            "A decimal point may have slipped",
        ),
        (("3 in", "4 in", "0.1 in", None), "length_below_width-1", "right way round"),
        (("3 in", "2 in", "2 mm", 1.0), "unit_slip-1", "inches or mm"),
        (("3 in", "2 in", "2 in", None), "depth_over_width-1", "a hole"),
    ],
)
def test_a_doubtful_dent_is_saved_and_asked_about(world, sizes, code, words):
    length, width, depth, worked_out = sizes
    typed = (
        Typed("length_mm", length),
        Typed("width_mm", width),
        Typed("depth_mm", depth, worked_out),
    )
    finding = found(world, typed=typed)
    question = finding.questions.get()
    assert question.code == code
    assert words in question.asked


def test_a_ratio_within_two_per_cent_raises_no_question(world):
    # 1.8 / 0.040 = 45: 45.8 is 1.8 % more, 46.0 is 2.2 % more.
    for worked_out, asked in ((45.8, 0), (46.0, 1)):
        typed = (*DENT[:2], Typed("depth_mm", "0.040 in", worked_out))
        assert found(world, typed=typed).questions.count() == asked


def test_a_scratch_deeper_than_its_skin_is_asked_about(world):
    typed = (Typed("length_mm", "30 mm"), Typed("depth_mm", "1.5 mm"))
    finding = found(world, damage_type="scratch", typed=typed)
    assert finding.panel.thickness_mm < 1.5
    assert codes(finding) == ["depth_over_thickness-1"]


def test_unknown_not_applicable_and_blank_are_three_things(world):
    typed = (
        *DENT,
        Typed("creased", "unknown"),
        Typed("next_dent_mm", "n/a"),
        Typed("edge_distance_mm", "  "),
    )
    values = found(world, typed=typed).measurements.get().values
    assert dict(values.values_list("quantity", "status")) == {
        "length_mm": "known",
        "width_mm": "known",
        "depth_mm": "known",
        "creased": "unknown",
        "next_dent_mm": "not_applicable",
    }
    assert values.get(quantity="creased").value is None


def test_a_size_that_cannot_be_read_is_refused_beside_its_field(world):
    with pytest.raises(ValidationError) as refused:
        found(world, typed=(Typed("length_mm", "about 3"),))
    assert list(refused.value.message_dict) == ["length_mm"]
    assert Finding.objects.count() == 0


def test_assessment_needs_sizes_answers_and_cited_data(world):
    finding = found(world, typed=(*DENT[:2], Typed("depth_mm", "0.040 in", 50.0)))
    with pytest.raises(ValidationError, match="Answer first"):
        assessed(world, finding)
    question = finding.questions.get()
    finding_question_answer(
        question=question, answer="ratio misread", actor=world.engineer, at=NOW
    )
    assert assessed(world, finding).state == "assessed"
    assert FindingQuestion.objects.get(pk=question.pk).answer == "ratio misread"
    short = found(world, typed=DENT[:2])
    with pytest.raises(ValidationError, match="greatest depth must be known"):
        assessed(world, short)


def test_assessment_is_signed_checked_against_limits_and_verifiable(world):
    finding = assessed(world)
    approval = Approval.objects.get(finding=finding)
    assert approval.signer_name == world.assessor.name
    assert (approval.document_number, approval.document_revision) == (
        "SRM 53-10-12",
        "14",
    )
    check = LimitCheck.objects.get(finding=finding)
    assert (check.outcome, check.limit) == ("not_covered", None)
    assert approval_agrees(approval)
    # A later measuring is later: what was signed then still holds.
    measurement_record(
        finding=finding,
        measuring=Measuring(DENT, FOUND, stage="repeat"),
        actor=world.engineer,
        at=NOW,
    )
    assert approval_agrees(Approval.objects.get(pk=approval.pk))
    Finding.objects.filter(pk=finding.pk).update(description="nothing to see")
    assert not approval_agrees(Approval.objects.get(pk=approval.pk))


def test_nobody_assesses_without_an_authorisation_valid_that_day(world):
    with pytest.raises(ValidationError, match="held no authorisation"):
        finding_assess(
            finding=found(world),
            proof=program(world.approver),
            on=FOUND,
            data=DATA,
            actor=world.engineer,
            at=NOW,
        )
    granted = world.assessor.authorisations.get()
    granted.valid_to = FOUND - dt.timedelta(days=1)
    granted.save()
    with pytest.raises(ValidationError, match="was valid to 2024-12-19"):
        assessed(world)


def test_a_repeat_measuring_is_a_new_row(world):
    finding = found(world, damage_type="crack", typed=CRACK)
    later = Typed("length_mm", "1.10 in ± 0.02 in")
    row = measurement_record(
        finding=finding,
        measuring=Measuring((later,), FOUND, stage="repeat"),
        actor=world.engineer,
        at=NOW,
    )
    assert row.number == 2
    value = row.values.get()
    assert value.value == pytest.approx(27.94)
    assert value.uncertainty == pytest.approx(0.508)
    assert finding.measurements.get(number=1).values.count() == 3


def test_a_duplicate_report_is_set_aside_and_stays_visible(world):
    first, second = found(world), found(world)
    link = finding_link(
        finding=second,
        earlier=first,
        kind="duplicate_report",
        decided_by=world.assessor,
        on=FOUND,
        actor=world.engineer,
        at=NOW,
    )
    second.refresh_from_db()
    assert second.state == "duplicate"
    assert link.earlier == first
    with pytest.raises(ValidationError, match="recorded after"):
        finding_link(
            finding=first,
            earlier=second,
            kind="same_damage",
            decided_by=None,
            on=FOUND,
            actor=world.engineer,
            at=NOW,
        )


def test_a_finding_is_voided_with_a_reason_only(world):
    finding = found(world)
    with pytest.raises(ValidationError):
        finding_void(finding=finding, reason=" ", actor=world.engineer, at=NOW)
    voided = finding_void(
        finding=finding, reason="wrong aircraft", actor=world.engineer, at=NOW
    )
    assert voided.state == "voided"


def test_an_open_finding_is_not_closed(world):
    with pytest.raises(ValidationError, match="closed only while rectified"):
        finding_close(
            finding=assessed(world),
            proof=program(world.certifier),
            on=FOUND,
            cause="accidental",
            report=Reportability(False, "dent within limits"),
            actor=world.users["certifier"],
            at=NOW,
        )
