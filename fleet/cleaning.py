"""Checking a row before it is written, and saying in words why the database refused."""

from __future__ import annotations

from typing import Any

from django.apps import apps
from django.core.exceptions import ValidationError
from django.db import IntegrityError, models

TAKEN = "There is one already, or someone else has just recorded it: {columns}."
REFUSED = "The record was refused by the rule {rule}."


def clean_row(row: models.Model) -> None:
    """Check the row's own columns without asking the database.

    Foreign keys, uniqueness and rules across columns are left to the constraints;
    `refusal` turns their answer into words. (`full_clean` sends a query for each.)
    """
    relations = [field.name for field in row._meta.concrete_fields if field.is_relation]
    errors: dict[str, list[Any]] = {}
    for name in relations:
        field = row._meta.get_field(name)
        value = getattr(row, field.attname)  # type: ignore[union-attr]
        if value is None and not field.null:  # type: ignore[union-attr]
            errors[name] = ["This is needed."]
    try:
        row.clean_fields(exclude={*relations, *_automatic(row)})
        row.clean()
    except ValidationError as error:
        errors |= error.update_error_dict({})
    if errors:
        raise ValidationError(errors)


def _automatic(row: models.Model) -> list[str]:
    key = row._meta.pk
    return [key.name] if key is not None and row.pk is None else []


def refusal(error: IntegrityError) -> ValidationError:
    """The database's refusal in the words of the constraint that refused."""
    name = getattr(getattr(error.__cause__, "diag", None), "constraint_name", None)
    message = str(error)
    if not name and message.startswith("CHECK constraint failed: "):
        name = message.removeprefix("CHECK constraint failed: ")
    if not name and message.startswith("UNIQUE constraint failed: "):
        columns = message.removeprefix("UNIQUE constraint failed: ")
        return ValidationError(TAKEN.format(columns=_words(columns)), code="taken")
    for constraint in _constraints():
        if constraint.name == name:
            if isinstance(constraint, models.UniqueConstraint):
                listed = ", ".join(constraint.fields)
                return ValidationError(
                    TAKEN.format(columns=_words(listed)), code="taken"
                )
            return ValidationError(str(constraint.violation_error_message), code=name)
    return ValidationError(REFUSED.format(rule=name or message), code="refused")


def _constraints() -> list[models.BaseConstraint]:
    return [rule for model in apps.get_models() for rule in model._meta.constraints]


def _words(columns: str) -> str:
    bare = (column.strip().rsplit(".", 1)[-1] for column in columns.split(","))
    return ", ".join(column.removesuffix("_id").replace("_", " ") for column in bare)
