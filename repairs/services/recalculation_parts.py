"""Which worker holds which share of a recalculation, and until when.

A hold is no record: a worker that dies loses it, and the items say what was settled.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterable

from django.db.models import Q

from repairs.models import Recalculation, RecalculationPart

HOLD = dt.timedelta(minutes=2)
"""How long a worker that says nothing keeps its share."""


def parts_make(run: Recalculation, aircraft: Iterable[int]) -> None:
    """One share for each aircraft, free for whoever comes first."""
    RecalculationPart.objects.bulk_create(
        RecalculationPart(run=run, aircraft_id=key) for key in aircraft
    )


def part_take(
    run: Recalculation, holder: str, at: dt.datetime
) -> RecalculationPart | None:
    """One share that nobody holds, held by this worker from now."""
    free = Q(held_until__isnull=True) | Q(held_until__lt=at)
    for part in RecalculationPart.objects.filter(free, run=run, done=False):
        mine = RecalculationPart.objects.filter(free, pk=part.pk, done=False).update(
            holder=holder, held_until=at + HOLD
        )
        if mine:
            part.holder = holder
            return part
    return None


def part_renewed(part: RecalculationPart, at: dt.datetime) -> bool:
    """Hold a share for longer; false where another worker has it by now."""
    held = RecalculationPart.objects.filter(pk=part.pk, holder=part.holder, done=False)
    return bool(held.update(held_until=at + HOLD))


def part_released(part: RecalculationPart, *, done: bool) -> None:
    """Give a share back that this worker still holds."""
    held = RecalculationPart.objects.filter(pk=part.pk, holder=part.holder)
    held.update(done=done, holder="", held_until=None)
