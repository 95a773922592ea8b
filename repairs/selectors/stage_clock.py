"""The clock of an approval's next stage: until when, and how that came about.

Until stage 2 it is the operator's policy counted from release, or the temporary limit
that stage 1 approved, and the schedule that stage 1 approved where its day is earlier;
until stage 3 the threshold that stage 2 approved, which is a hard limit meanwhile;
after stage 3 there is none (AMC 20-20A appendix 3 annex 1).
"""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass, field, replace

from fleet.amounts import counters_write
from fleet.due import Anchor, Base, Counter, Counters, Due, Limit
from fleet.intervals import due_from
from fleet.models import Operator
from fleet.selectors.people import policy
from repairs.models import Substantiation
from repairs.selectors.substantiation_stages import approved_revision, stage_reached

STAGE_2_MONTHS = "stage_2_months"

NO_POLICY = "no policy {key} is recorded for {operator}; record it with its source"
NO_THRESHOLD = (
    "no approved threshold is recorded for {number}; name the substantiation that "
    "stage 2 approved"
)
WITHIN_MONTHS = "stage 2 within {months} months of {start} ({source})"
BEFORE_LIMIT = "stage 2 before the approved temporary limit of {limit} from {start}"
BY_SCHEDULE = "{words}; schedule for the data of {folder}: {day}, the earlier counts"
BEFORE_THRESHOLD = (
    "operating limitation: stage 3 before the approved threshold of {limit} from "
    "{start}"
)
NO_BASIS = "stage {stage} of the approval of {number}"


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


@dataclass(frozen=True, slots=True)
class Schedule:
    """The day by which the data are due, as the folder's stage 1 approved it."""

    folder: str
    on: dt.date

    def brought_forward(self, clock: Clock) -> Clock:
        """Both said; the earlier counts. A clock without a day cannot be compared."""
        if clock.due.on is None:
            return clock
        told = {"folder": self.folder, "day": self.on.isoformat()}
        basis = BY_SCHEDULE.format(words=clock.basis, **told)
        return Clock(replace(clock.due, on=min(clock.due.on, self.on)), basis)


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
    clock = clock_of(
        folder.operator,
        start,
        reached,
        _limited(one, "temporary_limit"),
        _limited(two, "threshold"),
    )
    if reached == 1 and one is not None and one.data_due_on is not None:
        return Schedule(folder.number, one.data_due_on).brought_forward(clock)
    return clock


def _limited(row: Substantiation | None, name: str) -> Limited:
    """What that revision approved; a limit of an unapproved one counts for nothing."""
    if row is None:
        return Limited()
    amount = Counters(getattr(row, f"{name}_minutes"), getattr(row, f"{name}_cycles"))
    source = f"{row}, {getattr(row, f'{name}_source')}"
    return Limited(amount, getattr(row, f"{name}_on"), source)
