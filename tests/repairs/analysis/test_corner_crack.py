"""Corner, bore and bending solutions against print, recomputation and limits."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import OutOfRangeError
from repairs.analysis.intensity import corner as cc
from repairs.analysis.intensity.part_through import PartThrough, corner_crack_at_hole

QUARTER_CIRCLE = 2.464  # 1 + 1.464


@pytest.mark.parametrize(
    ("depth", "surface", "middle", "face"),
    [
        (0.2, 1.1668, 1.0695, 1.1562),
        (0.5, 1.3313, 1.1367, 1.2608),
        (0.8, 1.5870, 1.2032, 1.3969),
    ],
)
def test_quarter_circle_in_a_wide_plate(depth, surface, middle, face):
    # F recomputed independently from the printed equations.
    crack = PartThrough(depth, depth, 1.0)
    for angle, expected in ((0, surface), (45, middle), (90, face)):
        found = cc.corner_crack(crack, 1e6, angle) * math.sqrt(QUARTER_CIRCLE)
        assert found == pytest.approx(expected, rel=1e-4)


def test_the_exponent_is_15():
    # a/c 0.4, a/t 0.5: F90 1.466 with 15; a public copy's 1.5 would give 1.946.
    crack = PartThrough(0.5, 1.25, 1.0)
    q = 1 + 1.464 * 0.4**1.65
    assert cc.corner_crack(crack, 1e6, 90) * math.sqrt(q) == pytest.approx(
        1.466, abs=6e-4
    )


def test_a_small_quarter_circle_is_near_the_penny_crack():
    # Exact 2/pi for a penny crack; two free surfaces raise it by 5 to 14 %.
    small = PartThrough(1e-3, 1e-3, 1.0)
    for angle in (10, 45, 80):
        assert 1.04 < cc.corner_crack(small, 1e3, angle) / (2 / math.pi) < 1.15


@given(st.floats(0.5, 1.9), st.floats(0.05, 0.9))
def test_a_narrow_plate_corner_swapped_end_for_end_is_the_same_crack(aspect, size):
    # Exchanging depth and length turns the crack over; the equations keep that within
    # their stated 5 % while the crack is small against both dimensions.
    small = 0.05 * size
    one = PartThrough(small * aspect, small, 1.0)
    other = PartThrough(small, small * aspect, 1.0)
    k_one = cc.corner_crack(one, 1e3, 80) * math.sqrt(one.depth)
    k_other = cc.corner_crack(other, 1e3, 10) * math.sqrt(other.depth)
    if aspect >= 0.5 and 1 / aspect <= 2:
        assert k_one == pytest.approx(k_other, rel=0.05)


def test_the_branches_meet_at_a_quarter_circle():
    for angle in (0, 45, 90):
        below = cc.corner_crack(PartThrough(0.5, 0.5000001, 1.0), 1e3, angle)
        above = cc.corner_crack(PartThrough(0.5, 0.4999999, 1.0), 1e3, angle)
        assert below == pytest.approx(above, rel=6e-3)


@pytest.mark.parametrize(("cracks", "k"), [(2, 5.31), (1, 5.24)])
def test_bore_crack_of_the_worksheet(cracks, k):
    # Public university worksheet: D 0.375, W 5, t 0.125, c 0.08, a 0.02 in, 8 ksi.
    # A check of the transcription: the same equations made both answers.
    crack = PartThrough(0.02, 0.08, 0.125)
    factor = cc.bore_crack(crack, 0.1875, 2.5, cracks=cracks)
    found = factor * 8 * math.sqrt(math.pi * 0.02)
    assert found == pytest.approx(k, abs=0.005)


def test_a_bore_crack_is_half_as_constrained_as_a_corner_crack():
    # Twice as long along the bore for the same a: never far from the corner crack.
    crack = PartThrough(0.2, 0.2, 1.0)
    bore = cc.bore_crack(crack, 1.0, 1e3)
    corner = corner_crack_at_hole(crack, 1.0, 1e3, 80)
    assert 0.7 < bore / corner < 1.1


@pytest.mark.parametrize(
    ("call", "aspect", "deepest", "surface"),
    [
        (cc.surface_bending, 1.0, 0.3225, 0.7750),
        (cc.surface_bending, 0.4, 0.4012, 0.8080),
        (cc.corner_bending, 1.0, 0.3450, 0.7750),
    ],
)
def test_bending_multipliers_at_half_depth(call, aspect, deepest, surface):
    # Recomputed independently from the transcribed equations.
    crack = PartThrough(0.5, 0.5 / aspect, 1.0)
    assert call(crack, 0) == pytest.approx(surface, abs=6e-5)
    assert call(crack, 90) == pytest.approx(deepest, abs=6e-5)


@given(st.floats(0.21, 1.99), st.floats(0.0, 90.0))
def test_bending_of_a_shallow_crack_is_tension(aspect, angle):
    # The outer-fibre stress does not fall off over a crack of no depth.
    shallow = PartThrough(1e-6, 1e-6 / aspect, 1.0)
    for call in (cc.surface_bending, cc.corner_bending):
        assert call(shallow, angle) == pytest.approx(1.0, abs=1e-5)


@given(st.floats(0.21, 1.99), st.floats(0.05, 0.7))
def test_the_deepest_point_feels_less_bending_the_deeper_it_is(aspect, depth):
    for call in (cc.surface_bending, cc.corner_bending):
        here = PartThrough(depth, depth / aspect, 1.0)
        more = PartThrough(depth * 1.1, depth * 1.1 / aspect, 1.0)
        assert call(more, 90) < call(here, 90) <= call(here, 0)


@pytest.mark.parametrize("call", [cc.surface_bending, cc.corner_bending])
@pytest.mark.parametrize("angle", [0, 45, 90])
def test_bending_branches_meet(call, angle):
    below = call(PartThrough(0.5, 0.5000001, 1.0), angle)
    above = call(PartThrough(0.5, 0.4999999, 1.0), angle)
    assert below == pytest.approx(above, abs=1e-5)


@pytest.mark.parametrize(
    "call",
    [
        lambda: cc.corner_crack(PartThrough(0.1, 0.4, 1.0), 1e3, 0),
        lambda: cc.corner_crack(PartThrough(0.5, 0.5, 1.0), 0.9, 0),
        lambda: cc.bore_crack(PartThrough(0.6, 0.7, 1.0), 1.0, 1e3),
        lambda: cc.bore_crack(PartThrough(0.4, 0.2, 1.0), 1.0, 1e3),
        lambda: cc.surface_bending(PartThrough(0.9, 0.9, 1.0), 0),
    ],
)
def test_outside_the_range_it_refuses(call):
    with pytest.raises(OutOfRangeError):
        call()
