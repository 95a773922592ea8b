"""Everything that may stand against a repair's release, in words.

One list serves the release of a planned repair and one recorded as released at once:
approval data or an in-limits reference (R2), performer and inspector (R3), rejections
not overruled (R5), replacement limit (R8) and follow-up (R9), fitted against required.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterator

from django.core.exceptions import ValidationError

from fleet.due import Counters
from fleet.models import AuthorisationScope, Criticality, Document, Operator
from fleet.selectors.applicability import document_refusals
from repairs.fitted import differences
from repairs.models import (
    IN_LIMITS,
    Finding,
    Repair,
    RepairCategory,
    RepairState,
    RepairType,
    RequirementState,
)
from repairs.selectors.repair_fitted import thickness_percent
from repairs.selectors.repair_inspections import rejections_open
from repairs.selectors.substantiation_stages import stage_reached
from repairs.services.authority import CERTIFIERS, authorised
from repairs.services.manufacture import made_before
from repairs.services.repair_entry import RECTIFIABLE, RepairEntry
from repairs.services.repair_rows import plies

INSPECTORS = (AuthorisationScope.INSPECT, AuthorisationScope.NDT)
"""Published repairs, whose page says within which limits they hold."""
BEFORE_COMPLETE = ("none", "1", "2")
LAYERED = (
    RepairType.EXTERNAL_DOUBLER,
    RepairType.INTERNAL_DOUBLER,
    RepairType.FLUSH,
    RepairType.SPLICE,
    RepairType.BONDED,
)

NEEDS_APPROVAL_DATA = (
    "Name the approval data: document, revision and page; category {category} holds "
    "by them."
)
NEEDS_COUNTERS = "Give flight hours and cycles at release, as on the release record."
NEEDS_RELEASER = "Name who released it; only a repair from before our records may not."
NEEDS_RELEASE = "Give the release reference, as on the release certificate."
NEEDS_DATE = "Give the date of release."
NEEDS_PERFORMER = "Name who performed it."
B_NEEDS_FOLLOW_UP = (
    "A category B repair is recorded with its inspection requirement, or with the "
    "approval stage that is still to come."
)
C_NEEDS_LIMIT = (
    "A category C repair is recorded with its replacement limit: flight hours, cycles "
    "or a date."
)
A_NOT_COMPLETE = (
    "Category A is what the complete approval says; with {stage} it is still pending."
)
STAGE_1_FIRST = (
    "The structure is {criticality}, so stage 1 is approved before release: name the "
    "stage, or cite the page of a published repair whose limits cover it. "
    "“{reference}” is a {kind} and says no stage."
)
LIMIT_BEFORE_RELEASE = "The replacement limit lies at or before the release."
REASON_FOR_NONE = "Say why no category applies."
NOT_RECTIFIABLE = "{finding} is {state}; assess it before a repair answers it."
OTHER_AIRCRAFT = "{row} is not on {aircraft}."
SUPERSEDED_ALREADY = "{repair} is {state}; only an embodied repair is superseded."
ITSELF = "{repair} cannot supersede itself."
BLEND_NEEDS_THICKNESS = (
    "A blend-out is recorded with the remaining thickness, the smallest measured."
)
RELEASED_BEFORE_FOUND = "Released on {released_on}, before {finding} was found."
SAME_HANDS = (
    "{person} performed {what}; the required inspection is by someone other than who "
    "performed it."
)
NOT_INSPECTED = "An independent inspection is required: name who inspected it."
MATERIALS_MISSING = (
    "A major repair is released with its materials: one line for each layer."
)
DIFFERS = (
    "Fitted and required differ, {words}: fit what is required, or give the reason, "
    "the document that allows it and who says so."
)
NOT_ALL_REQUIRED = (
    "The approved data ask for {count} layers; write all of them, corrected where "
    "they were wrong."
)
STEP_NOT_DONE = "Step {number}, {title}, is not recorded as done."
STEP_LATER = "Step {number}, {title}, was done on {done_on}, after the release."
REJECTED = (
    "{rejection}: a required inspection rejected it. It stands until someone with an "
    "inspection authorisation answers it."
)


def repair_problems(
    entry: RepairEntry,
    *,
    operator: Operator,
    criticality: str,
    repair: Repair | None = None,
) -> list[str]:
    """Everything that stands against the release; a place or size never does.

    `repair` is the planned one that is released by this; `criticality` is the
    structural item's, where unknown counts as PSE.
    """
    problems = [
        *made_before(entry.aircraft, entry.released_on),
        *_data_problems(entry),
        *_people_problems(entry, operator, repair),
        *_category_problems(entry, repair, criticality),
        *_stage_problems(entry, operator, criticality),
        *_material_problems(entry, operator, repair),
    ]
    if repair is not None:
        problems += _progress_problems(entry, repair)
    for answered in entry.findings:
        problems += _finding_problems(entry, answered.finding)
    return problems + _superseded_problems(entry, repair)


def plan_problems(entry: RepairEntry) -> list[str]:
    """What may stand against planning it: another aircraft's findings, wrong data."""
    rows = [answered.finding for answered in entry.findings]
    found = [
        OTHER_AIRCRAFT.format(row=row, aircraft=entry.aircraft)
        for row in rows
        if row.aircraft_id != entry.aircraft.pk
    ]
    if entry.category == RepairCategory.NOT_APPLICABLE and not entry.category_reason:
        found.append(REASON_FOR_NONE)
    return found + _applicability_problems(entry)


def _data_problems(entry: RepairEntry) -> Iterator[str]:
    if entry.released_on is None:
        yield NEEDS_DATE
    if entry.legacy:
        return
    approval = entry.approval
    if approval is None or not (approval.reference.strip() and approval.page.strip()):
        category = RepairCategory(entry.category).label
        yield NEEDS_APPROVAL_DATA.format(category=category)
    if entry.at.minutes is None or entry.at.cycles is None:
        yield NEEDS_COUNTERS
    if not entry.release_reference.strip():
        yield NEEDS_RELEASE
    if entry.released_by is None:
        yield NEEDS_RELEASER
    if entry.performed_by is None:
        yield NEEDS_PERFORMER
    if entry.kind == RepairType.BLEND and entry.remaining_thickness_mm is None:
        yield BLEND_NEEDS_THICKNESS


def _people_problems(
    entry: RepairEntry, operator: Operator, repair: Repair | None
) -> Iterator[str]:
    """Who releases is certifying staff; who inspects did none of the work."""
    day = entry.released_on
    if day is not None and entry.released_by is not None and not entry.legacy:
        yield from _unauthorised(entry.released_by, operator, CERTIFIERS, day)
    inspector = entry.inspected_by
    if inspector is None:
        if entry.inspection_required and not entry.legacy:
            yield NOT_INSPECTED
        return
    if inspector == entry.performed_by:
        yield SAME_HANDS.format(person=inspector, what="the repair")
    done = [(step.title, step.done_by) for step in entry.steps]
    if repair is not None:
        done += [(row.title, row.done_by) for row in repair.steps.all()]
    for title, performer in done:
        if performer == inspector:
            yield SAME_HANDS.format(person=inspector, what=f"the step {title}")
    if entry.inspection_required and day is not None and not entry.legacy:
        yield from _unauthorised(inspector, operator, INSPECTORS, day)


def _unauthorised(
    person: object,
    operator: Operator,
    scopes: tuple[AuthorisationScope, ...],
    day: dt.date,
) -> list[str]:
    try:
        authorised(person=person, operator=operator, scopes=scopes, on=day)  # type: ignore[arg-type]
    except ValidationError as error:
        return list(error.messages)
    return []


def _category_problems(
    entry: RepairEntry, repair: Repair | None, criticality: str
) -> Iterator[str]:
    category = entry.category
    if category == RepairCategory.A:
        stage = _stage(entry)
        if stage in BEFORE_COMPLETE and _counts_stages(entry, criticality):
            words = "no stage approved" if stage == "none" else f"stage {stage}"
            yield A_NOT_COMPLETE.format(stage=words)
    if category == RepairCategory.B and not _followed(entry, repair, criticality):
        yield B_NEEDS_FOLLOW_UP
    if category == RepairCategory.NOT_APPLICABLE and not entry.category_reason.strip():
        yield REASON_FOR_NONE
    if category == RepairCategory.C:
        yield from _limit_problems(entry)


def _followed(entry: RepairEntry, repair: Repair | None, criticality: str) -> bool:
    """Whether an inspection in force or a stage still to come follows it."""
    if entry.new_requirement is not None:
        return True
    if repair is not None and (
        repair.requirements.filter(state=RequirementState.EFFECTIVE).exists()
    ):
        return True
    waits = _stage(entry) in BEFORE_COMPLETE
    return waits and _counts_stages(entry, criticality)


def _counts_stages(entry: RepairEntry, criticality: str) -> bool:
    """A folder's stages hold for PSE and FCS; a stage that was typed is meant."""
    return entry.substantiation is None or criticality != Criticality.SECONDARY


def _limit_problems(entry: RepairEntry) -> Iterator[str]:
    limit, day = entry.replacement_limit, entry.replacement_limit_on
    if limit == Counters() and day is None:
        if not entry.legacy:
            yield C_NEEDS_LIMIT
        return
    early = (
        _not_after(limit.minutes, entry.at.minutes)
        or _not_after(limit.cycles, entry.at.cycles)
        or (day and entry.released_on and day <= entry.released_on)
    )
    if early:
        yield LIMIT_BEFORE_RELEASE


def _not_after(limit: int | None, now: int | None) -> bool:
    return limit is not None and now is not None and limit <= now


def _stage(entry: RepairEntry) -> str:
    """The stage the folder has reached, else the one that was stated."""
    if entry.substantiation is None:
        return entry.stage_reached
    return str(stage_reached(entry.substantiation) or "none")


def _stage_problems(
    entry: RepairEntry, operator: Operator, criticality: str
) -> Iterator[str]:
    """Stage 1 before release, where the operator's programme adopts the stages."""
    approval = entry.approval
    yield from _applicability_problems(entry)
    if entry.legacy or approval is None or not operator.programme_three_stages:
        return
    if criticality == Criticality.SECONDARY or approval.kind in IN_LIMITS:
        return
    if _stage(entry) in ("none", "not_applicable"):
        yield STAGE_1_FIRST.format(
            criticality=Criticality(criticality).label,
            reference=approval.reference,
            kind=Document.Kind(approval.kind).label,
        )


def _applicability_problems(entry: RepairEntry) -> list[str]:
    if entry.approval is None:
        return []
    data, aircraft = entry.approval, entry.aircraft
    return document_refusals(aircraft.operator, aircraft, data.reference, data.revision)


def _material_problems(
    entry: RepairEntry, operator: Operator, repair: Repair | None
) -> Iterator[str]:
    if entry.is_major and entry.kind in LAYERED and not entry.layers:
        yield MATERIALS_MISSING
    asked = repair.required.count() if repair is not None else 0
    if asked > len(entry.required):
        yield NOT_ALL_REQUIRED.format(count=asked)
    percent = thickness_percent(operator, entry.released_on)
    required, fitted = plies(entry.required), plies(entry.layers)
    found = differences(required, fitted, percent=percent)
    for one, asked_for in zip(found, entry.required, strict=True):
        if one.words and not asked_for.is_answered:
            yield DIFFERS.format(words=one.words)


def _progress_problems(entry: RepairEntry, repair: Repair) -> Iterator[str]:
    for row in repair.steps.all():
        if row.done_on is None:
            yield STEP_NOT_DONE.format(number=row.number, title=row.title)
        elif entry.released_on is not None and row.done_on > entry.released_on:
            yield STEP_LATER.format(
                number=row.number, title=row.title, done_on=row.done_on
            )
    for rejection in rejections_open(repair):
        yield REJECTED.format(rejection=rejection)


def _finding_problems(entry: RepairEntry, finding: Finding) -> Iterator[str]:
    if finding.aircraft_id != entry.aircraft.pk:
        yield OTHER_AIRCRAFT.format(row=finding, aircraft=entry.aircraft)
    if finding.state not in RECTIFIABLE:
        state = finding.get_state_display()
        yield NOT_RECTIFIABLE.format(finding=finding, state=state)
    if entry.released_on is not None and entry.released_on < finding.found_on:
        yield RELEASED_BEFORE_FOUND.format(
            released_on=entry.released_on, finding=finding
        )


def _superseded_problems(entry: RepairEntry, repair: Repair | None) -> list[str]:
    problems = []
    for other in entry.supersedes:
        if other.aircraft_id != entry.aircraft.pk:
            problems.append(OTHER_AIRCRAFT.format(row=other, aircraft=entry.aircraft))
        if other == repair:
            problems.append(ITSELF.format(repair=other))
        elif other.state != RepairState.EMBODIED:
            state = other.get_state_display()
            problems.append(SUPERSEDED_ALREADY.format(repair=other, state=state))
    return problems
