"""Inspection requirements as people read them: what, where, how, when, done by whom."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from datetime import date
from typing import Any

from django.db.models import Prefetch, Q, QuerySet

from fleet.amounts import amount_write, counters_write
from fleet.due import (
    COUNTED,
    Counter,
    DueStatus,
    Remaining,
    Standing,
    due_status,
)
from fleet.models import Aircraft, User
from fleet.selectors.counters import aircraft_standings
from fleet.selectors.life_limits import columns
from fleet.selectors.parts import part_lives
from repairs.models import (
    Accomplishment,
    DuePoint,
    Evaluation,
    Finding,
    InspectionRequirement,
    RequirementLimit,
    RequirementState,
    RequirementSubject,
)
from repairs.selectors.due_items import (
    CLAIMED,
    INTERIM,
    UNANSWERED,
    UNVERIFIED,
    due_of,
)

FLEET_CLASSES = ("directive", "limitation", "corrosion", "programme")


@dataclass(frozen=True)
class PointLine:
    """One open due point with its state on the day, and a sentence that says it."""

    point: DuePoint
    status: DueStatus
    sentence: str


@dataclass(frozen=True)
class SubjectLine:
    """One aircraft or serial of a requirement."""

    subject: RequirementSubject
    points: tuple[PointLine, ...]
    done: tuple[Accomplishment, ...]

    @property
    def last(self) -> str:
        """When it was done last, in words; empty when never."""
        if not self.done:
            return ""
        row = self.done[-1]
        at = counters_write(columns(row, "at"))
        return f"{row.done_on}, {at}" if at else str(row.done_on)

    @property
    def open(self) -> bool:
        """Something may still be recorded on it."""
        in_force = (RequirementState.EFFECTIVE, RequirementState.TERMINATION_UNVERIFIED)
        return self.subject.applies != "no" and self.subject.state in in_force

    @property
    def claimed(self) -> bool:
        return bool(self.subject.state == RequirementState.TERMINATION_UNVERIFIED)


@dataclass(frozen=True)
class Coverage:
    """Whether every aircraft it may apply to has answered."""

    done: int
    open: int
    not_applicable: int
    unanswered: int
    unaccounted: tuple[Aircraft, ...]

    @property
    def complete(self) -> bool:
        return not self.unanswered and not self.unaccounted


def requirements_shown(
    user: User, *, text: str = "", state: str = ""
) -> QuerySet[InspectionRequirement]:
    """Requirements of the user's operators with what a list shows."""
    rows = InspectionRequirement.objects.visible_to(user).select_related(
        "finding", "repair", "event", "disposition", "source_document"
    )
    if state:
        rows = rows.filter(state=state)
    if text:
        rows = rows.filter(
            Q(number__iexact=text)
            | Q(title__icontains=text)
            | Q(area__icontains=text)
            | Q(subjects__aircraft__registration__iexact=text)
        ).distinct()
    return rows.prefetch_related("limits", _subjects()).order_by("-number", "-pk")


def requirement_of(user: User) -> QuerySet[InspectionRequirement]:
    """For a page of one: the requirement with all it came from."""
    return InspectionRequirement.objects.visible_to(user).select_related(
        "operator",
        "finding",
        "repair",
        "event",
        "disposition",
        "evaluation",
        "source_document",
        "keyed_by",
    )


def _subjects() -> Prefetch[Any]:
    rows = RequirementSubject.objects.select_related("aircraft", "part__part_number")
    return Prefetch("subjects", rows)


def origin_of(requirement: InspectionRequirement) -> tuple[str, int] | None:
    """Page name and key of the record it came from, if it has a page."""
    for name in ("repair", "finding", "disposition"):
        row = getattr(requirement, name)
        if row is not None:
            return name, row.pk
    return None


def limits_of(requirement: InspectionRequirement) -> list[RequirementLimit]:
    """Threshold, repeat, replace: in the order in which they come due."""
    order = ("threshold", "repeat", "replace")
    return sorted(requirement.limits.all(), key=lambda row: order.index(row.phase))


def marks_of(requirement: InspectionRequirement) -> list[str]:
    """What must be said beside it, in the words of the due list."""
    subjects = list(requirement.subjects.all())
    marks = {
        UNVERIFIED: not requirement.verified and requirement.state == "effective",
        INTERIM: requirement.interim,
        UNANSWERED: any(x.applies == "unanswered" for x in subjects),
        CLAIMED: any(x.state == "termination_unverified" for x in subjects),
    }
    return [mark for mark, holds in marks.items() if holds]


def subject_lines(
    requirement: InspectionRequirement, *, as_of: date
) -> list[SubjectLine]:
    """Every subject with what is due next on it and what was done; few queries."""
    subjects = list(
        requirement.subjects.select_related("aircraft__variant", "part__part_number")
        .prefetch_related(
            Prefetch(
                "due_points",
                DuePoint.objects.filter(closed_on__isnull=True).order_by("group", "pk"),
            ),
            Prefetch(
                "accomplishments",
                Accomplishment.objects.filter(replaced_by__isnull=True)
                .select_related("finding", "done_by")
                .order_by("done_on", "number"),
            ),
        )
        .order_by("aircraft__registration", "part__serial", "pk")
    )
    limits = limits_of(requirement)
    standings = _standings(subjects, as_of)
    return [
        SubjectLine(
            subject,
            tuple(
                _point_line(point, standings[subject.pk], limits, as_of)
                for point in subject.due_points.all()
            ),
            tuple(subject.accomplishments.all()),
        )
        for subject in subjects
    ]


def _standings(
    subjects: Iterable[RequirementSubject], as_of: date
) -> dict[int, Standing]:
    subjects = list(subjects)
    aircraft = [x.aircraft for x in subjects if x.aircraft is not None]
    parts = [x.part for x in subjects if x.part is not None]
    flown = aircraft_standings(aircraft, as_of=as_of)
    lives = {life.part.pk: life.standing for life in part_lives(parts, as_of=as_of)}
    return {
        x.pk: flown[x.aircraft.pk].standing
        if x.aircraft is not None
        else lives[x.part_id or 0]
        for x in subjects
    }


def _point_line(
    point: DuePoint, standing: Standing, limits: list[RequirementLimit], as_of: date
) -> PointLine:
    status = due_status(due_of(point), standing, as_of=as_of)
    return PointLine(point, status, _sentence(point, status, standing, limits))


def _sentence(
    point: DuePoint,
    status: DueStatus,
    standing: Standing,
    limits: list[RequirementLimit],
) -> str:
    """ "Due at 36,340 FC (first 15,000 FC from release): 7,709 FC left, forecast
    2028-05-01. Then every 5,000 FC, about 961 days at this rate." """
    if point.cannot_compute:
        return f"Due now: {point.cannot_compute}."
    glue = " and " if point.combine == "last" else " or "
    due = glue.join(_due_words(line) for line in status.lines)
    left = glue.join(
        amount_write(line.counter, line.remaining) for line in status.lines
    )
    flown = status.limiting is not None and status.limiting.counter in COUNTED
    forecast = f", forecast {status.forecast}" if status.forecast and flown else ""
    text = f"Due {due} ({point.basis}): {left} left{forecast}."
    repeats = [x for x in limits if x.phase == "repeat" and x.group == point.group]
    if repeats and point.kind in ("threshold", "repeat"):
        every = " or ".join(_every(limit, standing) for limit in repeats)
        text += f" Then every {every}."
    return text


def _due_words(line: Remaining) -> str:
    if isinstance(line.due, date):
        return f"on {line.due}"
    return f"at {amount_write(line.counter, line.due)}"


def _every(limit: RequirementLimit, standing: Standing) -> str:
    """An interval with what it means in days on this aircraft: 250 FC typed for 250
    days shows at once."""
    rate = standing.rates.get(Counter(limit.counter))
    if limit.counter not in COUNTED or not rate:
        return str(limit.entered)
    return f"{limit.entered}, about {limit.value // rate:,} days at this rate"


def coverage_of(
    requirement: InspectionRequirement, lines: Iterable[SubjectLine]
) -> Coverage:
    """Applicable = done + open + not applicable, or the page says incomplete. Only what
    concerns a fleet can leave an aircraft unaccounted; one query."""
    lines = list(lines)
    fleet = Aircraft.objects.filter(
        operator=requirement.operator_id, data_to__isnull=True
    ).select_related("variant")
    unaccounted = missing_from(requirement, [x.subject for x in lines], fleet)
    words = [x.subject.applies for x in lines]
    return Coverage(
        done=sum(1 for x in lines if x.done),
        open=sum(1 for x in lines if x.points),
        not_applicable=words.count("no"),
        unanswered=words.count("unanswered"),
        unaccounted=tuple(unaccounted),
    )


def missing_from(
    requirement: InspectionRequirement,
    subjects: Iterable[RequirementSubject],
    fleet: Iterable[Aircraft],
) -> list[Aircraft]:
    """Aircraft of the fleet that a requirement of the whole fleet does not name. What
    came from one record concerns that record's aircraft only."""
    subjects = list(subjects)
    named = {x.aircraft_id for x in subjects}
    types = {x.aircraft.variant.aircraft_type_id for x in subjects if x.aircraft}
    names = ("finding", "repair", "disposition", "event")
    single = any(getattr(requirement, name) is not None for name in names)
    whole = requirement.requirement_class in FLEET_CLASSES and not single
    if not (requirement.sisters or whole):
        return []
    if requirement.finding is not None:
        named.add(requirement.finding.aircraft_id)
    return [
        item
        for item in fleet
        if item.operator_id == requirement.operator_id
        and item.variant.aircraft_type_id in types
        and item.pk not in named
    ]


@dataclass(frozen=True)
class Unaccounted:
    """A requirement in force, and the aircraft that it leaves without an answer."""

    requirement: InspectionRequirement
    aircraft: tuple[Aircraft, ...]


def unaccounted_in(fleet: Sequence[Aircraft], *, as_of: date) -> list[Unaccounted]:
    """Requirements in force that do not name every aircraft of these; two queries."""
    rows = InspectionRequirement.objects.filter(
        Q(sisters=True) | Q(requirement_class__in=FLEET_CLASSES),
        operator__in={item.operator_id for item in fleet},
        state=RequirementState.EFFECTIVE,
        effective_on__lte=as_of,
    ).select_related("finding", "repair", "event", "disposition")
    subjects = RequirementSubject.objects.select_related("aircraft__variant")
    found = []
    for row in rows.prefetch_related(Prefetch("subjects", subjects)):
        missing = missing_from(row, list(row.subjects.all()), fleet)
        if missing:
            found.append(Unaccounted(row, tuple(missing)))
    return found


def sisters_of(finding: Finding) -> QuerySet[Aircraft]:
    """Other aircraft of the same type in the operator's fleet today."""
    kind = finding.aircraft.variant.aircraft_type_id
    return (
        Aircraft.objects.filter(
            operator=finding.operator_id,
            data_to__isnull=True,
            variant__aircraft_type=kind,
        )
        .exclude(pk=finding.aircraft_id)
        .select_related("variant")
        .order_by("registration")
    )


def findings_on(subject: RequirementSubject) -> QuerySet[Finding]:
    """Findings that an inspection of this subject may have made."""
    if subject.part is not None:
        return Finding.objects.filter(safe_life_part=subject.part)
    return Finding.objects.filter(aircraft=subject.aircraft)


def rework_counted_from(evaluation: Evaluation) -> date | None:
    """The day of the rework that an evaluation's threshold counts from, if one."""
    if evaluation.finding is None or "rework" not in evaluation.threshold_base:
        return None
    reworks = evaluation.finding.measurements.filter(stage="after_rework")
    return reworks.order_by("-number").values_list("measured_on", flat=True).first()
