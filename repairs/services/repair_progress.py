"""A repair under way: begun, its steps done one by one, judged by an inspector."""

from __future__ import annotations

import datetime as dt

from django.core.exceptions import ValidationError

from fleet.models import Person, User
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from repairs.models import Repair, RepairState, RepairStep
from repairs.services.repair_ends import UNDER_WAY
from repairs.services.repair_entry import Step

NOT_PLANNED = "{repair} is {state}; only a planned repair is begun."
NOT_UNDER_WAY = "{repair} is {state}; its steps are recorded before the release."
DONE_ALREADY = "Step {number} was done on {done_on} by {done_by}."
TITLE_NEEDED = "Say what the step is."


def repair_start(*, repair: Repair, actor: User | None, at: dt.datetime) -> Repair:
    """Work on it has begun."""
    with _writing("repair_start", repair, actor, at) as w:
        row = w.locked(Repair.objects.all(), pk=repair.pk)
        if row.state != RepairState.PLANNED:
            state = row.get_state_display()
            raise ValidationError(NOT_PLANNED.format(repair=row, state=state))
        w.change(row, state=RepairState.IN_WORK)
    return row


def repair_step_add(
    *, repair: Repair, step: Step, actor: User | None, at: dt.datetime
) -> RepairStep:
    """One more part of the repair, done or still to be done."""
    with _writing("repair_step_add", repair, actor, at) as w:
        row = _under_way(w, repair)
        if not step.title.strip():
            raise ValidationError({"title": TITLE_NEEDED})
        made = w.create(
            RepairStep(
                repair=row,
                number=row.steps.count() + 1,
                title=step.title.strip(),
                option=step.option.strip(),
                done_on=step.done_on,
                done_by=step.done_by,
            )
        )
        _in_work(w, row, step.done_on)
    return made


def repair_step_do(
    *,
    step: RepairStep,
    option: str,
    done_on: dt.date,
    done_by: Person,
    actor: User | None,
    at: dt.datetime,
) -> RepairStep:
    """A step was done: when, by whom, and by which option of the data."""
    with _writing("repair_step_do", step.repair, actor, at) as w:
        repair = _under_way(w, step.repair)
        row = w.locked(RepairStep.objects.all(), pk=step.pk)
        if row.done_on is not None:
            raise ValidationError(
                DONE_ALREADY.format(
                    number=row.number, done_on=row.done_on, done_by=row.done_by
                )
            )
        w.change(
            row,
            option=option.strip() or row.option,
            done_on=done_on,
            done_by_id=done_by.pk,
        )
        _in_work(w, repair, done_on)
    return row


def _in_work(w: Writing, repair: Repair, done_on: dt.date | None) -> None:
    if done_on is not None and repair.state == RepairState.PLANNED:
        w.change(repair, state=RepairState.IN_WORK)


def _under_way(w: Writing, repair: Repair) -> Repair:
    row = w.locked(Repair.objects.all(), pk=repair.pk)
    if row.state not in UNDER_WAY:
        state = row.get_state_display()
        raise ValidationError(NOT_UNDER_WAY.format(repair=row, state=state))
    return row


def _writing(
    action: str, repair: Repair, actor: User | None, at: dt.datetime
) -> Writing:
    return Writing(
        actor=actor,
        action=action,
        at=at,
        operator=repair.aircraft.operator,
        stream=stream_of(repair.aircraft),
    )
