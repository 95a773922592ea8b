"""How an answer moves: against closed forms, and against calculating again."""

from __future__ import annotations

import math

import pytest

from repairs.analysis.assessment import assess
from repairs.analysis.sensitivity import sensitivity
from repairs.analysis.types import Use
from tests.repairs.analysis.cases import CRACK as SKIN
from tests.repairs.analysis.cases import inputs, policy, recorded, said

CRACK = {**SKIN, "damage_type": said("crack")}
COUNTED = {"crack_length_uncertainty": recorded(0.5, "mm")}


@pytest.fixture(scope="module")
def found():
    return sensitivity(Use.FOUND_DAMAGE, inputs(CRACK, **COUNTED))


def row(found, name):
    return next(one for one in found.moved if one.name == name)


def test_the_base_is_the_answer_as_it_stands(found):
    result = assess(Use.FOUND_DAMAGE, inputs(CRACK, **COUNTED)).result
    assert found.base.margin_residual == result.margin_residual
    assert found.base.margin_ultimate == result.margin_ultimate
    assert found.base.usable_life == result.life_after_factor_cycles


def test_pressure_moves_the_margin_by_the_share_of_the_hoop_stress(found):
    """Required stress is 1.15 (p + p_ext) R / t; what the skin bears holds no p."""
    given = inputs(CRACK)
    p, outside = (
        given.number(name).value for name in ("normal_pressure", "external_pressure")
    )
    moved = row(found, "normal_pressure")
    for end, share in ((moved.less, 0.9), (moved.more, 1.1)):
        ratio = (p + outside) / (share * p + outside)
        expected = (found.base.margin_residual + 1) * ratio - 1
        assert end.margin_residual == pytest.approx(expected, rel=1e-12)


def test_life_goes_as_one_over_c_and_one_over_the_factor(found):
    """da/dN = C f(K): N is proportional to 1/C; usable life is N over the factor."""
    for name in ("growth_law", "growth_policy"):
        moved = row(found, name)
        for end, share in ((moved.less, 0.9), (moved.more, 1.1)):
            assert end.usable_life == pytest.approx(
                found.base.usable_life / share, abs=1.5
            )


def test_a_measured_length_is_moved_by_its_own_uncertainty(found):
    moved = row(found, "crack_length")
    assert (moved.step, moved.stated) == (0.5, True)
    again = assess(
        Use.FOUND_DAMAGE,
        inputs(CRACK, **COUNTED, crack_length=recorded(24.5, "mm")),
    ).result
    assert moved.more.usable_life == again.life_after_factor_cycles
    assert moved.less.usable_life > found.base.usable_life > moved.more.usable_life


def test_a_stated_uncertainty_goes_before_the_tenth():
    given = inputs(CRACK)
    moved = row(sensitivity(Use.FOUND_DAMAGE, given, {"thickness": 0.05}), "thickness")
    assert (moved.step, moved.stated) == (0.05, True)
    tenth = row(sensitivity(Use.FOUND_DAMAGE, given), "thickness")
    assert (tenth.step, tenth.stated) == (pytest.approx(0.14), False)


@pytest.mark.parametrize(
    ("name", "quantity", "sign"),
    [
        ("thickness", "margin_residual", 1),
        ("thickness", "usable_life", 1),
        ("radius", "margin_residual", -1),
        ("toughness", "margin_residual", 1),
        ("crack_length", "usable_life", -1),
        ("relief_pressure", "margin_ultimate", -1),
    ],
)
def test_more_is_better_or_worse_as_it_must_be(found, name, quantity, sign):
    moved = row(found, name)
    rise = getattr(moved.more, quantity) - getattr(moved.less, quantity)
    assert rise * sign >= 0


def test_the_farthest_stands_first_and_what_moves_nothing_is_named(found):
    reaches = [
        one.reach(found.base, "margin_residual")
        for one in found.ranked("margin_residual")
    ]
    assert reaches == sorted(reaches, reverse=True)
    assert min(reaches) > 0
    assert "detectable size with the hidden part" in found.still
    assert not {one.title for one in found.ranked("usable_life")} & set(found.still)


def test_factors_fixed_by_a_rule_are_not_moved(found):
    names = {one.name for one in found.moved}
    assert not names & {"residual_pressure_factor", "ultimate_factor", "proof_factor"}
    assert "crack_length_uncertainty" not in names


def test_an_answer_that_is_lost_says_why_and_stands_first():
    """A crack that a tenth more takes over the edge of what the record covers."""
    given = inputs(CRACK, crack_length=recorded(470.0, "mm"))
    found = sensitivity(Use.FOUND_DAMAGE, given)
    lost = [one for one in found.moved if one.more.why_none or one.less.why_none]
    assert lost
    for one in lost:
        assert one.more.margin_residual is None or one.less.margin_residual is None
    if found.base.margin_residual is not None:
        first = found.ranked("margin_residual")[0]
        assert first.reach(found.base, "margin_residual") == math.inf


def test_a_factor_that_may_not_be_is_no_answer():
    given = inputs(CRACK, growth_policy=policy(1.05))
    moved = row(sensitivity(Use.FOUND_DAMAGE, given), "growth_policy")
    assert moved.less.usable_life is None
    assert "range" in moved.less.why_none or "1" in moved.less.why_none
    assert moved.more.usable_life is not None
