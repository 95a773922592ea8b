"""A finding's steps in one table: from where to where, by whom, what must stand.

Every step asks the table and says everything that is missing at once. A finding that is
closed stays closed: damage seen there again is a new finding, linked to it.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import TYPE_CHECKING

from fleet.models import AuthorisationScope
from repairs.measurements import missing
from repairs.models import (
    HOLDER_DOCUMENTS,
    Cause,
    DispositionKind,
    Finding,
    FindingState,
    RepairFinding,
    RepairState,
)
from repairs.selectors.deferrals import running_deferral
from repairs.selectors.report_triggers import (
    is_critical_crack,
    level_now,
    reports_undecided,
)
from repairs.services.authority import ASSESSORS, CERTIFIERS
from repairs.services.reports import Reportability

if TYPE_CHECKING:
    from repairs.services.disposition_entry import DispositionEntry

S, K = FindingState, DispositionKind
DECIDABLE = (S.ASSESSED, S.ACCEPTED, S.DEFERRED, S.TO_RECTIFY)
RECTIFIABLE = (*DECIDABLE, S.RECTIFIED)
SETS_RIGHT = (K.RECTIFY, K.REPLACE)
KEEPS_DAMAGE = (K.ACCEPT, K.ACCEPT_WITH_INSPECTION, K.DEFER)

OUT_OF_TURN = "{number} is {state}; it is {word} only while {wanted}."
CLOSED_STAYS = (
    "{number} is closed and stays so. Damage seen there again is a new finding: record "
    "it, and link it to {number}."
)
TO_BE_PLACED = "{number} is to be placed: give a location that can be read first."
NOT_MEASURED = "Measure first: {labels} must be known for a {damage_type}."
UNANSWERED = "Answer first: {asked}"
NO_DATA = "Cite the data it was assessed against: document, revision and page."
OTHER_AIRCRAFT = "{finding} is not on {aircraft}; a disposition is for one aircraft."
NOT_YET_FOUND = "Decided on {decided_on}, before {finding} was found on {found_on}."
CRITICAL_CRACK = (
    "{finding} is a crack in structure that is {criticality}: rectify it before "
    "further flight, or cite the approval document of a design approval holder as "
    "basis. “{reference}” is a {kind}."
)
CRITICAL_LIMIT = (
    "{finding} is a crack in structure that is {criticality}: the approval it flies "
    "on states a limit (FH, FC, landings or date) and inspections. Give {lacking}."
)
NAME_THE_DEFERRAL = (
    "{finding} is deferred by {deferral}: a further deferral replaces it, so that its "
    "limits and its first date stay together. Choose {deferral} under “replaces”."
)
PASSED_ALREADY = (
    "The deferral limit of {finding} is passed ({passed}, {deferral}): it cannot be "
    "deferred further on maintenance data. Rectify it, or cite the approval document "
    "of a design approval holder."
)
ANSWERING = (RepairState.EMBODIED, RepairState.SUPERSEDED)
"""A repair that gave way to a larger one answers through that one."""

NO_RELEASE = "{number} has no released repair that answers it; record the repair first."
NO_REFERENCE = (
    "{repair} names no certificate of release; give the reference of the release."
)
NOT_INSPECTED = (
    "{repair} asks for an independent inspection, and none is recorded: who inspected "
    "it, other than who performed it?"
)
PHOTOGRAPH_FIRST = (
    "{repair} covers damage not shown to be removed; add a photograph taken before "
    "it was covered."
)
CAUSE_NEEDED = "Name the cause of {number}."
CAUSE_UNKNOWN = "The cause of {number} is unknown: say what was looked into."
REPORTABLE_UNDECIDED = (
    "Decide whether {number} is reportable under {regime}, and say why, before it is "
    "closed."
)
LEVEL_NEEDED = "Determine the corrosion level of {number} before it is closed."
PROGRAMME_ACTION_NEEDED = (
    "{number} is level {level} corrosion: record what is changed in the corrosion "
    "programme before it is closed."
)
FLEET_ACTION_NEEDED = (
    "{number} is level 3 corrosion: record what is done on the other aircraft of the "
    "fleet before it is closed."
)


@dataclass(frozen=True, slots=True)
class DataCited:
    """The data a judgement rests on."""

    kind: str
    reference: str
    revision: str
    page: str


@dataclass(frozen=True, slots=True)
class Facts:
    """What is handed over with a step; the finding itself says the rest."""

    data: DataCited | None = None
    entry: DispositionEntry | None = None
    report: Reportability | None = None
    cause: str = ""
    reason: str = ""
    release_reference: str = ""


Check = Callable[[Finding, Facts], list[str]]


@dataclass(frozen=True, slots=True)
class Step:
    """From which states to which, whose authorisation it takes, and what must stand.

    Without scopes the step is not one of judgement: its roles are in `fleet.access`.
    """

    word: str
    since: tuple[FindingState, ...]
    to: FindingState
    scopes: tuple[AuthorisationScope, ...] = ()
    checks: tuple[Check, ...] = ()


def step_problems(name: str, finding: Finding, facts: Facts | None = None) -> list[str]:
    """Everything that stands between a finding and a step; empty: nothing does."""
    step = STEPS[name]
    if finding.state not in step.since:
        return [_out_of_turn(step, finding)]
    given = facts or Facts()
    return [text for check in step.checks for text in check(finding, given)]


def _out_of_turn(step: Step, finding: Finding) -> str:
    if finding.state == S.CLOSED:
        return CLOSED_STAYS.format(number=finding)
    return OUT_OF_TURN.format(
        number=finding,
        state=finding.get_state_display(),
        wanted=" or ".join(state.value.replace("_", " ") for state in step.since),
        word=step.word,
    )


# --- what must stand before it is assessed -------------------------------------------


def _placed(finding: Finding, _: Facts) -> list[str]:
    if finding.section_id is not None:
        return []
    return [TO_BE_PLACED.format(number=finding)]


def _measured(finding: Finding, _: Facts) -> list[str]:
    lacking = missing(finding.damage_type, "as_found", known_quantities(finding))
    if not lacking:
        return []
    return [
        NOT_MEASURED.format(
            labels=", ".join(one.label for one in lacking),
            damage_type=finding.get_damage_type_display(),
        )
    ]


def known_quantities(finding: Finding) -> set[str]:
    """Dimensions known from any measurement of the finding."""
    rows = finding.measurements.filter(values__status="known")
    return set(rows.values_list("values__quantity", flat=True))


def _answered(finding: Finding, _: Facts) -> list[str]:
    rows = finding.questions.filter(answered_at__isnull=True)
    return [UNANSWERED.format(asked=row.asked) for row in rows]


def _cited(_: Finding, facts: Facts) -> list[str]:
    data = facts.data
    if data is None or (data.reference.strip() and data.page.strip()):
        return []
    return [NO_DATA]


# --- before it is decided on ---------------------------------------------------------


def _on_this_aircraft(finding: Finding, facts: Facts) -> list[str]:
    entry = facts.entry
    if entry is None or finding.aircraft_id == entry.aircraft.pk:
        return []
    return [OTHER_AIRCRAFT.format(finding=finding, aircraft=entry.aircraft)]


def _found_before(finding: Finding, facts: Facts) -> list[str]:
    entry = facts.entry
    if entry is None or entry.decided_on >= finding.found_on:
        return []
    return [
        NOT_YET_FOUND.format(
            decided_on=entry.decided_on, finding=finding, found_on=finding.found_on
        )
    ]


def _crack(finding: Finding, facts: Facts) -> list[str]:
    """A crack in PSE or FCS flies on only by its design approval holder's document."""
    entry = facts.entry
    if entry is None or not is_critical_crack(finding):
        return []
    said = {"finding": finding, "criticality": finding.get_criticality_display()}
    if entry.basis.kind not in HOLDER_DOCUMENTS:
        reference, kind = entry.basis.reference, entry.basis.kind_words
        return [CRITICAL_CRACK.format(reference=reference, kind=kind, **said)]
    given = (
        ("the limit", entry.has_limit),
        ("the inspection requirement", entry.has_inspection),
    )
    lacking = [words for words, there in given if not there]
    if entry.kind not in KEEPS_DAMAGE or not lacking:
        return []
    return [CRITICAL_LIMIT.format(lacking=" and ".join(lacking), **said)]


def _extends(finding: Finding, facts: Facts) -> list[str]:
    """Deferred damage is deferred further only by what replaces its deferral, and not
    once a limit is passed."""
    entry = facts.entry
    running = entry and running_deferral(finding, entry.at, entry.decided_on)
    if entry is None or not running:
        return []
    problems, deferral, replaced = [], running.deferral, entry.replaces
    if running.own and (replaced is None or replaced.number != deferral.number):
        problems.append(NAME_THE_DEFERRAL.format(finding=finding, deferral=deferral))
    if running.passed and entry.basis.kind not in HOLDER_DOCUMENTS:
        problems.append(
            PASSED_ALREADY.format(
                finding=finding, passed=running.passed, deferral=deferral
            )
        )
    return problems


# --- before it is closed -------------------------------------------------------------


def released_rows(finding: Finding) -> list[RepairFinding]:
    """The repairs that answer it and are released."""
    rows = finding.repair_rows.select_related("repair__release_document")
    return list(rows.filter(repair__state__in=ANSWERING))


def _released(finding: Finding, facts: Facts) -> list[str]:
    """A released repair answers it, and a certificate of release is named."""
    rows = released_rows(finding)
    if not rows:
        return [NO_RELEASE.format(number=finding)]
    if facts.release_reference.strip():
        return []
    return [
        NO_REFERENCE.format(repair=row.repair)
        for row in rows
        if row.repair.release_document is None and not row.repair.legacy
    ]


def _inspected(finding: Finding, _: Facts) -> list[str]:
    return [
        NOT_INSPECTED.format(repair=row.repair)
        for row in released_rows(finding)
        if row.repair.inspection_required
        and row.repair.inspected_by_id is None
        and not row.repair.approvals.filter(meaning="inspected").exists()
    ]


def _photographed(finding: Finding, _: Facts) -> list[str]:
    hidden = [
        row
        for row in released_rows(finding)
        if row.covers and row.damage_removed != "yes"
    ]
    if not hidden or finding.photographs.filter(role="before_covering").exists():
        return []
    return [PHOTOGRAPH_FIRST.format(repair=row.repair) for row in hidden]


def _cause(finding: Finding, facts: Facts) -> list[str]:
    if not facts.cause:
        return [CAUSE_NEEDED.format(number=finding)]
    if facts.cause == Cause.UNKNOWN and not facts.reason.strip():
        return [CAUSE_UNKNOWN.format(number=finding)]
    return []


def _report_decided(finding: Finding, facts: Facts) -> list[str]:
    """Decided under every regime that asks; an answer given with the step counts for
    the finding, not for an event it followed."""
    return [
        REPORTABLE_UNDECIDED.format(number=subject, regime=regime)
        for subject, regime in reports_undecided(finding)
        if facts.report is None or subject != finding
    ]


def _levelled(finding: Finding, _: Facts) -> list[str]:
    """Corrosion has its level; 2 and 3 their programme action, 3 its fleet action."""
    if finding.damage_type != "corrosion":
        return []
    level = level_now(finding)
    if level is None:
        return [LEVEL_NEEDED.format(number=finding)]
    problems = []
    if level.level >= 2 and not level.programme_action.strip():
        problems.append(
            PROGRAMME_ACTION_NEEDED.format(number=finding, level=level.level)
        )
    if level.level >= 3 and not level.fleet_action.strip():
        problems.append(FLEET_ACTION_NEEDED.format(number=finding))
    return problems


_DECIDED = (_on_this_aircraft, _answered, _found_before)
_STAYS = (*_DECIDED, _crack)

STEPS: dict[str, Step] = {
    "assess": Step(
        "assessed", (S.REPORTED,), S.ASSESSED, ASSESSORS,
        (_placed, _measured, _answered, _cited),
    ),
    K.ACCEPT: Step("decided on", DECIDABLE, S.ACCEPTED, ASSESSORS, _STAYS),
    K.ACCEPT_WITH_INSPECTION: Step(
        "decided on", DECIDABLE, S.ACCEPTED, ASSESSORS, _STAYS
    ),
    K.DEFER: Step(
        "deferred", DECIDABLE, S.DEFERRED, CERTIFIERS, (*_STAYS, _extends)
    ),
    K.RECTIFY: Step("decided on", DECIDABLE, S.TO_RECTIFY, ASSESSORS, _DECIDED),
    K.REPLACE: Step("decided on", DECIDABLE, S.TO_RECTIFY, ASSESSORS, _DECIDED),
    K.NOT_DAMAGE: Step(
        "decided on", DECIDABLE, S.CLOSED, CERTIFIERS, (*_STAYS, _report_decided)
    ),
    "repair": Step("answered by a repair", RECTIFIABLE, S.RECTIFIED),
    "close": Step(
        "closed", (S.RECTIFIED,), S.CLOSED, CERTIFIERS,
        (_released, _inspected, _photographed, _cause, _report_decided, _levelled),
    ),
    "duplicate": Step("set aside", (S.REPORTED, S.ASSESSED), S.DUPLICATE),
    "void": Step("set aside", (S.REPORTED, S.ASSESSED), S.VOIDED),
}  # fmt: skip
"""The kinds of a disposition are steps of their findings."""
