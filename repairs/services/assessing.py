"""A finding's way from reported to closed, and the guard of each step."""

from __future__ import annotations

import datetime as dt

from django.core.exceptions import ValidationError

from fleet.models import Person, User
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from fleet.services.signing import Proof
from repairs.models import (
    Finding,
    FindingLink,
    FindingState,
    Meaning,
    Measurement,
)
from repairs.services.approvals import Signed, approval_write
from repairs.services.authority import authorised, operator_on
from repairs.services.due_points import due_points_close
from repairs.services.finding_guards import STEPS, DataCited, Facts, step_problems
from repairs.services.limits import limits_check
from repairs.services.reports import (
    Reportability,
    finding_decide_write,
    finding_questions_write,
)

REASON_NEEDED = "Say why."
NOT_SAME_AIRCRAFT = "{number} and {earlier} are on different aircraft."
LINKED_LATER = "{earlier} was recorded after {number}; link the later one to it."


def finding_assess(
    *,
    finding: Finding,
    proof: Proof,
    on: dt.date,
    data: DataCited,
    actor: User | None,
    at: dt.datetime,
    cause: str = "",
    criticality: str = "",
    criticality_source: str = "",
) -> Finding:
    """Assessed: measured, placed, every question answered, against cited data."""
    with Writing(
        actor=actor,
        action="finding_assess",
        at=at,
        operator=finding.aircraft.operator,
        stream=stream_of(finding.aircraft),
        reason=f"{data.reference} rev {data.revision}, {data.page}",
        origin=proof.how,
    ) as w:
        return finding_assess_write(
            w,
            finding=w.locked(Finding.objects.all(), pk=finding.pk),
            proof=proof,
            on=on,
            data=data,
            cause=cause,
            criticality=criticality,
            criticality_source=criticality_source,
        )


def finding_assess_write(
    w: Writing,
    *,
    finding: Finding,
    proof: Proof,
    on: dt.date,
    data: DataCited,
    cause: str = "",
    criticality: str = "",
    criticality_source: str = "",
) -> Finding:
    """Inside a writing: guards, limits check, the assessor's signature, the state."""
    if problems := step_problems("assess", finding, Facts(data=data)):
        raise ValidationError(problems)
    columns: dict[str, object] = {"state": FindingState.ASSESSED}
    if cause:
        columns["cause"] = cause
    if criticality and criticality != finding.criticality:
        columns |= {
            "criticality": criticality,
            "criticality_source": criticality_source,
        }
    w.change(finding, **columns)
    limits_check(w, finding=finding, measurement=latest_measurement(finding))
    approval_write(
        w,
        subject=finding,
        meaning=Meaning.CHECKED,
        proof=proof,
        on=on,
        statement=f"{finding} assessed against {data.reference}, {data.page}",
        document=Signed(data.kind, data.reference, "", data.revision),
        scopes=STEPS["assess"].scopes,
    )
    finding_questions_write(w, finding)
    return finding


def assess_problems(finding: Finding) -> list[str]:
    """What stands between a reported finding and its assessment; empty: nothing."""
    return step_problems("assess", finding)


def latest_measurement(finding: Finding) -> Measurement | None:
    return finding.measurements.order_by("number").last()


def finding_close(
    *,
    finding: Finding,
    proof: Proof,
    on: dt.date,
    cause: str,
    actor: User | None,
    at: dt.datetime,
    report: Reportability | None = None,
    reason: str = "",
    release_reference: str = "",
) -> Finding:
    """Closed by certifying staff: no damage remains, or a released repair covers it."""
    with Writing(
        actor=actor,
        action="finding_close",
        at=at,
        operator=finding.aircraft.operator,
        stream=stream_of(finding.aircraft),
        reason=reason,
        origin=proof.how,
    ) as w:
        return finding_close_write(
            w,
            finding=w.locked(Finding.objects.all(), pk=finding.pk),
            proof=proof,
            on=on,
            facts=Facts(
                report=report,
                cause=cause,
                reason=reason,
                release_reference=release_reference,
            ),
        )


def finding_close_write(
    w: Writing, *, finding: Finding, proof: Proof, on: dt.date, facts: Facts
) -> Finding:
    """Inside a writing: guards, the answer on reporting, the release signature."""
    operator = operator_on(finding.aircraft, on)
    scopes = STEPS["close"].scopes
    authorised(person=proof.person, operator=operator, scopes=scopes, on=on)
    if problems := step_problems("close", finding, facts):
        raise ValidationError(problems)
    if facts.report is not None:
        finding_decide_write(w, finding, facts.report, decided_by=proof.person)
    w.change(finding, state=FindingState.CLOSED, cause=facts.cause)
    reference = facts.release_reference.strip()
    approval_write(
        w,
        subject=finding,
        meaning=Meaning.RELEASED,
        proof=proof,
        on=on,
        statement=f"{finding} closed",
        document=Signed("release", reference) if reference else None,
    )
    return finding


def finding_link(
    *,
    finding: Finding,
    earlier: Finding,
    kind: str,
    decided_by: Person | None,
    on: dt.date,
    actor: User | None,
    at: dt.datetime,
) -> FindingLink:
    """The answer to "is it the same damage?"; a duplicate report is set aside."""
    if finding.aircraft_id != earlier.aircraft_id:
        raise ValidationError(NOT_SAME_AIRCRAFT.format(number=finding, earlier=earlier))
    if earlier.pk > finding.pk:
        raise ValidationError(LINKED_LATER.format(number=finding, earlier=earlier))
    with Writing(
        actor=actor,
        action="finding_link",
        at=at,
        operator=finding.aircraft.operator,
        stream=stream_of(finding.aircraft),
    ) as w:
        return finding_link_write(
            w,
            finding=w.locked(Finding.objects.all(), pk=finding.pk),
            earlier=earlier,
            kind=kind,
            decided_by=decided_by,
            on=on,
        )


def finding_link_write(
    w: Writing,
    *,
    finding: Finding,
    earlier: Finding,
    kind: str,
    decided_by: Person | None,
    on: dt.date,
) -> FindingLink:
    """Inside a writing: the link, and for a duplicate report the state."""
    link = w.create(
        FindingLink(
            finding=finding,
            earlier=earlier,
            kind=kind,
            decided_by=decided_by,
            decided_on=on,
        )
    )
    if kind == "duplicate_report":
        _set_aside(w, finding, "duplicate")
    return link


def finding_void(
    *, finding: Finding, reason: str, actor: User | None, at: dt.datetime
) -> Finding:
    """Entered by mistake: it stays visible, with the reason."""
    if not reason.strip():
        raise ValidationError({"reason": REASON_NEEDED})
    with Writing(
        actor=actor,
        action="finding_void",
        at=at,
        operator=finding.aircraft.operator,
        stream=stream_of(finding.aircraft),
        reason=reason.strip(),
    ) as w:
        row = w.locked(Finding.objects.all(), pk=finding.pk)
        _set_aside(w, row, "void")
    return row


def deferrals_close(w: Writing, finding: Finding, *, on: dt.date, reason: str) -> None:
    """Close the deferral limits that were open for this finding alone or last."""
    for row in finding.disposition_rows.select_related("disposition__aircraft"):
        others = row.disposition.finding_rows.exclude(finding=finding)
        if not others.filter(finding__state=FindingState.DEFERRED).exists():
            due_points_close(w, origin=row.disposition, on=on, reason=reason)


def _set_aside(w: Writing, finding: Finding, step: str) -> None:
    if problems := step_problems(step, finding):
        raise ValidationError(problems)
    w.change(finding, state=STEPS[step].to)
