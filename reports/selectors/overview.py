"""The morning page: what stands open this day, the reader's own work first."""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterable
from dataclasses import dataclass

from django.db.models import Count, Exists, OuterRef, Q, QuerySet

from fleet.models import HistoryEntry, PartState, Role, SafeLifePart, User
from fleet.selectors.aircraft import Seen, aircraft_visible, fleet_seen, is_own
from fleet.selectors.part_lines import PartLine, nearest_first
from fleet.selectors.parts import part_lives
from repairs.models import (
    Approval,
    Evaluation,
    Finding,
    FindingState,
    Meaning,
    Outcome,
)
from reports.due_list import DueQuery, due_list
from reports.selectors.due_shown import DueShown

SHOWN = 8
STATES = (
    FindingState.REPORTED,
    FindingState.ASSESSED,
    FindingState.TO_RECTIFY,
    FindingState.DEFERRED,
    FindingState.RECTIFIED,
    FindingState.ACCEPTED,
)
NO_LONGER = (FindingState.CLOSED, FindingState.DUPLICATE, FindingState.VOIDED)

# Panels in the order in which each role looks at them.
ORDER: dict[str, tuple[str, ...]] = {
    Role.RECORDER: ("findings", "aircraft", "due"),
    Role.ENGINEER: ("findings", "evaluations", "due"),
    Role.CERTIFIER: ("findings", "due", "aircraft"),
    Role.SIGNATORY: ("evaluations", "findings", "due"),
    Role.PLANNER: ("due", "aircraft", "parts"),
    Role.MANAGER: ("due", "findings", "parts"),
    Role.AUDITOR: ("entries", "due", "parts"),
    Role.ADMINISTRATOR: ("aircraft", "entries", "due"),
}
PANELS = ("due", "findings", "evaluations", "parts", "aircraft", "entries")


@dataclass(frozen=True)
class StateCount:
    state: str
    count: int

    @property
    def words(self) -> str:
        return str(FindingState(self.state).label)


@dataclass(frozen=True)
class FindingTally:
    """Open findings by state, and those not yet found on the structure."""

    states: list[StateCount]
    unplaced: int


@dataclass(frozen=True)
class EvaluationTally:
    """Calculations nobody has approved, the newest of them, and what has none."""

    unchecked: int
    checked: int
    needs_engineer: int
    newest: list[Evaluation]


def panels_for(roles: Iterable[str]) -> list[str]:
    """Every panel once, the roles' own first."""
    own = [name for role in sorted(roles) for name in ORDER.get(role, ())]
    return list(dict.fromkeys([*own, *PANELS]))


def finding_tally(user: User) -> FindingTally:
    """One query."""
    columns = {state.value: Count("pk", filter=Q(state=state)) for state in STATES}
    unplaced = Q(section__isnull=True) & ~Q(state__in=NO_LONGER)
    found = Finding.objects.filter(
        pk__in=Finding.objects.visible_to(user).values("pk")
    ).aggregate(**columns, unplaced=Count("pk", filter=unplaced))
    return FindingTally(
        [StateCount(state.value, found[state.value]) for state in STATES],
        found["unplaced"],
    )


def evaluation_tally(user: User) -> EvaluationTally:
    """Of damage and repairs that still stand; two queries."""
    rows = _evaluations(user)
    computed = Q(outcome=Outcome.COMPUTED)
    found = rows.aggregate(
        unchecked=Count("pk", filter=computed & Q(checked=False)),
        checked_=Count("pk", filter=computed & Q(checked=True)),
        needs_engineer=Count("pk", filter=~computed),
    )
    newest = rows.select_related("finding__aircraft", "repair__aircraft")
    return EvaluationTally(
        found["unchecked"],
        found["checked_"],
        found["needs_engineer"],
        list(newest.order_by("-entered_at", "-pk")[:SHOWN]),
    )


def _evaluations(user: User) -> QuerySet[Evaluation]:
    """The latest of each subject that no approval points at."""

    def signed(meaning: Meaning) -> Exists:
        return Exists(
            Approval.objects.filter(evaluation=OuterRef("pk"), meaning=meaning)
        )

    return (
        Evaluation.objects.filter(
            pk__in=Evaluation.objects.visible_to(user).values("pk"),
            replaced_by__isnull=True,
        )
        .exclude(finding__state__in=NO_LONGER)
        .annotate(checked=signed(Meaning.CHECKED), approved=signed(Meaning.APPROVED))
        .filter(approved=False)
    )


def due_today(user: User, *, as_of: dt.date) -> DueShown:
    return DueShown.of(due_list(DueQuery(as_of), user=user), SHOWN)


def parts_nearest(user: User, *, as_of: dt.date) -> list[PartLine]:
    """Installed parts nearest to a life limit; what cannot be computed leads."""
    parts = SafeLifePart.objects.filter(
        pk__in=SafeLifePart.objects.visible_to(user).values("pk"),
        state=PartState.INSTALLED,
    ).select_related("part_number")
    return nearest_first(part_lives(parts, as_of=as_of))[:SHOWN]


def aircraft_standing_today(user: User, *, as_of: dt.date) -> list[Seen]:
    """Present aircraft, those with the oldest data first."""
    rows = [
        item
        for item in aircraft_visible(user)
        if is_own(user, item) and item.data_to is None
    ]
    return sorted(
        fleet_seen(rows, as_of=as_of),
        key=lambda seen: (-seen.days_behind, seen.aircraft.registration),
    )


def entries_newest(user: User) -> list[HistoryEntry]:
    return list(HistoryEntry.objects.visible_to(user).order_by("-sequence")[:SHOWN])
