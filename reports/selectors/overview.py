"""The morning page: what stands open this day, the reader's own work first."""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterable
from dataclasses import dataclass

from django.db.models import Count, Q

from fleet.models import HistoryEntry, PartState, Role, SafeLifePart, User
from fleet.selectors.aircraft import Seen, aircraft_visible, fleet_seen, is_own
from fleet.selectors.entries import names_kept
from fleet.selectors.part_lines import PartLine, nearest_first
from fleet.selectors.parts import part_lives
from repairs.models import Evaluation, Finding, FindingState
from repairs.selectors.evaluation_list import (
    NO_LONGER,
    STANDINGS,
    UNCHECKED,
    evaluation_counts,
    evaluations_open,
)
from reports.due_list import DueQuery, due_list
from reports.selectors.due_shown import DueShown

SHOWN = 8
NEWEST = 5
STATES = (
    FindingState.REPORTED,
    FindingState.ASSESSED,
    FindingState.TO_RECTIFY,
    FindingState.DEFERRED,
    FindingState.RECTIFIED,
    FindingState.ACCEPTED,
)

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
class StandingCount:
    standing: str
    words: str
    count: int


@dataclass(frozen=True)
class EvaluationTally:
    """Calculations nobody has approved by standing, and the newest with numbers."""

    counts: list[StandingCount]
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
    counts = evaluation_counts(user)
    return EvaluationTally(
        [
            StandingCount(standing, words, counts[standing])
            for standing, words in STANDINGS
        ],
        list(evaluations_open(user, UNCHECKED)[:NEWEST]),
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
    rows = HistoryEntry.objects.visible_to(user).order_by("-sequence")[:SHOWN]
    return names_kept(user, rows)
