"""Rows put into a table behind the program's back, to see what the database refuses.

A bare row satisfies the checks of its columns and nothing else: it names other rows
that are not there, so everything happens inside `undone`.
"""

from __future__ import annotations

import datetime as dt
import uuid
from collections.abc import Iterator
from contextlib import contextmanager
from typing import Any

from django.db import connection, models, transaction

from fleet.fields import Count, Measure, Word

Model = type[models.Model]


@contextmanager
def undone() -> Iterator[None]:
    """Whatever happens inside is rolled back."""
    with transaction.atomic():
        yield
        transaction.set_rollback(True)


def bare_row(model: Model) -> dict[str, Any]:
    """A value for every column that may not be empty, by column name."""
    return {
        field.column: None if field.null else _value(field)
        for field in model._meta.concrete_fields
    }


def insert(model: Model, row: dict[str, Any], *, verb: str = "INSERT") -> None:
    quote = connection.ops.quote_name
    columns = {field.column: field for field in model._meta.concrete_fields}
    values = [
        columns[name].get_db_prep_save(value, connection) for name, value in row.items()
    ]
    listed, marks = ", ".join(map(quote, row)), ", ".join(["%s"] * len(row))
    table = quote(model._meta.db_table)
    with connection.cursor() as cursor:
        cursor.execute(f"{verb} INTO {table} ({listed}) VALUES ({marks})", values)


def column_checks_only(model: Model) -> None:
    """Drop rules across columns, where the database would name them first."""
    if connection.vendor != "postgresql":
        return  # SQLite tries the columns' own checks before them
    with connection.cursor() as cursor:
        for rule in model._meta.constraints:
            if isinstance(rule, models.CheckConstraint):
                cursor.execute(
                    f"ALTER TABLE {model._meta.db_table} DROP CONSTRAINT {rule.name}"
                )


@contextmanager
def no_row_checks(model: Model) -> Iterator[None]:
    """Let a bare row in, whatever rules across columns say."""
    column_checks_only(model)
    if connection.vendor == "postgresql":
        yield
        return
    with connection.cursor() as cursor:
        cursor.execute("PRAGMA ignore_check_constraints = ON")
        try:
            yield
        finally:
            cursor.execute("PRAGMA ignore_check_constraints = OFF")


def _value(field: models.Field[Any, Any]) -> Any:
    if isinstance(field, Count | Measure):
        return field.low
    if isinstance(field, Word):
        return field.words[0]
    if field.is_relation or isinstance(field, models.IntegerField):
        return 1
    if isinstance(field, models.DateTimeField):
        return dt.datetime(2025, 1, 1, tzinfo=dt.UTC)
    if isinstance(field, models.DateField):
        return dt.date(2025, 1, 1)
    if isinstance(field, models.UUIDField):
        return uuid.UUID(int=1)
    if isinstance(field, models.BooleanField):
        return False
    return "x"
