"""Inspection requirements raised and put in force.

A requirement is on the due list from the moment it is in force, also while it waits
for its second keying: a two-person rule never keeps an item off the list.
"""

from __future__ import annotations

from datetime import date, datetime

from django.core.exceptions import ValidationError

from fleet.amounts import amount_read
from fleet.models import Aircraft, Operator, User
from fleet.refusals import Refused
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from fleet.services.numbers import number_next
from repairs.models import (
    DueKind,
    InspectionRequirement,
    RequirementLimit,
    RequirementState,
    RequirementSubject,
)
from repairs.selectors.requirement_due import (
    subject_dues,
)
from repairs.services.due_points import due_point_open
from repairs.services.requirement_draft import (
    LimitEntry,
    RequirementDraft,
    draft_problems,
    evaluation_approved,
)

NOT_IN_FORCE = "{number} is {state}; only one in force is answered."
NO_REASON = "Say why it does not apply."
NOT_DRAFT = "{number} is {state}; only a draft is put in force."


class RequirementRefused(Refused):
    """A requirement or its answer that cannot stand as given."""


def requirement_raise(
    *, actor: User | None, at: datetime, draft: RequirementDraft
) -> InspectionRequirement:
    """Record a requirement and put it in force."""
    problems = draft_problems(draft)
    if problems:
        raise RequirementRefused(problems)
    with requirement_writing(actor, "requirement_raise", at, draft.operator) as w:
        requirement = requirement_write(w, draft)
        if requirement.state == RequirementState.DRAFT:
            requirement_put_in_force(w, requirement)
    return requirement


def requirement_raise_within(
    w: Writing, draft: RequirementDraft
) -> InspectionRequirement:
    """The same inside another service's history entry: its own record is the origin."""
    problems = draft_problems(draft)
    if problems:
        raise ValidationError(problems)
    requirement = requirement_write(w, draft)
    if requirement.state == RequirementState.DRAFT:
        requirement_put_in_force(w, requirement)
    return requirement


def requirement_make_effective(
    *, actor: User | None, at: datetime, requirement: InspectionRequirement
) -> None:
    """Put a draft in force: its due points open."""
    operator = requirement.operator
    with requirement_writing(actor, "requirement_make_effective", at, operator) as w:
        locked = w.locked(InspectionRequirement.objects.all(), pk=requirement.pk)
        if locked.state != RequirementState.DRAFT:
            state = locked.get_state_display()
            raise RequirementRefused(
                [NOT_DRAFT.format(number=locked.number, state=state)]
            )
        requirement_put_in_force(w, requirement)


def requirement_write(w: Writing, draft: RequirementDraft) -> InspectionRequirement:
    """Write the rows of a checked draft inside another service's history entry. That no
    inspection is needed is a statement of its own: terminated from the start."""
    evaluation = draft.evaluation
    state = RequirementState.TERMINATED if draft.none_needed else RequirementState.DRAFT
    requirement = w.create(
        InspectionRequirement(
            operator=draft.operator,
            number=number_next(w, operator=draft.operator, kind="I"),
            title=draft.title,
            requirement_class=draft.requirement_class,
            source_document=draft.source_document,
            source_page=draft.source_page,
            finding=draft.finding,
            repair=draft.repair,
            event=draft.event,
            disposition=draft.disposition,
            evaluation=evaluation,
            sisters=draft.sisters,
            state=state,
            interim=evaluation is not None and not evaluation_approved(evaluation),
            task=draft.task,
            method=draft.method,
            procedure=draft.procedure,
            area=draft.area,
            access=draft.access,
            criteria=draft.criteria,
            applicability=draft.applicability,
            anchor=draft.anchor,
            calendar=draft.calendar,
            window_percent=draft.window_percent,
            policy_source=draft.policy_source,
            assumed_minutes_per_cycle=draft.assumed_minutes_per_cycle,
            effective_on=draft.effective_on,
            keyed_by=w.actor,
        )
    )
    for entry in draft.limits:
        w.create(_limit(requirement, entry))
    applies = "unanswered" if draft.sisters else "yes"
    subjects = [{"aircraft": x} for x in draft.aircraft]
    subjects += [{"part": x} for x in draft.parts]  # type: ignore[dict-item]
    for subject in subjects:
        w.create(
            RequirementSubject(
                requirement=requirement, applies=applies, state=state, **subject
            )
        )
    return requirement


def _limit(requirement: InspectionRequirement, entry: LimitEntry) -> RequirementLimit:
    counter, value = amount_read(entry.entered)
    return RequirementLimit(
        requirement=requirement,
        phase=entry.phase,
        group=entry.group,
        combine=entry.combine,
        counter=counter.value,
        value=value,
        entered=entry.entered.strip(),
        base=entry.base,
        base_on=entry.base_on,
        base_value=entry.base_value,
        base_requirement=entry.base_requirement,
        tolerance=amount_read(entry.tolerance)[1] if entry.tolerance else 0,
        tolerance_source=entry.tolerance_source,
    )


def requirement_put_in_force(w: Writing, requirement: InspectionRequirement) -> None:
    """Open the due points of every subject, inside another service's history entry."""
    w.change(requirement, state=RequirementState.EFFECTIVE.value)
    for subject in requirement.subjects.select_related("aircraft", "part"):
        w.change(subject, state=RequirementState.EFFECTIVE.value)
        dues_open(w, subject, requirement.effective_on)


def subject_add(
    *,
    actor: User | None,
    at: datetime,
    requirement: InspectionRequirement,
    aircraft: Aircraft,
    on: date,
    applies: bool,
    reason: str = "",
) -> RequirementSubject:
    """Answer for an aircraft that a requirement did not name: it applies and falls due
    from now on, or it does not, with the reason."""
    problems = []
    if requirement.state != RequirementState.EFFECTIVE:
        state = requirement.get_state_display()
        problems.append(NOT_IN_FORCE.format(number=requirement.number, state=state))
    if not applies and not reason.strip():
        problems.append(NO_REASON)
    if problems:
        raise RequirementRefused(problems)
    with requirement_writing(
        actor, "subject_add", at, requirement.operator, stream=stream_of(aircraft)
    ) as w:
        subject = w.create(
            RequirementSubject(
                requirement=requirement,
                aircraft=aircraft,
                applies="yes" if applies else "no",
                reason=reason.strip(),
                state=RequirementState.EFFECTIVE,
            )
        )
        if applies:
            dues_open(w, subject, on)
    return subject


def dues_open(
    w: Writing, subject: RequirementSubject, on: date, *, replacement: bool = True
) -> int:
    """Open what is due next; the replacement limit only when the subject begins."""
    dues = [
        item
        for item in subject_dues(subject)
        if replacement or item.kind is not DueKind.REPLACE
    ]
    for next_one in dues:
        due_point_open(
            w,
            origin=subject,
            kind=next_one.kind,
            due=next_one.due,
            opened_on=on,
            basis=next_one.basis,
            group=next_one.group,
            after=next_one.after,
        )
    return len(dues)


def requirement_writing(
    actor: User | None,
    action: str,
    at: datetime,
    operator: Operator,
    *,
    stream: str = "fleet",
    reason: str = "",
    origin: str = "",
) -> Writing:
    return Writing(
        actor=actor,
        action=action,
        at=at,
        stream=stream,
        operator=operator,
        reason=reason,
        origin=origin,
    )
