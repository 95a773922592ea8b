"""What the database itself refuses when a row comes in past every form and service."""

from __future__ import annotations

import math

import pytest
from django.apps import apps
from django.conf import settings
from django.db import IntegrityError, connection, transaction

from fleet.fields import Count, Measure, Word
from fleet.models import RecordNumber
from tests.bare_rows import bare_row, column_checks_only, insert, no_row_checks, undone

pytestmark = pytest.mark.django_db

MODELS = [
    model
    for app in settings.RECORDED_APPS
    for model in apps.get_app_config(app).get_models()
    if any(isinstance(f, Count | Measure | Word) for f in model._meta.concrete_fields)
]


def wrong_values(field):
    """Values outside the column's own bounds or list."""
    if isinstance(field, Word):
        words = ["no such word", f"{field.words[0]} "]
        return words if field.blank else [*words, ""]
    if isinstance(field, Count):
        return [field.low - 1, field.high + 1]
    return [
        math.nextafter(field.low, -math.inf),
        math.nextafter(field.high, math.inf),
        math.inf,
        -math.inf,
    ]


def refusal(model, row):
    """What the database says to the row; empty when it takes it."""
    try:
        with transaction.atomic():
            insert(model, row)
    except IntegrityError as error:
        return str(error)
    return ""


@pytest.mark.parametrize("model", MODELS, ids=lambda model: model._meta.db_table)
def test_a_value_outside_the_columns_bounds_or_words_is_refused(model):
    with undone():
        column_checks_only(model)
        for field in model._meta.concrete_fields:
            if not isinstance(field, Count | Measure | Word):
                continue
            for value in wrong_values(field):
                said = refusal(model, bare_row(model) | {field.column: value})
                assert field.column in said, (field.name, value, said)


@pytest.mark.parametrize("model", MODELS, ids=lambda model: model._meta.db_table)
def test_nan_is_never_kept_as_a_number(model):
    with undone():
        column_checks_only(model)
        for field in model._meta.concrete_fields:
            if not isinstance(field, Measure):
                continue
            row = bare_row(model) | {field.column: math.nan}
            if field.null and connection.vendor == "sqlite":
                assert stored(model, row, field.column) is None  # unknown, no number
            else:
                assert field.column in refusal(model, row), field.name


def stored(model, row, column):
    """What SQLite makes of a value in a column that may be empty."""
    table = model._meta.db_table
    with undone(), connection.cursor() as cursor:
        cursor.execute("PRAGMA ignore_check_constraints = ON")
        try:
            insert(model, row)
        finally:
            cursor.execute("PRAGMA ignore_check_constraints = OFF")
        cursor.execute(f"SELECT {column} FROM {table}")
        return cursor.fetchone()[0]


def test_the_bounds_themselves_are_allowed():
    for value in (0, 1_000_000_000):
        with undone():
            said = refusal(RecordNumber, bare_row(RecordNumber) | {"last": value})
            assert said == ""


@pytest.mark.parametrize("model", MODELS, ids=lambda model: model._meta.db_table)
def test_every_word_of_a_column_is_allowed(model):
    """Also one that a later migration added to the list."""
    with undone(), no_row_checks(model):
        for field in model._meta.concrete_fields:
            for word in field.words if isinstance(field, Word) else ():
                with undone():
                    said = refusal(model, bare_row(model) | {field.column: word})
                assert said == "", (field.name, word)
