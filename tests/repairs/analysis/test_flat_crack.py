"""A crack in skin without pressure: Feddersen's worked panel, depth, direction."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.growth.laws import StressCycle
from repairs.analysis.growth.separable import paris_cycles
from repairs.analysis.intensity.skew import skew_bound
from repairs.analysis.surroundings import Obstacle, ObstacleKind
from repairs.analysis.types import INCH, KSI, KSI_ROOT_INCH, GrossStress, Outcome
from tests.outside import outside
from tests.repairs.analysis.cases import LAW, around, recorded, said
from tests.repairs.analysis.crack_cases import FLAT, ROUND, found, line, unknown

METHOD = "unpressurised-skin-crack"
TITLE = "Through crack in unpressurised skin"
SHEET_7075 = {
    "yield_strength": recorded(63 * KSI, "MPa"),
    "toughness": recorded(68 * KSI_ROOT_INCH, "MPa*sqrt(mm)"),
    "panel_length": recorded(10 * INCH, "mm"),
}


def panel(length: float, **changes):
    """The worked panel, Kc 68 ksi√in, Fty 63 ksi, W 10 in; crack length in inches."""
    crack = recorded(length * INCH, "mm")
    return found(METHOD, FLAT, crack_length=crack, **SHEET_7075, **changes)


def test_a_short_crack_lies_on_feddersens_line():
    # S1 = 2 Sy / 3 at 2a1 = 1.6688 in; line at 0.6 in: 63 (1 - 0.6 / (3 * 1.6688)).
    result = panel(0.6)
    assert result.governing == "short-crack line"
    outside(
        TITLE,
        source="Feddersen's three-region construct (public university notes), inputs "
        "of their 7075 panel",
        given="2a 0.6 in, W 10 in, Kc 68 ksi√in, Fty 63 ksi",
        published=55.45,
        computed=result.residual_strength_mpa / KSI,
        unit="ksi",
        rel=5e-4,
        route="closed form",
    )


def test_a_long_crack_fractures_near_feddersens_long_line():
    # The long line gives 17.83 ksi; the secant width correction, which is used, less.
    result = panel(6.0)
    assert result.governing == "fracture"
    outside(
        TITLE,
        source="Feddersen's long-crack line, to zero at the full width",
        given="2a 6 in, W 10 in, Kc 68 ksi√in, Fty 63 ksi",
        published=17.83,
        computed=result.residual_strength_mpa / KSI,
        unit="ksi",
        rel=0.055,
        route="another method",
    )
    exact = 68 / math.sqrt(math.pi * 3 / math.cos(0.3 * math.pi))
    assert result.residual_strength_mpa / KSI == pytest.approx(exact)


def test_growth_in_a_wide_sheet_is_paris_closed_form():
    wide = recorded(1e5, "mm")
    result = found(METHOD, FLAT, panel_length=wide, cycle_ratio=recorded(0.0, "-"))
    ends = [line_.y / 2 for line_ in result.curves[1].marks]
    cycle = StressCycle(GrossStress(80.0), 0.0)
    for life, end in zip(result.lives, ends, strict=True):
        outside(
            TITLE,
            source="Paris' law integrated for a constant factor",
            given=f"2a 24 to {2 * end:.0f} mm, 0 to 80 MPa, very wide sheet",
            published=paris_cycles(LAW, 1.0, cycle, 12.0, end),
            computed=life.cycles,
            unit="cycles",
            rel=1e-4,
            route="closed form",
        )


def test_requirements_are_limit_and_ultimate_of_the_recorded_stress():
    result = found(METHOD, FLAT)
    assert result.required_residual_mpa == 150.0
    assert result.ultimate_mpa == 225.0
    assert result.threshold is result.repeat is None
    assert {m.mechanism for m in result.margins} == {
        "fracture",
        "net-section yield",
        "short-crack line",
    }


def test_without_known_crack_there_are_threshold_and_repeat():
    result = unknown(METHOD, FLAT)
    assert result.threshold.uncapped == result.lives[0].cycles // 2
    assert result.repeat.uncapped > 0


@pytest.mark.parametrize(
    ("change", "factor"),
    [
        ({"crack_direction": said("longitudinal")}, 1.0),
        ({"crack_direction": said("diagonal")}, skew_bound(0.0)),
        ({"crack_direction": None}, skew_bound(0.0)),
        ({"load_kind": said("shear")}, skew_bound(-1.0)),
        ({"load_kind": None}, 1.0),
    ],
)
def test_a_direction_that_is_not_known_gets_the_bound_of_any(change, factor):
    straight = line(found(METHOD, FLAT), "K_max")
    assert line(found(METHOD, FLAT, **change), "K_max") == pytest.approx(
        straight * factor
    )


@pytest.mark.parametrize(
    ("change", "test"),
    [
        ({"element": said("stringer")}, "structural item"),
        ({"pressurised": said("yes")}, "panel is pressurised"),
        ({"crack_origin": said("edge")}, "where the crack starts"),
        ({"load_kind": said("compression")}, "kind of load"),
        ({"centre_stiffener": said("broken_stiffener")}, "stiffener under the crack"),
        ({"cycle_max_stress": recorded(-5.0, "MPa")}, "largest stress of a flight"),
    ],
)
def test_where_it_does_not_apply_it_says_why(change, test):
    result = found(METHOD, FLAT, **change)
    assert result.outcome is Outcome.NOT_COVERED
    assert any(test in warning for warning in result.warnings)
    assert result.residual_strength_mpa is None


def beside(distance: float):
    edge = Obstacle(ObstacleKind.CUTOUT, "X", 254 + distance, 900.0, -50.0, 50.0)
    return around(obstacles=(edge,))


def test_a_tip_keeps_one_crack_length_from_what_is_next_to_it():
    near = found(METHOD, FLAT, surroundings=beside(35.9))
    assert near.outcome is Outcome.NOT_COVERED
    assert "23.9 mm to cut-out X" in near.warnings[0]
    assert "at least 24.0 mm" in near.warnings[0]
    far = found(METHOD, FLAT, surroundings=beside(60.0))
    assert far.outcome is Outcome.COMPUTED
    assert line(far, "W") == 120.0
    assert "cut-out X (40.0 mm)" in far.lives[1].remark


def test_round_an_unpressurised_shell_bending_is_what_opens_it():
    changes = dict.fromkeys(("limit_flight_stress", "cycle_max_stress", "cycle_ratio"))
    shell = {**FLAT, **{n: v for n, v in ROUND.items() if "_sh" in n or "_long" in n}}
    shell["crack_direction"] = said("circumferential")
    result = found(METHOD, shell, **changes)
    assert result.required_residual_mpa == 80.0
    assert line(result, "σ") == pytest.approx(1.8 * 25)


def test_another_crack_near_by_is_another_method():
    near = {"ligament": recorded(20.0, "mm"), "crack_count": recorded(2, "-")}
    result = found(METHOD, FLAT, **near)
    assert result.outcome is Outcome.NOT_COVERED
    assert "at least 24.0 mm (one crack length)" in result.warnings[0]
    far = found(METHOD, FLAT, **{**near, "ligament": recorded(25.0, "mm")})
    assert far.outcome is Outcome.COMPUTED
    unknown_gap = found(METHOD, FLAT, crack_count=recorded(2, "-"))
    assert unknown_gap.outcome is Outcome.MISSING_INPUT
    assert any("not recorded, 2 cracks" in w for w in unknown_gap.warnings)


DEEP = {"crack_depth": recorded(2.0, "mm"), "crack_through": said("no")}
THICK = {"thickness": recorded(6.0, "mm"), "crack_length": recorded(8.0, "mm")}


def test_a_measured_depth_is_grown_through_first():
    depth = recorded(0.0, "mm")
    part = found(METHOD, FLAT, **THICK, **DEEP, damage_depth_uncertainty=depth)
    through = found(METHOD, FLAT, **THICK)
    assert part.residual_strength_mpa == through.residual_strength_mpa
    assert part.lives[0].cycles > through.lives[0].cycles
    assert line(part, "N_bt") > 0
    deeper = found(
        METHOD,
        FLAT,
        **{**THICK, **DEEP, "crack_depth": recorded(4.0, "mm")},
        damage_depth_uncertainty=depth,
    )
    assert through.lives[0].cycles < deeper.lives[0].cycles < part.lives[0].cycles


def test_without_a_depth_it_is_through_and_the_note_says_so():
    note = [row.formula for row in found(METHOD, FLAT).note]
    assert "A crack without a measured depth is taken as through." in note
    said_through = found(METHOD, FLAT, crack_through=said("yes")).note
    assert not any("taken as through" in row.formula for row in said_through)


def test_a_depth_without_its_uncertainty_is_missing():
    result = found(METHOD, FLAT, **THICK, **DEEP)
    assert [m.name for m in result.missing] == ["damage_depth_uncertainty"]


def test_a_long_shallow_crack_is_taken_as_through():
    shallow = {**DEEP, "damage_depth_uncertainty": recorded(0.0, "mm")}
    result = found(METHOD, FLAT, thickness=recorded(6.0, "mm"), **shallow)
    assert any("taken as through at once" in w for w in result.warnings)
    assert result.lives == found(METHOD, FLAT, thickness=recorded(6.0, "mm")).lives


@pytest.mark.parametrize("name", ["toughness", "thickness", "cycle_max_stress"])
def test_what_is_missing_is_named(name):
    result = found(METHOD, FLAT, **{name: None})
    assert result.outcome is Outcome.MISSING_INPUT
    assert name in [m.name for m in result.missing]


@settings(max_examples=15, deadline=None)
@given(st.floats(5, 100), st.floats(1.01, 1.5))
def test_a_longer_crack_is_never_stronger_and_never_lives_longer(length, more):
    short = found(METHOD, FLAT, crack_length=recorded(length, "mm"))
    long = found(METHOD, FLAT, crack_length=recorded(length * more, "mm"))
    assert long.residual_strength_mpa < short.residual_strength_mpa
    assert long.life_cycles <= short.life_cycles


@settings(max_examples=10, deadline=None)
@given(st.floats(40, 140), st.floats(1.01, 1.5))
def test_a_higher_stress_never_lives_longer(stress, more):
    low = unknown(METHOD, FLAT, cycle_max_stress=recorded(stress, "MPa"))
    high = unknown(METHOD, FLAT, cycle_max_stress=recorded(stress * more, "MPa"))
    assert high.life_cycles < low.life_cycles
