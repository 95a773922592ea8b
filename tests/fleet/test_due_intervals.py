"""Thresholds and repeats: worked by hand beside each check, and as properties."""

from __future__ import annotations

from datetime import date, timedelta

import pytest
from hypothesis import given
from hypothesis import strategies as st

from fleet.due import (
    ZERO,
    Anchor,
    AnchorPolicy,
    Base,
    CalendarRule,
    Combine,
    Counter,
    Counters,
    Done,
    Due,
    DueState,
    Limit,
    Standing,
    due_status,
)
from fleet.intervals import due_from, next_due, overrun, restart

DAY = date(2024, 3, 18)
NEW = {Base.NEW: Anchor(ZERO, date(2000, 1, 1))}


def cycles(amount: int, on: date = DAY, *, approved: bool = False) -> Done:
    return Done(Counters(cycles=amount), on, approved)


def flown(hours: int, *, approved: bool = False) -> Done:
    return Done(Counters(minutes=hours * 60), DAY, approved)


def test_threshold_counts_from_release_and_repeat_from_early_work():
    """21,340 + 15,000 = 36,340; done at 36,102, + 5,000 = 41,102."""
    release = {Base.RELEASE: Anchor(Counters(cycles=21_340), DAY)}
    first = due_from([Limit(Counter.CYCLES, 15_000, Base.RELEASE)], release)
    assert first.at.cycles == 36_340
    due = next_due(first, [cycles(36_102)], [Limit(Counter.CYCLES, 5_000)])
    assert due is not None
    assert due.at.cycles == 41_102


def test_all_counters_restart_together_at_the_accomplishment():
    """30,412:30 + 6,000 = 36,412:30 FH; 18,905 + 3,500 FC; 2024-03-18 + 24 months."""
    repeat = [
        Limit(Counter.MINUTES, 6_000 * 60),
        Limit(Counter.CYCLES, 3_500),
        Limit(Counter.MONTHS, 24),
    ]
    done = Done(Counters(minutes=30_412 * 60 + 30, cycles=18_905), DAY)
    due = next_due(None, [done], repeat)
    assert due is not None
    assert due.at == Counters(minutes=36_412 * 60 + 30, cycles=22_405)
    assert due.on == date(2026, 3, 18)


@pytest.mark.parametrize(
    ("at_effective_date", "expected"),
    [(20_100, 24_000), (23_400, 24_900), (25_950, 27_450)],
)
def test_grace_after_the_effective_date_whichever_later(at_effective_date, expected):
    """max(24,000, N + 1,500)."""
    bases = NEW | {Base.EFFECTIVE: Anchor(Counters(cycles=at_effective_date), DAY)}
    limits = [
        Limit(Counter.CYCLES, 24_000, Base.NEW),
        Limit(Counter.CYCLES, 1_500, Base.EFFECTIVE),
    ]
    due = due_from(limits, bases, combine=Combine.LAST)
    assert due.at.cycles == expected


def test_a_threshold_already_passed_without_grace_is_overdue_now():
    due = due_from([Limit(Counter.CYCLES, 38_000, Base.NEW)], NEW)
    assigned = Standing(Counters(cycles=41_250), DAY)
    status = due_status(due, assigned, as_of=DAY)
    assert (status.state, status.lines[0].remaining) == (DueState.OVERDUE, -3_250)
    reassigned = Standing(Counters(cycles=33_400), DAY)
    assert due_status(due, reassigned, as_of=DAY).lines[0].remaining == 4_600


class TestToleranceDoesNotAccumulate:
    """Interval 4,000 FH, tolerance 400 FH, due 12,000 FH."""

    limits = (Limit(Counter.MINUTES, 4_000 * 60, tolerance=400 * 60),)
    due = Due(Counters(minutes=12_000 * 60))

    def after(self, done, policy=AnchorPolicy.SCHEDULED_IF_LATE, limits=None):
        limits = limits or self.limits
        due = next_due(self.due, [done], limits, threshold=limits, policy=policy)
        assert due is not None
        assert due.at.minutes is not None
        return due.at.minutes // 60

    def test_late_inside_an_approved_tolerance(self):
        assert self.after(flown(12_310, approved=True)) == 16_000
        assert not overrun(self.due, flown(12_310, approved=True), self.limits)

    def test_early_counts_from_the_day_of_the_work(self):
        assert self.after(flown(11_700)) == 15_700

    @pytest.mark.parametrize("policy", list(AnchorPolicy))
    def test_overrun_without_tolerance_counts_from_the_original_due(self, policy):
        strict = (Limit(Counter.MINUTES, 4_000 * 60),)
        assert self.after(flown(12_310), policy, strict) == 16_000
        late = overrun(self.due, flown(12_310), strict)
        assert [(x.counter, x.remaining) for x in late] == [
            (Counter.MINUTES, -310 * 60)
        ]

    def test_an_approval_does_not_stretch_beyond_the_tolerance(self):
        assert overrun(self.due, flown(12_450, approved=True), self.limits)
        assert not overrun(self.due, flown(12_400, approved=True), self.limits)
        assert self.after(flown(12_450, approved=True), AnchorPolicy.ACTUAL) == 16_000

    def test_actual_policy_counts_from_approved_late_work(self):
        assert self.after(flown(12_310, approved=True), AnchorPolicy.ACTUAL) == 16_310

    @pytest.mark.parametrize(
        ("hours", "expected"), [(11_600, 16_000), (11_599, 15_599), (11_700, 16_000)]
    )
    def test_window_counts_from_schedule_inside_it_only(self, hours, expected):
        limits = (Limit(Counter.MINUTES, 4_000 * 60, window=400 * 60),)
        assert self.after(flown(hours), AnchorPolicy.WINDOW, limits) == expected


def test_a_month_series_anchored_late_keeps_its_first_day_number():
    """Due 31 Jan, monthly; each done one day late with a month's approved tolerance:
    28 Feb, then 31 Mar and 30 Apr, not 28 Mar."""
    repeat = [Limit(Counter.MONTHS, 1, tolerance=1)]
    base = {Base.EFFECTIVE: Anchor(Counters(), date(2024, 12, 31))}
    threshold = [Limit(Counter.MONTHS, 1, Base.EFFECTIVE, tolerance=1)]
    first = due_from(threshold, base)
    done, seen = [], [first.on]
    for on in (date(2025, 2, 1), date(2025, 3, 1), date(2025, 4, 1)):
        done.append(Done(Counters(), on, late_approved=True))
        due = next_due(first, done, repeat, threshold=threshold)
        assert due is not None
        seen.append(due.on)
    assert seen == [
        date(2025, 1, 31),
        date(2025, 2, 28),
        date(2025, 3, 31),
        date(2025, 4, 30),
    ]


def test_a_calendar_window_is_in_days():
    """Due 30 Jun; done 31 May, 30 days early; with 30 days the next is 30 Dec."""
    due = Due(on=date(2025, 6, 30))
    for window, expected in ((30, date(2025, 12, 30)), (29, date(2025, 11, 30))):
        repeat = [Limit(Counter.MONTHS, 6, window=window)]
        early = [Done(Counters(), date(2025, 5, 31))]
        found = next_due(
            due, early, repeat, threshold=repeat, policy=AnchorPolicy.WINDOW
        )
        assert found is not None
        assert found.on == expected


def test_days_count_the_day_of_the_event_as_zero():
    base = {Base.RELEASE: Anchor(Counters(), date(2025, 1, 31))}
    due = due_from([Limit(Counter.DAYS, 7, Base.RELEASE)], base)
    assert due.on == date(2025, 2, 7)


def test_month_end_rule_reaches_the_due_date():
    base = {Base.LAST_DONE: Anchor(Counters(), date(2024, 8, 15))}
    due = due_from([Limit(Counter.MONTHS, 12)], base, calendar=CalendarRule.MONTH_END)
    assert due.on == date(2025, 8, 31)


def test_a_missing_base_is_named_and_the_other_numbers_are_kept():
    bases = {Base.RELEASE: Anchor(Counters(cycles=100))}
    limits = [
        Limit(Counter.CYCLES, 50, Base.RELEASE),
        Limit(Counter.MINUTES, 60, Base.RELEASE),
        Limit(Counter.MONTHS, 6, Base.RELEASE),
        Limit(Counter.LANDINGS, 6, Base.OVERHAUL),
    ]
    due = due_from(limits, bases)
    assert due.at == Counters(cycles=150)
    assert due.cannot_compute == (
        "no flight hours recorded for base release; "
        "no date recorded for base release; "
        "no landings recorded for base overhaul"
    )


def test_work_recorded_without_counters_leaves_the_next_due_uncomputed():
    done = Done(Counters(), DAY)
    due = next_due(None, [done], [Limit(Counter.CYCLES, 500)])
    assert due is not None
    assert due.cannot_compute == "no flight cycles recorded for base last done"


def test_nothing_repeats_after_a_single_inspection():
    first = Due(Counters(cycles=100))
    assert next_due(first, [], []) == first
    assert next_due(first, [cycles(90)], []) is None


def test_whichever_last_is_not_late_until_both_have_passed():
    due = Due(Counters(cycles=1_000), on=DAY, combine=Combine.LAST)
    half_passed = Done(Counters(cycles=1_100), DAY)
    assert overrun(due, half_passed, []) == []
    assert restart(due, half_passed, []) == Anchor(half_passed.at, DAY)
    both_passed = Done(Counters(cycles=1_100), DAY + timedelta(days=5))
    anchor = restart(due, both_passed, [])
    assert (anchor.at.cycles, anchor.on) == (1_000, DAY)


@given(
    interval=st.integers(1, 5_000),
    lateness=st.lists(st.integers(0, 100), min_size=1, max_size=12),
)
def test_tolerance_used_every_time_never_moves_the_series(interval, lateness):
    limits = [Limit(Counter.CYCLES, interval, tolerance=100)]
    first = Due(Counters(cycles=interval))
    done = [
        cycles(interval * (n + 1) + late, approved=True)
        for n, late in enumerate(lateness)
    ]
    due = next_due(first, done, limits, threshold=limits)
    assert due is not None
    assert due.at.cycles == interval * (len(lateness) + 1)


@given(
    due_at=st.integers(0, 10_000),
    done_at=st.integers(0, 10_000),
    interval=st.integers(1, 5_000),
    tolerance=st.integers(0, 500),
    approved=st.booleans(),
    policy=st.sampled_from([AnchorPolicy.SCHEDULED_IF_LATE, AnchorPolicy.WINDOW]),
)
def test_the_next_due_is_never_later_than_work_or_window_allow(
    due_at, done_at, interval, tolerance, approved, policy
):
    limits = [Limit(Counter.CYCLES, interval, window=tolerance)]
    first, done = Due(Counters(cycles=due_at)), [cycles(done_at, approved=approved)]
    due = next_due(first, done, limits, threshold=limits, policy=policy)
    assert due is not None
    assert due.at.cycles is not None
    assert due.at.cycles <= due_at + interval
    allowance = tolerance if policy is AnchorPolicy.WINDOW else 0
    assert due.at.cycles <= done_at + allowance + interval


@given(st.integers(0, 9_000), st.integers(1, 9_000), st.integers(1, 9_000))
def test_first_takes_the_smaller_and_last_the_larger_of_one_counter(base, one, two):
    bases = NEW | {Base.EFFECTIVE: Anchor(Counters(cycles=base))}
    limits = [
        Limit(Counter.CYCLES, one, Base.NEW),
        Limit(Counter.CYCLES, two, Base.EFFECTIVE),
    ]
    first = due_from(limits, bases, combine=Combine.FIRST).at.cycles
    last = due_from(limits, bases, combine=Combine.LAST).at.cycles
    assert (first, last) == tuple(sorted((one, base + two)))
