"""Occurrence reports: asked by regime with its clock, answered, sent, supplemented.

Clocks of the rules: 72 h from detection, Regulation (EU) 2015/1018 with 376/2014; the
0900 period and 96 h, 14 CFR 121.703(d); 30 days and 3 months, (EU) 376/2014 article 13,
from memory. That a report may not be withheld, and supplements: 121.703(g) and (h).
Contents: 121.703(e) and GM 145.A.60(c).
"""

from __future__ import annotations

import datetime as dt

import pytest
from django.core.exceptions import ValidationError

from fleet.canonical import digest
from fleet.due import Counters
from fleet.models import Aircraft, Operator
from fleet.selectors.verify import problems
from repairs.models import OccurrenceReport
from repairs.selectors.report_draft import (
    NOT_KNOWN,
    length_notice,
    problem_text,
    report_draft,
)
from repairs.selectors.report_rules import asked_by, rules_of
from repairs.selectors.reports import finding_reports, follow_ups_of, span_words
from repairs.services.events import event_record
from repairs.services.reports import (
    Reportability,
    Sending,
    report_close,
    report_decide,
    report_open,
    report_send,
    report_supplement,
)
from tests.factories import NOW
from tests.finding_rows import CORROSION, clock, levelled
from tests.folder_rows import folders_make
from tests.record_rows import CRACK, FOUND, assessed, found

pytestmark = pytest.mark.django_db
YES = Reportability(True, "a crack in PSE, found at the ramp")
NO = Reportability(False, "a scratch in the paint")
NOON = dt.datetime(2024, 12, 20, 12, 0, tzinfo=dt.UTC)
DAY = dt.timedelta(days=1)


@pytest.fixture
def clocks(world):
    clock("report_hours", 72, "hours", source="Regulation (EU) 2015/1018")
    clock("report_preliminary_days", 30, "days", grade="memory")
    clock("report_final_months", 3, "months", grade="memory")


def crack(world, **changes):
    return found(world, damage_type="crack", typed=CRACK, **changes)


def operated(world, **columns) -> Aircraft:
    """The aircraft, its operator being another kind of one."""
    Operator.objects.filter(pk=world.operator.pk).update(**columns)
    return Aircraft.objects.get(pk=world.aircraft.pk)


def asked(world) -> OccurrenceReport:
    return crack(world).reports.get()


def decided(world, report=None, answer=YES, **more) -> OccurrenceReport:
    return report_decide(
        report=report or asked(world),
        answer=answer,
        decided_by=world.certifier,
        actor=world.engineer,
        at=NOW,
        **more,
    )


def sending(text="Crack at STA 640.", **changes) -> Sending:
    said = {"sent_at": NOON + DAY, "reference": "OR-1", "recipients": "the authority"}
    return Sending(**(said | changes), content=text)


def sent(world, report=None) -> OccurrenceReport:
    return report_send(
        report=report or decided(world),
        sending=sending(),
        actor=world.engineer,
        at=NOW,
    )


def line(finding, moment=NOON):
    (only,) = finding_reports(finding, moment=moment)
    return only


# --- asked ---------------------------------------------------------------------------


def test_a_crack_in_pse_asks_by_itself_with_the_regimes_clock(world, clocks):
    report = asked(world)
    assert (report.state, report.regime) == ("to_assess", "EASA")
    assert report.rule == "Regulation (EU) 2015/1018"
    # Only the day is known: its beginning is taken, and 72 h from there.
    assert report.detected_at == dt.datetime(2024, 12, 20, tzinfo=dt.UTC)
    assert report.due_at == dt.datetime(2024, 12, 23, tzinfo=dt.UTC)
    assert list(problems()) == []


def test_a_dent_asks_nothing_until_something_on_record_does(world):
    finding = assessed(world)
    assert not finding.reports.exists()
    corroded = found(world, damage_type="corrosion", typed=CORROSION)
    levelled(world, corroded, 1)
    assert not corroded.reports.exists()
    levelled(world, corroded, 2)
    assert corroded.reports.get().state == "to_assess"


def test_a_folder_signed_as_major_asks_for_what_it_covers(world, clocks):
    folders = folders_make(world)
    for scale, asks in (("minor", False), ("major", True)):
        folder = folders.ready(scale=scale, scale_reason="as the manual says")
        folders.sign(folder, "prepared")
        assert folder.finding_rows.get().finding.reports.exists() is asks


def test_an_event_asks_for_itself(world, clocks):
    event = event_record(
        aircraft=world.aircraft,
        kind="lightning",
        happened_on=FOUND,
        counters=Counters(),
        description="two strikes",
        actor=None,
        at=NOW,
    )
    report = event.reports.get()
    assert (report.state, report.finding) == ("to_assess", None)
    draft = report_draft(report)
    assert "lightning strike" in draft.text
    assert problem_text(draft.text) == "two strikes"


def test_without_a_clock_on_record_it_counts_as_due_now(world):
    finding = crack(world)
    assert finding.reports.get().due_at is None
    assert line(finding).late
    assert line(finding).countdown == "no clock recorded: counts as due now"


def test_the_first_moment_of_the_day_is_the_operators(world, clocks):
    aircraft = operated(world, time_zone="America/Chicago")
    report = crack(world, aircraft=aircraft).reports.get()
    # Midnight of Chicago in winter is 06:00 UTC.
    assert report.detected_at == dt.datetime(2024, 12, 20, 6, tzinfo=dt.UTC)


def test_the_period_clock_of_another_regime_is_counted_in_local_time(world):
    aircraft = operated(world, regime="FAA", time_zone="America/Chicago")
    faa = {"regime": "FAA", "source": "14 CFR 121.703(d)"}
    clock("report_period_hours", 96, "hours", **faa)
    clock("report_period_begins", 9, "hours", **faa)
    report = crack(world, aircraft=aircraft).reports.get(regime="FAA")
    # Friday 20 December 00:00: the period ends at 09:00; 96 h on is Tuesday 24
    # December 09:00 CST, 15:00 UTC, and no holiday is recorded.
    assert report.due_at == dt.datetime(2024, 12, 24, 15, tzinfo=dt.UTC)
    clock("report_holiday", 1, "count", effective_from=dt.date(2024, 12, 24), **faa)
    moved = decided(world, report, detected_at=report.detected_at)
    assert moved.due_at == dt.datetime(2024, 12, 25, 15, tzinfo=dt.UTC)


def test_an_operators_own_clock_goes_before_the_one_offered(world, clocks):
    clock("report_hours", 48, "hours", operator=world.operator, regime="")
    assert asked(world).due_at == dt.datetime(2024, 12, 22, tzinfo=dt.UTC)


def test_it_can_be_asked_under_a_further_regime_with_a_clock(world, clocks):
    clock("report_hours", 96, "hours", regime="FAA 145", source="14 CFR 145.221")
    finding = assessed(world)
    report = report_open(
        subject=finding, regime="FAA 145", actor=world.engineer, at=NOW
    )
    assert report.due_at == dt.datetime(2024, 12, 24, tzinfo=dt.UTC)
    for regime, words in (("FAA 145", "already under"), ("XYZ", "No report clock")):
        with pytest.raises(ValidationError, match=words):
            report_open(subject=finding, regime=regime, actor=None, at=NOW)


# --- answered ------------------------------------------------------------------------


def test_an_answer_has_a_reason_and_a_name(world, clocks):
    report = asked(world)
    with pytest.raises(ValidationError, match="Say why"):
        decided(world, report, Reportability(True, " "))
    report = decided(world, report)
    assert (report.state, report.decided_by) == ("reportable", world.certifier)


def test_the_clock_runs_from_the_moment_that_is_given(world, clocks):
    report = decided(world, detected_at=NOON)
    assert report.due_at == dt.datetime(2024, 12, 23, 12, tzinfo=dt.UTC)


def test_detection_is_not_before_the_find_nor_ahead_of_now(world, clocks):
    report = asked(world)
    for moment, words in (
        (NOON - DAY, "before F-0001 was found"),
        (NOW + DAY, "ahead"),
    ):
        with pytest.raises(ValidationError, match=words):
            decided(world, report, detected_at=moment)


def test_not_reportable_may_turn_out_reportable(world, clocks):
    report = decided(world, answer=NO)
    assert report.state == "not_reportable"
    assert decided(world, report).state == "reportable"


# --- sent ----------------------------------------------------------------------------


def test_what_was_sent_is_kept_as_it_was_sent(world, clocks):
    report = sent(world)
    assert (report.state, report.sent_reference) == ("sent", "OR-1")
    before = digest(report.content)
    with pytest.raises(ValidationError, match="is sent; it can be sent only while"):
        report_send(
            report=report, sending=sending("other"), actor=world.engineer, at=NOW
        )
    with pytest.raises(ValidationError, match="can be decided on only while"):
        decided(world, report, NO)
    more(world, report)
    report.refresh_from_db()
    assert digest(report.content) == before
    assert list(problems()) == []


def test_a_report_says_when_where_to_and_under_which_reference(world, clocks):
    report = decided(world)
    for changes, field in (
        ({"reference": " "}, "reference"),
        ({"recipients": ""}, "recipients"),
        ({"sent_at": NOW + DAY}, "sent_on"),
        ({"sent_at": NOON - DAY}, "sent_on"),
    ):
        with pytest.raises(ValidationError) as refused:
            report_send(report=report, sending=sending(**changes), actor=None, at=NOW)
        assert list(refused.value.message_dict) == [field]


def test_nothing_is_sent_before_it_is_decided(world, clocks):
    with pytest.raises(ValidationError, match="only while it is reportable"):
        sent(world, asked(world))


def more(world, report, text="Two more holes.", **changes) -> OccurrenceReport:
    return report_supplement(
        report=report, sending=sending(text), actor=world.engineer, at=NOW, **changes
    )


def test_supplements_are_rows_of_their_own_that_name_the_first(world, clocks):
    report = sent(world)
    second, third = more(world, report), more(world, report, "Analysis.")
    assert [row.number for row in (report, second, third)] == [1, 2, 3]
    assert {second.supplements, third.supplements} == {report}
    with pytest.raises(ValidationError, match="belongs to a first report"):
        more(world, second)


def test_a_closed_report_is_over(world, clocks):
    report = sent(world)
    with pytest.raises(ValidationError, match="Say why"):
        report_close(report=report, reason="", actor=None, at=NOW)
    closed = report_close(
        report=report, reason="analysis accepted", actor=world.engineer, at=NOW
    )
    assert closed.state == "closed"
    with pytest.raises(ValidationError, match="only while it is sent"):
        more(world, closed)


def test_a_report_that_was_not_sent_is_not_closed(world, clocks):
    with pytest.raises(ValidationError, match="closed only while it is sent"):
        report_close(report=decided(world), reason="x", actor=None, at=NOW)


# --- the clocks that follow ----------------------------------------------------------


def test_follow_ups_count_from_detection_and_end_when_they_are_met(world, clocks):
    report = sent(world)
    rules = rules_of(world.operator, "EASA", FOUND)
    preliminary, final = follow_ups_of(report, rules)
    assert preliminary.on == dt.date(2025, 1, 19)  # 20 December + 30 days
    assert final.on == dt.date(2025, 3, 20)
    waiting = line(report.finding).waiting
    assert [x.policy.key for x in waiting] == [
        "report_preliminary_days",
        "report_final_months",
    ]
    more(world, report)  # a mere addition meets no clock
    assert len(line(report.finding).waiting) == 2
    more(world, report, answers=preliminary.policy)
    assert [x.on for x in line(report.finding).waiting] == [final.on]


def test_level_3_corrosion_has_its_own_clock(world, clocks):
    clock("report_level_3_days", 7, "days", source="AD 90-25-07")
    finding = found(world, damage_type="corrosion", typed=CORROSION)
    levelled(world, finding, 3)
    report = sent(world, decided(world, finding.reports.get()))
    assert line(report.finding).waiting[0].on == dt.date(2024, 12, 27)
    levelled(world, finding, 2)
    assert line(report.finding).waiting[0].on == dt.date(2025, 1, 19)


@pytest.mark.parametrize(
    ("minutes", "words"),
    [(0, "0 h 0 min"), (61, "1 h 1 min"), (24 * 60, "1 d 0 h"),
     (3 * 24 * 60 + 300, "3 d 5 h"), (40 * 24 * 60, "40 d")],
)  # fmt: skip
def test_a_span_is_told_in_few_words(minutes, words):
    assert span_words(dt.timedelta(minutes=minutes, seconds=59)) == words


def test_the_countdown_is_late_only_after_the_last_moment(world, clocks):
    finding = crack(world)
    due = finding.reports.get().due_at
    assert line(finding, due).countdown == "0 h 0 min left"
    past = line(finding, due + dt.timedelta(hours=3))
    assert (past.countdown, past.late) == ("overdue by 3 h 0 min", True)


# --- the draft -----------------------------------------------------------------------


def test_the_draft_has_the_contents_that_both_rules_list(world, clocks):
    report = crack(
        world,
        description="Found while cleaning.",
        element="skin",
        found_by=world.assessor,
    ).reports.get()
    draft = report_draft(report)
    for words in (
        # 121.703(e)(1) to (10), in its order, and GM 145.A.60(c).
        "Aircraft type: ARD-52",
        f"Serial number: {world.aircraft.serial_number}",
        "Registration: Q7-AAA",
        "Operator: Northmere Air",
        "Date: 2024-12-20",
        "Flight number: not known yet",
        "Stage of operation: not known yet",
        "Emergency procedure effected: not known yet",
        "Nature of the condition: crack",
        "Structural item: skin",
        "Apparent cause: not known yet",
        "Action taken: not known yet",
        "Aircraft grounded: not known yet",
        "Aircraft total time: 10,066:40 FH · 10,080 FC",
        "Detected: 2024-12-20 00:00 UTC",
    ):
        assert words in draft.text, words
    assert "flight number" in draft.lacking
    assert problem_text(draft.text).endswith("Found while cleaning.")


def test_missing_data_hold_no_report_back(world, clocks):
    report = decided(world)
    draft = report_draft(report)
    assert NOT_KNOWN in draft.text
    done = report_send(
        report=report, sending=sending(draft.text), actor=world.engineer, at=NOW
    )
    assert done.content == draft.text


def test_the_draft_names_no_person(world, clocks):
    finding = crack(world, found_by=world.assessor)
    text = report_draft(finding.reports.get()).text
    assert world.assessor.name not in text
    assert "Robin" not in text


def test_a_problem_text_too_long_for_the_form_is_noticed_not_refused(world, clocks):
    report = decided(world)
    clock("report_text_characters", 1_500, "count", source="form instructions")
    head = "Operator: Northmere Air\n\nProblem text:\n"
    assert length_notice(report, head + "x" * 1_500) == ""
    notice = length_notice(report, head + "x" * 1_501)
    assert "1,501 characters; the form takes 1,500 (form instructions)" in notice


def test_a_period_whose_beginning_is_not_on_record_is_not_waited_for(world):
    aircraft = operated(world, regime="FAA")
    clock("report_period_hours", 96, "hours", regime="FAA")
    report = crack(world, aircraft=aircraft).reports.get(regime="FAA")
    assert report.due_at == dt.datetime(2024, 12, 24, tzinfo=dt.UTC)
    asked = asked_by(aircraft.operator, "FAA", report.detected_at)
    assert any("no report_period_begins is recorded" in x for x in asked.because)
