"""Safe-life parts: what each serial has accumulated, where its life ends, and why.

Life is summed from installations every time. Gaps are shown as gaps; a blocked gap, a
broken chain or an unrecorded limit leaves the life uncomputed, which counts as due.
"""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from datetime import date, datetime
from typing import Any

from django.db.models import Q

from fleet.due import (
    COUNTED,
    COUNTER_WORDS,
    ZERO,
    Anchor,
    Base,
    CarryOver,
    Counter,
    Counters,
    Due,
    DueStatus,
    Limit,
    Standing,
    due_status,
)
from fleet.intervals import due_from
from fleet.life import ConfigurationLimit, Flown, NoLifeLimit, life_status
from fleet.models import (
    Aircraft,
    KeyedState,
    LifeLimit,
    PartEarlierLife,
    PartEvent,
    PartInstallation,
    PartState,
    SafeLifePart,
)
from fleet.selectors.counters import AircraftStanding, aircraft_standings

GONE = (PartState.EXPIRED, PartState.SCRAPPED)
UNUSED = Counters()

GAP = "gap in the back-to-birth record {when}, blocked until it is reconstructed"
BROKEN = "the back-to-birth record is broken"
NO_LIMIT = "no life limit is recorded for part number {number}"
NO_BASE = "no date of {base} is recorded"
NO_COUNT = "no {counter} recorded for a stint at {position}"
ASSUMED = "life assumed: {evidence}"
UNVERIFIED = "life limit awaits blind re-entry"


@dataclass(frozen=True)
class Stint:
    """One installation as of a date, with what it flew on each counter."""

    installation: PartInstallation
    removed_on: date | None
    flown: Counters


@dataclass(frozen=True)
class LimitLine:
    """One life limit: where it ends in the part's own counter or on which day."""

    limit: LifeLimit
    ends_at: int | date | None
    accumulated: int | None
    consumed_percent: int | None


@dataclass(frozen=True)
class PartLife:
    """Life status of one serial as of a date."""

    part: SafeLifePart
    as_of: date
    stints: tuple[Stint, ...]
    earlier: tuple[PartEarlierLife, ...]
    total: Counters
    lines: tuple[LimitLine, ...]
    due: Due
    standing: Standing
    carrier: AircraftStanding | None
    notes: tuple[str, ...] = field(default=())

    @property
    def current(self) -> Stint | None:
        return next((x for x in self.stints if x.removed_on is None), None)

    @property
    def complete(self) -> bool:
        """The back-to-birth record has no open gap."""
        return self.part.chain != "broken" and not any(map(_blocks, self.earlier))

    def status(self, *, within_days: int = 90) -> DueStatus:
        return due_status(
            self.due, self.standing, as_of=self.as_of, within_days=within_days
        )

    def carrier_end(self, counter: Counter) -> int | None:
        """What the carrying aircraft's counter shows when this life ends."""
        end, now = self.due.at[counter], self.total[counter]
        here = self.carrier.counters[counter] if self.carrier else None
        return None if None in (end, now, here) else here + end - now  # type: ignore[operator]


def part_life(part: SafeLifePart, *, as_of: date) -> PartLife:
    return part_lives([part], as_of=as_of)[0]


def part_lives(
    parts: Iterable[SafeLifePart],
    *,
    as_of: date,
    known_at: datetime | None = None,
    standings: Mapping[int, AircraftStanding] | None = None,
    removed_later: frozenset[int] = frozenset(),
) -> list[PartLife]:
    """Life status of the parts, in a constant number of queries.

    `standings` of carrying aircraft may be handed in; `removed_later` are installations
    whose removal was not yet known at `known_at`.
    """
    parts = list(parts)
    facts = _Facts(parts, as_of, known_at, removed_later)
    carriers = {x.aircraft_id: x.aircraft for x in facts.open_installations()}
    known = dict(standings or {})
    unknown = [item for pk, item in carriers.items() if pk not in known]
    if unknown:
        known |= aircraft_standings(unknown, as_of=as_of, known_at=known_at)
    return [_life(part, facts, known) for part in parts]


class _Facts:
    """The rows behind the lives of some parts, read once each."""

    def __init__(
        self,
        parts: Sequence[SafeLifePart],
        as_of: date,
        known_at: datetime | None,
        removed_later: frozenset[int],
    ) -> None:
        self.as_of, self.removed_later = as_of, removed_later
        known = Q() if known_at is None else Q(entered_at__lte=known_at)
        numbers = {part.part_number_id for part in parts}
        self.installations = _by_part(
            PartInstallation.objects.filter(
                known, part__in=parts, installed_on__lte=as_of
            )
            .select_related("aircraft", "configuration")
            .order_by("installed_on", "pk")
        )
        self.earlier = _by_part(_unreplaced(PartEarlierLife, known, part__in=parts))
        self.overhauls = _by_part(
            PartEvent.objects.filter(
                known, part__in=parts, kind="overhaul", happened_on__lte=as_of
            ).order_by("happened_on", "pk")
        )
        self.limits: dict[int, list[LifeLimit]] = defaultdict(list)
        for limit in _limits_in_force(known, numbers, as_of):
            self.limits[limit.part_number_id].append(limit)

    def removed_on(self, row: PartInstallation) -> date | None:
        """The day of removal, if it lies before the date and was known."""
        on: date | None = row.removed_on
        unknown = on is None or on > self.as_of or row.pk in self.removed_later
        return None if unknown else on

    def open_installations(self) -> list[PartInstallation]:
        rows = (row for some in self.installations.values() for row in some)
        return [row for row in rows if self.removed_on(row) is None]


def _by_part(rows: Iterable[Any]) -> dict[int, list[Any]]:
    found: dict[int, list[Any]] = defaultdict(list)
    for row in rows:
        found[row.part_id].append(row)
    return found


def _unreplaced(model: Any, known: Q, **filters: Any) -> Any:
    rows = model.objects.filter(known, **filters)
    return rows.exclude(
        pk__in=model.objects.filter(known, replaces__isnull=False).values("replaces")
    )


def _limits_in_force(known: Q, numbers: set[int], as_of: date) -> Iterable[LifeLimit]:
    """Limits that govern on the date. One awaiting blind re-entry governs too where it
    is the smaller: two people never keep a lower limit waiting."""
    rows = LifeLimit.objects.filter(
        known, part_number__in=numbers, effective_from__lte=as_of
    ).exclude(state=KeyedState.REJECTED)
    replaced = LifeLimit.objects.filter(
        known,
        replaces__isnull=False,
        effective_from__lte=as_of,
        state__in=(KeyedState.IN_FORCE, KeyedState.REPLACED),
    ).values("replaces")
    rows = rows.exclude(pk__in=replaced).select_related("configuration", "document")
    smallest: dict[tuple[Any, ...], LifeLimit] = {}
    for row in rows:
        key = (row.part_number_id, row.configuration_id, row.counter, row.base)
        if key not in smallest or row.value < smallest[key].value:
            smallest[key] = row
    return smallest.values()


def _life(
    part: SafeLifePart, facts: _Facts, standings: Mapping[int, AircraftStanding]
) -> PartLife:
    stints = tuple(
        _stint(row, facts.removed_on(row), standings)
        for row in facts.installations.get(part.pk, [])
    )
    earlier = tuple(facts.earlier.get(part.pk, []))
    total = _total(earlier, stints)
    limits = facts.limits.get(part.part_number_id, [])
    overhauls = facts.overhauls.get(part.pk, [])
    lines, due = _lines(part, limits, earlier, stints, total, overhauls)
    current = next((x for x in stints if x.removed_on is None), None)
    carrier = standings[current.installation.aircraft_id] if current else None
    standing = Standing(total)
    if carrier:
        ours = carrier.standing
        standing = Standing(total, ours.current_to, ours.rates, ours.high_rates)
    return PartLife(
        part,
        facts.as_of,
        stints,
        earlier,
        total,
        lines,
        due,
        standing,
        carrier,
        _notes(earlier, limits, carrier),
    )


def _notes(
    earlier: Sequence[PartEarlierLife],
    limits: Sequence[LifeLimit],
    carrier: AircraftStanding | None,
) -> tuple[str, ...]:
    notes = [
        ASSUMED.format(evidence=row.evidence)
        for row in earlier
        if row.treatment == "assumed_maximum"
    ]
    if any(limit.state == KeyedState.KEYED for limit in limits):
        notes.append(UNVERIFIED)
    if carrier and carrier.hours_note:
        notes.append(carrier.hours_note)
    return tuple(notes)


def _stint(
    row: PartInstallation,
    removed_on: date | None,
    standings: Mapping[int, AircraftStanding],
) -> Stint:
    on = _columns(row, "installed")
    off = _columns(row, "removed")
    if removed_on is None:
        off = standings[row.aircraft_id].counters
    flown = off.minus(on)
    return Stint(row, removed_on, _not_negative(flown))


def _not_negative(flown: Counters) -> Counters:
    """An installation recorded ahead of usage has flown nothing yet."""
    return Counters(
        **{
            counter.value: max(amount, 0)
            for counter in COUNTED
            if (amount := flown[counter]) is not None
        }
    )


def _columns(row: Any, prefix: str) -> Counters:
    return Counters(**{x.value: getattr(row, f"{prefix}_{x.value}") for x in COUNTED})


def _blocks(row: PartEarlierLife) -> bool:
    blocks: bool = row.treatment == "blocked"
    return blocks


def _counted(row: PartEarlierLife) -> Counters:
    return Counters(**{x.value: getattr(row, x.value) for x in COUNTED})


def _total(earlier: Iterable[PartEarlierLife], stints: Iterable[Stint]) -> Counters:
    total = ZERO
    for row in earlier:
        if not _blocks(row):
            total = total.plus(_counted(row))
    for stint in stints:
        total = total.plus(stint.flown)
    return total


def _lines(
    part: SafeLifePart,
    limits: Sequence[LifeLimit],
    earlier: Sequence[PartEarlierLife],
    stints: Sequence[Stint],
    total: Counters,
    overhauls: Sequence[PartEvent],
) -> tuple[tuple[LimitLine, ...], Due]:
    """A line per limit that governs now, and the one due item they make together."""
    problems = [GAP.format(when=_when(row)) for row in earlier if _blocks(row)]
    if part.chain == "broken" and not problems:
        problems.append(BROKEN)
    if not limits:
        problems.append(NO_LIMIT.format(number=part.part_number.number))
    lines: list[LimitLine] = []
    ends: dict[Counter, int] = {}
    on: date | None = None
    for limit in _governing(limits, _configuration(stints)):
        counter = Counter(limit.counter)
        try:
            line = _line(part, limit, limits, earlier, stints, total, overhauls)
        except NoLifeLimit as error:
            problems.append(str(error))
            line = LimitLine(
                limit, None, total[counter] if counter in COUNTED else None, None
            )
        lines.append(line)
        if isinstance(line.ends_at, date):
            on = line.ends_at if on is None else min(on, line.ends_at)
        elif line.ends_at is not None:
            ends[counter] = min(ends.get(counter, line.ends_at), line.ends_at)
    at = Counters(**{counter.value: max(end, 0) for counter, end in ends.items()})
    return tuple(lines), Due(at, on, cannot_compute="; ".join(problems))


def _when(row: PartEarlierLife) -> str:
    return f"{row.from_on or 'unknown'} to {row.to_on or 'unknown'}"


def _configuration(stints: Sequence[Stint]) -> int | None:
    """The configuration it is in, or was in last when it is not installed."""
    return stints[-1].installation.configuration_id if stints else None


def _governing(
    limits: Sequence[LifeLimit], configuration: int | None
) -> list[LifeLimit]:
    """For each counter and base the limit of this configuration, else the one for all,
    else the smallest of any."""
    groups: dict[tuple[str, str], list[LifeLimit]] = defaultdict(list)
    for limit in limits:
        groups[limit.counter, limit.base].append(limit)
    return [_of_configuration(group, configuration) for group in groups.values()]


def _of_configuration(
    group: Sequence[LifeLimit], configuration: int | None
) -> LifeLimit:
    for wanted in (configuration, None):
        for limit in group:
            if limit.configuration_id == wanted:
                return limit
    return min(group, key=lambda limit: limit.value)


def _line(
    part: SafeLifePart,
    limit: LifeLimit,
    limits: Sequence[LifeLimit],
    earlier: Sequence[PartEarlierLife],
    stints: Sequence[Stint],
    total: Counters,
    overhauls: Sequence[PartEvent],
) -> LimitLine:
    counter = Counter(limit.counter)
    if counter not in COUNTED:
        return LimitLine(limit, _ends_on(part, limit, stints, overhauls), None, None)
    if limit.base == "overhaul":
        done = _columns(overhauls[-1], "life") if overhauls else Counters()
        start = done[counter]
        if start is None:
            raise NoLifeLimit(NO_BASE.format(base="overhaul"))
        return LimitLine(limit, start + limit.value, total[counter], None)
    same = [x for x in limits if (x.counter, x.base) == (limit.counter, limit.base)]
    history, now = _flown(counter, same, earlier, stints)
    life = life_status(history, _configuration_limit(limit), now)
    return LimitLine(limit, life.ends_at, life.total, life.consumed_percent)


def _flown(
    counter: Counter,
    limits: Sequence[LifeLimit],
    earlier: Sequence[PartEarlierLife],
    stints: Sequence[Stint],
) -> tuple[list[Flown], int]:
    """Life before the current stint by configuration, and in the current stint."""
    parts = [
        (row.configuration_id, _counted(row)[counter], "an earlier life")
        for row in earlier
        if not _blocks(row)
    ]
    parts += [
        (x.installation.configuration_id, x.flown[counter], x.installation.position)
        for x in stints
    ]
    flown: list[Flown] = []
    for configuration, amount, position in parts:
        if amount is None:
            words = COUNTER_WORDS[counter][0]
            raise NoLifeLimit(NO_COUNT.format(counter=words, position=position))
        limit = _of_configuration(limits, configuration)
        flown.append(Flown(amount, _configuration_limit(limit)))
    if stints and stints[-1].removed_on is None:
        return flown[:-1], flown[-1].amount
    return flown, 0


def _configuration_limit(limit: LifeLimit) -> ConfigurationLimit:
    return ConfigurationLimit(limit.value, CarryOver(limit.carry_over))


def _ends_on(
    part: SafeLifePart,
    limit: LifeLimit,
    stints: Sequence[Stint],
    overhauls: Sequence[PartEvent],
) -> date:
    start = {
        "birth": part.manufactured_on,
        "first_fitted": stints[0].installation.installed_on if stints else None,
        "overhaul": overhauls[-1].happened_on if overhauls else None,
    }[limit.base]
    base = {Base.NEW: Anchor(on=start)}
    on = due_from([Limit(Counter(limit.counter), limit.value, Base.NEW)], base).on
    if on is None:
        words = {"birth": "manufacture", "first_fitted": "first installation"}
        raise NoLifeLimit(NO_BASE.format(base=words.get(limit.base, limit.base)))
    return on
