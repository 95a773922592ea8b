"""The required inspection of a repair: accepted, or rejected until it is answered.

A rejection is answered only by someone who holds an inspection authorisation (R5): the
inspector who rejected it, after rework, or another inspector who overrules it; never
by certifying or engineering authority (14 CFR 121.369(b)).
"""

from __future__ import annotations

import datetime as dt

from django.core.exceptions import ValidationError

from fleet.models import Person, User
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from fleet.services.signing import Proof
from repairs.models import Approval, Meaning, Repair
from repairs.selectors.repair_inspections import INSPECTION_LINE, rejections_open
from repairs.services.approvals import approval_write
from repairs.services.repair_ends import UNDER_WAY

NOT_UNDER_WAY = "{repair} is {state}; it is inspected before its release."
STATEMENT_NEEDED = "Say what was inspected, and what was found."
NOT_OPEN = "That rejection is answered already, or belongs to another repair."
ANSWER_FIRST = (
    "{rejection} stands against it; choose the rejection that this inspection answers."
)
OWN_WORK = "{person} performed the step {title}; another person inspects it."


def repair_inspect(
    *,
    repair: Repair,
    accepted: bool,
    statement: str,
    on: dt.date,
    proof: Proof,
    actor: User | None,
    at: dt.datetime,
    answers: Approval | None = None,
) -> Approval:
    """An inspector's signature: inspected and accepted, or rejected.

    `answers` is the rejection that an acceptance overrules, or answers after rework.
    """
    with Writing(
        actor=actor,
        action="repair_inspect",
        at=at,
        operator=repair.aircraft.operator,
        stream=stream_of(repair.aircraft),
        reason=statement,
        origin=proof.how,
    ) as w:
        row = w.locked(Repair.objects.select_related("aircraft"), pk=repair.pk)
        problems = _problems(row, proof.person, statement)
        problems += _answer_problems(row, accepted, answers)
        if problems:
            raise ValidationError(problems)
        return approval_write(
            w,
            subject=row,
            meaning=Meaning.INSPECTED if accepted else Meaning.REJECTED,
            proof=proof,
            on=on,
            statement=statement.strip(),
            scopes=INSPECTION_LINE,
            overrules=answers,
        )


def _problems(repair: Repair, person: Person, statement: str) -> list[str]:
    problems = []
    if repair.state not in UNDER_WAY:
        state = repair.get_state_display()
        problems.append(NOT_UNDER_WAY.format(repair=repair, state=state))
    if not statement.strip():
        problems.append(STATEMENT_NEEDED)
    problems += [
        OWN_WORK.format(person=person, title=step.title)
        for step in repair.steps.all()
        if step.done_by_id is not None and step.done_by_id == person.pk
    ]
    return problems


def _answer_problems(
    repair: Repair, accepted: bool, answers: Approval | None
) -> list[str]:
    standing = rejections_open(repair)
    if answers is not None and (not accepted or answers not in standing):
        return [NOT_OPEN]
    if accepted and standing and answers is None:
        return [ANSWER_FIRST.format(rejection=one) for one in standing]
    return []
