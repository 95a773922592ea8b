"""Cracks in a member's flange and from its fastener holes."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.assessment import Part, assess
from repairs.analysis.inputs import TOUGHNESS_UNIT
from repairs.analysis.registry import evaluate
from repairs.analysis.types import (
    INCH,
    KSI,
    KSI_ROOT_INCH,
    ROOT_1000,
    Outcome,
    Use,
)
from tests.outside import outside
from tests.repairs.analysis.cases import KC, LAW, inputs, policy, recorded, said
from tests.repairs.analysis.test_member_section import MEMBER

FLANGE, HOLE = "cracked-member-flange", "cracked-member-hole"
CRACKED = {
    **MEMBER,
    "damage_type": said("crack"),
    "crack_origin": said("edge"),
    "crack_length": recorded(4.0, "mm"),
    "crack_length_uncertainty": recorded(0.5, "mm"),
    "cycle_max_stress": recorded(70.0, "MPa"),
    "cycle_ratio": recorded(0.1, "-"),
    "toughness": recorded(KC, TOUGHNESS_UNIT),
    "growth_law": LAW,
    "growth_policy": policy(2.0),
    "repeat_policy": policy(3.0),
    "detectable_length": recorded(6.35, "mm"),
    "life_base": said("since new"),
    "accumulated_cycles": recorded(20_000, "cycles"),
    "validity_cycles": recorded(90_000, "cycles"),
    "member_failed": said("no"),
    "member_holes": said("no"),
}
AT_HOLE = {
    **CRACKED,
    "crack_origin": said("fastener_hole"),
    "member_holes": said("yes"),
    "hole_cracked": said("yes"),
    "hole_load": said("loaded"),
    "load_transfer": recorded(0.05, "-"),
    "bearing_strength": recorded(820.0, "MPa"),
    "hole_diameter": recorded(4.0, "mm"),
    "edge_distance": recorded(12.0, "mm"),
    "edge_crack_length": recorded(1.5, "mm"),
    "edge_crack_uncertainty": recorded(0.2, "mm"),
    "both_sides": said("no"),
}
FOUND, SISTER = Use.FOUND_DAMAGE, Use.NO_KNOWN_CRACK


def flange(use: Use = FOUND, **changes):
    return evaluate(FLANGE, use, inputs(CRACKED, **changes))


def hole(use: Use = FOUND, **changes):
    return evaluate(HOLE, use, inputs(AT_HOLE, **changes))


@pytest.mark.parametrize(
    ("a", "kc", "fracture"),
    [(0.5, 43, 29.50), (1.0, 43, 18.70), (2.0, 43, 9.61), (1.0, 68, 29.57)],
)
def test_fracture_agrees_with_the_notes_edge_cracked_panel(a, kc, fracture):
    result = flange(
        member_width=recorded(6 * INCH, "mm"),
        crack_length=recorded(a * INCH, "mm"),
        crack_length_uncertainty=recorded(0.0, "mm"),
        toughness=recorded(kc * KSI_ROOT_INCH, TOUGHNESS_UNIT),
    )
    found = next(m.strength for m in result.margins if m.mechanism == "fracture")
    outside(
        "Crack in a member's flange, fracture",
        source="Public university notes, edge-cracked panel, by their polynomial",
        given=f"W 6, a {a:g} in, Kc {kc} ksi√in",
        published=fracture,
        computed=found / KSI,
        unit="ksi",
        rel=0.015,
        route="quoted",
    )


def test_stress_is_that_of_the_section_beside_the_crack():
    result = flange()
    assert result.required_residual_mpa == pytest.approx(18_000 / 130)
    assert result.ultimate_mpa == pytest.approx(1.5 * 18_000 / 130)
    bent = flange(load_kind=said("bending"))
    assert bent.required_residual_mpa == pytest.approx(60_000 * 15 / 9000)


def test_a_known_crack_has_two_lives_and_no_interval():
    result = flange()
    assert result.outcome is Outcome.COMPUTED
    assert [li.base for li in result.lives] == ["from finding"] * 2
    assert result.threshold is result.repeat is None
    assert len(result.curves) == 2


def test_without_known_crack_there_is_a_threshold_and_a_repeat():
    result = flange(SISTER)
    start = next(li.value for li in result.note if li.symbol == "a₀")
    assert start == pytest.approx(0.125 * INCH)
    assert result.threshold.uncapped == math.floor(result.life_cycles / 2)
    assert result.repeat.uncapped is not None
    assert result.lives[0].base == "since new"


def test_what_is_not_a_crack_asks_no_crack_method_when_found():
    result = flange(damage_type=said("corrosion"))
    assert result.outcome is Outcome.NOT_COVERED
    assert flange(SISTER, damage_type=said("corrosion")).outcome is Outcome.COMPUTED


def test_a_member_pressed_is_not_pulled_open():
    for kind in ("compression", "shear"):
        assert flange(load_kind=said(kind)).outcome is Outcome.NOT_COVERED


@pytest.mark.parametrize(
    ("name", "asked"),
    [
        ("member_width", {"member_width"}),
        ("cycle_max_stress", {"cycle_max_stress"}),
        ("toughness", {"member_toughness"}),
        ("yield_strength", {"member_yield"}),
        ("growth_law", {"growth_law", "member_of_panel_material"}),
    ],
)
def test_what_is_not_recorded_is_missing_and_asked_for_as_stated(name, asked):
    result = flange(**{name: None})
    assert {m.name for m in result.missing} == asked
    assert result.life_cycles is None


@settings(max_examples=15, deadline=None)
@given(st.floats(0.5, 12.0), st.floats(1.05, 1.8))
def test_a_longer_crack_is_weaker_and_lives_less(length, more):
    short = flange(crack_length=recorded(length, "mm"))
    long = flange(crack_length=recorded(length * more, "mm"))
    assert long.residual_strength_mpa < short.residual_strength_mpa
    assert long.life_cycles <= short.life_cycles


def test_a_crack_across_the_flange_is_not_covered():
    result = flange(crack_length=recorded(29.5, "mm"))
    assert result.outcome is Outcome.NOT_COVERED


# Holes


def test_a_hole_crack_is_the_hole_methods_and_no_edge_crack():
    assert flange(crack_origin=said("fastener_hole")).outcome is Outcome.NOT_COVERED
    result = hole()
    assert result.outcome is Outcome.COMPUTED
    assert result.required_residual_mpa == pytest.approx(18_000 / 130)


def test_k_at_an_open_hole_is_that_of_the_published_worksheet():
    result = hole(
        hole_load=said("open"),
        hole_diameter=recorded(0.375 * INCH, "mm"),
        member_width=recorded(5 * INCH, "mm"),
        edge_distance=recorded(2.5 * INCH, "mm"),
        edge_crack_length=recorded(0.08 * INCH, "mm"),
        edge_crack_uncertainty=recorded(0.0, "mm"),
        cycle_max_stress=recorded(8 * KSI, "MPa"),
    )
    k = next(line.value for line in result.note if line.symbol == "K_max")
    outside(
        "Crack at a fastener hole of a member",
        source="Public university worksheet on cracks at a hole",
        given="D 0.375, W 5, c 0.08 in, one crack, 8 ksi",
        published=7.47,
        computed=k * ROOT_1000 / KSI_ROOT_INCH,
        unit="ksi√in",
        absolute=0.005,
    )


def test_a_loaded_hole_of_a_member_needs_its_transfer():
    assert [m.name for m in hole(load_transfer=None).missing] == ["load_transfer"]
    more = hole(load_transfer=recorded(0.2, "-"))
    assert more.life_cycles < hole().life_cycles
    unknown = hole(hole_load=said("unknown"))
    assert unknown.outcome is Outcome.MISSING_INPUT


def test_sisters_get_the_flaw_at_the_hole_where_there_are_holes():
    result = hole(SISTER)
    assert any("assumed corner flaw" in li.formula for li in result.note)
    assert result.threshold.uncapped is not None
    none = hole(SISTER, member_holes=said("no"))
    assert none.outcome is Outcome.NOT_COVERED
    asked = hole(SISTER, member_holes=None)
    assert "member_holes" in [m.name for m in asked.missing]


def test_a_cracked_member_is_answered_by_section_and_crack_together():
    whole = assess(FOUND, inputs(CRACKED))
    answers = {a.result.method for a in whole.answers if a.part is Part.ANSWERS}
    assert answers == {"damaged-member-section", FLANGE}
    least = min(a.result.margin_residual for a in whole.answers
                if a.part is Part.ANSWERS)  # fmt: skip
    assert whole.result.margin_residual == least
    assert whole.result.lives


def test_the_threshold_of_a_member_is_the_lesser_of_flange_and_hole():
    whole = assess(SISTER, inputs(AT_HOLE))
    found = {a.result.method: a.result for a in whole.answers}
    assert whole.result.threshold.uncapped == min(
        found[FLANGE].threshold.uncapped, found[HOLE].threshold.uncapped
    )
