"""Does the record agree with its history? The first disagreement is named."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field

from django.db import connection, models

from fleet.digests import (
    append_only,
    entry_digest,
    items_digest,
    recorded_models,
    row_digest,
    run_digest,
)
from fleet.models import HistoryEntry, HistoryHead, HistoryItem, HistorySeal
from fleet.triggers import trigger_names

CHUNK = 2_000


@dataclass
class Known:
    """The digests the history has for one table."""

    rows: dict[int, str] = field(default_factory=dict)
    runs: list[tuple[int, int, str]] = field(default_factory=list)


def problems() -> Iterator[str]:
    """Every disagreement, the chain's first; reads all rows, so it takes a while."""
    known: dict[str, Known] = {}
    yield from _chain(known)
    yield from _seals()
    for model in recorded_models():
        yield from _table(model, known.pop(model._meta.db_table, Known()))
    for table in known:
        yield f"History tells of a table that is not there: {table}."
    yield from _triggers()


def _chain(known: dict[str, Known]) -> Iterator[str]:
    """Sequence, both chains and digests of the entries; collects what they tell."""
    before, streams = "", dict[str, tuple[int, str]]()
    expected = 1
    for entry, items in _entries():
        name = f"Entry {entry.sequence} ({entry.action})"
        number, stream_before = streams.get(entry.stream, (0, ""))
        if entry.sequence != expected:
            yield f"Entry {expected} is missing; the next one is {entry.sequence}."
        if entry.previous_digest != before:
            yield f"{name} does not follow the entry before it."
        if (entry.stream_sequence, entry.stream_previous_digest) != (
            number + 1,
            stream_before,
        ):
            yield f"{name} does not follow in its stream {entry.stream}."
        if entry.digest != entry_digest(entry):
            yield f"{name} was altered: its digest disagrees."
        if entry.items_digest != items_digest(items):
            yield f"{name}: its items were altered, added or removed."
        streams[entry.stream] = (entry.stream_sequence, entry.digest)
        before, expected = entry.digest, entry.sequence + 1
        for item in items:
            of_table = known.setdefault(item.table, Known())
            if item.kind == "created_range":
                of_table.runs.append((item.first_pk, item.last_pk, item.row_digest))
            else:
                of_table.rows[item.first_pk] = item.row_digest
    head = HistoryHead.objects.filter(pk=1).first()
    if head is None or (head.sequence, head.digest) != (expected - 1, before):
        yield f"The head of the chain does not name the last entry, {expected - 1}."


def _entries() -> Iterator[tuple[HistoryEntry, list[HistoryItem]]]:
    """Entries in order with their items, in chunks."""
    last = 0
    while chunk := list(
        HistoryEntry.objects.filter(sequence__gt=last).order_by("sequence")[:CHUNK]
    ):
        items: dict[int, list[HistoryItem]] = {}
        for item in HistoryItem.objects.filter(
            entry_id__gte=chunk[0].sequence, entry_id__lte=chunk[-1].sequence
        ).order_by("entry_id", "number"):
            items.setdefault(item.entry_id, []).append(item)
        for entry in chunk:
            yield entry, items.pop(entry.sequence, [])
        last = chunk[-1].sequence


def _seals() -> Iterator[str]:
    for seal in HistorySeal.objects.order_by("sequence"):
        entry = HistoryEntry.objects.filter(sequence=seal.sequence).first()
        if entry is None or entry.digest != seal.digest:
            yield f"Entry {seal.sequence} disagrees with its seal of {seal.sealed_at}."


def _table(model: type[models.Model], known: Known) -> Iterator[str]:
    """Rows that differ from the history, are missing, or that it does not know."""
    name = model._meta.db_table
    runs = sorted(known.runs)
    position, run_rows = 0, list[models.Model]()
    for row in model._default_manager.order_by("pk").iterator(CHUNK):
        while position < len(runs) and row.pk > runs[position][1]:
            yield from _run(name, runs[position], run_rows)
            position, run_rows = position + 1, []
        if position < len(runs) and row.pk >= runs[position][0]:
            run_rows.append(row)
            continue
        told = known.rows.pop(row.pk, None)
        if told is None:
            yield f"{name} {row.pk} has no history: it was written outside the program."
        elif told != row_digest(row):
            yield f"{name} {row.pk} differs from its history: it was altered."
    for run in runs[position:]:
        yield from _run(name, run, run_rows)
        run_rows = []
    for pk in known.rows:
        yield f"{name} {pk} is missing: the history tells of it."


def _run(
    name: str, run: tuple[int, int, str], rows: list[models.Model]
) -> Iterator[str]:
    first, last, told = run
    if len(rows) != last - first + 1:
        yield f"{name} {first} to {last}: rows were added or removed."
    elif run_digest(rows) != told:
        yield f"{name} {first} to {last}: a row differs from its history."


def _triggers() -> Iterator[str]:
    """Triggers that should refuse changes and are missing or switched off."""
    every: list[type[models.Model]] = [HistoryEntry, HistoryItem, HistorySeal]
    tables = [
        model._meta.db_table
        for model in every + recorded_models()
        if append_only(model)
    ]
    with connection.cursor() as cursor:
        if connection.vendor == "postgresql":
            cursor.execute("SELECT tgname FROM pg_trigger WHERE tgenabled <> 'D'")
        else:
            cursor.execute("SELECT name FROM sqlite_master WHERE type = 'trigger'")
        present = {name for (name,) in cursor.fetchall()}
    for missing in sorted(trigger_names(connection.vendor, tables) - present):
        yield f"The trigger {missing}, which refuses changes, is missing."
