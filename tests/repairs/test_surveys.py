"""Intake of an aircraft with a past: its sheet held against its records.

The three outcomes, and that a thing found without a record opens an engineering item,
are trade practice of hand-over surveys (after NTSB AAR-07/04: a major repair with no
entry in the records).
"""

from __future__ import annotations

import datetime as dt

import pytest
from django.core.exceptions import ValidationError

from fleet.due import Bucket, Counters, DueState
from fleet.selectors.verify import problems
from fleet.services.people import policy_set
from repairs.models import DuePoint, Finding, Repair, SurveyItem
from repairs.selectors.surveys import record_key, survey_page
from repairs.services.survey_answers import (
    LegacyRepair,
    NewFinding,
    survey_item_answer,
)
from repairs.services.survey_entry import SurveyEntry
from repairs.services.surveys import (
    close_problems,
    survey_close,
    survey_compare,
    survey_item_record,
    survey_match,
    survey_open,
)
from repairs.sheet_lines import SheetError, SheetLine, sheet_read
from reports.due_list import DueQuery, due_list
from tests.factories import NOW, TODAY, aircraft_make
from tests.queries import assert_same_queries
from tests.record_rows import FOUND, found

pytestmark = pytest.mark.django_db
SEEN = TODAY - dt.timedelta(days=2)
HERE = "STA 640+10, 4 in below S-7R"
NEAR = "STA 655, 4 in below S-7R"


def opened(world, area="whole aircraft", **changes):
    entry = {"at": Counters(604_000, 10_080)} | changes
    return survey_open(
        entry=SurveyEntry(world.aircraft, area, SEEN, world.assessor, **entry),
        today=TODAY,
        actor=world.engineer,
        at=NOW,
    )


def lines(world, survey, *written):
    made = [
        one if isinstance(one, SheetLine) else SheetLine(one, "damage", "dent")
        for one in written
    ]
    return survey_item_record(survey=survey, lines=made, actor=world.engineer, at=NOW)


def compared(world, survey):
    return survey_compare(survey=survey, actor=world.engineer, at=NOW)


def match(world, item, record):
    return survey_match(item=item, record=record, actor=world.engineer, at=NOW)


def answer(world, item, opens=None, on=TODAY, words="documents looked through"):
    return survey_item_answer(
        item=item,
        answer=words,
        person=world.assessor,
        on=on,
        opens=opens,
        actor=world.engineer,
        at=NOW,
    )


def close(world, survey, on=TODAY):
    return survey_close(
        survey=survey, person=world.certifier, on=on, actor=world.engineer, at=NOW
    )


def outcomes(survey):
    return {x.number: x.outcome for x in survey.items.all()}


def of_days(world, days):
    return policy_set(
        key="survey_answer_days",
        value=days,
        unit="days",
        source="exposition 2.12, invented",
        grade="adopted",
        effective_from=dt.date(2020, 1, 1),
        operator=world.operator,
        at=NOW,
    )


def due_rows(world, as_of=TODAY, **query):
    listed = due_list(DueQuery(as_of, kind="engineering", **query), user=world.engineer)
    return listed.rows


class TestOpening:
    def test_each_survey_of_an_aircraft_has_the_next_number(self, world):
        assert [opened(world).number for _ in range(3)] == [1, 2, 3]

    @pytest.mark.parametrize(
        "area", ["whole aircraft", "Fuselage", "fus", "STA 500 to 700, S-4L to S-8L"]
    )
    def test_an_area_is_the_whole_a_section_or_a_range(self, world, area):
        assert opened(world, area).area == area

    @pytest.mark.parametrize("area", ["", "somewhere aft of the wing"])
    def test_an_area_that_cannot_be_read_says_what_may_be_written(self, world, area):
        with pytest.raises(ValidationError, match="whole aircraft"):
            opened(world, area)

    def test_the_sheet_is_a_document_and_a_copy_needs_its_reference(self, world):
        made = opened(world, document_reference="SURVEY-7")
        assert str(made.document) == "SURVEY-7"
        with pytest.raises(ValidationError, match="reference of the sheet"):
            opened(world, upload=object())


class TestLines:
    def test_a_location_that_cannot_be_read_is_kept_as_written(self, world):
        """Recording is never refused for a location (AMC M.A.305(c)2(b) wants one; what
        is written down is kept until it is placed)."""
        survey = opened(world)
        one, two = lines(world, survey, HERE, "aft of the big door")
        assert one.section.code == "FUS"
        assert two.section is None
        assert two.place_entered == "aft of the big door"

    def test_lines_are_recorded_all_or_none(self, world):
        survey = opened(world)
        with pytest.raises(ValidationError, match="Line 2 has no location"):
            lines(world, survey, HERE, " ")
        assert not survey.items.exists()

    def test_numbers_go_on_where_the_last_lines_ended(self, world):
        survey = opened(world)
        lines(world, survey, HERE, NEAR)
        (third,) = lines(world, survey, HERE)
        assert third.number == 3


class TestComparing:
    def test_every_line_and_record_gets_one_of_three_outcomes(self, world):
        known, unseen = found(world), found(world, place_entered="STA 900, S-3L")
        survey = opened(world)
        one, _ = lines(world, survey, HERE, "STA 500, S-4R")
        match(world, one, known)
        told = compared(world, survey)
        assert (told.recorded_not_found, told.found_not_recorded) == (1, 1)
        assert outcomes(survey) == {
            1: "matched",
            2: "found_not_recorded",
            3: "recorded_not_found",
        }
        missing = survey.items.get(number=3)
        assert missing.finding == unseen
        assert missing.place_text == unseen.place_text
        assert missing.seen_as == "nothing"

    def test_comparing_again_changes_nothing_that_has_its_outcome(self, world):
        found(world)
        survey = opened(world)
        lines(world, survey, "STA 500, S-4R")
        compared(world, survey)
        before = outcomes(survey)
        told = compared(world, survey)
        assert (told.recorded_not_found, told.found_not_recorded) == (0, 0)
        assert outcomes(survey) == before

    def test_an_empty_sheet_is_not_taken_for_an_empty_aircraft(self, world):
        found(world)
        with pytest.raises(ValidationError, match="Enter the lines first"):
            compared(world, opened(world))

    def test_records_outside_the_area_are_no_difference(self, world):
        found(world)
        survey = opened(world, "STA 300 to 400, S-4L to S-8L")
        lines(world, survey, "STA 350, S-5L")
        assert compared(world, survey).recorded_not_found == 0

    def test_a_record_to_be_placed_is_shown_beside_an_area_and_is_no_item(self, world):
        lost = found(world, place_entered="near the galley")
        page = survey_page(opened(world, "Fuselage"))
        assert page.unplaced == [lost]
        assert page.missing == []

    def test_what_was_found_after_the_survey_is_not_expected_of_it(self, world):
        found(world, found_on=TODAY)
        assert survey_page(opened(world)).missing == []


class TestMatching:
    def test_the_records_within_a_bay_are_offered_the_nearest_first(self, world):
        """Frames stand 20 in apart; 15 in away is within a bay, 100 in is not."""
        near, same = found(world, place_entered=NEAR), found(world)
        found(world, place_entered="STA 750, 4 in below S-7R")
        survey = opened(world)
        lines(world, survey, HERE)
        (line,) = survey_page(survey).lines["to_match"]
        assert [one.record for one in line.candidates] == [same, near]
        assert line.candidates[0].gap_mm == 0

    def test_a_line_to_be_placed_is_offered_records_to_be_placed(self, world):
        lost = found(world, place_entered="near the galley")
        found(world)
        survey = opened(world)
        lines(world, survey, "by the galley")
        (line,) = survey_page(survey).lines["to_match"]
        assert [one.record for one in line.candidates] == [lost]

    def test_a_record_that_is_matched_is_offered_no_more(self, world):
        known, survey = found(world), opened(world)
        one, _ = lines(world, survey, HERE, NEAR)
        match(world, one, known)
        (line,) = survey_page(survey).lines["to_match"]
        assert line.candidates == []

    def test_a_match_after_comparing_settles_line_and_record(self, world):
        known, survey = found(world), opened(world)
        (one,) = lines(world, survey, "STA 900, S-3L")
        compared(world, survey)
        match(world, one, known)
        assert outcomes(survey) == {1: "matched", 2: "matched"}
        assert not DuePoint.objects.filter(closed_on__isnull=True, survey_item=one)

    def test_a_match_taken_back_leaves_line_and_record_open_again(self, world):
        known, survey = found(world), opened(world)
        (one,) = lines(world, survey, HERE)
        compared(world, survey)
        match(world, one, known)
        match(world, one, None)
        assert outcomes(survey) == {1: "to_match", 2: "recorded_not_found"}

    def test_a_record_of_another_aircraft_is_refused(self, world):
        other = aircraft_make(world.operator, world.variant, "Q7-AAB")
        survey = opened(world)
        (one,) = lines(world, survey, HERE)
        with pytest.raises(ValidationError, match="is not on Q7-AAA"):
            match(world, one, found(world, aircraft=other))


class TestEngineeringItems:
    def test_what_is_found_and_not_recorded_is_due_by_the_policys_days(self, world):
        """Day 0 is the survey: 10 days after 30 December is 9 January."""
        of_days(world, 10)
        survey = opened(world)
        lines(world, survey, HERE)
        compared(world, survey)
        (row,) = due_rows(world)
        assert row.due.on == SEEN + dt.timedelta(days=10) == dt.date(2025, 1, 9)
        assert row.bucket is Bucket.TO_30
        assert "exposition 2.12, invented" in row.item.basis
        assert row.item.address == ("survey", survey.pk)
        late = due_rows(world, as_of=dt.date(2025, 1, 10))
        assert late[0].bucket is Bucket.OVERDUE

    def test_without_a_policy_it_is_due_now_and_says_so(self, world):
        survey = opened(world)
        lines(world, survey, HERE)
        compared(world, survey)
        (row,) = due_rows(world)
        assert row.state is DueState.CANNOT_COMPUTE
        assert "no policy survey_answer_days is recorded" in row.said[0]

    def test_an_answer_takes_it_off_the_list(self, world):
        survey = opened(world)
        (one,) = lines(world, survey, HERE)
        compared(world, survey)
        answer(world, one)
        assert due_rows(world) == ()
        one.refresh_from_db()
        assert (one.answered_by, one.answered_on) == (world.assessor, TODAY)


class TestAnswers:
    @pytest.fixture
    def item(self, world):
        survey = opened(world)
        line = SheetLine(HERE, "damage", "dent", 60.96, 45.72)
        (made,) = lines(world, survey, line)
        compared(world, survey)
        made.refresh_from_db()
        return made

    def test_it_may_open_a_finding_at_its_own_location_and_size(self, world, item):
        answer(world, item, NewFinding("dent"))
        made = Finding.objects.get()
        assert made.place_entered == HERE
        assert made.place_text == item.place_text
        assert (made.found_on, made.at_cycles) == (SEEN, 10_080)
        assert made.state == "reported"
        sizes = made.measurements.get().values.order_by("quantity")
        assert [row.value for row in sizes] == pytest.approx([60.96, 45.72])
        item.refresh_from_db()
        assert item.finding == made

    def test_it_may_open_a_legacy_repair_whose_evidence_nobody_saw(self, world, item):
        answer(world, item, LegacyRepair("external_doubler"))
        made = Repair.objects.get()
        assert (made.legacy, made.evidence) == (True, "not_seen")
        assert made.category == "pending"
        assert made.approval_document is None
        assert (made.at_cycles, made.at_minutes) == (None, None)
        assert made.released_on == world.aircraft.data_from
        assert "Release date unknown" in made.description

    def test_an_answer_has_words_and_is_given_once(self, world, item):
        with pytest.raises(ValidationError, match="Say how"):
            answer(world, item, words=" ")
        answer(world, item)
        with pytest.raises(ValidationError, match="was answered on 2025-01-01"):
            answer(world, item)

    def test_an_answer_does_not_lie_before_the_survey(self, world, item):
        with pytest.raises(ValidationError, match="before the survey"):
            answer(world, item, on=FOUND)

    def test_a_line_without_an_outcome_is_compared_first(self, world):
        (one,) = lines(world, opened(world), HERE)
        with pytest.raises(ValidationError, match="Compare the sheet"):
            answer(world, one)

    def test_what_nobody_saw_opens_no_record(self, world):
        found(world)
        survey = opened(world)
        lines(world, survey, "STA 500, S-4R")
        compared(world, survey)
        missing = survey.items.get(outcome="recorded_not_found")
        with pytest.raises(ValidationError, match="nothing seen"):
            answer(world, missing, NewFinding("dent"))


class TestClosing:
    def test_it_closes_once_every_item_is_matched_or_answered_and_says_who(self, world):
        known = found(world)
        found(world, place_entered="STA 900, S-3L")
        survey = opened(world)
        one, two = lines(world, survey, HERE, "STA 500, S-4R")
        match(world, one, known)
        with pytest.raises(ValidationError, match="still to match: 2; not compared"):
            close(world, survey)
        compared(world, survey)
        with pytest.raises(
            ValidationError, match="found, not recorded: 2; recorded, not found: 3"
        ):
            close(world, survey)
        answer(world, two)
        answer(world, survey.items.get(number=3))
        done = close(world, survey)
        assert (done.state, done.closed_by, done.closed_on) == (
            "closed",
            world.certifier,
            TODAY,
        )

    def test_every_step_of_it_agrees_with_the_history(self, world):
        known = found(world)
        survey = opened(world, document_reference="SURVEY-7")
        one, two, three = lines(world, survey, HERE, "STA 500, S-4R", "STA 520, S-4R")
        match(world, one, known)
        compared(world, survey)
        answer(world, two, NewFinding("dent"))
        answer(world, three, LegacyRepair("flush"))
        close(world, survey)
        assert list(problems()) == []

    def test_a_closed_survey_stays_as_it_is(self, world):
        survey = opened(world)
        (one,) = lines(world, survey, HERE)
        match(world, one, found(world))
        close(world, survey)
        for act in (
            lambda: lines(world, survey, NEAR),
            lambda: compared(world, survey),
            lambda: match(world, one, None),
            lambda: close(world, survey),
        ):
            with pytest.raises(ValidationError, match="was closed on 2025-01-01"):
                act()

    def test_a_record_made_since_stands_against_closing(self, world):
        survey = opened(world)
        (one,) = lines(world, survey, HERE)
        compared(world, survey)
        answer(world, one)
        late = found(world, place_entered="STA 900, S-3L")
        assert close_problems(survey) == [f"not compared yet: {late}"]


class TestSheets:
    TABLE = (
        "location,what,length,width,remark\n"
        "STA 640 S-7R,dent,2.4 in,1.8,old paint\n"
        "STA 660 S-7R,external doubler,,,\n"
        ",dent,,,\n"
        "STA 700 S-7R,stain,minus,,\n"
    )

    def test_each_row_says_what_was_read_and_what_is_wrong_with_it(self):
        one, two, three, four = sheet_read(self.TABLE, unit="in")
        assert one.line.seen_as == "damage"
        assert one.line.description == "dent: old paint"
        assert (one.line.length_mm, one.line.width_mm) == pytest.approx((60.96, 45.72))
        assert two.line.seen_as == "repair"
        assert (two.line.length_mm, two.line.width_mm) == (None, None)
        assert three.in_the_way == ("no location; write where it is, in any words",)
        assert four.in_the_way[0].startswith("length: ")
        assert four.doubtful[0].startswith("“stain” names no damage type")
        assert four.number == 5

    @pytest.mark.parametrize(
        ("table", "says"),
        [
            ("place,what\na,b\n", "Expected at least: location, what"),
            ("location,what,colour\na,b,c\n", "“colour” is not known"),
            ("location,what\n", "No line was read"),
            ("", "Read: nothing"),
        ],
    )
    def test_a_table_that_is_none_says_what_it_should_have(self, table, says):
        with pytest.raises(SheetError, match=says):
            sheet_read(table, unit="in")

    @pytest.mark.parametrize(
        ("what", "seen_as"),
        [("Puncture", "damage"), ("blend-out", "repair"), ("hole", "damage"),
         ("doubler", "repair"), ("other", "unclear"), ("", "unclear")],
    )  # fmt: skip
    def test_the_trades_words_say_whether_it_is_damage_or_a_repair(self, what, seen_as):
        (row,) = sheet_read(f"location,what\nFR 31,{what}\n", unit="in")
        assert row.line.seen_as == seen_as


class TestPages:
    @pytest.fixture
    def engineer(self, client, world, settings):
        settings.FRAMEBAY_TODAY = TODAY.isoformat()
        client.force_login(world.engineer)
        return client

    def test_the_way_from_opening_to_closing(self, engineer, world):
        known = found(world)
        address = f"/aircraft/{world.aircraft.pk}/surveys/new/"
        head = {"area": "whole aircraft", "surveyed_on": SEEN,
                "surveyed_by": world.assessor.pk}  # fmt: skip
        engineer.post(address, head)
        survey = world.aircraft.surveys.get()
        rows = {
            "form-TOTAL_FORMS": 3,
            "form-INITIAL_FORMS": 0,
            "form-0-place_entered": HERE,
            "form-0-seen_as": "damage",
            "form-0-length_mm": "2.4",
            "form-1-place_entered": "STA 500, S-4R",
            "form-1-seen_as": "repair",
            "form-2-seen_as": "damage",
        }
        read = engineer.post(f"/surveys/{survey.pk}/lines/", rows | {"step": "read"})
        assert "nothing is saved yet" in read.content.decode()
        assert not survey.items.exists()
        engineer.post(f"/surveys/{survey.pk}/lines/", rows | {"step": "save"})
        one, two = survey.items.all()
        assert one.length_mm == pytest.approx(60.96)
        page = engineer.get(f"/surveys/{survey.pk}/").content.decode()
        assert f'value="{record_key(known)}"' in page
        engineer.post(f"/survey-items/{one.pk}/match/", {"record": record_key(known)})
        engineer.post(f"/surveys/{survey.pk}/compare/")
        page = engineer.get(f"/surveys/{survey.pk}/").content.decode()
        assert "<b>1</b> matched" in page
        assert "<b>1</b> found, not recorded" in page
        refused = engineer.post(f"/surveys/{survey.pk}/close/", {"on": TODAY})
        assert "Open: found, not recorded: 2" in refused.content.decode()
        engineer.post(
            f"/survey-items/{two.pk}/answer/",
            {"answer": "no paper found", "on": TODAY, "opens": "repair",
             "kind": "flush"},
        )  # fmt: skip
        engineer.post(f"/surveys/{survey.pk}/close/", {"on": TODAY})
        page = engineer.get(f"/surveys/{survey.pk}/").content.decode()
        assert f"closed {TODAY} by {world.engineer.person}" in page
        assert Repair.objects.get().kind == "flush"

    def test_a_table_is_read_first_and_changes_nothing(self, engineer, world):
        survey = opened(world)
        address, table = f"/surveys/{survey.pk}/import/", TestSheets.TABLE
        text = engineer.post(address, {"table": table, "step": "read"}).content.decode()
        assert "no location; write where it is" in text
        assert "60.96 mm" in text or "2.4 in" in text
        assert not SurveyItem.objects.exists()
        refused = engineer.post(address, {"table": table, "step": "save"})
        assert "Line 4: no location" in refused.content.decode()
        assert not SurveyItem.objects.exists()
        whole = "\n".join(table.splitlines()[:3])
        engineer.post(address, {"table": whole, "step": "save"})
        assert survey.items.count() == 2

    def test_an_answer_that_lacks_its_type_keeps_what_was_typed(self, engineer, world):
        survey = opened(world)
        (one,) = lines(world, survey, SheetLine(HERE, "unclear", "stain"))
        compared(world, survey)
        said = {"answer": "looked through the file", "on": TODAY, "opens": "finding"}
        text = engineer.post(f"/survey-items/{one.pk}/answer/", said).content.decode()
        assert "Choose the damage type" in text
        assert "looked through the file" in text
        assert not Finding.objects.exists()

    def test_a_login_without_a_person_answers_for_nothing(self, engineer, world):
        survey = opened(world)
        (one,) = lines(world, survey, HERE)
        compared(world, survey)
        type(world.engineer).objects.filter(pk=world.engineer.pk).update(person=None)
        said = {"answer": "seen", "on": TODAY}
        text = engineer.post(f"/survey-items/{one.pk}/answer/", said).content.decode()
        assert "has no person behind it" in text

    def test_the_page_costs_the_same_for_twenty_lines(self, engineer, world):
        survey = opened(world)
        known = found(world)
        lines(world, survey, HERE)

        def grow():
            made = lines(world, survey, *[HERE] * 19)
            match(world, made[0], known)
            compared(world, survey)

        assert_same_queries(engineer, f"/surveys/{survey.pk}/", grow, ceiling=45)
