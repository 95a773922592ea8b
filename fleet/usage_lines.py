"""Usage as people hand it over: a line for a day or a flight, a table, flight legs.

Pure. Reading says for every line what was read and how to mend it; whether a line fits
the aircraft's records is for `fleet.services.usage` to say.
"""

from __future__ import annotations

import csv
from collections import defaultdict
from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date, timedelta
from io import StringIO

from fleet.units import UnitError, hours_read

COLUMNS = {
    "date": "2024-12-31",
    "cycles": "flights of the day, 0 when it did not fly",
    "hours": "wheels-off to wheels-on as h:mm; empty when unknown",
}
OPTIONAL = {
    "flight": "1 to 99 for one flight of the day; empty for the whole day",
    "landings": "empty: one for each flight",
    "pressurisations": "empty: not recorded",
    "flights_without_hours": "flights of the line whose hours are unknown",
    "total_hours": "the log's total after this line, to be compared",
    "total_cycles": "the log's total after this line, to be compared",
}

NO_HEADER = (
    "The first line names the columns. Read: {read}. Expected at least: {expected}."
)
UNKNOWN_COLUMN = "Column “{name}” is not known; the columns are: {known}."
NO_LINES = "No line of usage was read below the names of the columns."
BAD_CELL = "Line {line}: {column} “{read}” cannot be read; write {how}."


class UsageFileError(ValueError):
    """A table of usage that cannot be read; `problems` has one sentence each."""

    def __init__(self, problems: list[str]) -> None:
        super().__init__("\n".join(problems))
        self.problems = problems


@dataclass(frozen=True)
class UsageLine:
    """One day (flight 0) or one flight. `minutes` None: the hours are unknown."""

    day: date
    cycles: int
    minutes: int | None
    flight: int = 0
    landings: int | None = None
    pressurisations: int | None = None
    cycles_without_minutes: int = 0
    total_minutes: int | None = None
    total_cycles: int | None = None
    where: str = ""


@dataclass(frozen=True)
class Leg:
    """One line of a flight schedule; `minutes` in the air, None when not known."""

    day: date
    departed: bool
    minutes: int | None


def lines_from_legs(
    legs: Iterable[Leg],
    *,
    complete_from: date | None = None,
    complete_to: date | None = None,
) -> list[UsageLine]:
    """A usage line per day. A leg that departed counts a flight, also when its hours
    are unknown. The caller may say that the legs are all there were between two days;
    then a day without any is a line of zeros, otherwise it stays unknown."""
    by_day: dict[date, list[Leg]] = defaultdict(list)
    for leg in legs:
        by_day[leg.day].append(leg)
    if complete_from and complete_to:
        for n in range((complete_to - complete_from).days + 1):
            by_day[complete_from + timedelta(days=n)] += []
    return [_day_line(day, by_day[day]) for day in sorted(by_day)]


def _day_line(day: date, legs: list[Leg]) -> UsageLine:
    flown = [leg.minutes for leg in legs if leg.departed]
    timed = [minutes for minutes in flown if minutes is not None]
    missing = len(flown) - len(timed)
    minutes = sum(timed) if timed or not flown else None
    return UsageLine(day, len(flown), minutes, cycles_without_minutes=missing)


def lines_read(text: str) -> list[UsageLine]:
    """Usage lines of a comma- or semicolon-separated table with a header."""
    text = text.lstrip("\ufeff").strip()
    first = text.partition("\n")[0]
    delimiter = ";" if first.count(";") > first.count(",") else ","
    reader = csv.DictReader(StringIO(text), delimiter=delimiter, skipinitialspace=True)
    names = [(name or "").strip().lower() for name in reader.fieldnames or []]
    reader.fieldnames = names
    known = COLUMNS | OPTIONAL
    if not set(COLUMNS) <= set(names):
        raise UsageFileError(
            [NO_HEADER.format(read=first or "nothing", expected=", ".join(COLUMNS))]
        )
    problems = [
        UNKNOWN_COLUMN.format(name=name, known=", ".join(known))
        for name in names
        if name not in known
    ]
    lines: list[UsageLine] = []
    for row in reader:
        cells = {
            key: (value or "").strip() for key, value in row.items() if key in known
        }
        if any(cells.values()):
            lines.append(_line(cells, reader.line_num, problems))
    if not lines:
        problems.append(NO_LINES)
    if problems:
        raise UsageFileError(problems)
    return lines


class _Cells:
    """One line of the table; what cannot be read is added to the problems."""

    def __init__(self, cells: dict[str, str], line: int, problems: list[str]) -> None:
        self.cells, self.line, self.problems = cells, line, problems

    def bad(self, column: str, how: str) -> None:
        read = self.cells.get(column, "")
        self.problems.append(
            BAD_CELL.format(line=self.line, column=column, read=read, how=how)
        )

    def day(self, column: str) -> date:
        try:
            return date.fromisoformat(self.cells[column])
        except ValueError:
            self.bad(column, "a date as 2024-12-31")
            return date.min

    def count(self, column: str) -> int | None:
        read = self.cells.get(column, "")
        try:
            return int(read) if read else None
        except ValueError:
            self.bad(column, "a whole number")
            return None

    def hours(self, column: str) -> int | None:
        read = self.cells.get(column, "")
        try:
            return hours_read(read) if read else None
        except UnitError:
            self.bad(column, "hours and minutes as h:mm, not negative")
            return None


def _line(raw: dict[str, str], number: int, problems: list[str]) -> UsageLine:
    cells = _Cells(raw, number, problems)
    if raw["cycles"] == "":
        cells.bad("cycles", "the number of flights, 0 when it did not fly")
    cycles, minutes = cells.count("cycles") or 0, cells.hours("hours")
    without = cells.count("flights_without_hours")
    if without is None:
        without = cycles if minutes is None else 0
    return UsageLine(
        day=cells.day("date"),
        cycles=cycles,
        minutes=minutes,
        flight=cells.count("flight") or 0,
        landings=cells.count("landings"),
        pressurisations=cells.count("pressurisations"),
        cycles_without_minutes=without,
        total_minutes=cells.hours("total_hours"),
        total_cycles=cells.count("total_cycles"),
        where=f"Line {number}: ",
    )
