"""What an engineer hands over to raise an inspection requirement, and its checks."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date

from fleet.amounts import AmountError, amount_read, amount_write
from fleet.due import Counter
from fleet.models import Aircraft, Document, Operator, SafeLifePart
from repairs.models import (
    DamageType,
    Disposition,
    Evaluation,
    Event,
    Finding,
    InspectionRequirement,
    Meaning,
    Outcome,
    Repair,
    RequirementClass,
    Use,
)

STRICT = (RequirementClass.LIMITATION, RequirementClass.REPAIR)
APPROVED = (Meaning.APPROVED, Meaning.STAGE_2, Meaning.STAGE_3)

NO_ORIGIN = (
    "Name the finding, repair, event or disposition it comes from, or its document."
)
NO_SUBJECT = "Name the aircraft or serial it applies to."
NO_LIMIT = (
    "No threshold, repeat or replacement limit is given. If no supplemental inspection "
    "is necessary, say so and name the document that says it."
)
NOT_STRICT = (
    "Tolerance {tolerance} is not possible on a requirement of class {kind}: such "
    "limits are not exceeded."
)
NOT_IN_DIRECTIVE = (
    "Tolerance {tolerance} on a directive is possible only where the directive itself "
    "grants it: name {reference} and the paragraph as its source."
)
NO_TOLERANCE_SOURCE = "Tolerance {tolerance} needs the programme that grants it."
OTHER_UNIT = "Tolerance {tolerance} is not in the unit of its limit, {limit}."
THRESHOLD_BASE = "The threshold {limit} cannot count from the last accomplishment."
REPEAT_BASE = "A repeat interval counts from the last accomplishment, not from {base}."
GROUPS_MIXED = "Limits of one group combine in one way, first or last; {limit} differs."
ONE_REPLACE_GROUP = "A replacement limit is one group; {limit} is in group {group}."
FOUND_DAMAGE = (
    "{number} is for found damage: how long a known crack grows is no inspection "
    "interval. Use a calculation for structure without known crack, or a disposition."
)
NOT_COMPUTED = "{number} has no result, so no interval can come from it."
NOT_GIVEN = "{number} gives no {phase}, so {limit} cannot come from it."
LONGER = "The {phase} {limit} is longer than {number} calculated, {calculated}."
CYCLES_NEEDED = "{number} calculated in flight cycles: give the {phase} in FC too."
KNOWN_CRACK = (
    "{number} is a known crack, which gets no inspection interval of its own. Record "
    "the disposition that cites the approval with its limit and inspections, and raise "
    "the requirement from there; or name the approval as source document."
)
FIRST_ONLY = "Limits from a calculation combine to the first, never to the last."


@dataclass(frozen=True)
class LimitEntry:
    """One limit as typed: "15,000 FC" from release, repeat "5,000 FC"."""

    phase: str
    entered: str
    base: str = "last_done"
    group: int = 1
    combine: str = "first"
    base_on: date | None = None
    base_value: int | None = None
    base_requirement: InspectionRequirement | None = None
    tolerance: str = ""
    tolerance_source: str = ""


@dataclass(frozen=True)
class RequirementDraft:
    operator: Operator
    title: str
    requirement_class: str
    area: str
    criteria: str
    method: str
    effective_on: date
    limits: Sequence[LimitEntry]
    aircraft: Sequence[Aircraft] = ()
    parts: Sequence[SafeLifePart] = ()
    source_document: Document | None = None
    source_page: str = ""
    finding: Finding | None = None
    repair: Repair | None = None
    event: Event | None = None
    disposition: Disposition | None = None
    evaluation: Evaluation | None = None
    task: str = ""
    procedure: str = ""
    access: str = ""
    applicability: str = ""
    anchor: str = "scheduled_if_late"
    calendar: str = "date"
    window_percent: int | None = None
    policy_source: str = ""
    assumed_minutes_per_cycle: int | None = None
    sisters: bool = False
    none_needed: bool = False


def evaluation_approved(evaluation: Evaluation) -> bool:
    """Whether it is approved for its intervals (stage 1 is strength only); a query."""
    return evaluation.approvals.filter(meaning__in=APPROVED).exists()


def draft_problems(draft: RequirementDraft) -> list[str]:
    """Why the requirement cannot be raised as it stands; empty when it can."""
    origins = (draft.finding, draft.repair, draft.event, draft.disposition)
    problems = []
    if not any((*origins, draft.source_document)):
        problems.append(NO_ORIGIN)
    if not draft.aircraft and not draft.parts:
        problems.append(NO_SUBJECT)
    if not draft.limits and not (draft.none_needed and draft.source_document):
        problems.append(NO_LIMIT)
    for entry in draft.limits:
        problems += _entry_problems(entry, draft)
    known = draft.finding is not None and draft.finding.damage_type == DamageType.CRACK
    if known and not draft.sisters and not draft.source_document:
        problems.append(KNOWN_CRACK.format(number=draft.finding))
    ways = {(x.phase, x.group): x.combine for x in draft.limits}
    problems += [
        GROUPS_MIXED.format(limit=x.entered)
        for x in draft.limits
        if ways[x.phase, x.group] != x.combine
    ]
    if draft.evaluation is not None and not problems:
        problems += _evaluation_problems(draft, draft.evaluation)
    return problems


def _entry_problems(entry: LimitEntry, draft: RequirementDraft) -> list[str]:
    try:
        counter, _ = amount_read(entry.entered)
        granted = amount_read(entry.tolerance) if entry.tolerance else None
    except AmountError as error:
        return [str(error)]
    problems = []
    if entry.phase == "threshold" and entry.base == "last_done":
        problems.append(THRESHOLD_BASE.format(limit=entry.entered))
    if entry.phase == "repeat" and entry.base != "last_done":
        problems.append(REPEAT_BASE.format(base=entry.base.replace("_", " ")))
    if entry.phase == "replace" and entry.group != 1:
        problems.append(
            ONE_REPLACE_GROUP.format(limit=entry.entered, group=entry.group)
        )
    if granted is None:
        return problems
    if granted[0] != counter:
        problems.append(
            OTHER_UNIT.format(tolerance=entry.tolerance, limit=entry.entered)
        )
    if draft.requirement_class in STRICT:
        kind = RequirementClass(draft.requirement_class).label
        problems.append(NOT_STRICT.format(tolerance=entry.tolerance, kind=kind))
    elif draft.requirement_class == RequirementClass.DIRECTIVE:
        problems += _directive_problems(entry, draft.source_document)
    elif not entry.tolerance_source.strip():
        problems.append(NO_TOLERANCE_SOURCE.format(tolerance=entry.tolerance))
    return problems


def _directive_problems(entry: LimitEntry, directive: Document | None) -> list[str]:
    """A directive is not exceeded, but by what it grants in its own words."""
    reference = directive.reference if directive else "the directive"
    if directive is not None and reference in entry.tolerance_source:
        return []
    return [NOT_IN_DIRECTIVE.format(tolerance=entry.tolerance, reference=reference)]


def _evaluation_problems(draft: RequirementDraft, evaluation: Evaluation) -> list[str]:
    """An interval is never longer than the calculation it came from."""
    number = evaluation.number
    if evaluation.use == Use.FOUND_DAMAGE:
        return [FOUND_DAMAGE.format(number=number)]
    if evaluation.outcome != Outcome.COMPUTED:
        return [NOT_COMPUTED.format(number=number)]
    problems = []
    if any(entry.combine == "last" for entry in draft.limits):
        problems.append(FIRST_ONLY)
    calculated = {
        "threshold": evaluation.threshold_cycles,
        "repeat": evaluation.repeat_cycles,
    }
    for phase, cycles in calculated.items():
        entries = [x for x in draft.limits if x.phase == phase]
        in_cycles = [
            (entry, value)
            for entry in entries
            for counter, value in [amount_read(entry.entered)]
            if counter is Counter.CYCLES
        ]
        if entries and not in_cycles:
            problems.append(CYCLES_NEEDED.format(number=number, phase=phase))
        for entry, value in in_cycles:
            facts = {"number": number, "phase": phase, "limit": entry.entered}
            if cycles is None:
                problems.append(NOT_GIVEN.format(**facts))
            elif value > cycles:
                written = amount_write(Counter.CYCLES, cycles)
                problems.append(LONGER.format(**facts, calculated=written))
    return problems
