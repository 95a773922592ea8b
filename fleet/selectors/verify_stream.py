"""One aircraft's history alone: its own chain, and the records that hang on it."""

from __future__ import annotations

from collections.abc import Iterator
from functools import cache

from django.db import models

from fleet.digests import recorded_models
from fleet.models import Aircraft, HistoryItem
from fleet.selectors.verify import chain_problems
from fleet.selectors.verify_rows import RUN, Read, some_rows_problems
from fleet.snapshot import snapshot

DEPTH = 3
"""Keys followed to the aircraft: from a value by its measurement and its finding."""
AIRCRAFT = "aircraft:"


def stream_problems(stream: str, read: Read | None = None) -> Iterator[str]:
    """Disagreements in one stream's chain and in the rows that it tells of; for an
    aircraft also rows of it that no entry tells of."""
    read = read or Read()
    with snapshot():
        yield from chain_problems(read, stream)
        hanging = stream.removeprefix(AIRCRAFT) if stream.startswith(AIRCRAFT) else ""
        for model in recorded_models():
            keys = _keys_told(model._meta.db_table, stream)
            if hanging:
                keys |= _keys_hanging(model, int(hanging))
            yield from some_rows_problems(model, keys, read)


def _keys_told(table: str, stream: str) -> set[int]:
    items = HistoryItem.objects.filter(table=table, entry__stream=stream)
    keys: set[int] = set()
    for kind, first, last in items.values_list("kind", "first_pk", "last_pk"):
        keys |= set(range(first, last + 1)) if kind == RUN else {first}
    return keys


def _keys_hanging(model: type[models.Model], aircraft: int) -> set[int]:
    """Rows that reach the aircraft by their own keys."""
    rows = model._base_manager
    return {
        key
        for path in paths_to_aircraft(model)
        for key in rows.filter(**{path: aircraft}).values_list("pk", flat=True)
    }


@cache
def paths_to_aircraft(model: type[models.Model], depth: int = DEPTH) -> tuple[str, ...]:
    """Every way from the table to its aircraft, as look-ups."""
    if model is Aircraft:
        return ("pk",)
    paths = []
    for field in model._meta.concrete_fields:
        target = field.related_model
        if not isinstance(target, type) or target is model:
            continue
        if target is Aircraft:
            paths.append(field.name)
        elif depth > 1:
            paths += [
                f"{field.name}__{path}" for path in paths_to_aircraft(target, depth - 1)
            ]
    return tuple(paths)
