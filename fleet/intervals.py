"""Thresholds and repeats: from limits and accomplishments to the due now in force.

Pure, whole numbers only; `fleet.due` has the vocabulary.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import replace
from datetime import date

from fleet.due import (
    COUNTED,
    COUNTER_WORDS,
    Anchor,
    AnchorPolicy,
    Base,
    CalendarRule,
    Combine,
    Counters,
    Done,
    Due,
    Limit,
    Remaining,
    Standing,
    due_lines,
    limit_date,
)


def due_from(
    limits: Sequence[Limit],
    bases: Mapping[Base, Anchor],
    *,
    combine: Combine = Combine.FIRST,
    calendar: CalendarRule = CalendarRule.DATE,
) -> Due:
    """The due values of one group of limits, each counted from its own base.

    Two limits on the same counter become one number by `combine`, so "24,000 FC or
    1,500 FC after the effective date, whichever later" is max(T, N_eff + G).
    """
    pick = max if combine is Combine.LAST else min
    values: dict[str, int] = {}
    on: date | None = None
    day: int | None = None
    missing: list[str] = []
    for limit in limits:
        anchor = bases.get(limit.base, Anchor())
        if limit.counter in COUNTED:
            start = anchor.at[limit.counter]
            if start is None:
                missing.append(_base_missing(limit))
                continue
            due, name = start + limit.value, limit.counter.value
            values[name] = pick(values.get(name, due), due)
            continue
        limit_on = limit_date(limit, anchor, calendar)
        if limit_on is None or anchor.on is None:
            missing.append(_base_missing(limit))
        elif on is None or pick(on, limit_on) != on:
            on, day = limit_on, anchor.day or anchor.on.day
    return Due(Counters(**values), on, combine, "; ".join(missing), day)


def _base_missing(limit: Limit) -> str:
    what = COUNTER_WORDS[limit.counter][0] if limit.counter in COUNTED else "date"
    return f"no {what} recorded for base {limit.base.value.replace('_', ' ')}"


def next_due(
    first: Due | None,
    done: Iterable[Done],
    repeat: Sequence[Limit],
    *,
    threshold: Sequence[Limit] = (),
    combine: Combine = Combine.FIRST,
    policy: AnchorPolicy = AnchorPolicy.SCHEDULED_IF_LATE,
    calendar: CalendarRule = CalendarRule.DATE,
) -> Due | None:
    """The due now in force, re-made from the facts: the first due (with its limits,
    for their tolerances) and every accomplishment in order. None when nothing repeats
    and the first was done."""
    due, limits = first, threshold
    for accomplishment in done:
        if not repeat:
            return None
        anchor = restart(due, accomplishment, limits, policy=policy)
        bases = dict.fromkeys(Base, anchor)
        due = due_from(repeat, bases, combine=combine, calendar=calendar)
        limits = repeat
    return due


def restart(
    due: Due | None,
    done: Done,
    limits: Sequence[Limit],
    *,
    policy: AnchorPolicy = AnchorPolicy.SCHEDULED_IF_LATE,
) -> Anchor:
    """Where the next interval starts, counter by counter; all restart together.

    Late work restarts from the original due, so that tolerance never accumulates
    (14 CFR 91.409(b): the excess counts in the next interval). Only ACTUAL counts
    from the day of late work, and only if that lateness was approved. WINDOW also
    counts from the original due for work done early by no more than the window.
    """
    anchor = Anchor(done.at, done.on)
    if due is None:
        return anchor
    late, over = _late(due, done), overrun(due, done, limits)
    for line in due_lines(due, Standing(done.at), done.on)[0]:
        if line in late:
            planned = line in over or policy is not AnchorPolicy.ACTUAL
        else:
            early = line.remaining > 0 and policy is AnchorPolicy.WINDOW
            planned = early and line.remaining <= _window(line, limits)
        if not planned:
            continue
        if isinstance(line.due, date):
            anchor = replace(anchor, on=line.due, day=due.day)
        else:
            at = replace(anchor.at, **{line.counter.value: line.due})
            anchor = replace(anchor, at=at)
    return anchor


def overrun(due: Due, done: Done, limits: Sequence[Limit]) -> list[Remaining]:
    """Counters on which the work was later than its due plus an approved tolerance."""
    return [
        line
        for line in _late(due, done)
        if not (done.late_approved and _within_tolerance(line, limits))
    ]


def _late(due: Due, done: Done) -> list[Remaining]:
    """With `whichever last` nothing is late until every counter has passed."""
    lines, missing = due_lines(due, Standing(done.at), done.on)
    late = [line for line in lines if line.remaining < 0]
    waits = due.combine is Combine.LAST and (missing or len(late) < len(lines))
    return [] if waits else late


def _of_line(line: Remaining, limits: Sequence[Limit]) -> list[Limit]:
    """The limits behind one line of a due item; days and months share the calendar."""
    if line.counter in COUNTED:
        return [limit for limit in limits if limit.counter is line.counter]
    return [limit for limit in limits if limit.counter not in COUNTED]


def _window(line: Remaining, limits: Sequence[Limit]) -> int:
    return min((limit.window for limit in _of_line(line, limits)), default=0)


def _within_tolerance(line: Remaining, limits: Sequence[Limit]) -> bool:
    mine = _of_line(line, limits)
    if isinstance(line.due, date) and isinstance(line.now, date):
        ends = [
            limit_date(replace(limit, value=limit.tolerance), Anchor(on=line.due))
            for limit in mine
        ]
        return line.now <= min((end for end in ends if end), default=line.due)
    return -line.remaining <= min((limit.tolerance for limit in mine), default=0)
