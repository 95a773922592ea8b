"""Exposure of a density map: which aircraft, on which days, and what they flew."""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from functools import reduce
from operator import or_
from typing import Any

from django.db.models import Q, Sum

from fleet.models import Aircraft, AircraftType, Section, User
from fleet.selectors.aircraft import aircraft_visible
from fleet.selectors.counters import aircraft_standings, usage_current
from reports.density import CYCLES, HOURS, YEARS, Denominator

DAYS_IN_YEAR = 365.25
MINUTES_IN_HOUR = 60.0


@dataclass(frozen=True)
class DensityFilter:
    """What is asked for; empty means all."""

    aircraft_type: AircraftType
    section: Section
    skin: str = ""
    variant: str = ""
    aircraft: Sequence[Aircraft] = ()
    damage_types: Sequence[str] = ()
    cause: str = ""
    from_on: dt.date | None = None
    to_on: dt.date | None = None
    denominator: Denominator = CYCLES


@dataclass(frozen=True)
class AircraftWindow:
    """One aircraft's days in the rates, both included, and what it flew in them.

    ``amount`` is in the denominator's unit. None as first day: it has no data at all in
    the period asked for.
    """

    aircraft: Aircraft
    first: dt.date | None
    last: dt.date | None
    amount: float = 0.0
    flights_without_hours: int = 0


def aircraft_windows(
    asked: DensityFilter, user: User, as_of: dt.date
) -> Iterator[AircraftWindow]:
    """Each aircraft's days: data begin to data current, within the period asked for.

    Only aircraft of the user's own operators of today: a former operator sees neither
    all findings nor all usage of an aircraft, and a rate of half a story is false.
    """
    rows = aircraft_visible(user).filter(variant__aircraft_type=asked.aircraft_type)
    if not user.sees_all_operators:
        rows = rows.filter(operator__in=user.operator_ids())
    if asked.variant:
        rows = rows.filter(variant__code=asked.variant)
    if asked.aircraft:
        rows = rows.filter(pk__in=[one.pk for one in asked.aircraft])
    fleet = list(rows)
    standings = aircraft_standings(fleet, as_of=as_of)
    days = {}
    for one in fleet:
        current = standings[one.pk].current_to or one.data_from - dt.timedelta(days=1)
        first = max(one.data_from, asked.from_on or one.data_from)
        last = min(day for day in (current, one.data_to, asked.to_on) if day)
        days[one.pk] = (first, last)
    flown = _flown({pk: pair for pk, pair in days.items() if pair[0] <= pair[1]})
    for one in fleet:
        first, last = days[one.pk]
        if first > last:
            yield AircraftWindow(one, None, None)
            continue
        sums = flown.get(one.pk, {})
        yield AircraftWindow(
            one,
            first,
            last,
            _amount(asked.denominator, sums, first, last),
            sums.get("unknown") or 0,
        )


def _flown(days: Mapping[int, tuple[dt.date, dt.date]]) -> dict[int, dict[str, Any]]:
    """Cycles and minutes of each aircraft within its days; one query."""
    if not days:
        return {}
    within = reduce(
        or_, (Q(aircraft_id__in=pks, day__range=pair) for pair, pks in by_days(days))
    )
    rows = (
        usage_current()
        .filter(within)
        .order_by()
        .values("aircraft_id")
        .annotate(
            cycles_flown=Sum("cycles"),
            minutes_flown=Sum("minutes"),
            unknown=Sum("cycles_without_minutes"),
        )
    )
    return {row["aircraft_id"]: dict(row) for row in rows}


def by_days(
    days: Mapping[int, tuple[dt.date, dt.date]],
) -> list[tuple[tuple[dt.date, dt.date], list[int]]]:
    """Aircraft with the same days together, so that conditions stay few."""
    groups: dict[tuple[dt.date, dt.date], list[int]] = {}
    for pk, pair in days.items():
        groups.setdefault(pair, []).append(pk)
    return list(groups.items())


def _amount(
    denominator: Denominator, sums: Mapping[str, Any], first: dt.date, last: dt.date
) -> float:
    if denominator == YEARS:
        return ((last - first).days + 1) / DAYS_IN_YEAR
    if denominator == HOURS:
        return (sums.get("minutes_flown") or 0) / MINUTES_IN_HOUR
    return float(sums.get("cycles_flown") or 0)


def amounts_by_variant(windows: Iterable[AircraftWindow]) -> dict[str, float]:
    """What the aircraft of each variant flew."""
    amounts: dict[str, float] = {}
    for window in windows:
        code = window.aircraft.variant.code
        amounts[code] = amounts.get(code, 0.0) + window.amount
    return amounts
