"""Inspections done, answered and terminated; each opens the next due point."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date, datetime
from typing import Any

from fleet.due import COUNTER_WORDS, Counters, Due, Remaining
from fleet.models import AuthorisationScope, Document, Person, User
from fleet.selectors.life_limits import columns
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from fleet.services.parts import counter_columns
from fleet.services.signing import Proof
from repairs.models import (
    Accomplishment,
    DueKind,
    Finding,
    InspectionRequirement,
    Meaning,
    RequirementState,
    RequirementSubject,
    ZoneInspected,
)
from repairs.selectors.requirement_due import (
    accomplishments_of,
    needed_counters,
    subject_overrun,
)
from repairs.services.approvals import approval_write
from repairs.services.due_points import (
    due_point_close,
    due_point_open,
    due_points_close,
)
from repairs.services.inspections import (
    NO_REASON,
    RequirementRefused,
    dues_open,
    requirement_writing,
)
from repairs.services.manufacture import made_before

INSPECTION = (DueKind.THRESHOLD, DueKind.REPEAT)
IN_FORCE = (RequirementState.EFFECTIVE, RequirementState.TERMINATION_UNVERIFIED)
LEVELS = {"general_visual": "general_visual", "detailed_visual": "detailed"}

NOT_IN_FORCE = "{number} is {state} for this subject; nothing is to be done."
IN_FUTURE = "{day} lies after today, {today}; record the inspection when it is done."
OUT_OF_ORDER = (
    "{day} lies before {last}, when it was last done; correct that one first."
)
COUNTER_MISSING = (
    "Give the {counter} at the inspection; the next one is counted from it."
)
NOT_CURRENT = "That row was corrected before; correct the row that replaced it."
NO_CORRECTION_REASON = "Say why the row is corrected."
CORRECTED = "the accomplishment before it was corrected"
FINDING_MISSING = "Name the finding; a result with a finding has its own record."
NO_EVIDENCE = "Say what shows that the terminating action is in place, and who saw it."
UNVERIFIED = "the terminating action is not verified yet"
ALREADY_DONE = "It has been done here, so it applied; terminate it with evidence."
SAME_PERSON = "The evidence is verified by someone other than who recorded it."
NEEDS_PAPER = (
    "Who did it, if it was not you, did not sign here: name the release document of "
    "the paper original; or choose yourself, and sign it."
)
PERFORMED = "{requirement} performed: {row}"
VERIFIED = "{requirement} terminated: {evidence}"
NO_CLAIM = "No terminating action waits for verification here."


@dataclass(frozen=True)
class Accomplished:
    """A recorded accomplishment, and on which counters it came too late."""

    row: Accomplishment
    overrun: tuple[Remaining, ...]


def accomplishment_record(
    *,
    actor: User | None,
    at: datetime,
    today: date,
    subject: RequirementSubject,
    done_on: date,
    counters: Counters,
    result: str,
    proof: Proof,
    done_by: Person | None = None,
    finding: Finding | None = None,
    release_document: Document | None = None,
    evidence: str = "",
    late_approval: str = "",
    replaces: Accomplishment | None = None,
    reason: str = "",
) -> Accomplished:
    """Record one doing on one subject and open the next due point.

    Signed as performed when who did it is who signs; what another did, or nobody named,
    is recorded from its release document. `counters` are the subject's own at release.
    `late_approval` names the approval of
    lateness, if there was one. A terminating action keeps the item on the list until
    another person has verified its evidence. `replaces` is the row that this one
    corrects, with the reason; what is due next is made again from what holds now.
    """
    requirement = subject.requirement
    stream = stream_of(subject.aircraft) if subject.aircraft else "fleet"
    with requirement_writing(
        actor,
        "accomplishment_correct" if replaces else "accomplishment_record",
        at,
        requirement.operator,
        stream=stream,
        reason=reason,
        origin=proof.how,
    ) as w:
        w.locked(RequirementSubject.objects.all(), pk=subject.pk)
        subject.refresh_from_db(fields=["state", "applies"])
        problems = _done_problems(subject, done_on, counters, today, replaces)
        problems += made_before(subject.aircraft or subject.part, done_on)
        if replaces is not None and not reason.strip():
            problems.append(NO_CORRECTION_REASON)
        if result == "finding" and finding is None:
            problems.append(FINDING_MISSING)
        if result == "terminated" and not evidence.strip():
            problems.append(NO_EVIDENCE)
        if proof.reentered and done_by != proof.person and release_document is None:
            problems.append(NEEDS_PAPER)
        if problems:
            raise RequirementRefused(problems)
        row = w.create(
            Accomplishment(
                subject=subject,
                number=subject.accomplishments.count() + 1,
                done_on=done_on,
                done_by=done_by,
                result=result,
                finding=finding,
                release_document=release_document,
                evidence=evidence,
                late_approved=bool(late_approval.strip()),
                late_approval=late_approval.strip(),
                replaces=replaces,
                **counter_columns("at", counters),
            )
        )
        late = subject_overrun(subject, row)
        _next_due(w, subject, row)
        _looked(w, requirement, row)
        if proof.reentered and done_by == proof.person:
            statement = PERFORMED.format(row=row, requirement=requirement)
            approval_write(
                w,
                subject=row,
                meaning=Meaning.PERFORMED,
                proof=proof,
                on=done_on,
                statement=statement,
            )
    return Accomplished(row, tuple(late))


def _done_problems(
    subject: RequirementSubject,
    done_on: date,
    counters: Counters,
    today: date,
    replaces: Accomplishment | None,
) -> list[str]:
    requirement = subject.requirement
    problems = []
    if subject.state not in IN_FORCE:
        state = subject.get_state_display()
        problems.append(NOT_IN_FORCE.format(number=requirement.number, state=state))
    if done_on > today:
        problems.append(IN_FUTURE.format(day=done_on, today=today))
    done = accomplishments_of(subject)
    if replaces is not None:
        if replaces not in done:
            problems.append(NOT_CURRENT)
    elif done and done_on < done[-1].done_on:
        problems.append(OUT_OF_ORDER.format(day=done_on, last=done[-1].done_on))
    problems += [
        COUNTER_MISSING.format(counter=COUNTER_WORDS[counter][0])
        for counter in needed_counters(requirement)
        if counters[counter] is None
    ]
    return problems


def _next_due(w: Writing, subject: RequirementSubject, row: Accomplishment) -> None:
    if subject.applies == "unanswered":
        w.change(subject, applies="yes")
    if row.result == "terminated":
        w.change(
            subject,
            state=RequirementState.TERMINATION_UNVERIFIED.value,
            terminated_on=row.done_on,
            termination_evidence=row.evidence,
        )
    elif subject.state == RequirementState.TERMINATION_UNVERIFIED and row.replaces:
        w.change(subject, state=RequirementState.EFFECTIVE.value)
    _close(w, subject, row)
    opened = dues_open(w, subject, row.done_on, replacement=False)
    if row.result == "terminated" and not opened:
        due_point_open(
            w,
            origin=subject,
            kind=DueKind.REPEAT,
            due=Due(cannot_compute=UNVERIFIED),
            opened_on=row.done_on,
            basis=UNVERIFIED,
            after=row,
        )


def _close(w: Writing, subject: RequirementSubject, row: Accomplishment) -> None:
    """What was open is done; what a corrected row had opened never held."""
    if row.replaces is None:
        due_points_close(
            w, origin=subject, on=row.done_on, reason="done", by=row, kinds=INSPECTION
        )
        return
    for point in subject.due_points.filter(closed_on__isnull=True, kind__in=INSPECTION):
        due_point_close(w, point, on=point.opened_on, reason=CORRECTED)


def _looked(
    w: Writing, requirement: InspectionRequirement, row: Accomplishment
) -> None:
    """Every inspection of an aircraft is a look that rates per inspection count."""
    subject, before = row.subject, row.replaces
    if subject.aircraft is None:
        return
    seen: dict[str, Any] = {
        "inspected_on": row.done_on,
        "inspected_by_id": row.done_by_id,
        "found": row.result == "finding",
        **counter_columns("at", columns(row, "at")),
    }
    place = {"aircraft": subject.aircraft, "area": requirement.area}
    if before is not None:
        look = ZoneInspected.objects.filter(**place, inspected_on=before.done_on).last()
        if look is not None:
            w.change(look, **seen)
        return
    level = LEVELS.get(requirement.method, "special")
    w.create(ZoneInspected(**place, level=level, method=requirement.method, **seen))


def subject_not_applicable(
    *,
    actor: User | None,
    at: datetime,
    subject: RequirementSubject,
    on: date,
    reason: str,
) -> None:
    """Answer that the requirement does not apply here, with the reason."""
    requirement = subject.requirement
    with requirement_writing(
        actor, "subject_not_applicable", at, requirement.operator, reason=reason
    ) as w:
        problems = [] if reason.strip() else [NO_REASON]
        if accomplishments_of(subject):
            problems.append(ALREADY_DONE)
        if problems:
            raise RequirementRefused(problems)
        w.change(subject, applies="no", reason=reason.strip())
        due_points_close(w, origin=subject, on=on, reason=f"does not apply: {reason}")


def termination_verify(
    *,
    actor: User | None,
    at: datetime,
    subject: RequirementSubject,
    on: date,
    evidence: str,
    proof: Proof,
) -> None:
    """A second person confirms the terminating action; only then it leaves the list."""
    requirement = subject.requirement
    with requirement_writing(
        actor, "termination_verify", at, requirement.operator, origin=proof.how
    ) as w:
        claim = subject.accomplishments.filter(result="terminated").last()
        problems = [] if evidence.strip() else [NO_EVIDENCE]
        if subject.state != RequirementState.TERMINATION_UNVERIFIED or claim is None:
            problems.append(NO_CLAIM)
        elif _same_hands(claim, actor, proof):
            problems.append(SAME_PERSON)
        if problems or claim is None:
            raise RequirementRefused(problems)
        w.change(
            subject,
            state=RequirementState.TERMINATED.value,
            termination_evidence=f"{subject.termination_evidence}; {evidence.strip()}",
        )
        due_points_close(w, origin=subject, on=on, reason="terminating action verified")
        approval_write(
            w,
            subject=claim,
            meaning=Meaning.CHECKED,
            proof=proof,
            on=on,
            statement=VERIFIED.format(requirement=requirement, evidence=evidence),
            scopes=tuple(AuthorisationScope),
        )
        open_subjects = requirement.subjects.exclude(
            state=RequirementState.TERMINATED
        ).exclude(applies="no")
        if not open_subjects.exists():
            w.change(requirement, state=RequirementState.TERMINATED.value)


def _same_hands(claim: Accomplishment, actor: User | None, proof: Proof) -> bool:
    """Whether who verifies also recorded it, or did it."""
    recorded = actor is not None and claim.entered_by_id == actor.pk
    return recorded or claim.done_by == proof.person
