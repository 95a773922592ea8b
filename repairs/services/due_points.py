"""Open and close due points: every "not later than" of an aircraft or a serial.

A due point is inserted, closed once and never moved. Services that make a deferral, a
repair or a requirement call these helpers inside their own history entry.
"""

from __future__ import annotations

from collections.abc import Mapping
from datetime import date
from typing import Any

from fleet.due import Counters, Due
from fleet.services.history import Writing
from repairs.models import (
    Accomplishment,
    Disposition,
    DispositionKind,
    DueKind,
    DuePoint,
    Event,
    Repair,
    RequirementSubject,
    Substantiation,
    SurveyItem,
)

Origin = RequirementSubject | Disposition | Repair | Event | Substantiation | SurveyItem

ORIGIN_COLUMN: Mapping[type[Any], str] = {
    RequirementSubject: "subject",
    Disposition: "disposition",
    Repair: "repair",
    Event: "event",
    Substantiation: "substantiation",
    SurveyItem: "survey_item",
}
NO_LIMIT = "no {what} is recorded for {number}"


def due_point_open(
    w: Writing,
    *,
    origin: Origin,
    kind: DueKind,
    due: Due,
    opened_on: date,
    basis: str,
    group: int = 1,
    after: Accomplishment | None = None,
    replaces: DuePoint | None = None,
) -> DuePoint:
    """Insert one due point. It is on the aircraft of its origin, or on the serial when
    a requirement travels with that serial."""
    point = DuePoint(
        aircraft=origin.aircraft,
        part=getattr(origin, "part", None),
        kind=kind,
        group=group,
        combine=due.combine.value,
        due_minutes=due.at.minutes,
        due_cycles=due.at.cycles,
        due_landings=due.at.landings,
        due_pressurisations=due.at.pressurisations,
        due_on=due.on,
        cannot_compute=due.cannot_compute,
        after=after,
        replaces=replaces,
        basis=basis,
        opened_on=opened_on,
    )
    setattr(point, ORIGIN_COLUMN[type(origin)], origin)
    w.create(point)
    return point


def due_point_close(
    w: Writing,
    point: DuePoint,
    *,
    on: date,
    reason: str,
    by: Accomplishment | None = None,
) -> None:
    w.change(
        point,
        closed_on=on,
        closed_reason=reason,
        closed_by_id=by.pk if by else None,
    )


def due_points_close(
    w: Writing,
    *,
    origin: Origin,
    on: date,
    reason: str,
    by: Accomplishment | None = None,
    kinds: tuple[DueKind, ...] = (),
) -> list[DuePoint]:
    """Close what is open of one origin (of some kinds only, if any are named)."""
    column = ORIGIN_COLUMN[type(origin)]
    points = DuePoint.objects.filter(**{column: origin}, closed_on__isnull=True)
    if kinds:
        points = points.filter(kind__in=kinds)
    closed = list(points)
    for point in closed:
        due_point_close(w, point, on=on, reason=reason, by=by)
    return closed


def deferral_due_open(
    w: Writing,
    *,
    disposition: Disposition,
    extends: DuePoint | None = None,
    history: str = "",
) -> DuePoint:
    """The limit of a deferral; `history` tells the first date and how often."""
    deferred = disposition.kind == DispositionKind.DEFER
    word = "deferred" if deferred else "accepted to a limit"
    first = history or f"found {disposition.found_on}"
    due = Due(
        Counters(
            disposition.limit_minutes,
            disposition.limit_cycles,
            disposition.limit_landings,
        ),
        disposition.limit_on,
    )
    return due_point_open(
        w,
        origin=disposition,
        kind=DueKind.DEFERRAL,
        due=due,
        opened_on=disposition.decided_on,
        basis=f"{word} by {disposition.number}; {first}",
        replaces=extends,
    )


def replacement_due_open(w: Writing, *, repair: Repair, opened_on: date) -> DuePoint:
    """The replacement limit of a category C repair; without one it counts as due."""
    due = Due(
        Counters(repair.replacement_limit_minutes, repair.replacement_limit_cycles),
        repair.replacement_limit_on,
    )
    if due == Due():
        missing = NO_LIMIT.format(what="replacement limit", number=repair.number)
        due = Due(cannot_compute=missing)
    return due_point_open(
        w,
        origin=repair,
        kind=DueKind.REPLACE,
        due=due,
        opened_on=opened_on,
        basis="category C, time-limited: replace by this limit",
    )
