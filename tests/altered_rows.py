"""Every recorded table with a row in it, and every way to alter one by SQL.

The world of `one_of_each` fills the tables that have a service; a table that it leaves
empty gets one row with every column filled, put in as the program would: with an entry
that tells of it. Such a row names rows that are not there, so all happens in `undone`.
"""

from __future__ import annotations

import datetime as dt
import math
import uuid
from collections.abc import Iterator
from contextlib import contextmanager
from typing import Any

from django.db import connection, models

from fleet.digests import guarded_tables, recorded_models
from fleet.fields import Count, Measure, Word
from fleet.models import HistoryEntry, HistoryHead, HistoryItem
from fleet.services.history import Writing
from fleet.triggers import triggers_remove
from tests.bare_rows import Model, _value, column_checks_only, insert, undone
from tests.factories import NOW
from tests.one_of_each import one_of_each_make

FAR = 1_000_000_007
"""A key that no row has."""


@contextmanager
def unguarded_world() -> Iterator[None]:
    """One row at least in every recorded table; triggers and row checks are gone."""
    one_of_each_make()
    with undone():
        connection.check_constraints()  # PostgreSQL alters no table with some pending
        triggers_remove(connection, guarded_tables())
        for model in (*recorded_models(), HistoryHead, HistoryEntry, HistoryItem):
            column_checks_only(model)
        with _checks_ignored():
            for model in recorded_models():
                if not model._base_manager.exists():
                    _fill(model)
            yield


@contextmanager
def _checks_ignored() -> Iterator[None]:
    if connection.vendor == "postgresql":
        yield
        return
    with connection.cursor() as cursor:
        cursor.execute("PRAGMA ignore_check_constraints = ON")
        try:
            yield
        finally:
            cursor.execute("PRAGMA ignore_check_constraints = OFF")


def _fill(model: Model) -> None:
    """A row with every column filled, and the entry that tells of it."""
    filled = {field.column: _value(field) for field in model._meta.concrete_fields}
    with Writing(actor=None, action=f"{model._meta.db_table}_create", at=NOW) as w:
        insert(model, filled)
        w._note("created", model._base_manager.get(), {})


def plain_columns(model: Model) -> list[models.Field[Any, Any]]:
    """Every column of the table."""
    return list(model._meta.concrete_fields)


def fullest_row(model: Model) -> models.Model:
    """The row with the fewest empty columns."""
    rows = list(model._base_manager.order_by("pk")[:200])
    return max(rows, key=lambda row: sum(_filled(row, f) for f in plain_columns(model)))


def _filled(row: models.Model, field: models.Field[Any, Any]) -> bool:
    return getattr(row, field.attname) not in (None, "")


def other(field: models.Field[Any, Any], value: Any) -> Any:
    """Another value that the column can hold, and that no other row has."""
    if isinstance(field, Measure | models.FloatField):
        return math.nextafter(value, math.inf) if value is not None else 1.0
    if field.is_relation or field.primary_key:
        return FAR if value is None else value + FAR
    if isinstance(field, Word):
        return next(word for word in reversed(("", *field.words)) if word != value)
    if isinstance(field, Count):
        return field.high if value != field.high else field.high - 1
    if isinstance(field, models.BooleanField):
        return not value
    if isinstance(field, models.IntegerField):
        return (value or 0) + 1
    if isinstance(field, models.DateTimeField):
        return (value or NOW) + dt.timedelta(microseconds=1)
    if isinstance(field, models.DateField):
        return (value or NOW.date()) + dt.timedelta(days=20_000)
    if isinstance(field, models.UUIDField):
        return uuid.UUID(int=2) if value == uuid.UUID(int=1) else uuid.UUID(int=1)
    return f"{value or ''} "


def update(model: Model, pk: Any, column: models.Field[Any, Any], value: Any) -> None:
    """One column of one row, as a hand at the SQL prompt would."""
    quote = connection.ops.quote_name
    sql = (
        f"UPDATE {quote(model._meta.db_table)} SET {quote(column.column)} = %s "
        f"WHERE {quote(model._meta.pk.column)} = %s"
    )
    with connection.cursor() as cursor:
        cursor.execute(sql, [column.get_db_prep_save(value, connection), pk])
        assert cursor.rowcount == 1, f"{sql} changed {cursor.rowcount} rows"


def delete(model: Model, pk: Any) -> None:
    quote = connection.ops.quote_name
    with connection.cursor() as cursor:
        cursor.execute(
            f"DELETE FROM {quote(model._meta.db_table)} "
            f"WHERE {quote(model._meta.pk.column)} = %s",
            [pk],
        )
        assert cursor.rowcount == 1


def insert_like(row: models.Model) -> None:
    """A row beside this one that differs in every column, its key too."""
    fields = plain_columns(type(row))
    values = {f.column: other(f, getattr(row, f.attname)) for f in fields}
    insert(type(row), values)
