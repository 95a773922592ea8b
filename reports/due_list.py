"""The due list: everything that is not to be passed, overdue first.

Inspection requirements, deferrals, category C replacement limits and stage clocks come
from due points; safe-life parts, limits of validity and open event phases are computed
from their own records. A constant number of queries serves any fleet.
"""

from __future__ import annotations

from collections import Counter as Tally
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from datetime import date, datetime, timedelta

from django.db.models import Q

from fleet.canonical import canonical, digest
from fleet.due import (
    Bucket,
    Counters,
    Due,
    DueState,
    DueStatus,
    Standing,
    due_status,
)
from fleet.models import Aircraft, PartInstallation, Policy, SafeLifePart, User
from fleet.selectors.counters import AircraftStanding, aircraft_standings
from fleet.selectors.known import changed_after
from fleet.selectors.parts import GONE, PartLife, part_lives
from fleet.selectors.policies import policy_words
from fleet.selectors.validity import validity_of
from repairs.models import DueKind, DuePoint, EventPhase
from repairs.selectors.due_items import (
    Item,
    due_of,
    phase_due,
    phase_item,
    point_item,
    points_with_words,
)
from repairs.selectors.requirements import Unaccounted, unaccounted_in
from reports.due_rows import DueRow, export_row, sort_key

BUCKETS = (Bucket.OVERDUE, Bucket.TO_30, Bucket.TO_60, Bucket.TO_90, Bucket.LATER)
SHORT = dict(
    zip(BUCKETS, ("overdue", "to 30 d", "to 60 d", "to 90 d", "later"), strict=True)
)
FIXED = BUCKETS[:4]
RETURN_TO_SERVICE = "{state}: due before return to service"
FORECAST = (
    "forecast from the last 90 days' usage without parked days; the second date uses "
    "the higher of the 30-day and 365-day rates"
)


@dataclass(frozen=True)
class DueQuery:
    """What the list is asked: kept in the address of the page."""

    as_of: date
    within_days: int = 90
    known_at: datetime | None = None
    registration: str = ""
    kind: str = ""
    zone: str = ""


@dataclass(frozen=True)
class DueList:
    query: DueQuery
    rows: tuple[DueRow, ...]
    fleet: tuple[AircraftStanding, ...]
    policies: tuple[str, ...]
    unaccounted: tuple[Unaccounted, ...] = ()

    @property
    def data_current_to(self) -> date | None:
        """The earliest day to which the data of any aircraft shown are current."""
        days = [x.current_to for x in self.fleet if x.current_to is not None]
        return min(days, default=None)

    @property
    def groups(self) -> list[tuple[str, list[DueRow]]]:
        """Rows by bucket, in order, without empty buckets."""
        return [
            (bucket.value, rows)
            for bucket in Bucket
            if (rows := [row for row in self.rows if row.bucket is bucket])
        ]

    @property
    def tally(self) -> dict[Bucket, int]:
        counts = Tally(row.bucket for row in self.rows)
        return {bucket: counts[bucket] for bucket in BUCKETS}

    @property
    def counts(self) -> list[tuple[str, int]]:
        """The tally in the words of the page, without a bucket beyond the horizon."""
        counted = self.tally
        return [
            (words, counted[x])
            for x, words in SHORT.items()
            if counted[x] or x in FIXED
        ]

    @property
    def behind(self) -> list[AircraftStanding]:
        """Aircraft whose data end before the day that precedes the list's date."""
        eve = self.query.as_of - timedelta(days=1)
        return [x for x in self.fleet if x.current_to is None or x.current_to < eve]

    @property
    def digest(self) -> str:
        """SHA-256 of the rows as exported: two prints with one digest say the same."""
        return digest(canonical([export_row(row) for row in self.rows]))


def due_list(query: DueQuery, *, user: User | None = None) -> DueList:
    """Everything due or overdue within the horizon; None is every operator's."""
    fleet = _fleet(query, user)
    standings = aircraft_standings(fleet, as_of=query.as_of, known_at=query.known_at)
    lives = _lives(query, user, standings)
    rows = [
        *_point_rows(query, standings, lives),
        *(_life_row(life, query) for life in lives.values()),
        *_validity_rows(query, standings),
        *_phase_rows(query, standings),
    ]
    shown = [row for row in rows if _wanted(row, query)]
    return DueList(
        query,
        tuple(sorted(shown, key=sort_key)),
        tuple(standings.values()),
        _policies(fleet, query.as_of),
        tuple(unaccounted_in(fleet, as_of=query.as_of)),
    )


def _wanted(row: DueRow, query: DueQuery) -> bool:
    return (
        row.state is not DueState.NOT_DUE
        and query.kind in ("", row.item.kind)
        and row.item.zone.startswith(query.zone)
        and query.registration.upper() in ("", row.mark.upper())
    )


def _fleet(query: DueQuery, user: User | None) -> list[Aircraft]:
    """Aircraft that are here on the date; what has left is its next operator's."""
    rows = Aircraft.objects.filter(
        Q(data_to__isnull=True) | Q(data_to__gte=query.as_of),
        data_from__lte=query.as_of,
    )
    if user is not None and not user.sees_all_operators:
        rows = rows.filter(operator__in=user.operator_ids())
    if query.known_at is not None:
        rows = rows.filter(entered_at__lte=query.known_at)
    if query.registration:
        rows = rows.filter(registration__iexact=query.registration)
    return list(rows.select_related("operator", "variant"))


def _lives(
    query: DueQuery, user: User | None, standings: Mapping[int, AircraftStanding]
) -> dict[int, PartLife]:
    """Life of every serial on the aircraft shown, and of those in store."""
    parts = SafeLifePart.objects.exclude(state__in=GONE).select_related("part_number")
    if user is not None:
        parts = parts.visible_to(user)
    if query.registration:
        there = Q(installations__removed_on__isnull=True)
        there |= Q(installations__removed_on__gt=query.as_of)
        parts = parts.filter(there, installations__aircraft__in=standings).distinct()
    if query.known_at is not None:
        parts = parts.filter(entered_at__lte=query.known_at)
    lives = part_lives(
        parts,
        as_of=query.as_of,
        known_at=query.known_at,
        standings=standings,
        removed_later=changed_after(
            PartInstallation, column="removed_on", instant=query.known_at
        ),
    )
    return {
        life.part.pk: life
        for life in lives
        if (life.carrier.aircraft.pk in standings if life.carrier else True)
    }


def _point_rows(
    query: DueQuery,
    standings: Mapping[int, AircraftStanding],
    lives: Mapping[int, PartLife],
) -> Iterable[DueRow]:
    closed_later = changed_after(DuePoint, column="closed_on", instant=query.known_at)
    points = DuePoint.objects.filter(
        Q(closed_on__isnull=True)
        | Q(closed_on__gt=query.as_of)
        | Q(pk__in=closed_later),
        Q(aircraft__in=standings) | Q(part__in=lives),
        opened_on__lte=query.as_of,
    ).exclude(kind__in=(DueKind.LIFE, DueKind.VALIDITY, DueKind.PHASE))
    if query.known_at is not None:
        points = points.filter(entered_at__lte=query.known_at)
    for point in points_with_words(points):
        item, due = point_item(point), due_of(point)
        if point.part is not None:
            yield _part_row(item, due, lives[point.part.pk], query)
        elif point.aircraft is not None:
            yield _aircraft_row(item, due, standings[point.aircraft.pk], query)


def _aircraft_row(
    item: Item, due: Due, standing: AircraftStanding, query: DueQuery
) -> DueRow:
    notes = [standing.hours_note] if due.at.minutes is not None else []
    if standing.idle:
        notes.append(RETURN_TO_SERVICE.format(state=standing.state.replace("_", " ")))
    return DueRow(
        item,
        due,
        _status(due, standing.standing, query),
        aircraft=standing.aircraft,
        current_to=standing.current_to,
        notes=tuple(notes),
    )


def _part_row(item: Item, due: Due, life: PartLife, query: DueQuery) -> DueRow:
    return DueRow(
        item,
        due,
        _status(due, life.standing, query),
        aircraft=life.carrier.aircraft if life.carrier else None,
        part=life.part,
        current_to=life.standing.current_to,
        notes=life.notes,
    )


def _status(due: Due, standing: Standing, query: DueQuery) -> DueStatus:
    return due_status(due, standing, as_of=query.as_of, within_days=query.within_days)


def _life_row(life: PartLife, query: DueQuery) -> DueRow:
    part, current = life.part, life.current
    where = f" {current.installation.position}," if current else ","
    limits = ", ".join(line.limit.entered for line in life.lines)
    item = Item(
        kind=DueKind.LIFE,
        item=f"{part.part_number.title}{where} {part}",
        action="replace",
        basis=f"life limit {limits}" if limits else "life limit",
        address=("part", part.pk),
    )
    return _part_row(item, life.due, life, query)


def _validity_rows(
    query: DueQuery, standings: Mapping[int, AircraftStanding]
) -> Iterable[DueRow]:
    for standing in standings.values():
        limit = validity_of(standing)
        if not limit.recorded:
            continue
        item = Item(
            kind=DueKind.VALIDITY,
            item=f"Limit of validity of {standing.aircraft.variant}",
            action="no operation beyond it",
            basis=limit.source,
            address=("aircraft", standing.aircraft.pk),
        )
        due = Due(Counters(minutes=limit.minutes, cycles=limit.cycles))
        yield _aircraft_row(item, due, standing, query)


def _phase_rows(
    query: DueQuery, standings: Mapping[int, AircraftStanding]
) -> Iterable[DueRow]:
    done_later = changed_after(EventPhase, column="done_on", instant=query.known_at)
    phases = EventPhase.objects.filter(
        Q(done_on__isnull=True) | Q(done_on__gt=query.as_of) | Q(pk__in=done_later),
        required=True,
        event__aircraft__in=standings,
        event__happened_on__lte=query.as_of,
    )
    if query.known_at is not None:
        phases = phases.filter(event__entered_at__lte=query.known_at)
    for phase in phases.select_related("event"):
        standing = standings[phase.event.aircraft_id]
        yield _aircraft_row(phase_item(phase), phase_due(phase), standing, query)


def _policies(fleet: Sequence[Aircraft], as_of: date) -> tuple[str, ...]:
    """The policy rows in force for these operators: clocks, caps and conventions."""
    operators = {item.operator_id: item.operator for item in fleet}
    rows = Policy.objects.filter(
        Q(operator__in=operators)
        | Q(operator=None, regime__in={x.regime for x in operators.values()}),
        Q(effective_to__isnull=True) | Q(effective_to__gte=as_of),
        effective_from__lte=as_of,
        replaced_by__isnull=True,
    )
    return tuple(map(policy_words, rows))
