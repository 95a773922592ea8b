"""Cycle by cycle: against closed forms, a plain loop with exact factors, and C's rule.

The case with one overload is a textbook's, read in public university notes as inputs
only; its answers were worked out apart from the program.
"""

from __future__ import annotations

import math
import os
import subprocess
import sys

import numpy as np
import pytest

from repairs.analysis.errors import AnalysisError, InputError, OutOfRangeError
from repairs.analysis.growth import blocks, by_cycle, loop, retardation
from repairs.analysis.growth import two_directions as td
from repairs.analysis.growth.closure import ElberLaw, NewmanLaw
from repairs.analysis.growth.laws import (
    FormanLaw,
    StressCycle,
    Threshold,
    ThresholdLaw,
    WalkerLaw,
)
from repairs.analysis.growth.plastic_zone import StressState, irwin_radius
from repairs.analysis.growth.separable import growth_cycles
from repairs.analysis.intensity.holes import hole_single
from repairs.analysis.types import (
    INCH,
    KSI,
    KSI_ROOT_INCH,
    ROOT_1000,
    Grade,
    GrossStress,
    Reference,
)
from tests.outside import outside

TEST = Reference("record of the test", Grade.RECORDED)
LAW = WalkerLaw.from_ksi_root_inch(1.67e-9, 3.273, 0.618, TEST)
FORMAN = FormanLaw.from_mpa_root_metre(2.31e-6, 3.38, 110, TEST)
LAWS = [LAW, FORMAN, ElberLaw(1e-11, 3.2, TEST), NewmanLaw(1e-11, 3.2, 2, 0.3, TEST)]
CORNER = td.corner_at_hole(3.0, 3.0, 100.0)
FLAW = (1.27, 1.27)
WHEELER = retardation.Wheeler(1.43, 320.0, StressState.PLANE_STRESS, TEST)
WILLENBORG = retardation.Willenborg(
    3 * ROOT_1000, 2.5, 320.0, StressState.PLANE_STRESS, TEST
)


def through_hole(length: float) -> float:
    return hole_single(length, 6.0, 200.0)


PATH = td.FlawPath(CORNER, through_hole, 3.0, 30.0)


def mixed_block(mean: float = 60.0, flights: int = 50) -> blocks.CycleBlock:
    """Many small cycles, some larger, one large; seeded."""
    draw = np.random.default_rng(7)
    swing = draw.permutation(np.repeat([0.3, 0.6, 1.0, 1.5], [700, 250, 45, 5]))
    ratio = (1 - draw.permutation(swing)) / (1 + swing)
    return blocks.CycleBlock(mean * (1 + swing), np.maximum(ratio, -0.09), flights)


def constant(maximum: float, ratio: float) -> blocks.CycleBlock:
    return blocks.CycleBlock(np.full(100, maximum), np.full(100, ratio), 100)


@pytest.mark.parametrize("law", LAWS, ids=lambda law: type(law).__name__)
def test_equal_cycles_live_as_long_as_the_integral_says(law):
    found = by_cycle.life_by_cycle(
        law, constant(90, 0.1), PATH, FLAW, by_cycle.Following(10**6)
    ).unretarded
    exact = td.grow_to_end(law, PATH, StressCycle(GrossStress(90), 0.1), FLAW)
    assert found.cycles == pytest.approx(exact.cycles, rel=2e-4)
    assert found.flights == found.cycles
    through, by_integral = found.break_through, exact.break_through
    assert through.cycles == pytest.approx(by_integral.cycles, rel=2e-4)
    assert through.length == pytest.approx(by_integral.length, rel=2e-4)
    assert through.after == pytest.approx(by_integral.after, rel=2e-4)
    assert found.end is by_cycle.End.REACHED


@pytest.mark.parametrize("law", [LAW, *LAWS[2:]], ids=lambda law: type(law).__name__)
def test_the_cycle_of_a_flight_lives_as_many_flights(law):
    block = mixed_block(45.0)
    found = by_cycle.life_by_cycle(
        law, block, PATH, FLAW, by_cycle.Following(10**6)
    ).unretarded
    cycle = blocks.equivalent_cycle(law, blocks.CycleTable.of(block))
    flights = found.cycles * block.flights / block.cycles
    assert td.grow_to_end(law, PATH, cycle, FLAW).cycles == pytest.approx(
        flights, rel=1e-3
    )


# Wheeler

BOOK_LAW = WalkerLaw.from_ksi_root_inch(1e-4 / 32**3.5, 3.5, 0.6, TEST)
BOOK_PATH = td.FlawPath(None, lambda a: 1.22, 5.0, 50 * INCH)
BOOK_WHEELER = retardation.Wheeler(1.43, 68 * KSI, StressState.PLANE_STRESS, TEST)


def book_case(
    overload: bool, model: retardation.Retardation | None
) -> by_cycle.SequenceLife:
    """12,000 cycles of 18 to 3.6 ksi, one of 27 to 5.4 ksi in the middle or none."""
    maximum = np.full(12_000 + overload, 18 * KSI)
    if overload:
        maximum[6_000] = 27 * KSI
    block = blocks.CycleBlock(maximum, np.full(maximum.shape, 0.2), 1)
    start = (5.0, 0.3 * INCH)
    following = by_cycle.Following(1, retardation=model)
    return by_cycle.life_by_cycle(BOOK_LAW, block, BOOK_PATH, start, following)


def test_the_books_case_without_its_overload():
    found = book_case(False, BOOK_WHEELER)
    outside(
        "Crack growth cycle by cycle",
        source="Textbook case in public university notes, integrated in closed form",
        given="edge crack 0.3 in, F 1.22, 18 to 3.6 ksi, 12,000 cycles",
        published=0.6709,
        computed=found.unretarded.length / INCH,
        unit="in",
        absolute=1e-4,
        route="closed form",
    )
    # No cycle is larger than another: the model retards nothing.
    assert found.retarded.length == found.unretarded.length


def test_the_books_case_with_its_overload():
    found = book_case(True, BOOK_WHEELER)
    assert found.retarded.length / INCH == pytest.approx(0.618, abs=0.002)
    assert found.unretarded.length / INCH == pytest.approx(0.671, abs=0.001)
    assert found.retarded.end is by_cycle.End.NOT_REACHED
    assert found.cautions == (retardation.WHEELER_CAUTION, retardation.BESIDE)


def test_the_overload_grows_whole_and_retards_from_the_next_cycle():
    # a_ol is the length when the overload comes: 0.4226 in, zone 0.0496 in; its own
    # growth is added before the next cycle, whose share is 0.3146.
    k = 1.22 * math.sqrt(math.pi * 0.4226) * KSI_ROOT_INCH
    zone = irwin_radius(27 * k, 68 * KSI, StressState.PLANE_STRESS)
    assert zone / INCH == pytest.approx(0.0496, abs=1e-4)
    constants = np.zeros(loop.LAST + 1)
    constants[[loop.C, loop.M]] = BOOK_LAW.coefficient, 3.5
    constants[loop.TOUGHNESS] = math.inf
    model = BOOK_WHEELER.fill(constants)
    state = np.zeros(3)
    per_ksi, share = k / KSI, 0.8 / 0.8**0.4
    length = 0.4226 * INCH
    whole = BOOK_LAW.rate(27 * 0.8 * k, 0.2)
    large = (27 * KSI, 27 * 0.8 * KSI, 27 * share * KSI)
    small = (18 * KSI, 18 * 0.8 * KSI, 18 * share * KSI)
    grown = loop.tip_growth(per_ksi, large, length, state, 0, model, constants)
    assert grown == pytest.approx(whole, rel=1e-9)
    at_once = loop.tip_growth(per_ksi, small, length, state, 0, model, constants)
    after = loop.tip_growth(per_ksi, small, length + grown, state, 0, model, constants)
    base = BOOK_LAW.rate(18 * 0.8 * k, 0.2)
    assert at_once / base == pytest.approx(0.3136, abs=1e-3)
    assert after / base == pytest.approx(0.3146, abs=1e-3)
    assert after > at_once


def test_wheelers_share():
    assert loop.wheeler_share(0.05, 0.10, 1.43) == pytest.approx(0.3711, abs=5e-5)
    assert loop.wheeler_share(0.11, 0.10, 1.43) == 1
    assert loop.wheeler_share(0.05, 0.10, 0) == 1


def test_wheeler_without_exponent_retards_nothing():
    none = retardation.Wheeler(0.0, 320.0, StressState.PLANE_STRESS, TEST)
    found = by_cycle.life_by_cycle(
        LAW, mixed_block(), PATH, FLAW, by_cycle.Following(10**5, retardation=none)
    )
    assert found.retarded.cycles == found.unretarded.cycles


# Willenborg


def test_willenborgs_reduction():
    # Kmax 20, R 0.1, Kol 30, Δa/rp 0.3, Kth 3, shut-off 2.3.
    taken = loop.willenborg_reduction(20, 30, 0.3, 3, 2.3)
    peak, valley = 20 - taken, 2 - taken
    assert 30 * math.sqrt(0.7) - 20 == pytest.approx(5.0998, abs=1e-4)
    assert (peak, valley) == (
        pytest.approx(16.666, abs=1e-3),
        pytest.approx(-1.334, abs=1e-3),
    )
    assert valley / peak == pytest.approx(-0.0801, abs=1e-4)
    assert loop.willenborg_reduction(20, 20, 0.3, 3, 2.3) == 0
    assert loop.willenborg_reduction(2, 30, 0.3, 3, 2.3) == 0


def test_the_books_case_by_willenborg_agrees_with_a_loop_by_hand():
    # Kth 1 ksi√in and a shut-off ratio of 2.3, as in the notes; in ksi and inch.
    length, overload, begin, reach = 0.3, 0.0, 0.0, 0.0
    for i in range(12_001):
        root = 1.22 * math.sqrt(math.pi * length)
        peak, span = (27, 21.6) if i == 6_000 else (18, 14.4)
        peak, span = peak * root, span * root
        zone = (peak / 68) ** 2 / (2 * math.pi)
        ratio = 0.2
        if length + zone >= begin + reach:
            overload, begin, reach = peak, length, zone
        else:
            left = overload * math.sqrt(1 - (length - begin) / reach) - peak
            lower = peak - (1 - 1 / peak) / (2.3 - 1) * left
            ratio = (lower - span) / lower
        share = span / (1 - ratio) ** (0.4 if ratio >= 0 else 1)
        length += 1e-4 * (share / 32) ** 3.5
    model = retardation.Willenborg(
        KSI_ROOT_INCH, 2.3, 68 * KSI, StressState.PLANE_STRESS, TEST
    )
    found = book_case(True, model)
    assert found.retarded.length / INCH == pytest.approx(length, rel=1e-5)
    assert 0.5 < length < found.unretarded.length / INCH


def test_an_overload_of_the_shut_off_ratio_stops_the_crack():
    model = retardation.Willenborg(0.0, 2.0, 320.0, StressState.PLANE_STRESS, TEST)
    maximum = np.full(10, 40.0)
    maximum[0] = 81.0
    block = blocks.CycleBlock(maximum, np.zeros(10), 10)
    found = by_cycle.life_by_cycle(
        LAW, block, PATH, FLAW, by_cycle.Following(10**6, retardation=model)
    )
    # The overload comes again each block, and is all that grows the crack.
    alone = blocks.CycleBlock(np.array([81.0]), np.zeros(1), 10)
    only = by_cycle.life_by_cycle(LAW, alone, PATH, FLAW, by_cycle.Following(10**6))
    assert found.retarded.cycles == pytest.approx(10 * only.unretarded.cycles, rel=1e-3)


def test_retardation_lengthens_life_and_more_so_with_the_overload():
    def life(top: float, model: retardation.Retardation) -> float:
        maximum = np.full(500, 80.0)
        maximum[0] = top
        block = blocks.CycleBlock(maximum, np.full(500, 0.1), 5)
        found = by_cycle.life_by_cycle(
            LAW, block, PATH, FLAW, by_cycle.Following(10**6, retardation=model)
        )
        assert found.retarded.cycles >= found.unretarded.cycles
        return found.retarded.cycles / found.unretarded.cycles

    for model in (WHEELER, WILLENBORG):
        gains = [life(top, model) for top in (80.0, 100.0, 120.0, 140.0)]
        assert gains[0] == pytest.approx(1, abs=1e-9)
        assert gains == sorted(gains)
        assert gains[-1] > 1.3


# The loop itself


def by_hand(block: blocks.CycleBlock, cycles: int, exponent: float | None) -> list:
    """Each cycle with the exact factors and the law's own rate, as published."""
    depth, length = FLAW
    reach = [0.0, 0.0]
    for i in range(cycles):
        top, ratio = (x[i % block.cycles] for x in (block.maximum, block.ratio))
        growth = []
        for tip, (at, factor) in enumerate(
            zip((length, depth), CORNER(depth, length), strict=True)
        ):
            peak = factor * top * math.sqrt(math.pi * depth)
            zone = irwin_radius(peak, 320.0, StressState.PLANE_STRESS)
            share = 1.0
            if exponent is not None and at + zone < reach[tip]:
                share = (zone / (reach[tip] - at)) ** exponent
            reach[tip] = max(reach[tip], at + zone)
            growth.append(share * LAW.rate(peak * (1 - ratio), ratio))
        length, depth = length + growth[0], depth + growth[1]
    return [length, depth]


@pytest.mark.parametrize("model", [None, WHEELER], ids=["none", "Wheeler"])
def test_the_loop_agrees_with_each_cycle_by_hand(model):
    block = mixed_block(80.0, flights=1)
    run = by_cycle._Run(LAW, block, PATH, by_cycle.Following(10), model)
    found = run.grown(FLAW)
    assert found.cycles == 10_000
    length, depth = by_hand(block, 10_000, 1.43 if model else None)
    history = found.history
    assert history.length[-1] - 1.27 == pytest.approx(length - 1.27, rel=5e-4)
    assert history.depth[-1] - 1.27 == pytest.approx(depth - 1.27, rel=5e-4)
    assert depth > 1.3


@pytest.mark.parametrize(
    "model", [None, WHEELER, WILLENBORG], ids=["none", "Wheeler", "Willenborg"]
)
@pytest.mark.parametrize("law", [LAW, FORMAN], ids=["Walker", "Forman"])
def test_plain_python_and_machine_code_agree(law, model):
    block = mixed_block(150.0, flights=1)
    runs = [
        by_cycle._Run(law, block, PATH, by_cycle.Following(40), model, march)
        for march in (loop.march, None)
    ]
    plain, compiled = (run.grown(FLAW) for run in runs)
    assert plain.cycles == compiled.cycles
    assert plain.end is compiled.end
    assert plain.history.length == pytest.approx(compiled.history.length, rel=1e-10)


def test_nothing_imports_numba_until_a_sequence_is_run():
    code = (
        "import sys; import repairs.analysis.growth.by_cycle; "
        "assert 'numba' not in sys.modules"
    )
    subprocess.run([sys.executable, "-c", code], check=True, env={**os.environ})


def test_the_loop_is_compiled_where_nothing_can_be_kept(monkeypatch):
    import numba

    kept = numba.njit

    def njit(*functions, cache=False):
        if cache:
            raise RuntimeError("no locator available")
        return kept(*functions)

    monkeypatch.setattr(numba, "njit", njit)
    assert callable(loop.compiled_march.__wrapped__())


# How it ends


def test_fracture_ends_the_growth_at_the_largest_peak():
    toughness = 30 * ROOT_1000
    found = by_cycle.life_by_cycle(
        LAW, constant(150, 0.0), PATH, FLAW, by_cycle.Following(10**6, toughness)
    ).unretarded
    assert found.end is by_cycle.End.FRACTURE
    assert found.length < PATH.end
    at_end = 150 * through_hole(found.length) * math.sqrt(math.pi * found.length)
    assert at_end == pytest.approx(toughness, rel=1e-3)


def test_forman_ends_where_it_has_no_rate():
    longer = td.FlawPath(CORNER, through_hole, 3.0, 80.0)
    found = by_cycle.life_by_cycle(
        FORMAN, constant(290, 0.0), longer, FLAW, by_cycle.Following(10**6)
    ).unretarded
    assert found.length < 80
    assert found.end is by_cycle.End.FRACTURE


def test_a_crack_is_followed_no_further_than_asked():
    found = by_cycle.life_by_cycle(
        LAW, mixed_block(40.0), PATH, FLAW, by_cycle.Following(60)
    ).unretarded
    assert (found.end, found.flights) == (by_cycle.End.NOT_REACHED, 100)
    assert found.break_through is None
    assert found.history.cycles[-1] == found.cycles == 2_000
    with pytest.raises(OutOfRangeError, match="Flights to follow"):
        by_cycle.life_by_cycle(LAW, mixed_block(), PATH, FLAW, by_cycle.Following(0))


def test_a_crack_that_stands_still_is_seen():
    model = retardation.Willenborg(5_000.0, 1.01, 320.0, StressState.PLANE_STRESS, TEST)
    maximum = np.full(10, 1e-6)
    block = blocks.CycleBlock(maximum, np.zeros(10), 1)
    found = by_cycle.life_by_cycle(
        LAW, block, PATH, FLAW, by_cycle.Following(10**9, retardation=model)
    )
    assert found.unretarded.end is by_cycle.End.ARRESTED
    assert found.unretarded.length == 1.27


def test_a_crack_at_its_end_has_no_life_left():
    bare = td.FlawPath(None, through_hole, 3.0, 30.0)
    found = by_cycle.life_by_cycle(
        LAW, mixed_block(), bare, (3.0, 30.0), by_cycle.Following(10)
    ).unretarded
    assert (found.cycles, found.flights, found.end) == (0, 0, by_cycle.End.REACHED)


def test_a_through_crack_follows_its_integral():
    bare = td.FlawPath(None, through_hole, 3.0, 30.0)
    found = by_cycle.life_by_cycle(
        LAW, constant(90, 0.1), bare, (3.0, 2.0), by_cycle.Following(10**6)
    ).unretarded
    cycle = StressCycle(GrossStress(90), 0.1)
    exact = growth_cycles(LAW, through_hole, cycle, 2.0, 30.0)
    assert found.cycles == pytest.approx(exact, rel=2e-4)
    assert found.break_through is None


def test_what_does_not_hold_cycle_by_cycle_is_refused():
    held = ThresholdLaw(LAW, Threshold(3 * ROOT_1000, 0.5, 1.0, TEST))
    following = by_cycle.Following(10, retardation=WILLENBORG)
    with pytest.raises(AnalysisError, match="constant amplitude only"):
        by_cycle.life_by_cycle(held, mixed_block(), PATH, FLAW, following)
    with pytest.raises(OutOfRangeError, match="works through the stress ratio"):
        by_cycle.life_by_cycle(LAWS[2], mixed_block(), PATH, FLAW, following)
    plain = by_cycle.Following(10)
    for start, words in (
        ((math.nan, 1.27), "Depth over thickness"),
        ((3.1, 1.27), "Depth over thickness"),
        ((1.27, math.nan), "Crack length"),
    ):
        with pytest.raises(OutOfRangeError, match=words):
            by_cycle.life_by_cycle(LAW, mixed_block(), PATH, start, plain)
    bare = td.FlawPath(None, through_hole, 3.0, 30.0)
    with pytest.raises(AnalysisError, match="no factors for that"):
        by_cycle.life_by_cycle(LAW, mixed_block(), bare, FLAW, plain)
    with pytest.raises(OutOfRangeError, match="Shut-off overload ratio"):
        retardation.Willenborg(1.0, 1.0, 320.0, StressState.PLANE_STRESS, TEST)
    with pytest.raises(OutOfRangeError, match="Wheeler's exponent"):
        retardation.Wheeler(-1.0, 320.0, StressState.PLANE_STRESS, TEST)
    with pytest.raises(InputError, match="has no source"):
        retardation.Wheeler(
            1.0, 320.0, StressState.PLANE_STRESS, Reference(" ", Grade.RECORDED)
        )
