"""A decision on findings as it is handed over, and what may stand against it."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass, field

from fleet.due import COUNTED, COUNTER_WORDS, Counters
from fleet.models import Aircraft, AuthorisationScope, Document
from repairs.models import (
    Disposition,
    DispositionKind,
    Evaluation,
    Finding,
    InspectionRequirement,
    LimitCheck,
    Repair,
    RequirementState,
    Substantiation,
)
from repairs.services.finding_guards import (
    STEPS,
    Facts,
    step_problems,
)
from repairs.services.requirement_draft import RequirementDraft

K = DispositionKind
LIVE = (RequirementState.EFFECTIVE, RequirementState.DRAFT)

NO_FINDING = "A disposition answers at least one finding."
NO_BASIS = "Name the basis: document reference, and its page or paragraph."
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
COUNTERS_NEEDED = (
    "State the {counter} on the day of the decision: the deferral limit counts them."
)
CREW_NEEDED = (
    "Say on which day the crew was informed of the deferral; it is not before the day "
    "of the find, {found_on}, nor after the decision."
)
NOT_COVERED = "{folder} does not cover {finding}; add it there, or cite another one."
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

    @property
    def kind_words(self) -> str:
        return str(Document.Kind(self.kind).label)


@dataclass(frozen=True, slots=True)
class Reviewed:
    """A neighbour looked at before deciding, with the answer."""

    item: Finding | Repair
    gap_mm: float
    interacts: bool
    reason: str


@dataclass(frozen=True, slots=True)
class DispositionEntry:
    """A decision as it is signed by who decides; `at` are that day's counters.

    `requirement` names an inspection requirement there is already; `new_requirement`
    is raised with the disposition as its origin, in the same writing.
    """

    aircraft: Aircraft
    findings: Sequence[Finding]
    kind: str
    basis: Basis
    reason: str
    decided_on: dt.date
    at: Counters = field(default_factory=Counters)
    limit: Counters = field(default_factory=Counters)
    limit_on: dt.date | None = None
    crew_informed_on: dt.date | None = None
    scale: str = "undecided"
    scale_reason: str = ""
    category: str = ""
    evaluations: Sequence[Evaluation] = ()
    limit_checks: Sequence[LimitCheck] = ()
    neighbours: Sequence[Reviewed] = ()
    replaces: Disposition | None = None
    substantiation: Substantiation | None = None
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
        problems += step_problems(entry.kind, finding, Facts(entry=entry))
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
    if entry.kind == K.DEFER:
        problems += _deferral_problems(entry, findings)
    problems += _folder_problems(entry, findings)
    return problems + _limit_problems(entry) + _chain_problems(entry, findings)


def _folder_problems(entry: DispositionEntry, findings: Sequence[Finding]) -> list[str]:
    folder = entry.substantiation
    if folder is None:
        return []
    covered = folder.finding_rows.filter(withdrawn=False).values_list("finding_id")
    keys = {key for (key,) in covered}
    left_out = [finding for finding in findings if finding.pk not in keys]
    return [NOT_COVERED.format(folder=folder, finding=one) for one in left_out]


def applies_to(requirement: InspectionRequirement, aircraft: Aircraft) -> bool:
    return requirement.subjects.filter(aircraft=aircraft, applies="yes").exists()


def scopes_for(kind: str) -> tuple[AuthorisationScope, ...]:
    """A deferral, and closing as not damage, are certifying staff's only."""
    return STEPS[kind].scopes


def _deferral_problems(
    entry: DispositionEntry, findings: Sequence[Finding]
) -> list[str]:
    """A deferral has a limit that can be counted, and the crew knows of it."""
    problems = [] if entry.has_limit else [LIMIT_NEEDED]
    for counter in COUNTED:
        if entry.limit[counter] is not None and entry.at[counter] is None:
            words = COUNTER_WORDS[counter][0]
            problems.append(COUNTERS_NEEDED.format(counter=words))
    told = entry.crew_informed_on
    found = min((one.found_on for one in findings), default=entry.decided_on)
    if told is None or not found <= told <= entry.decided_on:
        problems.append(CREW_NEEDED.format(found_on=found))
    return problems


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
