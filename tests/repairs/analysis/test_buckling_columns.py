"""Columns, sheet between rivets, crippling and loads together."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import quad
from scipy.linalg import eigh_tridiagonal

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.strength import buckling, columns, crippling, interaction
from repairs.analysis.strength.crippling import Angle, Family, FreeEdges
from repairs.analysis.types import Grade
from tests.outside import outside
from tests.repairs.analysis.plates import (
    BENT,
    COMPRESSED,
    SHEARED,
    buckling_coefficient,
)

E, NU = 73_800.0, 0.33
PARABOLA = "plate: compression and shear"
CIRCLE = "plate: bending and shear"


def pinned_by_differences(modulus: float, inertia: float, length: float) -> float:
    """Least buckling load of a pinned strut by finite differences."""
    count = 2000
    step = length / count
    main, off = np.full(count - 1, 2.0), np.full(count - 2, -1.0)
    least = eigh_tridiagonal(main, off, select="i", select_range=(0, 0))[0][0]
    return modulus * inertia * float(least) / step**2


def test_euler_by_finite_differences():
    gyration, area = 8.0, 200.0
    load = pinned_by_differences(E, area * gyration**2, 500)
    outside(
        "Euler column, pinned",
        source="Finite differences, 2000 steps (SciPy)",
        given="E 73.8 GPa, radius of gyration 8, length 500 mm",
        published=load / area,
        computed=columns.euler_stress(E, gyration, 500, 1),
        unit="MPa",
        rel=1e-5,
        route="another method",
    )


@pytest.mark.parametrize(
    ("ends", "fixity"), [("pinned", 1.0), ("clamped", 4.0), ("one end free", 0.25)]
)
def test_end_fixity_against_half_waves(ends, fixity):
    # Length of the equivalent pinned strut: L, L/2, 2L.
    equivalent = {"pinned": 1.0, "clamped": 0.5, "one end free": 2.0}[ends]
    outside(
        "Euler column, end fixity",
        source="Length between inflexions of the exact shape",
        given=ends,
        published=math.pi**2 * E / (500 * equivalent / 8) ** 2,
        computed=columns.euler_stress(E, 8, 500, fixity),
        unit="MPa",
        rel=1e-12,
        route="closed form",
    )


def test_johnson_column_of_a_text_book():
    # 80 x 30 mm bar of 380 mm, pinned and fixed (0.8 L), yield 290, E 207 GPa.
    stress = columns.column_stress(207_000, 30 / math.sqrt(12), 380, 1 / 0.64, 290)
    outside(
        "Johnson column",
        source="Mott, Machine Elements, example on a short column, as remembered",
        given="80 x 30 bar, 380 mm, pinned and fixed, yield 290, E 207 GPa",
        published=665.0,
        computed=stress * 2400 / 1000,
        unit="kN",
        rel=0.003,
        route="memory",
    )


def test_johnson_meets_euler_at_half_the_crippling_stress():
    slender = math.pi * math.sqrt(2 * E / 240)
    outside(
        "Johnson column at its transition",
        source="Tangent point of parabola and Euler's curve, by hand",
        given="crippling 240 MPa, E 73.8 GPa, L/rho = pi sqrt(2E/Fcc)",
        published=120.0,
        computed=columns.column_stress(E, 1.0, slender, 1, 240),
        unit="MPa",
        rel=1e-9,
        route="closed form",
    )
    printed = 240 * (1 - 240 * 40**2 / (4 * math.pi**2 * E))
    assert columns.column_stress(E, 1.0, 40, 1, 240) == pytest.approx(printed)


@given(st.floats(100, 2000), st.floats(1.01, 1.5), st.floats(0.5, 0.99))
def test_longer_or_cripplier_columns_are_weaker(length, more, share):
    here = columns.column_stress(E, 8, length, 1, 240)
    assert columns.column_stress(E, 8, length * more, 1, 240) < here
    assert columns.column_stress(E, 8, length, 1, 240 * share) <= here


@given(st.floats(20, 300), st.floats(5, 40))
def test_the_tangent_is_the_slope_of_the_curve(stress, shape):
    # Strain back by integrating 1/E_t: sigma/E + 0.002 (sigma/Fcy)^n.
    strain, _ = quad(lambda s: 1 / columns.tangent_modulus(s, E, 300, shape), 0, stress)
    exact = stress / E + 0.002 * (stress / 300) ** shape
    assert strain == pytest.approx(exact, rel=1e-6)


@pytest.mark.parametrize("stress", [200.0, 320.0])
def test_the_tangent_modulus_by_differences_of_the_curve(stress):
    def strain(at: float) -> float:
        return at / E + 0.002 * (at / 300) ** 12

    step = 1e-3
    outside(
        "Tangent modulus",
        source="Stress over strain of the Ramberg-Osgood curve, by differences",
        given=f"E 73.8 GPa, F_cy 300, n 12, at {stress:g} MPa",
        published=2 * step / (strain(stress + step) - strain(stress - step)),
        computed=columns.tangent_modulus(stress, E, 300, 12),
        unit="MPa",
        rel=1e-5,
        route="closed form",
    )


def test_two_points_of_a_handbook_curve_give_a_handbook_yield():
    # 7050-T7451, E_c 10.6 Msi: E_t 10.3 at 45.7 and 9.25 at 51.2 ksi (MIL-HDBK-5J
    # curve, quoted in a public note) fix n and F_cy; from memory it yields at 64 ksi.
    shape = 1 + math.log((10.6 / 9.25 - 1) / (10.6 / 10.3 - 1)) / math.log(51.2 / 45.7)
    bend = (10.6 / 10.3 - 1) / (0.002 * shape * 10_600 * 45.7 ** (shape - 1))
    yield_ = bend ** (-1 / shape)
    assert yield_ == pytest.approx(64, rel=0.05)
    back = columns.tangent_modulus(51.2, 10_600, yield_, shape)
    assert back == pytest.approx(9_250, rel=1e-6)


@given(st.floats(10, 3000), st.floats(8, 40))
def test_the_tangent_stress_solves_its_equation(elastic, shape):
    found = columns.tangent_stress(elastic, E, 300, shape)
    assert found <= min(elastic, 300)
    if found < 300 * (1 - 1e-9):
        slope = columns.tangent_modulus(found, E, 300, shape)
        assert found == pytest.approx(elastic * slope / E, rel=1e-6)


@pytest.mark.parametrize("share", [0.5, 0.75, 1.0, 1.5, 2.0])
def test_the_parabola_stands_in_for_the_tangent_modulus(share):
    # n about 10 of sheet: within 4 %, over the whole range of stocky plates.
    with_n = columns.tangent_stress(share * 300, E * 300 / 320, 300, 10)
    assert buckling.johnson(share * 300, 300) == pytest.approx(with_n, rel=0.04)


def test_sheet_between_rivets():
    for fixity, stress in ((4, 28.09), (3, 21.07), (1, 7.023)):
        outside(
            "Buckling between rivets",
            source="Wide column of sheet, by hand",
            given=f"E 10.7 Msi, t 0.040, pitch 1.5 in, nu 0.33, c {fixity}",
            published=stress,
            computed=columns.inter_rivet_stress(10_700, 0.33, 0.040, 1.5, fixity, 1e3),
            unit="ksi",
            rel=3e-4,
            route="closed form",
        )


def test_sheet_between_rivets_is_a_plate_with_free_sides():
    # Short and very wide between its loaded ends: k a long strip's, by energy.
    exact = buckling_coefficient(0.05, "SS", "FF", COMPRESSED, NU, (4, 6)) * 0.05**2
    plate = exact * math.pi**2 * E / (12 * (1 - NU**2)) * (1 / 30) ** 2
    outside(
        "Buckling between rivets, pinned",
        source="Energy solution of a wide plate, free sides",
        given="t 1, pitch 30 mm, c 1",
        published=plate,
        computed=columns.inter_rivet_stress(E, NU, 1, 30, 1, 1e4),
        unit="MPa",
        rel=0.01,
        route="another method",
    )


def test_the_largest_pitch_that_still_yields():
    # 0.9 c E (t/p)^2, which is nu = 0.29354: p/t = sqrt(0.9 4 10700/37) = 32.27.
    nu = math.sqrt(1 - math.pi**2 / 12 / 0.9)
    found = columns.inter_rivet_stress(10_700, nu, 1, 32.27, 4, 1e3)
    assert found == pytest.approx(37, rel=1e-3)


@given(st.floats(0.5, 2), st.floats(15, 60), st.floats(0.5, 0.99))
def test_thinner_sheet_or_wider_pitch_buckles_sooner(thickness, pitch, share):
    def stress(t: float, p: float, n: float | None = None) -> float:
        return columns.inter_rivet_stress(E, NU, t, p, 3, 280, n)

    assert stress(thickness * share, pitch) < stress(thickness, pitch)
    assert stress(thickness, pitch / share) < stress(thickness, pitch)
    assert stress(thickness, pitch, 12.0) <= 280
    assert stress(thickness * share, pitch, 12.0) <= stress(thickness, pitch, 12.0)


def test_published_fixities_disagree_and_are_kept_apart():
    universal = {f.value for f in columns.RIVET_FIXITY["universal head"]}
    assert universal == {3.0, 4.0}
    assert min(f.value for f in columns.RIVET_FIXITY["countersunk, shear head"]) == 1
    assert all(
        f.grade is Grade.QUOTED
        for kinds in columns.RIVET_FIXITY.values()
        for f in kinds
    )


@pytest.mark.parametrize(
    ("thickness", "needham", "gerard"), [(0.063, 34.89, 32.32), (0.0567, 32.17, 29.47)]
)
def test_crippling_of_an_angle_by_two_methods(thickness, needham, gerard):
    # 1 x 1 in outside, legs to centre lines; Fcy 70, E 10.5 Msi.
    leg = 1 - thickness / 2
    angle = Angle(leg, leg, thickness, FreeEdges.TWO)
    ours = crippling.needham(angle, 10_500, 70)
    given_ = f"1 x 1 angle, t {thickness} in, Fcy 70, Ec 10500 ksi"
    outside(
        "Crippling by Needham",
        source="Needham's formula by hand",
        given=given_,
        published=needham,
        computed=ours,
        unit="ksi",
        rel=1e-3,
        route="closed form",
    )
    area = 2 * leg * thickness
    other = crippling.gerard(Family.ANGLE, area, thickness, 10_500, 70)
    outside(
        "Crippling by Needham",
        source="Gerard's formula for angles",
        given=given_,
        published=gerard,
        computed=ours,
        unit="ksi",
        rel=0.10,
        route="another method",
    )
    assert other == pytest.approx(gerard, rel=2e-3)


def test_crippling_of_a_z_by_two_methods():
    # h 1.25, f 0.75, t 0.05 in on centre lines 1.20 and 0.725.
    zed = (Angle(0.6, 0.725, 0.05, FreeEdges.ONE),) * 2
    ours = crippling.needham_section(zed, 10_500, 70)
    other = crippling.gerard(Family.TWO_CORNERS, 0.1325, 0.05, 10_500, 70)
    for source, value, rel, route in (
        ("Needham's formula by hand, centre lines", 42.22, 1e-4, "closed form"),
        ("Gerard's formula for two corners, by hand", 39.91, 0.06, "another method"),
    ):
        outside(
            "Crippling of a Z",
            source=source,
            given="1.25 x 0.75 x 0.05 in, Fcy 70, Ec 10500 ksi",
            published=value,
            computed=ours,
            unit="ksi",
            rel=rel,
            route=route,
        )
    assert other == pytest.approx(39.91, rel=1e-3)
    outside_lengths = (Angle(0.625, 0.75, 0.05, FreeEdges.ONE),) * 2
    assert crippling.needham_section(outside_lengths, 10_500, 70) == pytest.approx(
        41.06, abs=0.01
    )


def test_a_blended_leg_costs_a_sixth_of_the_load():
    def load(t: float) -> float:
        angle = Angle(0.9685, 0.9685, t, FreeEdges.TWO)
        return crippling.needham(angle, 10_500, 70) * angle.area

    assert load(0.9 * 0.063) / load(0.063) == pytest.approx(0.9**1.75, rel=1e-9)
    assert load(0.9 * 0.063) / load(0.063) == pytest.approx(0.832, abs=5e-4)


@given(st.floats(10, 40), st.floats(0.8, 2), st.floats(0.6, 0.99))
def test_thinner_legs_cripple_sooner(leg, thickness, share):
    def stress(t: float) -> float:
        return crippling.needham(Angle(leg, leg, t, FreeEdges.TWO), E, 300)

    assert stress(thickness * share) <= stress(thickness) <= 300
    for family in Family:
        area = 2 * leg * thickness
        whole = crippling.gerard(family, area, thickness, E, 300)
        thin = crippling.gerard(family, area * share, thickness * share, E, 300)
        assert thin <= whole <= 300


def test_free_edges_cost_strength_and_the_cut_off_is_from_memory():
    by_edges = [crippling.needham(Angle(20, 20, 1, e), E, 300) for e in FreeEdges]
    assert by_edges == sorted(by_edges)
    assert crippling.largest_crippling(Family.ANGLE, 300) == pytest.approx(210)
    assert crippling.CUT_OFF.grade is Grade.MEMORY
    with pytest.raises(OutOfRangeError, match="formed angles"):
        crippling.needham(Angle(2, 2, 1, FreeEdges.TWO), E, 300)
    with pytest.raises(InputError, match="No angle"):
        crippling.needham_section((), E, 300)


def test_margin_of_the_parabola_in_closed_form():
    for rc, rs in ((0.5, 0.5), (0.2, 0.8), (0.9, 0.1)):
        outside(
            "Margin of compression and shear together",
            source="2/(Rc + sqrt(Rc^2 + 4 Rs^2)) - 1, the root of the parabola",
            given=f"Rc {rc}, Rs {rs}",
            published=2 / (rc + math.sqrt(rc**2 + 4 * rs**2)) - 1,
            computed=interaction.combined_margin(PARABOLA, rc, rs),
            rel=1e-9,
            route="closed form",
        )
    assert interaction.combined_margin(CIRCLE, 0.3, 0.4) == pytest.approx(1.0)
    assert interaction.combined_margin("any: straight line", 0.3, 0.2) == pytest.approx(
        1
    )


@pytest.mark.parametrize("share", [0.3, 0.6, 0.9])
@pytest.mark.parametrize("ratio", [1.0, 2.0])
def test_the_parabola_by_energy(ratio, share):
    kc = buckling_coefficient(ratio, "SS", "SS", COMPRESSED)
    ks = buckling_coefficient(ratio, "SS", "SS", SHEARED)
    together = buckling_coefficient(
        ratio, "SS", "SS", (kc * share, 0, ks * (1 - share))
    )
    outside(
        "Plate under compression and shear",
        source="Energy solution under both loads",
        given=f"a/b {ratio:g}, compression {share:g}, shear {1 - share:g} of its own",
        published=together,
        computed=1 + interaction.combined_margin(PARABOLA, share, 1 - share),
        rel=0.005,
        route="another method",
    )


@pytest.mark.parametrize(("ratio", "high"), [(1.0, 1.05), (2.0, 1.015), (4.0, 1.0)])
def test_the_circle_by_energy_is_high_for_a_square_web(ratio, high):
    terms = (18, 7)
    kb = buckling_coefficient(ratio, "SS", "SS", BENT, terms=terms)
    ks = buckling_coefficient(ratio, "SS", "SS", SHEARED, terms=terms)
    together = buckling_coefficient(
        ratio, "SS", "SS", (0, 0.6 * kb, 0.4 * ks), terms=terms
    )
    circle = 1 + interaction.combined_margin(CIRCLE, 0.6, 0.4)
    assert 0.95 * together < circle < high * together * 1.001


ratios = st.one_of(st.just(0.0), st.floats(1e-6, 0.9))


@given(ratios, ratios, st.floats(1.01, 1.5))
def test_more_of_either_load_leaves_less(first, second, more):
    for name in interaction.INTERACTIONS:
        here = interaction.combined_margin(name, first, second)
        assert interaction.combined_margin(name, first * more, second) <= here
        assert interaction.combined_margin(name, first, second * more) <= here
        straight = interaction.combined_margin("any: straight line", first, second)
        assert straight <= here * (1 + 1e-9) + 1e-9


def test_interactions_say_what_they_are():
    with pytest.raises(InputError, match="No form is called"):
        interaction.interaction("plate: torsion")
    assert interaction.combined_margin(PARABOLA, 0, 0) == math.inf
    assert interaction.interaction(CIRCLE).reference.grade is Grade.MEMORY


def test_a_strut_with_end_moments_against_its_deflected_shape():
    # M sec(pi/2 sqrt(P/Pe)) from w'' = -(M + P w)/EI, solved in the middle.
    modulus, inertia, length, moment = 70_000.0, 5_000.0, 600.0, 20_000.0
    euler = math.pi**2 * modulus * inertia / length**2
    for share in (0.2, 0.5, 0.8):
        load = share * euler
        x = np.linspace(0, length, 4001)
        k = math.sqrt(load / (modulus * inertia))
        sag = moment / load * (
            np.cos(k * (x - length / 2)) / math.cos(k * length / 2) - 1
        )  # fmt: skip
        curvature = np.gradient(np.gradient(sag, x), x)[2000]
        peak = -modulus * inertia * curvature
        grown = peak / moment
        # Margin 0 when R_c + R_b grown = 1.
        axial = 0.3
        bending = (1 - axial) / grown
        outside(
            "Compression with bending",
            source="Deflected shape of the strut, curvature by differences",
            given=f"equal end moments, thrust {share:g} of Euler's",
            published=0.0,
            computed=interaction.beam_column_margin(axial, bending, share),
            absolute=1e-4,
            route="closed form",
        )
    assert interaction.beam_column_margin(0, 0, 0) == math.inf
    assert interaction.beam_column_margin(0.5, 0, 0) == pytest.approx(1)
    assert interaction.beam_column_margin(0.25, 0.25, 0) == pytest.approx(1)


@given(st.floats(0, 1), st.floats(0.01, 1), st.floats(0, 2))
def test_thrust_never_helps(axial, bending, over_euler):
    found = interaction.beam_column_margin(axial, bending, over_euler)
    assert found <= interaction.beam_column_margin(axial, bending, 0) + 1e-9
    if over_euler > 0:
        assert found < 1 / over_euler - 1 + 1e-9
