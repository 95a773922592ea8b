"""Section properties: closed forms, an independent library, cuts, shifted loads."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.strength import torsion
from repairs.analysis.strength.section import (
    Rectangle,
    Section,
    fibre_stress,
    properties,
)
from tests.outside import outside

LIBRARY = "sectionproperties 3.10.2, finite elements"
ANGLE = Section((Rectangle(0, 10, 0, 100), Rectangle(10, 80, 0, 10)))
ZED = Section(
    (
        Rectangle(-17.73, 1.27, 28.73, 30),
        Rectangle(0, 1.27, 1.27, 28.73),
        Rectangle(0, 19, 0, 1.27),
    )
)
THINNED = Rectangle(-1, 20, -1, 0.37)
sizes = st.floats(1, 100)


def test_a_rectangle_in_closed_form():
    got = properties(Section((Rectangle(0, 30, 0, 80),)))
    assert (got.area, got.x, got.y) == (2400, 15, 40)
    assert got.ixx == pytest.approx(30 * 80**3 / 12)
    assert got.iyy == pytest.approx(80 * 30**3 / 12)
    assert got.ixy == pytest.approx(0, abs=1e-6)
    assert got.least_gyration == pytest.approx(30 / math.sqrt(12))


@pytest.mark.parametrize(
    ("given_", "section", "values"),
    [
        (
            "angle 100 x 80 x 10 mm",
            ANGLE,
            (1700, 21.4705882, 31.4705882, 1672990.196, 952990.196, -741176.471,
             489010.487),
        ),
        (
            "Z 30 x 19 x 1.27 mm",
            ZED,
            (83.1342, 0.635, 15.0, 12156.50538, 5249.176788, -6145.704689,
             1653.196895),
        ),
        (
            "the Z with its lower flange thinned to 0.9 mm",
            ZED.without(THINNED),
            (76.1042, -0.18388976, 16.3685112, 10470.92139, 4434.181745,
             -5137.132896, 1494.305954),
        ),
    ],
)  # fmt: skip
def test_unsymmetric_sections_by_an_independent_library(given_, section, values):
    got = properties(section)
    found = (got.area, got.x, got.y, got.ixx, got.iyy, got.ixy, got.principal[1])
    names = ("area", "centroid x", "centroid y", "I_xx", "I_yy", "I_xy", "least I")
    units = ("mm²", "mm", "mm", "mm⁴", "mm⁴", "mm⁴", "mm⁴")
    for name, unit, value, ours in zip(names, units, values, found, strict=True):
        outside(
            f"Section property: {name}",
            source=LIBRARY,
            given=given_,
            published=value,
            computed=ours,
            unit=unit,
            rel=1e-6,
            route="library",
        )


def test_bending_stress_of_unsymmetric_sections_by_the_library():
    for given_, section, force, moments, high, low in (
        ("angle, 1 kN m", ANGLE, 0.0, (1e6, 0.0), 54.359894, -43.927872),
        ("angle, 10 kN, 1 and 0.2 kN m", ANGLE, 1e4, (1e6, -2e5), 54.193982,
         -26.706705),
        ("thinned Z, 100 N m", ZED.without(THINNED), 0.0, (-1e5, 0.0), 349.282534,
         -338.891647),
    ):  # fmt: skip
        got = fibre_stress(section, force, *moments)
        for name, value, ours in (
            ("largest", high, got.largest),
            ("smallest", low, got.smallest),
        ):
            outside(
                f"Fibre stress of an unsymmetric section: {name}",
                source=LIBRARY,
                given=given_,
                published=value,
                computed=ours,
                unit="MPa",
                rel=1e-5,
                route="library",
            )


@given(sizes, sizes, sizes, sizes)
def test_second_moments_do_not_care_how_a_rectangle_is_cut_up(w, h, u, v):
    whole = properties(Section((Rectangle(0, w + u, 0, h + v),)))
    parts = properties(
        Section(
            (
                Rectangle(0, w, 0, h),
                Rectangle(w, w + u, 0, h),
                Rectangle(0, w + u, h, h + v),
            )
        )
    )
    for name in ("area", "x", "y", "ixx", "iyy"):
        assert getattr(parts, name) == pytest.approx(getattr(whole, name))
    assert parts.ixy == pytest.approx(0, abs=1e-9 * whole.ixx)


@given(st.floats(0, 1), st.floats(0, 1), st.floats(0.01, 1), st.floats(0.01, 1))
def test_what_is_cut_and_what_is_left_make_the_whole(x, y, w, h):
    whole = Rectangle(0, 1, 0, 1)
    cut = Rectangle(x, x + w, y, y + h)
    lost = max(min(x + w, 1) - x, 0) * max(min(y + h, 1) - y, 0)
    left = list(whole.without(cut))
    assert sum(part.area for part in left) == pytest.approx(1 - lost, abs=1e-12)
    assert not any(part.overlaps(cut) for part in left)


def test_a_removed_flange_moves_the_neutral_axis():
    tee = Section((Rectangle(-20, 20, 38, 40), Rectangle(-1, 1, 0, 38)))
    left = tee.without(Rectangle(1, 20, 38, 40))
    before, after = properties(tee), properties(left)
    assert after.area == before.area - 38
    assert after.y < before.y
    assert after.x < before.x == 0
    assert after.ixy != 0
    assert after.principal[1] < min(after.ixx, after.iyy)


def test_one_sided_loss_bends_a_free_strip():
    # t 1.6, d 0.16: t/(t-d) (1 + 3d/(t-d)) = 1.4815, the load on its old line.
    strip = Section((Rectangle(0, 50, 0, 1.6),))
    left = strip.without(Rectangle(0, 50, 1.44, 1.6))
    one_sided = fibre_stress(left, 8000.0, at=(25, 0.8)).largest / 100
    outside(
        "One-sided loss of thickness, free strip",
        source="Force and moment on the strip left, by hand",
        given="t 1.6, loss 0.16 mm",
        published=1.4815,
        computed=one_sided,
        unit="of the whole strip's stress",
        rel=1e-4,
        route="closed form",
    )
    even = fibre_stress(left, 8000.0).largest / 100
    outside(
        "Even loss of thickness",
        source="Force over area, by hand",
        given="t 1.6, loss 0.16 mm",
        published=1.1111,
        computed=even,
        unit="of the whole strip's stress",
        rel=1e-4,
        route="closed form",
    )


@given(st.floats(-1e4, 1e4), st.floats(-1e5, 1e5), st.floats(-1e5, 1e5))
def test_stresses_carry_exactly_the_load_put_on(force, moment_x, moment_y):
    # Integrate the plane of stress over the section: force and both moments return.
    own = properties(ZED)
    along_x, along_y = own.stress_slopes(moment_x, moment_y)
    back_x = along_x * own.ixy + along_y * own.ixx
    back_y = along_x * own.iyy + along_y * own.ixy
    scale = abs(moment_x) + abs(moment_y) + 1e-9
    assert back_x == pytest.approx(moment_x, abs=1e-12 * scale)
    assert back_y == pytest.approx(moment_y, abs=1e-12 * scale)
    got = fibre_stress(ZED, force, moment_x, moment_y)
    assert got.smallest <= force / own.area + 1e-9
    assert got.largest >= force / own.area - 1e-9


def test_bad_sections_are_refused():
    with pytest.raises(InputError, match="overlap"):
        Section((Rectangle(0, 2, 0, 2), Rectangle(1, 3, 0, 2)))
    with pytest.raises(InputError, match="smaller"):
        Rectangle(2, 1, 0, 1)
    with pytest.raises(InputError, match="Nothing is left"):
        Section((Rectangle(0, 1, 0, 1),)).without(Rectangle(-1, 2, -1, 2))


def test_a_closed_box_in_torsion():
    # Middle line 58.5 x 38.5.
    walls = (torsion.Wall(58.5, 1.5), torsion.Wall(38.5, 1.5)) * 2
    got = torsion.closed_torsion(1e5, 58.5 * 38.5, walls)
    outside(
        "Torsion constant of a closed thin box",
        source=LIBRARY,
        given="60 x 40 x 1.5 mm outside",
        published=159240.3,
        computed=got.constant,
        unit="mm⁴",
        rel=0.02,
        route="library",
    )
    assert got.stress == pytest.approx(1e5 / (2 * 58.5 * 38.5 * 1.5))


def test_a_thin_tube_against_the_exact_circle():
    radius, t = 50.0, 1.0
    walls = (torsion.Wall(2 * math.pi * radius, t),)
    got = torsion.closed_torsion(1e6, math.pi * radius**2, walls)
    outer, inner = radius + t / 2, radius - t / 2
    exact = math.pi / 2 * (outer**4 - inner**4)
    for name, unit, value, ours in (
        ("constant", "mm⁴", exact, got.constant),
        ("shear stress", "MPa", 1e6 * radius / exact, got.stress),
    ):
        outside(
            f"Torsion of a thin round tube: {name}",
            source="Exact solution of the hollow circle, on its middle line",
            given="radius 50, t 1 mm, 1 kN m",
            published=value,
            computed=ours,
            unit=unit,
            rel=5e-4,
            route="closed form",
        )


def test_open_sections_in_torsion_by_the_library():
    for given_, walls, value in (
        ("strip 100 x 2 mm", (torsion.Wall(100, 2),), 263.333),
        ("angle 40 x 40 x 2 mm", (torsion.Wall(39, 2),) * 2, 205.937),
    ):
        got = torsion.open_torsion(1e3, walls)
        outside(
            "Torsion constant of an open section",
            source=LIBRARY,
            given=given_,
            published=value,
            computed=got.constant,
            unit="mm⁴",
            rel=0.015,
            route="library",
        )
        assert got.stress == pytest.approx(1e3 * 2 / got.constant)


def test_a_slit_box_loses_nearly_all_of_its_stiffness():
    walls = (torsion.Wall(58.5, 1.5), torsion.Wall(38.5, 1.5)) * 2
    closed = torsion.closed_torsion(1e5, 58.5 * 38.5, walls)
    slit = torsion.open_torsion(1e5, walls)
    assert slit.constant < closed.constant / 500
    assert slit.stress > 20 * closed.stress


@given(st.floats(0.5, 2), st.floats(0.5, 0.99))
def test_a_thinner_wall_is_stressed_more(thickness, share):
    def stress(t: float) -> float:
        walls = (torsion.Wall(60, t), torsion.Wall(40, 2)) * 2
        return torsion.closed_torsion(1e5, 2400, walls).stress

    assert stress(thickness * share) > stress(thickness)


def test_thick_walls_are_refused():
    with pytest.raises(OutOfRangeError, match="thin wall"):
        torsion.open_torsion(1e3, (torsion.Wall(9, 1),))
    with pytest.raises(InputError, match="no wall"):
        torsion.closed_torsion(1e3, 100, ())
