"""Calculations nobody has approved, of damage and repairs that still stand."""

from __future__ import annotations

from django.db.models import Count, Q, QuerySet

from fleet.models import User
from repairs.models import Evaluation, FindingState, Outcome
from repairs.selectors.evaluations import with_state

NO_LONGER = (FindingState.CLOSED, FindingState.DUPLICATE, FindingState.VOIDED)
UNDECIDED = (FindingState.REPORTED, FindingState.ASSESSED, FindingState.TO_RECTIFY)

UNCHECKED, CHECKED, ENGINEER = "unchecked", "checked", "engineer"
STANDINGS = (
    (UNCHECKED, "unchecked"),
    (CHECKED, "checked, to approve"),
    (ENGINEER, "need an engineer"),
)
_COMPUTED = Q(outcome=Outcome.COMPUTED)
_WHEN = {
    UNCHECKED: _COMPUTED & (Q(is_checked=False) | Q(is_rejected=True)),
    CHECKED: _COMPUTED & Q(is_checked=True, is_rejected=False),
    # No method covers it, or a number is missing, and nobody has decided yet.
    ENGINEER: ~_COMPUTED & Q(finding__state__in=UNDECIDED),
}


def evaluations_open(user: User, standing: str = "") -> QuerySet[Evaluation]:
    """The current ones of each use that still want a person, newest first."""
    mine = Evaluation.objects.visible_to(user).values("pk")
    rows = with_state(Evaluation.objects.filter(pk__in=mine, replaced_by__isnull=True))
    rows = rows.filter(Q(is_approved=False) | Q(is_rejected=True)).exclude(
        finding__state__in=NO_LONGER
    )
    wanted = [_WHEN[standing]] if standing else list(_WHEN.values())
    of_any = wanted[0]
    for more in wanted[1:]:
        of_any |= more
    return (
        rows.filter(of_any)
        .select_related("finding__aircraft", "repair__aircraft")
        .order_by("-entered_at", "-pk")
    )


def evaluation_counts(user: User) -> dict[str, int]:
    """How many there are in each standing; one query."""
    columns = {
        f"n_{standing}": Count("pk", filter=_WHEN[standing])
        for standing, _ in STANDINGS
    }
    found = evaluations_open(user).aggregate(**columns)
    return {standing: found[f"n_{standing}"] for standing, _ in STANDINGS}
