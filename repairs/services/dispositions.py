"""The decision on findings: by an authorised person, on cited data, never altered."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import replace

from django.core.exceptions import ValidationError

from fleet.models import Authorisation, User
from fleet.selectors.applicability import document_refusals
from fleet.services.aircraft import stream_of
from fleet.services.documents import document_get_or_create
from fleet.services.history import Writing
from fleet.services.numbers import number_next
from fleet.services.parts import counter_columns
from fleet.services.signing import Proof
from repairs.models import (
    Disposition,
    DispositionBasis,
    DispositionFinding,
    DueKind,
    Finding,
    FindingState,
    Meaning,
    NeighbourReview,
    Repair,
)
from repairs.selectors.deferrals import chain_of, origin_on
from repairs.services.approvals import approval_write
from repairs.services.authority import authorised, operator_on
from repairs.services.disposition_entry import (
    DispositionEntry,
    K,
    decision_problems,
    scopes_for,
)
from repairs.services.due_points import deferral_due_open, due_points_close
from repairs.services.finding_guards import KEEPS_DAMAGE, STEPS
from repairs.services.inspections import requirement_raise_within
from repairs.services.reports import finding_questions_write
from repairs.services.stage_clocks import (
    disposition_clock_follow,
    findings_clocks_close,
)

INSPECTED_BY = "{reason} Inspection: {requirement}."
AS_ENTERED = (
    "aircraft", "replaces", "kind", "scale", "scale_reason", "category", "decided_on",
    "limit_on", "crew_informed_on", "substantiation",
)  # fmt: skip
DECIDED = "{disposition} decided: {kind}"
CLOSED_BY = "answered anew by {number}"


def disposition_decide(
    *, entry: DispositionEntry, proof: Proof, actor: User | None, at: dt.datetime
) -> Disposition:
    """Sign a decision and put its findings where it says; who signs decides.

    ValidationError says everything that stands against it: no valid authorisation that
    day, no basis, a crack in PSE or FCS without a design approval holder's approval,
    an inspection or a limit that is missing.
    """
    with Writing(
        actor=actor,
        action="disposition_decide",
        at=at,
        operator=entry.aircraft.operator,
        stream=stream_of(entry.aircraft),
        reason=entry.reason,
        origin=proof.how,
    ) as w:
        return disposition_write(w, entry, proof=proof)


def disposition_write(
    w: Writing, entry: DispositionEntry, *, proof: Proof
) -> Disposition:
    """Inside a writing: the disposition, what follows from it, and its signature."""
    keys = [finding.pk for finding in entry.findings]
    findings = list(
        Finding.objects.select_for_update(of=("self",), no_key=True)
        .filter(pk__in=keys)
        .select_related("aircraft")
        .order_by("pk")
    )
    if problems := decision_problems(entry, findings):
        raise ValidationError(problems)
    operator = operator_on(entry.aircraft, entry.decided_on)
    basis = entry.basis
    if refusals := document_refusals(
        operator, entry.aircraft, basis.reference, basis.revision
    ):
        raise ValidationError(refusals)
    authorisation = authorised(
        person=proof.person,
        operator=operator,
        scopes=scopes_for(entry.kind),
        on=entry.decided_on,
    )
    disposition = w.create(_row(w, entry, findings, authorisation))
    _rows_write(w, disposition, entry, findings)
    _follow(w, disposition, entry, findings)
    deferred = entry.kind == K.DEFER
    approval_write(
        w,
        subject=disposition,
        meaning=Meaning.DEFERRED if deferred else Meaning.PREPARED,
        proof=proof,
        on=entry.decided_on,
        statement=DECIDED.format(
            disposition=disposition, kind=disposition.get_kind_display()
        ),
        scopes=scopes_for(entry.kind),
    )
    return disposition


def _row(
    w: Writing,
    entry: DispositionEntry,
    findings: Sequence[Finding],
    authorisation: Authorisation,
) -> Disposition:
    """The decision; one that replaces another keeps its number as the next revision."""
    operator = authorisation.operator
    replaces, basis = entry.replaces, entry.basis
    number = (
        replaces.number if replaces else number_next(w, operator=operator, kind="D")
    )
    document = document_get_or_create(
        w,
        operator=operator,
        kind=basis.kind,
        reference=basis.reference,
        revision=basis.revision,
        title=basis.title,
        issued_on=basis.issued_on,
    )
    return Disposition(
        operator=replaces.operator if replaces else operator,
        number=number,
        revision=replaces.revision + 1 if replaces else 0,
        found_on=_first_found(entry, findings),
        basis_document=document,
        basis_page=basis.page.strip(),
        reason=_reason(entry),
        decided_by=authorisation.person,
        authorisation=authorisation,
        limit_minutes=entry.limit.minutes,
        limit_cycles=entry.limit.cycles,
        limit_landings=entry.limit.landings,
        **counter_columns("at", entry.at),
        **{name: getattr(entry, name) for name in AS_ENTERED},
    )


def _reason(entry: DispositionEntry) -> str:
    """The reason, with the requirement that was there already named in it."""
    reason = entry.reason.strip()
    if entry.requirement is None or not reason:
        return reason
    return INSPECTED_BY.format(reason=reason, requirement=entry.requirement)


def _first_found(entry: DispositionEntry, findings: Sequence[Finding]) -> dt.date:
    """The original date: it never moves, whatever is decided later, nor under which
    number the same damage is recorded again."""
    first = origin_on(findings)
    return min(first, entry.replaces.found_on) if entry.replaces else first


def _rows_write(
    w: Writing,
    disposition: Disposition,
    entry: DispositionEntry,
    findings: Sequence[Finding],
) -> None:
    w.create_many(
        [DispositionFinding(disposition=disposition, finding=f) for f in findings]
    )
    w.create_many(
        [
            *(
                DispositionBasis(disposition=disposition, evaluation=row)
                for row in entry.evaluations
            ),
            *(
                DispositionBasis(disposition=disposition, limit_check=row)
                for row in entry.limit_checks
            ),
        ]
    )
    w.create_many(
        [
            NeighbourReview(
                disposition=disposition,
                finding=one.item if isinstance(one.item, Finding) else None,
                repair=one.item if isinstance(one.item, Repair) else None,
                gap_mm=one.gap_mm,
                interacts=one.interacts,
                reason=one.reason,
            )
            for one in entry.neighbours
        ]
    )


def _follow(
    w: Writing,
    disposition: Disposition,
    entry: DispositionEntry,
    findings: Sequence[Finding],
) -> None:
    """States, the inspection raised with it, and the limit on the due list."""
    decided_before = any(row.state != FindingState.ASSESSED for row in findings)
    for finding in findings:
        w.change(finding, state=STEPS[disposition.kind].to)
        if disposition.scale == "major":
            finding_questions_write(w, finding)
    if entry.new_requirement is not None:
        requirement_raise_within(
            w, replace(entry.new_requirement, disposition=disposition)
        )
    extended = None
    for earlier in _answered_before(disposition, findings) if decided_before else ():
        closed = due_points_close(
            w,
            origin=earlier,
            on=disposition.decided_on,
            reason=CLOSED_BY.format(number=disposition),
            kinds=(DueKind.DEFERRAL,),
        )
        extended = closed[0] if closed else extended
    if entry.has_limit and disposition.kind in KEEPS_DAMAGE:
        chain = chain_of(findings)
        deferral_due_open(
            w, disposition=disposition, extends=extended, history=chain.words
        )
    reason = CLOSED_BY.format(number=disposition)
    findings_clocks_close(w, findings, on=disposition.decided_on, reason=reason)
    disposition_clock_follow(w, disposition)


def _answered_before(
    disposition: Disposition, findings: Sequence[Finding]
) -> list[Disposition]:
    """Earlier decisions on these findings that hold for no other finding any more."""
    keys = {finding.pk for finding in findings}
    earlier = (
        Disposition.objects.filter(finding_rows__finding__in=keys)
        .exclude(pk=disposition.pk)
        .select_related("aircraft")
        .prefetch_related("finding_rows__finding")
        .distinct()
    )
    return [
        row
        for row in earlier
        if all(
            other.finding_id in keys or other.finding.state != FindingState.DEFERRED
            for other in row.finding_rows.all()
        )
    ]
