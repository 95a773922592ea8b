"""The history: chained, complete, and found out when altered behind its back."""

from __future__ import annotations

import pytest
from django.core.exceptions import ValidationError
from django.core.management import CommandError, call_command
from django.db import DatabaseError, connection, transaction

from fleet.models import HistoryEntry, HistoryHead, HistoryItem, Organisation
from fleet.selectors.history import _shown_of
from fleet.selectors.verify import problems
from fleet.services.history import NESTED, Writing
from fleet.triggers import statements

pytestmark = pytest.mark.django_db


@pytest.fixture
def two(now):
    """Two organisations, the second renamed: two entries, three items."""
    with Writing(actor=None, action="organisation_create", at=now) as w:
        first = w.create(Organisation(code="ONE", name="One", kind="operator"))
        second = w.create(Organisation(code="TWO", name="Two", kind="operator"))
    with Writing(actor=None, action="organisation_rename", at=now, reason="sold") as w:
        w.change(second, name="Second")
    return first, second


def test_each_call_leaves_one_entry_that_says_from_and_to(two):
    entries = list(HistoryEntry.objects.all())
    assert [entry.sequence for entry in entries] == [1, 2]
    assert entries[1].previous_digest == entries[0].digest
    assert entries[1].reason == "sold"
    item = HistoryItem.objects.get(entry=entries[1])
    assert item.changes == '{"name":["Two","Second"]}'
    assert HistoryHead.objects.get().digest == entries[1].digest


def test_an_untouched_record_agrees(two):
    assert list(problems()) == []
    call_command("verify_history")


@pytest.mark.parametrize(
    ("statement", "told"),
    [
        ("UPDATE fleet_organisation SET name = 'X' WHERE code = 'ONE'", "was altered"),
        ("DELETE FROM fleet_organisation WHERE code = 'ONE'", "is missing"),
        (
            "INSERT INTO fleet_organisation (code, name, kind) "
            "VALUES ('NEW', 'New', 'operator')",
            "has no history",
        ),
        ("UPDATE fleet_historyhead SET sequence = 1", "head of the chain"),
    ],
)
def test_a_change_behind_its_back_is_named(two, statement, told):
    with connection.cursor() as cursor:
        cursor.execute(statement)
    assert any(told in problem for problem in problems())
    with pytest.raises(CommandError, match=told):
        call_command("verify_history")


@pytest.mark.parametrize(
    ("statement", "told"),
    [
        ("UPDATE fleet_historyentry SET reason = 'lost' WHERE sequence = 2", "altered"),
        ("UPDATE fleet_historyitem SET changes = '{}' WHERE entry_id = 2", "items"),
        ("DELETE FROM fleet_historyitem WHERE entry_id = 2", "items"),
    ],
)
def test_a_change_of_the_history_itself_is_named(two, statement, told):
    drop_triggers("fleet_historyentry", "fleet_historyitem")
    with connection.cursor() as cursor:
        cursor.execute(statement)
    found = list(problems())
    assert told in found[0]
    assert any("trigger" in problem for problem in found)


@pytest.mark.parametrize(
    "statement",
    [
        "UPDATE fleet_historyentry SET reason = 'lost'",
        "DELETE FROM fleet_historyitem",
        "UPDATE fleet_historyitem SET row_digest = ''",
    ],
)
def test_the_database_refuses_to_change_the_history(two, statement):
    with (
        pytest.raises(DatabaseError, match="never changed"),
        transaction.atomic(),
        connection.cursor() as cursor,
    ):
        cursor.execute(statement)


AROUND = {
    "sqlite": "INSERT OR REPLACE INTO fleet_historyentry "
    "SELECT * FROM fleet_historyentry WHERE sequence = 1",
    "postgresql": "SET CONSTRAINTS ALL IMMEDIATE; TRUNCATE fleet_historyentry CASCADE",
}


def test_the_way_around_row_triggers_is_refused_too(two):
    with (
        pytest.raises(DatabaseError, match="never changed"),
        transaction.atomic(),
        connection.cursor() as cursor,
    ):
        cursor.execute(AROUND[connection.vendor])


def test_a_refused_row_leaves_nothing(two, now):
    with (
        pytest.raises(ValidationError, match="one already"),
        Writing(actor=None, action="organisation_create", at=now) as w,
    ):
        w.create(Organisation(code="THREE", name="Three", kind="operator"))
        w.create(Organisation(code="ONE", name="Again", kind="operator"))
    assert HistoryEntry.objects.count() == 2
    assert not Organisation.objects.filter(code="THREE").exists()


def test_a_service_inside_a_service_is_refused(two, now):
    with (
        pytest.raises(RuntimeError, match="another"),
        Writing(actor=None, action="outer", at=now),
        Writing(actor=None, action="inner", at=now),
    ):
        pass
    assert "another" in NESTED


def drop_triggers(*tables: str) -> None:
    with connection.cursor() as cursor:
        for table in tables:
            for rule in statements(connection.vendor):
                on_table = f" ON {table}" if connection.vendor == "postgresql" else ""
                cursor.execute(f"DROP TRIGGER {table}_{rule}{on_table}")


def test_a_new_location_is_told_by_its_text_alone():
    changes = {
        "place_text": ["", "STA 500+18 S-14L"],
        "s1_mm": [None, (-2904.6).hex()],
        "panel_id": [None, 30],
        "surface": ["", "outer"],
    }
    assert set(_shown_of(changes)) == {"place_text", "surface"}
    assert set(_shown_of({"panel_id": [29, 30]})) == {"panel_id"}
