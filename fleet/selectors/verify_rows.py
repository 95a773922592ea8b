"""One table held against what the history tells of it, both read in order of keys."""

from __future__ import annotations

import hashlib
from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass

from django.db import models

from fleet.digests import row_digest
from fleet.models import HistoryItem

CHUNK = 2_000
FEW = 500
"""Keys asked for at once; SQLite takes no more than some thousands."""
RUN = "created_range"
NO_HISTORY = "{table} {pk} has no history: it was written outside the program."
ALTERED = "{table} {pk} differs from its history: it was altered."
MISSING = "{table} {pk} is missing: the history tells of it."
RUN_COUNT = "{table} {first} to {last}: rows were added or removed."
RUN_ALTERED = "{table} {first} to {last}: a row differs from its history."

Rows = Iterator[models.Model]


@dataclass
class Read:
    """How much a verification has read so far; `say` is told what it turns to."""

    entries: int = 0
    rows: int = 0
    files: int = 0
    say: Callable[[str], None] | None = None

    def turn_to(self, what: str) -> None:
        if self.say:
            self.say(f"{what} ({self.entries:,} entries, {self.rows:,} rows so far)")


@dataclass(frozen=True)
class Told:
    """What the history last said of a row, or of one unbroken run of new rows."""

    first: int
    last: int
    digest: str
    is_run: bool


def table_problems(model: type[models.Model], read: Read) -> Iterator[str]:
    """Rows that differ from the history, are missing, or that it does not know.

    Holds one row at a time, however long the table.
    """
    table = model._meta.db_table
    read.turn_to(table)
    rows = _counted(model._base_manager.order_by("pk").iterator(CHUNK), read)
    row = next(rows, None)
    for told in _told(HistoryItem.objects.filter(table=table)):
        while row is not None and row.pk < told.first:
            yield NO_HISTORY.format(table=table, pk=row.pk)
            row = next(rows, None)
        if told.is_run:
            of_run, row = _taken(row, rows, told.last)
            yield from _run_problem(table, told, of_run)
        elif row is None or row.pk != told.first:
            yield MISSING.format(table=table, pk=told.first)
        else:
            if row_digest(row) != told.digest:
                yield ALTERED.format(table=table, pk=row.pk)
            row = next(rows, None)
    while row is not None:
        yield NO_HISTORY.format(table=table, pk=row.pk)
        row = next(rows, None)


def some_rows_problems(
    model: type[models.Model], keys: Iterable[int], read: Read
) -> Iterator[str]:
    """The same for rows of these keys alone, and for the whole runs they lie in."""
    table = model._meta.db_table
    read.turn_to(table)
    wanted = sorted(keys)
    for start in range(0, len(wanted), FEW):
        chunk = wanted[start : start + FEW]
        rows = model._base_manager.in_bulk(chunk)
        read.rows += len(rows)
        items = HistoryItem.objects.filter(table=table)
        singles = _told(items.filter(first_pk__in=chunk).exclude(kind=RUN))
        known = {told.first: told.digest for told in singles}
        within = items.filter(kind=RUN, first_pk__lte=chunk[-1], last_pk__gte=chunk[0])
        for told in _told(within):
            lying = [pk for pk in chunk if told.first <= pk <= told.last]
            if lying:
                known |= dict.fromkeys(lying, RUN)
                whole = model._base_manager.filter(pk__range=(told.first, told.last))
                row_source = whole.order_by("pk").iterator(CHUNK)
                of_run, _ = _taken(next(row_source, None), row_source, told.last)
                yield from _run_problem(table, told, of_run)
        for pk in chunk:
            yield from _row_problem(table, pk, rows.get(pk), known.get(pk))


def _row_problem(
    table: str, pk: int, row: models.Model | None, told: str | None
) -> Iterator[str]:
    if told == RUN:
        return
    if row is None:
        if told is not None:
            yield MISSING.format(table=table, pk=pk)
    elif told is None:
        yield NO_HISTORY.format(table=table, pk=pk)
    elif row_digest(row) != told:
        yield ALTERED.format(table=table, pk=pk)


def _told(items: models.QuerySet[HistoryItem]) -> Iterator[Told]:
    """In order of keys; of the items about one row, the last."""
    held: Told | None = None
    for kind, first, last, digest in (
        items.order_by("first_pk", "entry_id", "number")
        .values_list("kind", "first_pk", "last_pk", "row_digest")
        .iterator(CHUNK)
    ):
        told = Told(first, last, digest, kind == RUN)
        if held is not None and (held.is_run or held.first != told.first):
            yield held
        held = told
    if held is not None:
        yield held


def _taken(
    row: models.Model | None, rows: Rows, last: int
) -> tuple[tuple[int, str], models.Model | None]:
    """Number and digest of the rows up to `last`, and the row after them."""
    count, content = 0, hashlib.sha256()
    while row is not None and row.pk <= last:
        count += 1
        content.update(row_digest(row).encode())
        row = next(rows, None)
    return (count, content.hexdigest()), row


def _run_problem(table: str, told: Told, found: tuple[int, str]) -> Iterator[str]:
    count, digest = found
    if count != told.last - told.first + 1:
        yield RUN_COUNT.format(table=table, first=told.first, last=told.last)
    elif digest != told.digest:
        yield RUN_ALTERED.format(table=table, first=told.first, last=told.last)


def _counted(rows: Iterable[models.Model], read: Read) -> Rows:
    for row in rows:
        read.rows += 1
        yield row
