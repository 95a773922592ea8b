"""A finding's way from reported to closed, and the guard of each step."""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass

from django.core.exceptions import ValidationError

from fleet.models import Criticality, Person, User
from fleet.selectors.people import policy
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from repairs.measurements import missing
from repairs.models import (
    OPEN_STATES,
    Finding,
    FindingLink,
    FindingState,
    LimitCheck,
    Meaning,
    Measurement,
    OccurrenceReport,
)
from repairs.services.approvals import Signed, approval_write
from repairs.services.authority import ASSESSORS, CERTIFIERS, authorised, operator_on
from repairs.services.due_points import due_points_close
from repairs.services.limits import limits_check

NOT_REPORTED = "{number} is {state}; only a reported finding is assessed."
TO_BE_PLACED = "{number} is to be placed: give a location that can be read first."
NOT_MEASURED = "Measure first: {labels} must be known for a {damage_type}."
UNANSWERED = "Answer first: {asked}"
NO_DATA = "Cite the data it was assessed against: document, revision and page."
NOT_RECTIFIED = (
    "{number} is {state}; only a rectified finding is closed: no damage remains, or "
    "it lies under a released repair."
)
NO_RELEASE = "{number} has no released repair that answers it; record the repair first."
PHOTOGRAPH_FIRST = (
    "{repair} covers damage not shown to be removed; add a photograph taken before "
    "it was covered."
)
REPORTABLE_UNDECIDED = (
    "Decide whether {number} is reportable under {regime}, and say why, before it is "
    "closed."
)
ASIDE_ALREADY = "{number} is {state}; it stays as it is."
REASON_NEEDED = "Say why."
NOT_SAME_AIRCRAFT = "{number} and {earlier} are on different aircraft."
LINKED_LATER = "{earlier} was recorded after {number}; link the later one to it."
CRACK_CRITICAL = "{criticality} crack: rectify before further flight"
CRACK_UNSTATED = "crack, criticality unknown: rectify before further flight"
REPORT_HOURS = "report_hours"


@dataclass(frozen=True, slots=True)
class DataCited:
    """The data a judgement rests on."""

    kind: str
    reference: str
    revision: str
    page: str


@dataclass(frozen=True, slots=True)
class Reportability:
    """The answer to "is this reportable?", and why."""

    reportable: bool
    reason: str


def finding_assess(
    *,
    finding: Finding,
    person: Person,
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
    ) as w:
        return finding_assess_write(
            w,
            finding=w.locked(Finding.objects.all(), pk=finding.pk),
            person=person,
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
    person: Person,
    on: dt.date,
    data: DataCited,
    cause: str = "",
    criticality: str = "",
    criticality_source: str = "",
) -> Finding:
    """Inside a writing: guards, limits check, the assessor's signature, the state."""
    problems = assess_problems(finding)
    if not (data.reference.strip() and data.page.strip()):
        problems.append(NO_DATA)
    if problems:
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
        person=person,
        on=on,
        statement=f"{finding} assessed against {data.reference}, {data.page}",
        document=Signed(data.kind, data.reference, "", data.revision),
        scopes=ASSESSORS,
    )
    return finding


def assess_problems(finding: Finding) -> list[str]:
    """What stands between a reported finding and its assessment; empty: nothing."""
    problems = []
    if finding.state != FindingState.REPORTED:
        state = finding.get_state_display()
        return [NOT_REPORTED.format(number=finding, state=state)]
    if finding.section_id is None:
        problems.append(TO_BE_PLACED.format(number=finding))
    lacking = missing(finding.damage_type, "as_found", known_quantities(finding))
    if lacking:
        problems.append(
            NOT_MEASURED.format(
                labels=", ".join(one.label for one in lacking),
                damage_type=finding.get_damage_type_display(),
            )
        )
    return problems + open_questions(finding)


def open_questions(finding: Finding) -> list[str]:
    rows = finding.questions.filter(answered_at__isnull=True)
    return [UNANSWERED.format(asked=row.asked) for row in rows]


def known_quantities(finding: Finding) -> set[str]:
    """Dimensions known from any measurement of the finding."""
    rows = finding.measurements.filter(values__status="known")
    return set(rows.values_list("values__quantity", flat=True))


def latest_measurement(finding: Finding) -> Measurement | None:
    return finding.measurements.order_by("number").last()


def finding_close(
    *,
    finding: Finding,
    person: Person,
    on: dt.date,
    cause: str,
    actor: User | None,
    at: dt.datetime,
    report: Reportability | None = None,
    reason: str = "",
) -> Finding:
    """Closed by certifying staff: no damage remains, or a released repair covers it."""
    with Writing(
        actor=actor,
        action="finding_close",
        at=at,
        operator=finding.aircraft.operator,
        stream=stream_of(finding.aircraft),
        reason=reason,
    ) as w:
        return finding_close_write(
            w,
            finding=w.locked(Finding.objects.all(), pk=finding.pk),
            person=person,
            on=on,
            cause=cause,
            report=report,
        )


def finding_close_write(
    w: Writing,
    *,
    finding: Finding,
    person: Person,
    on: dt.date,
    cause: str,
    report: Reportability | None = None,
) -> Finding:
    """Inside a writing: guards, the answer on reporting, the release signature."""
    operator = operator_on(finding.aircraft, on)
    authorised(person=person, operator=operator, scopes=CERTIFIERS, on=on)
    if problems := close_problems(finding, report):
        raise ValidationError(problems)
    if report is not None:
        _report(w, finding, report)
    w.change(finding, state=FindingState.CLOSED, cause=cause)
    approval_write(
        w,
        subject=finding,
        meaning=Meaning.RELEASED,
        person=person,
        on=on,
        statement=f"{finding} closed",
    )
    return finding


def close_problems(finding: Finding, report: Reportability | None) -> list[str]:
    """What stands between a rectified finding and its closing."""
    if finding.state != FindingState.RECTIFIED:
        state = finding.get_state_display()
        return [NOT_RECTIFIED.format(number=finding, state=state)]
    problems = []
    rows = list(finding.repair_rows.select_related("repair"))
    released = [row for row in rows if row.repair.released_on is not None]
    if not released:
        problems.append(NO_RELEASE.format(number=finding))
    for row in released:
        hidden = row.covers and row.damage_removed != "yes"
        if hidden and not finding.photographs.filter(role="before_covering").exists():
            problems.append(PHOTOGRAPH_FIRST.format(repair=row.repair))
    if report is None and must_decide_report(finding):
        regime = finding.aircraft.operator.regime
        problems.append(REPORTABLE_UNDECIDED.format(number=finding, regime=regime))
    return problems


def must_decide_report(finding: Finding) -> bool:
    """Beyond a recorded limit, or a crack in PSE or FCS, and not decided yet."""
    if finding.reports.exclude(state="to_assess").exists():
        return False
    beyond = LimitCheck.objects.filter(finding=finding, outcome="beyond").exists()
    return beyond or is_critical_crack(finding)


def is_critical_crack(finding: Finding) -> bool:
    """A crack in PSE or FCS; a criticality nobody stated counts as such."""
    return (
        finding.damage_type == "crack" and finding.criticality != Criticality.SECONDARY
    )


def crack_words(finding: Finding) -> str:
    """What holds for an open crack in PSE or FCS; empty for anything else."""
    if finding.state not in OPEN_STATES or not is_critical_crack(finding):
        return ""
    if finding.criticality == Criticality.UNKNOWN:
        return CRACK_UNSTATED
    return CRACK_CRITICAL.format(criticality=finding.get_criticality_display())


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
        _set_aside(w, finding, FindingState.DUPLICATE)
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
        _set_aside(w, row, FindingState.VOIDED)
    return row


def deferrals_close(w: Writing, finding: Finding, *, on: dt.date, reason: str) -> None:
    """Close the deferral limits that were open for this finding alone or last."""
    for row in finding.disposition_rows.select_related("disposition__aircraft"):
        others = row.disposition.finding_rows.exclude(finding=finding)
        if not others.filter(finding__state=FindingState.DEFERRED).exists():
            due_points_close(w, origin=row.disposition, on=on, reason=reason)


def _set_aside(w: Writing, finding: Finding, state: FindingState) -> None:
    if finding.state not in (FindingState.REPORTED, FindingState.ASSESSED):
        shown = finding.get_state_display()
        raise ValidationError(ASIDE_ALREADY.format(number=finding, state=shown))
    w.change(finding, state=state)


def _report(w: Writing, finding: Finding, report: Reportability) -> None:
    if not report.reason.strip():
        raise ValidationError({"report_reason": REASON_NEEDED})
    operator = finding.aircraft.operator
    clock = policy(operator, REPORT_HOURS, w.at.date())
    due_at = None
    if report.reportable and clock is not None:
        due_at = w.at + dt.timedelta(hours=clock.value)
    w.create(
        OccurrenceReport(
            operator=operator,
            finding=finding,
            regime=operator.regime,
            state="reportable" if report.reportable else "not_reportable",
            reason=report.reason.strip(),
            detected_at=w.at,
            due_at=due_at,
        )
    )
