"""Record what aircraft flew. Rows are never changed: a correction is a new row."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import replace
from datetime import date, datetime, timedelta

from fleet.models import Aircraft, UsageRecord, User
from fleet.refusals import Refused
from fleet.selectors.counters import aircraft_standing, usage_current
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from fleet.units import hours_write
from fleet.usage_lines import UsageLine

FUTURE = (
    "{where}{day} lies after today, {today}; usage is recorded when it has been flown."
)
BEFORE = (
    "{where}{day} lies before {first}, the first day recorded here for {mark}; what "
    "was flown earlier is in its opening counters."
)
AFTER = "{where}{day} lies after {last}, the day {mark} left."
NEGATIVE = "{where}{column} {value} on {day} is negative; write a number from 0."
TOO_MANY = "{where}{column} {value} on {day} is above {high}; check the line."
HOURS_WITHOUT_FLIGHT = (
    "{where}{hours} FH without a flight on {day}; a flight over midnight counts on the "
    "day it departed."
)
TOO_MANY_UNTIMED = (
    "{where}{untimed} flights without hours on {day}, but only {cycles} flights; "
    "correct one of the two."
)
HOURS_NOT_GIVEN = (
    "{where}the hours of {day} are not given, so all {cycles} flights are without "
    "hours, not {untimed}."
)
FEWER_LANDINGS = (
    "{where}{landings} landings for {cycles} flights on {day}; every flight has one, "
    "touch-and-go landings come on top."
)
TWICE = "{where}{what} is given twice in these lines; keep one."
RECORDED = (
    "{where}{what} is already recorded with {cycles} FC and {hours} FH; to change it, "
    "correct that row."
)
GRAINS = (
    "{where}{day} already has {has}; a day is recorded as a whole or by flights, "
    "not both."
)
BACKWARDS = (
    "{where}the log's total of {read} after {day} is below {before}, the total before "
    "it: the counter would run backwards. Check the total and the lines before it."
)
DISAGREES = (
    "{where}the log's total of {read} after {day} does not agree with {derived}, the "
    "sum of the records. Find the missing or doubled flight, or leave the total out."
)
NOT_CURRENT = "This row was corrected before; correct the row that replaced it."
NO_SOURCE = "Name the source of the usage, such as the technical log and its pages."
NO_REASON = "Say why the row is corrected."
MOVED = "Due items before and after: {items}."
NONE_MOVED = "No due item moved."
NO_LINES = "There is no line of usage to record."

HIGHEST = {
    "minutes": 1_500,
    "cycles": 60,
    "landings": 200,
    "pressurisations": 60,
    "cycles_without_minutes": 60,
}


class UsageRefused(Refused):
    """Lines that do not fit the aircraft's records."""


def usage_record(
    *,
    actor: User | None,
    at: datetime,
    today: date,
    aircraft: Aircraft,
    line: UsageLine,
    source: str,
) -> UsageRecord:
    """Record one day or one flight."""
    (row,) = usage_import(
        actor=actor,
        at=at,
        today=today,
        aircraft=aircraft,
        lines=[line],
        source=source,
        action="usage_record",
    )
    return row


def usage_import(
    *,
    actor: User | None,
    at: datetime,
    today: date,
    aircraft: Aircraft,
    lines: Iterable[UsageLine],
    source: str,
    action: str = "usage_import",
) -> list[UsageRecord]:
    """Record many days or flights, all or none."""
    ordered = sorted(lines, key=lambda line: (line.day, line.flight))
    with Writing(
        actor=actor,
        action=action,
        at=at,
        stream=stream_of(aircraft),
        operator=aircraft.operator,
    ) as w:
        _locked(aircraft)
        problems = usage_problems(
            aircraft=aircraft, lines=ordered, source=source, today=today
        )
        if problems:
            raise UsageRefused(problems)
        rows = [_row(aircraft, line, source) for line in ordered]
        w.create_many(rows)
    return rows


def usage_correct(
    *,
    actor: User | None,
    at: datetime,
    record: UsageRecord,
    line: UsageLine,
    source: str,
    reason: str,
    due_items: Callable[[], Mapping[str, str]] | None = None,
) -> UsageRecord:
    """Replace one row by another of the same day and flight; zeros void it.

    No recorded event is changed; `repairs.selectors.agreement` lists those whose
    counters no longer agree. `due_items` computes what is due of the aircraft, each in
    words; what it gives before and after is logged with the correction.
    """
    aircraft = record.aircraft
    line = replace(line, day=record.day, flight=record.flight_number)
    with Writing(
        actor=actor,
        action="usage_correct",
        at=at,
        reason=reason,
        stream=stream_of(aircraft),
        operator=aircraft.operator,
    ) as w:
        _locked(aircraft)
        problems = [*_numbers(line)]
        if UsageRecord.objects.filter(replaces=record).exists():
            problems.append(NOT_CURRENT)
        if not reason.strip():
            problems.append(NO_REASON)
        if not source.strip():
            problems.append(NO_SOURCE)
        if problems:
            raise UsageRefused(problems)
        row = _row(aircraft, line, source)
        row.revision, row.replaces = record.revision + 1, record
        before = due_items() if due_items else {}
        w.create(row)
        if due_items:
            w.origin = _moved(before, due_items())
    return row


def _moved(before: Mapping[str, str], after: Mapping[str, str]) -> str:
    """Every due item that is not what it was, before and after."""
    items = [
        f"{item}: {before.get(item, 'not listed')} → {after.get(item, 'not listed')}"
        for item in {**before, **after}
        if before.get(item) != after.get(item)
    ]
    return MOVED.format(items="; ".join(items)) if items else NONE_MOVED


def usage_problems(
    *, aircraft: Aircraft, lines: Sequence[UsageLine], source: str, today: date
) -> list[str]:
    """Why these lines cannot be recorded, in the user's words; empty when they can."""
    if not lines:
        return [NO_LINES]
    problems = [] if source.strip() else [NO_SOURCE]
    for line in lines:
        problems += _numbers(line)
        problems += _dates(aircraft, line, today)
    rows = _recorded(aircraft, lines)
    problems += _overlaps(rows, lines)
    return problems or _totals(aircraft, rows, lines)


def _locked(aircraft: Aircraft) -> None:
    Aircraft.objects.select_for_update(no_key=True).get(pk=aircraft.pk)


def _row(aircraft: Aircraft, line: UsageLine, source: str) -> UsageRecord:
    return UsageRecord(
        aircraft=aircraft,
        day=line.day,
        grain="flight" if line.flight else "day",
        flight_number=line.flight,
        minutes=line.minutes,
        cycles=line.cycles,
        landings=line.cycles if line.landings is None else line.landings,
        pressurisations=line.pressurisations,
        cycles_without_minutes=line.cycles_without_minutes,
        source=source.strip(),
    )


def _numbers(line: UsageLine) -> list[str]:
    problems = []
    for name, high in HIGHEST.items():
        value = getattr(line, name)
        text = TOO_MANY if value is not None and value > high else NEGATIVE
        if value is not None and not 0 <= value <= high:
            problems.append(
                text.format(
                    where=line.where,
                    column=name.replace("_", " "),
                    value=value,
                    day=line.day,
                    high=high,
                )
            )
    if problems:
        return problems
    facts = {
        "where": line.where,
        "day": line.day,
        "cycles": line.cycles,
        "untimed": line.cycles_without_minutes,
        "landings": line.landings,
    }
    if line.minutes and not line.cycles:
        hours = hours_write(line.minutes)
        problems.append(HOURS_WITHOUT_FLIGHT.format(**facts, hours=hours))
    if line.cycles_without_minutes > line.cycles:
        problems.append(TOO_MANY_UNTIMED.format(**facts))
    elif line.minutes is None and line.cycles_without_minutes != line.cycles:
        problems.append(HOURS_NOT_GIVEN.format(**facts))
    if line.landings is not None and line.landings < line.cycles:
        problems.append(FEWER_LANDINGS.format(**facts))
    return problems


def _dates(aircraft: Aircraft, line: UsageLine, today: date) -> list[str]:
    facts = {"where": line.where, "day": line.day, "mark": aircraft.registration}
    if line.day > today:
        return [FUTURE.format(**facts, today=today)]
    if line.day < aircraft.data_from:
        return [BEFORE.format(**facts, first=aircraft.data_from)]
    if aircraft.data_to and line.day > aircraft.data_to:
        return [AFTER.format(**facts, last=aircraft.data_to)]
    return []


def _recorded(aircraft: Aircraft, lines: Sequence[UsageLine]) -> list[UsageRecord]:
    days = [line.day for line in lines]
    rows = usage_current().filter(aircraft=aircraft)
    return list(rows.filter(day__gte=min(days), day__lte=max(days)))


def _overlaps(rows: Sequence[UsageRecord], lines: Sequence[UsageLine]) -> list[str]:
    taken = {(row.day, row.flight_number): row for row in rows}
    by_flights = {row.day: bool(row.flight_number) for row in rows}
    problems, seen = [], set()
    for line in lines:
        key, what = (line.day, line.flight), _what(line)
        row = taken.get(key)
        if key in seen:
            problems.append(TWICE.format(where=line.where, what=what))
        elif row is not None:
            hours = "unknown" if row.minutes is None else hours_write(row.minutes)
            problems.append(
                RECORDED.format(
                    where=line.where, what=what, cycles=row.cycles, hours=hours
                )
            )
        elif by_flights.setdefault(line.day, bool(line.flight)) != bool(line.flight):
            has = "flights" if by_flights[line.day] else "a line for the whole day"
            problems.append(GRAINS.format(where=line.where, day=line.day, has=has))
        seen.add(key)
    return problems


def _what(line: UsageLine) -> str:
    return f"flight {line.flight} of {line.day}" if line.flight else str(line.day)


def _totals(
    aircraft: Aircraft, rows: Sequence[UsageRecord], lines: Sequence[UsageLine]
) -> list[str]:
    """Compare the totals that the log states with the sum of the records."""
    if all(x.total_cycles is None and x.total_minutes is None for x in lines):
        return []
    eve = lines[0].day - timedelta(days=1)
    known = aircraft_standing(aircraft, as_of=eve)
    minutes = None if known.flights_without_hours else known.counters.minutes
    flown = sorted(
        [*((row.day, row.flight_number, row) for row in rows)]
        + [(line.day, line.flight, line) for line in lines],
        key=lambda item: item[:2],
    )
    return _compared(
        [item for _, _, item in flown],
        "cycles",
        known.counters.cycles,
        lambda value: f"{value:,} FC",
    ) + _compared(
        [item for _, _, item in flown],
        "minutes",
        minutes,
        lambda value: f"{hours_write(value)} FH",
    )


def _compared(
    flown: Sequence[UsageRecord | UsageLine],
    column: str,
    total: int | None,
    write: Callable[[int], str],
) -> list[str]:
    problems: list[str] = []
    for item in flown:
        amount = getattr(item, column)
        untimed = column == "minutes" and item.cycles_without_minutes
        if total is None or amount is None or untimed:
            return problems
        before, total = total, total + amount
        stated = getattr(item, f"total_{column}", None)
        if stated is None:
            continue
        facts = {"where": getattr(item, "where", ""), "day": item.day}
        if stated < before:
            text, with_ = BACKWARDS, {"before": write(before)}
        else:
            text, with_ = DISAGREES, {"derived": write(total)}
        if stated != total:
            problems.append(text.format(**facts, **with_, read=write(stated)))
    return problems
