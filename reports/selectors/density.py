"""Damage density from the record: which findings, over which exposure.

Findings are grouped by half-bay in the database and folded to cells here. Each
aircraft counts from the day its data begin to the day they are current to, in the
numerator and in the denominator alike; what falls outside is counted beside.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field, replace
from functools import reduce
from operator import or_
from typing import Any

from django.db.models import Count, F, Q, QuerySet, Sum

from fleet.location.geometry import Section as SectionGeometry
from fleet.location.geometry import TypeGeometry
from fleet.models import Aircraft, AircraftType, Section, User
from fleet.selectors.aircraft import aircraft_visible
from fleet.selectors.counters import aircraft_standings, usage_current
from repairs.models import Finding
from repairs.models.columns import Element, Surface
from repairs.selectors.neighbours import findings_shown
from reports.density import CYCLES, HOURS, YEARS, Denominator, Density, Tally, tally
from reports.lattice import Lattice, lattice_of

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


@dataclass(frozen=True)
class Beside:
    """Findings that are in the record and in no rate, and why."""

    to_be_placed: int = 0
    outside_data: int = 0
    no_across: int = 0
    other_elements: int = 0
    other_surfaces: int = 0
    no_exposure: int = 0


@dataclass(frozen=True)
class DensityData:
    """Counts, exposure and what was left out, for one section."""

    asked: DensityFilter
    geometry: TypeGeometry
    section: SectionGeometry
    density: Density
    seen: Tally
    windows: Sequence[AircraftWindow]
    beside: Beside
    events: int
    damages: int
    outside: Mapping[tuple[int, int], int] = field(default_factory=dict)

    @property
    def amount(self) -> float:
        """What all aircraft flew in their windows, in the denominator's unit."""
        return sum(window.amount for window in self.windows)

    @property
    def in_rates(self) -> list[AircraftWindow]:
        """Aircraft that have any day in the rates."""
        return [window for window in self.windows if window.first is not None]

    @property
    def flights_without_hours(self) -> int:
        """Flights in the windows whose hours are unknown: in no FH exposure."""
        return sum(window.flights_without_hours for window in self.windows)


def density_data(
    asked: DensityFilter, geometry: TypeGeometry, *, user: User, as_of: dt.date
) -> DensityData:
    """The density map's numbers; about ten queries, whatever the number of rows."""
    section = geometry.section(asked.section.code)
    asked = replace(asked, skin=_one_skin(asked.skin, section))
    lattice = lattice_of(section, [variant.code for variant in geometry.variants])
    windows = list(_windows(asked, user, as_of))
    rows = _asked_for(asked, windows, as_of)
    counted = _counted(rows, asked, windows)
    seen = _tally(lattice, section, counted)
    density = Density(
        lattice, seen.counts, lattice.exposure(_amounts(windows)), asked.denominator
    )
    totals = _totals(counted)
    earlier = rows.filter(~_in_windows(windows), _skin(asked), section=asked.section)
    return DensityData(
        asked=asked,
        geometry=geometry,
        section=section,
        density=density,
        seen=seen,
        windows=windows,
        beside=_beside(asked, rows, windows, density, seen),
        events=totals["alone"] + totals["events"],
        damages=totals["damages"],
        outside=_outside(lattice, earlier),
    )


# -- aircraft and exposure ------------------------------------------------------------


def _windows(
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
        or_, (Q(aircraft_id__in=pks, day__range=pair) for pair, pks in _by_days(days))
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


def _by_days(
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


def _amounts(windows: Iterable[AircraftWindow]) -> dict[str, float]:
    """What the aircraft of each variant flew."""
    amounts: dict[str, float] = {}
    for window in windows:
        code = window.aircraft.variant.code
        amounts[code] = amounts.get(code, 0.0) + window.amount
    return amounts


# -- findings -------------------------------------------------------------------------


def _asked_for(
    asked: DensityFilter, windows: Sequence[AircraftWindow], as_of: dt.date
) -> QuerySet[Finding]:
    """Findings of these aircraft in the period, in this section or to be placed.

    The aircraft are the reader's own already, so that the index of the map suffices.
    """
    rows = findings_shown(Finding.objects.all()).filter(
        Q(section=asked.section) | Q(section__isnull=True),
        aircraft__in=[window.aircraft.pk for window in windows],
        found_on__lte=min(as_of, asked.to_on or as_of),
    )
    if asked.from_on:
        rows = rows.filter(found_on__gte=asked.from_on)
    if asked.damage_types:
        rows = rows.filter(damage_type__in=asked.damage_types)
    if asked.cause:
        rows = rows.filter(cause=asked.cause)
    return rows.order_by()


def findings_in_rates(data: DensityData, *, as_of: dt.date) -> QuerySet[Finding]:
    """The findings that the map counts."""
    rows = _asked_for(data.asked, data.windows, as_of)
    return _counted(rows, data.asked, data.windows)


def _counted(
    rows: QuerySet[Finding], asked: DensityFilter, windows: Sequence[AircraftWindow]
) -> QuerySet[Finding]:
    return rows.filter(
        _in_windows(windows),
        _skin(asked),
        section=asked.section,
        around_half__isnull=False,
    )


def _in_windows(windows: Sequence[AircraftWindow]) -> Q:
    """Found while the aircraft's data are in the rates."""
    days = {
        window.aircraft.pk: (window.first, window.last)
        for window in windows
        if window.first and window.last
    }
    parts = [
        Q(aircraft_id__in=pks, found_on__range=pair) for pair, pks in _by_days(days)
    ]
    return reduce(or_, parts, Q(pk__in=[]))


def _one_skin(asked: str, section: SectionGeometry) -> str:
    """The skin mapped of two that lie over each other; empty where there is one."""
    if section.skins != ("upper", "lower"):
        return ""
    return asked if asked in section.skins else section.skins[0]


def _skin(asked: DensityFilter) -> Q:
    """Damage of the skin that the map shows, from outside."""
    return Q(element=Element.SKIN, surface=asked.skin or Surface.OUTER)


def _tally(
    lattice: Lattice, section: SectionGeometry, rows: QuerySet[Finding]
) -> Tally:
    """Findings folded into cells: short ones by half-bay in SQL, long ones spread."""
    wide = _bay_across(section)
    long = Q(x2_mm__gt=F("x1_mm") + section.frame_pitch_mm) | Q(
        s2_mm__gt=F("s1_mm") + wide
    )
    short = rows.exclude(long)
    single = (
        short.filter(event__isnull=True)
        .values_list("along_half", "around_half")
        .annotate(found=Count("pk"))
    )
    shared: list[tuple[str, int, int]] = [
        (f"event {event}", along or 0, around or 0)
        for event, along, around in short.filter(event__isnull=False)
        .values_list("event", "along_half", "around_half")
        .distinct()
    ]
    for row in rows.filter(long).select_related("aircraft__variant"):
        name = f"event {row.event_id}" if row.event_id else f"finding {row.pk}"
        shared += [(name, *halves) for halves in _spread(lattice, section, row)]
    return tally(lattice, single, shared)


def _bay_across(section: SectionGeometry) -> float:
    """Width of a bay between stringers at the reference size."""
    lines = len(section.stringers)
    if section.wrap_mm and lines:
        return section.wrap_mm / lines
    return (section.s2_mm - section.s1_mm) / (lines + 1)


def _spread(
    lattice: Lattice, section: SectionGeometry, row: Finding
) -> Iterator[tuple[int, int]]:
    """Half-bays of every cell that a long finding touches and its aircraft has."""
    variant = row.aircraft.variant.code
    x1, x2, s1, s2 = row.x1_mm, row.x2_mm, row.s1_mm, row.s2_mm
    if x1 is None or x2 is None or s1 is None or s2 is None:
        return
    first = (section.half_along(section.map_of(x1, variant)) + 1) // 2
    last = (section.half_along(section.map_of(x2, variant)) + 1) // 2
    start = (section.half_across(s1) + 1) // 2
    count = lattice.shape[1]
    if section.wrap_mm and s2 - s1 >= section.wrap_mm:
        steps = count - 1
    else:
        steps = (section.half_across(s2) + 1) // 2 - start
        steps = steps % count if section.wrap_mm else steps
    for along in range(first, last + 1):
        for around in range(start, start + steps + 1):
            around = around % count if section.wrap_mm else around
            if lattice.area_m2[variant][along, around] > 0:
                yield 2 * along, 2 * around


def _totals(rows: QuerySet[Finding]) -> dict[str, int]:
    """Events and single damages among the findings in the rates; one query."""
    sums = rows.aggregate(
        alone=Count("pk", filter=Q(event__isnull=True)),
        events=Count("event", distinct=True),
        damages=Sum("cluster_count"),
    )
    return {key: value or 0 for key, value in sums.items()}


def _beside(
    asked: DensityFilter,
    rows: QuerySet[Finding],
    windows: Sequence[AircraftWindow],
    density: Density,
    seen: Tally,
) -> Beside:
    """What is in the record and in no rate; each finding under its first reason."""
    placed, inside = Q(section__isnull=False), _in_windows(windows)
    skin, surface = Q(element=Element.SKIN), _skin(asked)
    sums = rows.aggregate(
        to_be_placed=Count("pk", filter=~placed),
        outside_data=Count("pk", filter=placed & ~inside & surface),
        other_elements=Count("pk", filter=placed & inside & ~skin),
        other_surfaces=Count("pk", filter=placed & inside & skin & ~surface),
        no_across=Count(
            "pk", filter=placed & inside & surface & Q(around_half__isnull=True)
        ),
    )
    return Beside(**sums, no_exposure=density.unexposed_count + seen.outside)


def _outside(lattice: Lattice, rows: QuerySet[Finding]) -> dict[tuple[int, int], int]:
    """Cells of findings from days in no rate: drawn, not counted; one query."""
    groups = (
        rows.filter(around_half__isnull=False)
        .values_list("along_half", "around_half")
        .annotate(found=Count("pk"))
    )
    counts = tally(lattice, groups).counts
    return {
        (along, around): int(counts[along, around])
        for along, around in zip(*counts.nonzero(), strict=True)
    }
