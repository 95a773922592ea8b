"""What must stand before a folder is signed as prepared, checked or approved.

Each meaning needs what the earlier ones need, asked again of the revision that is
signed. Every sentence says what is missing and where it is mended.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from functools import cached_property

from django.db.models import Prefetch

from fleet.models import Criticality
from repairs.inspections_text import inspections_missing, none_necessary
from repairs.models import (
    ASIDE_STATES,
    Evaluation,
    Finding,
    Meaning,
    Repair,
    RepairCategory,
    RepairState,
    RequirementState,
    Substantiation,
    SubstantiationCase,
    SubstantiationEffect,
)
from repairs.selectors.evaluations import APPROVED, SUPERSEDED, state_of, with_state
from repairs.selectors.neighbours import Item
from repairs.selectors.review_reach import (
    REVIEW_REACH,
    Within,
    findings_covered,
    repairs_using,
    review_reach,
    within_reach,
)
from repairs.selectors.substantiation_content import (
    cases_of,
    documents_of,
    neighbour_name,
    neighbours_of,
)
from repairs.selectors.substantiation_stages import stage_reached

TOUCHES: tuple[str, ...] = SubstantiationEffect._meta.get_field("touches").words
"""Effects that a major one answers, all of them."""

NO_REACH = (
    "No policy {key} is recorded for {operator}, so nobody can say that every "
    "neighbour was reviewed; record it with its source."
)
NOTHING_COVERED = "It covers no finding and no repair uses it; add what it is for."
TO_BE_PLACED = "{item} is to be placed; its neighbours cannot be found before it is."
STANDS_ASIDE = "{item} is {state}; withdraw it from the folder."
NOT_LISTED = (
    "Within reach, but not listed: {items}. Look for neighbours again, and review them."
)
NOT_ANSWERED = "Not reviewed yet: {items}."
SCALE_NEEDED = "Say whether it is minor or major."
SCALE_REASON_NEEDED = "Say why it is {scale}."
CATEGORY_NEEDED = (
    "Give the repair category: it covers what is PSE, FCS or pressurised, or what "
    "nobody has said to be secondary ({items})."
)
STATIC_CASE_NEEDED = "Add the load case of static ultimate strength."
EFFECTS_NEEDED = "A major one answers every effect; not answered: {effects}."
DATA_NEEDED = "Name the approval data: a document, and its page."
SUPERSEDED_CITED = "{number} was superseded; cite the evaluation that replaces it."
UNAPPROVED_CITED = (
    "{number} is {state}: an unapproved calculation. Approve it first, or withdraw it."
)
NOT_SHOWN = (
    "Case {number}, {case}: give its margin, or the method and the source of the "
    "allowable by which it was shown."
)
NEGATIVE = "Case {number}, {case}: the margin {margin:.2f} is below nought."
SCHEDULE_NEEDED = (
    "{items}: stage 1 of PSE or FCS is approved with the day by which the "
    "damage-tolerance data are submitted."
)
FATIGUE_NEEDED = (
    "Add a fatigue case with its evaluation, or with the document that holds the "
    "calculation."
)
THRESHOLD_NEEDED = "Give the threshold of the inspections, and its source."
INSPECTIONS_NEEDED = "The inspections do not say: {parts}."
NONE_FOR_B = "Category B has supplemental inspections; “none necessary” is not for it."
CATEGORY_PENDING = "The category is still pending; stage 3 settles it."
REQUIREMENT_NEEDED = (
    "{item} is category B and has no inspection requirement in force; raise it first, "
    "or nothing of it would be left on the due list."
)
STAGE_BEFORE = "Stage {before} has not been approved; stage {stage} follows it."

STAGES = {Meaning.STAGE_1: 1, Meaning.STAGE_2: 2, Meaning.STAGE_3: 3}
ALL = (Meaning.STAGE_1, Meaning.STAGE_2, Meaning.STAGE_3, Meaning.APPROVED)


@dataclass(frozen=True)
class Folder:
    """A revision with what the guards read of it, asked once."""

    row: Substantiation
    day: dt.date

    @cached_property
    def findings(self) -> list[Finding]:
        return findings_covered(self.row)

    @cached_property
    def repairs(self) -> list[Repair]:
        return repairs_using(self.row)

    @property
    def items(self) -> list[Item]:
        return [*self.findings, *self.repairs]

    @cached_property
    def cases(self) -> list[SubstantiationCase]:
        states = with_state(Evaluation.objects.all())
        rows = cases_of(self.row).select_related(None)
        return list(rows.prefetch_related(Prefetch("evaluation", queryset=states)))

    @cached_property
    def critical(self) -> list[Item]:
        """PSE or FCS, or nobody has said that it is secondary."""
        return [x for x in self.items if x.criticality != Criticality.SECONDARY]

    @property
    def needs_category(self) -> list[Item]:
        held = [x for x in self.items if x.panel is not None and x.panel.pressurised]
        return [*self.critical, *(x for x in held if x not in self.critical)]

    def of_kind(self, kind: str) -> list[SubstantiationCase]:
        return [case for case in self.cases if case.kind == kind]


def needs(row: Substantiation, meaning: str, *, day: dt.date) -> list[str]:
    """Everything that stands against signing the revision so; a fixed number of
    queries, but for the reach, which is looked over for each item."""
    folder = Folder(row, day)
    asked: list[Callable[[Folder], Iterator[str]]] = [_prepared, _cited]
    if meaning in ALL:
        asked += [_approved_only, _static]
    if meaning == Meaning.STAGE_1:
        asked.append(_schedule)
    critical = bool(folder.critical)
    if meaning in (Meaning.STAGE_2, Meaning.STAGE_3) or (
        meaning == Meaning.APPROVED and critical
    ):
        asked += [_fatigue]
    if meaning == Meaning.STAGE_3 or (meaning == Meaning.APPROVED and critical):
        asked += [_inspections]
    found = [problem for ask in asked for problem in ask(folder)]
    return found + _order(folder, meaning)


def not_listed(row: Substantiation, day: dt.date) -> list[Within]:
    """What is within reach that day and stands in no row of the folder."""
    reach = review_reach(row, day)
    items: list[Item] = [*findings_covered(row), *repairs_using(row)]
    near = within_reach(items, float(reach.value) if reach else None)
    listed = {
        (type(one), one.pk)
        for row in neighbours_of(row)
        for one in (row.finding, row.repair, row.joint)
        if one is not None
    }
    return [one for one in near if one.key not in listed]


def _prepared(folder: Folder) -> Iterator[str]:
    row = folder.row
    if not folder.items:
        yield NOTHING_COVERED
    yield from _places(folder)
    yield from _neighbours(folder)
    if row.scale == "undecided":
        yield SCALE_NEEDED
    elif not row.scale_reason.strip():
        yield SCALE_REASON_NEEDED.format(scale=row.scale)
    if folder.needs_category and not row.category:
        yield CATEGORY_NEEDED.format(items=_names(folder.needs_category))
    if not folder.of_kind("static_ultimate"):
        yield STATIC_CASE_NEEDED
    if row.scale == "major" and (open_ := effects_open(row)):
        yield EFFECTS_NEEDED.format(effects=", ".join(open_))
    if not documents_of(row).filter(role="approval_data").exclude(page="").exists():
        yield DATA_NEEDED


def _places(folder: Folder) -> Iterator[str]:
    for item in folder.items:
        if item.section_id is None:
            yield TO_BE_PLACED.format(item=item)
    for finding in folder.findings:
        if finding.state in ASIDE_STATES:
            state = finding.get_state_display()
            yield STANDS_ASIDE.format(item=finding, state=state)


def _neighbours(folder: Folder) -> Iterator[str]:
    row = folder.row
    if review_reach(row, folder.day) is None:
        yield NO_REACH.format(key=REVIEW_REACH, operator=row.operator)
    if new := not_listed(row, folder.day):
        told = ", ".join(f"{one.item} at {one.gap_mm:.0f} mm" for one in new)
        yield NOT_LISTED.format(items=told)
    open_ = [neighbour_name(one) for one in neighbours_of(row) if not one.answer]
    if open_:
        yield NOT_ANSWERED.format(items=", ".join(open_))


def effects_open(row: Substantiation) -> list[str]:
    """Effects that are not answered, in words; unknown is no answer."""
    answered = row.effects.exclude(answer="unknown").values_list("touches", flat=True)
    said = set(answered)
    return [word.replace("_", " ") for word in TOUCHES if word not in said]


def _cited(folder: Folder) -> Iterator[str]:
    for number, state in _states(folder):
        if state == SUPERSEDED:
            yield SUPERSEDED_CITED.format(number=number)


def _approved_only(folder: Folder) -> Iterator[str]:
    for number, state in _states(folder):
        if state not in (APPROVED, SUPERSEDED):
            yield UNAPPROVED_CITED.format(number=number, state=state)


def _states(folder: Folder) -> Iterator[tuple[str, str]]:
    cited = {x.evaluation.pk: x.evaluation for x in folder.cases if x.evaluation}
    for evaluation in cited.values():
        yield evaluation.number, state_of(evaluation)


def _static(folder: Folder) -> Iterator[str]:
    for case in folder.cases:
        if case.kind == "fatigue":
            continue
        margin = margin_of(case)
        told = {"number": case.number, "case": case.case or case.requirement}
        if margin is not None and margin < 0:
            yield NEGATIVE.format(margin=margin, **told)
        elif margin is None and not (case.method and case.allowable_source):
            yield NOT_SHOWN.format(**told)


def margin_of(case: SubstantiationCase) -> float | None:
    """The margin as written; else the one of the evaluation cited for the case."""
    if case.margin is not None or case.evaluation is None:
        return case.margin
    if case.kind == "residual":
        return case.evaluation.margin_residual
    return case.evaluation.margin_ultimate if case.kind == "static_ultimate" else None


def _schedule(folder: Folder) -> Iterator[str]:
    if folder.critical and folder.row.data_due_on is None:
        yield SCHEDULE_NEEDED.format(items=_names(folder.critical))


def _fatigue(folder: Folder) -> Iterator[str]:
    row = folder.row
    cases = folder.of_kind("fatigue")
    held = documents_of(row).filter(role="calculation").exists()
    if not cases or not (held or any(case.evaluation for case in cases)):
        yield FATIGUE_NEEDED
    if not threshold_given(row) and not none_necessary(row.inspections):
        yield THRESHOLD_NEEDED
    for case in cases:
        if case.margin is not None and case.margin < 0:
            words = case.case or case.requirement
            yield NEGATIVE.format(number=case.number, case=words, margin=case.margin)


def threshold_given(row: Substantiation) -> bool:
    values = (row.threshold_cycles, row.threshold_minutes, row.threshold_on)
    return any(value is not None for value in values)


def _inspections(folder: Folder) -> Iterator[str]:
    row = folder.row
    if row.category == RepairCategory.PENDING:
        yield CATEGORY_PENDING
    if none_necessary(row.inspections):
        if row.category == RepairCategory.B:
            yield NONE_FOR_B
        return
    if missing := inspections_missing(row.inspections):
        yield INSPECTIONS_NEEDED.format(parts=", ".join(missing))
    if row.category == RepairCategory.B:
        yield from _requirements(folder)


def _requirements(folder: Folder) -> Iterator[str]:
    """What carries on when the last clock ends: a requirement in force for each."""
    embodied = [x for x in folder.repairs if x.state == RepairState.EMBODIED]
    for item in embodied or folder.findings:
        if not _requirement_in_force(item):
            yield REQUIREMENT_NEEDED.format(item=item)


def _requirement_in_force(item: Item) -> bool:
    in_force = RequirementState.EFFECTIVE
    if item.requirements.filter(state=in_force).exists():
        return True
    if isinstance(item, Repair):
        return False
    decided = item.disposition_rows.filter(disposition__requirements__state=in_force)
    return decided.exists()


def _order(folder: Folder, meaning: str) -> list[str]:
    stage = STAGES.get(Meaning(meaning), 0)
    if stage < 2 or stage_reached(folder.row) >= stage - 1:
        return []
    return [STAGE_BEFORE.format(before=stage - 1, stage=stage)]


def _names(items: Sequence[Item]) -> str:
    return ", ".join(map(str, items))
