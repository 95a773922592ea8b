"""Wear as a loss of thickness, and only once its cause is gone."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.registry import evaluate
from repairs.analysis.stress_life.notches import notch_factor
from repairs.analysis.types import Outcome, Use
from tests.repairs.analysis.cases import FTU, SHELL, inputs, recorded, said

WORN = {
    **SHELL,
    "damage_type": said("wear"),
    "cause_removed": said("yes"),
    "damage_length": recorded(40.0, "mm"),
    "damage_depth": recorded(0.15, "mm"),
    "damage_depth_uncertainty": recorded(0.03, "mm"),
    "earlier_depth": recorded(0.0, "mm"),
}


def worn(use: Use = Use.FOUND_DAMAGE, **changes):
    return evaluate("wear-as-found", use, inputs(WORN, **changes))


def line(result, symbol: str) -> float:
    return next(li.value for li in result.note if li.symbol == symbol)


def test_wear_is_a_thinner_section_and_a_smooth_dish():
    result = worn()
    assert result.outcome is Outcome.COMPUTED
    assert result.residual_strength_mpa == pytest.approx(FTU * 1.22 / 1.4)
    assert line(result, "Kt") == pytest.approx(notch_factor(0.18, 40.0))
    assert result.threshold is result.repeat is None
    assert {life.base for life in result.lives} == {"from finding"}


def test_while_it_goes_on_there_is_no_life():
    result = worn(cause_removed=said("no"))
    assert result.outcome is Outcome.NOT_COVERED
    assert result.governing == "what wears it is removed"
    assert worn(cause_removed=None).outcome is Outcome.MISSING_INPUT


def test_blended_wear_and_wear_without_depth_are_not_its():
    assert worn(damage_removed=said("yes")).outcome is Outcome.NOT_COVERED
    missing = worn(damage_depth=None)
    assert [m.name for m in missing.missing] == ["damage_depth"]
    assert worn(Use.NO_KNOWN_CRACK).outcome is Outcome.NOT_COVERED


@pytest.mark.parametrize("kind", ["compression", "shear"])
def test_a_panel_that_buckles_says_what_its_margin_becomes(kind):
    result = worn(load_kind=said(kind))
    share = 1.22 / 1.4
    assert line(result, "σ_cr′/σ_cr") == pytest.approx(share**2)
    assert line(result, "N_cr′/N_cr") == pytest.approx(share**3)
    assert any(f"{share**3:.3f}" in w for w in result.warnings)
    assert not any("buckling" in w for w in worn().warnings)


@settings(max_examples=10, deadline=None)
@given(st.floats(0.02, 0.6), st.floats(0.02, 0.3))
def test_deeper_wear_is_never_better(depth, deeper):
    shallow = worn(damage_depth=recorded(depth, "mm"))
    deep = worn(damage_depth=recorded(depth + deeper, "mm"))
    assert deep.margin_ultimate < shallow.margin_ultimate
    assert deep.lives[1].cycles <= shallow.lives[1].cycles
