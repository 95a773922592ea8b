"""Blend-out as a whole: thickness, Kt, static margin, life used, and what governs."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.errors import OutOfRangeError
from repairs.analysis.registry import evaluate
from repairs.analysis.stress_life.notches import notch_factor
from repairs.analysis.types import KSI, Grade, Outcome, Sourced, Use
from tests.outside import outside
from tests.repairs.analysis.cases import (
    BLEND,
    CURVES,
    FTU,
    PSI,
    RADIUS,
    THICKNESS,
    around,
    inputs,
    policy,
    recorded,
    said,
)

METHOD = "corrosion-blend-out"
HOOP = 8.5 * PSI * RADIUS / THICKNESS


def blended(use: Use = Use.NO_KNOWN_CRACK, **changes):
    return evaluate(METHOD, use, inputs(BLEND, **changes))


def line(result, symbol: str) -> float:
    return next(li.value for li in result.note if li.symbol == symbol)


@pytest.mark.parametrize(
    ("ratio", "kt"), [(6, 1.894), (10, 1.555), (20, 1.281), (40, 1.141)]
)
def test_kt_of_a_blend_by_its_full_length_over_depth(ratio, kt):
    # 2w/d of 20 ("20:1") is 1.281; table recomputed independently.
    assert notch_factor(1.0, ratio) == pytest.approx(kt, abs=6e-4)


@pytest.mark.parametrize("ratio", [0.1, 0.2, 0.4])
def test_the_dish_by_petersons_chart_of_edge_grooves(ratio):
    # d / rho of an arc is 2 d^2 / (w^2 + d^2); w for the ratio wanted.
    w = math.sqrt(2 / ratio - 1)
    outside(
        "Blend as a shallow groove: Kt",
        source="Peterson, chart 2.4, two U notches in a wide strip, coefficient C1 "
        "0.955 + 2.169 √y + 0.081 y, in public code",
        given=f"depth over radius y = {ratio:g}, full length over depth {2 * w:.1f}",
        published=0.955 + 2.169 * math.sqrt(ratio) + 0.081 * ratio,
        computed=notch_factor(1.0, 2 * w),
        rel=0.045,
        route="quoted",
    )


def test_kt_of_a_semicircle_and_its_limit():
    assert notch_factor(1.0, 2.0) == pytest.approx(3.0)  # Inglis, exactly
    with pytest.raises(OutOfRangeError, match="shallow"):
        notch_factor(1.1, 2.0)


def test_one_sided_loss_of_a_tenth():
    # t 1.6, d 0.16: 1/0.9 = 1.1111, and 1.4815 with the bound of eccentricity.
    result = blended(
        thickness=recorded(1.6, "mm"),
        remaining_thickness=recorded(1.44, "mm"),
        gauge_uncertainty=recorded(0.0, "mm"),
    )
    stress = 1.5 * 1.33 * 8.6 * PSI * RADIUS / 1.6
    assert result.margin_ultimate == pytest.approx(
        FTU / (1.1111 * stress) - 1, rel=1e-3
    )
    # Mean stress and bending of a strip 1 wide: N / t_l + 6 (N d / 2) / t_l^2.
    force = stress * 1.6
    outside(
        "Loss from one side: margin with the bound of eccentricity",
        source="strip free to bend, force in the middle of the whole section: statics",
        given="t 1.6 mm, 0.16 mm lost from one side, no gauge uncertainty",
        published=FTU / (force / 1.44 + 6 * force * 0.08 / 1.44**2) - 1,
        computed=line(result, "M_ult,e"),
        absolute=1e-9,
        route="closed form",
    )
    bound = line(result, "M_ult,e")
    assert bound == pytest.approx(FTU / (1.4815 * stress) - 1, rel=1e-3)


def test_gauge_and_cladding_are_taken_off():
    result = blended(clad=said("yes"), clad_thickness=recorded(0.07, "mm"))
    assert line(result, "t_left") == pytest.approx(1.25 - 0.02 - 0.07)
    assert result.residual_strength_mpa == pytest.approx(FTU * 1.16 / 1.4)


def test_a_clad_panel_without_its_cladding_is_incomplete():
    result = blended(clad=said("yes"))
    assert [m.name for m in result.missing] == ["clad_thickness"]


def test_depths_of_earlier_blends_add_up():
    result = blended(
        earlier_depth=recorded(0.20, "mm"), blend_depth=recorded(0.10, "mm")
    )
    assert line(result, "d_tot") == pytest.approx(0.32)
    assert any("sum" in w for w in result.warnings)
    measured = blended(
        earlier_depth=recorded(0.05, "mm"), blend_depth=recorded(0.05, "mm")
    )
    assert line(measured, "d_tot") == pytest.approx(0.17)


def test_a_clad_panel_on_a_bare_curve_is_barred_until_a_factor_is_recorded():
    clad = {"clad": said("yes"), "clad_thickness": recorded(0.07, "mm")}
    hot = {"radius": recorded(3000.0, "mm"), "thickness": recorded(0.9, "mm"),
           "remaining_thickness": recorded(0.8, "mm")}  # fmt: skip
    barred = blended(**clad, **hot)
    assert any("Clad panel on a bare" in b for b in barred.barred)
    factor = Sourced(2.0, "-", "test report 7, page 3", Grade.ADOPTED)
    mended = blended(**clad, **hot, clad_life_factor=factor)
    assert not any("Clad panel" in b for b in mended.barred)
    lives = [next(li.cycles for li in r.lives if "stress" in li.title)
             for r in (barred, mended)]  # fmt: skip
    assert lives[0] == pytest.approx(2 * lives[1], abs=1)


def test_below_the_last_term_growth_governs_and_the_words_are_said():
    result = blended()
    stress_life, growth = result.lives
    assert stress_life.cycles is None
    assert stress_life.remark == "no finite life on this curve; not unlimited life"
    assert result.life_cycles == growth.cycles
    assert any("not unlimited life" in w for w in result.warnings)


HIGH = {
    "radius": recorded(3000.0, "mm"),
    "thickness": recorded(0.9, "mm"),
    "remaining_thickness": recorded(0.8, "mm"),
    "skin_cycles": recorded(50_000, "cycles"),
}


def test_life_already_used_counts():
    result = blended(**HIGH)
    before = 8.5 * PSI * 3000 / 0.9
    old = CURVES.cycles(1.0, before, 0.0)
    kt = notch_factor(0.12, 24.0)
    new = CURVES.cycles(kt, before * 0.9 / 0.78, 0.0)
    left = next(li for li in result.lives if "stress" in li.title)
    assert left.cycles == math.floor((1 - 50_000 / old) * new)
    reason = said("panel replaced on 2024-05-01, document D-7")
    waived = blended(**HIGH, life_used_reason=reason)
    kept = next(li for li in waived.lives if "stress" in li.title)
    assert kept.cycles == math.floor(new)
    assert any("D-7" in w for w in waived.warnings)


def test_the_stress_life_curve_is_drawn_with_the_cycle_on_it():
    curve = next(c for c in blended(**HIGH).curves if c.key == "stress_life")
    (point,) = curve.marks
    lives, stresses = zip(*curve.points, strict=True)
    assert list(stresses) == sorted(stresses, reverse=True)
    below = max(s for n, s in curve.points if n >= point.x)
    above = min(s for n, s in curve.points if n <= point.x)
    assert below <= point.y <= above
    endless = next(c for c in blended().curves if c.key == "stress_life")
    assert endless.marks[0].x is None
    assert endless.marks[0].y < endless.points[-1][1]
    assert lives[0] == 1e3


def test_bearing_is_said_to_fall_unless_no_fastener_is_in_reach():
    assert any("Bearing" in w for w in blended().warnings)
    assert line(blended(), "P_br′/P_br") == pytest.approx(1.23 / 1.4)
    damage = {"damage_length": recorded(10.0, "mm")}
    far = blended(**damage, fastener_distance=recorded(7.1, "mm"))
    near = blended(**damage, fastener_distance=recorded(6.9, "mm"))
    assert not any("Bearing" in w for w in far.warnings)
    assert any("Bearing" in w for w in near.warnings)


def test_life_used_up_leaves_none():
    result = blended(**{**HIGH, "skin_cycles": recorded(9e9, "cycles")})
    left = next(li for li in result.lives if "stress" in li.title)
    assert left.cycles == 0
    assert result.life_cycles == 0
    assert any("used up" in w for w in result.warnings)


def test_the_smaller_of_both_lives_over_their_factors_governs():
    base = blended(**HIGH)
    lives = {li.title: li.cycles for li in base.lives}
    lived, grown = (
        lives["mean stress-life left"],
        min(v for k, v in lives.items() if k != "mean stress-life left"),
    )
    for stress_factor, growth_factor in ((1.0, 50.0), (100.0, 1.0)):
        result = blended(
            **HIGH,
            stress_life_policy=policy(stress_factor),
            growth_policy=policy(growth_factor),
            validity_cycles=None,
        )
        smaller = min(lived / stress_factor, grown / growth_factor)
        assert result.threshold.uncapped == pytest.approx(smaller, abs=1)


def test_without_one_of_both_factors_there_is_no_threshold():
    result = blended(**HIGH, stress_life_policy=None)
    assert result.threshold is None
    assert any("needs an engineer" in w for w in result.warnings)


def test_corrosion_that_is_not_all_removed_is_not_covered():
    result = blended(damage_removed=said("no"))
    assert result.outcome is Outcome.NOT_COVERED
    assert result.governing == "all damage removed"


def test_nothing_left_is_not_covered_and_never_a_number():
    result = blended(remaining_thickness=recorded(0.01, "mm"))
    assert result.outcome is Outcome.NOT_COVERED
    assert "Measure it again" in result.warnings[0]
    assert result.residual_strength_mpa is None


def test_as_found_damage_gets_lives_but_no_interval():
    result = blended(Use.FOUND_DAMAGE)
    assert result.outcome is Outcome.COMPUTED
    assert result.threshold is result.repeat is None
    assert not [li for li in result.note if li.symbol == "N_thr"]


def test_an_adopted_flaw_replaces_the_published_one():
    flaw = Sourced(0.508, "mm", "demo value, invented", Grade.ADOPTED)
    small = blended(assumed_flaw=flaw)
    assert small.lives[1].cycles > blended().lives[1].cycles
    assert any(li.source == "demo value, invented" for li in small.note)


def test_a_wing_skin_uses_its_recorded_cycle():
    wing = {
        "pressurised": said("no"),
        "thickness": recorded(3.5, "mm"),
        "remaining_thickness": recorded(3.2, "mm"),
        "surroundings": around(bay=None),
        "limit_flight_stress": recorded(175.0, "MPa"),
        "cycle_max_stress": recorded(100.0, "MPa"),
        "cycle_ratio": recorded(-0.2, "-"),
    }
    result = blended(**wing)
    assert result.outcome is Outcome.COMPUTED
    assert result.ultimate_mpa == pytest.approx(262.5)
    assert result.ultimate_kept == "yes"
    missing = blended(**{**wing, "cycle_ratio": None})
    assert [m.name for m in missing.missing] == ["cycle_ratio"]


def test_stress_above_yield_is_outside_the_curves():
    result = blended(
        stress_life=replace(CURVES), yield_strength=recorded(8 * KSI, "MPa")
    )
    assert result.outcome is Outcome.NOT_COVERED
    assert "yield" in result.warnings[0]


@settings(max_examples=15, deadline=None)
@given(st.floats(0.7, 1.35), st.floats(0.01, 0.2))
def test_a_deeper_blend_is_never_better(remaining, deeper):
    shallow = blended(remaining_thickness=recorded(remaining, "mm"))
    deep = blended(remaining_thickness=recorded(remaining - deeper, "mm"))
    assert deep.margin_ultimate < shallow.margin_ultimate
    assert deep.lives[1].cycles <= shallow.lives[1].cycles
