"""Scatter factors against print and a second route."""

from __future__ import annotations

import math
from statistics import NormalDist

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.stats import norm

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.note import Note
from repairs.analysis.scatter import factors as scatter
from repairs.analysis.stress_life import policies
from repairs.analysis.types import Grade, Sourced
from tests.outside import outside

Z_999 = NormalDist().inv_cdf(0.999)


def test_scatter_ratio_six_gives_the_published_four():
    # OEIS A375221: 4.0031307596...
    outside(
        "Scatter factor, confidence on the mean",
        source="OEIS A375221, decimal expansion of the fatigue scatter factor",
        given="scatter ratio 6 over ±3 deviations, one test, 95 % confidence",
        published=4.0031307596,
        computed=scatter.factor_confidence(math.log10(6) / 6, 3.0, 0.95, 1),
        absolute=1e-9,
    )


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
    # The preset's own deviation: z s = 0.4917, the only one that gives all four.
    outside(
        "Scatter factor, one item foretold",
        source="FAA AC 23-13A, Table 2, as quoted in a public engineering code",
        given=f"full-scale tests: {tests}; s z = 0.4917",
        published=factor,
        computed=scatter.factor_predictive(0.4917 / 3, 3.0, tests),
        absolute=0.007,
        route="quoted",
    )
    published = scatter.published_factor(f"AC 23-13A, full-scale tests: {tests}")
    assert published.factor.value == factor


def test_three_deviations_of_the_notched_handbook_curve():
    outside(
        "Life factor of a curve's own deviation",
        source="public safe-life study of a 7050-T7451 fitting, section 5",
        given="three deviations of 0.728 in log10 life",
        published=153,
        computed=scatter.life_factor_of_error(0.728, NormalDist().cdf(3)),
        rel=3e-3,
    )


@pytest.mark.parametrize(("error", "factor"), [(0.27, 6.8), (0.41, 18.5), (0.14, 2.7)])
def test_a_curves_error_at_99_9_per_cent_recomputed_independently(error, factor):
    found = scatter.life_factor_of_error(error, 0.999)
    assert found == pytest.approx(factor, abs=0.06)
    # It is the predictive factor of endlessly many tests.
    endless = scatter.factor_predictive(error, Z_999, 10**6)
    assert found == pytest.approx(endless, rel=1e-5)


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
    memory = {
        name
        for name, p in scatter.PUBLISHED_FACTORS.items()
        if p.factor.grade is Grade.MEMORY
    }
    assert memory == {"DEF STAN 00-970, monitored", "DEF STAN 00-970, not monitored"}
    for name in memory:
        assert "from memory" in scatter.PUBLISHED_FACTORS[name].factor.source


def test_where_the_spectrum_carries_the_severity_the_factor_does_not():
    # ASTM F3498, scope: the spectra of AC 23-13A carry 1.5 deviations of severity.
    for name, policy in scatter.PUBLISHED_FACTORS.items():
        small = name.startswith("AC 23-13A")
        assert policy.severity_inside is (False if small else None)
        assert ("severity" in policy.factor.source) == small


LIVES = (85_000, 112_000, 98_000, 140_000, 121_000)


def test_with_the_deviation_unknown_confidence_costs_more_than_scatter():
    # Five lives: log10 deviation 0.08334 and k 5.741 (99/95, CMH-17-1G): 3.009.
    source = Sourced(5, "-", "five invented tests", Grade.RECORDED)
    policy = policies.policy_of_tests(
        LIVES, 0.99, 0.95, scatter.Multiplied.TEST_MEAN, source, severity_inside=False
    )
    assert policy.factor.value == pytest.approx(10 ** (5.741 * 0.08334), rel=2e-3)
    assert policy.factor.grade is Grade.RECORDED
    assert "five invented tests" in policy.factor.source
    assert (policy.tests, policy.log_deviation) == (5, None)
    known = scatter.factor_confidence(0.08334, scatter.quantile(0.99), 0.95, 5)
    assert known < policy.factor.value
    assert policies.made_factors(policy) == {}  # its deviation is not known


def stated(factor: float) -> scatter.FatiguePolicy:
    return scatter.FatiguePolicy(
        Sourced(factor, "-", "a policy", Grade.RECORDED),
        "mean stress-life",
        0.14,
        2,
        0.999,
        0.95,
    )


def test_the_factor_of_its_own_scatter_stands_beside_a_fixed_one():
    # s 0.14, n 2, p 0.999: form (a) at 95 % 3.940, form (b) 3.387, independently.
    made = policies.made_factors(stated(5.0))
    assert made[scatter.Form.CONFIDENCE] == pytest.approx(3.940, abs=6e-4)
    assert made[scatter.Form.PREDICTIVE] == pytest.approx(3.387, abs=6e-4)
    note = Note()
    policies.write_made_factors(note, stated(5.0))
    assert [line.value for line in note.lines] == list(made.values())
    assert not note.warnings
    assert not note.barred


def test_a_fixed_factor_smaller_than_its_own_scatter_is_warned_of():
    note = Note()
    policies.write_made_factors(note, stated(3.0))
    assert any("smaller than 3.94" in warning for warning in note.warnings)
    empty = Note()
    policies.write_made_factors(empty, None)
    assert not empty.lines
