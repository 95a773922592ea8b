"""Part-through cracks against finite-element tables and the published worksheet.

Raju and Newman's finite-element values are quoted from memory (tolerance 5 %); the
worksheet's corner crack (5.31, 5.24 for other forms) is not used here, because its
formula differs. Other values were recomputed independently from the printed equations.
"""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.special import ellipe

from repairs.analysis.errors import OutOfRangeError
from repairs.analysis.intensity.corner import corner_crack
from repairs.analysis.intensity.part_through import (
    PartThrough,
    corner_crack_at_hole,
    shape_factor,
    surface_crack,
)


@pytest.mark.parametrize(
    ("aspect", "depth", "surface", "deepest"),
    [
        (0.2, 0.2, 0.617, 1.173),
        (0.2, 0.4, 0.724, 1.359),
        (0.2, 0.6, 0.899, 1.642),
        (0.2, 0.8, 1.190, 1.851),
        (1.0, 0.2, 1.174, 1.049),
        (1.0, 0.4, 1.229, 1.062),
        (1.0, 0.6, 1.355, 1.107),
        (1.0, 0.8, 1.464, 1.112),
    ],
)
def test_surface_crack_against_finite_elements(aspect, depth, surface, deepest):
    crack = PartThrough(depth, depth / aspect, 1.0)
    q = 1 + 1.464 * aspect**1.65
    for angle, expected in ((0, surface), (90, deepest)):
        found = surface_crack(crack, 1e6, angle) * math.sqrt(q)
        assert found == pytest.approx(expected, rel=0.05)


def test_worked_surface_crack():
    # a 0.4, c 0.6, t 1.2, b 3 in, 20 ksi; K in ksi*sqrt(in), recomputed independently.
    crack = PartThrough(0.4, 0.6, 1.2)
    scale = 20 * math.sqrt(math.pi * 0.4)
    for angle, k in ((90, 19.155), (45, 17.869), (0, 17.813)):
        assert surface_crack(crack, 3, angle) * scale == pytest.approx(k, rel=1e-4)


def test_small_semicircle_is_the_exact_penny_crack_with_the_surface_correction():
    # Exact 2/pi for a penny crack, times 1.04 at the deepest point.
    found = surface_crack(PartThrough(1e-4, 1e-4, 1.0), 1e3, 90)
    assert found == pytest.approx(2 / math.pi * 1.04, rel=1e-3)


@pytest.mark.parametrize(
    ("cracks", "angle", "factor"),
    [
        (1, 5, 1.3449),
        (1, 45, 1.2616),
        (1, 80, 1.5961),
        (1, 90, 1.8057),
        (2, 5, 1.4133),
        (2, 45, 1.3258),
        (2, 80, 1.6773),
        (2, 90, 1.8974),
    ],
)
def test_corner_crack_at_a_hole(cracks, angle, factor):
    # a = c = 0.05, r 0.09375, t 0.09, b 20 in; recomputed independently.
    crack = PartThrough(0.05, 0.05, 0.09)
    found = corner_crack_at_hole(crack, 0.09375, 20, angle, cracks=cracks)
    assert found == pytest.approx(factor, rel=1e-4)


@given(st.floats(0.21, 1.99))
def test_q_is_the_square_of_the_elliptic_integral(aspect):
    # Exact for an ellipse in a large body; the report states 0.13 %.
    flat = min(aspect, 1 / aspect)
    exact = float(ellipe(1 - flat**2)) ** 2
    assert shape_factor(aspect, 0.0)[0] == pytest.approx(exact, rel=1.5e-3)


@given(st.floats(0.21, 1.99), st.floats(0.0, 90.0))
def test_a_shallow_surface_crack_is_the_buried_ellipse_and_a_little_more(aspect, angle):
    # Exact K of the ellipse (Irwin) under S: f_phi sqrt(c/a) if deep, over E(k). The
    # free surface adds nothing to a quarter, over the full range of a/c.
    q, bow = shape_factor(aspect, math.radians(angle))
    buried = bow * (math.sqrt(1 / aspect) if aspect > 1 else 1.0) / math.sqrt(q)
    found = surface_crack(PartThrough(1e-4, 1e-4 / aspect, 1.0), 1e3, angle)
    assert 1.0 <= found / buried <= 1.25


@pytest.mark.parametrize("aspect", [1.25, 2.0])
def test_a_deep_narrow_surface_crack_opens_most_at_its_surface_end(aspect):
    # K of an ellipse is largest on its short axis; a/c > 1 puts that at the surface.
    crack = PartThrough(0.4, 0.4 / aspect, 1.0)
    surface = surface_crack(crack, 1e3, 10)
    assert surface > surface_crack(crack, 1e3, 90)


@given(st.floats(1.01, 1.99), st.floats(0.01, 0.05), st.sampled_from([10, 80]))
def test_a_small_deep_crack_at_a_large_hole_is_a_plate_corner_in_three_times_the_stress(
    aspect, depth, angle
):
    # Another published solution, over the branch a/c > 1; the hole's stress falls off
    # along the crack, so up to a tenth less.
    crack = PartThrough(depth, depth / aspect, 1.0)
    at_hole = corner_crack_at_hole(crack, 3.0, 1e4, angle, cracks=2)
    assert 0.9 < at_hole / (3 * corner_crack(crack, 1e4, angle)) < 1.0


@given(st.floats(0.3, 2.0), st.floats(0.05, 0.95))
def test_branches_meet_and_one_crack_is_below_two(aspect, depth):
    shallow = PartThrough(depth, depth / aspect, 1.0)
    both = corner_crack_at_hole(shallow, 2.0, 1e4, 80, cracks=2)
    one = corner_crack_at_hole(shallow, 2.0, 1e4, 80, cracks=1)
    assert one <= both
    # The published series meet within 0.6 % at a/c = 1, not exactly.
    below = PartThrough(depth, depth * 1.0000001, 1.0)
    above = PartThrough(depth, depth * 0.9999999, 1.0)
    for angle in (10, 80):
        assert corner_crack_at_hole(below, 2.0, 1e4, angle) == pytest.approx(
            corner_crack_at_hole(above, 2.0, 1e4, angle), rel=6e-3
        )


@pytest.mark.parametrize(
    "call",
    [
        lambda: surface_crack(PartThrough(0.1, 1.0, 1.0), 1e3, 0),
        lambda: surface_crack(PartThrough(1.1, 1.1, 1.0), 1e3, 0),
        lambda: corner_crack_at_hole(PartThrough(0.5, 0.5, 1.0), 4.0, 1e3, 80),
        lambda: corner_crack_at_hole(PartThrough(0.5, 0.5, 1.0), 2.0, 4.0, 80),
    ],
)
def test_outside_the_range_it_refuses(call):
    with pytest.raises(OutOfRangeError):
        call()
