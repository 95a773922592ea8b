"""Two-direction growth against a stiff integrator in cycles, and its limits."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import solve_ivp

from repairs.analysis.errors import AnalysisError, OutOfRangeError
from repairs.analysis.growth import two_directions as td
from repairs.analysis.growth.laws import (
    FormanLaw,
    StressCycle,
    Threshold,
    ThresholdLaw,
    WalkerLaw,
    delta_k,
)
from repairs.analysis.growth.separable import growth_cycles, paris_cycles
from repairs.analysis.intensity.holes import hole_single
from repairs.analysis.intensity.through import centre_crack_secant
from repairs.analysis.types import ROOT_1000, Grade, GrossStress, Reference
from tests.outside import outside

MEMORY = Reference("Dowling, Tables 11.2 and 11.3, from memory", Grade.MEMORY)
LAW = WalkerLaw.from_mpa_root_metre(1.42e-8, 3.59, 0.680, MEMORY)
FORMAN = FormanLaw.from_mpa_root_metre(2.31e-6, 3.38, 110, MEMORY)
CYCLE = StressCycle(GrossStress(90), 0.1)
HOLE = td.corner_at_hole(6.0, 3.0, 100.0)
SURFACE = td.surface_flaw(6.0, 200.0)


def in_cycles(law, factors, start, thickness) -> tuple[float, float]:
    """Cycles and length at break-through, integrated over cycles to the event."""

    def slopes(_: float, state: np.ndarray) -> list[float]:
        depth, length = math.exp(state[0]), math.exp(state[1])
        depth = min(depth, thickness)
        along, inward = factors(depth, length)
        return [
            law.rate(delta_k(inward, CYCLE, depth), CYCLE.ratio) / depth,
            law.rate(delta_k(along, CYCLE, depth), CYCLE.ratio) / length,
        ]

    def through(_: float, state: np.ndarray) -> float:
        return state[0] - math.log(thickness)

    through.terminal = True  # type: ignore[attr-defined]
    begin = [math.log(start[0]), math.log(start[1])]
    solved = solve_ivp(
        slopes, (0, 1e9), begin, "LSODA", events=through, rtol=1e-10, atol=1e-12
    )
    return float(solved.t_events[0][0]), math.exp(solved.y_events[0][0][1])


@pytest.mark.parametrize("law", [LAW, FORMAN], ids=["Walker", "Forman"])
@pytest.mark.parametrize(
    ("factors", "start"),
    [
        (HOLE, (1.27, 1.27)),
        (HOLE, (0.5, 1.0)),
        (HOLE, (2.0, 1.2)),
        (SURFACE, (1.27, 2.54)),
        (SURFACE, (3.175, 3.175)),
    ],
)
def test_growth_in_two_directions_agrees_with_an_integration_over_cycles(
    law, factors, start
):
    found = td.grow_part_through(law, factors, CYCLE, start, 6.0)
    cycles, length = in_cycles(law, factors, start, 6.0)
    assert found.cycles == pytest.approx(cycles, rel=1e-6)
    assert found.length == pytest.approx(length, rel=1e-6)
    assert found.depth == 6.0
    history = found.history
    assert (history.depth[0], history.length[0], history.cycles[0]) == (
        pytest.approx(start[0]),
        pytest.approx(start[1]),
        pytest.approx(0, abs=1e-3),
    )
    assert history.cycles[-1] == found.cycles


def test_break_through_of_a_corner_flaw_by_another_method():
    cycles, _ = in_cycles(LAW, HOLE, (1.27, 1.27), 6.0)
    outside(
        "Corner crack at a hole, cycles to break-through",
        source="The same two rates, integrated over cycles by LSODA of ODEPACK",
        given="t 6, r 3, W 200 mm, flaw 1.27 × 1.27 mm, 90 MPa, R 0.1",
        published=cycles,
        computed=td.grow_part_through(LAW, HOLE, CYCLE, (1.27, 1.27), 6.0).cycles,
        unit="cycles",
        rel=1e-6,
        route="library",
    )


@given(st.floats(0.3, 2.9), st.floats(0.5, 2.0))
def test_equal_factors_keep_the_share_of_both_growths(depth, aspect):
    # With one factor at both tips both grow alike: the closed form in depth.
    found = td.grow_part_through(
        LAW, lambda a, c: (0.7, 0.7), CYCLE, (depth, depth / aspect), 3.0
    )
    closed = paris_cycles(LAW, 0.7, CYCLE, depth, 3.0)
    assert found.cycles == pytest.approx(closed, rel=1e-7)
    assert found.length == pytest.approx(depth / aspect + 3.0 - depth, rel=1e-9)


def test_a_through_flaw_needs_no_growth_to_come_through():
    found = td.grow_part_through(LAW, HOLE, CYCLE, (6.0, 1.27), 6.0)
    assert (found.cycles, found.depth, found.length) == (0, 6.0, 1.27)


def through_hole(length: float) -> float:
    return hole_single(length, 6.0, 200.0)


PATH = td.FlawPath(HOLE, through_hole, 6.0, 40.0)


def test_a_flaw_goes_on_as_a_through_crack_of_its_surface_length():
    found = td.grow_to_end(LAW, PATH, CYCLE, (1.27, 1.27))
    part = td.grow_part_through(LAW, HOLE, CYCLE, (1.27, 1.27), 6.0)
    later = growth_cycles(LAW, through_hole, CYCLE, part.length, 40.0)
    assert found.cycles == pytest.approx(part.cycles + later, rel=1e-8)
    through = found.break_through
    assert (through.cycles, through.length) == (part.cycles, part.length)
    at_surface, _ = HOLE(6.0, part.length)
    assert through.before == pytest.approx(at_surface * math.sqrt(math.pi * 6.0))
    assert through.after == pytest.approx(
        through_hole(part.length) * math.sqrt(math.pi * part.length)
    )


def test_history_runs_through_break_through_without_a_step():
    history = td.grow_to_end(LAW, PATH, CYCLE, (1.27, 1.27)).history
    assert len(history.cycles) == len(history.length) == len(history.depth)
    assert np.all(np.diff(history.cycles) > 0)
    assert np.all(np.diff(history.length) > 0)
    assert np.all(np.diff(history.depth) >= 0)
    assert (history.depth[-1], history.length[-1]) == (6.0, 40.0)
    # Points of the part-through stage lie on the growth from the start to them.
    middle = len(history.depth) // 6
    again = td.grow_part_through(
        LAW,
        HOLE,
        CYCLE,
        (float(history.depth[middle]), float(history.length[middle])),
        6.0,
    )
    part = td.grow_part_through(LAW, HOLE, CYCLE, (1.27, 1.27), 6.0)
    assert history.cycles[middle] + again.cycles == pytest.approx(part.cycles, rel=1e-6)
    assert again.length == pytest.approx(part.length, rel=1e-6)


def test_a_crack_of_the_flaws_depth_grows_as_a_wide_surface_crack_should():
    # A small semicircle: K is about 0.73 and 0.66 of S √(πa) at its tips, so that it
    # outlives a through crack of the same depth, which has 1.
    small = td.surface_flaw(60.0, 1000.0)
    found = td.grow_part_through(LAW, small, CYCLE, (0.5, 0.5), 5.0)
    through = growth_cycles(
        LAW, lambda a: centre_crack_secant(a, 2000), CYCLE, 0.5, 5.0
    )
    assert found.cycles > 2 * through


@settings(max_examples=20)
@given(st.floats(0.6, 2.0), st.floats(60, 150))
def test_a_larger_flaw_or_more_stress_comes_through_sooner(size, stress):
    def cycles(flaw: float, level: float) -> float:
        cycle = StressCycle(GrossStress(level), 0.1)
        return td.grow_part_through(LAW, HOLE, cycle, (flaw, flaw), 6.0).cycles

    base = cycles(size, stress)
    assert cycles(1.1 * size, stress) < base
    assert cycles(size, 1.1 * stress) == pytest.approx(base / 1.1**3.59, rel=1e-6)


def test_a_thicker_plate_holds_a_flaw_longer():
    lives = [
        td.grow_part_through(
            LAW, td.corner_at_hole(t, 3.0, 100.0), CYCLE, (1.27, 1.27), t
        ).cycles
        for t in (2.0, 3.0, 4.5, 6.0)
    ]
    assert lives == sorted(lives)


def test_what_does_not_hold_is_refused():
    held = ThresholdLaw(LAW, Threshold(3 * ROOT_1000, 0.5, 1.0, MEMORY))
    with pytest.raises(AnalysisError, match="grows without one"):
        td.grow_part_through(held, HOLE, CYCLE, (1.27, 1.27), 6.0)
    with pytest.raises(OutOfRangeError, match="Depth over length"):
        td.grow_part_through(LAW, HOLE, CYCLE, (0.5, 5.0), 6.0)
    bare = td.FlawPath(None, through_hole, 6.0, 40.0)
    with pytest.raises(AnalysisError, match="no factors for that"):
        td.grow_to_end(LAW, bare, CYCLE, (1.27, 1.27))
