"""R23: with an input missing the result is "cannot be computed", and the item counts as
due on lists, never as in order.

Company practice, the safe default; rulings of the due list: missing counters or base
are due.
"""

from __future__ import annotations

import datetime as dt

import pytest

from fleet.due import Bucket, Counters, Due, DueState, Standing, due_status
from repairs.services.requirement_draft import LimitEntry
from tests import due_rows as make
from tests.due_rows import TODAY, day, fly
from tests.fleet.test_part_services import earlier, install, limit
from tests.reports.test_due_list import at_total, listed, required

pytestmark = pytest.mark.django_db
NUMBER = "ARD-FIT-1"


def assert_due(status, why: str) -> None:
    """Said to be due, among what is due first, and why it cannot be computed."""
    assert status.state is DueState.CANNOT_COMPUTE
    assert DueState.CANNOT_COMPUTE.value == "due: cannot be computed"
    assert status.bucket is Bucket.TO_30
    assert status.note == f"cannot be computed: {why}"


def only(**query):
    (row,) = listed(**{"as_of": TODAY} | query).rows
    return row


@pytest.fixture
def aircraft():
    aircraft = make.aircraft()
    fly(aircraft, 90)
    return aircraft


@pytest.mark.parametrize(
    ("due_cycles", "flown", "why"),
    [
        (100, None, "no flight cycles recorded for the subject"),
        (None, 10, "no due value recorded"),
    ],
)
def test_a_counter_or_a_limit_that_is_not_known_is_due(due_cycles, flown, why):
    due, now = Due(Counters(cycles=due_cycles)), Standing(Counters(cycles=flown))
    assert_due(due_status(due, now, as_of=TODAY), why)


def test_what_cannot_be_computed_is_due_however_much_seems_left():
    due = Due(Counters(cycles=1_000_000), cannot_compute="no base is recorded")
    status = due_status(due, Standing(Counters(cycles=0)), as_of=TODAY)
    assert_due(status, "no base is recorded")


def test_a_requirement_without_the_base_it_counts_from_is_listed_as_due(aircraft):
    """It counts from the release of a repair, and there is none."""
    required(aircraft, LimitEntry("threshold", "90,000 FC", base="release"))
    assert_due(only().status, only().due.cannot_compute)
    assert "base release" in only().due.cannot_compute


def test_hours_that_were_not_recorded_are_not_taken_as_none(aircraft):
    """20,300 FH flown, 10 left; two flights without hours then leave less, marked."""
    required(aircraft, at_total("20,310 FH"))
    before = only()
    fly(aircraft, 1, start=90, cycles=2, minutes=None)
    after = only()
    left = [row.status.limiting.remaining for row in (before, after)]
    assert left[0] == 10 * 60
    assert left[1] < left[0]
    assert "without hours" in " ".join(after.said)


def test_a_part_without_its_history_is_listed_as_due(aircraft):
    limit("90,000 FC")
    whole, broken = make.part(), make.part()
    install(whole, aircraft, 25_000, position="MLG LH")
    install(broken, aircraft, 25_000, position="MLG RH")
    assert not listed(as_of=TODAY).rows
    earlier(broken, "gap", "blocked", Counters(0, 0, 0), from_on=dt.date(2012, 1, 1))
    row = only()
    assert row.part == broken
    assert_due(row.status, row.due.cannot_compute)
    assert "gap in the back-to-birth record" in row.due.cannot_compute


def test_a_part_without_a_recorded_limit_is_listed_as_due(aircraft):
    limit("90,000 FC")
    part = make.part()
    install(part, aircraft, 25_000)
    part.part_number.life_limits.update(state="rejected")
    assert_due(only().status, f"no life limit is recorded for part number {NUMBER}")


def test_usage_that_stopped_coming_is_presumed_overdue_not_in_order(aircraft):
    """Data end on day 89 with 8 FC left, flown in two days; asked a month later."""
    required(aircraft, at_total("25,368 FC"))
    row = only(as_of=day(120))
    assert row.state is DueState.PRESUMED_OVERDUE
    assert row.bucket is Bucket.OVERDUE
    assert str(day(89)) in row.status.note
