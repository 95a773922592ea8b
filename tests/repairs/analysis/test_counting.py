"""Rainflow counting against the standard, a library, and its own properties."""

from __future__ import annotations

import os
import subprocess
import sys

import numpy as np
import pytest
import rainflow as library
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.errors import InputError
from repairs.analysis.spectra import counting, loops
from repairs.analysis.spectra.sequence import (
    ONE_OFF_REPEATED,
    LoadSequence,
    Residue,
    Treatment,
)
from tests.outside import outside

EXAMPLE = [-2, 1, -3, 5, -1, 3, -4, 4, -2]
ONCE = Residue.HALVES
AGAIN = Residue.REPEATING
HISTORIES = st.lists(
    st.integers(-50, 50).map(float)
    | st.floats(-500, 500).map(lambda stress: round(stress, 6)),
    min_size=2,
    max_size=80,
)


def cycles(history, residue=ONCE):
    found = counting.rainflow(history, residue)
    return list(
        zip(
            found.ranges.tolist(),
            found.means.tolist(),
            found.counts.tolist(),
            strict=True,
        )
    )


def test_the_standards_example_cycle_by_cycle():
    # ASTM E1049-85 (2017), Fig. 6, as asserted in the public test suites of two
    # libraries: range, mean, count in the order found.
    printed = [
        (3, -0.5, 0.5),
        (4, -1.0, 0.5),
        (4, 1.0, 1.0),
        (8, 1.0, 0.5),
        (9, 0.5, 0.5),
        (8, 0.0, 0.5),
        (6, 1.0, 0.5),
    ]
    assert cycles(EXAMPLE) == printed


@pytest.mark.parametrize(
    ("span", "count"), [(3, 0.5), (4, 1.5), (6, 0.5), (8, 1), (9, 0.5)]
)
def test_the_standards_example_in_sum(span, count):
    outside(
        "Rainflow counting of a history flown once",
        source="ASTM E1049-85 (2017), 5.4.4, Fig. 6",
        given=f"history -2, 1, -3, 5, -1, 3, -4, 4, -2: cycles of range {span}",
        published=count,
        computed=dict(counting.rainflow(EXAMPLE, ONCE).by_range())[span],
        absolute=1e-12,
        route="quoted",
    )


@pytest.mark.parametrize(("span", "mean"), [(3, -0.5), (4, 1.0), (7, 0.5), (9, 0.5)])
def test_the_standards_repeating_history(span, mean):
    found = {size: (middle, count) for size, middle, count in cycles(EXAMPLE, AGAIN)}
    assert len(found) == 4
    assert found[span][1] == 1.0
    outside(
        "Rainflow counting of a repeating history",
        source="ASTM E1049-85 (2017), Table X1.4",
        given=f"history -2, 1, -3, 5, -1, 3, -4, 4, -2: mean of range {span}",
        published=mean,
        computed=found[span][0],
        absolute=1e-12,
    )


@pytest.mark.parametrize("size", [40, 1_500, 30_000])
@pytest.mark.parametrize("seed", [1, 2, 3])
def test_random_histories_as_the_library_counts_them(size, seed):
    history = np.random.default_rng(seed).normal(80, 30, size).round(2)
    theirs = list(library.extract_cycles(history.tolist()))
    ours = cycles(history)
    assert [row[:3] for row in theirs] == ours
    outside(
        "Rainflow counting of a history flown once",
        source="rainflow 3.2.0, independent library",
        given=f"{size} normal random stresses, seed {seed}: sum of counts",
        published=sum(row[2] for row in theirs),
        computed=sum(row[2] for row in ours),
        absolute=1e-9,
        route="library",
    )


@given(HISTORIES)
def test_short_histories_as_the_library_counts_them(history):
    turned = counting.reversals(history).tolist()
    if len(turned) > 2:  # the library yields nothing for two points
        theirs = [row[:3] for row in library.extract_cycles(turned)]
        assert cycles(history) == theirs


@pytest.mark.parametrize("seed", [4, 5])
def test_a_repeating_history_as_the_library_counts_it_from_its_maximum(seed):
    history = np.random.default_rng(seed).normal(80, 30, 3_000).round(1)
    turned = counting.from_maximum(history)
    theirs = library.count_cycles(turned.tolist(), ndigits=6)
    ours = counting.rainflow(history, AGAIN)
    merged = {}
    for span, count in ours.by_range():
        merged[round(span, 6)] = merged.get(round(span, 6), 0) + count
    assert merged == dict(theirs)
    outside(
        "Rainflow counting of a repeating history",
        source="rainflow 3.2.0, independent library, from the maximum and back",
        given=f"3,000 normal random stresses, seed {seed}: sum of counts",
        published=sum(count for _, count in theirs),
        computed=ours.counts.sum(),
        absolute=1e-9,
        route="library",
    )


@given(HISTORIES)
def test_twice_the_counts_is_reversals_less_one(history):
    found = counting.rainflow(history, ONCE)
    assert 2 * found.counts.sum() == len(counting.reversals(history)) - 1


@given(HISTORIES)
def test_the_largest_range_is_the_whole_of_it(history):
    for residue in Residue:
        found = counting.rainflow(history, residue)
        if len(found.counts):
            assert found.ranges.max() == max(history) - min(history)
        else:
            assert max(history) == min(history)


@given(HISTORIES, st.floats(0, 1))
def test_points_inserted_between_change_nothing(history, share):
    more = [history[0]]
    for value in history[1:]:
        between = more[-1] + share * (value - more[-1])
        low, high = sorted((more[-1], value))
        more += [min(max(between, low), high), value, value]
    for residue in Residue:
        assert cycles(more, residue) == cycles(history, residue)


@given(HISTORIES)
def test_a_repeating_history_leaves_no_residue(history):
    found = counting.rainflow(history, AGAIN)
    assert (found.counts == 1).all()
    assert 2 * len(found.counts) == len(counting.from_maximum(history)) - 1


@given(HISTORIES, st.integers(0, 79))
def test_where_a_repeating_history_starts_does_not_matter(history, start):
    turned = history[start % len(history) :] + history[: start % len(history)]
    same = counting.rainflow(history, AGAIN).by_range()
    assert counting.rainflow(turned, AGAIN).by_range() == same


@given(st.integers(1, 30))
def test_constant_amplitude_gives_its_cycles(number):
    assert cycles([0.0, 100.0] * number, AGAIN) == [(100.0, 50.0, 1.0)] * number


@given(HISTORIES)
def test_twice_a_block_is_twice_its_cycles(history):
    once = dict(counting.rainflow(history, AGAIN).by_range())
    twice = dict(counting.rainflow(history + history, AGAIN).by_range())
    assert twice == {span: 2 * count for span, count in once.items()}


@given(HISTORIES, st.floats(0, 300), st.sampled_from(list(Residue)))
def test_what_is_left_out_are_the_small_ranges_and_nothing_else(
    history, smallest, residue
):
    every = counting.rainflow(history, residue)
    left = counting.without_small(history, smallest, residue)
    large = [row for row in every.by_range() if row[0] >= smallest]
    if large:
        assert counting.rainflow(left, residue).by_range() == tuple(large)
    else:
        assert len(left) <= 2 + (residue is AGAIN)


@given(HISTORIES, st.sampled_from(list(Residue)))
@settings(max_examples=30)
def test_long_and_short_ways_are_one_source(history, residue):
    points = counting.reversals(history)
    repeating = residue is AGAIN
    lists = [[0.0] * len(points) for _ in range(4)]
    arrays = [np.zeros(len(points)) for _ in range(4)]
    compiled = counting._compiled(loops.closed_cycles)
    assert loops.closed_cycles(points.tolist(), *lists, repeating) == compiled(
        points, *arrays, repeating
    )
    for ours, theirs in zip(lists[:3], arrays[:3], strict=True):
        assert ours == theirs.tolist()


def test_clipping_levels_and_omission_in_one_history():
    history = LoadSequence(np.array([0, 100, 60, 180, 55, 60, 0.0]), 1, True)
    chosen = Treatment(AGAIN, clip_above=120, omit_below_range=10)
    found = counting.counted(history, chosen)
    assert found.by_range() == ((40.0, 1.0), (120.0, 1.0))
    assert len(chosen.warnings(repeats=True)) == 2


def test_a_one_off_history_is_not_counted_as_a_block():
    once = LoadSequence(np.array(EXAMPLE, dtype=float), 1, repeats=False)
    with pytest.raises(InputError) as refused:
        counting.counted(once, Treatment(AGAIN))
    assert str(refused.value) == ONE_OFF_REPEATED


def test_halves_of_a_block_are_warned_of():
    (warning,) = Treatment(ONCE).warnings(repeats=True)
    assert "join of two blocks" in warning


@pytest.mark.parametrize("wrong", [float("nan"), float("inf"), float("-inf")])
@pytest.mark.parametrize("length", [5, 50_000])
def test_what_is_no_number_is_refused_with_its_place(wrong, length):
    history = np.zeros(length)
    history[3] = wrong
    with pytest.raises(InputError, match="at point 4"):
        counting.rainflow(history, ONCE)


@pytest.mark.parametrize("history", [[], [1.0]])
def test_too_few_points_are_refused(history):
    with pytest.raises(InputError, match="at least 2"):
        counting.rainflow(history, ONCE)


@pytest.mark.parametrize("residue", list(Residue))
def test_a_history_that_never_moves_has_no_cycles(residue):
    assert cycles([7.0, 7.0, 7.0], residue) == []


def test_classes_for_display_keep_the_count():
    found = counting.rainflow(np.random.default_rng(5).normal(size=500), ONCE)
    classes = counting.range_classes(found, 12)
    assert sum(c.counts for c in classes) == found.counts.sum()
    assert classes[0].low == 0
    assert classes[-1].high == found.ranges.max()
    assert counting.range_classes(counting.rainflow([1, 1], ONCE), 4) == ()
    with pytest.raises(InputError, match="at least 1"):
        counting.range_classes(found, 0)


COUNT = """
import sys, numpy as np
from repairs.analysis.spectra.counting import rainflow
from repairs.analysis.spectra.sequence import Residue
found = rainflow(np.random.default_rng(4).normal(size={size}), Residue.HALVES)
print(len(found.counts), repr(float(found.ranges.sum())), "numba" in sys.modules)
"""


def in_a_process(size, **environment):
    done = subprocess.run(
        [sys.executable, "-c", COUNT.format(size=size)],
        env=os.environ | environment,
        capture_output=True,
        text=True,
        check=True,
    )
    return done.stdout.split()


def test_a_short_history_does_not_pay_for_the_compiler():
    assert in_a_process(counting.COMPILED_FROM - 1)[2] == "False"


def test_without_the_compiler_a_long_history_counts_the_same():
    size = counting.COMPILED_FROM
    compiled, plain = in_a_process(size), in_a_process(size, NUMBA_DISABLE_JIT="1")
    assert compiled == plain
    assert compiled[2] == "True"
