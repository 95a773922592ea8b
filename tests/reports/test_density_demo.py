"""The demo's story on the density map: the plant stands out, the traps do not."""

from __future__ import annotations

from collections import Counter
from pathlib import Path

import numpy as np
import pytest

from fleet.location.geometry import geometry_from_toml
from reports.demo.scenario import draw
from reports.density import CYCLES, Density, tally
from reports.hot_spots import hot_spots, window_mm
from reports.lattice import lattice_of

FIXTURE = Path(__file__).parents[2] / "fixtures" / "ard52.toml"
INCH = 25.4
PLANT_STATIONS = (740, 860)
PLANT_STRINGERS = [f"S-{number}R" for number in range(12, 20)]


@pytest.fixture(scope="module")
def fuselage():
    text = FIXTURE.read_text(encoding="utf-8")
    return geometry_from_toml(text).section("FUS")


@pytest.fixture(scope="module")
def scenario():
    return draw()


@pytest.fixture(scope="module")
def counted(scenario, fuselage):
    """The demo's outer-skin damage at its true places, over what the fleet flew."""
    lattice = lattice_of(fuselage, ["base", "S"])
    books = scenario.logbooks
    flown: Counter[str] = Counter()
    for book in books.values():
        aircraft = book.aircraft
        flown[aircraft.variant] += book.final.cycles - aircraft.opening_cycles
    single = []
    for finding in scenario.findings:
        truth = finding.truth
        aircraft = books[finding.msn].aircraft
        if (
            (truth.section, finding.element, finding.surface)
            == ("FUS", "skin", "outer")
            and truth.across_in is not None
            and finding.state not in ("duplicate", "voided")
            and finding.found_on >= aircraft.joined_on
        ):
            place = fuselage.map_of(truth.x_in * INCH, aircraft.variant)
            across = fuselage.wrapped(truth.across_in * INCH)
            halves = fuselage.half_along(place), fuselage.half_across(across)
            single.append((*halves, 1))
    seen = tally(lattice, single)
    return Density(lattice, seen.counts, lattice.exposure(flown), CYCLES), seen


@pytest.fixture(scope="module")
def spots(counted):
    return hot_spots(*counted, seed=1, replicas=199)


def planted(lattice):
    low, high = PLANT_STATIONS
    along = [str(station) in lattice.stations for station in range(low, high + 1, 20)]
    assert all(along)
    mask = np.zeros(lattice.shape, dtype=bool)
    for i, station in enumerate(lattice.stations):
        for j, stringer in enumerate(lattice.stringers):
            mask[i, j] = (
                station.isdecimal()
                and low <= int(station) <= high
                and stringer in PLANT_STRINGERS
            )
    return mask


def test_the_planted_hot_spot_leads_and_chance_does_not_explain_it(counted, spots):
    density, _ = counted
    first, mask = spots[0], planted(density.lattice)
    window = first.window.cells(density.lattice.shape)
    assert (window & mask).sum() >= 0.7 * mask.sum()
    assert (window & mask).sum() >= 0.7 * window.sum()
    assert first.p == pytest.approx(1 / 200)
    assert first.ratio > 3


def test_the_plant_lies_about_the_cargo_door_and_not_on_it(counted, spots, fuselage):
    """The door is a cut-out: cells within it have no skin and no exposure."""
    density, _ = counted
    low, high, left, right = window_mm(spots[0].window, density.lattice)
    door = next(c for c in fuselage.cutouts if c.kind == "cargo_door").box
    assert low < door.map2_mm
    assert high > door.map1_mm
    assert left < door.s2_mm
    assert right > door.s1_mm
    inside = fuselage.half_along((door.map1_mm + door.map2_mm) / 2)
    across = fuselage.half_across((door.s1_mm + door.s2_mm) / 2)
    cell = density.lattice.cells(np.array([inside]), np.array([across]))
    assert not density.exposed[cell].any()


def test_two_findings_over_little_exposure_are_no_hot_spot(counted, spots, scenario):
    """High by plain rate, for only the stretched aircraft have a plug; yet but two."""
    density, _ = counted
    (trap,) = {
        (list(density.lattice.stations).index("560A"), j)
        for j in [list(density.lattice.stringers).index("S-3L")]
    }
    keys = scenario.planted["small_number_trap"]
    assert len(keys) == 2
    assert density.counts[trap] >= 1
    assert density.few[trap]
    assert density.rate[trap] > 5 * np.nanmean(density.rate)
    assert density.smoothed[trap] < density.rate[trap] / 2
    for spot in spots:
        if spot.stands_out:
            assert not spot.window.cells(density.lattice.shape)[trap]


def test_nothing_counted_falls_where_nothing_was_exposed(counted):
    density, seen = counted
    assert density.unexposed_count == 0
    assert seen.outside == 0
    assert density.counted > 400
