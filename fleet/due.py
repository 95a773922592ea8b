"""When work is due: counters, calendar, what remains, and the forecast of the day.

Thresholds and repeats are made in `fleet.intervals`, the life of parts in `fleet.life`.
Whole numbers and exact fractions only: 0.45 x 25,000 in binary floats is 11,249.999...,
which would make a part expire a cycle early or, the other way round, a cycle late.

A calendar limit is the last permitted day. Remaining is positive (not due), zero (due:
no further use on that counter) or negative (overdue). A number that is missing never
passes: the item cannot be computed and counts as due.
"""

from __future__ import annotations

from calendar import monthrange
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from datetime import date, timedelta
from enum import StrEnum
from fractions import Fraction


class Counter(StrEnum):
    """What a limit counts; MONTHS and DAYS are limits in calendar time."""

    MINUTES = "minutes"
    CYCLES = "cycles"
    LANDINGS = "landings"
    PRESSURISATIONS = "pressurisations"
    DAYS = "days"
    MONTHS = "months"


COUNTED = (
    Counter.MINUTES,
    Counter.CYCLES,
    Counter.LANDINGS,
    Counter.PRESSURISATIONS,
)

COUNTER_WORDS = {
    Counter.MINUTES: ("flight hours", "FH"),
    Counter.CYCLES: ("flight cycles", "FC"),
    Counter.LANDINGS: ("landings", "landings"),
    Counter.PRESSURISATIONS: ("pressurisation cycles", "PC"),
    Counter.DAYS: ("days", "d"),
    Counter.MONTHS: ("months", "months"),
}


class Base(StrEnum):
    """What a threshold counts from."""

    NEW = "new"
    RELEASE = "release"
    EFFECTIVE = "effective"
    INSTALLED = "installed"
    OVERHAUL = "overhaul"
    LAST_DONE = "last_done"
    OTHER_TASK = "other_task"
    DATE = "date"


class Combine(StrEnum):
    FIRST = "first"
    LAST = "last"


class AnchorPolicy(StrEnum):
    """Where the next interval starts when work was done early or late."""

    ACTUAL = "actual"
    SCHEDULED_IF_LATE = "scheduled_if_late"
    WINDOW = "window"


class CalendarRule(StrEnum):
    """DATE keeps the day number; MONTH_END runs to the last day of the month."""

    DATE = "date"
    MONTH_END = "month_end"


class CarryOver(StrEnum):
    """How life flown in another configuration counts; LINEAR only where cited."""

    MOST_RESTRICTIVE = "most_restrictive"
    LINEAR = "linear"


class DueState(StrEnum):
    OVERDUE = "overdue"
    PRESUMED_OVERDUE = "presumed overdue"
    CANNOT_COMPUTE = "due: cannot be computed"
    DUE = "due"
    DUE_SOON = "due soon"
    NOT_DUE = "not due"


class Bucket(StrEnum):
    OVERDUE = "overdue"
    TO_30 = "due in 0 to 30 days"
    TO_60 = "due in 31 to 60 days"
    TO_90 = "due in 61 to 90 days"
    LATER = "later than 90 days"
    NO_FORECAST = "no forecast"


class MissingInput(ValueError):
    """A number that the calculation needs is not recorded."""


@dataclass(frozen=True)
class Counters:
    """Amounts on the four counters; None is not recorded, which is never zero."""

    minutes: int | None = None
    cycles: int | None = None
    landings: int | None = None
    pressurisations: int | None = None

    def __getitem__(self, counter: Counter) -> int | None:
        value: int | None = getattr(self, counter.value)
        return value

    def minus(self, other: Counters) -> Counters:
        """What was flown between two readings; unknown where either is unknown."""
        return self._combine(other, -1)

    def plus(self, other: Counters) -> Counters:
        return self._combine(other, 1)

    def _combine(self, other: Counters, sign: int) -> Counters:
        pairs = ((counter, self[counter], other[counter]) for counter in COUNTED)
        return Counters(
            **{
                counter.value: mine + sign * theirs
                for counter, mine, theirs in pairs
                if mine is not None and theirs is not None
            }
        )


ZERO = Counters(0, 0, 0, 0)


@dataclass(frozen=True)
class Limit:
    """One limit: so much on one counter, from one base. `tolerance` is permitted
    lateness in the limit's own unit; `window` is for AnchorPolicy.WINDOW, in days when
    the limit is calendar time."""

    counter: Counter
    value: int
    base: Base = Base.LAST_DONE
    tolerance: int = 0
    window: int = 0


@dataclass(frozen=True)
class Anchor:
    """Where a count starts. `day` is the day number that a month series keeps:
    31 January, 28 February, then 31 March again."""

    at: Counters = field(default_factory=Counters)
    on: date | None = None
    day: int | None = None


@dataclass(frozen=True)
class Due:
    """One "not later than" in the subject's own counters, ready to be stored."""

    at: Counters = field(default_factory=Counters)
    on: date | None = None
    combine: Combine = Combine.FIRST
    cannot_compute: str = ""
    day: int | None = None


@dataclass(frozen=True)
class Done:
    """One accomplishment: the subject's counters and the local date of its release."""

    at: Counters
    on: date
    late_approved: bool = False


@dataclass(frozen=True)
class Standing:
    """A subject's counters on the day its data are current to, and its daily rates.

    `reconstructed_minutes` is the part of the hours that was put in for flights whose
    hours are unknown.
    """

    at: Counters = field(default_factory=Counters)
    current_to: date | None = None
    rates: Mapping[Counter, Fraction] = field(default_factory=dict)
    high_rates: Mapping[Counter, Fraction] = field(default_factory=dict)
    reconstructed_minutes: int = 0


@dataclass(frozen=True)
class Remaining:
    """One counter of a due item; for the calendar, `remaining` is in days."""

    counter: Counter
    due: int | date
    now: int | date
    remaining: int
    forecast: date | None


@dataclass(frozen=True)
class DueStatus:
    lines: tuple[Remaining, ...]
    limiting: Remaining | None
    state: DueState
    bucket: Bucket
    forecast: date | None
    pessimistic: date | None
    note: str


# --- calendar -----------------------------------------------------------------


def months_later(
    start: date, months: int, rule: CalendarRule, day: int | None = None
) -> date:
    """The date `months` after `start`; `day` is the first anchor's day number."""
    year, month0 = divmod(start.year * 12 + start.month - 1 + months, 12)
    last = monthrange(year, month0 + 1)[1]
    wanted = last if rule is CalendarRule.MONTH_END else min(day or start.day, last)
    return date(year, month0 + 1, wanted)


def limit_date(
    limit: Limit, anchor: Anchor, rule: CalendarRule = CalendarRule.DATE
) -> date | None:
    if anchor.on is None:
        return None
    if limit.counter is Counter.DAYS:
        return anchor.on + timedelta(days=limit.value)
    return months_later(anchor.on, limit.value, rule, anchor.day)


# --- status on a day ----------------------------------------------------------


def _reach(remaining: int, start: date | None, rate: Fraction | None) -> date | None:
    """Data-current-to date + floor(remaining / rate); None without a rate."""
    if start is None or not rate:
        return None
    ordinal = start.toordinal() + remaining // rate
    return date.fromordinal(ordinal) if 0 < ordinal <= date.max.toordinal() else None


def due_lines(
    due: Due, standing: Standing, as_of: date, *, high: bool = False
) -> tuple[list[Remaining], list[str]]:
    rates = standing.high_rates if high else standing.rates
    lines: list[Remaining] = []
    missing: list[str] = []
    for counter in COUNTED:
        limit, now = due.at[counter], standing.at[counter]
        if limit is None:
            continue
        if now is None:
            missing.append(f"no {COUNTER_WORDS[counter][0]} recorded for the subject")
            continue
        forecast = _reach(limit - now, standing.current_to, rates.get(counter))
        lines.append(Remaining(counter, limit, now, limit - now, forecast))
    if due.on is not None:
        left = (due.on - as_of).days
        lines.append(Remaining(Counter.DAYS, due.on, as_of, left, due.on))
    return lines, missing


def _limiting(
    lines: Sequence[Remaining], combine: Combine, as_of: date
) -> Remaining | None:
    """Earliest forecast, or latest for `whichever last`. Without a rate, what is used
    up stands at today and what is left is never reached."""

    def reached(line: Remaining) -> date:
        return line.forecast or (as_of if line.remaining <= 0 else date.max)

    pick = max if combine is Combine.LAST else min
    return pick(lines, key=reached) if lines else None


def due_status(
    due: Due, standing: Standing, *, as_of: date, within_days: int = 90
) -> DueStatus:
    """Remaining in each counter, the limiting one, forecast dates, state and bucket."""
    lines, missing = due_lines(due, standing, as_of)
    high = due_lines(due, standing, as_of, high=True)[0]
    limiting = _limiting(lines, due.combine, as_of)
    pessimistic = _limiting(high, due.combine, as_of)
    forecast = limiting.forecast if limiting else None
    reason = "; ".join(filter(None, [due.cannot_compute, *missing]))
    pick = max if due.combine is Combine.LAST else min
    left = pick((_sign(line.remaining) for line in lines), default=0)
    if not lines and not reason:
        reason = "no due value recorded"
    note = f"cannot be computed: {reason}" if reason else ""
    days = None if forecast is None else (forecast - as_of).days
    if left < 0 and not (reason and due.combine is Combine.LAST):
        state, bucket = DueState.OVERDUE, Bucket.OVERDUE
    elif reason:
        state, bucket = DueState.CANNOT_COMPUTE, Bucket.TO_30
    elif days is not None and days < 0:
        state, bucket = DueState.PRESUMED_OVERDUE, Bucket.OVERDUE
        note = f"presumed overdue, counters not reported since {standing.current_to}"
    elif left == 0:
        state, bucket = DueState.DUE, Bucket.TO_30
    else:
        soon = days is not None and days <= within_days
        state = DueState.DUE_SOON if soon else DueState.NOT_DUE
        bucket = _bucket(days)
    return DueStatus(
        tuple(lines),
        limiting,
        state,
        bucket,
        forecast,
        pessimistic.forecast if pessimistic else None,
        note,
    )


def _sign(number: int) -> int:
    return (number > 0) - (number < 0)


def _bucket(days: int | None) -> Bucket:
    if days is None:
        return Bucket.NO_FORECAST
    for last, bucket in ((30, Bucket.TO_30), (60, Bucket.TO_60), (90, Bucket.TO_90)):
        if days <= last:
            return bucket
    return Bucket.LATER
