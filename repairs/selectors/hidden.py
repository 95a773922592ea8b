"""Repairs that cover damage not shown to be removed."""

from __future__ import annotations

from django.db.models import Exists, OuterRef, QuerySet

from repairs.models import Repair, RepairFinding, RepairState


def hides() -> Exists:
    """Whether a repair covers damage not shown to be removed."""
    covered = RepairFinding.objects.filter(repair=OuterRef("pk"), covers=True)
    return Exists(covered.exclude(damage_removed="yes"))


def with_hiding(rows: QuerySet[Repair]) -> QuerySet[Repair]:
    """Rows that say whether they hide damage not shown to be removed."""
    return rows.annotate(hides_damage=hides())


def hiding_damage(rows: QuerySet[Repair]) -> QuerySet[Repair]:
    """Repairs on the aircraft that cover damage not shown to be removed."""
    return rows.filter(hides(), state=RepairState.EMBODIED)
