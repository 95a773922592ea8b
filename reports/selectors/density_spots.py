"""Hot spots of a density map with what a reader asks next: where, who, what."""

from __future__ import annotations

import datetime as dt
from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass

from django.db.models import Q

from repairs.models import DamageType
from reports.hot_spots import HotSpot, Window, hot_spots, window_mm
from reports.selectors.density import DensityData, findings_in_rates

SEED = 1997
"""Of the random maps, fixed so that a page shown twice says the same."""

LETTERS = "ABCDEFGHIJ"
MOST_TYPES = 3


@dataclass(frozen=True)
class SpotRow:
    """One line of the hot-spot table."""

    letter: str
    spot: HotSpot
    where: str
    about: str
    aircraft: int
    aircraft_in_rates: int
    mostly: Sequence[tuple[str, int]]


def spot_rows(data: DensityData, *, as_of: dt.date, replicas: int) -> list[SpotRow]:
    """The hot spots in order of strength; one query for each of the few."""
    found = hot_spots(data.density, data.seen, seed=SEED, replicas=replicas)
    return [
        _row(letter, spot, data, as_of)
        for letter, spot in zip(LETTERS, found, strict=False)
    ]


def _row(letter: str, spot: HotSpot, data: DensityData, as_of: dt.date) -> SpotRow:
    rows = findings_in_rates(data, as_of=as_of).filter(_half_bays(spot.window, data))
    pairs = rows.values_list("aircraft", "damage_type")
    types: Counter[str] = Counter()
    aircraft = set()
    for one, kind in pairs:
        aircraft.add(one)
        types[str(DamageType(kind).label)] += 1
    return SpotRow(
        letter=letter,
        spot=spot,
        where=where_words(spot.window, data),
        about=_about(spot.window, data),
        aircraft=len(aircraft),
        aircraft_in_rates=len(data.in_rates),
        mostly=sorted(types.items(), key=lambda pair: (-pair[1], pair[0]))[:MOST_TYPES],
    )


def _half_bays(window: Window, data: DensityData) -> Q:
    """Findings whose middle lies in the window: half-bays 2c - 1 and 2c of cell c."""
    halves = 2 * data.density.lattice.shape[1]
    around = [
        (2 * cell + half) % halves if data.density.lattice.wraps else 2 * cell + half
        for cell in range(window.around, window.around + window.stringers)
        for half in (-1, 0)
    ]
    last = window.along + window.frames - 1
    return Q(along_half__range=(2 * window.along - 1, 2 * last), around_half__in=around)


def where_words(window: Window, data: DensityData) -> str:
    """The window by the names on the structure: stations and stringers, inclusive."""
    lattice, section = data.density.lattice, data.section
    word = section.station_words[0] if section.station_words else "station"
    stations = lattice.stations[window.along : window.along + window.frames]
    around = [
        lattice.stringers[cell % len(lattice.stringers)]
        for cell in range(window.around, window.around + window.stringers)
    ]
    along = f"{word} {stations[0]}"
    along += f" to {stations[-1]}" if len(stations) > 1 else ""
    across = around[0] + (f" to {around[-1]}" if len(around) > 1 else "")
    return f"{along}, {across}"


def _about(window: Window, data: DensityData) -> str:
    """Doors and hatches whose surround the window touches."""
    low, high, left, right = window_mm(window, data.density.lattice)
    wrap = data.section.wrap_mm or 0.0
    names = []
    for cutout in data.section.cutouts:
        box = cutout.box
        along = box.map1_mm < high and box.map2_mm > low
        across = any(
            box.s1_mm + shift < right and box.s2_mm + shift > left
            for shift in (-wrap, 0.0, wrap)
        )
        if cutout.kind != "window" and across and along:
            names.append(cutout.label)
    return f"about {', '.join(names)}" if names else ""
