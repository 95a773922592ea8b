"""Digests that bind a row, an entry and its items to what they say."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from functools import cache
from typing import Any

from django.apps import apps
from django.conf import settings
from django.db import models

from fleet.canonical import canonical, digest, plain
from fleet.models import HistoryEntry, HistoryItem

# The history cannot record itself; a record number is checked by its uniqueness, a sent
# form only points at the entry it made, and a worker's hold on its share is no record.
NOT_RECORDED = frozenset(
    {
        "fleet_historyhead",
        "fleet_historyentry",
        "fleet_historyitem",
        "fleet_historyseal",
        "fleet_recordnumber",
        "fleet_sentform",
        "repairs_recalculationpart",
    }
)
# The framework writes it at sign-in, outside any service.
NOT_DIGESTED = frozenset({"last_login"})


def append_only(model: type[models.Model]) -> bool:
    """Whether the database refuses to change rows of this table."""
    return getattr(model, "append_only", False)


def recorded_models() -> list[type[models.Model]]:
    """Every table whose rows the history must explain."""
    return [
        model
        for app in settings.RECORDED_APPS
        for model in apps.get_app_config(app).get_models(include_auto_created=True)
        if model._meta.db_table not in NOT_RECORDED
    ]


def guarded_tables() -> dict[str, str]:
    """Every append-only table, which triggers guard, to its key column."""
    return {
        model._meta.db_table: str(model._meta.pk.column)
        for app in settings.RECORDED_APPS
        for model in apps.get_app_config(app).get_models()
        if append_only(model)
    }


def row_digest(row: models.Model) -> str:
    """SHA-256 over the columns that hold something, in name order, as the database
    gives them back. NULL and '' are left out, so that a column added later, which
    begins empty, leaves the digests of older rows as they are."""
    return digest(
        canonical(
            [
                [name, plain(value)]
                for name, to_python in _columns(type(row))
                if (value := to_python(getattr(row, name))) not in (None, "")
            ]
        )
    )


@cache
def _columns(model: type[models.Model]) -> list[tuple[str, Callable[[Any], Any]]]:
    """The digested columns of a table, in name order."""
    return sorted(
        (
            (field.attname, field.to_python)
            for field in model._meta.concrete_fields
            if field.attname not in NOT_DIGESTED
        ),
        key=lambda column: column[0],
    )


def run_digest(rows: Iterable[models.Model]) -> str:
    """One digest over a run of rows."""
    return digest("".join(row_digest(row) for row in rows))


def items_digest(items: Iterable[HistoryItem]) -> str:
    """Over everything the items say, in their order."""
    return digest(
        canonical(
            [
                [
                    i.number,
                    i.kind,
                    i.table,
                    i.first_pk,
                    i.last_pk,
                    i.row_digest,
                    i.changes,
                ]
                for i in items
            ]
        )
    )


def entry_digest(entry: HistoryEntry) -> str:
    """Over every column of the entry but the digest itself."""
    return digest(
        canonical(
            [
                entry.sequence,
                entry.previous_digest,
                entry.stream,
                entry.stream_sequence,
                entry.stream_previous_digest,
                entry.operator_id,
                entry.actor_id,
                entry.actor_name,
                plain(entry.at),
                entry.action,
                entry.reason,
                entry.origin,
                entry.items_digest,
            ]
        )
    )
