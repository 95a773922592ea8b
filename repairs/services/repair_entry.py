"""A repair as handed over at release, and everything that may stand against it."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass, field

from fleet.due import Counters
from fleet.models import Aircraft, Material, Organisation, Person, SafeLifePart
from repairs.models import (
    Disposition,
    Finding,
    FindingState,
    Repair,
    RepairCategory,
    RepairState,
)
from repairs.services.photographs import Photo
from repairs.services.requirement_draft import RequirementDraft

RECTIFIABLE = (
    FindingState.ASSESSED,
    FindingState.ACCEPTED,
    FindingState.DEFERRED,
    FindingState.TO_RECTIFY,
    FindingState.RECTIFIED,
)

NEEDS_APPROVAL_DATA = (
    "Name the approval data: document, revision and page; category {category} holds "
    "by them."
)
NEEDS_COUNTERS = "Give flight hours and cycles at release, as on the release record."
NEEDS_RELEASER = "Name who released it; only a repair from before our records may not."
B_NEEDS_FOLLOW_UP = (
    "A category B repair is recorded with its inspection requirement, or with the "
    "approval stage that is still to come."
)
C_NEEDS_LIMIT = (
    "A category C repair is recorded with its replacement limit: flight hours, cycles "
    "or a date."
)
LIMIT_BEFORE_RELEASE = "The replacement limit lies at or before the release."
REASON_FOR_NONE = "Say why no category applies."
NOT_RECTIFIABLE = "{finding} is {state}; assess it before a repair answers it."
OTHER_AIRCRAFT = "{row} is not on {aircraft}."
SUPERSEDED_ALREADY = "{repair} is {state}; only an embodied repair is superseded."
BLEND_NEEDS_THICKNESS = (
    "A blend-out is recorded with the remaining thickness, the smallest measured."
)
RELEASED_BEFORE_FOUND = "Released on {released_on}, before {finding} was found."


@dataclass(frozen=True, slots=True)
class Answered:
    """A finding the repair answers: covered from sight, removed, margin if measured."""

    finding: Finding
    covers: bool
    damage_removed: str = "unknown"
    edge_margin_mm: float | None = None


@dataclass(frozen=True, slots=True)
class Layer:
    """One doubler, filler or insert, as written."""

    material_entered: str
    thickness_entered: str = ""
    thickness_mm: float | None = None
    material: Material | None = None
    batch: str = ""


@dataclass(frozen=True, slots=True)
class Fastener:
    """One kind of fastener used."""

    fastener: str
    diameter_mm: float | None = None
    pitch_mm: float | None = None
    edge_distance_mm: float | None = None
    rows: int | None = None
    count: int | None = None


@dataclass(frozen=True, slots=True)
class Data:
    """Approval data of a repair: a document and where in it."""

    kind: str
    reference: str
    revision: str = ""
    page: str = ""
    title: str = ""


@dataclass(frozen=True, slots=True)
class RepairEntry:
    """A repair as released; a legacy one is from before our records."""

    aircraft: Aircraft
    place_entered: str
    kind: str
    description: str
    category: str
    approval_basis: str
    released_on: dt.date
    at: Counters = field(default_factory=Counters)
    category_reason: str = ""
    approval: Data | None = None
    release_reference: str = ""
    length_mm: float | None = None
    width_mm: float | None = None
    layers: Sequence[Layer] = ()
    fasteners: Sequence[Fastener] = ()
    findings: Sequence[Answered] = ()
    disposition: Disposition | None = None
    element: str = ""
    element_label: str = ""
    surface: str = ""
    criticality: str = ""
    criticality_source: str = ""
    ata: str = ""
    chart_number: str = ""
    remaining_thickness_mm: float | None = None
    blend_depth_mm: float | None = None
    replacement_limit: Counters = field(default_factory=Counters)
    replacement_limit_on: dt.date | None = None
    stage_reached: str = "not_applicable"
    temporary_limit_cycles: int | None = None
    performed_by: Person | None = None
    inspected_by: Person | None = None
    released_by: Person | None = None
    organisation: Organisation | None = None
    legacy: bool = False
    evidence: str = "not_applicable"
    weight_change_g: int | None = None
    arm_mm: float | None = None
    supersedes: Sequence[Repair] = ()
    safe_life_part: SafeLifePart | None = None
    new_requirement: RequirementDraft | None = None
    photographs: Sequence[Photo] = ()


def repair_problems(entry: RepairEntry) -> list[str]:
    """Everything that stands against recording it; a place or size never does."""
    problems = [*_data_problems(entry), *_category_problems(entry)]
    for answered in entry.findings:
        problems += _finding_problems(entry, answered.finding)
    for other in entry.supersedes:
        if other.aircraft_id != entry.aircraft.pk:
            problems.append(OTHER_AIRCRAFT.format(row=other, aircraft=entry.aircraft))
        if other.state != RepairState.EMBODIED:
            state = other.get_state_display()
            problems.append(SUPERSEDED_ALREADY.format(repair=other, state=state))
    return problems


def _data_problems(entry: RepairEntry) -> list[str]:
    if entry.legacy:
        return []
    problems = []
    approval = entry.approval
    if approval is None or not (approval.reference.strip() and approval.page.strip()):
        category = RepairCategory(entry.category).label
        problems.append(NEEDS_APPROVAL_DATA.format(category=category))
    if entry.at.minutes is None or entry.at.cycles is None:
        problems.append(NEEDS_COUNTERS)
    if entry.released_by is None:
        problems.append(NEEDS_RELEASER)
    if entry.kind == "blend" and entry.remaining_thickness_mm is None:
        problems.append(BLEND_NEEDS_THICKNESS)
    return problems


def _category_problems(entry: RepairEntry) -> list[str]:
    category = entry.category
    if category == RepairCategory.B and not (
        entry.new_requirement is not None or entry.stage_reached in ("none", "1", "2")
    ):
        return [B_NEEDS_FOLLOW_UP]
    if category == RepairCategory.NOT_APPLICABLE and not entry.category_reason.strip():
        return [REASON_FOR_NONE]
    if category != RepairCategory.C:
        return []
    limit, day = entry.replacement_limit, entry.replacement_limit_on
    if limit == Counters() and day is None:
        return [] if entry.legacy else [C_NEEDS_LIMIT]
    early = (
        _not_after(limit.minutes, entry.at.minutes)
        or _not_after(limit.cycles, entry.at.cycles)
        or (day is not None and day <= entry.released_on)
    )
    return [LIMIT_BEFORE_RELEASE] if early else []


def _not_after(limit: int | None, now: int | None) -> bool:
    return limit is not None and now is not None and limit <= now


def _finding_problems(entry: RepairEntry, finding: Finding) -> list[str]:
    problems = []
    if finding.aircraft_id != entry.aircraft.pk:
        problems.append(OTHER_AIRCRAFT.format(row=finding, aircraft=entry.aircraft))
    if finding.state not in RECTIFIABLE:
        state = finding.get_state_display()
        problems.append(NOT_RECTIFIABLE.format(finding=finding, state=state))
    if entry.released_on < finding.found_on:
        problems.append(
            RELEASED_BEFORE_FOUND.format(released_on=entry.released_on, finding=finding)
        )
    return problems
