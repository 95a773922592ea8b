"""Checking a row before it is written, and saying in words why the database refused."""

from __future__ import annotations

import re
from typing import Any

from django.apps import apps
from django.core.exceptions import ValidationError
from django.db import IntegrityError, OperationalError, models

BUSY = (
    "The records were being written by others at the same moment and this was not "
    "written; nothing is lost: send it again."
)
TAKEN = "There is one already, or someone else has just recorded it: {columns}."
REFUSED = "The record was refused by the rule {rule}."
WAITED = ("40P01", "40001", "55P03")
"""PostgreSQL: deadlock found, serialization failure, lock not available."""
CHECK_FAILED = "CHECK constraint failed: "
TAKEN_COLUMNS = re.compile(
    r"Key \((?P<named>[^)]*)\)=.* already exists"
    r"|UNIQUE constraint failed: (?P<listed>.*)"
)


def clean_row(row: models.Model) -> None:
    """Check the row's own columns without asking the database.

    Foreign keys, uniqueness and rules across columns are left to the constraints;
    `refusal` turns their answer into words. (`full_clean` sends a query for each.)
    """
    relations = [field for field in row._meta.concrete_fields if field.is_relation]
    errors: dict[str, list[Any]] = {
        field.name: ["This is needed."]
        for field in relations
        if not field.null and getattr(row, field.attname) is None
    }
    checked_elsewhere = {field.name for field in relations}
    if row.pk is None:
        checked_elsewhere.add(row._meta.pk.name)
    try:
        row.clean_fields(exclude=checked_elsewhere)
        row.clean()
    except ValidationError as error:
        errors |= error.update_error_dict({})
    if errors:
        raise ValidationError(errors)


def refusal(error: IntegrityError) -> ValidationError:
    """The database's refusal in the words of the constraint that refused.

    PostgreSQL names the constraint, or the key that is taken; SQLite names a check, and
    for uniqueness only the columns.
    """
    told = getattr(error.__cause__, "diag", None)
    text = str(error).splitlines()[0]
    taken = TAKEN_COLUMNS.search(str(error))
    if taken:
        columns = taken["named"] or taken["listed"]
        return ValidationError(TAKEN.format(columns=_words(columns)), code="taken")
    rule = getattr(told, "constraint_name", None) or text.removeprefix(CHECK_FAILED)
    for constraint in _constraints():
        if constraint.name == rule:
            return ValidationError(str(constraint.violation_error_message), code=rule)
    return ValidationError(REFUSED.format(rule=rule), code="refused")


def taken(row: models.Model, error: IntegrityError) -> models.Model | None:
    """The row that already holds what this one was refused for."""
    found = TAKEN_COLUMNS.search(str(error))
    columns = (found["named"] or found["listed"]) if found else ""
    bare = [column.strip().rsplit(".", 1)[-1] for column in columns.split(",")]
    fields = {field.column: field.attname for field in row._meta.concrete_fields}
    if not set(bare) <= set(fields):
        return None
    same = {fields[column]: getattr(row, fields[column]) for column in bare}
    holds = [
        rule.condition
        for rule in row._meta.constraints
        if isinstance(rule, models.UniqueConstraint)
        and {row._meta.get_field(name).column for name in rule.fields} == set(bare)  # type: ignore[union-attr]
    ]
    rows = type(row)._default_manager.filter(**same)
    return (rows.filter(*(x for x in holds if x)) if holds else rows).first()


def busy(error: OperationalError) -> ValidationError | None:
    """Words for two writings that waited for each other, or for one that waited too
    long; None for anything else."""
    waited = getattr(error.__cause__, "sqlstate", None) in WAITED
    return ValidationError(BUSY) if waited or "is locked" in str(error) else None


def _constraints() -> list[models.BaseConstraint]:
    return [rule for model in apps.get_models() for rule in model._meta.constraints]


def _words(columns: str) -> str:
    bare = (column.strip().rsplit(".", 1)[-1] for column in columns.split(","))
    return ", ".join(column.removesuffix("_id").replace("_", " ") for column in bare)
