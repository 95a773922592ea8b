"""Another category for a repair that stands, by a new approval: clocks follow (R8)."""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass, field, replace

from django.core.exceptions import ValidationError

from fleet.due import Counters
from fleet.models import User
from fleet.selectors.applicability import document_refusals
from fleet.services.aircraft import stream_of
from fleet.services.documents import document_get_or_create
from fleet.services.history import Writing
from repairs.models import (
    DueKind,
    Repair,
    RepairCategory,
    RepairState,
    RequirementState,
)
from repairs.selectors.substantiation_stages import stage_reached
from repairs.services.due_points import due_points_close, replacement_due_open
from repairs.services.inspections import requirement_raise_within
from repairs.services.repair_entry import Data
from repairs.services.repair_guards import (
    A_NOT_COMPLETE,
    B_NEEDS_FOLLOW_UP,
    BEFORE_COMPLETE,
    C_NEEDS_LIMIT,
    LIMIT_BEFORE_RELEASE,
    NEEDS_APPROVAL_DATA,
    REASON_FOR_NONE,
)
from repairs.services.requirement_draft import RequirementDraft
from repairs.services.stage_clocks import repair_clock_follow

NOT_STANDING = "{repair} is {state}; only a repair on the aircraft is reclassified."
SAME_DATA = (
    "{document}, {page} is what the repair was approved by; a new category rests on a "
    "new approval, or on a new revision of it."
)
RECLASSIFIED = "category {category} by {document}, {page}"


@dataclass(frozen=True, slots=True)
class NewCategory:
    """The category a new approval gives, with the limit or inspection it names."""

    category: str
    approval: Data
    reason: str
    on: dt.date
    stage_reached: str = "not_applicable"
    replacement_limit: Counters = field(default_factory=Counters)
    replacement_limit_on: dt.date | None = None
    new_requirement: RequirementDraft | None = None


def repair_reclassify(
    *, repair: Repair, change: NewCategory, actor: User | None, at: dt.datetime
) -> Repair:
    """The repair under its new approval; its replacement limit and clocks follow.

    A signature given under the old category shows that the record has changed since.
    """
    with Writing(
        actor=actor,
        action="repair_reclassify",
        at=at,
        operator=repair.aircraft.operator,
        stream=stream_of(repair.aircraft),
        reason=change.reason,
    ) as w:
        rows = Repair.objects.select_related("aircraft", "operator")
        row = w.locked(rows, pk=repair.pk)
        if problems := _problems(row, change):
            raise ValidationError(problems)
        _write(w, row, change)
    return row


def _problems(repair: Repair, change: NewCategory) -> list[str]:
    if repair.state != RepairState.EMBODIED:
        state = repair.get_state_display()
        return [NOT_STANDING.format(repair=repair, state=state)]
    data = change.approval
    label = RepairCategory(change.category).label
    if not (data.reference.strip() and data.page.strip()):
        return [NEEDS_APPROVAL_DATA.format(category=label)]
    problems = document_refusals(
        repair.aircraft.operator, repair.aircraft, data.reference, data.revision
    )
    before = repair.approval_document
    same = before is not None and (
        (before.reference, before.revision, repair.approval_page)
        == (data.reference.strip(), data.revision.strip(), data.page.strip())
    )
    if same:
        problems.append(SAME_DATA.format(document=before, page=data.page))
    return problems + _category_problems(repair, change)


def _category_problems(repair: Repair, change: NewCategory) -> list[str]:
    stage = _stage(repair, change)
    match change.category:
        case RepairCategory.A if stage in BEFORE_COMPLETE:
            words = "no stage approved" if stage == "none" else f"stage {stage}"
            return [A_NOT_COMPLETE.format(stage=words)]
        case RepairCategory.B:
            effective = repair.requirements.filter(state=RequirementState.EFFECTIVE)
            waits = stage in BEFORE_COMPLETE
            if not (change.new_requirement or waits or effective.exists()):
                return [B_NEEDS_FOLLOW_UP]
        case RepairCategory.C:
            limit, day = change.replacement_limit, change.replacement_limit_on
            if limit == Counters() and day is None:
                return [C_NEEDS_LIMIT]
            if day is not None and repair.released_on and day <= repair.released_on:
                return [LIMIT_BEFORE_RELEASE]
        case RepairCategory.NOT_APPLICABLE if not change.reason.strip():
            return [REASON_FOR_NONE]
    return []


def _stage(repair: Repair, change: NewCategory) -> str:
    if repair.substantiation is None:
        return change.stage_reached
    return str(stage_reached(repair.substantiation) or "none")


def _write(w: Writing, repair: Repair, change: NewCategory) -> None:
    data, limit = change.approval, change.replacement_limit
    document = document_get_or_create(
        w,
        operator=repair.aircraft.operator,
        kind=data.kind,
        reference=data.reference,
        revision=data.revision,
    )
    w.change(
        repair,
        category=change.category,
        category_reason=change.reason.strip(),
        approval_document_id=document.pk,
        approval_page=data.page.strip(),
        stage_reached=change.stage_reached,
        replacement_limit_cycles=limit.cycles,
        replacement_limit_minutes=limit.minutes,
        replacement_limit_on=change.replacement_limit_on,
    )
    label = repair.get_category_display()
    reason = RECLASSIFIED.format(category=label, document=document, page=data.page)
    kinds = (DueKind.REPLACE,)
    due_points_close(w, origin=repair, on=change.on, reason=reason, kinds=kinds)
    if change.new_requirement is not None:
        requirement_raise_within(w, replace(change.new_requirement, repair=repair))
    if change.category == RepairCategory.C:
        replacement_due_open(w, repair=repair, opened_on=change.on)
    repair_clock_follow(w, repair, on=change.on)
