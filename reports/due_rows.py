"""One row of the due list, ready to be shown, exported or compared."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date
from typing import Any

from fleet.amounts import amount_write, counters_write, due_write
from fleet.due import (
    COUNTED,
    Bucket,
    Counter,
    Counters,
    Due,
    DueState,
    DueStatus,
    Remaining,
)
from fleet.models import Aircraft, SafeLifePart
from repairs.models import DueKind
from repairs.selectors.due_items import Item

ORDER = list(Bucket)


@dataclass(frozen=True)
class Cell:
    """Due, now and remaining on one counter, in words."""

    counter: str
    due: str
    now: str
    remaining: str
    limiting: bool


@dataclass(frozen=True)
class DueRow:
    """One "not later than" as it stands on the date of the list."""

    item: Item
    due: Due
    status: DueStatus
    aircraft: Aircraft | None = None
    part: SafeLifePart | None = None
    current_to: date | None = None
    notes: tuple[str, ...] = ()

    @property
    def kind_words(self) -> str:
        return str(DueKind(self.item.kind).label)

    @property
    def mark(self) -> str:
        return self.aircraft.registration if self.aircraft else "in store"

    @property
    def bucket(self) -> Bucket:
        return self.status.bucket

    @property
    def state(self) -> DueState:
        return self.status.state

    @property
    def overdue(self) -> bool:
        return self.bucket is Bucket.OVERDUE

    @property
    def last_done(self) -> str:
        if self.item.last_on is None:
            return ""
        last, due = self.item.last_at, self.due.at
        at = counters_write(
            Counters(
                last.minutes,
                last.cycles,
                last.landings if due.landings is not None else None,
                last.pressurisations if due.pressurisations is not None else None,
            )
        )
        return f"{self.item.last_on}, {at}" if at else str(self.item.last_on)

    @property
    def forecast(self) -> str:
        """Empty when it is overdue already or cannot be forecast."""
        past = self.state in (DueState.OVERDUE, DueState.CANNOT_COMPUTE)
        return "" if past or self.status.forecast is None else str(self.status.forecast)

    @property
    def pessimistic(self) -> str:
        day = self.status.pessimistic
        return str(day) if self.forecast and day and day != self.status.forecast else ""

    @property
    def said(self) -> tuple[str, ...]:
        """Everything that must be read with the numbers."""
        return tuple(filter(None, (self.status.note, *self.notes)))

    @property
    def cells(self) -> list[Cell]:
        return [
            Cell(
                line.counter.value,
                due_write(line.counter, line.due),
                "" if isinstance(line.now, date) else due_write(line.counter, line.now),
                amount_write(line.counter, line.remaining),
                line is self.status.limiting,
            )
            for line in self.status.lines
        ]


def sort_key(row: DueRow) -> tuple[Any, ...]:
    """Overdue first; in a group what cannot be computed, then by the day."""
    day = row.status.forecast or date.max
    known = row.state is not DueState.CANNOT_COMPUTE
    return (ORDER.index(row.bucket), known, day, row.mark, row.item.item, row.item.kind)


HEADER = (
    "aircraft",
    "serial number",
    "part",
    "item",
    "kind",
    "class",
    "action",
    "zone",
    "last done on",
    *(f"last done at {unit}" for unit in ("FH", "FC", "landings", "PC")),
    *(f"due {unit}" for unit in ("minutes", "FC", "landings", "PC")),
    "due date",
    *(f"now {unit}" for unit in ("minutes", "FC", "landings", "PC")),
    *(f"remaining {unit}" for unit in ("minutes", "FC", "landings", "PC", "days")),
    "limiting",
    "forecast",
    "forecast at higher rate",
    "state",
    "group",
    "basis",
    "marks",
    "notes",
    "data current to",
)


def export_row(row: DueRow) -> list[Any]:
    """The row for a table; amounts are whole numbers, flight time in minutes."""
    item = row.item
    lines = {line.counter: line for line in row.status.lines}
    return [
        row.mark,
        row.aircraft.serial_number if row.aircraft else "",
        f"{row.part.part_number.number} {row.part}" if row.part else "",
        item.item,
        row.kind_words,
        item.source_class,
        item.action,
        item.zone,
        _day(item.last_on),
        _hours(item.last_at.minutes),
        *(item.last_at[counter] for counter in COUNTED[1:]),
        *(row.due.at[counter] for counter in COUNTED),
        _day(row.due.on),
        *_column(lines, "now"),
        *_column(lines, "remaining"),
        lines[Counter.DAYS].remaining if Counter.DAYS in lines else None,
        row.status.limiting.counter.value if row.status.limiting else "",
        row.forecast,
        row.pessimistic,
        row.state.value,
        row.bucket.value,
        item.basis,
        "; ".join(item.marks),
        "; ".join(row.said),
        _day(row.current_to),
    ]


def _column(lines: dict[Counter, Remaining], name: str) -> Iterable[Any]:
    return (getattr(lines[x], name) if x in lines else None for x in COUNTED)


def _day(day: date | None) -> str:
    return day.isoformat() if day else ""


def _hours(minutes: int | None) -> str:
    return "" if minutes is None else due_write(Counter.MINUTES, minutes)
