"""Rows altered by SQL behind the program's back, triggers off: all are found.

AMC M.A.305(e)(a)(3) and (4) ask for safeguards against unauthorised alteration and for
the integrity of the records (read in a public copy).
"""

from __future__ import annotations

from collections.abc import Iterator

import pytest
from django.db import models, transaction

from fleet.digests import NOT_DIGESTED, NOT_RECORDED, recorded_models
from fleet.models import HistoryEntry, HistoryHead, HistoryItem
from fleet.selectors.verify import chain_problems
from fleet.selectors.verify_rows import Read, table_problems
from tests.altered_rows import (
    delete,
    fullest_row,
    insert_like,
    other,
    plain_columns,
    unguarded_world,
    update,
)
from tests.bare_rows import Model, undone

pytestmark = pytest.mark.django_db
LEAST_ALTERATIONS = 900
# An item's own key says nothing: what it tells is bound to its entry and number.
SAYS_NOTHING = {("fleet_historyitem", "id")}


def row_alterations(model: Model) -> Iterator[str]:
    """Alter each column of a row, remove one, add one; yields what was not found."""
    row = fullest_row(model)
    for field in plain_columns(model):
        if field.attname in NOT_DIGESTED:
            continue
        with undone():
            update(model, row.pk, field, other(field, getattr(row, field.attname)))
            yield from not_found(model, f"{field.column} altered")
    with undone():
        delete(model, row.pk)
        yield from not_found(model, "row removed")
    with undone():
        insert_like(row)
        yield from not_found(model, "row added")


def not_found(model: Model, what: str) -> Iterator[str]:
    found = next(table_problems(model, Read()), None)
    yield "" if found else f"{model._meta.db_table}: {what}"


def test_whatever_is_altered_in_any_recorded_table_is_found():
    with unguarded_world():
        empty = [
            model._meta.db_table
            for model in recorded_models()
            if not model._base_manager.exists()
        ]
        assert empty == []
        for model in recorded_models():
            assert list(table_problems(model, Read())) == [], "before any alteration"
        outcomes = [
            told for model in recorded_models() for told in row_alterations(model)
        ]
    assert [told for told in outcomes if told] == []
    print(f"{len(outcomes)} alterations in {len(recorded_models())} tables, all found")
    assert len(outcomes) >= LEAST_ALTERATIONS


def test_only_these_tables_stand_outside_the_history():
    assert {
        "fleet_historyhead",
        "fleet_historyentry",
        "fleet_historyitem",
        "fleet_historyseal",
        "fleet_recordnumber",
        "fleet_sentform",
        "repairs_recalculationpart",
    } == NOT_RECORDED


@pytest.mark.parametrize("model", [HistoryEntry, HistoryItem, HistoryHead])
def test_whatever_is_altered_in_the_history_itself_is_found(model):
    with unguarded_world():
        assert list(chain_problems(Read())) == []
        middle = model._base_manager.order_by("pk")[model._base_manager.count() // 2]
        for field in plain_columns(model):
            if (model._meta.db_table, field.column) in SAYS_NOTHING:
                continue
            with undone():
                value = other(field, getattr(middle, field.attname))
                update(model, middle.pk, field, value)
                assert next(chain_problems(Read()), None), field.column


def middle_entries() -> list[HistoryEntry]:
    entries = HistoryEntry.objects.order_by("sequence")
    return list(entries[entries.count() // 2 :][:2])


def rows_of(model: type[models.Model], **key: object) -> list[int]:
    return list(model._base_manager.filter(**key).values_list("pk", flat=True))


def entry_removed() -> None:
    entry, _ = middle_entries()
    for pk in rows_of(HistoryItem, entry_id=entry.pk):
        delete(HistoryItem, pk)
    delete(HistoryEntry, entry.pk)


def entries_told_in_another_order() -> None:
    """What was done swapped between two entries, all else left."""
    first, second = middle_entries()
    for entry, action in ((first, second.action), (second, first.action)):
        update(HistoryEntry, entry.pk, HistoryEntry._meta.get_field("action"), action)


def entries_reordered() -> None:
    """Two entries change places, with their items."""
    first, second = middle_entries()
    sequence = HistoryEntry._meta.get_field("sequence")
    belongs = HistoryItem._meta.get_field("entry")
    moves = ((first.pk, 10**9), (second.pk, first.pk), (10**9, second.pk))
    for before, after in moves:
        update(HistoryEntry, before, sequence, after)
        for pk in rows_of(HistoryItem, entry_id=before):
            update(HistoryItem, pk, belongs, after)


def item_moved() -> None:
    """An item told by the entry after its own."""
    item = HistoryItem.objects.filter(number__gt=1).latest("entry_id")
    target = HistoryEntry.objects.exclude(pk=item.entry_id).latest("sequence")
    number = HistoryItem._meta.get_field("number")
    update(HistoryItem, item.pk, number, 999_999)
    update(HistoryItem, item.pk, HistoryItem._meta.get_field("entry"), target.pk)


def item_removed() -> None:
    delete(HistoryItem, HistoryItem.objects.latest("entry_id", "number").pk)


def item_added() -> None:
    insert_like(HistoryItem.objects.latest("entry_id", "number"))


def entry_added() -> None:
    insert_like(HistoryEntry.objects.latest("sequence"))


def last_entry_cut() -> None:
    last = HistoryEntry.objects.latest("sequence")
    for pk in rows_of(HistoryItem, entry_id=last.pk):
        delete(HistoryItem, pk)
    delete(HistoryEntry, last.pk)


def head_moved_back() -> None:
    head = HistoryHead.objects.get()
    sequence = HistoryHead._meta.get_field("sequence")
    update(HistoryHead, head.pk, sequence, head.sequence - 1)


MEDDLING = (
    entry_removed,
    entries_told_in_another_order,
    entries_reordered,
    item_moved,
    item_removed,
    item_added,
    entry_added,
    last_entry_cut,
    head_moved_back,
)


def test_entries_and_items_removed_added_moved_or_reordered_are_found():
    with unguarded_world():
        for meddle in MEDDLING:
            with undone(), transaction.atomic():
                assert list(chain_problems(Read())) == []
                meddle()
                assert next(chain_problems(Read()), None), meddle.__name__
