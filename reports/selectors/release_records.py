"""Findings, repairs and events of one aircraft that stand open, one line each.

A fixed number of queries; what has a limit is on the due list and is not read here.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field
from datetime import date

from django.db.models import Prefetch, Q

from fleet.amounts import counters_write
from fleet.due import Counters
from fleet.models import Aircraft, Criticality
from fleet.selectors.applicability import applies_to
from repairs.models import (
    APPROVING,
    ASIDE_STATES,
    HOLDER_DOCUMENTS,
    IN_LIMITS,
    Approval,
    CorrosionLevel,
    Disposition,
    DispositionFinding,
    DueKind,
    DuePoint,
    Event,
    EventPhase,
    Finding,
    FindingQuestion,
    FindingState,
    LimitCheck,
    Meaning,
    OccurrenceReport,
    Repair,
    RepairRequired,
    RepairState,
    RepairStep,
    SubstantiationFinding,
)
from repairs.selectors.hidden import with_hiding
from repairs.selectors.neighbours import findings_shown
from repairs.selectors.repair_inspections import INSPECTION_LINE
from repairs.selectors.report_triggers import LEVEL_TO_ASK, UNDECIDED

STANDING = (RepairState.PLANNED, RepairState.IN_WORK, RepairState.EMBODIED)
STAYS = (FindingState.ACCEPTED, FindingState.DEFERRED)
STAGED = ("1", "2", "3")
AWAITED = (UNDECIDED, "reportable")


@dataclass(frozen=True)
class Line:
    """One record that stands open: why, where to read it, and how it stands."""

    cause: str
    item: str
    address: tuple[str, int]
    stands: str


def record_lines(aircraft: Aircraft, *, as_of: date) -> Iterable[Line]:
    """Everything open on the aircraft that has no limit to be compared."""
    signed = _signed(aircraft)
    for finding in _findings(aircraft, as_of):
        yield from _finding_lines(finding, signed)
    for repair in _repairs(aircraft):
        yield from _repair_lines(repair, signed)
    for event in _events(aircraft, as_of):
        yield from _event_lines(event, as_of)
    yield from _reports(aircraft)


# --- signatures ---------------------------------------------------------------


@dataclass(frozen=True)
class _Signed:
    """What the signatures on an aircraft's records say, by key."""

    approved_repairs: set[int] = field(default_factory=set)
    approved_folders: set[str] = field(default_factory=set)
    inspections: dict[int, list[Approval]] = field(default_factory=dict)
    deferrals_limited: set[int] = field(default_factory=set)

    def inspected(self, repair: Repair) -> bool:
        rows = self.inspections.get(repair.pk, [])
        seen = any(row.meaning == Meaning.INSPECTED for row in rows)
        return seen or repair.inspected_by_id is not None

    def rejected(self, repair: Repair) -> bool:
        """A rejection of the inspection line stands until that line answers it."""
        rows = self.inspections.get(repair.pk, [])
        return any(row.meaning == Meaning.REJECTED for row in rows)


def _signed(aircraft: Aircraft) -> _Signed:
    """Three queries."""
    found = _Signed()
    rows = Approval.objects.filter(
        Q(repair__aircraft=aircraft) | Q(substantiation__aircraft=aircraft),
        overruled_by__isnull=True,
    ).select_related("substantiation", "authorisation")
    for row in rows.order_by("signed_at", "pk"):
        if row.substantiation is not None and row.meaning in APPROVING:
            found.approved_folders.add(row.substantiation.number)
        elif row.repair_id is not None and row.meaning in APPROVING:
            found.approved_repairs.add(row.repair_id)
        elif row.repair_id is not None and _inspected(row):
            found.inspections.setdefault(row.repair_id, []).append(row)
    limited = DuePoint.objects.filter(
        aircraft=aircraft, kind=DueKind.DEFERRAL, closed_on__isnull=True
    )
    found.deferrals_limited.update(limited.values_list("disposition_id", flat=True))
    return found


def _inspected(row: Approval) -> bool:
    judged = row.meaning in (Meaning.INSPECTED, Meaning.REJECTED)
    return judged and row.authorisation.scope in INSPECTION_LINE


# --- findings -----------------------------------------------------------------


def _findings(aircraft: Aircraft, as_of: date) -> Iterable[Finding]:
    """Seven queries."""
    dispositions = DispositionFinding.objects.filter(
        disposition__replaced_by__isnull=True
    ).select_related("disposition__basis_document")
    rows = findings_shown(
        Finding.objects.filter(aircraft=aircraft, found_on__lte=as_of)
    ).exclude(state=FindingState.CLOSED)
    return rows.prefetch_related(
        Prefetch("questions", FindingQuestion.objects.filter(answered_at__isnull=True)),
        Prefetch("disposition_rows", dispositions.order_by("-disposition")),
        Prefetch(
            "substantiation_rows",
            SubstantiationFinding.objects.filter(
                withdrawn=False, substantiation__replaced_by__isnull=True
            ).select_related("substantiation"),
        ),
        Prefetch("limit_checks", LimitCheck.objects.filter(outcome="beyond")),
        Prefetch(
            "corrosion_levels",
            CorrosionLevel.objects.filter(
                replaced_by__isnull=True, level__gte=LEVEL_TO_ASK
            ),
        ),
        "reports",
    )


def _finding_lines(finding: Finding, signed: _Signed) -> Iterable[Line]:
    where = finding.place_text or f"“{finding.place_entered}”"
    item = f"{finding.number} {finding.get_damage_type_display()}, {where}"

    def line(cause: str, stands: str) -> Line:
        return Line(cause, item, ("finding", finding.pk), stands)

    found = f"found {finding.found_on}"
    decided = [row.disposition for row in finding.disposition_rows.all()]
    match finding.state:
        case FindingState.REPORTED if finding.section_id is None:
            yield line("to_be_placed", f"reported, location not read; {found}")
        case FindingState.REPORTED:
            yield line("not_assessed", f"reported, not assessed; {found}")
        case FindingState.ASSESSED:
            yield line("not_decided", f"assessed, no disposition; {found}")
        case FindingState.TO_RECTIFY:
            yield line("to_rectify", f"to rectify before further flight; {found}")
        case FindingState.RECTIFIED:
            yield line("rectified", f"rectified, not closed; {found}")
        case FindingState.ACCEPTED if decided:
            yield line("accepted", _decided_words(decided))
        case FindingState.ACCEPTED:
            yield line("not_decided", f"accepted, no disposition recorded; {found}")
        case FindingState.DEFERRED if _limited(decided, signed):
            yield line("deferred", _decided_words(decided))
        case FindingState.DEFERRED:
            yield line("deferral_unlimited", f"deferred without a limit; {found}")
    if asked := [row.asked for row in finding.questions.all()]:
        yield line("questions", f"unanswered: {'; '.join(asked)}")
    if finding.state in STAYS and _uncovered_crack(finding, decided, signed):
        words = finding.get_criticality_display()
        yield line(
            "crack", f"crack, criticality {words}, {finding.get_state_display()}"
        )
    if _asks_report(finding, decided) and not finding.reports.all():
        yield line("report_undecided", f"no answer yet; {found}")


def _limited(decided: Sequence[Disposition], signed: _Signed) -> bool:
    return any(row.pk in signed.deferrals_limited for row in decided)


def _decided_words(decided: Sequence[Disposition]) -> str:
    """The decision that holds, with its limit: "D-0003 defer, to 10,300 FC"."""
    if not decided:
        return ""
    row = decided[0]
    at = Counters(row.limit_minutes, row.limit_cycles, row.limit_landings)
    limit = " · ".join(filter(None, (counters_write(at), str(row.limit_on or ""))))
    words = f"{row.number} {row.get_kind_display()}, found {row.found_on}"
    return f"{words}, to {limit}" if limit else words


def _uncovered_crack(
    finding: Finding, decided: Sequence[Disposition], signed: _Signed
) -> bool:
    """No holder's document under the decision, and no approved folder that names it."""
    if finding.damage_type != "crack" or finding.criticality == Criticality.SECONDARY:
        return False
    cited = any(row.basis_document.kind in HOLDER_DOCUMENTS for row in decided)
    folders = {x.substantiation.number for x in finding.substantiation_rows.all()}
    return not (cited or folders & signed.approved_folders)


def _asks_report(finding: Finding, decided: Sequence[Disposition]) -> bool:
    crack = finding.damage_type == "crack"
    return bool(
        (crack and finding.criticality != Criticality.SECONDARY)
        or finding.limit_checks.all()
        or finding.corrosion_levels.all()
        or any(row.scale == "major" for row in decided)
    )


# --- repairs ------------------------------------------------------------------


def _repairs(aircraft: Aircraft) -> Iterable[Repair]:
    """Five queries at most."""
    rows = Repair.objects.filter(aircraft=aircraft, state__in=STANDING)
    return (
        with_hiding(rows)
        .select_related(
            "aircraft__variant", "operator", "substantiation", "approval_document"
        )
        .prefetch_related(
            "approval_document__applicability__variant",
            Prefetch(
                "required",
                RepairRequired.objects.exclude(difference="").filter(answer=""),
            ),
            Prefetch("steps", RepairStep.objects.filter(done_on__isnull=True)),
        )
    )


def _repair_lines(repair: Repair, signed: _Signed) -> Iterable[Line]:
    where = repair.place_text or f"“{repair.place_entered}”"
    item = f"{repair.number} {repair.get_kind_display()}, {where}"

    def line(cause: str, stands: str) -> Line:
        return Line(cause, item, ("repair", repair.pk), stands)

    state = f"{repair.get_state_display()} {repair.released_on or ''}".strip()
    if repair.state == RepairState.PLANNED:
        yield line("planned", state)
        return
    if repair.state == RepairState.IN_WORK:
        yield line("in_work", "in work, not released")
    document = repair.approval_document
    if document is None:
        yield line("no_data", f"{state}, approval data unknown")
    elif (applies := applies_to(document, repair.aircraft)).refused:
        yield line("other_serial", f"{document} says {applies.ranges}")
    if _lacks_stage_1(repair, signed):
        words = repair.get_criticality_display()
        yield line("stage_1", f"{state}, criticality {words}, no stage approved")
    for row in repair.required.all():
        yield line("differs", f"layer {row.number}: {row.difference}")
    if signed.rejected(repair):
        yield line("inspection_rejected", f"{state}, its inspection rejected")
    elif repair.inspection_required and not signed.inspected(repair):
        yield line("inspection_missing", f"{state}, required inspection not recorded")
    if repair.hides_damage:  # type: ignore[attr-defined]  # annotated by the query
        yield line("hides", state)
    for step in repair.steps.all():
        yield line("steps", f"part {step.number}: {step.title}")


def _lacks_stage_1(repair: Repair, signed: _Signed) -> bool:
    """Where stages were said to apply, or the operator's programme adopts them and the
    data are no published repair whose page says its own limits."""
    if repair.criticality == Criticality.SECONDARY or repair.stage_reached in STAGED:
        return False
    folder, document = repair.substantiation, repair.approval_document
    if repair.pk in signed.approved_repairs or (
        folder is not None and folder.number in signed.approved_folders
    ):
        return False
    if repair.stage_reached == "none" or folder is not None:
        return True
    adopted = repair.operator.programme_three_stages and not repair.legacy
    return adopted and document is not None and document.kind not in IN_LIMITS


# --- events and reports -------------------------------------------------------


def _events(aircraft: Aircraft, as_of: date) -> Iterable[Event]:
    """Two queries."""
    return (
        Event.objects.filter(
            Q(state="open")
            | Q(phases__required=True, phases__done_on__isnull=True)
            | Q(phases__required=True, phases__done_on__gt=as_of),
            aircraft=aircraft,
            happened_on__lte=as_of,
        )
        .distinct()
        .prefetch_related(Prefetch("phases", EventPhase.objects.filter(required=True)))
    )


def _event_lines(event: Event, as_of: date) -> Iterable[Line]:
    item = f"{event.number} {event.get_kind_display()}, {event.happened_on}"
    address = ("aircraft", event.aircraft_id)
    phases = list(event.phases.all())
    waiting = [x for x in phases if x.done_on is None or x.done_on > as_of]
    for phase in waiting:
        yield Line("phase", item, address, f"phase {phase.number}: {phase.title}")
    if event.state == "open" and not phases:
        yield Line("event", item, address, "open, no inspection recorded")
    elif event.state == "open" and not waiting:
        yield Line("event_done", item, address, "its required phases are done")


def _reports(aircraft: Aircraft) -> Iterable[Line]:
    """One query."""
    rows = OccurrenceReport.objects.filter(
        Q(finding__aircraft=aircraft) | Q(event__aircraft=aircraft),
        state__in=AWAITED,
    ).select_related("finding", "event")
    for row in rows.exclude(finding__state__in=ASIDE_STATES):
        cause = "report_undecided" if row.state == UNDECIDED else "report_unsent"
        due = f", due {row.due_at:%Y-%m-%d %H:%M} UTC" if row.due_at else ""
        finding = row.finding
        address = ("finding", finding.pk) if finding else ("aircraft", aircraft.pk)
        yield Line(cause, str(finding or row.event), address, f"{row.regime}{due}")
