"""Repairs at their release: what was done, with which data, and what it covers."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import replace

from django.core.exceptions import ValidationError

from fleet.due import Due
from fleet.models import Criticality, Document, Operator, User
from fleet.selectors.people import policy
from fleet.services.aircraft import stream_of
from fleet.services.documents import document_get_or_create
from fleet.services.history import Writing
from fleet.services.numbers import number_next
from fleet.services.parts import counter_columns
from repairs.models import (
    DueKind,
    Finding,
    FindingState,
    Repair,
    RepairCategory,
    RepairFastener,
    RepairFinding,
    RepairLayer,
    RepairState,
)
from repairs.selectors.edges import edge_margin_mm
from repairs.services.assessing import deferrals_close
from repairs.services.authority import CERTIFIERS, authorised, operator_on
from repairs.services.due_points import (
    due_point_open,
    due_points_close,
    replacement_due_open,
    stage_clock_open,
)
from repairs.services.inspections import requirement_raise_within
from repairs.services.photographs import photographs_write
from repairs.services.places import (
    Placed,
    item_columns,
    place_columns_of,
    place_try,
)
from repairs.services.repair_entry import Data, RepairEntry, repair_problems

AS_ENTERED = (
    "aircraft", "safe_life_part", "chart_number", "kind", "description", "length_mm",
    "width_mm", "category", "category_reason", "disposition", "approval_basis",
    "released_on", "organisation", "performed_by", "inspected_by", "released_by",
    "legacy", "evidence", "weight_change_g", "arm_mm", "remaining_thickness_mm",
    "blend_depth_mm", "replacement_limit_on", "stage_reached",
    "temporary_limit_cycles", "ata",
)  # fmt: skip
STAGE_2_MONTHS = "stage_2_months"
NO_POLICY = "no policy {key} is recorded for {operator}; record it with its source"
CLOCK_BASIS = "stage 2 of the approval of a repair to PSE or FCS"
SUPERSEDED_BY = "superseded by {number}"
NOT_EMBODIED = "{repair} is {state}; only an embodied repair is removed."
ANSWERED_BY = "answered by {number}"


def repair_record(*, entry: RepairEntry, actor: User | None, at: dt.datetime) -> Repair:
    """An embodied repair, with what follows from its category on the due list."""
    with Writing(
        actor=actor,
        action="repair_record",
        at=at,
        operator=entry.aircraft.operator,
        stream=stream_of(entry.aircraft),
    ) as w:
        return repair_write(w, entry)


def repair_write(w: Writing, entry: RepairEntry) -> Repair:
    """Inside a writing: the repair, its rows, its findings' states and its clocks."""
    if problems := repair_problems(entry):
        raise ValidationError(problems)
    operator = operator_on(entry.aircraft, entry.released_on)
    if entry.released_by is not None and not entry.legacy:
        authorised(
            person=entry.released_by,
            operator=operator,
            scopes=CERTIFIERS,
            on=entry.released_on,
        )
    placed = place_try(entry.aircraft, entry.place_entered)
    repair = w.create(_row(w, entry, placed, operator))
    _rows_write(w, repair, entry)
    photographs_write(w, shown=repair, photos=entry.photographs)
    _clocks_open(w, repair, entry)
    _findings_rectify(w, repair, entry)
    _supersede(w, repair, entry.supersedes)
    return repair


def _row(w: Writing, entry: RepairEntry, placed: Placed, operator: Operator) -> Repair:
    approval, limit = entry.approval, entry.replacement_limit
    same = {name: getattr(entry, name) for name in AS_ENTERED}
    return Repair(
        operator=operator,
        number=number_next(w, operator=operator, kind="R"),
        state=RepairState.EMBODIED,
        approval_document=_document(w, entry, approval) if approval else None,
        approval_page=approval.page if approval else "",
        release_document=_release(w, entry),
        replacement_limit_cycles=limit.cycles,
        replacement_limit_minutes=limit.minutes,
        **counter_columns("at", entry.at),
        **same | place_columns_of(placed) | _item_columns(entry, placed),
    )


def repair_remove(
    *,
    repair: Repair,
    removed_on: dt.date,
    reason: str,
    actor: User | None,
    at: dt.datetime,
) -> Repair:
    """The repair is off the aircraft: its part was replaced, or it was undone."""
    with Writing(
        actor=actor,
        action="repair_remove",
        at=at,
        operator=repair.aircraft.operator,
        stream=stream_of(repair.aircraft),
        reason=reason,
    ) as w:
        row = w.locked(Repair.objects.select_related("aircraft"), pk=repair.pk)
        if row.state != RepairState.EMBODIED:
            state = row.get_state_display()
            raise ValidationError(NOT_EMBODIED.format(repair=row, state=state))
        _end(w, row, RepairState.REMOVED, on=removed_on, reason=reason)
    return row


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


def _rows_write(w: Writing, repair: Repair, entry: RepairEntry) -> None:
    for number, layer in enumerate(entry.layers, 1):
        w.create(
            RepairLayer(
                repair=repair,
                number=number,
                material=layer.material,
                material_entered=layer.material_entered,
                thickness_mm=layer.thickness_mm,
                thickness_entered=layer.thickness_entered,
                batch=layer.batch,
            )
        )
    for number, one in enumerate(entry.fasteners, 1):
        w.create(
            RepairFastener(
                repair=repair,
                number=number,
                fastener=one.fastener,
                diameter_mm=one.diameter_mm,
                pitch_mm=one.pitch_mm,
                edge_distance_mm=one.edge_distance_mm,
                rows=one.rows,
                count=one.count,
            )
        )
    for answered in entry.findings:
        margin = answered.edge_margin_mm
        if margin is None:
            margin = edge_margin_mm(repair, answered.finding)
        w.create(
            RepairFinding(
                repair=repair,
                finding=answered.finding,
                covers=answered.covers,
                damage_removed=answered.damage_removed,
                edge_margin_mm=margin,
            )
        )


def _clocks_open(w: Writing, repair: Repair, entry: RepairEntry) -> None:
    """What the category puts on the due list."""
    if entry.new_requirement is not None:
        requirement_raise_within(w, replace(entry.new_requirement, repair=repair))
    if repair.category == RepairCategory.C:
        replacement_due_open(w, repair=repair, opened_on=entry.released_on)
    pending = repair.category == RepairCategory.PENDING and (
        repair.criticality != Criticality.SECONDARY
    )
    b_pending = (
        repair.category == RepairCategory.B
        and entry.new_requirement is None
        and repair.stage_reached in ("none", "1", "2")
    )
    if pending or b_pending:
        _stage_clock(w, repair)


def _stage_clock(w: Writing, repair: Repair) -> None:
    """The next stage's clock; with no policy recorded it cannot be computed: due."""
    row = policy(repair.operator, STAGE_2_MONTHS, repair.released_on or w.at.date())
    if row is None and repair.temporary_limit_cycles is None:
        missing = NO_POLICY.format(key=STAGE_2_MONTHS, operator=repair.operator)
        due_point_open(
            w,
            origin=repair,
            kind=DueKind.STAGE_CLOCK,
            due=Due(cannot_compute=missing),
            opened_on=repair.released_on or w.at.date(),
            basis=CLOCK_BASIS,
        )
        return
    stage_clock_open(
        w,
        repair=repair,
        stage=3 if repair.stage_reached == "2" else 2,
        months=row.value if row else 0,
        source=f"{row.source} {row.edition}".strip() if row else "",
    )


def _findings_rectify(w: Writing, repair: Repair, entry: RepairEntry) -> None:
    """Rectified when the damage is gone or lies under this repair; else unchanged."""
    for answered in entry.findings:
        if not (answered.covers or answered.damage_removed == "yes"):
            continue
        finding = w.locked(Finding.objects.all(), pk=answered.finding.pk)
        w.change(finding, state=FindingState.RECTIFIED)
        reason = ANSWERED_BY.format(number=repair)
        deferrals_close(w, finding, on=entry.released_on, reason=reason)


def _supersede(w: Writing, repair: Repair, superseded: Sequence[Repair]) -> None:
    for other in superseded:
        row = w.locked(Repair.objects.select_related("aircraft"), pk=other.pk)
        reason = SUPERSEDED_BY.format(number=repair)
        on = repair.released_on or w.at.date()
        w.change(row, superseded_by_id=repair.pk)
        _end(w, row, RepairState.SUPERSEDED, on=on, reason=reason)


def _end(
    w: Writing, repair: Repair, state: RepairState, *, on: dt.date, reason: str
) -> None:
    w.change(repair, state=state, removed_on=on, removal_reason=reason)
    due_points_close(w, origin=repair, on=on, reason=reason)
