"""What the pages of substantiations show."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass

from django.db.models import Prefetch, QuerySet

from fleet.models import Policy, User
from repairs.inspections_text import inspections_said
from repairs.models import (
    ASIDE_STATES,
    Approval,
    Disposition,
    DuePoint,
    Evaluation,
    Finding,
    Meaning,
    Repair,
    Substantiation,
    SubstantiationCase,
    SubstantiationDocument,
    SubstantiationEffect,
    SubstantiationFinding,
    SubstantiationNeighbour,
)
from repairs.selectors.evaluations import APPROVED, state_of, with_state
from repairs.selectors.review_reach import repairs_using, review_reach
from repairs.selectors.substantiation_content import (
    Difference,
    cases_of,
    differences,
    documents_of,
    neighbour_name,
    neighbours_of,
)
from repairs.selectors.substantiation_needs import TOUCHES, margin_of, needs
from repairs.selectors.substantiation_stages import (
    BY_STAGE,
    CHECKED,
    DRAFT,
    PREPARED,
    REACHED_WORDS,
    REJECTED,
    approvals_of_number,
    clocks_of,
    revision_state,
    revisions_of,
    with_standing,
)


@dataclass(frozen=True)
class FolderLine:
    """A folder in a list: its latest revision, and how far the number has come."""

    row: Substantiation

    @property
    def state(self) -> str:
        return revision_state(self.row)

    @property
    def reached(self) -> str:
        return REACHED_WORDS[self.row.reached]  # type: ignore[attr-defined]

    @property
    def findings(self) -> list[Finding]:
        return [x.finding for x in self.row.finding_rows.all() if not x.withdrawn]


def folders_listed(user: User) -> QuerySet[Substantiation]:
    """The latest revision of every folder the user may see, with its standing."""
    mine = Substantiation.objects.visible_to(user).values("pk")
    rows = Substantiation.objects.filter(pk__in=mine, replaced_by__isnull=True)
    return (
        with_standing(rows)
        .select_related("aircraft", "prepared_by")
        .prefetch_related("finding_rows__finding")
        .order_by("-pk")
    )


def folders_of_finding(finding: Finding) -> list[FolderLine]:
    """Folders whose latest revision covers the finding; two queries."""
    rows = Substantiation.objects.filter(
        finding_rows__finding=finding,
        finding_rows__withdrawn=False,
        replaced_by__isnull=True,
    )
    return _lines(rows)


def folders_citing(evaluation: Evaluation) -> list[FolderLine]:
    """Revisions, also earlier ones, in which the evaluation stands behind a case."""
    rows = Substantiation.objects.filter(
        cases__evaluation=evaluation, cases__withdrawn=False
    )
    return _lines(rows.distinct())


def _lines(rows: QuerySet[Substantiation]) -> list[FolderLine]:
    keys = rows.values("pk")
    standing = with_standing(Substantiation.objects.filter(pk__in=keys))
    return [FolderLine(row) for row in standing.order_by("-pk")]


def neighbour_next(row: Substantiation) -> SubstantiationNeighbour | None:
    """The nearest neighbour that nobody has answered yet."""
    return neighbours_of(row).filter(answer="").first()


def effects_said(row: Substantiation) -> dict[str, str]:
    """The effects as their form shows them."""
    said: dict[str, str] = {}
    for one in row.effects.all():
        said |= {one.touches: one.answer, f"{one.touches}_note": one.note}
    return said


def substantiation_whole() -> QuerySet[Substantiation]:
    """Revisions with what their page shows at the top."""
    return with_standing(Substantiation.objects.all()).select_related(
        "aircraft__variant__aircraft_type",
        "aircraft__operator",
        "operator",
        "prepared_by",
        "replaces",
        "entered_by",
    )


@dataclass(frozen=True)
class StageStep:
    """One step of the strip: its word, who took it, and whether it is the next."""

    words: str
    by: Approval | None
    is_next: bool = False


@dataclass(frozen=True)
class CaseShown:
    """A load case, with its margin and the state of the evaluation behind it."""

    row: SubstantiationCase
    margin: float | None
    state: str

    @property
    def unapproved(self) -> bool:
        return self.row.evaluation is not None and self.state != APPROVED

    @property
    def negative(self) -> bool:
        return self.margin is not None and self.margin < 0


@dataclass(frozen=True)
class FolderShown:
    """Everything of one revision, and what hangs on its number."""

    row: Substantiation
    state: str
    reached: str
    strip: Sequence[StageStep]
    next_words: str
    needed: Sequence[str]
    reach: Policy | None
    findings: Sequence[SubstantiationFinding]
    to_place: int
    neighbours: Sequence[tuple[SubstantiationNeighbour, str]]
    cases: Sequence[CaseShown]
    effects: Sequence[tuple[str, SubstantiationEffect | None]]
    documents: Sequence[SubstantiationDocument]
    inspections: Sequence[tuple[str, str]]
    repairs: Sequence[Repair]
    dispositions: Sequence[Disposition]
    clocks: Sequence[DuePoint]
    revisions: Sequence[tuple[Substantiation, str]]
    changed: Sequence[Difference]
    later: Substantiation | None

    @property
    def standing(self) -> str:
        """The state of the revision, and of the number where that is another."""
        if self.state == "complete" or self.reached in self.state:
            return self.state
        return f"{self.state} · {self.reached}"

    @property
    def is_draft(self) -> bool:
        return self.state == DRAFT

    @property
    def may_be_revised(self) -> bool:
        return not self.is_draft and self.later is None

    @property
    def may_be_signed(self) -> bool:
        return self.later is None and self.state != REJECTED


def folder_shown(row: Substantiation, *, day: dt.date) -> FolderShown:
    """The folder's page; a number of queries that its rows do not raise."""
    revisions = list(with_standing(revisions_of(row)))
    later = revisions[-1] if revisions[-1].pk != row.pk else None
    state, reached = revision_state(row), row.reached  # type: ignore[attr-defined]
    meaning = _next_meaning(state, reached)
    open_to_sign = later is None and state != REJECTED and meaning is not None
    return FolderShown(
        row=row,
        state=state,
        reached=REACHED_WORDS[reached],
        strip=_strip(row, meaning if open_to_sign else None),
        next_words=Meaning(meaning).label if open_to_sign and meaning else "",
        needed=needs(row, meaning, day=day) if open_to_sign and meaning else [],
        reach=review_reach(row, day),
        findings=_findings(row),
        to_place=_to_place(row),
        neighbours=[(one, neighbour_name(one)) for one in neighbours_of(row)],
        cases=cases_shown(row),
        effects=_effects(row),
        documents=list(documents_of(row)),
        inspections=list(inspections_said(row.inspections).items()),
        repairs=repairs_using(row),
        dispositions=_dispositions(row),
        clocks=_clocks(row),
        revisions=[(one, revision_state(one)) for one in reversed(revisions)],
        changed=differences(row.replaces, row) if row.replaces else [],
        later=later,
    )


def folder_meaning_next(row: Substantiation) -> Meaning | None:
    """What the revision is signed as next, as its page says it; one query."""
    whole = with_standing(Substantiation.objects.filter(pk=row.pk)).get()
    reached: int = whole.reached  # type: ignore[attr-defined]
    return _next_meaning(revision_state(whole), reached)


def _next_meaning(state: str, reached: int) -> Meaning | None:
    """What this revision is signed as next; None after the last stage."""
    if state == DRAFT:
        return Meaning.PREPARED
    if state == PREPARED:
        return Meaning.CHECKED
    if reached == 3 and state != CHECKED:
        return None
    return (Meaning.STAGE_1, Meaning.STAGE_2, Meaning.STAGE_3)[min(reached, 2)]


def _strip(row: Substantiation, following: Meaning | None) -> list[StageStep]:
    """Prepared and checked in this revision; stages in any revision of the number."""
    signed = list(
        approvals_of_number(row)
        .select_related("substantiation")
        .order_by("signed_at", "pk")
    )

    def last(meanings: Sequence[str], own: bool = False) -> Approval | None:
        found = [
            one
            for one in signed
            if one.meaning in meanings and (not own or one.substantiation_id == row.pk)
        ]
        return found[-1] if found else None

    steps = [
        StageStep(str(one.label), last((one,), own=True), one == following)
        for one in (Meaning.PREPARED, Meaning.CHECKED)
    ]
    steps += [
        StageStep(
            f"stage {stage}",
            last((*BY_STAGE[stage], Meaning.APPROVED)),
            f"stage_{stage}" == following,
        )
        for stage in (1, 2, 3)
    ]
    rejected = last((Meaning.REJECTED,), own=True)
    return steps + ([StageStep("rejected", rejected)] if rejected else [])


def cases_shown(row: Substantiation) -> list[CaseShown]:
    """Load cases in order, each evaluation with its state; two queries."""
    states = with_state(Evaluation.objects.all())
    rows = cases_of(row).select_related(None)
    found = rows.prefetch_related(Prefetch("evaluation", queryset=states))
    return [CaseShown(one, margin_of(one), _state(one)) for one in found]


def _state(case: SubstantiationCase) -> str:
    return state_of(case.evaluation) if case.evaluation else ""


def _findings(row: Substantiation) -> list[SubstantiationFinding]:
    rows = row.finding_rows.filter(withdrawn=False)
    return list(rows.select_related("finding__section").order_by("finding__pk"))


def _to_place(row: Substantiation) -> int:
    """Findings of the aircraft on no map: they may be neighbours, and nobody knows."""
    rows = Finding.objects.filter(aircraft=row.aircraft_id, section__isnull=True)
    return rows.exclude(state__in=ASIDE_STATES).count()


def _effects(row: Substantiation) -> list[tuple[str, SubstantiationEffect | None]]:
    held = {one.touches: one for one in row.effects.all()}
    return [(word.replace("_", " "), held.get(word)) for word in TOUCHES]


def _dispositions(row: Substantiation) -> list[Disposition]:
    rows = Disposition.objects.filter(
        substantiation__operator=row.operator_id, substantiation__number=row.number
    )
    return list(rows.select_related("substantiation").order_by("pk"))


def _clocks(row: Substantiation) -> list[DuePoint]:
    rows = clocks_of(row.operator_id, row.number).select_related("repair")
    return list(rows.order_by("closed_on", "pk"))
