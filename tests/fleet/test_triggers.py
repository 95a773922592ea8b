"""The database refuses to change or remove a row of every append-only table."""

from __future__ import annotations

import pytest
from django.apps import apps
from django.conf import settings
from django.db import DatabaseError, connection, transaction

from fleet.digests import append_only
from fleet.triggers import trigger_names
from tests.bare_rows import bare_row, insert, no_row_checks, undone

pytestmark = pytest.mark.django_db

APPEND_ONLY = [
    model
    for app in settings.RECORDED_APPS
    for model in apps.get_app_config(app).get_models()
    if append_only(model)
]
REFUSAL = "never changed or removed"
SURELY = {
    "fleet_historyentry",
    "fleet_historyitem",
    "fleet_usagerecord",
    "repairs_approval",
    "repairs_disposition",
    "repairs_evaluation",
    "repairs_measurement",
}


def refused(sql: str) -> None:
    with (
        pytest.raises(DatabaseError, match=REFUSAL),
        transaction.atomic(),
        connection.cursor() as cursor,
    ):
        cursor.execute(sql)


def test_the_records_that_must_never_change_are_among_them():
    assert {model._meta.db_table for model in APPEND_ONLY} >= SURELY


@pytest.mark.parametrize("model", APPEND_ONLY, ids=lambda model: model._meta.db_table)
def test_a_row_can_be_neither_changed_nor_removed(model):
    table, key = model._meta.db_table, model._meta.pk.column
    with undone():
        if connection.vendor == "postgresql":  # SQLite knows DELETE only
            refused(f"TRUNCATE {table} CASCADE")
        with no_row_checks(model):
            insert(model, bare_row(model))
        refused(f"UPDATE {table} SET {key} = {key}")
        refused(f"DELETE FROM {table}")
        assert model._default_manager.count() == 1
        if connection.vendor == "sqlite":
            with (
                no_row_checks(model),
                pytest.raises(DatabaseError, match=REFUSAL),
                transaction.atomic(),
            ):
                insert(model, bare_row(model), verb="INSERT OR REPLACE")


def test_every_trigger_is_there():
    with connection.cursor() as cursor:
        cursor.execute(
            "SELECT tgname FROM pg_trigger WHERE tgenabled <> 'D'"
            if connection.vendor == "postgresql"
            else "SELECT name FROM sqlite_master WHERE type = 'trigger'"
        )
        present = {name for (name,) in cursor.fetchall()}
    tables = [model._meta.db_table for model in APPEND_ONLY]
    assert trigger_names(connection.vendor, tables) <= present
