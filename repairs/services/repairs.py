"""Repairs from the plan to the release: what is done, with which data, what follows."""

from __future__ import annotations

import datetime as dt
from dataclasses import replace

from django.core.exceptions import ValidationError

from fleet.models import Document, Operator, User
from fleet.services.aircraft import stream_of
from fleet.services.documents import document_get_or_create
from fleet.services.history import Writing
from fleet.services.numbers import number_next
from fleet.services.parts import counter_columns
from fleet.services.signing import Proof
from repairs.described import described
from repairs.models import (
    Finding,
    FindingState,
    Meaning,
    Repair,
    RepairCategory,
    RepairState,
    RequirementState,
    RequirementSubject,
)
from repairs.services.approvals import approval_write
from repairs.services.assessing import deferrals_close
from repairs.services.authority import operator_on
from repairs.services.due_points import due_points_close, replacement_due_open
from repairs.services.inspections import dues_open, requirement_raise_within
from repairs.services.photographs import photographs_write
from repairs.services.places import (
    Placed,
    item_columns,
    keyed,
    place_columns_of,
    place_try,
)
from repairs.services.repair_ends import UNDER_WAY, supersede_write
from repairs.services.repair_entry import Data, RepairEntry
from repairs.services.repair_guards import plan_problems, repair_problems
from repairs.services.repair_rows import plan_rows_write, rows_write
from repairs.services.stage_clocks import findings_clocks_close, repair_clock_follow

AS_ENTERED = (
    "aircraft", "safe_life_part", "chart_number", "kind", "length_mm", "width_mm",
    "category", "category_reason", "disposition", "substantiation",
    "inspection_required", "approval_basis", "released_on", "organisation",
    "performed_by", "inspected_by", "released_by", "legacy", "evidence",
    "weight_change_g", "arm_mm", "remaining_thickness_mm", "blend_depth_mm",
    "replacement_limit_on", "stage_reached", "temporary_limit_cycles", "ata",
)  # fmt: skip
ANSWERED_BY = "answered by {number}"
RELEASED = "{repair} released under {reference}"
COUNTED_ANEW = "counted anew from the release of {number}"
RELEASED_BEFORE = "{repair} is {state} already; only a planned repair is released."
OTHER_AIRCRAFT = "{repair} is planned on {aircraft} and released there."
NO_RELEASE_DATE = "A planned repair has no release date; record it as released instead."


def repair_record(
    *, entry: RepairEntry, proof: Proof, actor: User | None, at: dt.datetime
) -> Repair:
    """An embodied repair, with what follows from its category on the due list.

    Signed as released when who released it is who signs; what another released is
    recorded from its release certificate.
    """
    with _writing("repair_record", entry, actor, at, proof.how) as w:
        return repair_write(w, entry, proof=proof)


def repair_plan(*, entry: RepairEntry, actor: User | None, at: dt.datetime) -> Repair:
    """A repair that is to be done, with what is known; it answers nothing yet."""
    with _writing("repair_plan", entry, actor, at) as w:
        problems = plan_problems(entry)
        if entry.released_on is not None:
            problems.append(NO_RELEASE_DATE)
        if problems:
            raise ValidationError(problems)
        operator = operator_on(entry.aircraft, at.date())
        placed = place_try(entry.aircraft, entry.place_entered)
        repair = w.create(_row(w, entry, placed, operator, RepairState.PLANNED))
        plan_rows_write(w, repair, entry)
        photographs_write(w, shown=repair, photos=entry.photographs)
    return repair


def repair_embody(
    *,
    repair: Repair,
    entry: RepairEntry,
    proof: Proof,
    actor: User | None,
    at: dt.datetime,
) -> Repair:
    """Release a planned repair, or one in work, as it was done.

    ValidationError says everything that stands against it, and whether somebody else
    released, cancelled or superseded it meanwhile.
    """
    with _writing("repair_embody", entry, actor, at, proof.how) as w:
        row = w.locked(Repair.objects.select_related("aircraft"), pk=repair.pk)
        if row.state not in UNDER_WAY:
            state = row.get_state_display()
            raise ValidationError(RELEASED_BEFORE.format(repair=row, state=state))
        if row.aircraft_id != entry.aircraft.pk:
            words = OTHER_AIRCRAFT.format(repair=row, aircraft=row.aircraft)
            raise ValidationError(words)
        _, placed = _checked(entry, repair=row)
        columns = _columns(w, entry, placed)
        w.change(row, state=RepairState.EMBODIED, **keyed(row, columns))
        row = Repair.objects.select_related("aircraft", "operator").get(pk=row.pk)
        _follow(w, row, entry, proof)
    return row


def repair_write(w: Writing, entry: RepairEntry, *, proof: Proof) -> Repair:
    """Inside a writing: the repair, its rows, its findings' states and its clocks."""
    operator, placed = _checked(entry)
    repair = w.create(_row(w, entry, placed, operator, RepairState.EMBODIED))
    _follow(w, repair, entry, proof)
    return repair


def _checked(
    entry: RepairEntry, repair: Repair | None = None
) -> tuple[Operator, Placed]:
    """Operator of the day and the place read, after every guard of a release."""
    day = entry.released_on
    operator = operator_on(entry.aircraft, day) if day else entry.aircraft.operator
    placed = place_try(entry.aircraft, entry.place_entered)
    criticality = str(_item_columns(entry, placed)["criticality"])
    problems = repair_problems(
        entry, operator=operator, criticality=criticality, repair=repair
    )
    if problems:
        raise ValidationError(problems)
    return operator, placed


def _row(
    w: Writing,
    entry: RepairEntry,
    placed: Placed,
    operator: Operator,
    state: RepairState,
) -> Repair:
    return Repair(
        operator=operator,
        number=number_next(w, operator=operator, kind="R"),
        state=state,
        **_columns(w, entry, placed),
    )


def _columns(w: Writing, entry: RepairEntry, placed: Placed) -> dict[str, object]:
    approval, limit = entry.approval, entry.replacement_limit
    same = {name: getattr(entry, name) for name in AS_ENTERED}
    return {
        "description": _description(entry),
        "approval_document": _document(w, entry, approval) if approval else None,
        "approval_page": approval.page if approval else "",
        "release_document": _release(w, entry),
        "replacement_limit_cycles": limit.cycles,
        "replacement_limit_minutes": limit.minutes,
        **counter_columns("at", entry.at),
        **same,
        **place_columns_of(placed),
        **_item_columns(entry, placed),
    }


def _description(entry: RepairEntry) -> str:
    said = {
        "sealant": entry.sealant.strip(),
        "protection": entry.protection.strip(),
        "work_order": entry.work_order.strip(),
    }
    lies = [(one.repair.number, one.how) for one in entry.lies]
    return described(entry.description, said, lies)


def _document(w: Writing, entry: RepairEntry, data: Data) -> Document | None:
    if not data.reference.strip():
        return None
    return document_get_or_create(
        w,
        operator=entry.aircraft.operator,
        kind=data.kind,
        reference=data.reference,
        revision=data.revision,
        title=data.title,
    )


def _release(w: Writing, entry: RepairEntry) -> Document | None:
    return _document(w, entry, Data(Document.Kind.RELEASE, entry.release_reference))


def _item_columns(entry: RepairEntry, placed: Placed) -> dict[str, object]:
    """What was said of the structural item, else what the location says of it."""
    return item_columns(
        placed,
        element=entry.element,
        element_label=entry.element_label,
        surface=entry.surface,
        criticality=entry.criticality,
        criticality_source=entry.criticality_source,
    )


def _follow(w: Writing, repair: Repair, entry: RepairEntry, proof: Proof) -> None:
    """What a release brings with it: rows, clocks, states, the end of earlier ones."""
    assert repair.released_on is not None
    rows_write(w, repair, entry)
    photographs_write(w, shown=repair, photos=entry.photographs)
    _clocks_open(w, repair, entry, repair.released_on)
    _findings_rectify(w, repair, entry, repair.released_on)
    supersede_write(w, repair, entry.supersedes)
    if proof.reentered and entry.released_by == proof.person:
        approval_write(
            w,
            subject=repair,
            meaning=Meaning.RELEASED,
            proof=proof,
            on=repair.released_on,
            statement=RELEASED.format(
                repair=repair, reference=entry.release_reference.strip()
            ),
        )


def _clocks_open(
    w: Writing, repair: Repair, entry: RepairEntry, released_on: dt.date
) -> None:
    """What the category puts on the due list."""
    _inspections_count_anew(w, repair, released_on)
    if entry.new_requirement is not None:
        requirement_raise_within(w, replace(entry.new_requirement, repair=repair))
    if repair.category == RepairCategory.C:
        replacement_due_open(w, repair=repair, opened_on=released_on)
    repair_clock_follow(w, repair, on=released_on)


def _inspections_count_anew(w: Writing, repair: Repair, released_on: dt.date) -> None:
    """Inspections raised while it was planned could not be counted yet."""
    subjects = RequirementSubject.objects.filter(
        requirement__repair=repair, state=RequirementState.EFFECTIVE, applies="yes"
    )
    for subject in subjects.select_related("aircraft", "part", "requirement__repair"):
        reason = COUNTED_ANEW.format(number=repair)
        due_points_close(w, origin=subject, on=released_on, reason=reason)
        dues_open(w, subject, released_on)


def _findings_rectify(
    w: Writing, repair: Repair, entry: RepairEntry, released_on: dt.date
) -> None:
    """Rectified when the damage is gone or lies under this repair; else unchanged."""
    reason = ANSWERED_BY.format(number=repair)
    for answered in entry.findings:
        if not answered.answers:
            continue
        finding = w.locked(Finding.objects.all(), pk=answered.finding.pk)
        w.change(finding, state=FindingState.RECTIFIED)
        deferrals_close(w, finding, on=released_on, reason=reason)
    answers = [answered.finding for answered in entry.findings]
    findings_clocks_close(w, answers, on=released_on, reason=reason)


def _writing(
    action: str,
    entry: RepairEntry,
    actor: User | None,
    at: dt.datetime,
    origin: str = "",
) -> Writing:
    return Writing(
        actor=actor,
        action=action,
        at=at,
        operator=entry.aircraft.operator,
        stream=stream_of(entry.aircraft),
        origin=origin,
    )
