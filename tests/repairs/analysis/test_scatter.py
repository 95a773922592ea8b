"""Scatter factors against print and a second route."""

from __future__ import annotations

import math
from statistics import NormalDist

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.stats import norm

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.scatter import factors as scatter
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


KNOWN = Sourced(0.14, "-", "an invented material report", Grade.RECORDED)


def test_a_factor_from_scatter_says_what_it_means():
    # Form (a), s 0.14, p 0.999, C 0.95, n 2: 3.940, recomputed independently.
    policy = scatter.policy_of_scatter(
        scatter.Scatter(KNOWN, 2, 0.999, 0.95),
        scatter.Form.CONFIDENCE,
        scatter.Multiplied.TEST_MEAN,
        severity_inside=False,
    )
    assert policy.factor.value == pytest.approx(3.940, abs=6e-4)
    assert policy.factor.grade is Grade.RECORDED
    assert "n = 2" in policy.factor.source
    assert "invented material report" in policy.factor.source
    assert policy.multiplies == "geometric mean of the lives tested"
    assert (policy.tests, policy.survival, policy.confidence) == (2, 0.999, 0.95)
    assert policy.severity_inside is False


def test_the_first_of_fifty_is_told_in_the_source():
    # s 0.14, p 0.999 for the first of 50, many tests: 3.759, recomputed independently.
    policy = scatter.policy_of_scatter(
        scatter.Scatter(KNOWN, 10**6, 0.999, 0.95, 50),
        scatter.Form.PREDICTIVE,
        scatter.Multiplied.ANALYSIS_MEDIAN,
        severity_inside=False,
    )
    assert policy.factor.value == pytest.approx(3.759, abs=6e-4)
    assert "first of 50" in policy.factor.source
    assert policy.confidence is None


def test_published_factors_are_chosen_by_name_and_none_is_a_default():
    # AC 23-13A and AC 25.571-1D as quoted in a public engineering code.
    analysis = scatter.published_factor("AC 23-13A, analysis")
    assert (analysis.factor.value, analysis.multiplies) == (
        8.0,
        "median life by analysis with S-N data",
    )
    three = scatter.published_factor("AC 23-13A, full-scale tests: 3")
    assert (three.factor.value, three.tests) == (3.7, 3)
    with pytest.raises(InputError, match="base factor"):
        scatter.published_factor("usual")
    grades = {p.factor.grade for p in scatter.PUBLISHED_FACTORS.values()}
    assert grades == {Grade.QUOTED}
