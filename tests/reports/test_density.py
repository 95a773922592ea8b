"""Cells, counts, rates, intervals and smoothing of the density map."""

from __future__ import annotations

from fractions import Fraction

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.stats import poisson

from reports.density import (
    CYCLES,
    NO_EXPOSURE,
    NONE_FOUND,
    YEARS,
    Density,
    class_edges,
    class_numbers,
    garwood_interval,
    marshall_rates,
    tally,
)
from reports.lattice import Lattice


def lattice(frames: int = 4, stringers: int = 6, *, wraps: bool = True) -> Lattice:
    return Lattice(
        frames=[f"FR {n}" for n in range(frames)],
        stations=[str(100 + 20 * n) for n in range(frames)],
        stringers=[f"S-{n}" for n in range(stringers)],
        along_mm=np.arange(frames + 1) * 508.0,
        across_mm=(np.arange(stringers + 1) - 0.5) * 223.4,
        wraps=wraps,
        area_m2={"base": np.full((frames, stringers), 0.1)},
    )


def density(counts, exposure, denominator=CYCLES) -> Density:
    counts = np.array(counts)
    return Density(
        lattice(*counts.shape), counts, np.array(exposure, dtype=float), denominator
    )


# Garwood, Biometrika 28 (1936), 437-442, as tabulated in Pearson and Hartley,
# Biometrika Tables for Statisticians I, table 40, 1 - 2 alpha = 0.95 (from memory).
GARWOOD = {
    0: (0.0, 3.69),
    1: (0.0253, 5.57),
    2: (0.242, 7.22),
    3: (0.619, 8.77),
    4: (1.09, 10.24),
    5: (1.62, 11.67),
    10: (4.80, 18.39),
    20: (12.22, 30.89),
    50: (37.11, 65.92),
}


@pytest.mark.parametrize("count", GARWOOD)
def test_the_interval_agrees_with_the_published_table(count):
    lower, upper = garwood_interval(count)
    assert (float(lower), float(upper)) == pytest.approx(GARWOOD[count], abs=0.006)


@given(st.integers(0, 5000), st.floats(0.5, 0.999))
def test_the_interval_leaves_the_stated_tail_on_each_side(count, confidence):
    """The defining property, checked with scipy's Poisson distribution."""
    lower, upper = garwood_interval(count, confidence=confidence)
    tail = (1 - confidence) / 2
    assert poisson.cdf(count, upper) == pytest.approx(tail, rel=1e-6)
    if count:
        assert poisson.sf(count - 1, lower) == pytest.approx(tail, rel=1e-6)


def test_a_negative_count_is_refused():
    with pytest.raises(ValueError, match="cannot be negative; got -1"):
        garwood_interval(np.array([3, -1]))


def test_smoothing_follows_the_formula_worked_in_fractions():
    counts = [2, 0, 5, 22, 1]
    exposure = [Fraction(4, 5), Fraction(6, 5), Fraction(6), Fraction(10), Fraction(4)]
    total = sum(exposure)
    mean = Fraction(sum(counts)) / total
    rates = [c / e for c, e in zip(counts, exposure, strict=True)]
    spread = sum(e * (r - mean) ** 2 for r, e in zip(rates, exposure, strict=True))
    between = spread / total - mean / (total / 5)
    assert between > 0
    expected = [
        float(mean + between / (between + mean / e) * (r - mean))
        for r, e in zip(rates, exposure, strict=True)
    ]
    smoothed = marshall_rates(np.array(counts), np.array([float(e) for e in exposure]))
    assert smoothed == pytest.approx(expected, rel=1e-12)


def test_cells_that_differ_by_chance_only_get_their_common_rate():
    counts, exposure = np.array([3, 4, 3, 4]), np.full(4, 10.0)
    assert marshall_rates(counts, exposure) == pytest.approx(np.full(4, 0.35))


@given(
    st.lists(st.tuples(st.integers(0, 40), st.floats(0.1, 50)), min_size=2, max_size=30)
)
def test_a_smoothed_rate_lies_between_its_own_and_the_common_rate(cells):
    counts = np.array([count for count, _ in cells])
    exposure = np.array([amount for _, amount in cells])
    mean = counts.sum() / exposure.sum()
    rates, smoothed = counts / exposure, marshall_rates(counts, exposure)
    room = 1e-9 * (1 + rates.max())
    assert np.all(smoothed >= np.minimum(rates, mean) - room)
    assert np.all(smoothed <= np.maximum(rates, mean) + room)


def test_an_event_counts_once_in_a_cell_and_once_in_each_cell_it_touched():
    seen = tally(
        lattice(),
        [(4, 2, 1)],
        [("hail", 3, 2), ("hail", 4, 2), ("hail", 4, 4)],
    )
    assert seen.counts[2, 1] == 2
    assert seen.counts[2, 2] == 1
    assert seen.counts.sum() == 3
    assert len(seen.events) == 1


def test_a_half_bay_that_the_section_lacks_is_counted_beside():
    seen = tally(lattice(), [(99, 2, 3), (4, 2, 1)], [("hail", 77, 4)])
    assert seen.outside == 4
    assert seen.counts.sum() == 1


def test_nothing_seen_is_a_map_of_zeros():
    assert tally(lattice(), []).counts.tolist() == np.zeros((4, 6)).tolist()


@given(
    st.lists(
        st.tuples(st.integers(0, 9), st.integers(0, 6), st.integers(0, 11)), max_size=60
    )
)
def test_the_tally_agrees_with_counting_by_hand(rows):
    seen = tally(lattice(), [], [(str(e), a, r) for e, a, r in rows])
    pairs = {(e, (a + 1) // 2, (r + 1) // 2 % 6) for e, a, r in rows}
    assert seen.counts.sum() == len(pairs)
    for frame in range(4):
        for stringer in range(6):
            hits = sum((f, s) == (frame, stringer) for _, f, s in pairs)
            assert seen.counts[frame, stringer] == hits


def test_one_finding_in_a_whole_bay_over_the_demo_fleets_cycles():
    """0.113502 m² (20 in by 9 degrees of a 56 in radius) and 121,084 FC: 0.073."""
    area = 20 * 25.4 * np.radians(9) * 56 * 25.4 / 1e6
    assert area == pytest.approx(0.113502, abs=5e-7)
    one = density([[1]], [[area * 121_084]])
    assert one.rate[0, 0] == pytest.approx(0.073, abs=0.0005)
    lower, upper = one.interval
    assert lower[0, 0] == pytest.approx(0.0253 * one.rate[0, 0], rel=0.002)
    assert upper[0, 0] == pytest.approx(5.5716 * one.rate[0, 0], rel=1e-4)


def test_no_exposure_is_not_none_found():
    two = density([[0, 0, 3]], [[100.0, 0.0, 0.0]])
    assert two.rate[0, 0] == 0.0
    assert np.isnan(two.rate[0, 1:]).all()
    assert two.counted == 0
    assert two.unexposed_count == 3
    numbers = class_numbers(two, two.rate, (1, 2, 3, 4, 5))
    assert numbers.tolist() == [[NONE_FOUND, NO_EXPOSURE, NO_EXPOSURE]]


def test_without_any_exposure_there_is_no_rate_at_all():
    nothing = density([[2, 0]], [[0.0, 0.0]])
    assert np.isnan(nothing.rate).all()
    assert np.isnan(nothing.smoothed).all()


def test_small_counts_are_marked_and_zero_is_not_one_of_them():
    four = density([[0, 1, 4, 5, 4]], [[9.0, 9.0, 9.0, 9.0, 0.0]])
    assert four.few.tolist() == [[False, True, True, False, False]]


def test_classes_follow_the_drawn_cells_and_not_the_masked_ones():
    rates = np.array([[0.1, 0.2, 0.3, 0.4, np.nan]])
    assert class_edges(rates) == class_edges(rates[:, :4])
    tenfold = class_edges(rates * 10)
    assert tenfold == pytest.approx([10 * edge for edge in class_edges(rates)])


def test_classes_have_equal_ratios_from_the_least_rate_to_nearly_the_highest():
    """From 1 to 32 by five classes: each begins at twice the one before."""
    edges = class_edges(np.append(np.full(5, 1.0), np.full(200, 32.0)))
    assert edges == pytest.approx([1, 2, 4, 8, 16])


def test_equal_rates_and_no_rates_still_give_five_rising_classes():
    for rates in (np.full(9, 0.073), np.full(3, np.nan), np.zeros(0)):
        edges = class_edges(rates)
        assert len(edges) == 5
        assert list(edges) == sorted(set(edges))


def test_a_class_begins_at_its_lower_edge():
    """Half-open classes; below the first edge, as when comparing, is class 1."""
    edges = (1.0, 2.0, 4.0, 8.0, 16.0)
    rates = np.array([[0.5, 1.0, 1.9, 2.0, 4.0, 15.9, 16.0, 90.0]])
    cells = density(np.ones((1, 8)), np.ones((1, 8)))
    assert class_numbers(cells, rates, edges).tolist() == [[1, 1, 1, 2, 3, 4, 5, 5]]


def test_rate_units_are_written_out():
    assert CYCLES.rate_unit == "findings per m² and 1,000 FC"
    assert YEARS.rate_unit == "findings per m² and aircraft-year"
