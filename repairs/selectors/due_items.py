"""What a due point is about, in words: the item, what is to be done, where to look."""

from __future__ import annotations

from dataclasses import dataclass, field
from datetime import date

from django.db.models import QuerySet

from fleet.due import Combine, Counters, Due
from fleet.selectors.life_limits import columns
from repairs.models import (
    Disposition,
    DueKind,
    DuePoint,
    EventPhase,
    Finding,
    InspectionRequirement,
    Repair,
    RequirementState,
    Substantiation,
    SurveyItem,
)

UNVERIFIED = "unverified: awaits second keying"
INTERIM = "interim: from an unapproved calculation"
UNANSWERED = "awaits an answer"
NEXT_STAGE = "approval data of the next stage"
CLAIMED = "terminating action awaits verification"


@dataclass(frozen=True)
class Item:
    """Words beside the numbers of one due item."""

    kind: str
    item: str
    action: str
    basis: str
    address: tuple[str, int]
    source_class: str = ""
    zone: str = ""
    last_on: date | None = None
    last_at: Counters = field(default_factory=Counters)
    marks: tuple[str, ...] = ()


def due_of(point: DuePoint) -> Due:
    """A stored due point as the value that `fleet.due` compares."""
    return Due(
        columns(point, "due"),
        point.due_on,
        Combine(point.combine),
        point.cannot_compute,
    )


def points_with_words(points: QuerySet[DuePoint]) -> QuerySet[DuePoint]:
    """The points with all that `point_item` reads; five queries at most."""
    return points.select_related(
        "aircraft",
        "part__part_number",
        "after",
        "subject__requirement__repair__zone",
        "subject__requirement__finding__zone",
        "subject__requirement__source_document",
        "repair__zone",
        "disposition",
        "survey_item__survey",
        "survey_item__zone",
        "substantiation",
    ).prefetch_related(
        "disposition__finding_rows__finding__zone",
        "substantiation__finding_rows__finding__zone",
    )


def point_item(point: DuePoint) -> Item:
    if point.subject is not None:
        return _requirement(point, point.subject.requirement)
    if point.disposition is not None:
        return _deferral(point, point.disposition)
    if point.survey_item is not None:
        return _survey(point, point.survey_item)
    if point.substantiation is not None:
        return _folder(point, point.substantiation)
    assert point.repair is not None
    return _repair(point, point.repair)


def phase_item(phase: EventPhase) -> Item:
    event = phase.event
    return Item(
        kind=DueKind.PHASE,
        item=f"{event.number} {event.get_kind_display()}, {event.happened_on}",
        action=phase.title,
        basis="before further flight",
        address=("aircraft", event.aircraft_id),
    )


def phase_due(phase: EventPhase) -> Due:
    """Due at the event's own counters; on its day when they are not recorded."""
    at = columns(phase.event, "at")
    if at == Counters():
        return Due(on=phase.event.happened_on)
    return Due(at)


def _requirement(point: DuePoint, requirement: InspectionRequirement) -> Item:
    origin = requirement.repair or requirement.finding
    document = requirement.source_document
    words = [requirement.number]
    words += [str(origin)] if origin else []
    words += [str(document)] if document and not origin else []
    action = requirement.task or requirement.get_method_display()
    after = point.after
    return Item(
        kind=point.kind,
        item=f"{' '.join(words)} {requirement.title}",
        action="replace" if point.kind == DueKind.REPLACE else action,
        basis=point.basis,
        address=("requirement", requirement.pk),
        source_class=requirement.get_requirement_class_display(),
        zone=_zone(origin),
        last_on=after.done_on if after else None,
        last_at=columns(after, "at") if after else Counters(),
        marks=_marks(point, requirement),
    )


def _marks(point: DuePoint, requirement: InspectionRequirement) -> tuple[str, ...]:
    assert point.subject is not None
    marks = {
        UNVERIFIED: not requirement.verified,
        INTERIM: requirement.interim,
        UNANSWERED: point.subject.applies == "unanswered",
        CLAIMED: point.subject.state == RequirementState.TERMINATION_UNVERIFIED,
    }
    return tuple(mark for mark, holds in marks.items() if holds)


def _deferral(point: DuePoint, disposition: Disposition) -> Item:
    findings = [row.finding for row in disposition.finding_rows.all()]
    told = ", ".join(f"{x.number} {_damage(x)}" for x in findings)
    return Item(
        kind=point.kind,
        item=f"{disposition.number} deferral of {told}" if told else disposition.number,
        action="rectify",
        basis=point.basis,
        address=("disposition", disposition.pk),
        zone=_zone(findings[0]) if findings else "",
    )


def _damage(finding: Finding) -> str:
    where = finding.place_text or finding.place_entered
    return f"{finding.get_damage_type_display()}, {where}"


def _folder(point: DuePoint, folder: Substantiation) -> Item:
    """Damage that stays unrepaired while its approval is not complete."""
    rows = [row for row in folder.finding_rows.all() if not row.withdrawn]
    findings = [row.finding for row in rows]
    told = ", ".join(f"{x.number} {_damage(x)}" for x in findings)
    return Item(
        kind=point.kind,
        item=f"{folder.number} {folder.title}: {told}",
        action=NEXT_STAGE,
        basis=point.basis,
        address=("substantiation", folder.pk),
        zone=_zone(findings[0]) if findings else "",
    )


def _repair(point: DuePoint, repair: Repair) -> Item:
    clock = point.kind == DueKind.STAGE_CLOCK
    where = repair.place_text or repair.place_entered
    return Item(
        kind=point.kind,
        item=f"{repair.number} {repair.get_kind_display()}, {where}",
        action=NEXT_STAGE if clock else "replace",
        basis=point.basis,
        address=("repair", repair.pk),
        zone=_zone(repair),
    )


def _survey(point: DuePoint, item: SurveyItem) -> Item:
    where = item.place_text or item.place_entered
    return Item(
        kind=point.kind,
        item=f"{item} {item.description}, {where}",
        action="answer what was found and is not recorded",
        basis=point.basis,
        address=("survey", item.survey_id),
        zone=_zone(item),
    )


def _zone(origin: Repair | Finding | SurveyItem | None) -> str:
    return origin.zone.code if origin is not None and origin.zone else ""
