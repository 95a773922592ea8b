"""Life limits of one serial: which govern, where each ends, and what stops that."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date
from typing import Any

from fleet.due import (
    COUNTED,
    COUNTER_WORDS,
    Anchor,
    Base,
    CarryOver,
    Counter,
    Counters,
    Due,
    Limit,
)
from fleet.intervals import due_from
from fleet.life import ConfigurationLimit, Flown, NoLifeLimit, life_status
from fleet.models import (
    LifeLimit,
    PartEarlierLife,
    PartEvent,
    PartInstallation,
    SafeLifePart,
)

GAP = "gap in the back-to-birth record {when}, blocked until it is reconstructed"
BROKEN = "the back-to-birth record is broken"
NO_LIMIT = "no life limit is recorded for part number {number}"
NO_MANUFACTURE = "no date of manufacture is recorded"
NO_OVERHAUL = "no {what} at the last overhaul is recorded"
NO_COUNT = "no {counter} recorded for {where}"


@dataclass(frozen=True)
class Stint:
    """One installation as of a date, with what it flew on each counter."""

    installation: PartInstallation
    removed_on: date | None
    flown: Counters


@dataclass(frozen=True)
class PartFacts:
    """The rows behind one serial's life as of a date, oldest first."""

    part: SafeLifePart
    limits: Sequence[LifeLimit]
    earlier: Sequence[PartEarlierLife]
    stints: Sequence[Stint]
    overhauls: Sequence[PartEvent]
    total: Counters
    target: int | None = None

    @property
    def configuration(self) -> int | None:
        """The configuration asked for, else the one it is in or was in last."""
        if self.target is not None or not self.stints:
            return self.target
        current: int = self.stints[-1].installation.configuration_id
        return current


@dataclass(frozen=True)
class LimitLine:
    """One life limit: where it ends in the part's own counter or on which day."""

    limit: LifeLimit
    ends_at: int | date | None
    accumulated: int | None
    consumed_percent: int | None

    @property
    def counter(self) -> Counter:
        return Counter(self.limit.counter)


def life_lines(facts: PartFacts) -> tuple[tuple[LimitLine, ...], Due]:
    """A line per limit that governs now, and the one due item they make together."""
    problems = [GAP.format(when=_when(row)) for row in facts.earlier if blocks(row)]
    if facts.part.chain == "broken" and not problems:
        problems.append(BROKEN)
    if not facts.limits:
        problems.append(NO_LIMIT.format(number=facts.part.part_number.number))
    lines: list[LimitLine] = []
    for limit in _governing(facts):
        try:
            lines.append(_line(limit, facts))
        except NoLifeLimit as error:
            problems.append(str(error))
            lines.append(LimitLine(limit, None, None, None))
    ends: dict[str, int] = {}
    days: list[date] = []
    for line in lines:
        if isinstance(line.ends_at, date):
            days.append(line.ends_at)
        elif line.ends_at is not None:
            end, name = max(line.ends_at, 0), line.counter.value
            ends[name] = min(ends.get(name, end), end)
    at, on = Counters(**ends), min(days, default=None)
    return tuple(lines), Due(at, on, cannot_compute="; ".join(problems))


def blocks(row: PartEarlierLife) -> bool:
    blocked: bool = row.treatment == "blocked"
    return blocked


def earlier_counters(row: PartEarlierLife) -> Counters:
    return Counters(**{x.value: getattr(row, x.value) for x in COUNTED})


def columns(row: Any, prefix: str) -> Counters:
    """Four columns of a row, as `installed_cycles`, as counters."""
    return Counters(**{x.value: getattr(row, f"{prefix}_{x.value}") for x in COUNTED})


def _when(row: PartEarlierLife) -> str:
    return f"{row.from_on or 'unknown'} to {row.to_on or 'unknown'}"


def _governing(facts: PartFacts) -> list[LifeLimit]:
    """For each counter and base the limit of this configuration, else the one for all,
    else the smallest of any."""
    groups: dict[tuple[str, str], list[LifeLimit]] = defaultdict(list)
    for limit in facts.limits:
        groups[limit.counter, limit.base].append(limit)
    return [_of(group, facts.configuration) for group in groups.values()]


def _of(group: Sequence[LifeLimit], configuration: int | None) -> LifeLimit:
    for wanted in (configuration, None):
        for limit in group:
            if limit.configuration_id == wanted:
                return limit
    return min(group, key=lambda limit: limit.value)


def _line(limit: LifeLimit, facts: PartFacts) -> LimitLine:
    counter = Counter(limit.counter)
    if counter not in COUNTED:
        return LimitLine(limit, _ends_on(limit, facts), None, None)
    if limit.base == "overhaul":
        start = _at_overhaul(facts, counter)
        return LimitLine(limit, start + limit.value, facts.total[counter], None)
    history, now = _flown(limit, facts)
    life = life_status(history, _configuration_limit(limit), now)
    return LimitLine(limit, life.ends_at, life.total, life.consumed_percent)


def _at_overhaul(facts: PartFacts, counter: Counter) -> int:
    start = columns(facts.overhauls[-1], "life")[counter] if facts.overhauls else None
    if start is None:
        raise NoLifeLimit(NO_OVERHAUL.format(what=COUNTER_WORDS[counter][0]))
    return start


def _flown(limit: LifeLimit, facts: PartFacts) -> tuple[list[Flown], int]:
    """Life before the current stint by configuration, and in the current stint."""
    counter = Counter(limit.counter)
    group = [
        x for x in facts.limits if (x.counter, x.base) == (limit.counter, limit.base)
    ]
    pieces = [
        (row.configuration_id, earlier_counters(row)[counter], "an earlier life")
        for row in facts.earlier
        if not blocks(row)
    ]
    pieces += [
        (x.installation.configuration_id, x.flown[counter], str(x.installation))
        for x in facts.stints
    ]
    flown: list[Flown] = []
    for configuration, amount, where in pieces:
        if amount is None:
            words = COUNTER_WORDS[counter][0]
            raise NoLifeLimit(NO_COUNT.format(counter=words, where=where))
        flown.append(Flown(amount, _configuration_limit(_of(group, configuration))))
    if facts.stints and facts.stints[-1].removed_on is None:
        return flown[:-1], flown[-1].amount
    return flown, 0


def _configuration_limit(limit: LifeLimit) -> ConfigurationLimit:
    return ConfigurationLimit(limit.value, CarryOver(limit.carry_over))


def _ends_on(limit: LifeLimit, facts: PartFacts) -> date | None:
    """The last permitted day; None while a clock from first installation waits."""
    if limit.base == "first_fitted":
        if not facts.stints:
            return None
        start: date | None = facts.stints[0].installation.installed_on
    elif limit.base == "overhaul":
        start = facts.overhauls[-1].happened_on if facts.overhauls else None
        if start is None:
            raise NoLifeLimit(NO_OVERHAUL.format(what="date"))
    else:
        start = facts.part.manufactured_on
        if start is None:
            raise NoLifeLimit(NO_MANUFACTURE)
    base = {Base.NEW: Anchor(on=start)}
    return due_from([Limit(Counter(limit.counter), limit.value, Base.NEW)], base).on
