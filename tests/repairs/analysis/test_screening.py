"""Damage that is screened and never calculated; what of damage asks which method."""

from __future__ import annotations

import pytest

from repairs.analysis.assessment import assess
from repairs.analysis.coverage import groups_for
from repairs.analysis.inputs import Inputs
from repairs.analysis.registry import evaluate
from repairs.analysis.types import Outcome, Stated, Use
from tests.repairs.analysis.cases import SHELL, inputs, recorded, said

DENT = {
    **SHELL,
    "damage_type": said("dent"),
    "creased": said("no"),
    "dent_cracked": said("no"),
    "material_removed": said("no"),
    "fasteners_pulled": said("no"),
    "dent_over": said("mid_bay"),
    "fastener_distance": recorded(60.0, "mm"),
    "damage_width": recorded(50.0, "mm"),
    "damage_depth": recorded(2.0, "mm"),
}
SCREENED = ("dent", "crease", "bird_strike", "lightning", "heat")


def dented(**changes):
    return evaluate("dent-screening", Use.FOUND_DAMAGE, inputs(DENT, **changes))


def test_a_smooth_clear_dent_gets_its_table_and_no_number():
    result = dented()
    assert result.outcome is Outcome.NOT_COVERED
    assert result.governing == "strength and fatigue of a dent"
    assert "limits recorded for the type, or an approval" in result.warnings[0]
    rows = {row.test: row for row in result.applicability}
    assert rows["width over depth, second longest dimension over greatest depth"]
    assert "25.0" in [row.value for row in result.applicability]
    assert result.residual_strength_mpa is result.life_cycles is None


@pytest.mark.parametrize(
    ("name", "word", "said_of_it"),
    [
        ("creased", "yes", "dent is creased"),
        ("dent_cracked", "yes", "dent is cracked, by a non-destructive test"),
        ("material_removed", "yes", "material removed in the dent"),
        ("fasteners_pulled", "yes", "fasteners pulled or loose"),
        ("dent_over", "stringer", "what the dent lies over"),
    ],
)
def test_each_answer_that_bars_a_dent_is_said_with_its_limit(name, word, said_of_it):
    result = dented(**{name: said(word)})
    assert result.governing == said_of_it
    assert f"{said_of_it}, {word}; required" in result.warnings[0]
    assert len(result.warnings) == 2


def test_a_dent_at_a_fastener_is_said():
    result = dented(fastener_distance=recorded(0.0, "mm"))
    assert result.governing == "distance to the nearest fastener"


@pytest.mark.parametrize("damage", SCREENED)
def test_screened_damage_never_gives_a_number_whatever_is_recorded(damage):
    known = inputs(DENT, damage_type=said(damage))
    for use in Use:
        found = assess(use, known)
        assert found.result.outcome is Outcome.NOT_COVERED
        assert found.answers
        assert found.result.life_cycles is None


def test_melted_metal_is_told_what_to_remove():
    known = inputs(SHELL, damage_type=said("lightning"))
    warning = assess(Use.FOUND_DAMAGE, known).result.warnings[0]
    assert "conductivity" in warning
    assert "recorded as a blend" in warning


def asks(**words: str) -> set[str]:
    known = {name: Stated(word, "F-0001") for name, word in words.items()}
    groups = groups_for(Inputs({"element": Stated("skin", "F-0001"), **known}))
    return {name for group in groups for name in group}


@pytest.mark.parametrize(
    ("damage", "found", "gone"),
    [
        ("corrosion", "corrosion-as-found", "corrosion-blend-out"),
        ("scratch", "scratch-as-found", "corrosion-blend-out"),
        ("gouge", "scratch-as-found", "corrosion-blend-out"),
        ("nick", "nick-as-found", "nick-blended"),
        ("wear", "wear-as-found", "corrosion-blend-out"),
    ],
)
def test_what_is_removed_asks_for_rework_and_what_is_not_for_a_flaw(
    damage, found, gone
):
    assert asks(damage_type=damage, damage_removed="yes") == {gone}
    assert asks(damage_type=damage, damage_removed="no") == {found}
    assert asks(damage_type=damage) == {found}
    assert asks(damage_type=damage, repair_kind="blend") == {gone}
    assert found not in asks(damage_type=damage, element="frame")


def test_a_crack_from_corrosion_asks_for_the_thickness_left_as_well():
    pit = asks(damage_type="crack", crack_origin="corrosion_pit")
    assert "crack-in-corroded-skin" in pit
    other = asks(damage_type="crack", crack_origin="skin")
    assert "crack-in-corroded-skin" not in other
