"""What is due next for one subject of a requirement, re-made from the facts.

The facts are the limit rows, the records their bases name and every accomplishment;
the due points in the database are written from these answers and can be checked
against them.
"""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from datetime import date
from typing import Any

from fleet.due import (
    COUNTED,
    ZERO,
    Anchor,
    AnchorPolicy,
    Base,
    CalendarRule,
    Combine,
    Counter,
    Counters,
    Done,
    Due,
    Limit,
    Remaining,
)
from fleet.intervals import due_from, next_due, overrun
from fleet.models import PartEvent
from fleet.selectors.counters import aircraft_standing
from fleet.selectors.life_limits import columns
from fleet.selectors.parts import part_life
from repairs.models import (
    Accomplishment,
    DueKind,
    InspectionRequirement,
    RequirementLimit,
    RequirementSubject,
)

REPLACE_GROUP = 9
SHORTEST_MONTH = 28
BASE_WORDS = {
    Base.EFFECTIVE: "the effective date",
    Base.INSTALLED: "installation",
    Base.OTHER_TASK: "the other task",
}


@dataclass(frozen=True)
class NextDue:
    """The due point that one group of limits now asks for."""

    kind: DueKind
    group: int
    due: Due
    after: Accomplishment | None
    basis: str


def accomplishments_of(subject: RequirementSubject) -> list[Accomplishment]:
    """What was done, oldest first, without rows that a later one corrects."""
    rows = subject.accomplishments.filter(replaced_by__isnull=True)
    return list(
        rows.exclude(result="not_applicable").order_by("done_on", "number", "pk")
    )


def subject_dues(subject: RequirementSubject) -> list[NextDue]:
    """Threshold or repeat of each group, and the replace-by limit; a few queries."""
    requirement = subject.requirement
    limits = list(requirement.limits.all())
    done = accomplishments_of(subject)
    bases = _Bases(subject, done)
    dues = []
    for group in sorted({x.group for x in limits if x.phase != "replace"}):
        threshold = [x for x in limits if x.phase == "threshold" and x.group == group]
        repeat = [x for x in limits if x.phase == "repeat" and x.group == group]
        found = _inspection_due(requirement, bases, threshold, repeat, done)
        if found is not None:
            kind = DueKind.REPEAT if done else DueKind.THRESHOLD
            basis = _basis(repeat if done else threshold or repeat)
            last = done[-1] if done else None
            dues.append(NextDue(kind, group, found, last, basis))
    replaced = [x for x in limits if x.phase == "replace"]
    if replaced:
        due = _due_from(replaced, bases, requirement)
        dues.append(
            NextDue(DueKind.REPLACE, REPLACE_GROUP, due, None, _basis(replaced))
        )
    return dues


def subject_overrun(
    subject: RequirementSubject, done: Accomplishment
) -> list[Remaining]:
    """How late an accomplishment was beyond its due and any approved tolerance."""
    requirement = subject.requirement
    limits = list(requirement.limits.exclude(phase="replace"))
    before = [x for x in accomplishments_of(subject) if _earlier(x, done)]
    bases, late = _Bases(subject, before), []
    for group in sorted({x.group for x in limits}):
        threshold = [x for x in limits if x.phase == "threshold" and x.group == group]
        repeat = [x for x in limits if x.phase == "repeat" and x.group == group]
        due = _inspection_due(requirement, bases, threshold, repeat, before)
        governing = pure_limits(repeat if before else threshold or repeat, requirement)
        if due is not None:
            late += overrun(due, _done(done), governing)
    return late


def pure_limits(
    rows: Sequence[RequirementLimit], requirement: InspectionRequirement
) -> list[Limit]:
    return [
        Limit(
            Counter(row.counter),
            row.value,
            Base(row.base),
            row.tolerance,
            _window(row, requirement.window_percent or 0),
        )
        for row in rows
    ]


def _window(row: RequirementLimit, percent: int) -> int:
    """The window in the limit's own unit; months as days, by the shortest month."""
    days = SHORTEST_MONTH if row.counter == Counter.MONTHS else 1
    window: int = row.value * days * percent // 100
    return window


def _inspection_due(
    requirement: InspectionRequirement,
    bases: _Bases,
    threshold: Sequence[RequirementLimit],
    repeat: Sequence[RequirementLimit],
    done: Sequence[Accomplishment],
) -> Due | None:
    first = _due_from(threshold or repeat, bases, requirement)
    return next_due(
        first,
        [_done(x) for x in done],
        pure_limits(repeat, requirement),
        threshold=pure_limits(threshold, requirement),
        combine=_combine(repeat),
        policy=AnchorPolicy(requirement.anchor),
        calendar=CalendarRule(requirement.calendar),
    )


def _due_from(
    rows: Sequence[RequirementLimit],
    bases: _Bases,
    requirement: InspectionRequirement,
) -> Due:
    return due_from(
        pure_limits(rows, requirement),
        bases.anchors(rows),
        combine=_combine(rows),
        calendar=CalendarRule(requirement.calendar),
    )


def _combine(rows: Sequence[RequirementLimit]) -> Combine:
    last = rows and all(row.combine == Combine.LAST for row in rows)
    return Combine.LAST if last else Combine.FIRST


def _basis(rows: Sequence[RequirementLimit]) -> str:
    """ "repeat 3,000 FC", "first 15,000 FC from release"."""
    words = {"threshold": "first", "repeat": "repeat", "replace": "replace by"}
    parts = []
    for row in rows:
        base = Base(row.base)
        from_words = f" from {BASE_WORDS.get(base, row.base)}"
        parts.append(row.entered + ("" if base is Base.LAST_DONE else from_words))
    glue = " or, whichever last, " if _combine(rows) is Combine.LAST else " or "
    return f"{words[rows[0].phase]} {glue.join(parts)}" if rows else ""


def _done(row: Accomplishment) -> Done:
    return Done(columns(row, "at"), row.done_on, row.late_approved)


def _earlier(row: Accomplishment, than: Accomplishment) -> bool:
    return (row.done_on, row.number) < (than.done_on, than.number)


class _Bases:
    """Where the counts of one subject start; each base is read when it is asked for."""

    def __init__(
        self, subject: RequirementSubject, done: Sequence[Accomplishment]
    ) -> None:
        self.subject, self.requirement = subject, subject.requirement
        self.done = done

    def anchors(self, rows: Sequence[RequirementLimit]) -> Mapping[Base, Anchor]:
        """An anchor per base; a counter stated with a limit holds over the records."""
        anchors: dict[Base, Anchor] = {}
        stated: dict[Base, dict[str, Any]] = defaultdict(dict)
        for row in rows:
            base = Base(row.base)
            if base not in anchors:
                anchors[base] = self._anchor(base, row)
            if row.base_value is not None and row.counter in COUNTED:
                stated[base][row.counter] = row.base_value
        return {
            base: replace(anchor, at=replace(anchor.at, **stated[base]))
            for base, anchor in anchors.items()
        }

    def _anchor(self, base: Base, row: RequirementLimit) -> Anchor:
        match base:
            case Base.NEW:
                return Anchor(ZERO, self._item().manufactured_on)
            case Base.RELEASE:
                return self._release()
            case Base.EFFECTIVE:
                on = self.requirement.effective_on
                return Anchor(self._counters(on), on)
            case Base.DATE:
                return Anchor(Counters(), row.base_on)
            case Base.INSTALLED:
                return self._installed()
            case Base.OVERHAUL:
                return self._overhaul()
            case Base.OTHER_TASK:
                return self._other(row)
            case Base.LAST_DONE:
                last = self.done[-1] if self.done else None
                return Anchor(columns(last, "at"), last.done_on) if last else Anchor()

    def _item(self) -> Any:
        return self.subject.part or self.subject.aircraft

    def _counters(self, on: date) -> Counters:
        """The subject's own counters on a day, from usage and installations."""
        if self.subject.part is not None:
            return part_life(self.subject.part, as_of=on).facts.total
        aircraft = self.subject.aircraft
        return (
            aircraft_standing(aircraft, as_of=on).counters if aircraft else Counters()
        )

    def _release(self) -> Anchor:
        repair = self.requirement.repair
        if repair is None or repair.released_on is None:
            return Anchor()
        if self.subject.part is not None:
            return Anchor(self._counters(repair.released_on), repair.released_on)
        return Anchor(columns(repair, "at"), repair.released_on)

    def _installed(self) -> Anchor:
        if self.subject.part is None:
            return Anchor()
        row = self.subject.part.installations.order_by("installed_on", "pk").last()
        if row is None:
            return Anchor()
        life = part_life(self.subject.part, as_of=row.installed_on)
        current = life.current
        flown = current.flown if current else Counters()
        return Anchor(life.facts.total.minus(flown), row.installed_on)

    def _overhaul(self) -> Anchor:
        row = (
            PartEvent.objects.filter(part=self.subject.part, kind="overhaul")
            .order_by("happened_on", "pk")
            .last()
        )
        return Anchor(columns(row, "life"), row.happened_on) if row else Anchor()

    def _other(self, row: RequirementLimit) -> Anchor:
        other = RequirementSubject.objects.filter(
            requirement=row.base_requirement,
            aircraft=self.subject.aircraft,
            part=self.subject.part,
        ).first()
        done = accomplishments_of(other) if other else []
        return Anchor(columns(done[-1], "at"), done[-1].done_on) if done else Anchor()


def needed_counters(requirement: InspectionRequirement) -> list[Counter]:
    """The counters that an accomplishment must state, so that the next due is known."""
    rows = requirement.limits.filter(phase="repeat")
    asked = {Counter(row.counter) for row in rows}
    return [counter for counter in COUNTED if counter in asked]
