"""When a report to the authority is due: from the moment the damage was seen. Pure.

Two kinds of clock are known. A plain one counts hours from detection. The other is
worded as 14 CFR 121.703(d): reports cover each 24-hour period that begins at an hour of
the local day, and go in within so many hours of its end; what falls on a Saturday or
Sunday may go in on the following Monday, on a holiday on the next workday.

Hours are elapsed hours, so a change to summer time moves no deadline. A holiday counts
only when it is recorded: a clock is never put off on an assumption.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Collection
from dataclasses import dataclass
from zoneinfo import ZoneInfo

from fleet.due import CalendarRule, months_later

SATURDAY = 5
DAY = dt.timedelta(days=1)
PERIOD = "the 24-hour period ends {end:%Y-%m-%d %H:%M} local"
TO_MONDAY = "{day} is a {name}: it may go in on the next workday"
HOLIDAY = "{day} is a recorded holiday: it may go in on the next workday"
UNRECORDED = "holidays of {year} not recorded: the day is not moved for one"


@dataclass(frozen=True, slots=True)
class ReportClock:
    """So many hours from detection, or from the end of the local 24-hour period."""

    hours: int
    period_begins: dt.time | None = None


@dataclass(frozen=True, slots=True)
class ReportDue:
    """The last permitted moment (UTC), and how it came about."""

    at: dt.datetime
    because: tuple[str, ...] = ()


def report_due(
    clock: ReportClock,
    detected_at: dt.datetime,
    *,
    zone: ZoneInfo,
    holidays: Collection[dt.date] = (),
) -> ReportDue:
    """When the report is due. `zone` is where the operator's day begins."""
    hours = dt.timedelta(hours=clock.hours)
    if clock.period_begins is None:
        return ReportDue(detected_at.astimezone(dt.UTC) + hours)
    end = _period_end(detected_at.astimezone(zone), clock.period_begins)
    due = (end.astimezone(dt.UTC) + hours).astimezone(zone)
    moved, because = _workday(due, holidays)
    return ReportDue(moved.astimezone(dt.UTC), (PERIOD.format(end=end), *because))


def follow_up_on(detected_on: dt.date, value: int, unit: str) -> dt.date:
    """The last day of a follow-up that counts days or calendar months."""
    if unit == "months":
        return months_later(detected_on, value, CalendarRule.DATE)
    if unit == "days":
        return detected_on + dt.timedelta(days=value)
    raise ValueError(f"A follow-up counts days or months, not {unit}.")


def _period_end(local: dt.datetime, begins: dt.time) -> dt.datetime:
    """A period holds its beginning and not its end: at 0900 sharp the next one runs."""
    day = local.date() if local.time() < begins else local.date() + DAY
    return dt.datetime.combine(day, begins, tzinfo=local.tzinfo)


def _workday(
    due: dt.datetime, holidays: Collection[dt.date]
) -> tuple[dt.datetime, list[str]]:
    """The same hour on the first day from `due` on that is neither weekend nor a
    recorded holiday."""
    because, day = [], due.date()
    recorded = {holiday.year for holiday in holidays}
    while day.weekday() >= SATURDAY or day in holidays:
        text = TO_MONDAY if day.weekday() >= SATURDAY else HOLIDAY
        because.append(text.format(day=day, name=f"{day:%A}"))
        day += DAY
    if day.year not in recorded:
        because.append(UNRECORDED.format(year=day.year))
    return dt.datetime.combine(day, due.timetz()), because
