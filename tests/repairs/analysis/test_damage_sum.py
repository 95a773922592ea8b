"""The linear damage sum against a published spectrum, and against itself.

Published: a public safe-life study of a 7050-T7451 fitting, notched curve Kt 3.0, three
blocks of 1, 10 and 100 cycles per flight.
"""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.stress_life.curves import StressLifeCurve, StressLifeFamily
from repairs.analysis.stress_life.damage_sum import (
    AT_ONE,
    Below,
    BelowLastTerm,
    NetCycles,
    damage_sum,
)
from repairs.analysis.types import KSI, Grade, Sourced
from tests.outside import outside
from tests.repairs.analysis.cases import CURVES

STUDY = (
    "public safe-life study of a 7050-T7451 fitting on the notched handbook curve, "
    "sections 4 and 5"
)
NOTCHED = StressLifeFamily(
    "7050-T7451",
    "plate",
    False,
    (
        StressLifeCurve(
            3.0, 10.0, 3.96, 0.64, 0.0, KSI, "MMPDS 3.7.4.2.8(f)", Grade.QUOTED
        ),
    ),
)
SPANS, COUNTS = np.array([10.49, 5.25, 1.75]) * KSI, [1, 10, 100]
NONE = BelowLastTerm(Below.NONE)


def joined(option: Below, life: float = 1e6) -> BelowLastTerm:
    return BelowLastTerm(option, Sourced(life, "cycles", "a test", Grade.RECORDED))


def fitting(ratio: float):
    cycles = NetCycles.of_range(SPANS, np.full(3, ratio), COUNTS)
    return damage_sum(NOTCHED, 3.0, cycles, NONE)


@pytest.mark.parametrize(
    ("row", "published"), [(0, 9.07e5), (1, 1.407e7), (2, 1.090e9)]
)
def test_published_lives_of_three_blocks(row, published):
    outside(
        "Stress-life curve 7050-T7451, Kt 3.0: cycles to failure",
        source=f"{STUDY} (its table of Miner damage)",
        given=f"{SPANS[row] / KSI:.2f} ksi from zero",
        published=published,
        computed=float(fitting(0.0).lives[row]),
        unit="cycles",
        rel=2e-3,
    )


def test_published_damage_of_a_flight():
    found = fitting(0.0)
    outside(
        "Palmgren-Miner: damage of one flight",
        source=f"{STUDY} (its table of Miner damage)",
        given="1 of 10.49, 10 of 5.25, 100 of 1.75 ksi from zero",
        published=1.905e-6,
        computed=found.per_flight,
        rel=1e-3,
    )
    shares = found.damage / found.per_flight
    assert shares == pytest.approx([0.579, 0.373, 0.048], abs=5e-4)
    assert found.largest(5) == [0, 1, 2]
    assert found.largest(1) == [0]


@pytest.mark.parametrize(
    ("ratio", "published"), [(0.0, 5.25e5), (0.1, 4.52e5), (0.2, 3.82e5)]
)
def test_published_life_falls_with_the_ratio_when_the_range_is_held(ratio, published):
    outside(
        "Palmgren-Miner: mean life in flights, range held",
        source=f"{STUDY} (its table of stress-ratio sensitivity)",
        given=f"the same three ranges at R {ratio:g}",
        published=published,
        computed=float(fitting(ratio).flights),
        unit="flights",
        rel=2e-3,
    )


def test_held_at_the_largest_stress_the_life_rises_with_the_ratio():
    lives = [
        damage_sum(
            NOTCHED, 3.0, NetCycles.of_maximum(SPANS, np.full(3, r), COUNTS), NONE
        ).flights
        for r in (0.0, 0.1, 0.2)
    ]
    assert lives == sorted(lives)
    assert lives[0] < lives[-1]


EXAMPLE = NetCycles.of_maximum(
    np.array([16, 12, 10]) * KSI, [0, 0.2, 0.35], [1, 10, 30]
)


def test_worked_example_with_a_cycle_below_the_last_term():
    # 2024-T3, Kt 4, recomputed independently: N 2.5840e5 and 2.5892e7, the third cycle
    # 0.975 ksi below the last term; D 4.2561e-6; 234 955 flights.
    found = damage_sum(CURVES, 4.0, EXAMPLE, NONE)
    assert found.lives[:2] == pytest.approx([2.5840e5, 2.5892e7], rel=1e-4)
    assert math.isinf(found.lives[2])
    assert found.per_flight == pytest.approx(4.2561e-6, rel=1e-4)
    assert found.whole_flights == pytest.approx(234_955, abs=10)
    assert isinstance(found.whole_flights, int)
    assert found.uncounted == 30


def test_each_continuation_counts_what_lies_below_and_says_so():
    none = damage_sum(CURVES, 4.0, EXAMPLE, NONE)
    double = damage_sum(CURVES, 4.0, EXAMPLE, joined(Below.DOUBLE))
    slope = damage_sum(CURVES, 4.0, EXAMPLE, joined(Below.SLOPE))
    assert slope.flights < double.flights < none.flights
    assert slope.uncounted == double.uncounted == 0
    assert "1,000,000 cycles (a test)" in slope.below.words
    assert "as the curve says" in none.below.words


def test_a_continued_curve_is_a_straight_line_from_the_join():
    # By hand: at half the stress of 1e6 cycles slope 3.30 gives 1e6 2^3.30.
    start = CURVES.max_stress(4.0, 6, 0.1)
    cycles = NetCycles.of_maximum([start, start / 2], [0.1, 0.1], [1, 1])
    found = damage_sum(CURVES, 4.0, cycles, joined(Below.SLOPE))
    assert found.lives == pytest.approx([1e6, 1e6 * 2**3.30], rel=1e-6)
    twice = damage_sum(CURVES, 4.0, cycles, joined(Below.DOUBLE))
    # Slope 5.60 of the line is passed by the curve, which has no life there.
    assert twice.lives[1] == pytest.approx(1e6 * 2**5.60, rel=1e-6)


@given(
    st.floats(1, 5),
    st.floats(5, 45),
    st.floats(-1, 0.7),
    st.sampled_from([Below.SLOPE, Below.DOUBLE]),
    st.floats(1e5, 1e8),
)
def test_a_continued_curve_is_never_longer(kt, stress, ratio, option, life):
    cycles = NetCycles.of_maximum([stress * KSI], [ratio], [1])
    plain = damage_sum(CURVES, kt, cycles, NONE).lives
    found = damage_sum(CURVES, kt, cycles, joined(option, life)).lives
    assert np.all(found <= plain)
    assert np.all(np.isfinite(found))


@settings(max_examples=30)
@given(
    st.lists(
        st.tuples(st.floats(5, 45), st.floats(-1, 0.7), st.floats(0, 100)),
        min_size=1,
        max_size=12,
    ),
    st.floats(1, 5),
    st.randoms(),
)
def test_order_and_splitting_change_nothing_and_more_is_worse(rows, kt, order):
    def total(of, factor=1.0):
        maximum, ratio, count = (np.array(column) for column in zip(*of, strict=True))
        cycles = NetCycles.of_maximum(maximum * KSI, ratio, count).times(factor)
        return damage_sum(CURVES, kt, cycles, NONE).per_flight

    once = total(rows)
    shuffled = list(rows)
    order.shuffle(shuffled)
    assert total(shuffled) == pytest.approx(once, rel=1e-9)
    halves = [(s, r, n / 2) for s, r, n in rows] * 2
    assert total(halves) == pytest.approx(once, rel=1e-9)
    assert total(rows, 1.1) >= once
    assert total([*rows, (30.0, 0.0, 1.0)]) > once


def test_one_cycle_per_flight_is_the_curve_itself():
    for kt in (1.0, 2.566, 4.0):
        cycles = NetCycles.of_maximum([30 * KSI], [0.1], [1])
        found = damage_sum(CURVES, kt, cycles, NONE).flights
        assert found == pytest.approx(CURVES.cycles(kt, 30 * KSI, 0.1), rel=1e-9)


def test_where_nothing_counts_there_is_no_life_and_not_an_unlimited_one():
    cycles = NetCycles.of_maximum([5 * KSI, -20.0], [0.0, 3.0], [100, 7])
    found = damage_sum(CURVES, 4.0, cycles, NONE)
    assert found.flights is None
    assert found.whole_flights is None
    assert found.uncounted == 100  # the compressed cycle is on no curve
    assert found.largest(3) == []


def test_an_earlier_failure_shortens_the_life_by_its_share():
    half = Sourced(0.5, "-", "a test", Grade.RECORDED)
    full = damage_sum(CURVES, 4.0, EXAMPLE, NONE, AT_ONE).flights
    assert damage_sum(CURVES, 4.0, EXAMPLE, NONE, half).flights == full / 2
    with pytest.raises(OutOfRangeError, match="Sum at failure"):
        damage_sum(
            CURVES, 4.0, EXAMPLE, NONE, Sourced(1.5, "-", "a slip", Grade.RECORDED)
        )


def test_what_cannot_be_is_refused():
    with pytest.raises(InputError, match="of one length"):
        NetCycles.of_maximum([1, 2], [0, 0], [1])
    with pytest.raises(InputError, match="all finite"):
        NetCycles.of_maximum([math.nan], [0], [1])
    with pytest.raises(InputError, match="at least one"):
        NetCycles.of_maximum([], [], [])
    with pytest.raises(InputError, match="reads -1"):
        NetCycles.of_maximum([100], [0], [-1])
    with pytest.raises(OutOfRangeError, match="ratio R"):
        NetCycles.of_range([100], [1.0], [1])
    with pytest.raises(InputError, match="longest life tested"):
        BelowLastTerm(Below.SLOPE)
    with pytest.raises(InputError, match="leave it out"):
        joined(Below.NONE)
    with pytest.raises(OutOfRangeError, match="curves recorded"):
        damage_sum(CURVES, 5.5, EXAMPLE, NONE)
