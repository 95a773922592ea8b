"""Skew cracks: the bound of any direction, and the largest principal stress."""

from __future__ import annotations

import itertools
import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.intensity.skew import skew_bound, tangential
from repairs.analysis.surroundings import Obstacle, ObstacleKind
from repairs.analysis.types import Outcome
from tests.outside import outside
from tests.repairs.analysis.cases import (
    CRACK,
    PSI,
    RADIUS,
    THICKNESS,
    around,
    recorded,
    said,
)
from tests.repairs.analysis.crack_cases import ROUND, SKEW, found, line, unknown

METHOD = "pressurised-skin-skew-crack"
PLAIN = "pressurised-skin-longitudinal-crack"
BOUND = "Bound of a crack of any direction"
HOOP = 8.5 * PSI * RADIUS / THICKNESS


def searched(ratio: float) -> float:
    """The largest tangential stress over all leans and all turns, by trying them."""
    lean = np.radians(np.arange(0, 90.01, 0.25))[:, None]
    turn = np.radians(np.arange(-180, 0.01, 0.25))[None, :]
    opening = np.maximum(np.cos(lean) ** 2 + ratio * np.sin(lean) ** 2, 0)
    sliding = (1 - ratio) * np.sin(lean) * np.cos(lean)
    whole = opening * np.cos(turn / 2) ** 2 - 1.5 * sliding * np.sin(turn)
    return float((np.cos(turn / 2) * whole).max())


def test_pure_sliding_turns_as_erdogan_and_sih_have_it():
    # Turned by 70.5 degrees; K_II at fracture is sqrt(3)/2 of the toughness.
    outside(
        BOUND,
        source="Erdogan and Sih 1963: K_II at fracture over K_Ic, √3 / 2",
        given="pure sliding",
        published=math.sqrt(3) / 2,
        computed=1 / tangential(0.0, 1.0),
        rel=1e-9,
        route="closed form",
    )
    assert tangential(1.0, 0.0) == 1.0


@pytest.mark.parametrize("ratio", [-1.0, -0.5, 0.0, 0.3, 0.5, 1.0])
def test_the_bound_is_the_largest_over_all_directions(ratio):
    outside(
        BOUND,
        source="largest tangential stress sought over all leans and turns",
        given=f"S₂/S₁ = {ratio:g}",
        published=searched(ratio),
        computed=skew_bound(ratio),
        rel=1e-5,
        route="another method",
    )


def test_the_bound_never_lies_below_a_crack_straight_across():
    assert skew_bound(1.0) == pytest.approx(1.0)
    values = [skew_bound(ratio) for ratio in np.linspace(-1, 1, 21)]
    assert all(a >= b - 1e-12 for a, b in itertools.pairwise(values))
    assert min(values) >= 1


def test_loads_are_the_largest_principal_stress():
    result = found(METHOD, SKEW)
    axial, shear = HOOP / 2 + 80, 40.0
    mean, half = (axial + HOOP + 5) / 2, (axial - HOOP - 5) / 2
    assert result.required_residual_mpa == pytest.approx(mean + math.hypot(half, shear))
    axial, shear = HOOP / 2 + 1.8 * 25, 1.8 * 12
    mean, half = (axial + HOOP) / 2, (axial - HOOP) / 2
    assert line(result, "σ₁") == pytest.approx(mean + math.hypot(half, shear))


def test_under_pressure_alone_it_is_the_crack_along_the_shell():
    # No bending and no shear: hoop is the largest, twice the axial, and no turn adds.
    names = ("limit_longitudinal_stress", "limit_flight_stress")
    names += ("limit_shear_stress", "mean_shear_stress")
    none = dict.fromkeys(names, recorded(0.0, "MPa"))
    mean = recorded(1e-9, "MPa")
    skew = found(METHOD, SKEW, **none, mean_longitudinal_stress=mean)
    along = found(PLAIN, CRACK, panel_length=recorded(2000.0, "mm"))
    assert skew.residual_strength_mpa == pytest.approx(along.residual_strength_mpa)
    assert line(skew, "K_max") == pytest.approx(line(along, "K_max"))
    for one, other in zip(skew.lives, along.lives, strict=True):
        assert one.cycles == pytest.approx(other.cycles, rel=1e-4)


def test_it_bounds_both_straight_directions():
    skew = found(METHOD, SKEW)
    flight = {"limit_flight_stress": recorded(5.0, "MPa")}
    for straight in (
        found(PLAIN, CRACK, **flight),
        found("pressurised-skin-circumferential-crack", ROUND),
    ):
        assert skew.margin_residual < straight.margin_residual
        assert skew.life_cycles < straight.life_cycles
        assert line(skew, "K_max") > line(straight, "K_max")


@pytest.mark.parametrize("direction", ["diagonal", "radial", "unknown", None])
def test_it_is_for_what_is_neither_along_nor_round(direction):
    word = said(direction) if direction else None
    assert found(METHOD, SKEW, crack_direction=word).outcome is Outcome.COMPUTED


@pytest.mark.parametrize(
    "name", ["limit_shear_stress", "mean_shear_stress", "limit_flight_stress"]
)
def test_without_every_stress_it_cannot_be_computed(name):
    result = found(METHOD, SKEW, **{name: None})
    assert result.outcome is Outcome.MISSING_INPUT
    assert [m.name for m in result.missing] == [name]


NEAR = Obstacle(ObstacleKind.JOINT, "X", 200.0, 300.0, 140.0, 400.0)


@pytest.mark.parametrize(
    ("change", "test"),
    [
        ({"element": said("stringer")}, "structural item"),
        ({"pressurised": said("no")}, "panel is pressurised"),
        ({"crack_direction": said("longitudinal")}, "direction of the crack"),
        ({"surroundings": around(x=5.0)}, "inside one bay"),
        ({"surroundings": around(obstacles=(NEAR,))}, "distance of a tip"),
        ({"centre_stiffener": said("broken_stiffener")}, "stiffener under the crack"),
    ],
)
def test_where_it_does_not_apply_it_says_why(change, test):
    result = found(METHOD, SKEW, **change)
    assert result.outcome is Outcome.NOT_COVERED
    assert any(test in warning for warning in result.warnings)


def test_without_known_crack_there_are_threshold_and_repeat():
    result = unknown(METHOD, SKEW)
    assert result.threshold.uncapped == result.lives[0].cycles // 2


@settings(max_examples=8, deadline=None)
@given(st.floats(5, 60), st.floats(1.05, 1.5))
def test_more_shear_is_never_better(shear, more):
    low = found(METHOD, SKEW, limit_shear_stress=recorded(shear, "MPa"))
    high = found(METHOD, SKEW, limit_shear_stress=recorded(shear * more, "MPa"))
    assert high.margin_residual < low.margin_residual
    assert high.life_cycles <= low.life_cycles
