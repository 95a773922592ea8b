"""Safe-life parts: what each serial has accumulated, where its life ends, and why.

Life is summed from installations every time. Gaps are shown as gaps; a blocked gap, a
broken chain or an unrecorded limit leaves the life uncomputed, which counts as due.
"""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from datetime import date, datetime
from typing import Any

from django.db.models import Q

from fleet.due import (
    COUNTED,
    ZERO,
    Counter,
    Counters,
    Due,
    DueStatus,
    Standing,
    due_status,
)
from fleet.models import (
    Configuration,
    KeyedState,
    LifeLimit,
    PartEarlierLife,
    PartEvent,
    PartInstallation,
    PartState,
    SafeLifePart,
)
from fleet.selectors.counters import AircraftStanding, aircraft_standings
from fleet.selectors.life_limits import (
    LimitLine,
    PartFacts,
    Stint,
    blocks,
    columns,
    earlier_counters,
    life_lines,
)

GONE = (PartState.EXPIRED, PartState.SCRAPPED)

ASSUMED = "life assumed: {evidence}"
UNVERIFIED = "life limit awaits blind re-entry"


@dataclass(frozen=True)
class PartLife:
    """Life status of one serial as of a date."""

    facts: PartFacts
    as_of: date
    lines: tuple[LimitLine, ...]
    due: Due
    standing: Standing
    carrier: AircraftStanding | None
    notes: tuple[str, ...] = ()

    @property
    def part(self) -> SafeLifePart:
        return self.facts.part

    @property
    def current(self) -> Stint | None:
        return next((x for x in self.facts.stints if x.removed_on is None), None)

    @property
    def complete(self) -> bool:
        """The back-to-birth record has no open gap."""
        return self.part.chain != "broken" and not any(map(blocks, self.facts.earlier))

    def status(self, *, within_days: int = 90) -> DueStatus:
        return due_status(
            self.due, self.standing, as_of=self.as_of, within_days=within_days
        )

    def carrier_end(self, counter: Counter) -> int | None:
        """What the carrying aircraft's counter shows when this life ends."""
        end, now = self.due.at[counter], self.facts.total[counter]
        here = self.carrier.counters[counter] if self.carrier else None
        if end is None or now is None or here is None:
            return None
        return here + end - now


def part_life(
    part: SafeLifePart, *, as_of: date, target: Configuration | None = None
) -> PartLife:
    """Life of one serial; `target` is the configuration it is to be installed in."""
    return part_lives([part], as_of=as_of, target=target)[0]


def part_lives(
    parts: Iterable[SafeLifePart],
    *,
    as_of: date,
    known_at: datetime | None = None,
    standings: Mapping[int, AircraftStanding] | None = None,
    removed_later: frozenset[int] = frozenset(),
    target: Configuration | None = None,
) -> list[PartLife]:
    """Life status of the parts, in a constant number of queries.

    `standings` of carrying aircraft may be handed in; `removed_later` are installations
    whose removal was not yet known at `known_at`.
    """
    parts = list(parts)
    rows = _Rows(parts, as_of, known_at, removed_later)
    carriers = {x.aircraft_id: x.aircraft for x in rows.open_installations()}
    known = dict(standings or {})
    unknown = [item for pk, item in carriers.items() if pk not in known]
    if unknown:
        known |= aircraft_standings(unknown, as_of=as_of, known_at=known_at)
    aim = target.pk if target else None
    return [_life(part, rows, known, aim) for part in parts]


class _Rows:
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
    part: SafeLifePart,
    rows: _Rows,
    standings: Mapping[int, AircraftStanding],
    target: int | None,
) -> PartLife:
    stints = tuple(
        _stint(row, rows.removed_on(row), standings)
        for row in rows.installations.get(part.pk, [])
    )
    earlier = rows.earlier.get(part.pk, [])
    facts = PartFacts(
        part,
        rows.limits.get(part.part_number_id, []),
        earlier,
        stints,
        rows.overhauls.get(part.pk, []),
        _total(earlier, stints),
        target,
    )
    lines, due = life_lines(facts)
    current = next((x for x in stints if x.removed_on is None), None)
    carrier = standings[current.installation.aircraft_id] if current else None
    standing = Standing(facts.total)
    if carrier:
        standing = replace(carrier.standing, at=facts.total)
    notes = _notes(facts, carrier)
    return PartLife(facts, rows.as_of, lines, due, standing, carrier, notes)


def _notes(facts: PartFacts, carrier: AircraftStanding | None) -> tuple[str, ...]:
    notes = [
        ASSUMED.format(evidence=row.evidence)
        for row in facts.earlier
        if row.treatment == "assumed_maximum"
    ]
    if any(limit.state == KeyedState.KEYED for limit in facts.limits):
        notes.append(UNVERIFIED)
    if carrier and carrier.hours_note:
        notes.append(carrier.hours_note)
    return tuple(notes)


def _stint(
    row: PartInstallation,
    removed_on: date | None,
    standings: Mapping[int, AircraftStanding],
) -> Stint:
    off = columns(row, "removed")
    if removed_on is None:
        off = standings[row.aircraft_id].counters
    return Stint(row, removed_on, _not_negative(off.minus(columns(row, "installed"))))


def _not_negative(flown: Counters) -> Counters:
    """An installation recorded ahead of usage has flown nothing yet."""
    known = {x.value: flown[x] for x in COUNTED}
    return Counters(**{k: v if v is None else max(v, 0) for k, v in known.items()})


def _total(earlier: Iterable[PartEarlierLife], stints: Iterable[Stint]) -> Counters:
    total = ZERO
    for row in earlier:
        if not blocks(row):
            total = total.plus(earlier_counters(row))
    for stint in stints:
        total = total.plus(stint.flown)
    return total
