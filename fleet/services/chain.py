"""The end of the chain: read, locked, and moved on by one entry.

Every service call pays for this, so the statements are written out: building them anew
took most of the time.
"""

from __future__ import annotations

from collections.abc import Sequence
from functools import cache
from typing import Any

from django.db import connection, models

from fleet.models import HistoryEntry, HistoryHead, HistoryItem

HEAD, ENTRY = HistoryHead._meta.db_table, HistoryEntry._meta.db_table
MOVE = f"UPDATE {HEAD} SET sequence = %s, digest = %s WHERE id = 1"
BATCH = 2_000


def end_locked() -> tuple[int, str]:
    """Sequence and digest of the last entry; writers wait here for one another."""
    lock = " FOR NO KEY UPDATE" if connection.vendor == "postgresql" else ""
    with connection.cursor() as cursor:
        cursor.execute(f"SELECT sequence, digest FROM {HEAD} WHERE id = 1{lock}")
        return cursor.fetchone()


def stream_end(stream: str) -> tuple[int, str]:
    """The same of one stream; asked once the end is locked, so it cannot move."""
    with connection.cursor() as cursor:
        cursor.execute(
            f"SELECT stream_sequence, digest FROM {ENTRY} WHERE stream = %s "
            "ORDER BY stream_sequence DESC LIMIT 1",
            [stream],
        )
        return cursor.fetchone() or (0, "")


def end_moved(entry: HistoryEntry, items: Sequence[HistoryItem]) -> None:
    """Write the entry with its items, and let the head name it. PostgreSQL takes it
    all in one statement, which saves waiting for its answers."""
    batches = [items[start : start + BATCH] for start in range(0, len(items), BATCH)]
    steps = [_insertion([entry]), (MOVE, [entry.sequence, entry.digest])]
    steps += [_insertion(batch) for batch in batches]
    if connection.vendor == "postgresql":
        named = ", ".join(f"s{n} AS ({sql})" for n, (sql, _) in enumerate(steps[:-1]))
        values = [value for _, given in steps for value in given]
        steps = [(f"WITH {named} {steps[-1][0]}", values)]
    with connection.cursor() as cursor:
        for sql, given in steps:
            cursor.execute(sql, given)


def _insertion(rows: Sequence[models.Model]) -> tuple[str, list[Any]]:
    fields, beginning, marks = _statement(type(rows[0]))
    values = [
        field.get_db_prep_save(getattr(row, field.attname), connection)
        for row in rows
        for field in fields
    ]
    return beginning + ", ".join([marks] * len(rows)), values


@cache
def _statement(
    model: type[models.Model],
) -> tuple[list[models.Field[Any, Any]], str, str]:
    """Columns to fill, the statement up to its rows, and the marks of one row."""
    fields = [
        field
        for field in model._meta.concrete_fields
        if not isinstance(field, models.AutoField)
    ]
    listed = ", ".join(f'"{field.column}"' for field in fields)
    beginning = f"INSERT INTO {model._meta.db_table} ({listed}) VALUES "
    return fields, beginning, f"({', '.join(['%s'] * len(fields))})"
