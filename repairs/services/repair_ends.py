"""How a repair ends: superseded, removed, cancelled; its inspections end with it."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence

from django.core.exceptions import ValidationError

from fleet.models import User
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from repairs.models import (
    Finding,
    FindingState,
    InspectionRequirement,
    Repair,
    RepairFinding,
    RepairState,
    RequirementState,
)
from repairs.services.due_points import due_points_close

LIVE = (
    RequirementState.DRAFT,
    RequirementState.EFFECTIVE,
    RequirementState.SUSPENDED,
    RequirementState.TERMINATION_UNVERIFIED,
)
UNDER_WAY = (RepairState.PLANNED, RepairState.IN_WORK)
ANSWERED = (FindingState.RECTIFIED, FindingState.CLOSED)

SUPERSEDED_BY = "superseded by {number}"
ENDED_WITH = "{repair} {state}: {reason}"
NOT_EMBODIED = "{repair} is {state}; only an embodied repair is removed."
NOT_UNDER_WAY = (
    "{repair} is {state}; only a planned repair or one in work is cancelled."
)
BEFORE_RELEASE = "{day} lies before its release, {released_on}."
REASON_NEEDED = "Say why, in words that serve whoever reads it in twenty years."


def repair_remove(
    *,
    repair: Repair,
    removed_on: dt.date,
    reason: str,
    actor: User | None,
    at: dt.datetime,
    damage_gone: bool = False,
) -> Repair:
    """The repair is off the aircraft: its part was replaced, or it was undone.

    Damage that it hid and that is not shown to be removed stands open again, unless it
    left with the part: `damage_gone`.
    """
    with Writing(
        actor=actor,
        action="repair_remove",
        at=at,
        operator=repair.aircraft.operator,
        stream=stream_of(repair.aircraft),
        reason=reason,
    ) as w:
        row = _locked(w, repair)
        if row.state != RepairState.EMBODIED:
            state = row.get_state_display()
            raise ValidationError(NOT_EMBODIED.format(repair=row, state=state))
        if not reason.strip():
            raise ValidationError({"reason": REASON_NEEDED})
        if row.released_on is not None and removed_on < row.released_on:
            early = BEFORE_RELEASE.format(day=removed_on, released_on=row.released_on)
            raise ValidationError({"removed_on": early})
        repair_end(w, row, RepairState.REMOVED, on=removed_on, reason=reason)
        _uncover(w, row, gone=damage_gone)
    return row


def repair_cancel(
    *, repair: Repair, reason: str, on: dt.date, actor: User | None, at: dt.datetime
) -> Repair:
    """It will not be done; the record stays, and answers nothing."""
    with Writing(
        actor=actor,
        action="repair_cancel",
        at=at,
        operator=repair.aircraft.operator,
        stream=stream_of(repair.aircraft),
        reason=reason,
    ) as w:
        row = _locked(w, repair)
        if row.state not in UNDER_WAY:
            state = row.get_state_display()
            raise ValidationError(NOT_UNDER_WAY.format(repair=row, state=state))
        if not reason.strip():
            raise ValidationError({"reason": REASON_NEEDED})
        repair_end(w, row, RepairState.CANCELLED, on=on, reason=reason)
    return row


def supersede_write(w: Writing, repair: Repair, superseded: Sequence[Repair]) -> None:
    """Inside a writing: the earlier repairs lie under this one, or gave way to it."""
    for other in superseded:
        row = _locked(w, other)
        reason = SUPERSEDED_BY.format(number=repair)
        on = repair.released_on or w.at.date()
        w.change(row, superseded_by_id=repair.pk)
        repair_end(w, row, RepairState.SUPERSEDED, on=on, reason=reason)


def repair_end(
    w: Writing, repair: Repair, state: RepairState, *, on: dt.date, reason: str
) -> None:
    """The end of a repair, and of every clock and inspection that came with it."""
    w.change(repair, state=state, removed_on=on, removal_reason=reason)
    due_points_close(w, origin=repair, on=on, reason=reason)
    words = ENDED_WITH.format(repair=repair, state=state.label, reason=reason)
    rows = InspectionRequirement.objects.filter(repair=repair, state__in=LIVE)
    for requirement in rows:
        _inspection_end(w, requirement, on, words)


def _inspection_end(
    w: Writing, requirement: InspectionRequirement, on: dt.date, words: str
) -> None:
    """What was done before stays; nothing of it is due any more."""
    subjects = requirement.subjects.filter(state__in=LIVE)
    for subject in subjects.select_related("aircraft", "part"):
        w.change(
            subject,
            state=RequirementState.TERMINATED.value,
            terminated_on=on,
            termination_evidence=words,
        )
        due_points_close(w, origin=subject, on=on, reason=words)
    w.change(requirement, state=RequirementState.TERMINATED.value)


def _uncover(w: Writing, repair: Repair, *, gone: bool) -> None:
    """Damage that only lay under the repair is in the open again, or went with it."""
    if gone:
        return
    rows = RepairFinding.objects.filter(repair__in=_lying_under(repair), covers=True)
    for row in rows.exclude(damage_removed="yes"):
        finding = w.locked(Finding.objects.all(), pk=row.finding_id)
        if finding.state in ANSWERED and not _hidden_elsewhere(finding, repair):
            w.change(finding, state=FindingState.ASSESSED)


def _lying_under(repair: Repair) -> list[Repair]:
    """The repair and all that gave way to it, on through the chain."""
    found, todo = [repair], [repair]
    while todo:
        earlier = list(todo.pop().supersedes.all())
        found += earlier
        todo += earlier
    return found


def _hidden_elsewhere(finding: Finding, repair: Repair) -> bool:
    others = finding.repair_rows.exclude(repair=repair)
    rows = others.filter(repair__state=RepairState.EMBODIED)
    return any(row.covers or row.damage_removed == "yes" for row in rows)


def _locked(w: Writing, repair: Repair) -> Repair:
    return w.locked(Repair.objects.select_related("aircraft"), pk=repair.pk)
