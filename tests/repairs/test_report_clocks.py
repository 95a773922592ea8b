"""Report clocks, worked by hand on a calendar.

Source of the period rule: 14 CFR 121.703(d), "covering each 24-hour period beginning at
0900 local time of each day and ending at 0900 local time on the next day"; "within the
next 96 hours"; "due on Saturday or Sunday may be submitted on the following Monday";
"due on a holiday may be submitted on the next workday". Plain clocks: 72 h, Regulation
(EU) 2015/1018 with 376/2014; 96 h, 14 CFR 145.221; 24 h, 14 CFR 21.3(e).
Holidays: 5 U.S.C. 6103. Summer time in the United States: 15 U.S.C. 260a, second Sunday
of March, so 9 March in 2025.
"""

from __future__ import annotations

import datetime as dt
from zoneinfo import ZoneInfo

import pytest

from repairs.report_clocks import ReportClock, follow_up_on, report_due

CHICAGO = ZoneInfo("America/Chicago")
UTC = ZoneInfo("UTC")
PERIOD = ReportClock(96, dt.time(9))
HOLIDAYS = {dt.date(2025, 7, 4), dt.date(2025, 9, 1), dt.date(2026, 1, 1)}


def due(detected: str, *, zone=CHICAGO, holidays=frozenset(HOLIDAYS)) -> str:
    """Local wall time to local wall time."""
    at = dt.datetime.fromisoformat(detected).replace(tzinfo=zone)
    answer = report_due(PERIOD, at, zone=zone, holidays=holidays)
    return answer.at.astimezone(zone).strftime("%a %Y-%m-%d %H:%M")


@pytest.mark.parametrize(
    ("detected", "expected"),
    [
        # Mon 7 July 08:59: the period ends the same morning; 96 h on is Friday.
        ("2025-07-07 08:59", "Fri 2025-07-11 09:00"),
        # At 09:00 the next period has begun: it ends Tuesday; Saturday goes to Monday.
        ("2025-07-07 09:00", "Mon 2025-07-14 09:00"),
        ("2025-07-08 08:30", "Mon 2025-07-14 09:00"),
        # Period to Wednesday, 96 h: Sunday, so Monday too.
        ("2025-07-08 15:00", "Mon 2025-07-14 09:00"),
        # Period to Thursday, 96 h: Monday itself.
        ("2025-07-09 15:00", "Mon 2025-07-14 09:00"),
        # Period ends Mon 30 June, due Fri 4 July, a holiday: next workday is Monday.
        ("2025-06-30 08:00", "Mon 2025-07-07 09:00"),
        # Due Sat 30 August; Monday 1 September is Labor Day: Tuesday.
        ("2025-08-26 08:00", "Tue 2025-09-02 09:00"),
        # Due Thu 1 January 2026, a holiday: Friday.
        ("2025-12-27 20:00", "Fri 2026-01-02 09:00"),
    ],
)
def test_the_period_ends_at_nine_and_weekends_and_holidays_put_it_off(
    detected, expected
):
    assert due(detected) == expected


def test_hours_are_elapsed_hours_over_a_change_to_summer_time():
    # Period ends Wed 5 March 09:00 CST = 15:00 UTC; 96 h later is Sunday 9 March 15:00
    # UTC = 10:00 CDT, summer time having begun that night; Monday at the same hour.
    assert due("2025-03-04 14:30") == "Mon 2025-03-10 10:00"


def test_a_holiday_that_is_not_recorded_puts_nothing_off_and_is_said():
    at = dt.datetime(2025, 6, 30, 8, tzinfo=CHICAGO)
    answer = report_due(PERIOD, at, zone=CHICAGO)
    assert answer.at == dt.datetime(2025, 7, 4, 9, tzinfo=CHICAGO)
    assert any("holidays of 2025 not recorded" in text for text in answer.because)


def test_holidays_of_one_year_say_nothing_of_the_next():
    answer = report_due(
        PERIOD,
        dt.datetime(2026, 6, 29, 20, tzinfo=CHICAGO),
        zone=CHICAGO,
        holidays={dt.date(2025, 7, 4)},
    )
    # Period to Tue 30 June 2026, 96 h: Saturday 4 July, so Monday.
    assert answer.at == dt.datetime(2026, 7, 6, 9, tzinfo=CHICAGO)
    assert any("holidays of 2026 not recorded" in text for text in answer.because)


def test_the_local_day_of_the_operator_counts():
    # 14:30 UTC on a Monday is 08:30 in Chicago (CST) and 14:30 in London.
    at = dt.datetime(2025, 1, 13, 14, 30, tzinfo=dt.UTC)
    here = report_due(PERIOD, at, zone=CHICAGO, holidays=HOLIDAYS).at
    there = report_due(PERIOD, at, zone=ZoneInfo("Europe/London")).at
    assert here == dt.datetime(2025, 1, 17, 15, tzinfo=dt.UTC)  # Friday 09:00 CST
    assert there == dt.datetime(2025, 1, 20, 9, tzinfo=dt.UTC)  # Saturday to Monday


@pytest.mark.parametrize(("hours", "day"), [(72, 17), (96, 18), (24, 15)])
def test_a_plain_clock_counts_hours_through_the_weekend(hours, day):
    at = dt.datetime(2025, 3, 14, 22, 15, tzinfo=UTC)  # a Friday
    answer = report_due(ReportClock(hours), at, zone=UTC, holidays=HOLIDAYS)
    assert answer.at == dt.datetime(2025, 3, day, 22, 15, tzinfo=dt.UTC)
    assert answer.because == ()


def test_follow_ups_count_days_or_calendar_months():
    # Regulation (EU) No 376/2014, article 13: 30 days and three months, from memory.
    # 30 November + 3 calendar months is the last day of February.
    start = dt.date(2024, 11, 30)
    assert follow_up_on(start, 30, "days") == dt.date(2024, 12, 30)
    assert follow_up_on(start, 3, "months") == dt.date(2025, 2, 28)
    with pytest.raises(ValueError, match="days or months"):
        follow_up_on(start, 3, "hours")
