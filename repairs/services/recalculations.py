"""Evaluations made again in bulk, by as many workers as there are.

A run is shared out by aircraft. A worker holds one aircraft's share for a while and
renews its hold with every batch; if it dies, the hold ends and another worker goes on
where the items end. What gives the very same is not kept a second time.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Callable
from dataclasses import dataclass

from django.core.exceptions import ValidationError
from django.db import transaction
from django.db.models import Q, QuerySet

from fleet.models import Operator, User
from fleet.services.aircraft import stream_of
from fleet.services.chain import stream_end
from fleet.services.history import Writing
from repairs.models import (
    Evaluation,
    Recalculation,
    RecalculationItem,
    RecalculationPart,
)
from repairs.selectors.evaluations import evaluations_with_subjects
from repairs.selectors.recalculations import evaluations_wanted, run_open
from repairs.services.evaluation_prepare import Prepared, evaluation_prepare
from repairs.services.evaluations import (
    choice_of,
    evaluations_keep,
    gives_the_same,
    method_versions,
)
from repairs.services.recalculation_parts import (
    part_released,
    part_renewed,
    part_take,
    parts_make,
)

ALREADY = (
    "A recalculation of {operator} of {day} is still open ({done} of {wanted} done); "
    "go on with it first."
)
NOTHING = "No evaluation of {operator} is {which}; there is nothing to recalculate."
STALE, CURRENT = "stale", "current"
BATCH = 20

Clock = Callable[[], dt.datetime]


def recalculation_start(
    *,
    operator: Operator,
    stale_only: bool,
    as_of: dt.date,
    actor: User | None,
    at: dt.datetime,
) -> Recalculation:
    """A run over what is current now, shared out by aircraft; one at a time."""
    with Writing(
        actor=actor, action="recalculation_start", at=at, operator=operator
    ) as w:
        if (other := run_open(operator)) is not None:
            raise ValidationError(
                ALREADY.format(
                    operator=operator,
                    day=other.entered_at.date(),
                    done=other.items.count(),
                    wanted=other.wanted_count,
                )
            )
        newest = Evaluation.objects.order_by("-pk").values_list("pk", flat=True)
        run = Recalculation(
            operator=operator,
            stale_only=stale_only,
            as_of=as_of,
            last_evaluation=newest.first() or 0,
            wanted_count=0,
        )
        wanted = evaluations_wanted(run, method_versions())
        run.wanted_count = wanted.count()
        if not run.wanted_count:
            which = STALE if stale_only else CURRENT
            raise ValidationError(NOTHING.format(operator=operator, which=which))
        w.create(run)
        aircraft = set(wanted.values_list("finding__aircraft", flat=True))
        aircraft |= set(wanted.values_list("repair__aircraft", flat=True))
        parts_make(run, sorted(aircraft - {None}))
    return run


def recalculation_work(
    run: Recalculation,
    *,
    holder: str,
    actor: User | None,
    clock: Clock,
    until: dt.datetime | None = None,
    say: Callable[[int], None] = lambda done: None,
) -> int:
    """Take shares until none is left; how many evaluations this worker settled.

    `until` ends the work early; the share is then free for another.
    """
    settled = 0
    while (part := part_take(run, holder, clock())) is not None:
        wanted = _wanted(part)
        batches = [wanted[at : at + BATCH] for at in range(0, len(wanted), BATCH)]
        for batch in batches:
            if not part_renewed(part, clock()):
                break
            settled += _settle(part, batch, actor, clock())
            say(len(batch))
            if until is not None and clock() > until:
                part_released(part, done=False)
                return settled
        else:
            part_released(part, done=True)
    _finish(run, actor, clock())
    return settled


def _wanted(part: RecalculationPart) -> list[int]:
    """Keys of the evaluations of a share that the run has not settled yet."""
    rows = evaluations_wanted(part.run, method_versions())
    mine = Q(finding__aircraft=part.aircraft) | Q(repair__aircraft=part.aircraft)
    return list(rows.filter(mine).order_by("pk").values_list("pk", flat=True))


@dataclass(frozen=True, slots=True)
class _Again:
    """One evaluation calculated again, or why it could not be."""

    before: Evaluation
    prepared: Prepared | None
    error: str = ""


def _settle(
    part: RecalculationPart,
    batch: list[int],
    actor: User | None,
    at: dt.datetime,
) -> int:
    """Calculate a batch, then keep it in one writing; how many there were.

    What was written about the aircraft or the fleet in between has it calculated anew
    inside, and what was superseded or settled in between is left out.
    """
    run, stream = part.run, stream_of(part.aircraft)
    read_at = _ends(stream)
    made = [_again(row, run.as_of) for row in _rows(run, batch)]
    with Writing(
        actor=actor,
        action="evaluation_make",
        at=at,
        operator=run.operator,
        stream=stream,
        reason=f"recalculation of {run.entered_at:%Y-%m-%d %H:%M}",
    ) as w:
        if _ends(stream) != read_at:
            made = [_again(row, run.as_of) for row in _rows(run, batch)]
        _keep(w, run, made)
    return len(made)


def _rows(run: Recalculation, batch: list[int]) -> QuerySet[Evaluation]:
    """Those of a batch that are still current and not settled."""
    settled = RecalculationItem.objects.filter(run=run, before__in=batch)
    return (
        evaluations_with_subjects()
        .filter(pk__in=batch, replaced_by__isnull=True)
        .exclude(pk__in=settled.values("before"))
        .order_by("pk")
    )


def _ends(stream: str) -> tuple[int, int]:
    """Where the history of the aircraft and that of the fleet end."""
    return stream_end(stream)[0], stream_end("fleet")[0]


def _again(row: Evaluation, as_of: dt.date) -> _Again:
    subject = row.finding or row.repair
    assert subject is not None, "the database has checked that there is one subject"
    try:
        with transaction.atomic():
            prepared = evaluation_prepare(
                subject=subject, choice=choice_of(row), as_of=as_of
            )
    except (ValidationError, ArithmeticError, ValueError) as error:
        words = error.messages if isinstance(error, ValidationError) else [str(error)]
        return _Again(row, None, " ".join(words) or type(error).__name__)
    return _Again(row, prepared)


def _keep(w: Writing, run: Recalculation, made: list[_Again]) -> None:
    """Keep what is not the same as before, and an item for every one."""
    same = {
        again.before.pk
        for again in made
        if again.prepared and gives_the_same(again.before, again.prepared)
    }
    moved = [a for a in made if a.prepared and a.before.pk not in same]
    kept = evaluations_keep(
        w,
        [
            (a.before.finding or a.before.repair, a.before, a.prepared)  # type: ignore[misc]
            for a in moved
        ],
    )
    after = {a.before.pk: row for a, row in zip(moved, kept, strict=True)}
    w.create_many(
        [
            RecalculationItem(
                run=run,
                before=a.before,
                after=after.get(a.before.pk),
                unchanged=a.before.pk in same,
                error=a.error,
            )
            for a in made
        ]
    )


def _finish(run: Recalculation, actor: User | None, at: dt.datetime) -> None:
    """Say that the run is finished, once every share is done."""
    if run.parts.filter(done=False).exists():
        return
    with Writing(
        actor=actor, action="recalculation_end", at=at, operator=run.operator
    ) as w:
        fresh = w.locked(Recalculation.objects.all(), pk=run.pk)
        if fresh.finished_at is None:
            w.change(fresh, finished_at=at)
