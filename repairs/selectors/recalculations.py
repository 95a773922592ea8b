"""Runs over many evaluations: what they want, how far they are, what moved."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass

from django.db.models import Exists, F, OuterRef, Q, QuerySet

from fleet.models import Operator
from repairs.evaluation_text import number_text
from repairs.models import Evaluation, Recalculation, RecalculationItem
from repairs.selectors.evaluations import evaluations_stale, with_state

REPORT_HEADER = ("subject", "before", "after", "what", "was", "is", "change or error")
SHORTER, LESS, MOVED, ERRORS = "shorter", "less", "moved", "errors"
COMPARED = (
    ("margin_residual", "residual margin"),
    ("margin_ultimate", "ultimate margin"),
    ("usable_life_cycles", "life after factor"),
    ("threshold_cycles", "threshold"),
    ("repeat_cycles", "repeat interval"),
)
INTERVALS = ("usable_life_cycles", "threshold_cycles", "repeat_cycles")
MARGINS = ("margin_residual", "margin_ultimate")


def evaluations_wanted(
    run: Recalculation, versions: Mapping[str, int]
) -> QuerySet[Evaluation]:
    """Current evaluations that a run is to make again and has not settled yet."""
    rows = Evaluation.objects.filter(
        operator=run.operator,
        replaced_by__isnull=True,
        pk__lte=run.last_evaluation,
    )
    if run.pk is not None:
        settled = RecalculationItem.objects.filter(run=run, before=OuterRef("pk"))
        rows = rows.filter(~Exists(settled))
    return evaluations_stale(rows, versions) if run.stale_only else rows


def run_open(operator: Operator) -> Recalculation | None:
    """The run that is not finished, if there is one."""
    return Recalculation.objects.filter(
        operator=operator, finished_at__isnull=True
    ).first()


@dataclass(frozen=True, slots=True)
class Moved:
    """One number before and after; None where there was none."""

    title: str
    before: float | None
    after: float | None

    @property
    def share(self) -> float | None:
        """Change as a share of what it was."""
        if not self.before or self.after is None:
            return None
        return self.after / self.before - 1

    @property
    def before_text(self) -> str:
        """What it was, as text."""
        return number_text(self.before)

    @property
    def after_text(self) -> str:
        """What it is, as text."""
        return number_text(self.after)

    @property
    def change(self) -> str:
        """The change in per cent, signed; '' where there is none to give."""
        share = self.share
        return "" if share is None else f"{100 * share:+.1f} %".replace("-", "−")


def moved_numbers(item: RecalculationItem) -> list[Moved]:
    """The numbers of an item that are not what they were."""
    if item.after is None:
        return []
    pairs = (
        Moved(title, getattr(item.before, name), getattr(item.after, name))
        for name, title in COMPARED
    )
    return [pair for pair in pairs if pair.before != pair.after]


def _less(names: tuple[str, ...]) -> Q:
    """One of the numbers fell, or is no longer there."""
    found = Q()
    for name in names:
        before, after = f"before__{name}", f"after__{name}"
        found |= Q(**{f"{after}__lt": F(before)})
        found |= Q(**{f"{before}__isnull": False, f"{after}__isnull": True})
    return Q(after__isnull=False) & found


_WHEN = {
    SHORTER: _less(INTERVALS),
    LESS: _less(MARGINS),
    MOVED: Q(after__isnull=False),
    ERRORS: ~Q(error=""),
}


def run_items(run: Recalculation, which: str = "") -> QuerySet[RecalculationItem]:
    """Items of a run with both evaluations: all, or those of one kind."""
    rows = run.items.filter(_WHEN[which]) if which else run.items.all()
    return rows.select_related(
        "before__finding__aircraft", "before__repair__aircraft", "after"
    ).order_by("pk")


@dataclass(frozen=True, slots=True)
class Progress:
    """How far a run is, and what it found."""

    wanted: int
    settled: int
    unchanged: int
    moved: int
    shorter: int
    less: int
    errors: int

    @property
    def percent(self) -> int:
        """Settled share, rounded down."""
        return 100 * self.settled // self.wanted if self.wanted else 100


def run_progress(run: Recalculation) -> Progress:
    """Counts of a run; one query each."""
    count = {which: run.items.filter(when).count() for which, when in _WHEN.items()}
    return Progress(
        wanted=run.wanted_count,
        settled=run.items.count(),
        unchanged=run.items.filter(unchanged=True).count(),
        moved=count[MOVED],
        shorter=count[SHORTER],
        less=count[LESS],
        errors=count[ERRORS],
    )


def report_rows(run: Recalculation, which: str = "") -> Iterator[tuple[str, ...]]:
    """The report as rows of text: subject, evaluations, what moved by how much."""
    for item in run_items(run, which).iterator(chunk_size=500):
        subject = item.before.finding or item.before.repair
        head = (str(subject), item.before.number, str(item.after or ""))
        if item.error:
            yield (*head, "error", "", "", item.error)
        elif item.unchanged:
            yield (*head, "the same", "", "", "")
        for pair in moved_numbers(item):
            yield (
                *head,
                pair.title,
                pair.before_text,
                pair.after_text,
                pair.change,
            )


def stale_rows(rows: QuerySet[Evaluation]) -> QuerySet[Evaluation]:
    """Stale evaluations as their list shows them, the newest first."""
    return (
        with_state(rows)
        .select_related("finding__aircraft", "repair__aircraft")
        .order_by("-entered_at", "-pk")
    )
