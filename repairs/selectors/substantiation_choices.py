"""What the forms of a folder offer to choose from."""

from __future__ import annotations

from typing import Any

from django.db.models import Q, QuerySet

from fleet.models import Aircraft, AuthorisationScope, Person
from repairs.models import ASIDE_STATES, Evaluation, Finding, Repair, Substantiation
from repairs.selectors.choices import signers_at

PREPARERS = (
    AuthorisationScope.ASSESS,
    AuthorisationScope.CHECK,
    AuthorisationScope.APPROVE,
)
GONE = ("removed", "superseded", "cancelled")


def preparers_at(aircraft: Aircraft) -> QuerySet[Person]:
    return signers_at(aircraft.operator, PREPARERS)


def findings_to_cover(aircraft: Aircraft) -> QuerySet[Finding]:
    """Findings of the aircraft that stand, the newest first."""
    rows = Finding.objects.filter(aircraft=aircraft).exclude(state__in=ASIDE_STATES)
    return rows.order_by("-found_on", "-pk")


def repairs_without_folder(aircraft: Aircraft) -> QuerySet[Repair]:
    rows = Repair.objects.filter(aircraft=aircraft, substantiation__isnull=True)
    return rows.exclude(state__in=GONE).order_by("-pk")


def evaluations_to_cite(row: Substantiation) -> QuerySet[Evaluation]:
    """Current evaluations of the findings covered and of the repairs of the folder."""
    covered = row.finding_rows.filter(withdrawn=False).values("finding")
    using: dict[str, Any] = {
        "repair__substantiation__operator": row.operator_id,
        "repair__substantiation__number": row.number,
    }
    rows = Evaluation.objects.filter(Q(finding__in=covered) | Q(**using))
    return rows.filter(replaced_by__isnull=True).order_by("-pk")
