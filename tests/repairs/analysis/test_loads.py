"""Shell stresses and the two requirements; values recomputed by hand or by matrix."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import OutOfRangeError
from repairs.analysis.loads import shell as loads
from repairs.analysis.types import INCH, KSI, GrossStress

PSI = KSI / 1000
PRESSURES = loads.CabinPressures(8.2 * PSI, 0.3 * PSI, 8.6 * PSI)
FACTORS = loads.LoadFactors(1.15, 1.5, 1.33)


def test_hoop_and_axial_stress_in_si():
    assert loads.hoop_stress(0.0593, 1422.4, 1.2) == pytest.approx(70.290, abs=5e-4)
    assert loads.axial_stress(0.0593, 1422.4, 1.2) == pytest.approx(35.145, abs=5e-4)


def test_hoop_and_axial_stress_in_psi():
    hoop = loads.hoop_stress(8.6 * PSI, 56 * INCH, 0.047 * INCH) / PSI
    assert hoop == pytest.approx(10246.8, abs=0.05)
    axial = loads.axial_stress(8.6 * PSI, 56 * INCH, 0.047 * INCH) / PSI
    assert axial == pytest.approx(5123.4, abs=0.05)


def test_smeared_frames_published_in_closed_form():
    hoop, axial = loads.smeared_skin_ratios(0.3, 0.5, 0.33)
    assert (hoop, axial) == pytest.approx((0.80133, 0.42148), abs=5e-6)
    assert loads.smeared_skin_ratios(0, 0, 0.33) == (1.0, 0.5)


@given(st.floats(0, 3), st.floats(0, 3), st.floats(0, 0.5))
def test_smeared_frames_balance_the_pressure(frame, stringer, poisson):
    hoop, axial = loads.smeared_skin_ratios(frame, stringer, poisson)
    frame_stress, stringer_stress = hoop - poisson * axial, axial - poisson * hoop
    assert hoop + frame * frame_stress == pytest.approx(1, abs=1e-12)
    assert axial + stringer * stringer_stress == pytest.approx(0.5, abs=1e-12)


def test_smeared_frames_against_a_linear_solver():
    frame, stringer, nu = 0.4, 0.2, 0.33
    matrix = np.array([[1 + frame, -nu * frame], [-nu * stringer, 1 + stringer]])
    expected = np.linalg.solve(matrix, np.array([1.0, 0.5]))
    assert loads.smeared_skin_ratios(frame, stringer, nu) == pytest.approx(expected)


def test_pressure_only_lists_the_cases_it_did_not_check():
    residual, ultimate = loads.shell_requirements(PRESSURES, 1422.4, 1.4, FACTORS, None)
    stress, case = residual.governing
    assert stress == pytest.approx(1.15 * 8.5 * PSI * 1422.4 / 1.4)
    assert "1.15" in case
    stress, case = ultimate.governing
    assert stress == pytest.approx(1.5 * 1.33 * 8.6 * PSI * 1422.4 / 1.4)
    assert "1.33" in case
    assert len(residual.not_checked) == len(ultimate.not_checked) == 1


def test_flight_loads_govern_once_they_are_recorded():
    residual, ultimate = loads.shell_requirements(
        PRESSURES, 1422.4, 1.4, FACTORS, GrossStress(40.0)
    )
    normal, relief = (p * PSI * 1422.4 / 1.4 for p in (8.5, 8.6))
    assert residual.governing[0] == pytest.approx(normal + 40)
    assert ultimate.governing[0] == pytest.approx(1.5 * (relief + 40))
    assert residual.not_checked == ultimate.not_checked == ()


@given(st.floats(0.5, 5), st.floats(200, 3000), st.floats(0, 200))
def test_ultimate_is_never_residual_times_one_and_a_half(t, radius, flight):
    residual, ultimate = loads.shell_requirements(
        PRESSURES, radius, t, FACTORS, GrossStress(flight)
    )
    assert ultimate.governing[0] > residual.governing[0]
    assert ultimate.governing[0] != pytest.approx(1.5 * residual.governing[0], rel=1e-4)


def test_unpressurised_panel_has_limit_and_ultimate():
    residual, ultimate = loads.unpressurised_requirements(GrossStress(150.0), 1.5)
    assert (residual.governing[0], ultimate.governing[0]) == (150.0, 225.0)


def test_a_thick_shell_is_refused():
    with pytest.raises(OutOfRangeError):
        loads.hoop_stress(0.06, 100, 10)
