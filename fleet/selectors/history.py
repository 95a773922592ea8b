"""The history of one record, in words."""

from __future__ import annotations

import datetime as dt
import json
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from django.db import models
from django.db.models import Q

from fleet.canonical import plain
from fleet.models import HistoryItem
from fleet.selectors.in_words import (
    Keys,
    Table,
    keys_told,
    name_words,
    table_named,
    value_words,
)

Changes = dict[str, list[Any]]

# What a location's text already says; the entry keeps them, the page does not repeat.
FOLLOWS_FROM_PLACE = frozenset(
    f"{name}_id" for name in ("section", "geometry", "panel", "zone")
) | frozenset(
    (
        *(f"{name}_mm" for name in ("x1", "x2", "map", "s1", "s2", "bl", "wl")),
        "along_half",
        "around_half",
        "reader_version",
    )
)
JUST_DONE = "{row}: {what} by {who} on {at:%Y-%m-%d at %H:%M} UTC. {changes}"
# Of a row that replaces another: what differs in any case.
TELLS_NOTHING = frozenset(
    {"id", "replaces_id", "revision", "number", "entered_at", "entered_by_id"}
)


@dataclass(frozen=True)
class Told:
    """One entry, as it touched one record."""

    at: dt.datetime
    actor_name: str
    action_words: str
    changes: list[str]
    reason: str
    entry: int


def history_of(row: models.Model, *, limit: int = 100) -> list[Told]:
    """The newest entries that touched the row: one query, and one a table that its
    columns point at."""
    items = HistoryItem.objects.filter(_names(row)).select_related("entry")
    items = items.order_by("-entry_id", "-number")[:limit]
    changed = [(item, _shown_of(json.loads(item.changes))) for item in items]
    keys = _keys_told(changed)
    return [_one(item, changes, keys) for item, changes in changed]


def changes_since(
    rows: Sequence[models.Model], entry: int
) -> list[tuple[models.Model, list[Told]]]:
    """The rows that entries after that one touched, and what they did, oldest first.

    A row that replaced one of them, as of what is never changed, is told by the columns
    in which the two differ. One query, one a table whose rows are replaced, and one a
    table that the columns point at.
    """
    held = [*rows, *_replacing(rows)]
    named = Q(pk__in=[])
    for row in held:
        named |= _names(row)
    items = HistoryItem.objects.filter(named, entry__gt=entry).select_related("entry")
    changed = [
        (row, item, _shown_of(json.loads(item.changes)) or _differing(row))
        for item in items.order_by("entry_id", "number")
        for row in held
        if item.table == row._meta.db_table and item.first_pk <= row.pk <= item.last_pk
    ]
    keys = _keys_told([(item, changes) for _, item, changes in changed])
    touched: dict[models.Model, list[Told]] = {}
    for row, item, changes in changed:
        touched.setdefault(row, []).append(_one(item, changes, keys))
    return list(touched.items())


def _replacing(rows: Sequence[models.Model]) -> list[models.Model]:
    """The rows that replaced some of these."""
    keys: dict[type[models.Model], list[int]] = {}
    for row in rows:
        if any(field.name == "replaces" for field in row._meta.concrete_fields):
            keys.setdefault(type(row), []).append(row.pk)
    return [
        later
        for kind, replaced in keys.items()
        for later in kind._default_manager.filter(replaces__in=replaced)
    ]


def _names(row: models.Model) -> Q:
    """Items that name the row."""
    return Q(table=row._meta.db_table, first_pk__lte=row.pk, last_pk__gte=row.pk)


def just_done(row: models.Model) -> str:
    """The last thing done to the row, in a sentence; empty when nothing is known."""
    last = next(iter(history_of(row, limit=1)), None)
    if last is None:
        return ""
    return JUST_DONE.format(
        row=row,
        what=last.action_words,
        who=last.actor_name,
        at=last.at,
        changes="; ".join(last.changes),
    ).strip()


def _one(item: HistoryItem, changes: Changes, keys: Keys) -> Told:
    return Told(
        at=item.entry.at,
        actor_name=item.entry.actor_name,
        action_words=item.entry.action_words,
        changes=_told(table_named(item.table), changes, keys),
        reason=item.entry.reason,
        entry=item.entry_id,
    )


def _differing(row: models.Model) -> Changes:
    """Of a new row: the columns in which it differs from the one it replaces."""
    before = getattr(row, "replaces", None)
    if before is None:
        return {}
    names = (field.attname for field in row._meta.concrete_fields)
    pairs = {
        name: [plain(getattr(before, name)), plain(getattr(row, name))]
        for name in names
        if name not in TELLS_NOTHING
    }
    return _shown_of({name: pair for name, pair in pairs.items() if pair[0] != pair[1]})


def _shown_of(changes: Changes) -> Changes:
    """The columns that a reader is told of."""
    left_out = FOLLOWS_FROM_PLACE if "place_text" in changes else frozenset()
    return {name: pair for name, pair in changes.items() if name not in left_out}


def _keys_told(changed: Sequence[tuple[HistoryItem, Changes]]) -> Keys:
    return keys_told(
        (table_named(item.table), column, value)
        for item, changes in changed
        for column, pair in changes.items()
        for value in pair
    )


def _told(table: Table | None, changes: Changes, keys: Keys) -> list[str]:
    return [
        f"{name_words(column, table)}: {value_words(table, column, before, keys)} → "
        f"{value_words(table, column, after, keys)}"
        for column, (before, after) in changes.items()
    ]
