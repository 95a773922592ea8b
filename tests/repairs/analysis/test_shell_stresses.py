"""Stiffened shell, plane stress and cycle of a flight, each by a second route."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import solve_bvp
from scipy.linalg import eigh

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.loads import flight_cycle, shell
from repairs.analysis.loads import stiffened_shell as stiff
from repairs.analysis.loads.plane_stress import PlaneStress, skin_point
from repairs.analysis.types import KSI
from tests.outside import outside

PSI = KSI / 1000
P, R, T, PITCH, NU = 8.5 * PSI, 1422.4, 1.2, 508.0, 0.33
TIED, FLOATING = stiff.Attachment.SHEAR_TIED, stiff.Attachment.FLOATING


def frames(ratio=0.3, pitch=PITCH, attachment=TIED):
    return stiff.Frames(ratio * pitch * T, pitch, attachment)


def stringers(ratio=0.5):
    return stiff.Stringers(ratio * 150 * T, 150.0)


def test_hoop_and_axial_of_a_thin_shell():
    outside(
        "Hoop stress of a thin pressurised shell",
        source="p R/t, elementary statics",
        given="8.6 psi, R 56 in, t 0.047 in",
        published=10246.8,
        computed=shell.hoop_stress(8.6 * PSI, 56 * 25.4, 0.047 * 25.4) / PSI,
        unit="psi",
        rel=1e-5,
        route="closed form",
    )
    # Force on the end over the skin's section, the circle counted by its pieces.
    angle = np.linspace(0, 2 * np.pi, 200_001)
    area = np.sum(np.diff(angle)) / 2 * R**2
    outside(
        "Axial stress of a closed thin shell",
        source="Force on the end over the area of the skin",
        given="8.5 psi, R 1422.4 mm, t 1.2 mm",
        published=float(P * area / (2 * np.pi * R * T)),
        computed=shell.axial_stress(P, R, T),
        unit="MPa",
        rel=1e-9,
        route="closed form",
    )


def test_smeared_stresses_of_all_four_members():
    found = stiff.smeared_stresses(P, R, T, frames(), stringers(), NU)
    whole = P * R / T
    expected = {"skin, hoop": 0.80133, "skin, axial": 0.42148}
    expected |= {"frame": 0.66224, "stringer": 0.15704}
    got = (found.mean_hoop, found.axial, found.frame, found.stringer)
    for (member, share), stress in zip(expected.items(), got, strict=True):
        outside(
            f"Smeared frames and stringers: {member}",
            source="Equilibrium and equal strain of skin, frame and stringer by hand",
            given="frames 0.3 and stringers 0.5 of the skin, Poisson's ratio 0.33",
            published=share,
            computed=stress / whole,
            unit="p R/t",
            rel=1e-4,
            route="closed form",
        )


@given(st.floats(0, 2), st.floats(0, 2), st.floats(0, 0.5))
def test_the_pressure_is_carried_to_the_last_digit(frame, stringer, poisson):
    found = stiff.smeared_stresses(P, R, T, frames(frame), stringers(stringer), poisson)
    whole = P * R / T
    assert found.frame is not None
    assert found.mean_hoop + frame * found.frame == pytest.approx(whole, rel=1e-12)
    assert found.axial + stringer * found.stringer == pytest.approx(
        whole / 2, rel=1e-12
    )


def test_forgetting_poisson_is_four_per_cent_low():
    whole = P * R / T
    found = stiff.smeared_stresses(P, R, T, frames(), stringers(), NU)
    assert 1 / 1.3 / (found.mean_hoop / whole) == pytest.approx(0.96, abs=0.001)
    alone = stiff.smeared_stresses(P, R, T, frames(), stringers(0), NU)
    assert alone.mean_hoop / whole == pytest.approx(0.807, abs=5e-4)


def test_a_smeared_hoop_stress_is_refused_at_mid_bay():
    found = stiff.smeared_stresses(P, R, T, frames(), stringers(), NU)
    assert found.hoop(stiff.Place.MEAN) == found.mean_hoop
    with pytest.raises(InputError, match="unconservative"):
        found.hoop(stiff.Place.MID_BAY)


def test_floating_frames_give_no_relief():
    found = stiff.smeared_stresses(
        P, R, T, frames(attachment=FLOATING), stringers(0), NU
    )
    assert found.mean_hoop == pytest.approx(P * R / T)
    assert found.frame is None
    assert found.hoop(stiff.Place.MID_BAY) == found.mean_hoop
    with pytest.raises(InputError, match="floating"):
        stiff.hoop_between_frames(P, R, T, frames(attachment=FLOATING), NU)


def bay_by_collocation(pressure, ratio, pitch, axial):
    """Skin between two rings by a boundary-value solver: mid-bay, at frame, mean."""
    modulus = 72_000.0
    bending = modulus * T**3 / (12 * (1 - NU**2))
    load = pressure - NU * axial * T / R
    ring = modulus * ratio * pitch * T / (2 * R**2)

    def right(_, y):
        spring = load - modulus * T * y[0] / R**2
        return np.vstack((y[1], y[2], y[3], spring / bending))

    def ends(left, far):
        return np.array([left[1], left[3], far[1], bending * far[3] - ring * far[0]])

    x = np.linspace(0, pitch / 2, 201)
    found = solve_bvp(right, ends, x, np.zeros((4, x.size)), tol=1e-9)
    hoop = modulus * found.sol(x)[0] / R + NU * axial
    return hoop[0], hoop[-1], np.trapezoid(hoop, x) / (pitch / 2)


@pytest.mark.parametrize("pitch", [60.0, 150.0, 508.0])
@pytest.mark.parametrize("ratio", [0.1, 0.3, 1.0])
def test_hoop_between_frames_by_a_boundary_value_solver(pitch, ratio):
    axial = P * R / (2 * T)
    found = stiff.hoop_between_frames(P, R, T, frames(ratio, pitch), NU)
    mid, edge, mean = bay_by_collocation(P, ratio, pitch, axial)
    assert found.mid_bay == pytest.approx(mid, rel=1e-5)
    assert found.at_frame == pytest.approx(edge, rel=1e-5)
    # What the rings carry and the mean over the bay balance the pressure.
    assert mean + ratio * found.frame == pytest.approx(P * R / T, rel=1e-4)
    if (pitch, ratio) == (150.0, 0.3):
        outside(
            "Hoop stress at mid-bay between frames",
            source="Boundary-value solution of the same shell (SciPy)",
            given="8.5 psi, R 1422.4, t 1.2, frames 0.3 every 150 mm",
            published=float(mid),
            computed=found.mid_bay,
            unit="MPa",
            rel=1e-5,
            route="another method",
        )


def test_mid_bay_of_an_airliners_pitch_sees_the_whole_pressure():
    found = stiff.hoop_between_frames(P, R, T, frames(), NU)
    whole = P * R / T
    assert found.mid_bay == pytest.approx(whole, rel=0.005)
    assert found.at_frame < 0.5 * whole


@given(st.floats(0.05, 1.5), st.floats(1.01, 1.5))
def test_a_heavier_frame_relieves_the_skin_at_it(ratio, more):
    light = stiff.hoop_between_frames(P, R, T, frames(ratio), NU)
    heavy = stiff.hoop_between_frames(P, R, T, frames(ratio * more), NU)
    assert heavy.at_frame < light.at_frame


def test_close_frames_come_to_the_smeared_mean():
    axial = P * R / (2 * T)
    near = stiff.hoop_between_frames(P, R, T, frames(0.3, 10.0), NU, axial)
    mean = (P * R / T + NU * 0.3 * axial) / 1.3
    assert near.mid_bay == pytest.approx(mean, rel=1e-3)
    assert near.at_frame == pytest.approx(mean, rel=1e-3)


@given(st.floats(-200, 200), st.floats(-200, 200), st.floats(-150, 150))
def test_principal_stresses_are_the_eigenvalues(axial, hoop, shear):
    found = PlaneStress(axial, hoop, shear).principal()
    low, high = eigh(np.array([[axial, shear], [shear, hoop]]), eigvals_only=True)
    assert found.largest == pytest.approx(high, abs=1e-9)
    assert found.smallest == pytest.approx(low, abs=1e-9)


def test_published_plane_stress_example():
    # sx 80, sy -40, txy 25 of the usual classroom kind: 20 +- sqrt(60^2 + 25^2) = 65.
    found = PlaneStress(80, -40, 25).principal()
    for name, value, computed in (
        ("largest", 85.0, found.largest),
        ("smallest", -45.0, found.smallest),
        ("direction of the largest", 11.31, found.angle),
    ):
        outside(
            f"Principal stress: {name}",
            source="Mohr's circle with sides 60, 25, 65",
            given="80 along, -40 across, shear 25 MPa",
            published=value,
            computed=computed,
            unit="degrees" if "direction" in name else "MPa",
            rel=1e-4,
            route="closed form",
        )


@given(st.floats(-200, 200), st.floats(-200, 200), st.floats(-150, 150))
def test_a_crack_across_the_largest_stress_sees_it(axial, hoop, shear):
    point = PlaneStress(axial, hoop, shear)
    found = point.principal()
    crack = found.angle + 90 if found.angle <= 0 else found.angle - 90
    assert point.across(crack) == pytest.approx(found.largest, abs=1e-8)


def test_which_crack_sees_what():
    point = skin_point(70.0, 35.0, 25.0)
    assert point.across_crack("longitudinal") == 70.0
    assert point.across_crack("circumferential") == pytest.approx(60.0)
    assert point.principal().angle == pytest.approx(90.0)
    with pytest.raises(InputError, match="diagonal"):
        point.across_crack("diagonal")


@given(st.floats(0, 100))
def test_bending_never_adds_to_the_hoop_stress(bending):
    assert skin_point(70.0, 35.0, bending).hoop == 70.0
    assert skin_point(70.0, 35.0, bending).axial == 35.0 + bending


def test_equivalent_stress_of_a_pressurised_shell_is_below_its_hoop_stress():
    # Two to one: sqrt(1 - 1/2 + 1/4) = 0.866.
    assert PlaneStress(35, 70).von_mises == pytest.approx(70 * math.sqrt(0.75))


def test_one_cycle_from_ground_to_air():
    cycle = flight_cycle.ground_air_ground((-30.0, -45.0), (60.0, 99.0, 40.0))
    assert (cycle.maximum, cycle.ratio) == (99.0, pytest.approx(-45 / 99))
    pressure = flight_cycle.ground_air_ground((0.0,), (68.0,))
    assert (pressure.maximum, pressure.ratio) == (68.0, 0.0)
    with pytest.raises(InputError, match="needs tension"):
        flight_cycle.ground_air_ground((0.0,), (-5.0, 0.0))
    with pytest.raises(InputError, match="on the ground"):
        flight_cycle.ground_air_ground((), (68.0,))


@given(st.floats(0, 50), st.floats(1, 50))
def test_peak_to_ground_is_more_than_either_part(ground, gust):
    mean = 60.0
    whole = flight_cycle.ground_air_ground((-ground,), (mean - gust, mean + gust))
    assert whole.span == pytest.approx(max(mean + gust + ground, 2 * gust))
    assert whole.span > mean + ground


def test_the_standard_atmosphere_at_its_known_heights():
    for feet, hectopascal in ((0, 1013.25), (8000, 752.62), (35000, 238.42),
                              (40000, 187.54)):  # fmt: skip
        outside(
            "Pressure of the standard atmosphere",
            source="ICAO standard atmosphere table, as remembered",
            given=f"{feet:,} ft",
            published=hectopascal,
            computed=flight_cycle.standard_pressure(feet) * 1e4,
            unit="hPa",
            rel=1e-4,
            route="memory",
        )


def test_the_differential_is_not_the_cabins_pressure():
    held = flight_cycle.differential_pressure(8000, 39_000)
    assert held == pytest.approx(8.06 * PSI, rel=0.01)
    assert held < 0.8 * flight_cycle.standard_pressure(8000)
    assert flight_cycle.differential_pressure(0, 0) == 0
    with pytest.raises(OutOfRangeError):
        flight_cycle.differential_pressure(9000, 8000)


@given(st.floats(0, 64_000), st.floats(1, 900))
def test_pressure_falls_with_height_as_its_own_weight(altitude, step):
    # dp = -rho g dh, rho by the gas law at the temperature of the layer.
    here = flight_cycle.standard_pressure(altitude)
    above = flight_cycle.standard_pressure(altitude + step)
    height = (altitude + step / 2) * 0.3048
    temperature = max(288.15 - 0.0065 * height, 216.65)
    scale = 287.05287 * temperature / 9.80665
    assert above / here == pytest.approx(math.exp(-step * 0.3048 / scale), rel=1e-4)
