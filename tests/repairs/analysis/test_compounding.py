"""Compounding against solutions that hold both boundaries."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.intensity import holes as hi
from repairs.analysis.intensity import rows as cr
from repairs.analysis.intensity import through as si
from repairs.analysis.intensity.compounding import Boundary, compound
from repairs.analysis.types import EdgeLength, HalfLength


def test_two_weak_boundaries_of_the_public_notes():
    # 1.2 and 1.1: 1.30 by the sum, 1.32 by the product.
    found = compound(Boundary("edge", 1.2), Boundary("hole", 1.1))
    assert found.total == pytest.approx(1.30, abs=1e-12)
    assert found.product == pytest.approx(1.32, abs=1e-12)
    assert found.higher == found.product


@pytest.mark.parametrize("share", [0.1, 0.3, 0.5])
def test_an_endless_row_is_nearly_its_nearest_neighbours(share):
    # A crack between two others: the inner tip of each pair. The exact row holds all
    # the rest as well; beyond half the pitch neither rule holds.
    row = cr.CrackRow(HalfLength(share / 2), 1.0)
    pair = cr.two_cracks(row)
    found = compound(Boundary("right", pair.inner), Boundary("left", pair.outer))
    assert found.higher == pytest.approx(cr.endless_row(row), rel=0.06)
    assert found.higher < cr.endless_row(row)


@pytest.mark.parametrize("ratio", [0.5, 1.0, 3.0])
def test_width_of_a_cracked_hole_is_nearly_that_of_a_crack_from_tip_to_tip(ratio):
    # r 5, W 100 mm: the finite-width fit against the wide hole times a secant.
    c, diameter, width = EdgeLength(5 * ratio), 10.0, 100.0
    alone = hi.hole_double(c, diameter, 1e6)
    strip = si.centre_crack_secant(HalfLength(5 + c), width)
    found = compound(Boundary("width", strip)).product * alone
    assert found == pytest.approx(hi.hole_double(c, diameter, width), rel=0.035)


@given(st.lists(st.floats(1.0, 1.9), min_size=1, max_size=4))
def test_the_product_is_never_below_the_sum_of_raising_boundaries(ratios):
    found = compound(*(Boundary(str(i), r) for i, r in enumerate(ratios)))
    assert found.product >= found.total - 1e-12


def test_no_boundary_changes_nothing():
    assert compound().product == compound().total == 1


def test_a_boundary_counted_twice_is_refused():
    with pytest.raises(InputError, match="twice"):
        compound(Boundary("width", 1.1), Boundary("width", 1.05))


def test_a_strong_boundary_is_refused():
    with pytest.raises(OutOfRangeError, match="holds this boundary"):
        compound(Boundary("hole", 2.4))
