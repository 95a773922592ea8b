"""Damage density from the record: which findings, over which exposure.

Findings are grouped by half-bay in the database and folded to cells here. Each
aircraft counts from the day its data begin to the day they are current to, in the
numerator and in the denominator alike; what falls outside is counted beside.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field, replace
from functools import cached_property, reduce
from operator import or_

from django.db.models import Count, F, Q, QuerySet, Sum

from fleet.location.geometry import Section as SectionGeometry
from fleet.location.geometry import TypeGeometry
from fleet.models import User
from repairs.models import Finding
from repairs.models.columns import Element, Surface
from repairs.selectors.neighbours import findings_shown
from reports.density import Density, Tally, garwood_interval, tally
from reports.lattice import Lattice, lattice_of
from reports.selectors.exposure import (
    AircraftWindow,
    DensityFilter,
    aircraft_windows,
    amounts_by_variant,
    by_days,
)


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

    @cached_property
    def fleet_rate(self) -> tuple[float, float, float] | None:
        """Events per unit of rate over the whole section, with exact 95 % limits.

        None without exposure.
        """
        exposure = float(self.density.exposure.sum()) / self.asked.denominator.per
        if exposure <= 0:
            return None
        low, high = garwood_interval(self.events)
        return self.events / exposure, float(low) / exposure, float(high) / exposure

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
    windows = list(aircraft_windows(asked, user, as_of))
    rows = _asked_for(asked, windows, as_of)
    counted = _counted(rows, asked, windows)
    seen = _tally(lattice, section, counted)
    density = Density(
        lattice,
        seen.counts,
        lattice.exposure(amounts_by_variant(windows)),
        asked.denominator,
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
        Q(aircraft_id__in=pks, found_on__range=pair) for pair, pks in by_days(days)
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
