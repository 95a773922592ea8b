"""Exceedances, gusts and manoeuvres against print and a second route."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.spectra import counting, gust_loads
from repairs.analysis.spectra.exceedance import CountedAt, Counts, ExceedanceTable
from repairs.analysis.spectra.sequence import Residue, Treatment
from repairs.analysis.spectra.wing_sequence import LEVELS, level_totals
from tests.outside import outside

AGAIN = Treatment(Residue.REPEATING)


def table(**changes):
    choices = {
        "levels": (10.0, 20.0, 30.0, 40.0),
        "numbers": (1000.0, 120.0, 9.0, 0.0),
        "counts": Counts.EXCEEDANCES,
        "counted_at": CountedAt.UPPER_EDGE,
        "flights": 50,
        "mean": 60.0,
        "ground": -20.0,
        "seed": 11,
        "treatment": AGAIN,
    }
    return ExceedanceTable(**(choices | changes))


def test_exceedances_are_not_occurrences():
    found = table().occurrences()
    assert found.increments == (20, 30, 40)
    assert found.counts == (880, 111, 9)
    read_wrongly = table(
        counts=Counts.OCCURRENCES, counted_at=CountedAt.LEVEL
    ).occurrences()
    assert sum(read_wrongly.counts) == 1129


def test_occurrences_at_their_levels():
    found = table(counted_at=CountedAt.LEVEL).occurrences()
    assert found.increments == (10, 20, 30, 40)
    assert found.counts == (880, 111, 9, 0)


@pytest.mark.parametrize("place", [0, 4, 8, 9])
def test_the_standard_wing_sequence_from_its_exceedances(place):
    cumulative = (398_665, 40_000, 5200, 1030, 230, 78, 26, 8, 3, 1)
    found = table(
        levels=tuple(reversed(LEVELS)),
        numbers=cumulative,
        counted_at=CountedAt.LEVEL,
        flights=4000,
    ).occurrences()
    outside(
        "Exceedances read as occurrences of each level",
        source="NLR TR 73029 / LBF FB-106, 1973, cumulative and level totals",
        given=f"gust level {found.increments[place]} over mean stress, 4,000 flights",
        published=level_totals()[9 - place],
        computed=found.whole()[place],
        absolute=0,
        route="memory",
    )


@given(st.lists(st.floats(0, 500), min_size=2, max_size=20))
def test_whole_counts_keep_every_cumulative_count_to_the_nearest(numbers):
    falling = sorted(numbers, reverse=True)
    made = table(
        levels=tuple(range(1, len(falling) + 1)),
        numbers=tuple(falling),
        counted_at=CountedAt.LEVEL,
    )
    sums = np.cumsum(made.occurrences().whole()[::-1])[::-1]
    assert min(made.occurrences().whole()) >= 0
    assert (abs(sums - falling) <= 0.5 + 1e-9).all()


def test_the_block_holds_the_occurrences_and_a_ground_per_flight():
    block = table().sequence()
    assert (block.flights, block.repeats) == (50, True)
    values, numbers = np.unique(block.stresses, return_counts=True)
    assert dict(zip(values.tolist(), numbers.tolist(), strict=True)) == {
        -20: 50, 20: 9, 30: 111, 40: 880, 60: 50, 80: 880, 90: 111, 100: 9,
    }  # fmt: skip
    cycles = counting.counted(block, AGAIN)
    assert cycles.counts.sum() == 1000 + 50
    assert cycles.ranges.max() == 120


def test_occurrences_are_spread_evenly_over_the_flights():
    block = table(numbers=(50_000.0, 50_000.0, 50_000.0, 0.0)).sequence()
    sizes = np.diff([*block.starts, len(block.stresses)]) // 2 - 1
    # Multinomial: 1,000 a flight with a deviation of 31.3.
    assert sizes.sum() == 50_000
    assert abs(sizes - 1000).max() < 5 * math.sqrt(1000 * 0.98)
    chi = ((sizes - 1000) ** 2 / 1000).sum()
    assert 25 < chi < 85  # 49 degrees of freedom


def test_the_seed_decides_the_order():
    first, same, other = (table(seed=s).sequence().stresses for s in (1, 1, 2))
    assert (first == same).all()
    assert (first != other).any()


def test_levels_too_rare_for_the_block_are_told():
    made = table(numbers=(1000.0, 120.0, 0.4, 0.0))
    (warning,) = made.warnings
    assert "at 40 MPa" in warning
    assert table().warnings == ()


@pytest.mark.parametrize(
    ("changes", "words"),
    [
        ({"numbers": (1.0, 2.0)}, "4 levels and 2 counts"),
        ({"levels": (1.0,), "numbers": (1.0,)}, "at least 2"),
        ({"levels": (10.0, 10.0, 30.0, 40.0)}, "rising levels"),
        ({"levels": (-1.0, 10.0, 30.0, 40.0)}, "rising levels"),
        ({"levels": (1.0, 10.0, 30.0, math.nan)}, "rising levels"),
        ({"numbers": (10.0, 120.0, 9.0, 0.0)}, "If these are occurrences, say so"),
        ({"numbers": (1000.0, 120.0, 9.0, 2.0)}, "never exceeded"),
        ({"numbers": (1000.0, 120.0, -9.0, -10.0)}, "finite count"),
        ({"numbers": (1000.0, 120.0, math.nan, 0.0)}, "finite count"),
        ({"flights": 0}, "whole number"),
        ({"counts": Counts.OCCURRENCES}, "counted_at = level, not upper_edge"),
        ({"seed": "7"}, "seed"),
    ],
)
def test_a_wrong_table_is_refused_with_words(changes, words):
    with pytest.raises(InputError, match=words):
        table(**changes)


def test_a_table_without_whole_occurrences_gives_no_sequence():
    with pytest.raises(InputError, match="no whole occurrence"):
        table(numbers=(0.3, 0.2, 0.1, 0.0)).sequence()


SEGMENT = gust_loads.TurbulenceSegment(1, 1, 1, 0.005, 3.5, 0.0003, 8)


def test_turbulence_exceedances_recomputed():
    # By hand: 0.005 e^(-20/3.5) + 0.0003 e^(-20/8).
    outside(
        "Exceedances in continuous turbulence",
        source="14 CFR part 25, appendix G (c)(3), by hand",
        given="t 1, N0 1, A 1, P1 0.005, b1 3.5, P2 0.0003, b2 8, y 20",
        published=4.112e-5,
        computed=gust_loads.turbulence_exceedances(20, [SEGMENT]),
        rel=2e-4,
        route="closed form",
    )


def test_at_no_increment_every_crossing_counts():
    half = gust_loads.TurbulenceSegment(0.5, 4, 1, 0.9, 3.5, 0.1, 8)
    outside(
        "Exceedances in continuous turbulence",
        source="limit y = 0: t N0 (P1 + P2)",
        given="t 0.5, N0 4, P1 0.9, P2 0.1",
        published=2.0,
        computed=gust_loads.turbulence_exceedances(0, [half]),
        rel=1e-12,
        route="closed form",
    )


@given(st.floats(0, 100), st.floats(0.01, 20))
def test_larger_increments_are_exceeded_less_often(increment, more):
    def often(y):
        return gust_loads.turbulence_exceedances(y, [SEGMENT, SEGMENT])

    assert often(increment + more) < often(increment)
    assert often(-increment) == often(increment)
    single = gust_loads.turbulence_exceedances(increment, [SEGMENT])
    assert often(increment) == pytest.approx(2 * single)


AEROPLANE = gust_loads.GustAeroplane(80, 12, 5, 0.0023769)


@pytest.mark.parametrize(
    ("what", "published", "computed"),
    [
        ("mass ratio", 34.870, AEROPLANE.mass_ratio),
        ("alleviation factor", 0.76389, AEROPLANE.alleviation),
        ("increment", 1.1984, gust_loads.gust_increment(AEROPLANE, 50, 250)),
    ],
)
def test_discrete_gust_recomputed(what, published, computed):
    outside(
        "Discrete gust load factor (Pratt)",
        source="14 CFR 23.341(c), computed apart",
        given=f"W/S 80 psf, chord 12 ft, a 5, 50 ft/s, 250 kt, sea level: {what}",
        published=published,
        computed=computed,
        rel=1e-4,
        route="closed form",
    )


def test_discrete_gust_in_metric_units():
    # dn = Kg rho0 U V a / (2 W/S), all SI: the constant is 498.5, printed 498.
    pressure = 80 * 4.4482216 / 0.3048**2
    metric = (
        AEROPLANE.alleviation * 1.225 * (50 * 0.3048) * (250 * 1852 / 3600) * 5
    ) / (2 * pressure)
    outside(
        "Discrete gust load factor (Pratt)",
        source="same equation from lift, SI units, density 1.225 kg/m3",
        given="W/S 80 psf, chord 12 ft, a 5, 50 ft/s, 250 kt, sea level",
        published=metric,
        computed=gust_loads.gust_increment(AEROPLANE, 50, 250),
        rel=1.5e-3,
        route="another method",
    )


@given(st.floats(20, 150), st.floats(1, 50))
def test_a_heavier_wing_loading_rides_gusts_better(loading, more):
    light = gust_loads.GustAeroplane(loading, 12, 5, 0.0023769)
    heavy = gust_loads.GustAeroplane(loading + more, 12, 5, 0.0023769)
    by_light = gust_loads.gust_increment(light, 50, 250)
    assert gust_loads.gust_increment(heavy, 50, 250) < by_light
    assert gust_loads.gust_increment(light, -50, 250) == -by_light
    assert 0 < light.alleviation < heavy.alleviation < 0.88


@pytest.mark.parametrize(
    ("weight", "factor"),
    [(4_118, 3.8), (10_000, 3.3), (20_000, 2.9), (50_000, 2.5), (60_000, 2.5)],
)
def test_manoeuvre_limit_of_the_rule(weight, factor):
    outside(
        "Limit manoeuvring load factor",
        source="14 CFR 25.337(b), text of April 2026",
        given=f"design maximum take-off weight {weight:,} lb",
        published=factor,
        computed=gust_loads.manoeuvre_limit(weight),
        absolute=2e-4,
    )


@pytest.mark.parametrize(
    ("speed", "factor"), [(100, -1), (300, -1), (325, -0.5), (350, 0)]
)
def test_negative_manoeuvre_limit_of_the_rule(speed, factor):
    outside(
        "Negative limit manoeuvring load factor",
        source="14 CFR 25.337(c), text of April 2026",
        given=f"{speed} kt, VC 300 kt, VD 350 kt",
        published=factor,
        computed=gust_loads.negative_manoeuvre_limit(speed, 300, 350),
        absolute=1e-12,
    )


def test_outside_their_range_the_rules_refuse():
    with pytest.raises(OutOfRangeError, match="Speed"):
        gust_loads.negative_manoeuvre_limit(360, 300, 350)
    with pytest.raises(OutOfRangeError, match="Cruise speed"):
        gust_loads.negative_manoeuvre_limit(300, 350, 350)
    with pytest.raises(OutOfRangeError, match="Take-off weight"):
        gust_loads.manoeuvre_limit(0)
    with pytest.raises(OutOfRangeError, match="Air density"):
        gust_loads.GustAeroplane(80, 12, 5, 1.225)
    with pytest.raises(OutOfRangeError, match="Share of time P1"):
        gust_loads.TurbulenceSegment(1, 1, 1, 1.2, 3.5, 0, 8)
    with pytest.raises(OutOfRangeError, match="Load increment"):
        gust_loads.turbulence_exceedances(math.nan, [SEGMENT])
