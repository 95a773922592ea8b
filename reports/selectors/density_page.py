"""What the density page and its command show: map, notes, hot spots, numbers."""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np

from fleet.drawing.sheet import Sheet
from fleet.models import User
from fleet.selectors.structure import geometry_of
from repairs.models import Cause, DamageType
from reports.figures.density_map import (
    DensityFigure,
    density_svg,
    rate_words,
    swatch,
)
from reports.selectors.density import DensityData, density_data
from reports.selectors.density_spots import SpotRow, spot_rows
from reports.selectors.exposure import DensityFilter


@dataclass(frozen=True)
class CellRow:
    """One cell that holds a finding, in numbers."""

    frame: str
    station: str
    stringer: str
    count: int
    exposure: float
    rate: float
    low: float
    high: float
    smoothed: float


@dataclass(frozen=True)
class DensityPage:
    """The map with everything that is said about it."""

    data: DensityData
    spots: Sequence[SpotRow]
    as_of: dt.date
    replicas: int
    smoothed: bool = True

    @property
    def title(self) -> str:
        """What was counted, in words."""
        asked = self.data.asked
        kinds = [str(DamageType(kind).label) for kind in asked.damage_types]
        words = [", ".join(kinds) or "all damage"]
        words += [f"cause {Cause(asked.cause).label}"] if asked.cause else []
        skin = f"{asked.skin} skin" if asked.skin else "skin"
        if self.data.section.skins == ("outer",):
            skin = "skin, outer surface"
        words += (
            [self.data.geometry.variant(asked.variant).name] if asked.variant else []
        )
        words += [one.registration for one in asked.aircraft]
        return f"{self.data.section.title} {skin}, {', '.join(words)}"

    @cached_property
    def figure(self) -> DensityFigure:
        """The map, decided."""
        data = self.data
        return DensityFigure(
            title=f"Density: {self.title}",
            sheet=Sheet(data.section, skin=data.asked.skin),
            unit=data.geometry.unit,
            density=data.density,
            smoothed=self.smoothed,
            outside=data.outside,
            spots=[
                (row.letter, row.spot.window)
                for row in self.spots
                if row.spot.stands_out
            ],
        )

    @property
    def svg(self) -> str:
        return density_svg(self.figure)

    @property
    def legend(self) -> list[tuple[str, str]]:
        """Swatches with their words."""
        return [(swatch(name), words) for name, words in self.figure.legend()]

    @property
    def two_skins(self) -> bool:
        """Whether the section has two skins, of which one is shown."""
        return bool(self.data.asked.skin)

    @property
    def period(self) -> str:
        """First and last day that any aircraft is in the rates."""
        windows = self.data.in_rates
        first = min((w.first for w in windows if w.first), default=None)
        last = max((w.last for w in windows if w.last), default=None)
        return f"{first} to {last}" if first else "no day with data"

    @property
    def notes(self) -> list[str]:
        """Exposure, counts, and what is in the record but in no rate."""
        data, unit = self.data, self.data.asked.denominator.unit
        exposure = f"{data.amount:,.0f} {unit}"
        if unit == "aircraft-year":
            exposure = f"{data.amount:,.1f} aircraft-years"
        lines = [
            f"Exposure: {exposure} by {len(data.in_rates)} aircraft, {self.period}.",
            f"Counted: {data.events:,} events with {data.damages:,} damages; an event "
            f"counts once in each cell it touched, {data.density.counted:,} in all.",
            f"Beside the rates: {data.beside.to_be_placed} to be placed, "
            f"{data.beside.outside_data} found outside the aircraft's data"
            f"{''.join(self._more_beside())}.",
        ]
        if data.fleet_rate:
            rate, low, high = (rate_words(part) for part in data.fleet_rate)
            lines.insert(
                2,
                f"Over the whole section, by events: {rate} (95 % {low} to {high}) "
                f"{data.asked.denominator.rate_unit}.",
            )
        if data.flights_without_hours and unit == "FH":
            lines.append(
                f"At least {data.flights_without_hours} flights without hours are in "
                "no exposure, so the rates are too high rather than too low."
            )
        return lines

    def _more_beside(self) -> Iterator[str]:
        beside = self.data.beside
        for count, words in (
            (beside.other_elements, "on other elements than skin or unknown ones"),
            (beside.other_surfaces, "on another surface or none stated"),
            (beside.no_across, "with no place across"),
            (beside.no_exposure, "where no aircraft was exposed"),
        ):
            if count:
                yield f", {count} {words}"

    @property
    def rows(self) -> list[CellRow]:
        """Every exposed cell that holds a finding, in the order of the structure."""
        density = self.data.density
        lattice = density.lattice
        low, high = density.interval
        return [
            CellRow(
                frame=lattice.frames[i],
                station=lattice.stations[i],
                stringer=lattice.stringers[j],
                count=int(density.counts[i, j]),
                exposure=float(density.exposure[i, j]) / density.denominator.per,
                rate=float(density.rate[i, j]),
                low=float(low[i, j]),
                high=float(high[i, j]),
                smoothed=float(density.smoothed[i, j]),
            )
            for i, j in np.argwhere(density.exposed & (density.counts > 0)).tolist()
        ]

    @property
    def exposure_unit(self) -> str:
        """Unit of the table's exposure column."""
        one = self.data.asked.denominator
        return f"m² × {one.per:,.0f} {one.unit}" if one.per != 1 else f"m² × {one.unit}"


def density_page(
    asked: DensityFilter,
    *,
    user: User,
    as_of: dt.date,
    replicas: int,
    smoothed: bool = True,
) -> DensityPage | None:
    """The page for a filter; None if the type has no geometry in force."""
    geometry = geometry_of(asked.aircraft_type)
    if geometry is None:
        return None
    data = density_data(asked, geometry, user=user, as_of=as_of)
    spots = spot_rows(data, as_of=as_of, replicas=replicas)
    return DensityPage(data, spots, as_of, replicas, smoothed)


def density_json(page: DensityPage) -> dict[str, Any]:
    """The page's numbers as plain values, for other programs."""
    data = page.data
    asked, density = data.asked, data.density
    return {
        "type": asked.aircraft_type.code,
        "section": asked.section.code,
        "skin": asked.skin,
        "variant": asked.variant,
        "damage_types": list(asked.damage_types),
        "cause": asked.cause,
        "as_of": page.as_of.isoformat(),
        "aircraft": [
            {
                "registration": window.aircraft.registration,
                "from": window.first and window.first.isoformat(),
                "to": window.last and window.last.isoformat(),
                "exposure": round(window.amount, 3),
            }
            for window in data.windows
        ],
        "exposure": {"unit": asked.denominator.unit, "total": round(data.amount, 3)},
        "rate_unit": density.denominator.rate_unit,
        "fleet_rate": data.fleet_rate and data.fleet_rate[0],
        "fleet_rate_95": data.fleet_rate and data.fleet_rate[1:],
        "count": {
            "events": data.events,
            "cells": density.counted,
            "damages": data.damages,
        },
        "beside": vars(data.beside),
        "flights_without_hours": data.flights_without_hours,
        "cells": [vars(row) for row in page.rows],
        "cells_none_found": int((density.exposed & (density.counts == 0)).sum()),
        "cells_no_exposure": int((~density.exposed & density.lattice.present).sum()),
        "hot_spots": [_spot_json(row) for row in page.spots],
        "replicas": page.replicas,
        "cautions": "Engineering aid; a hot spot is a reason to look, not a cause.",
    }


def _spot_json(row: SpotRow) -> dict[str, Any]:
    spot = row.spot
    return {
        "letter": row.letter,
        "where": row.where,
        "about": row.about,
        "found": spot.count,
        "expected": round(spot.expected, 4),
        "ratio": round(spot.ratio, 4),
        "llr": round(spot.llr, 4),
        "p": spot.p,
        "stands_out": spot.stands_out,
        "aircraft": row.aircraft,
        "mostly": dict(row.mostly),
    }
