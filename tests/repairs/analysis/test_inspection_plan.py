"""Chance of detection under a plan: simulation, quadrature, hand sums, tendencies."""

from __future__ import annotations

import math
import time
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import quad
from scipy.stats import norm

from repairs.analysis.errors import AnalysisError, InputError, OutOfRangeError
from repairs.analysis.inspection import looks as lk
from repairs.analysis.inspection import marks as mk
from repairs.analysis.inspection import plan as pl
from repairs.analysis.inspection.detection import (
    SizeMeaning,
    Study,
    Technique,
    log_normal,
)
from repairs.analysis.inspection.looks import Phase
from repairs.analysis.note import Note
from repairs.analysis.types import Grade, Sourced
from tests.outside import outside

STUDY = Study(
    Technique.EDDY_CURRENT_SURFACE,
    SizeMeaning.TIP_TO_TIP,
    0.01,
    100.0,
    60,
    "an invented trial",
    Grade.RECORDED,
)
LIFE = 20_000.0
RATE = math.log(25 / 1.27) / LIFE
CYCLES = np.linspace(0, LIFE, 2001)
SIZE = 1.27 * np.exp(RATE * CYCLES)
"""1.27 mm to 25 mm in 20 000 cycles, exponential; a50 3 mm, s 0.5 (all invented)."""
SURE = lk.Growth(CYCLES, SIZE, "since new", None)


def recorded(value: float) -> Sourced:
    return Sourced(value, "-", "an invented record", Grade.RECORDED)


SCATTERED = replace(SURE, log_deviation=recorded(0.1))


def look(interval, a50=3.0, deviation=0.5, **changes):
    curve = log_normal(math.log(a50), deviation, STUDY)
    words = {"threshold": None, "done": 1.0, "never": 0.0, **changes}
    words |= {name: recorded(words[name]) for name in ("done", "never")}
    return lk.Look(f"eddy current, {a50:g} mm", curve, SIZE, interval, **words)


def pod(t, a50=3.0, deviation=0.5):
    """The curve written out anew at cycles of the growth."""
    return norm.cdf((math.log(1.27) + RATE * t - math.log(a50)) / deviation)


def simulated(rng, intervals, a50s, done, never, log_deviation, trials=200_000):
    """Share found when cracks, phases, lives and looks are drawn one by one."""
    factor = 10 ** (log_deviation * rng.standard_normal(trials))
    found = np.zeros(trials, dtype=bool)
    level = rng.random(trials)
    for interval, a50, chance, share in zip(intervals, a50s, done, never, strict=True):
        at = interval * rng.random(trials)
        while (at < LIFE * factor).any():
            hit = rng.random(trials) < chance * pod(at / factor, a50)
            found |= hit & (at < LIFE * factor) & (level >= share)
            at = at + interval
    return found.mean()


@pytest.mark.parametrize(
    ("intervals", "a50s", "done", "never", "deviation"),
    [
        ((10_000,), (3.0,), (1.0,), (0.0,), 0.0),
        ((6_667,), (3.0,), (0.9,), (0.02,), 0.1),
        ((2_000, 8_000), (15.0, 3.0), (0.8, 0.95), (0.1, 0.02), 0.1),
    ],
)
def test_the_mean_is_that_of_a_simulation(intervals, a50s, done, never, deviation):
    rng = np.random.default_rng(11)
    growth = replace(SURE, log_deviation=recorded(deviation) if deviation else None)
    looks = tuple(
        look(i, a, done=d, never=q)
        for i, a, d, q in zip(intervals, a50s, done, never, strict=True)
    )
    drawn = simulated(rng, intervals, a50s, done, never, deviation)
    found = pl.detect(growth, looks)
    assert found.mean == pytest.approx(drawn, abs=0.0015)
    outside(
        "Cumulative probability of detection, random phase",
        source="Simulation of 200 000 cracks one by one",
        given=f"intervals {intervals}, a50 {a50s} mm, done {done}, never {never}, "
        f"s of log life {deviation:g}",
        published=round(float(drawn), 4),
        computed=found.mean,
        absolute=0.0015,
        route="another method",
    )


@pytest.mark.parametrize("interval", [4_000, 5_000, 6_667, 10_000, 15_000])
def test_the_mean_is_that_of_quadrature(interval):
    def missed(first):
        at = np.arange(first, LIFE, interval)
        return float(np.prod(1 - pod(at)))

    jumps = [LIFE % interval] if LIFE % interval else None
    mean, _ = quad(missed, 1e-6, interval, points=jumps, limit=400, epsabs=1e-10)
    found = pl.detect(SURE, (look(interval),))
    assert 1 - found.mean == pytest.approx(mean / interval, rel=2e-3, abs=1e-8)
    # No phase does worse than the worst, by a fine sweep.
    sweep = max(missed(first) for first in np.linspace(1e-6, interval, 4001))
    assert 1 - found.worst == pytest.approx(sweep, rel=2e-3)


@pytest.mark.parametrize("interval", [5_000, 10_000, 4_000])
def test_at_whole_multiples_of_the_life_the_worst_phase_is_n_times_the_interval(
    interval,
):
    at = np.arange(interval, LIFE, interval)
    missed = np.prod(1 - pod(at))
    found = pl.detect(SURE, (look(interval),))
    assert 1 - found.scheduled == pytest.approx(missed, rel=1e-4)
    assert 1 - found.worst == pytest.approx(missed, rel=1e-4)


def test_n_times_the_interval_is_not_the_worst_where_the_life_is_no_whole_multiple():
    # At 15 000 of 20 000 the crack is 12 mm; one look at 5 000 sees 2.7 mm.
    found = pl.detect(SURE, (look(15_000),))
    assert found.scheduled == pytest.approx(pod(15_000), rel=1e-4)
    assert found.worst == pytest.approx(pod(5_000), rel=1e-4)


@pytest.mark.parametrize(
    ("pods", "cumulative"), [((0.7, 0.7, 0.7), 0.973), ((0.5, 0.8, 0.95), 0.995)]
)
def test_three_looks_of_known_probability(pods, cumulative):
    # Second route, by hand: 1 - 0.3^3 and 1 - 0.5 x 0.2 x 0.05.
    seen = np.exp(norm.ppf([0.01, *pods, 0.96]))
    growth = lk.Growth(np.arange(5.0), np.arange(1.0, 6.0), "since new", None)
    one = lk.Look(
        "look", log_normal(0.0, 1.0, STUDY), seen, 1, 1, recorded(1), recorded(0)
    )
    outside(
        "Cumulative probability of detection, independent looks",
        source="1 - product of (1 - POD)",
        given=f"POD {pods}",
        published=cumulative,
        computed=pl.chance(growth, (one,), Phase.SCHEDULE),
        rel=1e-9,
        route="closed form",
    )


def test_what_repeats_is_never_multiplied_away():
    # A look at every hundred cycles finds all but the share never inspected.
    found = pl.detect(SURE, (look(100, never=0.05, done=0.5),))
    assert found.mean == pytest.approx(0.95, abs=1e-6)
    both = pl.detect(SURE, (look(100, never=0.05), look(100, never=0.2)))
    assert both.mean == pytest.approx(0.95, abs=1e-6)
    assert "0.05 of cases at no repeat" in found.stated[0]
    assert "no scatter" in found.stated[1]


def test_the_shares_never_inspected_fall_together():
    # By hand: below 0.1 nothing looks, to 0.3 the first look only, above both.
    looks = (look(5_000, never=0.1), look(5_000, never=0.3))
    through = lk.together(looks, [np.array([0.4]), np.array([0.5])])
    assert through[0] == pytest.approx(0.1 + 0.2 * 0.4 + 0.7 * 0.2)


def test_a_threshold_has_a_look_there_and_none_before():
    one = look(4_000, threshold=9_000)
    at = np.array([9_000, 13_000, 17_000])
    found = pl.detect(SURE, (one,))
    assert 1 - found.scheduled == pytest.approx(np.prod(1 - pod(at)), rel=1e-4)
    worst = np.prod(1 - pod(np.array([9_000, 12_000, 16_000])))
    assert 1 - found.worst == pytest.approx(worst, rel=1e-4)
    late = pl.detect(SURE, (look(4_000, threshold=20_000),))
    assert (late.mean, late.worst, late.scheduled) == (0.0, 0.0, 0.0)


def test_a_cover_hides_the_first_of_the_crack():
    covered = look(5_000)
    covered = replace(covered, seen=lk.beyond_cover(SIZE, 4.0))
    assert pl.detect(SURE, (covered,)).mean < pl.detect(SURE, (look(5_000),)).mean
    assert lk.beyond_cover(SIZE, 4.0)[0] == 0.0


@settings(max_examples=40, deadline=None)
@given(
    st.integers(500, 19_000),
    st.floats(1.0, 2.0),
    st.floats(1.0, 8.0),
    st.sampled_from([None, 3_000, 9_000]),
    st.sampled_from([None, 0.1]),
)
def test_longer_intervals_and_worse_methods_never_find_more(
    interval, more, a50, threshold, deviation
):
    growth = SCATTERED if deviation else SURE
    words = {"threshold": threshold, "done": 0.9, "never": 0.01}
    base = pl.detect(growth, (look(interval, a50, **words),))
    longer = pl.detect(growth, (look(int(interval * more), a50, **words),))
    worse = pl.detect(growth, (look(interval, a50 * more, **words),))
    # The mean over phases is a sum over points, good to a few 1e-4 with a threshold.
    slack = 1e-9 if threshold is None else 1e-3
    assert longer.worst <= base.worst + 1e-9
    assert longer.mean <= base.mean + max(slack, 2e-4)
    assert worse.worst <= base.worst + 1e-12
    assert worse.mean <= base.mean + 1e-12
    assert base.worst <= base.mean + slack


@settings(max_examples=20, deadline=None)
@given(st.floats(0.5, 0.99), st.sampled_from([Phase.RANDOM, Phase.WORST]))
def test_the_longest_interval_meets_the_target_and_the_next_does_not(target, phase):
    found = pl.longest_interval(
        SCATTERED, (look(5_000, never=0.001),), target, phase, shortest=100
    )
    assert pl.chance(SCATTERED, (look(found, never=0.001),), phase) >= target
    assert isinstance(found, int)
    if found < LIFE:  # no longer than the life, even where more would do
        after = pl.chance(SCATTERED, (look(found + 60, never=0.001),), phase)
        assert after < target + 1e-3


def test_a_second_look_makes_the_interval_longer():
    visual = look(1_500, 12.0, done=0.8, never=0.05)
    eddy = look(5_000, never=0.01)
    alone = pl.longest_interval(SURE, (eddy,), 0.97, Phase.WORST, shortest=500)
    beside = pl.longest_interval(
        SURE, (visual, eddy), 0.97, Phase.WORST, shortest=500, vary=1
    )
    assert beside > alone


def test_a_target_out_of_reach_is_refused_with_the_best_there_is():
    with pytest.raises(AnalysisError, match=r"finds the crack with 0\.9[45]"):
        pl.longest_interval(
            SURE, (look(5_000, never=0.05),), 0.96, Phase.WORST, shortest=200
        )
    with pytest.raises(AnalysisError, match="by chance find more"):
        pl.longest_interval(SURE, (look(5_000),), 0.9, Phase.SCHEDULE, shortest=200)


def test_marks_follow_the_growth_and_end_at_the_chance_of_the_plan():
    visual = look(1_500, 12.0, done=0.8, never=0.05)
    eddy = look(6_000, threshold=8_000, never=0.01)
    for phase in (Phase.WORST, Phase.SCHEDULE):
        marks = mk.inspection_marks(SURE, (visual, eddy), phase)
        cycles = [mark.cycles for mark in marks]
        shares = [mark.cumulative for mark in marks]
        assert cycles == sorted(cycles)
        assert shares == sorted(shares)
        assert all(0 < c < LIFE for c in cycles)
        assert marks[-1].cumulative == pytest.approx(
            pl.chance(SURE, (visual, eddy), phase), rel=1e-9
        )
    at = mk.inspection_marks(SURE, (eddy,), Phase.SCHEDULE)[0]
    assert (at.cycles, at.size) == (8_000, pytest.approx(1.27 * math.exp(RATE * 8e3)))
    with pytest.raises(AnalysisError, match="no one row"):
        mk.inspection_marks(SURE, (eddy,), Phase.RANDOM)


def test_the_growth_curve_is_drawn_with_its_inspections():
    curve = mk.inspection_curve(SURE, (look(5_000),), Phase.SCHEDULE)
    assert [mark.x for mark in curve.marks] == [5_000, 10_000, 15_000]
    assert curve.marks[0].label.startswith("eddy current, 3 mm: POD 0.41")
    assert curve.points[-1] == (LIFE, pytest.approx(25.0))


def test_the_note_tells_what_a_chance_rests_on():
    note = Note()
    remembered = replace(STUDY, source="a handbook", grade=Grade.MEMORY)
    sure = replace(look(5_000), curve=log_normal(math.log(3), 0.5, remembered))
    found = mk.write_plan(note, SCATTERED, (sure, look(2_000, 12.0, never=0.02)))
    values = {line.symbol: line.value for line in note.lines}
    assert values["P_det"] == found.mean
    assert values["P_worst"] == found.worst <= found.mean
    assert values["P_miss"] == pytest.approx(1 - found.mean)
    assert values["q"] == 0.02
    assert any("always in the right place" in line for line in note.warnings)
    assert note.source_from_memory


def test_risk_carries_its_cautions():
    found = pl.detect(SURE, (look(5_000, never=0.05),))
    left = mk.risk(0.02, found)
    assert left.probability == pytest.approx(0.02 * (1 - found.mean))
    assert any("not independent" in line for line in left.cautions)
    with pytest.raises(OutOfRangeError, match="Chance that the crack"):
        mk.risk(1.2, found)


def test_scatter_of_life_costs_detection_where_looks_are_few():
    sure = pl.detect(SURE, (look(10_000),))
    scattered = pl.detect(SCATTERED, (look(10_000),))
    assert scattered.mean < sure.mean


@pytest.mark.parametrize(
    ("cycles", "size"),
    [
        ([1.0, 2.0], [1.0, 2.0]),
        ([0.0, 0.0], [1.0, 2.0]),
        ([0.0, 2.0], [2.0, 1.0]),
        ([0.0, math.nan], [1.0, 2.0]),
        ([0.0], [1.0]),
    ],
)
def test_what_is_no_growth_is_refused(cycles, size):
    with pytest.raises(InputError, match="Calculate the growth again"):
        lk.Growth(np.array(cycles), np.array(size), "since new", None)


def test_what_is_no_plan_is_refused():
    with pytest.raises(InputError, match="Name at least one"):
        pl.detect(SURE, ())
    with pytest.raises(InputError, match="for 2001 points"):
        pl.detect(SURE, (replace(look(5_000), seen=SIZE[:5]),))
    with pytest.raises(OutOfRangeError, match="Chance that the inspection"):
        look(5_000, done=1.1)
    with pytest.raises(OutOfRangeError, match="Interval"):
        look(0)
    with pytest.raises(TypeError, match="done"):
        lk.Look("x", look(1).curve, SIZE, 5_000, None, never=recorded(0))  # type: ignore[call-arg]


def test_sizes_beyond_those_tried_are_said():
    study = replace(STUDY, largest=10.0)
    one = replace(look(5_000), curve=log_normal(math.log(3), 0.5, study))
    assert any("beyond 10 mm" in line for line in pl.detect(SURE, (one,)).stated)


def test_a_look_a_day_is_no_burden_and_needs_no_phase():
    daily = look(5, 40.0, done=0.5, never=0.1)
    begin = time.perf_counter()
    found = pl.detect(SCATTERED, (daily,))
    assert time.perf_counter() - begin < 3
    assert found.worst == pytest.approx(found.mean, rel=0.02)
    assert found.scheduled == pytest.approx(found.mean, rel=0.02)


def test_a_plan_is_quick_enough_to_draw():
    looks = (look(1_500, 12.0), look(5_000))
    pl.detect(SCATTERED, looks)
    taken = []
    for _ in range(5):
        begin = time.perf_counter()
        pl.detect(SCATTERED, looks)
        taken.append(time.perf_counter() - begin)
    assert min(taken) < 0.05
