"""Blocks of cycles: how they are made, and the one cycle that stands for a flight."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import AnalysisError, InputError, OutOfRangeError
from repairs.analysis.growth import blocks
from repairs.analysis.growth.laws import (
    FormanLaw,
    Threshold,
    ThresholdLaw,
    WalkerLaw,
)
from repairs.analysis.spectra.counting import rainflow
from repairs.analysis.spectra.sequence import Residue
from repairs.analysis.types import ROOT_1000, Grade, Reference

TEST = Reference("record of the test", Grade.RECORDED)
LAW = WalkerLaw.from_ksi_root_inch(1.67e-9, 3.273, 0.618, TEST)
FORMAN = FormanLaw.from_mpa_root_metre(2.31e-6, 3.38, 110, TEST)
MIXED = blocks.CycleBlock(np.array([60.0, 90.0, 60.0]), np.array([0.1, 0.5, 0.1]), 3)


def test_turning_points_make_a_cycle_of_each_rise():
    points = np.array([10.0, 80.0, -20.0, 100.0, 30.0, 60.0, -5.0, -1.0])
    block = blocks.CycleBlock.from_turning_points(points, 2, np.array([0, 4]))
    assert block.maximum.tolist() == [100, 60, 80]
    assert block.ratio == pytest.approx([-0.2, 0.5, -0.0625])
    assert [block.whole_flights(n) for n in (0, 1, 2, 3, 4, 6)] == [0, 1, 1, 2, 3, 4]


@given(st.lists(st.integers(-5, 9), min_size=2, max_size=30))
def test_rises_of_any_points_add_up_to_all_falls(levels):
    points = np.array(levels, dtype=float)
    if len(set(levels)) == 1:
        with pytest.raises(InputError, match="the same stress"):
            blocks.CycleBlock.from_turning_points(points, 1)
        return
    points += 10  # all pull
    block = blocks.CycleBlock.from_turning_points(points, 1)
    steps = np.diff(points, append=points[0])
    rises = block.maximum * (1 - block.ratio)
    assert rises.sum() == pytest.approx(steps[steps > 0].sum())
    assert rises.sum() == pytest.approx(-steps[steps < 0].sum())


def test_cycles_that_do_not_pull_are_kept_and_grow_nothing():
    points = np.array([-50.0, -10.0, -40.0, 90.0])
    block = blocks.CycleBlock.from_turning_points(points, 1)
    assert block.maximum.tolist() == [0, 90]
    driven = blocks.driven_ranges(LAW, block.maximum, block.ratio)
    assert driven.tolist() == [0, 90]


def test_counted_cycles_hold_the_great_cycle_that_rises_miss():
    # Two flights of small cycles on 60 MPa from 0: counting pairs 0 with the largest.
    flight = [0.0, 70.0, 50.0, 80.0, 50.0, 70.0]
    points = np.array([*flight, *flight])
    rises = blocks.CycleBlock.from_turning_points(points, 2)
    found = rainflow(points, Residue.REPEATING)
    closed = blocks.CycleBlock.from_counted(found.maxima, found.minima, 2)
    assert (rises.counting, closed.counting) == (blocks.RISES, blocks.CLOSED)
    assert sorted(closed.maximum * (1 - closed.ratio)) == [20, 20, 20, 20, 80, 80]
    assert sorted(rises.maximum * (1 - rises.ratio)) == [20, 20, 30, 30, 70, 70]
    by_rises, by_count = (
        blocks.equivalent_cycle(LAW, blocks.CycleTable.of(block)).maximum
        for block in (rises, closed)
    )
    assert by_count > by_rises


def test_blocks_that_are_none_are_refused():
    one = np.ones(1)
    for wrong, words in (
        (lambda: blocks.CycleBlock(one, one * 0, 0), "0 flights and 1 cycles"),
        (lambda: blocks.CycleBlock(one, one, 1), "R below 1; cycle 1"),
        (lambda: blocks.CycleBlock(one * math.nan, one * 0, 1), "cycle 1"),
        (lambda: blocks.CycleBlock(-one, one * 0, 1), "No cycle of the block pulls"),
    ):
        with pytest.raises(InputError, match=words):
            wrong()


@given(st.floats(50, 150), st.floats(-0.5, 0.6), st.integers(1, 5))
def test_the_cycle_of_a_flight_of_equal_cycles(top, ratio, each):
    # n equal cycles a flight: the range that counts times n^(1/m).
    block = blocks.CycleBlock(np.full(10 * each, top), np.full(10 * each, ratio), 10)
    cycle = blocks.equivalent_cycle(LAW, blocks.CycleTable.of(block))
    counts = top * (1 - ratio) ** 0.618 if ratio >= 0 else top
    assert cycle.maximum == pytest.approx(counts * each ** (1 / 3.273), rel=1e-9)
    assert cycle.ratio == 0


def test_no_one_cycle_stands_for_a_flight_under_forman():
    table = blocks.CycleTable.of(MIXED)
    with pytest.raises(OutOfRangeError, match="Grow the crack cycle by cycle"):
        blocks.equivalent_cycle(FORMAN, table)
    held = ThresholdLaw(LAW, Threshold(3 * ROOT_1000, 0.5, 1.0, TEST))
    with pytest.raises(AnalysisError, match="constant amplitude only"):
        blocks.equivalent_cycle(held, table)


def test_a_table_holds_each_different_cycle_once_with_its_number():
    table = blocks.CycleTable.of(MIXED)
    rows = zip(table.maximum, table.ratio, table.counts, strict=True)
    assert sorted(rows) == [(60.0, 0.1, 2.0), (90.0, 0.5, 1.0)]
    assert table.flights == 3


def test_the_cycle_of_a_flight_grows_as_much_as_its_cycles():
    # Growth of a flight at one crack: the sum of the law's own rates.
    factor = 12.3
    ranges = factor * MIXED.maximum * (1 - MIXED.ratio)
    in_a_flight = LAW.rates(ranges, MIXED.ratio).sum() / MIXED.flights
    cycle = blocks.equivalent_cycle(LAW, blocks.CycleTable.of(MIXED))
    assert LAW.rate(factor * cycle.maximum, 0.0) == pytest.approx(
        in_a_flight, rel=1e-12
    )
