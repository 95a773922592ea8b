"""The scan for hot spots: its ratio, its windows, its test."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.stats import kstest, poisson

from reports.density import CYCLES, Density, tally
from reports.hot_spots import (
    LARGEST,
    Window,
    best_ratios,
    hot_spots,
    scan_ratio,
)
from reports.lattice import Lattice


def lattice(frames: int, stringers: int, *, wraps: bool = True) -> Lattice:
    return Lattice(
        frames=[f"FR {n}" for n in range(frames)],
        stations=[str(100 + 20 * n) for n in range(frames)],
        stringers=[f"S-{n}" for n in range(stringers)],
        along_mm=np.arange(frames + 1) * 508.0,
        across_mm=(np.arange(stringers + 1) - 0.5) * 223.4,
        wraps=wraps,
        area_m2={"base": np.ones((frames, stringers))},
    )


def seen_at(cells: Lattice, places, exposure=None):
    """A density and its tally from (event, frame, stringer)."""
    alone = [(2 * f, 2 * s, 1) for e, f, s in places if e != "storm"]
    storm = [("storm", 2 * f, 2 * s) for e, f, s in places if e == "storm"]
    seen = tally(cells, alone, storm)
    if exposure is None:
        exposure = np.full(cells.shape, 100.0)
    return Density(cells, seen.counts, exposure, CYCLES), seen


# Kulldorff (1997), Commun. Statist. Theory Meth. 26, 1481-1496, Poisson model; the
# numbers were computed from his formula by hand calculator, not by this program.
@pytest.mark.parametrize(
    ("count", "expected", "total", "ratio"),
    [
        (20, 8, 100, 7.1449),
        (3, 0.5, 100, 2.9070),
        (40, 20, 600, 8.0747),
        (8, 10, 100, 0.0),
        (100, 50, 100, 69.3147),
    ],
)
def test_the_ratio_has_the_values_of_its_formula(count, expected, total, ratio):
    assert float(scan_ratio(count, expected, total)) == pytest.approx(ratio, abs=6e-5)


@given(st.integers(1, 300), st.integers(0, 300), st.floats(0.01, 0.99))
def test_the_ratio_is_the_poisson_likelihood_ratio(inside, outside, share):
    """Against scipy: both parts at their own mean over both at the common one."""
    total = inside + outside
    expected = share * total
    own = poisson.logpmf(inside, inside) + poisson.logpmf(outside, outside)
    common = poisson.logpmf(inside, expected) + poisson.logpmf(
        outside, total - expected
    )
    found = float(scan_ratio(inside, expected, total))
    if inside > expected:
        assert found == pytest.approx(own - common, rel=1e-6, abs=1e-9)
    else:
        assert found == 0.0


def best_by_hand(counts, share, *, wraps):
    """Every window in turn, cell by cell."""
    frames, stringers = counts.shape
    best = 0.0
    for high in range(1, min(LARGEST, frames) + 1):
        for wide in range(1, min(LARGEST, stringers) + 1):
            for i in range(frames - high + 1):
                for j in range(stringers if wraps else stringers - wide + 1):
                    mask = Window(i, j, high, wide).cells(counts.shape)
                    c, s = counts[mask].sum(), share[mask].sum()
                    if 0 < s < 1 - 1e-12:
                        total = counts.sum()
                        best = max(best, float(scan_ratio(c, s * total, total)))
    return best


@pytest.mark.parametrize("wraps", [True, False])
@pytest.mark.parametrize("shape", [(3, 4), (9, 5), (4, 11)])
def test_the_fast_scan_finds_what_a_plain_search_finds(shape, wraps):
    generator = np.random.default_rng(7)
    share = generator.random(shape)
    share[1, 2] = 0.0
    share /= share.sum()
    maps = generator.multinomial(25, share.ravel(), size=3).reshape(3, *shape)
    maps[2] = 0
    maps[2, 0, 0], maps[2, -1, -1] = 24, 1
    expected = [best_by_hand(each, share, wraps=wraps) for each in maps]
    assert best_ratios(maps, share, wraps=wraps) == pytest.approx(expected, abs=1e-9)


def test_a_planted_hot_spot_across_the_cut_of_the_drawing_is_found_whole():
    cells = lattice(20, 12)
    generator = np.random.default_rng(3)
    places = [(n, generator.integers(20), generator.integers(12)) for n in range(120)]
    places += [(1000 + n, 8 + n % 3, (11 + n % 2) % 12) for n in range(36)]
    first = hot_spots(*seen_at(cells, places), seed=5, replicas=199)[0]
    assert first.window == Window(along=8, around=11, frames=3, stringers=2)
    assert first.p == pytest.approx(1 / 200)
    assert first.stands_out


def test_expectation_follows_exposure_and_not_area():
    """Half the findings in the half that flew nine times as much: no hot spot there."""
    cells = lattice(10, 4)
    exposure = np.full((10, 4), 100.0)
    exposure[5:] = 900.0
    places = [(n, n % 10, n % 4) for n in range(200)]
    (first, *_) = hot_spots(*seen_at(cells, places, exposure), seed=1, replicas=99)
    assert first.window.along + first.window.frames <= 5
    share = 100.0 / 1000.0 * first.window.frames / 5 * first.window.stringers / 4
    assert first.expected == pytest.approx(200 * share)


def test_the_list_ends_with_the_first_window_that_chance_explains():
    cells = lattice(16, 10)
    generator = np.random.default_rng(11)
    places = [(n, generator.integers(16), generator.integers(10)) for n in range(80)]
    places += [(500 + n, 3, 4) for n in range(20)]
    spots = hot_spots(*seen_at(cells, places), seed=2, replicas=199)
    assert [spot.stands_out for spot in spots] == [True] * (len(spots) - 1) + [False]
    masks = [spot.window.cells((16, 10)) for spot in spots]
    assert sum(mask.astype(int) for mask in masks).max() == 1


def test_one_hailstorm_is_not_a_place():
    """46 dents of one day in one patch stand out as 46 events, not as one event."""
    cells = lattice(20, 10)
    generator = np.random.default_rng(4)
    strewn = [(n, generator.integers(20), generator.integers(10)) for n in range(60)]
    patch = [(5 + n % 7, 2 + n // 7) for n in range(46)]
    as_events = strewn + [(100 + n, *place) for n, place in enumerate(patch)]
    as_storm = strewn + [("storm", *place) for place in patch]
    separate = hot_spots(*seen_at(cells, as_events), seed=6, replicas=199)
    storm = hot_spots(*seen_at(cells, as_storm), seed=6, replicas=199)
    assert separate[0].stands_out
    assert not any(spot.stands_out for spot in storm)


def test_a_hailstorm_does_not_hide_a_true_hot_spot():
    cells = lattice(20, 10)
    generator = np.random.default_rng(4)
    places = [(n, generator.integers(20), generator.integers(10)) for n in range(60)]
    places += [("storm", 5 + n % 7, 2 + n // 7) for n in range(46)]
    places += [(200 + n, 15, 8) for n in range(9)]
    first = hot_spots(*seen_at(cells, places), seed=6, replicas=199)[0]
    assert first.stands_out
    assert first.window.cells((20, 10))[15, 8]


def test_events_are_counted_once_at_the_middle_of_what_they_touched():
    cells = lattice(6, 8)
    places = [("storm", 1, 2), ("storm", 2, 2), ("storm", 3, 2), (7, 5, 5)]
    _, seen = seen_at(cells, places)
    assert seen.counts.sum() == 4
    assert seen.middles.sum() == 2
    assert seen.middles[2, 2] == 1


def test_the_same_seed_gives_the_same_answer_and_nothing_gives_nothing():
    cells = lattice(8, 8)
    density, seen = seen_at(cells, [(n, n % 8, n * n % 8) for n in range(30)])
    once = hot_spots(density, seen, seed=1, replicas=49)
    assert once == hot_spots(density, seen, seed=1, replicas=49)
    assert hot_spots(*seen_at(cells, []), seed=1) == []
    none = np.zeros((8, 8))
    assert hot_spots(*seen_at(cells, [(1, 2, 3)], none), seed=1) == []


def test_with_no_hot_spot_p_is_uniform():
    """Fifty flat maps: the p-values of the leading window follow a uniform law."""
    cells = lattice(10, 8)
    generator = np.random.default_rng(2026)
    found = []
    for number in range(50):
        places = [(n, generator.integers(10), generator.integers(8)) for n in range(40)]
        found.append(hot_spots(*seen_at(cells, places), seed=number, replicas=99)[0].p)
    assert kstest(found, "uniform").pvalue > 0.01
