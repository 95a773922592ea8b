"""Cracks in a row: exact limits, a singular integral, and a published table."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import OutOfRangeError
from repairs.analysis.intensity import rows as cr
from repairs.analysis.intensity import through as si
from repairs.analysis.types import EdgeLength, HalfLength


def row(share: float) -> cr.CrackRow:
    """A row of pitch 100 mm with this part cracked."""
    return cr.CrackRow(HalfLength(50 * share), 100.0)


@pytest.mark.parametrize(
    ("share", "inner", "outer"),
    [
        (0.1, 1.0013, 1.0012),
        (0.3, 1.0138, 1.0102),
        (0.5, 1.0480, 1.0280),
        (0.7, 1.1333, 1.0579),
        (0.9, 1.4539, 1.1174),
    ],
)
def test_two_cracks_give_the_published_table(share, inner, outer):
    # Murakami, Stress Intensity Factors Handbook, two collinear cracks; from memory.
    found = cr.two_cracks(row(share))
    assert found.inner == pytest.approx(inner, abs=6e-5)
    assert found.outer == pytest.approx(outer, abs=6e-5)


@pytest.mark.parametrize("share", [0.2, 0.5, 0.8])
def test_two_cracks_agree_with_numerical_dislocations(share):
    # Second route: density of opening by Gauss-Chebyshev on the right crack, the left
    # one its mirror image. K follows from the density at the tips.
    n, half = 80, share / 2
    k = np.arange(1, n + 1)
    t = np.cos(np.pi * (2 * k - 1) / (2 * n))
    s = np.cos(np.pi * np.arange(1, n) / n)
    x, xi = 0.5 + half * s[:, None], 0.5 + half * t[None, :]
    kernel = np.vstack([(1 / (x - xi) - 1 / (x + xi)) * half, np.ones((1, n))]) / n
    density = np.linalg.solve(kernel, np.append(np.full(n - 1, -1.0), 0.0))
    ends = np.sin(np.pi * (2 * k - 1) / (4 * n) * (2 * n - 1))
    weight = ends / np.sin(np.pi * (2 * k - 1) / (4 * n))
    outer = float(weight @ density) / n
    inner = float(weight @ density[::-1]) / n
    found = cr.two_cracks(row(share))
    assert abs(outer) == pytest.approx(found.outer, rel=1e-6)
    assert abs(inner) == pytest.approx(found.inner, rel=1e-6)


@given(st.floats(0.01, 0.98))
def test_an_endless_row_raises_k_more_than_one_neighbour(share):
    both = cr.two_cracks(row(share))
    assert 1 <= both.outer <= both.inner <= cr.endless_row(row(share)) * (1 + 1e-9)


@given(st.floats(0.02, 0.9))
def test_an_endless_row_stays_below_the_strip_with_free_sides(share):
    # Tada's centre crack in a strip one pitch wide.
    free = si.centre_crack_tada(HalfLength(share / 2), 1.0)
    held = cr.endless_row(row(share))
    assert held <= free * 1.0005
    assert free <= 1.23 * held


def test_an_endless_row_at_half_its_pitch():
    # tan(pi/4) / (pi/4) = 4/pi, exactly.
    assert cr.endless_row(row(0.5)) == pytest.approx(math.sqrt(4 / math.pi), rel=1e-12)


def test_cracks_about_to_touch_become_one_crack_at_the_outer_tips():
    # One crack of twice the length: sqrt(2), approached slowly (logarithmically).
    assert cr.two_cracks(row(0.99)).outer < math.sqrt(2)
    assert cr.two_cracks(row(0.99)).outer > 1.17


@given(st.floats(0.05, 0.3), st.floats(0.05, 0.9))
def test_cracked_holes_of_a_row_bound_the_row_of_cracks(hole, part):
    # Long cracks from small holes: at least the row of cracks of the same tip to tip.
    c = EdgeLength((0.45 - hole / 2) * part)
    tip = HalfLength(hole / 2 + c)
    cracks = cr.endless_row(cr.CrackRow(tip, 1.0)) * math.sqrt(tip / c)
    if c > hole:
        assert cr.row_of_cracked_holes(c, hole, 1.0) > 0.99 * cracks
    alone = cr.row_of_cracked_holes(c, hole, 1e4)
    assert cr.row_of_cracked_holes(c, hole, 1.0) > alone


@pytest.mark.parametrize(
    "call",
    [
        lambda: cr.endless_row(row(1.0)),
        lambda: cr.two_cracks(row(math.nan)),
        lambda: cr.row_of_cracked_holes(EdgeLength(44), 10, 100),
    ],
)
def test_cracks_that_touch_are_refused(call):
    with pytest.raises(OutOfRangeError, match="outside"):
        call()
