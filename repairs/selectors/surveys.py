"""A survey as its page shows it: its items by outcome, and the records beside them."""

from __future__ import annotations

from collections import Counter as Tally
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from typing import TypeVar

from django.db.models import Exists, OuterRef, Q, QuerySet

from fleet.location.geometry import TypeGeometry
from fleet.models import Aircraft, Section, User
from fleet.selectors.structure import geometry_of, place_find
from repairs.models import (
    DuePoint,
    Finding,
    FindingState,
    Repair,
    RepairFinding,
    RepairState,
    Survey,
    SurveyItem,
)
from repairs.selectors.neighbours import (
    REACH_BAYS,
    Patch,
    findings_shown,
    gap_between,
    in_patch,
    patch_of,
)

WHOLE = "whole aircraft"
IN_SIGHT = (
    FindingState.REPORTED,
    FindingState.ASSESSED,
    FindingState.ACCEPTED,
    FindingState.DEFERRED,
    FindingState.TO_RECTIFY,
)
ON_AIRCRAFT = (RepairState.IN_WORK, RepairState.EMBODIED)
MOST_CANDIDATES = 5
OUTCOMES = ("matched", "recorded_not_found", "found_not_recorded", "to_match")
WORDS = {
    "matched": "matched",
    "recorded_not_found": "recorded, not found",
    "found_not_recorded": "found, not recorded",
    "to_match": "still to match",
}

Record = Finding | Repair
Row = TypeVar("Row", Finding, Repair)


@dataclass(frozen=True)
class Area:
    """What was looked at; without a section the whole aircraft."""

    section: Section | None = None
    patch: Patch | None = None

    @property
    def where(self) -> Q:
        """The records of the area that have a place."""
        if self.section is None:
            return Q()
        inside = Q(section=self.section)
        if self.patch is None:
            return inside
        return inside & in_patch(self.patch, self.section.wrap_mm)


def area_read(aircraft: Aircraft, text: str) -> Area:
    """“whole aircraft”, a section by name or code, or a range of locations.

    LocationRefused when it is none of these.
    """
    said = " ".join(text.split())
    if said.lower() == WHOLE:
        return Area()
    kind = aircraft.variant.aircraft_type
    named = Q(code__iexact=said) | Q(name__iexact=said)
    section = kind.sections.filter(named).first()
    if section is not None:
        return Area(section)
    place = place_find(aircraft_type=kind, variant=aircraft.variant.code, text=said)
    return Area(
        kind.sections.get(code=place.section),
        Patch(place.x1_mm, place.x2_mm, place.s1_mm, place.s2_mm),
    )


def records_in_sight(survey: Survey) -> tuple[list[Record], list[Record]]:
    """Records of the area whose damage or repair can be seen, and those of the aircraft
    that are to be placed, so that nobody knows whether they lie in it; four queries.
    """
    area = area_read(survey.aircraft, survey.area)
    findings = (
        findings_shown(Finding.objects.filter(aircraft=survey.aircraft))
        .filter(state__in=IN_SIGHT, found_on__lte=survey.surveyed_on)
        .exclude(Exists(_under_repair()))
    )
    repairs = Repair.objects.filter(
        Q(released_on__isnull=True) | Q(released_on__lte=survey.surveyed_on),
        aircraft=survey.aircraft,
        state__in=ON_AIRCRAFT,
    )
    inside: list[Record] = [*_of(findings, area.where), *_of(repairs, area.where)]
    if area.section is None:
        return inside, []
    unplaced = Q(section__isnull=True)
    outside: list[Record] = [*_of(findings, unplaced), *_of(repairs, unplaced)]
    return inside, outside


def _under_repair() -> QuerySet[RepairFinding]:
    return RepairFinding.objects.filter(
        finding=OuterRef("pk"), covers=True, repair__state=RepairState.EMBODIED
    )


def _of(rows: QuerySet[Row], where: Q) -> list[Row]:
    return list(rows.filter(where).select_related("aircraft", "section").order_by("pk"))


def record_key(record: Record) -> str:
    """finding-12: a record in a form."""
    return f"{'finding' if isinstance(record, Finding) else 'repair'}-{record.pk}"


def item_key(item: SurveyItem) -> str:
    record = item.record
    return record_key(record) if record is not None else ""


@dataclass(frozen=True)
class Candidate:
    """A record that an item may be, and the gap between the two [mm]; along only, when
    one of them says nothing of the circumference."""

    record: Record
    gap_mm: float | None
    along_only: bool = False

    @property
    def key(self) -> str:
        return record_key(self.record)

    @property
    def is_repair(self) -> bool:
        return isinstance(self.record, Repair)


@dataclass(frozen=True)
class ItemLine:
    """An item with what it may be, and by when it is to be answered."""

    item: SurveyItem
    candidates: Sequence[Candidate] = ()
    due: DuePoint | None = None


@dataclass(frozen=True)
class SurveyPage:
    """Everything the page of one survey says."""

    survey: Survey
    lines: Mapping[str, Sequence[ItemLine]]
    missing: Sequence[Record] = field(default_factory=list)
    unplaced: Sequence[Record] = field(default_factory=list)

    @property
    def tally(self) -> list[tuple[str, int]]:
        return [(WORDS[name], len(self.lines[name])) for name in OUTCOMES]

    @property
    def unsettled(self) -> int:
        """Items and records that stand between the survey and its closing."""
        open_items = (line.item for lines in self.lines.values() for line in lines)
        return sum(not item.settled for item in open_items) + len(self.missing)


def surveys_shown(user: User) -> QuerySet[Survey]:
    return Survey.objects.visible_to(user).select_related(
        "aircraft__variant__aircraft_type",
        "aircraft__operator",
        "surveyed_by",
        "closed_by",
        "document",
        "entered_by",
    )


def survey_items(user: User) -> QuerySet[SurveyItem]:
    return SurveyItem.objects.visible_to(user).select_related(
        "survey__aircraft__variant__aircraft_type",
        "survey__aircraft__operator",
        "finding",
        "repair",
        "section",
        "answered_by",
    )


def surveys_of(aircraft: Aircraft, user: User) -> list[tuple[Survey, list[int]]]:
    """Surveys of one aircraft, newest first, with the count of each outcome."""
    rows = list(surveys_shown(user).filter(aircraft=aircraft))
    pairs = SurveyItem.objects.filter(survey__in=rows).order_by()
    counts = Tally(pairs.values_list("survey_id", "outcome"))
    return [(row, [counts[row.pk, name] for name in OUTCOMES]) for row in rows]


def survey_page(survey: Survey) -> SurveyPage:
    """Items by outcome; a constant number of queries."""
    items = list(
        survey.items.select_related(
            "survey__aircraft", "finding", "repair", "section", "answered_by"
        )
    )
    inside, unplaced = records_in_sight(survey)
    seen = {item_key(item) for item in items}
    missing = [row for row in inside if record_key(row) not in seen]
    matched = {item_key(item) for item in items if item.outcome == "matched"}
    free = [row for row in (*inside, *unplaced) if record_key(row) not in matched]
    dues = {
        point.survey_item_id: point
        for point in DuePoint.objects.filter(
            survey_item__survey=survey, closed_on__isnull=True
        )
    }
    geometry = geometry_of(survey.aircraft.variant.aircraft_type)
    lines: dict[str, list[ItemLine]] = {name: [] for name in OUTCOMES}
    for item in items:
        asked = item.outcome in ("to_match", "found_not_recorded") and not item.answer
        found = candidates_of(item, free, geometry) if asked else []
        lines[item.outcome].append(ItemLine(item, found, dues.get(item.pk)))
    return SurveyPage(survey, lines, missing, unplaced)


def candidates_of(
    item: SurveyItem, records: Iterable[Record], geometry: TypeGeometry | None
) -> list[Candidate]:
    """Records within reach, what the item was seen as first, then the nearest.

    An item to be placed is held against records that are to be placed too.
    """
    if item.section is None or geometry is None:
        found = [Candidate(row, None) for row in records if row.section_id is None]
        return found[:MOST_CANDIDATES]
    section = geometry.section(item.section.code)
    x1_mm, x2_mm = item.x1_mm or 0.0, item.x2_mm or 0.0  # a placed item has both
    patch = Patch(x1_mm, x2_mm, item.s1_mm, item.s2_mm)
    near = []
    for row in records:
        if row.section_id != item.section_id:
            continue
        theirs = patch_of(row)
        middle = row.map_mm if row.map_mm is not None else theirs.x1_mm
        along, across = gap_between(patch, theirs, section, middle)
        gap = (along**2 + (across or 0.0) ** 2) ** 0.5
        if gap <= REACH_BAYS * section.frame_pitch_mm:
            near.append(Candidate(row, gap, across is None))
    wanted = {"damage": False, "repair": True}.get(item.seen_as)
    near.sort(key=lambda x: (wanted not in (None, x.is_repair), x.gap_mm, x.key))
    return near[:MOST_CANDIDATES]


def record_choices(survey: Survey) -> list[tuple[str, str]]:
    """Every record an item of the survey may be, in words."""
    inside, unplaced = records_in_sight(survey)
    return [(record_key(row), record_words(row)) for row in (*inside, *unplaced)]


def record_words(record: Record) -> str:
    kind = (
        record.get_damage_type_display()
        if isinstance(record, Finding)
        else record.get_kind_display()
    )
    return f"{record} {kind}, {record.place_text or record.place_entered}"


def record_of(survey: Survey, key: str) -> Record | None:
    """The record of the survey's aircraft that a form names."""
    kind, _, number = key.partition("-")
    if not number.isdecimal():
        return None
    if kind == "finding":
        return Finding.objects.filter(aircraft=survey.aircraft, pk=number).first()
    return Repair.objects.filter(aircraft=survey.aircraft, pk=number).first()
