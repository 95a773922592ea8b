"""The clocks of approval in stages, on the due list.

Until stage 2 the clock is the operator's policy counted from release, or the temporary
limit that stage 1 approved; until stage 3 it is the threshold that stage 2 approved,
which is a hard limit meanwhile; after stage 3 there is none (AMC 20-20A appendix 3
annex 1). The clock hangs on the repair that uses the folder; for damage that stays
unrepaired on the folder itself, from the day and counters of the first decision citing
it.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterable
from dataclasses import dataclass, field, replace

from django.db.models import Q

from fleet.amounts import counters_write
from fleet.due import Anchor, Base, Counter, Counters, Due, Limit
from fleet.intervals import due_from
from fleet.models import Criticality, Operator
from fleet.selectors.life_limits import columns
from fleet.selectors.people import policy
from fleet.services.history import Writing
from repairs.models import (
    Disposition,
    DispositionKind,
    DueKind,
    DuePoint,
    Finding,
    FindingState,
    Repair,
    RepairCategory,
    RepairState,
    RequirementState,
    Substantiation,
)
from repairs.selectors.review_reach import findings_covered
from repairs.selectors.substantiation_stages import (
    approved_revision,
    revisions_of,
    stage_reached,
)
from repairs.services.due_points import (
    due_point_close,
    due_point_open,
    due_points_close,
)

STAGE_2_MONTHS = "stage_2_months"
SETTLED = (
    FindingState.RECTIFIED,
    FindingState.CLOSED,
    FindingState.DUPLICATE,
    FindingState.VOIDED,
)
PENDING_STAGES = ("none", "1", "2")
KEEPS_DAMAGE = (
    DispositionKind.ACCEPT,
    DispositionKind.ACCEPT_WITH_INSPECTION,
    DispositionKind.DEFER,
)

NO_POLICY = "no policy {key} is recorded for {operator}; record it with its source"
NO_THRESHOLD = (
    "no approved threshold is recorded for {number}; name the substantiation that "
    "stage 2 approved"
)
WITHIN_MONTHS = "stage 2 within {months} months of {start} ({source})"
BEFORE_LIMIT = "stage 2 before the approved temporary limit of {limit} from {start}"
BEFORE_THRESHOLD = (
    "operating limitation: stage 3 before the approved threshold of {limit} from "
    "{start}"
)
NO_BASIS = "stage {stage} of the approval of {number}"
STAGE_APPROVED = "stage {stage} approved: {folder}"
CLOCK_AGREES_NOW = "counted anew after {folder}"
CARRIED_BY = "the clock runs on {repair}"


@dataclass(frozen=True, slots=True)
class Start:
    """What a clock counts from: its day, the aircraft's counters then, in words."""

    number: str
    words: str
    on: dt.date
    at: Counters


@dataclass(frozen=True, slots=True)
class Limited:
    """An approved amount from the start: on counters, to a day, by a document."""

    amount: Counters = field(default_factory=Counters)
    on: dt.date | None = None
    source: str = ""

    @property
    def given(self) -> bool:
        return self.amount != Counters() or self.on is not None

    @property
    def words(self) -> str:
        parts = [counters_write(self.amount), self.on.isoformat() if self.on else ""]
        told = " · ".join(part for part in parts if part)
        return f"{told} ({self.source})" if self.source else told

    def due(self, start: Start) -> Due:
        """The amount added to the counters at the start; a day stands as it is."""
        given = (
            (Counter.CYCLES, self.amount.cycles),
            (Counter.MINUTES, self.amount.minutes),
        )
        limits = [
            Limit(counter, value, Base.RELEASE)
            for counter, value in given
            if value is not None
        ]
        due = due_from(limits, {Base.RELEASE: Anchor(start.at, start.on)})
        return replace(due, on=self.on)


@dataclass(frozen=True, slots=True)
class Clock:
    """The next stage's due value, and how it came about in words."""

    due: Due
    basis: str


def clock_of(
    operator: Operator,
    start: Start,
    reached: int,
    temporary: Limited,
    threshold: Limited,
) -> Clock:
    """The clock of the stage that comes next; a missing number makes it due."""
    if reached == 2:
        if not threshold.given:
            missing = NO_THRESHOLD.format(number=start.number)
            basis = NO_BASIS.format(stage=3, number=start.number)
            return Clock(Due(cannot_compute=missing), basis)
        words = BEFORE_THRESHOLD.format(limit=threshold.words, start=start.words)
        return Clock(threshold.due(start), words)
    if temporary.given:
        words = BEFORE_LIMIT.format(limit=temporary.words, start=start.words)
        return Clock(temporary.due(start), words)
    row = policy(operator, STAGE_2_MONTHS, start.on)
    if row is None:
        missing = NO_POLICY.format(key=STAGE_2_MONTHS, operator=operator)
        basis = NO_BASIS.format(stage=2, number=start.number)
        return Clock(Due(cannot_compute=missing), basis)
    months = Limit(Counter.MONTHS, row.value, Base.RELEASE)
    due = due_from([months], {Base.RELEASE: Anchor(on=start.on)})
    source = f"{row.source} {row.edition}".strip()
    words = WITHIN_MONTHS.format(months=row.value, start=start.words, source=source)
    return Clock(due, words)


def folder_clock(folder: Substantiation, start: Start) -> Clock | None:
    """The clock of a folder's next stage from a start; None once it is complete."""
    reached = stage_reached(folder)
    if reached == 3:
        return None
    one, two = approved_revision(folder, 1), approved_revision(folder, 2)
    return clock_of(
        folder.operator,
        start,
        reached,
        _limited(one, "temporary_limit"),
        _limited(two, "threshold"),
    )


def _limited(row: Substantiation | None, name: str) -> Limited:
    """What that revision approved; a limit of an unapproved one counts for nothing."""
    if row is None:
        return Limited()
    amount = Counters(getattr(row, f"{name}_minutes"), getattr(row, f"{name}_cycles"))
    source = f"{row}, {getattr(row, f'{name}_source')}"
    return Limited(amount, getattr(row, f"{name}_on"), source)


def stage_clocks_follow(w: Writing, folder: Substantiation, *, on: dt.date) -> None:
    """After a stage was approved: the clocks of the folder's repairs, or its own."""
    repairs = Repair.objects.filter(
        substantiation__operator=folder.operator_id,
        substantiation__number=folder.number,
        state=RepairState.EMBODIED,
    )
    keys = list(repairs.order_by("pk").values_list("pk", flat=True))
    for key in keys:
        row = w.locked(Repair.objects.select_related("aircraft", "operator"), pk=key)
        repair_clock_follow(w, row, on=on)
    if not keys:
        _own_clock_follow(w, folder, on)


def repair_clock_follow(w: Writing, repair: Repair, *, on: dt.date) -> None:
    """The repair's stage and clock as its folder, or what was said of it, has them.

    Opened when an approval stage is still to come, moved when one was approved, closed
    after the last; the old one stays in the record as it was.
    """
    folder = repair.substantiation
    if folder is not None:
        w.change(repair, stage_reached=_stage_word(repair, folder))
    clock = _repair_clock(repair) if repair.state == RepairState.EMBODIED else None
    if folder is not None and repair.state == RepairState.EMBODIED:
        _own_clocks_close(w, folder, on, CARRIED_BY.format(repair=repair))
    reason = _reason(folder) if folder else ""
    _follow(w, repair, [repair], clock, on, reason)


def _stage_word(repair: Repair, folder: Substantiation) -> str:
    reached = stage_reached(folder)
    if not reached and not _critical(repair):
        return "not_applicable"
    return str(reached) if reached else "none"


def _repair_clock(repair: Repair) -> Clock | None:
    start = Start(
        repair.number,
        f"release of {repair.number}",
        repair.released_on or repair.entered_at.date(),
        columns(repair, "at"),
    )
    if repair.substantiation is not None:
        return folder_clock(repair.substantiation, start) if _critical(repair) else None
    b_waits = (
        repair.category == RepairCategory.B
        and repair.stage_reached in PENDING_STAGES
        and not repair.requirements.filter(state=RequirementState.EFFECTIVE).exists()
    )
    pending = repair.category == RepairCategory.PENDING and _critical(repair)
    if not (b_waits or pending):
        return None
    reached = int(repair.stage_reached) if repair.stage_reached in ("1", "2") else 0
    temporary = Limited(Counters(cycles=repair.temporary_limit_cycles))
    return clock_of(repair.operator, start, reached, temporary, Limited())


def _critical(item: Repair | Finding) -> bool:
    """PSE, FCS, or nobody has said: unknown is not acceptable."""
    return item.criticality != Criticality.SECONDARY


def disposition_clock_follow(w: Writing, disposition: Disposition) -> None:
    """A decision cites a folder: the clock of damage that stays starts with it."""
    folder = disposition.substantiation
    if folder is None:
        return
    used = Repair.objects.filter(
        substantiation__operator=folder.operator_id,
        substantiation__number=folder.number,
        state=RepairState.EMBODIED,
    )
    if not used.exists():
        _own_clock_follow(w, folder, disposition.decided_on)


def _own_clock_follow(w: Writing, folder: Substantiation, on: dt.date) -> None:
    first = (
        Disposition.objects.filter(
            substantiation__operator=folder.operator_id,
            substantiation__number=folder.number,
            kind__in=KEEPS_DAMAGE,
        )
        .order_by("decided_on", "pk")
        .first()
    )
    revisions = list(revisions_of(folder).select_related("aircraft"))
    standing = [one for one in findings_covered(folder) if one.state not in SETTLED]
    clock = None
    if first is not None and any(map(_critical, standing)):
        words = f"the decision {first.number}"
        at = columns(first, "at")
        start = Start(folder.number, words, first.decided_on, at)
        clock = folder_clock(folder, start)
    _follow(w, folder, revisions, clock, on, _reason(folder))


def findings_clocks_close(
    w: Writing, findings: Iterable[Finding], *, on: dt.date, reason: str
) -> None:
    """Close the clocks of folders whose last open finding is settled by this."""
    folders = Substantiation.objects.filter(
        Q(finding_rows__finding__in=list(findings), finding_rows__withdrawn=False),
        due_points__closed_on__isnull=True,
        due_points__kind=DueKind.STAGE_CLOCK,
    )
    for folder in folders.distinct().order_by("pk"):
        if all(one.state in SETTLED for one in findings_covered(folder)):
            _own_clocks_close(w, folder, on, reason)


def _own_clocks_close(
    w: Writing, folder: Substantiation, on: dt.date, reason: str
) -> None:
    for one in revisions_of(folder).select_related("aircraft"):
        kinds = (DueKind.STAGE_CLOCK,)
        due_points_close(w, origin=one, on=on, reason=reason, kinds=kinds)


def _reason(folder: Substantiation) -> str:
    reached = stage_reached(folder)
    if not reached:
        return CLOCK_AGREES_NOW.format(folder=folder)
    by = approved_revision(folder, reached)
    return STAGE_APPROVED.format(stage=reached, folder=by)


def _follow(
    w: Writing,
    origin: Repair | Substantiation,
    origins: list[Repair] | list[Substantiation],
    clock: Clock | None,
    on: dt.date,
    reason: str,
) -> None:
    """One open clock that says what the records say; what said otherwise is closed."""
    column = "repair" if isinstance(origin, Repair) else "substantiation"
    points = DuePoint.objects.filter(
        **{f"{column}__in": origins},
        kind=DueKind.STAGE_CLOCK,
        closed_on__isnull=True,
    )
    earlier = points.first()
    if earlier is not None:
        if clock is not None and _says(earlier, clock):
            return
        due_point_close(w, earlier, on=on, reason=reason)
    if clock is not None:
        due_point_open(
            w,
            origin=origin,
            kind=DueKind.STAGE_CLOCK,
            due=clock.due,
            opened_on=on,
            basis=clock.basis,
            replaces=earlier,
        )


def _says(point: DuePoint, clock: Clock) -> bool:
    return point.basis == clock.basis and (
        (point.due_cycles, point.due_minutes, point.due_on, point.cannot_compute)
        == (
            clock.due.at.cycles,
            clock.due.at.minutes,
            clock.due.on,
            clock.due.cannot_compute,
        )
    )
