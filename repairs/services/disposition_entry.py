"""A decision on findings as it is handed over, and what may stand against it."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass, field

from fleet.due import Counters
from fleet.models import Aircraft, AuthorisationScope, Document, Person
from repairs.models import (
    Disposition,
    DispositionKind,
    Evaluation,
    Finding,
    FindingState,
    InspectionRequirement,
    LimitCheck,
    Repair,
    RequirementState,
)
from repairs.services.assessing import is_critical_crack, open_questions
from repairs.services.authority import ASSESSORS, CERTIFIERS
from repairs.services.requirement_draft import RequirementDraft

K = DispositionKind
DECIDABLE = (
    FindingState.ASSESSED,
    FindingState.ACCEPTED,
    FindingState.DEFERRED,
    FindingState.TO_RECTIFY,
)
SETS_RIGHT = (K.RECTIFY, K.REPLACE)
KEEPS_DAMAGE = (K.ACCEPT, K.ACCEPT_WITH_INSPECTION, K.DEFER)
HOLDER_DOCUMENTS = (Document.Kind.LETTER, Document.Kind.DESIGN_APPROVAL)
LIVE = (RequirementState.EFFECTIVE, RequirementState.DRAFT)

NO_FINDING = "A disposition answers at least one finding."
OTHER_AIRCRAFT = "{finding} is not on {aircraft}; a disposition is for one aircraft."
NOT_DECIDABLE = "{finding} is {state}; assess it before it is decided on."
NO_BASIS = "Name the basis: document reference, and its page or paragraph."
CRITICAL_CRACK = (
    "{finding} is a crack in structure that is {criticality}: rectify it before "
    "further flight, or cite the approval document of a design approval holder as "
    "basis. “{reference}” is a {kind}."
)
CRITICAL_LIMIT = (
    "{finding} is a crack in structure that is {criticality}: the approval it flies "
    "on states a limit (FH, FC, landings or date) and inspections. Give {lacking}."
)
INSPECTION_NEEDED = (
    "“{kind}” is saved with its inspection requirement: choose one that is in force, "
    "or give a new one."
)
REQUIREMENT_NOT_LIVE = (
    "{requirement} is {state}; choose a requirement that is in force."
)
REQUIREMENT_ELSEWHERE = (
    "{requirement} does not apply to {aircraft}; choose one that does."
)
LIMIT_NEEDED = (
    "A deferral has a deferral limit: flight hours, cycles, landings or a date."
)
LIMIT_PASSED = (
    "The deferral limit {limit} lies at or before the decision ({now}); it would be "
    "overdue at once."
)
NOT_YET_FOUND = "Decided on {decided_on}, before {finding} was found on {found_on}."
STALE_REPLACES = "{replaced} was replaced by {by} already; decide from that one."
NOT_THE_FINDINGS = "{basis} does not belong to a finding of this disposition."


@dataclass(frozen=True, slots=True)
class Basis:
    """The document a decision rests on, and where in it."""

    kind: str
    reference: str
    page: str
    revision: str = ""
    title: str = ""
    issued_on: dt.date | None = None


@dataclass(frozen=True, slots=True)
class Reviewed:
    """A neighbour looked at before deciding, with the answer."""

    item: Finding | Repair
    gap_mm: float
    interacts: bool
    reason: str


@dataclass(frozen=True, slots=True)
class DispositionEntry:
    """A decision as it is signed; `at` are the aircraft's counters that day.

    `requirement` names an inspection requirement there is already; `new_requirement`
    is raised with the disposition as its origin, in the same writing.
    """

    aircraft: Aircraft
    findings: Sequence[Finding]
    kind: str
    basis: Basis
    reason: str
    decided_by: Person
    decided_on: dt.date
    at: Counters = field(default_factory=Counters)
    limit: Counters = field(default_factory=Counters)
    limit_on: dt.date | None = None
    scale: str = "undecided"
    scale_reason: str = ""
    category: str = ""
    evaluations: Sequence[Evaluation] = ()
    limit_checks: Sequence[LimitCheck] = ()
    neighbours: Sequence[Reviewed] = ()
    replaces: Disposition | None = None
    requirement: InspectionRequirement | None = None
    new_requirement: RequirementDraft | None = None

    @property
    def has_limit(self) -> bool:
        return self.limit != Counters() or self.limit_on is not None

    @property
    def has_inspection(self) -> bool:
        return self.requirement is not None or self.new_requirement is not None


def decision_problems(
    entry: DispositionEntry, findings: Sequence[Finding]
) -> list[str]:
    """Everything that stands against the decision, but for the authorisation."""
    problems = [] if findings else [NO_FINDING]
    if not (entry.basis.reference.strip() and entry.basis.page.strip()):
        problems.append(NO_BASIS)
    for finding in findings:
        problems += _finding_problems(entry, finding)
    if entry.kind == K.ACCEPT_WITH_INSPECTION and not entry.has_inspection:
        kind = K.ACCEPT_WITH_INSPECTION.label
        problems.append(INSPECTION_NEEDED.format(kind=kind))
    chosen = entry.requirement
    if chosen is not None and chosen.state not in LIVE:
        state = chosen.get_state_display()
        problems.append(REQUIREMENT_NOT_LIVE.format(requirement=chosen, state=state))
    if chosen is not None and not applies_to(chosen, entry.aircraft):
        problems.append(
            REQUIREMENT_ELSEWHERE.format(requirement=chosen, aircraft=entry.aircraft)
        )
    if entry.kind == K.DEFER and not entry.has_limit:
        problems.append(LIMIT_NEEDED)
    return problems + _limit_problems(entry) + _chain_problems(entry, findings)


def applies_to(requirement: InspectionRequirement, aircraft: Aircraft) -> bool:
    return requirement.subjects.filter(aircraft=aircraft, applies="yes").exists()


def scopes_for(kind: str) -> tuple[AuthorisationScope, ...]:
    """A deferral is decided by certifying staff only."""
    return CERTIFIERS if kind == K.DEFER else ASSESSORS


def _finding_problems(entry: DispositionEntry, finding: Finding) -> list[str]:
    problems = []
    if finding.aircraft_id != entry.aircraft.pk:
        text = OTHER_AIRCRAFT.format(finding=finding, aircraft=entry.aircraft)
        problems.append(text)
    if finding.state not in DECIDABLE:
        state = finding.get_state_display()
        problems.append(NOT_DECIDABLE.format(finding=finding, state=state))
    problems += open_questions(finding)
    if entry.decided_on < finding.found_on:
        problems.append(
            NOT_YET_FOUND.format(
                decided_on=entry.decided_on, finding=finding, found_on=finding.found_on
            )
        )
    if is_critical_crack(finding) and entry.kind not in SETS_RIGHT:
        problems += _crack_problems(entry, finding)
    return problems


def _crack_problems(entry: DispositionEntry, finding: Finding) -> list[str]:
    criticality = finding.get_criticality_display()
    if entry.basis.kind not in HOLDER_DOCUMENTS:
        return [
            CRITICAL_CRACK.format(
                finding=finding,
                criticality=criticality,
                reference=entry.basis.reference,
                kind=Document.Kind(entry.basis.kind).label,
            )
        ]
    if entry.kind not in KEEPS_DAMAGE:
        return []
    lacking = [
        words
        for words, given in (
            ("the limit", entry.has_limit),
            ("the inspection requirement", entry.has_inspection),
        )
        if not given
    ]
    if not lacking:
        return []
    return [
        CRITICAL_LIMIT.format(
            finding=finding, criticality=criticality, lacking=" and ".join(lacking)
        )
    ]


def _limit_problems(entry: DispositionEntry) -> list[str]:
    pairs = [
        (entry.limit.minutes, entry.at.minutes),
        (entry.limit.cycles, entry.at.cycles),
        (entry.limit.landings, entry.at.landings),
    ]
    passed = [
        (limit, now)
        for limit, now in pairs
        if limit is not None and now is not None and limit <= now
    ]
    if entry.limit_on is not None and entry.limit_on < entry.decided_on:
        passed.append((entry.limit_on, entry.decided_on))  # type: ignore[arg-type]
    return [LIMIT_PASSED.format(limit=limit, now=now) for limit, now in passed]


def _chain_problems(entry: DispositionEntry, findings: Sequence[Finding]) -> list[str]:
    problems = []
    replaced = entry.replaces
    if replaced is not None:
        later = Disposition.objects.filter(replaces=replaced).first()
        if later is not None:
            problems.append(
                STALE_REPLACES.format(
                    replaced=f"{replaced} revision {replaced.revision}",
                    by=f"revision {later.revision}",
                )
            )
    keys = {finding.pk for finding in findings}
    rows: list[Evaluation | LimitCheck] = [*entry.evaluations, *entry.limit_checks]
    for row in rows:
        if row.finding_id is not None and row.finding_id not in keys:
            problems.append(NOT_THE_FINDINGS.format(basis=row))
    return problems
