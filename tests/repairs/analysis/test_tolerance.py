"""Tolerance factors against the printed tables, and against their own meaning."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import quad
from scipy.stats import chi, norm

from repairs.analysis.errors import OutOfRangeError
from repairs.analysis.scatter import factors as scatter
from repairs.analysis.scatter import tolerance as tl
from tests.outside import outside

# CMH-17-1G, k_B and k_A, as reproduced in a public statistics package.
CMH_17 = {
    2: (20.581, 37.094),
    3: (6.157, 10.553),
    4: (4.163, 7.042),
    5: (3.408, 5.741),
    6: (3.007, 5.062),
    8: (2.583, 4.354),
    10: (2.355, 3.981),
    15: (2.069, 3.520),
    50: (1.646, 2.862),
}


@pytest.mark.parametrize("tests", list(CMH_17))
def test_a_and_b_basis_factors_of_the_handbook(tests):
    for basis, rule, published in zip(
        "BA", (tl.B_BASIS, tl.A_BASIS), CMH_17[tests], strict=True
    ):
        outside(
            "One-sided normal tolerance factor",
            source="CMH-17-1G, tables of k_B and k_A, as in a public package's tests",
            given=f"{basis}-basis, {tests} tests",
            published=published,
            computed=tl.tolerance_factor(tests, *rule),
            absolute=2e-3,
            route="quoted",
        )


def test_fifty_measurements_of_the_public_example():
    # A public calculator program, checked there against a printed table (2.065).
    outside(
        "One-sided normal tolerance factor",
        source="A public calculator program, checked there against a printed table",
        given="95 % above with 95 % confidence, 50 tests",
        published=2.064993399768,
        computed=tl.tolerance_factor(50, 0.95, 0.95),
        rel=1e-7,
        route="quoted",
    )


@pytest.mark.parametrize("tests", [3, 7, 20])
def test_the_factor_covers_as_often_as_it_says(tests):
    # Second route: over the sample's deviation, the chance that mean minus k s lies
    # below the true 1 % point, by quadrature.
    k = tl.tolerance_factor(tests, 0.99, 0.95)
    root = math.sqrt(tests)

    def covered(ratio: float) -> float:
        density = chi.pdf(ratio * math.sqrt(tests - 1), tests - 1)
        point = (k * ratio - norm.ppf(0.99)) * root
        return float(norm.cdf(point) * density * math.sqrt(tests - 1))

    total, _ = quad(covered, 0, 8, limit=200)
    assert total == pytest.approx(0.95, abs=1e-6)


@given(st.integers(2, 200), st.floats(0.6, 0.99), st.floats(0.6, 0.99))
def test_more_tests_lower_the_factor_to_the_normal_quantile(tests, survival, sure):
    assert tl.tolerance_factor(tests + 1, survival, sure) < tl.tolerance_factor(
        tests, survival, sure
    )
    assert tl.tolerance_factor(10**5, survival, sure) == pytest.approx(
        scatter.quantile(survival), abs=0.02
    )


def test_a_bound_from_a_worked_sample_of_lives():
    # 85, 112, 98, 140, 121 thousand: log mean 5.03976, deviation 0.08334, recomputed
    # independently; k for 90/95 of five 3.408.
    lives = [85e3, 112e3, 98e3, 140e3, 121e3]
    logs = list(np.log10(lives))
    bound = tl.lower_bound(logs, *tl.B_BASIS)
    assert bound == pytest.approx(5.03976 - 3.408 * 0.08334, abs=2e-4)
    factor = tl.factor_from_tests(lives, *tl.B_BASIS)
    assert factor == pytest.approx(10 ** (3.408 * 0.08334), rel=1e-3)


def test_an_estimated_deviation_costs_more_than_a_known_one():
    lives = [85e3, 112e3, 98e3, 140e3, 121e3]
    known = scatter.factor_confidence(0.08334, scatter.quantile(0.999), 0.95, 5)
    assert tl.factor_from_tests(lives, 0.999, 0.95) > 1.5 * known


@pytest.mark.parametrize(
    ("tests", "survival", "sure"),
    [(1, 0.9, 0.95), (5, 1.0, 0.95), (5, 0.9, 1.0), (5, math.nan, 0.9)],
)
def test_outside_its_range_it_refuses(tests, survival, sure):
    with pytest.raises(OutOfRangeError):
        tl.tolerance_factor(tests, survival, sure)
