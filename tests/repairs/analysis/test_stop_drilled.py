"""A stop-drilled crack: the notch it makes, when it cracks again, and the cautions."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.assessment import Part, assess
from repairs.analysis.methods.stop_drilled import stop_hole_kt
from repairs.analysis.types import Outcome, Use
from tests.outside import outside
from tests.repairs.analysis.cases import (
    CRACK,
    CURVES,
    PSI,
    RADIUS,
    THICKNESS,
    inputs,
    recorded,
    said,
)
from tests.repairs.analysis.crack_cases import DRILLED, FLAT, found, line, unknown

METHOD = "stop-drilled-crack"
TITLE = "Stop-drilled crack"
PLAIN = "pressurised-skin-longitudinal-crack"
SHORT = {"crack_length": recorded(10.0, "mm")}
SHELL = {**CRACK, **DRILLED, **SHORT}
WING = {**FLAT, **DRILLED, **SHORT}
HOOP = 8.5 * PSI * RADIUS / THICKNESS


def test_kt_of_the_notch():
    outside(
        TITLE,
        source="Inglis 1913, elliptical notch: 1 + 2√(a/ρ)",
        given="a 10 mm, ρ 1.6 mm",
        published=6.0,
        computed=stop_hole_kt(10.0, 1.6),
        rel=1e-12,
        route="closed form",
    )
    outside(
        TITLE,
        source="hole in a wide sheet, Kt 3",
        given="hole alone, a = ρ",
        published=3.0,
        computed=stop_hole_kt(4.0, 4.0),
        rel=1e-12,
        route="closed form",
    )
    # Creager and Paris: 2 K / sqrt(pi rho) is the share of the crack in it, 500 MPa.
    share = (stop_hole_kt(10.0, 1.6) - 1) * 100
    assert share == pytest.approx(2 * 100 * math.sqrt(math.pi * 10 / (math.pi * 1.6)))


def test_the_notch_reaches_to_the_far_edges_of_its_holes():
    result = found(METHOD, SHELL)
    assert line(result, "a_n") == 5.0 + 4.0
    assert line(result, "Kt") == pytest.approx(1 + 2 * math.sqrt(9 / 4))


def test_life_until_it_cracks_again_is_stress_life_at_the_notch_on_net_stress():
    result = found(METHOD, WING)
    net = 80 / (1 - 18 / 500)
    life = CURVES.cycles(1 + 2 * math.sqrt(9 / 4), net, -0.2)
    used = CURVES.cycles(1.0, 80.0, -0.2)
    left = life * (1 - (20_000 / used if used else 0))
    assert result.lives[0].cycles == math.floor(left)
    assert result.life_cycles == result.lives[0].cycles
    assert result.life_base == "from stop-drilling"
    assert result.life_after_factor_cycles == math.floor(left / 5)


def test_a_pressurised_notch_bulges():
    result = found(METHOD, SHELL)
    x = 9 / math.sqrt(RADIUS * THICKNESS)
    bulging = math.sqrt(1 + 0.52 * x + 1.29 * x * x - 0.074 * x**3)
    assert line(result, "σ_net") == pytest.approx(HOOP * bulging / (1 - 18 / 5080))


def test_strength_and_growth_take_the_notch_for_a_crack():
    drilled = found(METHOD, SHELL)
    crack = found(PLAIN, CRACK, crack_length=recorded(18.0, "mm"))
    assert drilled.residual_strength_mpa == crack.residual_strength_mpa
    assert [life.cycles for life in drilled.lives[1:]] == [
        life.cycles for life in crack.lives
    ]
    assert all("has started again" in life.title for life in drilled.lives[1:])


def test_cautions_are_said_and_the_steel_rule_is_not_used():
    words = " ".join(found(METHOD, SHELL).warnings)
    for caution in ("no permanent repair", "eddy current", "smooth", "is for steel"):
        assert caution in words
    assert found(METHOD, SHELL).threshold is found(METHOD, SHELL).repeat is None


def test_above_the_curves_no_life_is_given_and_growth_counts_at_once():
    # A crack of 24 mm with a hole of 6.4 mm has Kt 5.36; the curves end at 5.
    sharp = {"stop_hole_diameter": recorded(6.4, "mm")}
    result = found(METHOD, {**CRACK, **DRILLED}, **sharp)
    assert line(result, "Kt") == pytest.approx(5.359, abs=1e-3)
    assert result.lives[0].cycles is None
    assert any("No life until a crack starts again" in w for w in result.warnings)
    assert result.life_cycles == result.lives[1].cycles


def test_where_ultimate_is_lost_already_no_life_is_given():
    weak = found(METHOD, WING, limit_flight_stress=recorded(250.0, "MPa"))
    assert weak.margin_ultimate < 0
    assert weak.life_cycles == 0


def test_it_stands_before_the_plain_crack_which_bounds_it():
    asked = assess(Use.FOUND_DAMAGE, inputs({**SHELL, "damage_type": said("crack")}))
    parts = {a.result.method: a.part for a in asked.answers}
    assert parts[METHOD] is Part.ANSWERS
    assert parts[PLAIN] is Part.BESIDE
    assert asked.result.method == METHOD


@pytest.mark.parametrize(
    ("base", "change", "test"),
    [
        (SHELL, {"element": said("stringer")}, "structural item"),
        (SHELL, {"stop_drilled": said("no")}, "stop-drilled"),
        (SHELL, {"stop_drilled": None}, "stop-drilled"),
        (WING, {"load_kind": said("compression")}, "kind of load"),
        (SHELL, {"crack_origin": said("fastener_hole")}, "where the crack starts"),
    ],
)
def test_where_it_does_not_apply_it_says_why(base, change, test):
    result = found(METHOD, base, **change)
    assert result.outcome is Outcome.NOT_COVERED
    assert any(test in warning for warning in result.warnings)


def test_a_stop_drilled_crack_is_no_structure_without_known_crack():
    result = unknown(METHOD, SHELL)
    assert result.outcome is Outcome.NOT_COVERED
    assert "known damage" in result.warnings[0]


@pytest.mark.parametrize("name", ["stop_hole_diameter", "stress_life", "toughness"])
def test_what_is_missing_is_named(name):
    result = found(METHOD, SHELL, **{name: None})
    assert result.outcome is Outcome.MISSING_INPUT
    assert [m.name for m in result.missing] == [name]


@settings(max_examples=10, deadline=None)
@given(st.floats(6, 16), st.floats(1.05, 1.5))
def test_a_longer_crack_never_lasts_longer(length, more):
    short = found(METHOD, WING, crack_length=recorded(length, "mm"))
    long = found(METHOD, WING, crack_length=recorded(length * more, "mm"))
    assert long.residual_strength_mpa < short.residual_strength_mpa
    assert long.lives[0].cycles <= short.lives[0].cycles
