"""What had not been entered yet at an instant: rows that changed only later."""

from __future__ import annotations

from datetime import datetime

from django.db import models

from fleet.models import HistoryItem


def changed_after(
    model: type[models.Model], *, column: str, instant: datetime | None
) -> frozenset[int]:
    """Keys of rows whose column was set after the instant; none when it is now."""
    if instant is None:
        return frozenset()
    items = HistoryItem.objects.filter(
        table=model._meta.db_table,
        kind="changed",
        entry__at__gt=instant,
        changes__contains=f'"{column}":',
    )
    return frozenset(items.values_list("first_pk", flat=True))
