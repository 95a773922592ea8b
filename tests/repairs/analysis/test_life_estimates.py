"""Lives with suspensions against published data, scipy's own fits and exact bounds.

Fans: Nelson, Applied Life Data Analysis, p. 318, 70 engine fans, as printed in public
statistics documentation. Alloy: Meeker and Escobar, p. 131, alloy T7987, 67 failures
and 5 run-outs at 300 thousand cycles, printed there too. Readout data of 20 units, 10
suspended at 500 h: NIST/SEMATECH e-Handbook 8.4.1.2, from memory.
"""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.stats import CensoredData, lognorm, weibull_min

from repairs.analysis.errors import AnalysisError, InputError, OutOfRangeError
from repairs.analysis.scatter import estimates as le
from repairs.analysis.scatter import tolerance
from repairs.analysis.scatter.estimates import LifeModel, Lives
from tests.outside import outside

FANS = Lives(
    (450, 1150, 1150, 1600, 2070, 2070, 2080, 3100, 3450, 4600, 6100, 8750),
    (460, 1560, 1660, *[1850] * 5, *[2030] * 3, 2200, *[3000] * 4, 3200, 3750, 3750,
     *[4150] * 4, *[4300] * 4, *[4850] * 4, *[5000] * 3, *[6100] * 3, 6300, 6450, 6450,
     6700, 7450, 7800, 7800, 8100, 8100, 8200, *[8500] * 3, 8750, 8750, 9400, 9900,
     *[10100] * 3, 11500),
)  # fmt: skip
ALLOY = Lives(
    (94, 96, 99, 99, 104, 108, 112, 114, 117, 117, 118, 121, 121, 123, 129, 131, 133,
     135, 136, 139, 139, 140, 141, 141, 143, 144, 149, 149, 152, 153, 159, 159, 159,
     159, 162, 168, 168, 169, 170, 170, 171, 172, 173, 176, 177, 180, 180, 184, 187,
     188, 189, 190, 196, 197, 203, 205, 211, 213, 224, 226, 227, 256, 257, 269, 271,
     274, 291),
    (300.0,) * 5,
)  # fmt: skip
READOUT = Lives((54, 187, 216, 240, 244, 335, 361, 373, 375, 386), (500.0,) * 10)
WEIBULL, LOGNORMAL = LifeModel.WEIBULL, LifeModel.LOGNORMAL


def test_engine_fans_give_the_published_weibull():
    # Shape 1.0584, scale 26 296.8 h: the documentation's figures, from memory.
    assert len(FANS.failures) + len(FANS.suspensions) == 70
    found = le.fit(FANS, WEIBULL)
    for what, published, computed in (
        ("shape", 1.0584, found.shape),
        ("scale", 26_296.8, found.characteristic),
    ):
        outside(
            "Weibull life from failures and suspensions",
            source="Nelson, Applied Life Data Analysis, p. 318, as fitted in public "
            "statistics documentation",
            given=f"70 engine fans, 12 failed: {what}",
            published=published,
            computed=computed,
            rel=1e-4,
            route="memory",
        )


def test_the_alloy_gives_the_published_weibull_above_its_threshold():
    # With the threshold given, the two other parameters are a two-parameter fit.
    threshold = 92.9928
    found = le.fit(
        Lives(
            tuple(t - threshold for t in ALLOY.failures),
            tuple(t - threshold for t in ALLOY.suspensions),
        ),
        WEIBULL,
    )
    for what, published, computed in (
        ("shape", 1.3202, found.shape),
        ("scale", 93.2642, found.characteristic),
        ("ln scale", 4.5354, found.location),
        ("one over shape", 0.7575, found.scale),
    ):
        outside(
            "Weibull life from failures and suspensions",
            source="Statistics documentation, three-parameter Weibull of alloy T7987 "
            "(Meeker and Escobar, p. 131)",
            given=f"67 failed, 5 run-outs, threshold 92.9928 thousand: {what}",
            published=published,
            computed=computed,
            rel=1e-4,
            route="print",
        )


def test_readout_data_give_the_published_weibull():
    found = le.fit(READOUT, WEIBULL)
    for what, published, computed in (
        ("shape", 1.7208, found.shape),
        ("scale", 606.5280, found.characteristic),
    ):
        outside(
            "Weibull life from failures and suspensions",
            source="NIST/SEMATECH e-Handbook of Statistical Methods, 8.4.1.2",
            given=f"20 units, 10 suspended at 500 h: {what}",
            published=published,
            computed=computed,
            rel=1e-4,
            route="memory",
        )


@pytest.mark.parametrize("lives", [FANS, ALLOY, READOUT])
def test_fits_agree_with_an_independent_library(lives):
    censored = CensoredData(uncensored=lives.failures, right=lives.suspensions)
    shape, _, scale = weibull_min.fit(censored, floc=0)
    weibull = le.fit(lives, WEIBULL)
    sigma, _, median = lognorm.fit(censored, floc=0)
    lognormal = le.fit(lives, LOGNORMAL)
    for model, what, published, computed in (
        ("Weibull", "shape", shape, weibull.shape),
        ("Weibull", "scale", scale, weibull.characteristic),
        ("Lognormal", "sigma of ln life", sigma, lognormal.scale),
        ("Lognormal", "median", median, lognormal.median),
    ):
        outside(
            f"{model} life from failures and suspensions",
            source="scipy.stats, its own fit to censored data",
            given=f"{len(lives.failures)} failed, {len(lives.suspensions)} suspended: "
            f"{what}",
            published=float(f"{published:.5g}"),
            computed=computed,
            rel=2e-3,
            route="library",
        )


@pytest.mark.parametrize(
    ("model", "law"), [(WEIBULL, weibull_min), (LOGNORMAL, lognorm)]
)
def test_log_likelihood_is_that_of_the_library(model, law):
    found = le.fit(ALLOY, model)
    shape = found.shape if model is WEIBULL else found.scale
    frozen = law(shape, 0, found.characteristic)
    total = frozen.logpdf(ALLOY.failures).sum() + frozen.logsf(ALLOY.suspensions).sum()
    assert found.log_likelihood == pytest.approx(total, rel=1e-9)


def test_lognormal_without_suspensions_is_mean_and_deviation_of_logs():
    lives = Lives((85e3, 112e3, 98e3, 140e3, 121e3))
    found = le.fit(lives, LOGNORMAL)
    logs = np.log10(lives.failures)
    assert math.log10(found.median) == pytest.approx(5.03976, abs=5e-6)
    assert found.log10_deviation == pytest.approx(logs.std(), rel=1e-9)
    # Covariance of (mu, ln sigma) by hand: sigma^2/n and 1/(2n), uncorrelated.
    (a, b), (_, d) = found.covariance
    assert a == pytest.approx(found.scale**2 / 5, rel=1e-9)
    assert b == pytest.approx(0, abs=1e-9)
    assert d == pytest.approx(0.1, rel=1e-9)


def test_weibull_lives_of_a_known_distribution():
    # Shape 4, scale 1e5: 56 973 at 90 %, 17 785 at 99.9 %, recomputed independently.
    known = le.LifeEstimate(
        WEIBULL, math.log(1e5), 0.25, 0.0, ((0, 0), (0, 0)), Lives((1.0,))
    )
    assert known.life_at(0.9) == pytest.approx(56_973, abs=0.6)
    assert known.life_at(0.999) == pytest.approx(17_785, abs=0.6)
    assert known.survival(56_973) == pytest.approx(0.9, abs=1e-5)


def test_lognormal_lives_of_a_known_distribution():
    # Log mean 5, s 0.14: 36 929 at 99.9 %; 0.002239 fail before 40 000.
    known = le.LifeEstimate(
        LOGNORMAL, 5 * math.log(10), 0.14 * math.log(10), 0, ((0, 0), (0, 0)), ALLOY
    )
    assert known.life_at(0.999) == pytest.approx(36_929, abs=0.6)
    assert 1 - known.survival(40_000) == pytest.approx(0.002239, abs=6e-7)
    assert known.log10_deviation == pytest.approx(0.14)


def test_bounds_are_near_the_exact_ones_where_there_are_such():
    # Lognormal without suspensions has an exact bound, by the non-central t.
    rng = np.random.default_rng(4)
    lives = Lives(tuple(10 ** rng.normal(5, 0.14, 40)))
    found = le.fit(lives, LOGNORMAL)
    exact = 10 ** tolerance.lower_bound(list(np.log10(lives.failures)), 0.99, 0.95)
    assert le.lower_life(found, 0.99, 0.95) == pytest.approx(exact, rel=0.03)
    assert le.normal_lower_life(found, 0.99, 0.95) == pytest.approx(exact, rel=0.06)


def test_the_bound_lies_where_the_likelihood_has_fallen_by_the_allowed_amount():
    # Second route: scipy's Weibull over a fine grid of shapes, the 10 % life held at
    # the bound; twice the fall is chi-square's 90 % point of one degree, 2.7055.
    found = le.fit(READOUT, WEIBULL)
    life = le.lower_life(found, 0.9, 0.95)
    shapes = np.linspace(0.5, 4, 20_001)[:, None]
    scales = life / (-math.log(0.9)) ** (1 / shapes)
    total = weibull_min.logpdf(READOUT.failures, shapes, 0, scales).sum(axis=1)
    total += weibull_min.logsf(READOUT.suspensions, shapes, 0, scales).sum(axis=1)
    assert 2 * (found.log_likelihood - total.max()) == pytest.approx(2.7055, abs=1e-3)


def test_weibull_covariance_is_that_of_the_tables_for_many_failures():
    # Variance of ln eta 1.109/(n beta^2) and of ln beta 0.608/n, n large (Lawless).
    n = 2000
    share = (np.arange(n) + 0.5) / n
    found = le.fit(Lives(tuple(1e5 * (-np.log(share)) ** 0.25)), WEIBULL)
    (a, _), (_, d) = found.covariance
    assert a * n / found.scale**2 == pytest.approx(1.109, rel=0.01)
    assert d * n == pytest.approx(0.608, rel=0.01)


@pytest.mark.parametrize("model", [WEIBULL, LOGNORMAL])
def test_more_confidence_and_more_survival_shorten_the_life(model):
    found = le.fit(ALLOY, model)
    lives = [le.lower_life(found, p, 0.95) for p in (0.5, 0.9, 0.99, 0.999)]
    assert lives == sorted(lives, reverse=True)
    sure = [le.lower_life(found, 0.9, c) for c in (0.6, 0.9, 0.95, 0.99)]
    assert sure == sorted(sure, reverse=True)
    assert sure[0] < found.life_at(0.9)


@settings(max_examples=20, deadline=None)
@given(st.floats(1.05, 3.0))
def test_dropping_suspensions_shortens_life_and_time_scales(factor):
    found = le.fit(READOUT, WEIBULL)
    dropped = le.fit(Lives(READOUT.failures), WEIBULL)
    assert dropped.median < found.median
    longer = le.fit(
        Lives(
            tuple(t * factor for t in READOUT.failures),
            tuple(t * factor for t in READOUT.suspensions),
        ),
        WEIBULL,
    )
    assert longer.median == pytest.approx(found.median * factor, rel=1e-6)
    assert longer.shape == pytest.approx(found.shape, rel=1e-6)


def test_ten_parts_without_failure_and_a_known_shape():
    # 10 x 20 000, shape 4, 95 %: 27 034, recomputed independently.
    lives = Lives((), (20_000.0,) * 10)
    assert le.known_shape_lower(lives, 4, 0.95) == pytest.approx(27_034, abs=0.6)


def test_a_failure_lowers_the_bound_of_a_known_shape():
    none, one = Lives((), (2e4,) * 10), Lives((2e4,), (2e4,) * 9)
    assert le.known_shape_lower(one, 4, 0.95) < le.known_shape_lower(none, 4, 0.95)


@pytest.mark.parametrize("failures", [(), (100.0, 200.0), (100.0, 100.0, 100.0)])
def test_too_few_failures_are_refused(failures):
    with pytest.raises(AnalysisError, match="too few"):
        le.fit(Lives(failures, (300.0,)), WEIBULL)


@pytest.mark.parametrize("life", [0.0, -1.0, math.nan, math.inf])
def test_what_is_no_life_is_refused(life):
    with pytest.raises(InputError, match="positive"):
        Lives((100.0, life))


def test_an_upper_bound_asked_as_a_lower_one_is_refused():
    with pytest.raises(OutOfRangeError, match="Confidence"):
        le.lower_life(le.fit(ALLOY, WEIBULL), 0.9, 0.4)
