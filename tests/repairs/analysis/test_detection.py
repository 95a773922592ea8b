"""Detection curves, fits of hits and misses, demonstrations at one size.

The hit/miss data are example "Good 1" of the probability-of-detection program that the
US Air Force Research Laboratory gave to the public (60 flaws), with the results it
lists: an R logistic regression on the plain size, here reached by fitting exp(size).
"""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.optimize import minimize
from scipy.stats import beta, binom, binomtest, norm

from repairs.analysis.errors import AnalysisError, InputError, OutOfRangeError
from repairs.analysis.inspection import detection as dt
from repairs.analysis.inspection import hit_miss as hm
from repairs.analysis.inspection.published_sizes import PUBLISHED_SIZES, published_for
from repairs.analysis.types import Grade
from tests.outside import outside

STUDY = dt.Study(
    dt.Technique.EDDY_CURRENT_SURFACE,
    dt.SizeMeaning.TIP_TO_TIP,
    0.01,
    100.0,
    60,
    "an invented trial",
    Grade.RECORDED,
)
LABORATORY = (
    0.026429706, 0.033503454, 0.053120163, 0.070630726, 0.079225089, 0.094606814,
    0.095282408, 0.102307749, 0.107649372, 0.120030103, 0.120304186, 0.130035327,
    0.14030999, 0.153704356, 0.153917693, 0.166910359, 0.181461883, 0.187918014,
    0.191985489, 0.206296735, 0.22125183, 0.22254802, 0.223172984, 0.226625926,
    0.234836897, 0.240048821, 0.245869667, 0.247247879, 0.24864422, 0.254521076,
    0.259783658, 0.260924841, 0.270902464, 0.283500563, 0.284831232, 0.28762478,
    0.291295773, 0.296634941, 0.308812298, 0.319062008, 0.322503578, 0.345716849,
    0.356358449, 0.366939348, 0.392040921, 0.401791147, 0.413413202, 0.417064974,
    0.425014553, 0.427228229, 0.434310898, 0.452074355, 0.474195496, 0.5148145,
    0.538676457, 0.541220773, 0.54866743, 0.553663894, 0.604257669, 0.718182309,
)  # fmt: skip
FOUND = {21, 29, 30, 32, 33, 34, 35, 37, *range(39, 61)}
HITS = tuple(number in FOUND for number in range(1, 61))
DATA = hm.HitMiss(tuple(math.exp(x) for x in LABORATORY), HITS)
AFRL = (
    "US Air Force Research Laboratory, probability-of-detection program 4.5, example "
    "HitMissData_Good_1 and its results"
)


def test_the_laboratorys_example_is_fitted_as_it_lists():
    fit = hm.fit_hit_miss(DATA, dt.Link.LOGISTIC)
    bound = hm.size_bound(fit, 0.9, 0.95)
    size = math.log(fit.curve(*_words()).a90)
    for what, published, computed in (
        ("intercept", -11.83265105, fit.intercept),
        ("slope", 45.30678376, fit.slope),
        ("a90", 0.309663906, size),
        ("a90/95", 0.381546911, math.log(bound)),
        ("deviance criterion 4 - 2 ln L", 28.45673968, 4 - 2 * fit.log_likelihood),
    ):
        outside(
            "Hit/miss detection curve, log-odds on plain size",
            source=AFRL,
            given=f"60 flaws, {what}",
            published=published,
            computed=computed,
            rel=2e-4,
            route="library",
        )
    (v00, v01), (_, v11) = fit.covariance
    x = LABORATORY[43]
    outside(
        "Hit/miss detection curve, log-odds on plain size",
        source=AFRL,
        given="60 flaws, standard error of the log-odds at size 0.3669",
        published=1.762207996,
        computed=math.sqrt(v00 + 2 * x * v01 + x * x * v11),
        rel=1e-5,
        route="library",
    )


def _words() -> tuple[dt.Technique, dt.SizeMeaning, str, Grade]:
    return (
        dt.Technique.PENETRANT,
        dt.SizeMeaning.TIP_TO_TIP,
        "an invented trial",
        Grade.RECORDED,
    )


@pytest.mark.parametrize("link", list(dt.Link))
def test_a_general_minimiser_and_its_curvature_give_the_same_fit(link):
    # Second route: Nelder-Mead on the negative likelihood written out anew.
    x = np.array(LABORATORY)
    y = np.array(HITS)

    def against(b):
        z = b[0] + b[1] * x
        if link is dt.Link.NORMAL:
            found, missed = norm.logcdf(z), norm.logsf(z)
        else:
            found, missed = -np.logaddexp(0, -z), -np.logaddexp(0, z)
        return -np.where(y, found, missed).sum()

    best = minimize(
        against, [-5, 20], method="Nelder-Mead",
        options={"xatol": 1e-9, "fatol": 1e-12, "maxiter": 4000, "maxfev": 4000},
    )  # fmt: skip
    fit = hm.fit_hit_miss(DATA, link)
    assert fit.intercept == pytest.approx(best.x[0], rel=1e-5)
    assert fit.slope == pytest.approx(best.x[1], rel=1e-5)
    assert fit.log_likelihood == pytest.approx(-best.fun, rel=1e-10)


def test_the_likelihood_ratio_gives_a_bound_near_by():
    # Another method: the largest size whose best line through 90 % has lost no more
    # than chi-square's 90 % point of one degree, 2.7055, halved.
    fit = hm.fit_hit_miss(DATA, dt.Link.LOGISTIC)
    x, y = np.array(LABORATORY), np.array(HITS)
    bound = math.log(hm.size_bound(fit, 0.9, 0.95))
    slopes = np.linspace(5, 120, 401)[:, None]

    def lost(size):
        z = math.log(9) + slopes * (x - size)
        total = np.where(y, -np.logaddexp(0, -z), -np.logaddexp(0, z)).sum(axis=1)
        return fit.log_likelihood - total.max()

    sizes = np.linspace(0.31, 0.5, 191)
    ratio = max(s for s in sizes if lost(s) <= 2.7055 / 2)
    assert ratio == pytest.approx(bound, rel=0.1)


def test_the_covariance_covers_repeated_trials():
    # 300 trials of 240 flaws from a known curve: the fitted lines spread as said.
    rng = np.random.default_rng(8)
    truth = dt.log_odds(-2.0, 3.0, STUDY)
    sizes = tuple(np.geomspace(0.4, 10, 240))
    chance = truth.fitted(sizes)
    fits = []
    for _ in range(300):
        hits = tuple(bool(h) for h in rng.random(240) < chance)
        fits.append(hm.fit_hit_miss(hm.HitMiss(sizes, hits), dt.Link.LOGISTIC))
    slopes = np.array([fit.slope for fit in fits])
    said = np.mean([math.sqrt(fit.covariance[1][1]) for fit in fits])
    assert slopes.std() == pytest.approx(said, rel=0.15)
    bounds = np.array([hm.size_bound(fit, 0.9, 0.95) for fit in fits])
    assert np.mean(bounds >= truth.a90) == pytest.approx(0.95, abs=0.04)


def test_with_few_flaws_the_bound_is_on_the_safe_side():
    rng = np.random.default_rng(5)
    truth = dt.log_odds(-2.0, 3.0, STUDY)
    sizes = tuple(np.geomspace(0.4, 10, 60))
    above = []
    for _ in range(300):
        hits = tuple(bool(h) for h in rng.random(60) < truth.fitted(sizes))
        try:
            fit = hm.fit_hit_miss(hm.HitMiss(sizes, hits), dt.Link.LOGISTIC)
        except AnalysisError:  # hits and misses that do not overlap
            continue
        above.append(hm.size_bound(fit, 0.9, 0.95) >= truth.a90)
    assert len(above) > 290
    assert np.mean(above) > 0.95


@pytest.mark.parametrize(
    ("curve", "a90", "size", "pod"),
    [
        (dt.log_normal(math.log(2), 0.6, STUDY), 4.3149, 1.0, 0.1240),
        (dt.log_normal(math.log(2), 0.6, STUDY), 4.3149, 5.0, 0.9366),
        (dt.log_logistic(math.log(2), 0.6, STUDY), 4.1371, 5.0, 0.9410),
        (dt.log_odds(-2.0, 3.0, STUDY), 4.0515, 1.9477, 0.5),
    ],
)
def test_curves_recomputed_independently(curve, a90, size, pod):
    assert curve.a90 == pytest.approx(a90, abs=6e-5)
    assert curve.pod(size) == pytest.approx(pod, abs=6e-5)


def test_the_log_normal_and_the_log_logistic_curve_hardly_differ():
    # The handbook calls them indistinguishable; with one mean and one deviation of
    # ln a they differ by less than 0.025 everywhere.
    sizes = np.geomspace(0.2, 20, 400)
    one = dt.log_normal(math.log(2), 0.6, STUDY).pod(sizes)
    other = dt.log_logistic(math.log(2), 0.6, STUDY).pod(sizes)
    assert np.abs(one - other).max() < 0.025
    library = norm.cdf(np.log(sizes), math.log(2), 0.6)
    assert one == pytest.approx(library, abs=1e-12)


def test_one_logistic_curve_has_two_names():
    slope = math.pi / (0.6 * math.sqrt(3))
    one = dt.log_logistic(math.log(2), 0.6, STUDY)
    other = dt.log_odds(-slope * math.log(2), slope, STUDY)
    assert one.a90 == pytest.approx(other.a90, rel=1e-12)
    assert one.a50 == pytest.approx(2.0, rel=1e-12)
    assert math.log(one.a90 / one.a50) / 0.6 == pytest.approx(1.21139, abs=5e-6)


def test_no_more_is_counted_on_than_was_tried():
    study = dt.Study(
        dt.Technique.PENETRANT,
        dt.SizeMeaning.TIP_TO_TIP,
        1.0,
        5.0,
        60,
        "an invented trial",
        Grade.RECORDED,
    )
    curve = dt.log_normal(math.log(2), 0.6, study)
    assert curve.pod(0.99) == 0.0
    assert curve.pod(1.0) == pytest.approx(curve.fitted(1.0))
    assert curve.pod(50.0) == pytest.approx(curve.fitted(5.0))
    assert curve.pod(0.0) == 0.0


@given(st.floats(0.05, 50), st.floats(1.01, 3), st.floats(0.1, 1.5))
def test_larger_cracks_are_found_more_often_and_worse_methods_find_less(a, more, s):
    curve = dt.log_normal(math.log(3), s, STUDY)
    worse = dt.log_normal(math.log(3 * more), s, STUDY)
    assert curve.pod(a * more) >= curve.pod(a)
    assert worse.pod(a) <= curve.pod(a)


@pytest.mark.parametrize(
    ("hits", "trials", "probability", "shown"),
    [(29, 29, 0.9, 0.0471), (28, 28, 0.9, 0.0523), (45, 46, 0.9, 0.0480),
     (59, 59, 0.95, 0.0485)],
)  # fmt: skip
def test_demonstrations_at_one_size(hits, trials, probability, shown):
    # Second route: the chance of so many hits or more if the probability were only so.
    chance = binom.sf(hits - 1, trials, probability)
    assert chance == pytest.approx(shown, abs=6e-5)
    bound = dt.demonstrated(hits, trials, 0.95)
    assert (bound >= probability) == (chance <= 0.05)
    interval = binomtest(hits, trials, alternative="greater").proportion_ci(0.95)
    outside(
        "Detection probability demonstrated at one flaw size",
        source="scipy.stats.binomtest, exact one-sided interval",
        given=f"{hits} of {trials} found, 95 % confidence",
        published=interval.low,
        computed=bound,
        rel=1e-9,
        route="library",
    )


def test_29_of_29_is_the_smallest_demonstration_of_90_95():
    outside(
        "Trials without a miss that demonstrate 90/95",
        source="Public notes on MIL-HDBK-1823 (29 of 29: 0.9^29 = 0.047)",
        given="no miss, 90 % with 95 % confidence",
        published=29,
        computed=dt.trials_needed(0, 0.9, 0.95),
        unit="flaws",
        absolute=0,
        route="quoted",
    )
    assert dt.trials_needed(1, 0.9, 0.95) == 46
    assert dt.trials_needed(0, 0.95, 0.95) == 59
    assert dt.demonstrated(29, 29, 0.95) == pytest.approx(0.05 ** (1 / 29))
    assert dt.demonstrated(0, 29, 0.95) == 0.0


@given(st.integers(0, 20), st.floats(0.5, 0.97), st.floats(0.6, 0.99))
def test_trials_needed_are_the_fewest_that_suffice(misses, probability, confidence):
    n = dt.trials_needed(misses, probability, confidence)
    low = beta.ppf(1 - confidence, n - misses, misses + 1)
    assert low >= probability
    if n - 1 > misses:
        assert dt.demonstrated(n - 1 - misses, n - 1, confidence) < probability


def test_few_flaws_are_said_to_be_few():
    fit = hm.fit_hit_miss(hm.HitMiss(DATA.sizes[10:50], HITS[10:50]), dt.Link.LOGISTIC)
    assert "40 flaws" in fit.warnings[0]
    assert hm.fit_hit_miss(DATA, dt.Link.LOGISTIC).warnings == ()
    assert hm.ENOUGH_SIGNAL_SOURCE.grade is Grade.MEMORY


@pytest.mark.parametrize(
    ("sizes", "hits", "words"),
    [
        ((1.0, 2.0), (True, True), "smaller flaws"),
        ((1.0, 2.0), (False, False), "larger flaws"),
        ((1.0, 2.0, 3.0), (False, True, True), "fix no slope"),
        ((1.0, 2.0, 3.0, 4.0), (True, True, False, False), "not found more often"),
        ((1.0, 1.4, 1.2, 1.5), (False, True, True, False), "too uncertain"),
    ],
)
def test_data_that_carry_no_curve_are_refused(sizes, hits, words):
    with pytest.raises(AnalysisError, match=words):
        hm.size_bound(
            hm.fit_hit_miss(hm.HitMiss(sizes, hits), dt.Link.LOGISTIC), 0.9, 0.95
        )


def test_a_curve_without_source_or_range_is_refused():
    words = (dt.Technique.PENETRANT, dt.SizeMeaning.TIP_TO_TIP)
    with pytest.raises(InputError, match="source"):
        dt.Study(*words, 1.0, 5.0, 60, " ", Grade.RECORDED)
    with pytest.raises(InputError, match="rising"):
        dt.Study(*words, 5.0, 1.0, 60, "a trial", Grade.RECORDED)
    with pytest.raises(InputError, match="flaws tried"):
        dt.Study(*words, 1.0, 5.0, 0, "a trial", Grade.RECORDED)
    with pytest.raises(InputError, match="positive"):
        hm.HitMiss((1.0, math.nan), (True, False))
    with pytest.raises(OutOfRangeError, match="rising curve"):
        dt.log_odds(-2, -3, STUDY)
    with pytest.raises(OutOfRangeError, match="Hits"):
        dt.demonstrated(30, 29, 0.95)


@pytest.mark.parametrize(
    ("technique", "where", "published", "unit", "route"),
    [
        (dt.Technique.ULTRASONIC, "depot, accessible, through crack", 6.35, "mm",
         "quoted"),
        (dt.Technique.PENETRANT,
         "post-emulsifiable, general procedure of an air force", 3.0, "mm", "print"),
        (dt.Technique.MAGNETIC_PARTICLE,
         "wet fluorescent, continuous, general procedure of an air force", 2.0, "mm",
         "print"),
    ],
)  # fmt: skip
def test_published_sizes_are_those_read(technique, where, published, unit, route):
    row = next(row for row in published_for(technique) if row.where == where)
    outside(
        "Published detectable size, for hints only",
        source=row.reference.source,
        given=f"{technique}, {where}",
        published=published,
        computed=row.length,
        unit=unit,
        rel=1e-9,
        route=route,
    )


def test_what_is_remembered_says_so_and_comes_last():
    for technique in dt.Technique:
        grades = [row.reference.grade for row in published_for(technique)]
        memory = [grade is Grade.MEMORY for grade in grades]
        assert memory == sorted(memory)
    standard = [row for row in PUBLISHED_SIZES if "5009" in row.reference.source]
    assert {row.reference.grade for row in standard} == {Grade.MEMORY}
    assert len(standard) == 14
    assert published_for(dt.Technique.RADIOGRAPHIC) == ()
