"""The growth table against closed forms and adaptive quadrature of another library."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import quad

from repairs.analysis.errors import AnalysisError, OutOfRangeError
from repairs.analysis.growth import separable as gs
from repairs.analysis.growth.laws import FormanLaw, StressCycle, WalkerLaw, delta_k
from repairs.analysis.growth.path import CrackPath
from repairs.analysis.intensity.bulging import bulging_handbook, bulging_tada
from repairs.analysis.intensity.holes import hole_single
from repairs.analysis.intensity.through import centre_crack_secant, edge_crack_tada
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.loads.shell import LoadCase, Requirement
from repairs.analysis.strength.residual import Strength
from repairs.analysis.types import ROOT_1000, Grade, GrossStress, Reference
from tests.outside import outside

MEMORY = Reference("Dowling, Tables 11.2 and 11.3, from memory", Grade.MEMORY)
LAW = WalkerLaw.from_mpa_root_metre(1.42e-8, 3.59, 0.680, MEMORY)
FORMAN = FormanLaw.from_mpa_root_metre(2.31e-6, 3.38, 110, MEMORY)
CYCLE = StressCycle(GrossStress(80), 0.1)
FACTORS = {
    "wide centre crack": (lambda a: 1.0, 1.0, 100.0),
    "centre crack, 200 mm": (lambda a: centre_crack_secant(a, 200), 0.5, 69.9),
    "edge crack, 80 mm": (lambda a: edge_crack_tada(a, 80), 0.5, 60.0),
    "hole, 30 mm wide": (lambda c: hole_single(c, 6, 30), 0.05, 10.49),
    "bulging, R t 2000": (lambda a: bulging_handbook(a / 2000**0.5), 1.0, 223.0),
    "a kink": (lambda a: bulging_tada(a / 400**0.5), 1.0, 90.0),
}


def quadrature(law, factor, start, end) -> float:
    """Life by an adaptive rule of another library, split at 20 mm (the kink)."""

    def slowness(a: float) -> float:
        return 1 / law.rate(delta_k(factor(a), CYCLE, a), CYCLE.ratio)

    middle = min(max(20.0, start), end)
    parts = ((start, middle), (middle, end))
    return sum(quad(slowness, *p, epsrel=1e-11, epsabs=0, limit=500)[0] for p in parts)


@pytest.mark.parametrize("name", FACTORS)
@pytest.mark.parametrize("law", [LAW, FORMAN], ids=["Walker", "Forman"])
def test_lives_agree_with_adaptive_quadrature(name, law):
    factor, low, high = FACTORS[name]
    if isinstance(law, FormanLaw):
        high = min(high, 25.0)
    table = gs.GrowthTable(law, factor, CYCLE, low, high)
    middle = math.sqrt(low * high)
    for start, end in ((low, high), (low, middle), (middle, high), (2 * low, 5 * low)):
        expected = quadrature(law, factor, start, end)
        assert table.life(start, end) == pytest.approx(expected, rel=1e-7), name


@pytest.mark.parametrize("exponent", [2.0, 2.5, 3.0, 3.59, 4.0, 6.0])
def test_lives_agree_with_the_closed_form(exponent):
    law = WalkerLaw(1e-13, exponent, 1.0, MEMORY)
    table = gs.GrowthTable(law, lambda a: 1.1, CYCLE, 0.05, 400)
    for start, end in ((0.05, 400), (0.05, 0.06), (1, 20), (399, 400)):
        closed = gs.paris_cycles(law, 1.1, CYCLE, start, end)
        assert table.life(start, end) == pytest.approx(closed, rel=1e-8)


def test_published_closed_form_lives():
    law = WalkerLaw.from_mpa_root_metre(1e-8, 3.0, 1.0, MEMORY)
    cycle = StressCycle(GrossStress(80), 0)
    found = gs.growth_cycles(law, lambda a: 1.0, cycle, 2, 20)
    outside(
        "Growth life, separable integral",
        source="Paris' law integrated in closed form",
        given="C 1e-8 mm/cycle (MPa√m), m 3, ΔS 80 MPa, F 1, 2 to 20 mm",
        published=1_072_584.93,
        computed=found,
        unit="cycles",
        rel=1e-8,
        route="closed form",
    )


def test_life_of_an_independent_library():
    # Stage 1 of its crack-growth example: F 1.12, S = 0.15 MN / (80 mm 5 mm) 375 MPa.
    law = WalkerLaw.from_mpa_root_metre(6.91e-9, 3.0, 1.0, MEMORY)
    cycle = StressCycle(GrossStress(375), 0)
    outside(
        "Growth life, separable integral",
        source="Test values of the open library reliability, fracture mechanics",
        given="C 6.91e-12 m/cycle, m 3, ΔS 375 MPa, F 1.12, 1 to 2.0798 mm",
        published=6802.128636224042,
        computed=gs.growth_cycles(law, lambda a: 1.12, cycle, 1, 2.0798236309560947),
        unit="cycles",
        rel=1e-7,
        route="library",
    )
    critical = gs.critical_length(
        lambda a: 66 * ROOT_1000 / (1.12 * math.sqrt(math.pi * a)), 375, 1, 100
    )
    outside(
        "Critical crack length",
        source="Test values of the open library reliability, fracture mechanics",
        given="Kc 66 MPa√m, S 375 MPa, F 1.12",
        published=7.8603053527017686,
        computed=critical,
        unit="mm",
        rel=1e-7,
        route="library",
    )


def test_many_lives_are_the_single_lives():
    factor, low, high = FACTORS["centre crack, 200 mm"]
    table = gs.GrowthTable(LAW, factor, CYCLE, low, high)
    starts = np.geomspace(low, high, 200)
    many = table.lives(starts, np.full(200, high))
    ones = [table.life(float(a), high) for a in starts]
    assert many == pytest.approx(ones, rel=1e-12)
    assert np.all(np.diff(many) < 0)
    assert many[-1] == 0
    assert many[0] == pytest.approx(table.total, rel=1e-12)


@settings(max_examples=40)
@given(st.floats(0.5, 69), st.floats(0.001, 0.999))
def test_lengths_after_cycles_take_lives_back(start, share):
    factor, low, high = FACTORS["centre crack, 200 mm"]
    table = gs.GrowthTable(LAW, factor, CYCLE, low, high)
    cycles = share * table.life(start, high)
    after = table.lengths_after(np.array([start]), np.array([cycles]))
    assert table.life(start, float(after[0])) == pytest.approx(cycles, rel=1e-9)


def test_growth_past_the_table_is_refused():
    table = gs.GrowthTable(LAW, lambda a: 1.0, CYCLE, 1, 10)
    with pytest.raises(OutOfRangeError, match="Cycles of the growth table"):
        table.lengths_after(np.array([5.0]), np.array([1e9]))
    for wrong in (0.9, 10.1, math.nan):
        with pytest.raises(OutOfRangeError, match="Crack length, mm"):
            table.life(wrong, 10)
    with pytest.raises(AnalysisError, match="end must be larger"):
        table.life(9, 8)
    with pytest.raises(AnalysisError, match="from 9 to 8 mm"):
        table.lives(np.array([1.0, 9.0]), np.array([2.0, 8.0]))
    for low, high in ((0, 5), (5, 4), (-1, 5), (1, math.inf), (math.nan, 5)):
        with pytest.raises(AnalysisError, match="end must be larger"):
            gs.GrowthTable(LAW, lambda a: 1.0, CYCLE, low, high)


def test_the_factor_is_never_asked_outside_the_table():
    asked = []

    def factor(a: float) -> float:
        asked.append(a)
        return centre_crack_secant(a, 200)

    gs.GrowthTable(LAW, factor, CYCLE, 3, 70)
    assert 3 < min(asked) <= max(asked) < 70
    assert len(asked) < 120


def test_history_starts_and_ends_where_it_is_asked():
    factor, low, high = FACTORS["hole, 30 mm wide"]
    points = gs.growth_history(LAW, factor, CYCLE, low, high)
    whole = gs.growth_cycles(LAW, factor, CYCLE, low, high)
    assert points[0] == (0.0, low)
    assert points[-1][1] == high
    assert points[-1][0] == pytest.approx(whole, rel=1e-12)
    assert len(points) == gs.CURVE_POINTS
    assert gs.growth_cycles(LAW, factor, CYCLE, high, high) == 0


def path_of(factor) -> CrackPath:
    asked = Requirement("of the test", (LoadCase("case", GrossStress(100)),))
    return CrackPath(
        "a",
        1.0,
        factor,
        lambda a: Strength(GrossStress(1000 / a), "fracture"),
        PanelLoads(asked, asked, CYCLE),
        LAW,
        60.0,
        "the end of the test",
    )


def test_a_path_makes_one_table_for_all_lives_of_it():
    asked = []

    def factor(a: float) -> float:
        asked.append(a)
        return centre_crack_secant(a, 200)

    path = path_of(factor)
    whole = path.cycles(5, 60)
    once = len(asked)
    later = path.cycles(12, 40)
    assert path.history(5, 60)[-1][0] == pytest.approx(whole, rel=1e-12)
    assert len(asked) == once
    assert later == pytest.approx(quadrature(LAW, path.factor, 12, 40), rel=1e-7)
    earlier = path.cycles(2, 60)  # before the table's begin: a new one
    assert len(asked) > once
    assert earlier > whole
    assert path.cycles(60, 60) == 0


def test_a_path_goes_as_far_as_its_law():
    # (1 - R) Kc of the fit is reached at 32 mm, the path goes on to 60.
    early = FormanLaw(FORMAN.coefficient, FORMAN.exponent, 800.0, MEMORY)
    path = path_of(lambda a: 1.0)
    found = path.cycles(5, 25, early)
    assert found == pytest.approx(quadrature(early, path.factor, 5, 25), rel=1e-7)
    assert path.cycles(10, 20, early) < found
    with pytest.raises(OutOfRangeError, match="no rate there"):
        path.cycles(5, 50, early)


def test_a_path_keeps_the_tables_of_two_laws_apart():
    path = path_of(lambda a: 1.0)
    other = WalkerLaw(LAW.coefficient * 2, LAW.exponent, LAW.gamma, MEMORY)
    assert path.cycles(5, 50) == pytest.approx(2 * path.cycles(5, 50, other), rel=1e-12)
