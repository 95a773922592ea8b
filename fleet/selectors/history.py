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
    """The newest entries that touched the row; one query."""
    items = HistoryItem.objects.filter(_names(row)).select_related("entry")
    items = items.order_by("-entry_id", "-number")[:limit]
    return [_one(item, _told(json.loads(item.changes))) for item in items]


def changes_since(
    rows: Sequence[models.Model], entry: int
) -> list[tuple[models.Model, list[Told]]]:
    """The rows that entries after that one touched, and what they did, oldest first.

    A row that replaced one of them, as of what is never changed, is told by the columns
    in which the two differ. One query, and one a table whose rows are replaced.
    """
    held = [*rows, *_replacing(rows)]
    named = Q(pk__in=[])
    for row in held:
        named |= _names(row)
    items = HistoryItem.objects.filter(named, entry__gt=entry).select_related("entry")
    touched: dict[models.Model, list[Told]] = {}
    for item in items.order_by("entry_id", "number"):
        for row in held:
            same_table = item.table == row._meta.db_table
            if same_table and item.first_pk <= row.pk <= item.last_pk:
                changes = _told(json.loads(item.changes)) or _differing(row)
                touched.setdefault(row, []).append(_one(item, changes))
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


def _one(item: HistoryItem, changes: list[str]) -> Told:
    return Told(
        at=item.entry.at,
        actor_name=item.entry.actor_name,
        action_words=item.entry.action_words,
        changes=changes,
        reason=item.entry.reason,
        entry=item.entry_id,
    )


def _differing(row: models.Model) -> list[str]:
    """Of a new row: the columns in which it differs from the one it replaces."""
    before = getattr(row, "replaces", None)
    if before is None:
        return []
    names = (field.attname for field in row._meta.concrete_fields)
    pairs = {
        name: (plain(getattr(before, name)), plain(getattr(row, name)))
        for name in names
        if name not in TELLS_NOTHING
    }
    return _told({name: [a, b] for name, (a, b) in pairs.items() if a != b})


def _told(changes: dict[str, list[Any]]) -> list[str]:
    left_out = FOLLOWS_FROM_PLACE if "place_text" in changes else frozenset()
    return [
        _words(column, before, after)
        for column, (before, after) in changes.items()
        if column not in left_out
    ]


def _words(column: str, before: Any, after: Any) -> str:
    name = column.removesuffix("_id").replace("place_text", "location")
    name = name.replace("_", " ")
    return f"{name}: {_shown(before)} → {_shown(after)}"


def _shown(value: Any) -> str:
    if value is None or value == "":
        return "—"
    if isinstance(value, str) and value.startswith(("0x", "-0x")):
        return f"{float.fromhex(value):g}"
    return str(value).replace("_", " ")
