"""Blind re-entry: another person keys the same values from the document again.

The second person sees nothing of the first. Both are made into text by the same
function; they agree when the texts are equal. A row that awaits its re-entry is in
force all the while, marked unverified.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from datetime import datetime
from typing import Any

from fleet.amounts import amount_read
from fleet.canonical import canonical, digest
from fleet.models import KeyedState, LifeLimit, Operator, User
from fleet.refusals import Refused
from fleet.services.history import Writing
from fleet.services.part_records import life_limit_put_in_force
from repairs.models import BlindReentry, InspectionRequirement, RequirementLimit
from repairs.services.requirement_draft import LimitEntry

SAME_PERSON = (
    "{name} keyed it first; the second keying is by another person, from the document."
)
NOT_AWAITED = "{limit} is {state}; no second keying is awaited."


class ReentryRefused(Refused):
    """The second keying is by the first person, or by nobody."""


def requirement_rekey(
    *,
    actor: User,
    at: datetime,
    requirement: InspectionRequirement,
    limits: Sequence[LimitEntry],
    applicability: Iterable[str],
) -> BlindReentry:
    """Key limits and applicability (registrations, serials) of a requirement again.
    Raises AmountError when a limit cannot be read."""
    subjects = requirement.subjects.select_related("aircraft", "part")
    held = _requirement_text(
        (_stored(row) for row in requirement.limits.all()),
        (str(row.aircraft or row.part) for row in subjects),
    )
    again = _requirement_text((_typed(entry) for entry in limits), applicability)
    with _writing(actor, "requirement_rekey", at, requirement.operator) as w:
        row = _reentry(
            w, requirement.operator, requirement.keyed_by, held, again, requirement
        )
        if row.agrees:
            w.change(requirement, verified=True)
    return row


def life_limit_rekey(
    *, actor: User, at: datetime, limit: LifeLimit, entered: str, base: str
) -> BlindReentry:
    """Key a life limit again; agreeing puts it in force. Raises AmountError."""
    operator = limit.part_number.operator
    counter, value = amount_read(entered)
    held = canonical([limit.counter, limit.value, limit.base])
    again = canonical([counter.value, value, base])
    with _writing(actor, "life_limit_rekey", at, operator) as w:
        now = w.locked(LifeLimit.objects.all(), pk=limit.pk)
        if now.state != KeyedState.KEYED:
            state = now.get_state_display()
            raise ReentryRefused([NOT_AWAITED.format(limit=limit, state=state)])
        row = _reentry(w, operator, limit.entered_by, held, again, limit)
        if row.agrees:
            life_limit_put_in_force(w, limit=now)
    return row


def _reentry(
    w: Writing,
    operator: Operator,
    first: User | None,
    held: str,
    again: str,
    subject: InspectionRequirement | LifeLimit,
) -> BlindReentry:
    if first is not None and w.actor == first:
        raise ReentryRefused([SAME_PERSON.format(name=first)])
    column = "life_limit" if isinstance(subject, LifeLimit) else "requirement"
    row: BlindReentry = w.create(
        BlindReentry(
            operator=operator,
            first_keyed_by=first,
            keyed_by=w.actor,
            keyed_at=w.at,
            content=again,
            first_digest=digest(held),
            content_digest=digest(again),
            agrees=held == again,
            **{column: subject},
        )
    )
    return row


def _requirement_text(limits: Iterable[list[Any]], subjects: Iterable[str]) -> str:
    named = sorted(name.strip().upper() for name in subjects if name.strip())
    return canonical({"limits": sorted(limits, key=str), "applies_to": named})


def _stored(row: RequirementLimit) -> list[Any]:
    return [row.phase, row.counter, row.value, row.base, row.combine]


def _typed(entry: LimitEntry) -> list[Any]:
    counter, value = amount_read(entry.entered)
    return [entry.phase, counter.value, value, entry.base, entry.combine]


def _writing(actor: User, action: str, at: datetime, operator: Operator) -> Writing:
    return Writing(actor=actor, action=action, at=at, operator=operator)
