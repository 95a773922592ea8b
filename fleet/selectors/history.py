"""The history of one record, in words."""

from __future__ import annotations

import datetime as dt
import json
from dataclasses import dataclass
from typing import Any

from django.db import models

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


@dataclass(frozen=True)
class Told:
    """One entry, as it touched one record."""

    at: dt.datetime
    actor_name: str
    action_words: str
    changes: list[str]
    reason: str


def history_of(row: models.Model, *, limit: int = 100) -> list[Told]:
    """The newest entries that touched the row; one query."""
    items = (
        HistoryItem.objects.filter(
            table=row._meta.db_table, first_pk__lte=row.pk, last_pk__gte=row.pk
        )
        .select_related("entry")
        .order_by("-entry_id", "-number")[:limit]
    )
    return [
        Told(
            at=item.entry.at,
            actor_name=item.entry.actor_name,
            action_words=item.entry.action_words,
            changes=_told(json.loads(item.changes)),
            reason=item.entry.reason,
        )
        for item in items
    ]


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
