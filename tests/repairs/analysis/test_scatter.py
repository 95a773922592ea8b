"""Scatter factors against print and a second route."""

from __future__ import annotations

import math
from statistics import NormalDist

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.stats import norm

from repairs.analysis import scatter
from repairs.analysis.errors import OutOfRangeError
from repairs.analysis.types import Grade, Sourced

Z_999 = NormalDist().inv_cdf(0.999)


def test_scatter_ratio_six_gives_the_published_four():
    # OEIS A375221: 4.0031307596...
    found = scatter.factor_confidence(math.log10(6) / 6, 3.0, 0.95, 1)
    assert found == pytest.approx(4.0031307596, abs=1e-9)


@pytest.mark.parametrize(
    ("tests", "factor"), [(1, 4.602), (2, 3.940), (3, 3.678), (4, 3.530), (6, 3.362)]
)
def test_confidence_form_recomputed_independently(tests, factor):
    found = scatter.factor_confidence(0.14, Z_999, 0.95, tests)
    assert found == pytest.approx(factor, abs=6e-4)


@pytest.mark.parametrize(
    ("tests", "factor"), [(1, 4.96), (2, 4.0), (3, 3.7), (4, 3.54)]
)
def test_predictive_form_gives_the_small_aeroplane_table(tests, factor):
    # AC 23-13A Table 2 as quoted in a public engineering code, z s = 0.4917.
    found = scatter.factor_predictive(0.4917 / 3, 3.0, tests)
    assert found == pytest.approx(factor, abs=0.007)


def test_many_tests_leave_only_the_survival():
    found = scatter.factor_confidence(0.14, Z_999, 0.95, 10**6)
    assert found == pytest.approx(10 ** (0.14 * norm.ppf(0.999)), rel=1e-3)


def test_first_of_fifty_needs_more():
    survival = scatter.first_of_fleet(0.999, 50)
    z = scatter.quantile(survival)
    assert z == pytest.approx(4.1074, abs=5e-5)
    assert 10 ** (0.14 * z) == pytest.approx(3.759, abs=5e-4)


@given(st.floats(0.05, 0.3), st.integers(1, 50))
def test_more_tests_never_raise_the_factor(deviation, tests):
    for form in (
        lambda n: scatter.factor_confidence(deviation, 3.0, 0.95, n),
        lambda n: scatter.factor_predictive(deviation, 3.0, n),
    ):
        assert form(tests + 1) < form(tests)


def test_a_factor_below_one_is_refused():
    with pytest.raises(OutOfRangeError, match="Scatter factor"):
        scatter.FatiguePolicy(Sourced(0.5, "-", "a slip", Grade.RECORDED), "mean life")
