"""Required inspections of a repair: accepted, rejected, and rejections answered."""

from __future__ import annotations

from django.db.models import QuerySet

from fleet.models import AuthorisationScope
from repairs.models import Approval, Meaning, Repair

INSPECTION_LINE = (AuthorisationScope.INSPECT, AuthorisationScope.NDT)


def inspections_of(repair: Repair) -> QuerySet[Approval]:
    """What inspectors signed on a repair, the oldest first."""
    return repair.approvals.filter(
        meaning__in=(Meaning.INSPECTED, Meaning.REJECTED),
        authorisation__scope__in=INSPECTION_LINE,
    ).select_related("overrules", "authorisation", "signer_person")


def rejections_open(repair: Repair) -> list[Approval]:
    """Rejections by an inspector that no other inspection has answered; a query."""
    rows = inspections_of(repair).filter(meaning=Meaning.REJECTED)
    return list(rows.filter(overruled_by__isnull=True))
