"""The due list as a planner reads it: what is on it, in which order, and as of when."""

from __future__ import annotations

import datetime as dt

import pytest

from fleet.due import Bucket, Counters, DueState
from fleet.models import Variant
from fleet.services.aircraft import aircraft_set_state
from fleet.services.usage import usage_correct
from fleet.usage_lines import UsageLine
from repairs.models import Event, EventPhase
from repairs.services.accomplishments import accomplishment_record
from repairs.services.inspections import requirement_raise
from repairs.services.requirement_draft import LimitEntry, RequirementDraft
from reports.due_list import DueQuery, due_list
from reports.due_rows import HEADER, export_row
from tests import due_rows as make
from tests.due_rows import AT, FIRST, TODAY, day, fly
from tests.factories import program

pytestmark = pytest.mark.django_db
LATER = AT + dt.timedelta(hours=3)


def required(aircraft, *limits: LimitEntry, **columns):
    columns = {
        "operator": make.operator(),
        "title": "fitting lug",
        "requirement_class": "limitation",
        "area": "FR 31",
        "criteria": "no crack",
        "method": "detailed_visual",
        "effective_on": FIRST,
        "aircraft": [aircraft] if aircraft else [],
        "source_document": make.document(),
    } | columns
    at = columns.pop("at", AT)
    draft = RequirementDraft(limits=limits, **columns)
    return requirement_raise(actor=None, at=at, draft=draft)


def at_total(entered: str, phase="threshold") -> LimitEntry:
    return LimitEntry(phase, entered, base="new")


def listed(**query):
    query = {"as_of": day(20)} | query
    user = query.pop("user", None)
    return due_list(DueQuery(**query), user=user)


def only(**query):
    (row,) = listed(**query).rows
    return row


class TestRows:
    """25,000 FC at joining and 4 FC a day for 21 days: 25,084 on the list's date."""

    @pytest.fixture
    def aircraft(self):
        aircraft = make.aircraft()
        fly(aircraft, 21)
        return aircraft

    def test_a_requirement_shows_due_now_remaining_and_forecast(self, aircraft):
        required(aircraft, at_total("25,184 FC"), LimitEntry("repeat", "500 FC"))
        row = only()
        (cell,) = row.cells
        assert (cell.due, cell.now, cell.remaining) == (
            "25,184 FC",
            "25,084 FC",
            "100 FC",
        )
        assert row.forecast == str(day(20) + dt.timedelta(days=25))
        assert row.bucket is Bucket.TO_30
        assert row.item.item == "I-0001 ARD-DOC-1 rev A fitting lug"
        assert row.item.basis == "first 25,184 FC from new"
        assert row.item.marks == ("unverified: awaits second keying",)

    def test_overdue_leads_and_buckets_do_not_overlap(self, aircraft):
        for total in (25_384, 25_264, 25_070, 25_184):
            required(aircraft, at_total(f"{total} FC"))
        found = listed()
        assert [row.bucket for row in found.rows] == [
            Bucket.OVERDUE,
            Bucket.TO_30,
            Bucket.TO_60,
            Bucket.TO_90,
        ]
        assert list(found.tally.values()) == [1, 1, 1, 1, 0]
        assert found.rows[0].cells[0].remaining == "−14 FC"
        assert found.rows[0].forecast == ""

    def test_what_lies_beyond_the_horizon_is_left_out(self, aircraft):
        required(aircraft, at_total("25,184 FC"))
        assert listed(within_days=24).rows == ()
        assert len(listed(within_days=25).rows) == 1

    def test_what_was_done_shows_when_and_the_next_due(self, aircraft):
        requirement = required(
            aircraft, at_total("25,100 FC"), LimitEntry("repeat", "60 FC")
        )
        record(requirement, day(2), 25_012)
        row = only()
        assert row.last_done == f"{day(2)}, 20,010:00 FH · 25,012 FC"
        assert row.cells[0].due == "25,072 FC"
        assert row.state is DueState.OVERDUE

    def test_what_is_due_in_landings_was_done_at_landings(self, aircraft):
        requirement = required(
            aircraft,
            at_total("25,100 FC"),
            LimitEntry("repeat", "60 landings"),
        )
        record(requirement, day(2), 25_012)
        row = only()
        assert row.last_done.endswith(" · 25,012 FC · 25,012 landings")
        assert row.cells[0].due == "25,072 landings"
        exported = dict(zip(HEADER, export_row(row), strict=True))
        assert exported["last done at landings"] == 25_012
        assert exported["last done at PC"] is None

    def test_what_cannot_be_computed_counts_as_due_and_leads_its_group(self, aircraft):
        required(aircraft, LimitEntry("threshold", "500 FC", base="release"))
        required(aircraft, at_total("25,085 FC"))
        rows = listed().rows
        assert rows[0].state is DueState.CANNOT_COMPUTE
        assert rows[0].bucket is Bucket.TO_30
        assert rows[0].said == (
            "cannot be computed: no flight cycles recorded for base release",
        )

    def test_counters_not_reported_make_it_presumed_overdue(self, aircraft):
        required(aircraft, at_total("25,184 FC"))
        row = only(as_of=day(46))
        assert row.state is DueState.PRESUMED_OVERDUE
        assert row.said == (f"presumed overdue, counters not reported since {day(20)}",)

    def test_a_stored_aircraft_shows_items_due_before_return_to_service(self, aircraft):
        required(aircraft, at_total("20 days", phase="threshold"), effective_on=FIRST)
        state(aircraft, "stored", day(15))
        made = aircraft.__class__.objects.get(pk=aircraft.pk)
        assert made.manufactured_on is None
        row = only()
        assert row.said == (
            "cannot be computed: no date recorded for base new",
            "stored: due before return to service",
        )

    def test_unknown_hours_are_said_beside_items_in_hours_only(self, aircraft):
        fly(aircraft, 1, start=21, cycles=1, minutes=None)
        required(aircraft, at_total("20,072 FH"))
        required(aircraft, at_total("25,090 FC"))
        hours, cycles = sorted(
            listed(as_of=day(21)).rows,
            key=lambda row: row.cells[0].counter,
            reverse=True,
        )
        assert hours.said[0].startswith("at least 1 flight without hours")
        assert cycles.said == ()

    def test_the_limit_of_validity_is_a_row(self, aircraft):
        Variant.objects.filter(pk=aircraft.variant_id).update(
            validity_cycles=25_184, source="invented"
        )
        row = only(kind="validity")
        assert row.cells[0].due == "25,184 FC"

    def test_an_open_event_phase_is_due_before_further_flight(self, aircraft):
        event = Event.objects.create(
            operator=aircraft.operator,
            aircraft=aircraft,
            number="V-0001",
            kind="lightning",
            state="open",
            happened_on=day(19),
            at_cycles=25_080,
            entered_at=AT,
        )
        EventPhase.objects.create(event=event, number=1, title="entry and exit points")
        row = only()
        assert row.item.basis == "before further flight"
        assert row.state is DueState.OVERDUE

    def test_filters_narrow_the_list(self, aircraft):
        other = make.aircraft("Q7-TSB")
        fly(other, 21)
        required(aircraft, at_total("25,090 FC"))
        required(other, at_total("25,090 FC"))
        assert only(registration="q7-tsb").mark == "Q7-TSB"
        assert len(listed(kind="threshold").rows) == 2
        assert listed(kind="deferral").rows == ()
        assert listed(zone="133").rows == ()


def record(requirement, on, cycles, at=AT):
    return accomplishment_record(
        actor=None,
        at=at,
        today=TODAY,
        subject=requirement.subjects.get(),
        done_on=on,
        counters=Counters(1_200_600, cycles, cycles),
        result="no_finding",
        proof=program(),
    )


def state(aircraft, word, on):
    aircraft_set_state(aircraft=aircraft, state=word, from_on=on, at=AT)


class TestAsOfAndKnownAt:
    def test_as_of_an_earlier_day_shows_what_was_due_then(self):
        aircraft = make.aircraft()
        fly(aircraft, 21)
        requirement = required(
            aircraft, at_total("25,020 FC"), LimitEntry("repeat", "60 FC")
        )
        record(requirement, day(3), 25_016)
        assert only(as_of=day(2)).cells[0].due == "25,020 FC"
        assert only(as_of=day(3)).cells[0].due == "25,076 FC"

    def test_known_at_shows_the_list_before_a_late_entry(self):
        aircraft = make.aircraft()
        fly(aircraft, 21)
        requirement = required(
            aircraft, at_total("25,020 FC"), LimitEntry("repeat", "60 FC")
        )
        record(requirement, day(3), 25_016, at=LATER)
        before = only(known_at=AT + dt.timedelta(hours=1))
        assert before.cells[0].due == "25,020 FC"
        assert only(known_at=LATER).cells[0].due == "25,076 FC"

    def test_a_correction_of_usage_moves_an_item_to_overdue(self):
        aircraft = make.aircraft()
        rows = fly(aircraft, 21)
        required(aircraft, at_total("25,090 FC"))
        assert only().state is DueState.DUE_SOON
        usage_correct(
            actor=None,
            at=LATER,
            record=rows[5],
            line=UsageLine(day(5), 12, 600),
            source="log page 7",
            reason="eight flights were missed",
        )
        assert only().state is DueState.OVERDUE
        assert only(known_at=AT).state is DueState.DUE_SOON

    def test_equal_lists_have_equal_digests_and_others_do_not(self):
        aircraft = make.aircraft()
        fly(aircraft, 21)
        required(aircraft, at_total("25,090 FC"))
        assert listed().digest == listed().digest
        assert listed().digest != listed(as_of=day(19)).digest

    def test_the_earliest_data_date_of_the_fleet_is_told(self):
        fly(make.aircraft(), 21)
        fly(make.aircraft("Q7-TSB"), 9)
        assert listed().data_current_to == day(8)


def test_an_operator_sees_its_own_list_only():
    aircraft = make.aircraft()
    fly(aircraft, 21)
    required(aircraft, at_total("25,090 FC"))
    assert len(listed(user=make.user("planner")).rows) == 1
    assert listed(user=make.outsider("planner")).rows == ()


@pytest.mark.parametrize("count", [1, 20])
def test_queries_do_not_grow_with_rows(count, django_assert_max_num_queries):
    for n in range(count):
        aircraft = make.aircraft(f"Q7-T{n:02d}")
        fly(aircraft, 5)
        required(aircraft, at_total("25,030 FC"))
    planner = make.user("planner")
    planner.operator_ids()
    with django_assert_max_num_queries(14):
        assert len(listed(as_of=day(5), user=planner).rows) == count
