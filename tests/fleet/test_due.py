"""Calendar arithmetic, remaining, forecast and buckets.

Worked examples are invented scenarios computed by hand beside each check; month
arithmetic is also compared with python-dateutil, forecasts with a day-by-day count.
"""

from __future__ import annotations

from datetime import date, timedelta
from fractions import Fraction

import pytest
from dateutil.relativedelta import relativedelta
from hypothesis import given
from hypothesis import strategies as st

from fleet.due import (
    Bucket,
    CalendarRule,
    Combine,
    Counter,
    Counters,
    Due,
    DueState,
    Standing,
    due_status,
    months_later,
)

TODAY = date(2025, 6, 1)
days = st.dates(date(1970, 1, 1), date(2100, 12, 31))


def hours(text: str) -> int:
    whole, minutes = text.split(":")
    return int(whole) * 60 + int(minutes)


# --- calendar -----------------------------------------------------------------


def test_six_months_after_the_31st_of_august_is_the_28th_of_february():
    assert months_later(date(2024, 8, 31), 6, CalendarRule.DATE) == date(2025, 2, 28)


def test_six_months_after_the_31st_of_august_2023_meets_a_leap_day():
    assert months_later(date(2023, 8, 31), 6, CalendarRule.DATE) == date(2024, 2, 29)


def test_calendar_months_run_to_the_last_day_of_the_month():
    """Public FAA explanation: inspected 15 Sep 2005, 12 calendar months, not later
    than 30 Sep 2006. The second is 381 days after 15 Aug 2024."""
    end = CalendarRule.MONTH_END
    assert months_later(date(2005, 9, 15), 12, end) == date(2006, 9, 30)
    assert months_later(date(2024, 8, 15), 12, end) == date(2025, 8, 31)
    assert (date(2025, 8, 31) - date(2024, 8, 15)).days == 381


def test_a_year_after_a_leap_day():
    assert months_later(date(2024, 2, 29), 12, CalendarRule.DATE) == date(2025, 2, 28)


def test_a_series_keeps_the_day_of_its_first_anchor():
    step, series = date(2025, 1, 31), []
    for _ in range(4):
        series.append(step)
        step = months_later(step, 1, CalendarRule.DATE, day=31)
    assert series == [
        date(2025, 1, 31),
        date(2025, 2, 28),
        date(2025, 3, 31),
        date(2025, 4, 30),
    ]


@given(days, st.integers(0, 600))
def test_date_rule_agrees_with_dateutil(start, months):
    expected = start + relativedelta(months=months)
    assert months_later(start, months, CalendarRule.DATE) == expected


@given(days, st.integers(0, 600))
def test_month_end_is_the_day_before_a_first(start, months):
    end = months_later(start, months, CalendarRule.MONTH_END)
    assert (end + timedelta(days=1)).day == 1
    assert (end.year - start.year) * 12 + end.month - start.month == months


# --- remaining, limiting counter, forecast ------------------------------------


def test_whichever_first_over_three_counters():
    """Last done 2024-03-18 at 30,412:30 FH and 18,905 FC; repeat 6,000 FH, 3,500 FC,
    24 months. 137,550 min / 510 a day = 269.7; 1,405 FC / 5.2 = 270.2; 290 days."""
    due = Due(Counters(minutes=hours("36412:30"), cycles=22_405), on=date(2026, 3, 18))
    standing = Standing(
        Counters(minutes=hours("34120:00"), cycles=21_000),
        current_to=TODAY,
        rates={Counter.MINUTES: Fraction(510), Counter.CYCLES: Fraction(52, 10)},
    )
    status = due_status(due, standing, as_of=TODAY)
    assert [(x.counter, x.remaining, x.forecast) for x in status.lines] == [
        (Counter.MINUTES, hours("2292:30"), date(2026, 2, 25)),
        (Counter.CYCLES, 1_405, date(2026, 2, 26)),
        (Counter.DAYS, 290, date(2026, 3, 18)),
    ]
    assert status.limiting is not None
    assert status.limiting.counter is Counter.MINUTES
    assert status.forecast == date(2026, 2, 25)
    assert (status.state, status.bucket) == (DueState.NOT_DUE, Bucket.LATER)


def test_whichever_last_takes_the_latest_forecast():
    due = Due(Counters(cycles=1_000), on=date(2025, 7, 1), combine=Combine.LAST)
    flown_slowly = standing(cycles=900, rate=1)
    flown_fast = standing(cycles=900, rate=10)
    assert due_status(due, flown_slowly, as_of=TODAY).forecast == date(2025, 9, 9)
    assert due_status(due, flown_fast, as_of=TODAY).forecast == date(2025, 7, 1)


def test_whichever_last_is_overdue_only_when_both_have_passed():
    due = Due(Counters(cycles=1_000), on=date(2025, 5, 1), combine=Combine.LAST)
    one_passed = due_status(due, standing(cycles=900, rate=1), as_of=TODAY)
    both_passed = due_status(due, standing(cycles=1_001, rate=1), as_of=TODAY)
    assert one_passed.state is DueState.NOT_DUE
    assert both_passed.state is DueState.OVERDUE


def test_a_temporary_limit_of_1200_cycles_at_five_a_day_lasts_240_days():
    released = date(2025, 1, 31)
    status = due_status(
        Due(Counters(cycles=22_200)),
        Standing(Counters(cycles=21_000), released, {Counter.CYCLES: Fraction(5)}),
        as_of=released,
    )
    assert status.forecast == date(2025, 9, 28)
    clock = months_later(released, 12, CalendarRule.DATE)
    assert clock == date(2026, 1, 31)


def test_a_category_c_limit_is_a_hard_stop():
    due = Due(Counters(cycles=21_000 + 3_000))
    assert due_status(due, standing(cycles=23_999), as_of=TODAY).state is (
        DueState.NOT_DUE
    )
    assert due_status(due, standing(cycles=24_000), as_of=TODAY).state is DueState.DUE
    assert due_status(due, standing(cycles=24_001), as_of=TODAY).state is (
        DueState.OVERDUE
    )


def standing(
    *, cycles: int | None, rate: int = 0, current_to: date = TODAY
) -> Standing:
    return Standing(
        Counters(cycles=cycles), current_to, {Counter.CYCLES: Fraction(rate)}
    )


def test_the_due_date_is_the_last_permitted_day():
    due = Due(on=TODAY)
    states = [
        due_status(due, Standing(), as_of=TODAY + timedelta(days=n)).state
        for n in (-1, 0, 1)
    ]
    assert states == [DueState.DUE_SOON, DueState.DUE, DueState.OVERDUE]


def test_without_a_rate_there_is_no_forecast_and_nothing_is_due():
    status = due_status(Due(Counters(cycles=1_000)), standing(cycles=995), as_of=TODAY)
    assert status.lines[0].remaining == 5
    assert status.forecast is None
    assert (status.state, status.bucket) == (DueState.NOT_DUE, Bucket.NO_FORECAST)


def test_counters_not_reported_make_an_item_presumed_overdue():
    due = Due(Counters(cycles=1_000))
    reported = standing(cycles=900, rate=5, current_to=date(2025, 5, 1))
    status = due_status(due, reported, as_of=date(2025, 5, 22))
    assert status.forecast == date(2025, 5, 21)
    assert (status.state, status.bucket) == (
        DueState.PRESUMED_OVERDUE,
        Bucket.OVERDUE,
    )
    assert status.note == "presumed overdue, counters not reported since 2025-05-01"
    assert due_status(due, reported, as_of=date(2025, 5, 21)).state is (
        DueState.DUE_SOON
    )


@pytest.mark.parametrize("combine", list(Combine))
def test_a_missing_counter_counts_as_due_never_as_fine(combine):
    due = Due(Counters(cycles=1_000), on=date(2030, 1, 1), combine=combine)
    status = due_status(due, standing(cycles=None), as_of=TODAY)
    assert status.state is DueState.CANNOT_COMPUTE
    assert status.bucket is Bucket.TO_30
    assert "no flight cycles recorded" in status.note


def test_a_missing_base_counts_as_due_and_says_so():
    due = Due(cannot_compute="no flight cycles recorded for base release")
    status = due_status(due, standing(cycles=10, rate=1), as_of=TODAY)
    assert status.state is DueState.CANNOT_COMPUTE
    assert status.note.endswith("no flight cycles recorded for base release")


def test_a_due_item_that_names_no_counter_counts_as_due():
    assert due_status(Due(), Standing(), as_of=TODAY).state is DueState.CANNOT_COMPUTE


def test_overdue_on_a_known_counter_is_overdue_though_another_is_missing():
    due = Due(Counters(cycles=1_000), on=date(2025, 5, 1))
    status = due_status(due, standing(cycles=None), as_of=TODAY)
    assert status.state is DueState.OVERDUE


def test_the_pessimistic_date_uses_the_higher_rates():
    state = Standing(
        Counters(cycles=900),
        TODAY,
        {Counter.CYCLES: Fraction(4)},
        {Counter.CYCLES: Fraction(5)},
    )
    status = due_status(Due(Counters(cycles=1_000)), state, as_of=TODAY)
    assert status.forecast == date(2025, 6, 26)
    assert status.pessimistic == date(2025, 6, 21)


def test_a_forecast_beyond_the_calendar_is_none():
    due = Due(Counters(cycles=2_000_000_000))
    slow = Standing(Counters(cycles=0), TODAY, {Counter.CYCLES: Fraction(1, 90)})
    assert due_status(due, slow, as_of=TODAY).forecast is None


@pytest.mark.parametrize(
    ("left", "bucket"),
    [
        (-1, Bucket.OVERDUE),
        (0, Bucket.TO_30),
        (30, Bucket.TO_30),
        (31, Bucket.TO_60),
        (60, Bucket.TO_60),
        (61, Bucket.TO_90),
        (90, Bucket.TO_90),
        (91, Bucket.LATER),
    ],
)
def test_buckets_do_not_overlap(left, bucket):
    due = Due(on=TODAY + timedelta(days=left))
    assert due_status(due, Standing(), as_of=TODAY).bucket is bucket


@given(
    remaining=st.integers(0, 400),
    flown=st.integers(1, 900),
    window=st.integers(1, 90),
)
def test_forecast_is_the_last_day_a_day_by_day_count_still_allows(
    remaining, flown, window
):
    """Fly `flown` per `window` days evenly and count days until the limit is passed."""
    rate = Fraction(flown, window)
    day = 0
    while rate * (day + 1) <= remaining:
        day += 1
    state = Standing(Counters(cycles=100), TODAY, {Counter.CYCLES: rate})
    status = due_status(Due(Counters(cycles=100 + remaining)), state, as_of=TODAY)
    assert status.forecast == TODAY + timedelta(days=day)


@given(due=st.integers(0, 2_000), more=st.integers(0, 500), now=st.integers(0, 2_000))
def test_a_later_limit_never_makes_an_item_more_urgent(due, more, now):
    order = list(Bucket)
    state = standing(cycles=now, rate=7)
    first = due_status(Due(Counters(cycles=due)), state, as_of=TODAY).bucket
    second = due_status(Due(Counters(cycles=due + more)), state, as_of=TODAY).bucket
    assert order.index(second) >= order.index(first)


@given(
    cycles=st.integers(0, 2_000), left=st.integers(-50, 200), now=st.integers(0, 2_000)
)
def test_first_is_never_less_urgent_than_last(cycles, left, now):
    on = TODAY + timedelta(days=left)
    states = [
        due_status(
            Due(Counters(cycles=cycles), on, combine),
            standing(cycles=now, rate=7),
            as_of=TODAY,
        )
        for combine in (Combine.FIRST, Combine.LAST)
    ]
    order = list(Bucket)
    assert order.index(states[0].bucket) <= order.index(states[1].bucket)
