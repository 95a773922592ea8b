"""Cycles of a flight, their damage sum and their equivalent for growth."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import InputError
from repairs.analysis.growth.blocks import CycleBlock, equivalent_cycle
from repairs.analysis.growth.laws import StressCycle, WalkerLaw, delta_k
from repairs.analysis.growth.separable import GrowthTable
from repairs.analysis.spectra import counting, per_flight
from repairs.analysis.spectra.sequence import LoadSequence, Residue, Treatment
from repairs.analysis.spectra.wing_sequence import GROUND_RATIO, Halves, WingSequence
from repairs.analysis.stress_life.curves import StressLifeCurve, StressLifeFamily
from repairs.analysis.stress_life.damage_sum import (
    Below,
    BelowLastTerm,
    NetCycles,
    damage_sum,
)
from repairs.analysis.types import KSI, Grade, GrossStress, Reference
from tests.outside import outside

AGAIN = Treatment(Residue.REPEATING)
LAW = WalkerLaw.from_mpa_root_metre(
    1.42e-8, 3.59, 0.680, Reference("2024-T3, Dowling Table 11.2", Grade.MEMORY)
)
POINTS = st.lists(st.floats(-100, 300), min_size=4, max_size=60)


def flight_of(*points, flights=1, treatment=AGAIN):
    history = LoadSequence(np.array(points, dtype=float), flights, True)
    return per_flight.cycles_of(history, treatment)


def equivalent(flight):
    return equivalent_cycle(LAW, flight.growth_table())


def test_a_flight_of_three_kinds_of_cycle():
    # Per flight: 1 cycle 0 to 16, 10 of 2.4 to 12, 30 of 3.5 to 10 ksi. Counting joins
    # the lowest valley to the highest peak; the cycles in between stay as they are.
    points = [0, 16] + [2.4, 12] * 10 + [3.5, 10] * 30
    flight = flight_of(*(KSI * p for p in points))
    assert flight.per_flight.tolist() == [30, 10, 1]
    assert flight.maxima / KSI == pytest.approx([10, 12, 16])
    assert flight.ratios == pytest.approx([0.35, 0.2, 0])


def test_the_damage_sum_of_that_flight():
    # Curve 8.3, 3.30, 0.66, 8.5 ksi (from memory); D recomputed apart: 4.2561e-6.
    curve = StressLifeCurve(4, 8.3, 3.30, 0.66, 8.5, KSI, "Kt 4", Grade.MEMORY)
    family = StressLifeFamily("2024-T3", "sheet", False, (curve,))
    points = [0, 16] + [2.4, 12] * 10 + [3.5, 10] * 30
    flight = flight_of(*(KSI * p for p in points))
    net = NetCycles.of_maximum(flight.maxima, flight.ratios, flight.per_flight)
    done = damage_sum(family, 4, net, BelowLastTerm(Below.NONE))
    outside(
        "Damage sum of a counted flight",
        source="MIL-HDBK-5J curve, 2024-T3 sheet, Kt 4, recomputed apart",
        given="per flight 1 cycle of 16 ksi R 0, 10 of 12 R 0.2, 30 of 10 R 0.35",
        published=4.2561e-6,
        computed=done.per_flight,
        unit="1/flight",
        rel=1e-4,
        route="closed form",
    )


def test_a_flight_of_constant_amplitude_is_its_own_equivalent():
    found = equivalent(flight_of(0, 100))
    outside(
        "One cycle per flight that grows a crack as much as the flight",
        source="limit: a flight of the one cycle 0 to 100 MPa",
        given="Walker m 3.59, gamma 0.68",
        published=100.0,
        computed=found.maximum,
        unit="MPa",
        rel=1e-12,
        route="closed form",
    )


@pytest.mark.parametrize(
    ("minimum", "maximum", "number", "published"),
    [
        # 100 (1 - 0.5)^0.68; 100 x 8^(1/3.59); compression does not count.
        (50, 100, 1, 62.4165),
        (0, 100, 8, 178.4667),
        (-60, 100, 1, 100.0),
    ],
)
def test_the_equivalent_of_one_kind_of_cycle(minimum, maximum, number, published):
    flight = flight_of(*[minimum, maximum] * number)
    outside(
        "One cycle per flight that grows a crack as much as the flight",
        source="Smax (1-R)^gamma n^(1/m), by hand",
        given=f"{number} cycles {minimum} to {maximum} MPa, m 3.59, gamma 0.68",
        published=published,
        computed=equivalent(flight).maximum,
        unit="MPa",
        rel=1e-5,
        route="closed form",
    )


def test_the_equivalent_grows_as_the_cycles_one_by_one():
    wing = WingSequence(
        70.0, GROUND_RATIO, 5, Halves.DRAWN_APART, None, None, "wing_lower_surface"
    )
    every = counting.counted(wing.sequence(), AGAIN)
    some = counting.CountedCycles(
        every.first[::500], every.second[::500], every.counts[::500], every.residue
    )
    growth = 0.0
    for top, low, count in zip(some.maxima, some.minima, some.counts, strict=True):
        cycle = StressCycle(GrossStress(top), low / top)
        growth += count * LAW.rate(delta_k(1.1, cycle, 8.0), cycle.ratio)
    found = equivalent(per_flight.flight_cycles(some, 8))
    outside(
        "One cycle per flight that grows a crack as much as the flight",
        source="da/dN summed cycle by cycle at one crack length",
        given="every 500th cycle of the standard wing sequence, 70 MPa, crack 8 mm",
        published=growth / 8,
        computed=LAW.rate(delta_k(1.1, found, 8.0), 0.0),
        unit="mm/flight",
        rel=1e-9,
        route="another method",
    )


def test_flights_to_grow_are_cycles_over_cycles_per_flight():
    one = StressCycle(GrossStress(90), 0.0)
    five = equivalent(flight_of(*[0, 90] * 5))
    cycles, flights = (
        GrowthTable(LAW, lambda a: 1.0, cycle, 2, 20).total for cycle in (one, five)
    )
    assert flights == pytest.approx(cycles / 5, rel=1e-8)


def test_a_treated_block_is_one_of_turning_points():
    wing = WingSequence(
        70.0, GROUND_RATIO, 5, Halves.SAME_LEVEL, None, None, "wing_lower_surface"
    )
    block = wing.sequence()
    whole = CycleBlock.from_turning_points(block.stresses, block.flights, block.starts)
    assert whole.cycles == 398_665 + 4000
    chosen = Treatment(Residue.REPEATING, 150.0, -10.0, 40.0)
    less = counting.treated(block, chosen)
    assert less.starts is None
    kept = CycleBlock.from_turning_points(less.stresses, less.flights)
    assert 4000 <= kept.cycles < whole.cycles
    assert kept.maximum.max() == 150


@given(POINTS)
def test_putting_equal_cycles_together_loses_none(points):
    doubled = [*points, *points]
    cycles = counting.rainflow(doubled, Residue.REPEATING)
    if not (cycles.maxima > 0).any():
        with pytest.raises(InputError, match="largest stress above 0"):
            per_flight.flight_cycles(cycles, 2)
        return
    flight = per_flight.flight_cycles(cycles, 2)
    assert flight.per_flight.sum() + flight.in_compression == pytest.approx(
        cycles.counts.sum() / 2
    )
    assert (flight.maxima > 0).all()
    assert (flight.ratios < 1).all()
    assert len({*zip(flight.maxima, flight.ratios, strict=True)}) <= len(points)


def test_cycles_in_compression_are_told_not_lost():
    flight = flight_of(-50, -20, -50, 80, flights=4)
    assert flight.in_compression == 0.25
    assert "0.25 cycles of a flight" in flight.warnings[0]
    assert flight_of(0, 80).warnings == ()


@given(st.floats(0.5, 3))
def test_higher_stress_grows_more_and_in_proportion(scale):
    base = np.array([0, 80, 30, 95, -20, 60.0])
    one = equivalent(flight_of(*base)).maximum
    other = equivalent(flight_of(*(scale * base))).maximum
    assert other == pytest.approx(scale * one)


def test_more_flights_in_the_same_block_do_less_each():
    points = [0, 80, 30, 95]
    few = equivalent(flight_of(*points, flights=1))
    many = equivalent(flight_of(*points, flights=4))
    assert many.maximum < few.maximum


def test_leaving_small_ranges_out_makes_a_flight_milder():
    points = [0, 80, 70, 95, 30, 40, 20, 60]
    full = equivalent(flight_of(*points))
    chosen = Treatment(Residue.REPEATING, omit_below_range=15)
    less = equivalent(flight_of(*points, treatment=chosen))
    assert less.maximum < full.maximum
