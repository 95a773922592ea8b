"""Required inspections of a repair: accepted, rejected, and rejections answered."""

from __future__ import annotations

from django.db.models import QuerySet

from fleet.models import AuthorisationScope
from repairs.models import Approval, Meaning, Repair, RepairStep

INSPECTION_LINE = (AuthorisationScope.INSPECT, AuthorisationScope.NDT)


def inspections_of(repair: Repair) -> QuerySet[Approval]:
    """What inspectors signed on a repair, the oldest first."""
    return repair.approvals.filter(
        meaning__in=(Meaning.INSPECTED, Meaning.REJECTED),
        authorisation__scope__in=INSPECTION_LINE,
    ).select_related("overrules", "authorisation", "signer_person")


def open_rejections(repair: Repair) -> QuerySet[Approval]:
    """Rejections by an inspector that no other inspection has answered."""
    rows = inspections_of(repair).filter(meaning=Meaning.REJECTED)
    return rows.filter(overruled_by__isnull=True)


def rejections_open(repair: Repair) -> list[Approval]:
    """The same, read; one query."""
    return list(open_rejections(repair))


def steps_open(repair: Repair) -> QuerySet[RepairStep]:
    """Steps still to be done."""
    return repair.steps.filter(done_on__isnull=True)
