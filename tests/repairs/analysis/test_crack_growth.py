"""Growth against closed forms, an independent integrator, and printed constants.

Dowling's Table 11.2 constants are quoted from memory; the FAA fit is quoted from
DOT/FAA/AR-05/15, figure 3.
"""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import solve_ivp

from repairs.analysis.errors import AnalysisError
from repairs.analysis.growth import laws as cg
from repairs.analysis.growth import separable as gs
from repairs.analysis.growth import two_directions as td
from repairs.analysis.intensity.part_through import (
    CORNER_ANGLES,
    PartThrough,
    corner_crack_at_hole,
)
from repairs.analysis.intensity.through import centre_crack_secant
from repairs.analysis.types import (
    INCH,
    KSI_ROOT_INCH,
    ROOT_1000,
    Grade,
    GrossStress,
    HalfLength,
    Reference,
)
from tests.outside import outside

MEMORY = Reference("Dowling, Table 11.2, from memory", Grade.MEMORY)
AL2024 = cg.WalkerLaw.from_mpa_root_metre(1.42e-8, 3.59, 0.680, MEMORY)
FAA = cg.WalkerLaw.from_ksi_root_inch(
    1.67e-9, 3.273, 0.618, Reference("DOT/FAA/AR-05/15, figure 3", Grade.QUOTED)
)
AL7075 = cg.WalkerLaw.from_mpa_root_metre(2.71e-8, 3.70, 0.641, MEMORY)


def paris(c_metre: float, m: float) -> cg.WalkerLaw:
    """Paris' law from C in m/cycle per (MPa*sqrt(m))^m."""
    return cg.WalkerLaw.from_mpa_root_metre(c_metre * 1000, m, 1.0, MEMORY)


def cycle(stress: float, ratio: float = 0.0) -> cg.StressCycle:
    """Cycle with this *range* [MPa]."""
    return cg.StressCycle(GrossStress(stress / (1 - ratio)), ratio)


@pytest.mark.parametrize(
    ("c", "m", "life"),
    [(1e-11, 3, 776_634), (1e-12, 4, 911_891), (1e-10, 2, 732_936)],
)
def test_paris_lives_from_1_to_10_mm(c, m, life):
    law = paris(c, m)
    closed = gs.paris_cycles(law, 1.0, cycle(100), 1.0, 10.0)
    assert closed == pytest.approx(life, abs=1)
    outside(
        "Growth life, separable integral",
        source="Paris' law integrated in closed form",
        given=f"C {c:g} m/cycle (MPa√m), m {m}, ΔS 100 MPa, F 1, 1 to 10 mm",
        published=life,
        computed=gs.growth_cycles(law, lambda a: 1.0, cycle(100), 1.0, 10.0),
        unit="cycles",
        rel=1e-6,
        route="closed form",
    )


@pytest.mark.parametrize(
    ("ratio", "rate"), [(0.0, 6.653e-4), (0.5, 1.475e-3), (-1.0, 5.524e-5)]
)
def test_walker_rates_at_20_mpa_root_metre(ratio, rate):
    found = AL2024.rate(20 * ROOT_1000, ratio)
    assert found == pytest.approx(rate, rel=4e-4)


def test_faa_law_converts_to_its_si_constant():
    si = FAA.coefficient * ROOT_1000**FAA.exponent
    assert si == pytest.approx(3.116e-8, rel=3e-4)


def test_dowling_constants_in_us_units_are_those_the_book_prints():
    for alloy, law, printed in (
        ("2024-T3", AL2024, 7.85e-10),
        ("7075-T6", AL7075, 1.51e-9),
    ):
        outside(
            "Walker constant, unit conversion",
            source="Dowling, Table 11.2, its column in US units, from memory",
            given=f"{alloy}, C from the column in mm/cycle and MPa√m",
            published=printed,
            computed=law.coefficient * KSI_ROOT_INCH**law.exponent / INCH,
            unit="in/cycle (ksi√in)^−m",
            rel=2e-3,
            route="memory",
        )


@pytest.mark.parametrize(
    ("delta_k", "apart"), [(5, 1.32), (10, 1.06), (20, 0.85), (30, 0.75)]
)
def test_two_published_fits_of_one_alloy_cross(delta_k, apart):
    # Shares worked out apart; a flat fit is faster for short cracks, slower for long.
    rates = [law.rate(delta_k * ROOT_1000, 0) for law in (FAA, AL2024)]
    assert rates[0] / rates[1] == pytest.approx(apart, abs=0.006)


def test_two_published_fits_give_lives_a_fifth_apart():
    lives = [
        gs.growth_cycles(
            law,
            lambda a: centre_crack_secant(HalfLength(a), 200.0),
            cycle(80, 0.1),
            12.7,
            50,
        )
        for law in (FAA, AL2024)
    ]
    assert lives == [pytest.approx(32_566, rel=1e-3), pytest.approx(27_235, rel=1e-4)]


@pytest.mark.parametrize(
    ("law", "factor", "stress", "ratio", "start", "end", "life"),
    [
        (AL2024, 1.0, 100, 0.0, 1, 20, 165_141),
        (AL2024, 1.0, 100, 0.1, 1, 20, 146_315),
        (AL7075, 1.122, 80, 0.0, 1.27, 25, 82_661),
    ],
)
def test_walker_lives_at_constant_factor(law, factor, stress, ratio, start, end, life):
    found = gs.growth_cycles(law, lambda a: factor, cycle(stress, ratio), start, end)
    assert found == pytest.approx(life, rel=1e-5)


@pytest.mark.parametrize(("start", "life"), [(5, 78_776), (12.7, 27_235), (25, 8_789)])
def test_centre_crack_in_a_200_mm_sheet(start, life):
    found = gs.growth_cycles(
        AL2024,
        lambda a: centre_crack_secant(HalfLength(a), 200.0),
        cycle(80, 0.1),
        start,
        50,
    )
    assert found == pytest.approx(life, rel=2e-5)


@settings(max_examples=15, deadline=None)
@given(st.floats(2, 10), st.floats(1.5, 6), st.floats(40, 120), st.floats(-0.5, 0.6))
def test_quadrature_agrees_with_a_step_integrator(start, growth, stress, ratio):
    end = min(start * growth, 60.0)
    shape = lambda a: centre_crack_secant(HalfLength(a), 200.0)  # noqa: E731
    load = cycle(stress, ratio)
    found = gs.growth_cycles(AL2024, shape, load, start, end)

    def slowness(a: float, n: list[float]) -> list[float]:
        return [1 / AL2024.rate(cg.delta_k(shape(a), load, a), ratio)]

    solved = solve_ivp(slowness, (start, end), [0.0], rtol=1e-10, atol=1e-6)
    assert found == pytest.approx(solved.y[0, -1], rel=1e-7)


@given(st.floats(1, 20), st.floats(1.01, 5), st.floats(20, 150))
def test_more_stress_or_a_longer_start_never_lengthens_life(start, growth, stress):
    end = start * growth
    base = gs.growth_cycles(AL2024, lambda a: 1.0, cycle(stress), start, end)
    more = gs.growth_cycles(AL2024, lambda a: 1.0, cycle(stress * 1.1), start, end)
    later = gs.growth_cycles(
        AL2024, lambda a: 1.0, cycle(stress), (start + end) / 2, end
    )
    assert more < base
    assert later < base
    assert more * 1.1**AL2024.exponent == pytest.approx(base, rel=1e-6)


def test_history_ends_at_the_life():
    shape = lambda a: 1.0  # noqa: E731
    points = gs.growth_history(AL2024, shape, cycle(80), 3.0, 40.0)
    whole = gs.growth_cycles(AL2024, shape, cycle(80), 3.0, 40.0)
    assert points[0] == (0.0, 3.0)
    assert points[-1] == pytest.approx((whole, 40.0), rel=1e-9)


def test_equal_factors_grow_a_part_through_crack_as_one_length():
    # With one factor at both tips depth and length share the closed form.
    found = td.grow_part_through(
        AL2024, lambda a, c: (0.7, 0.7), cycle(90), (1.0, 2.0), 3.0
    )
    closed = gs.paris_cycles(AL2024, 0.7, cycle(90), 1.0, 3.0)
    assert found.cycles == pytest.approx(closed, rel=1e-6)
    assert found.length == pytest.approx(4.0, rel=1e-6)


def test_a_corner_crack_breaks_through_and_outlives_a_through_crack():
    def factors(a: float, c: float) -> tuple[float, float]:
        crack = PartThrough(a, c, 2.0)
        return tuple(
            corner_crack_at_hole(crack, 2.4, 100, angle) for angle in CORNER_ANGLES
        )

    found = td.grow_part_through(AL2024, factors, cycle(80), (1.27, 1.27), 2.0)
    assert found.depth == 2.0
    assert 1.27 < found.length < 4.0
    assert 1_000 < found.cycles < 1_000_000


def test_critical_length_meets_the_closed_form():
    toughness, required = 3000.0, 100.0
    strength = lambda a: toughness / math.sqrt(math.pi * a)  # noqa: E731
    exact = (toughness / required) ** 2 / math.pi
    found = gs.critical_length(strength, required, 1.0, 1000.0)
    assert found == pytest.approx(exact, rel=1e-9)
    assert gs.critical_length(strength, required, 400.0, 1000.0) == 400.0
    assert gs.critical_length(strength, 1.0, 1.0, 1000.0) is None


def test_growth_backwards_is_refused():
    with pytest.raises(AnalysisError, match="end must be larger"):
        gs.growth_cycles(AL2024, lambda a: 1.0, cycle(80), 2 * INCH, INCH)
