"""A crack in stiffened skin as a whole: the worksheet's panel, limits, two bays."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.intensity.stiffened_sheet import (
    CrackCentre,
    StiffenedSheet,
    stiffened_crack,
)
from repairs.analysis.intensity.stiffened_table import (
    LONGEST,
    SHORTEST,
    stiffened_table,
)
from repairs.analysis.strength import stiffened as sp
from repairs.analysis.surroundings import Obstacle, ObstacleKind
from repairs.analysis.types import INCH, KSI, KSI_ROOT_INCH, HalfLength, Outcome
from tests.outside import outside
from tests.repairs.analysis.cases import CRACK, around, recorded, said
from tests.repairs.analysis.crack_cases import (
    FLAT,
    ROUND,
    STIFFENERS,
    found,
    line,
    unknown,
)

METHOD = "stiffened-skin-crack"
TITLE = "Crack in stiffened skin"
PLAIN = "pressurised-skin-longitudinal-crack"
SHELL = {**CRACK, **STIFFENERS}
WING = {**FLAT, **STIFFENERS, "panel_length": recorded(3000.0, "mm")}
MODULUS = 10_500 * KSI
WORKSHEET = {
    **WING,
    "thickness": recorded(0.063 * INCH, "mm"),
    "panel_length": recorded(1e5, "mm"),
    "toughness": recorded(68 * KSI_ROOT_INCH, "MPa*sqrt(mm)"),
    "modulus": recorded(MODULUS, "MPa"),
    "stiffener_modulus": recorded(MODULUS, "MPa"),
    "stringer_pitch": recorded(10 * INCH, "mm"),
    "stringer_area": recorded(0.27 * INCH**2, "mm2"),
    "stiffener_strength": recorded(65 * KSI, "MPa"),
    "fastener_pitch": recorded(0.833 * INCH, "mm"),
    "fastener_diameter": recorded(5 / 16 * INCH, "mm"),
    "fastener_flexibility": recorded(1e-5, "mm/N"),
    "fastener_strength": recorded(
        50 * KSI * math.pi / 4 * (5 / 16 * INCH) ** 2, "N"
    ),
}  # fmt: skip


def mechanisms(result) -> dict[str, float]:
    """Strengths of the first case, the arrest apart [MPa]."""
    case = result.margins[-1].case
    return {m.mechanism: m.strength for m in result.margins if m.case == case}


@pytest.mark.parametrize(
    ("share", "skin", "stiffener"),
    [
        (0.2, 27.68, 61.90),
        (0.4, 22.05, 52.00),
        (0.6, 38.20, 36.11),
        (0.8, 27.68, 30.23),
    ],
)
def test_the_worksheets_panel(share, skin, stiffener):
    # Its curves are digitised and its fasteners' flexibility is not printed.
    length = recorded(2 * share * 10 * INCH, "mm")
    each = mechanisms(found(METHOD, WORKSHEET, crack_length=length))
    for what, published in ((sp.SKIN, skin), (sp.STIFFENER, stiffener)):
        outside(
            TITLE,
            source="digitised curves of a stiffened panel (after Poe) in a public "
            "university worksheet",
            given=f"a/b {share:g}, μ 0.3, p/b 1/12, {what}",
            published=published,
            computed=each[what] / KSI,
            unit="ksi",
            rel=0.12,
            route="quoted",
        )


def test_the_governing_element_is_named():
    short = found(METHOD, WORKSHEET, crack_length=recorded(8 * INCH, "mm"))
    assert short.governing == sp.SKIN
    # Past the stiffener the skin is relieved, and a weak stiffener goes first.
    weak = {"stiffener_strength": recorded(45 * KSI, "MPa")}
    long = found(METHOD, WORKSHEET, crack_length=recorded(12 * INCH, "mm"), **weak)
    assert long.governing == sp.STIFFENER
    assert mechanisms(long)[sp.SKIN] > long.residual_strength_mpa
    thin = {"fastener_strength": recorded(2000.0, "N")}
    long = found(METHOD, WORKSHEET, crack_length=recorded(12 * INCH, "mm"), **thin)
    assert long.governing == sp.FASTENER


def sheet() -> StiffenedSheet:
    value = {name: v.value for name, v in WORKSHEET.items() if hasattr(v, "unit")}
    return StiffenedSheet(
        value["thickness"],
        MODULUS,
        0.33,
        value["stringer_pitch"],
        value["stringer_area"],
        MODULUS,
        value["fastener_pitch"],
        value["fastener_diameter"],
        value["fastener_flexibility"],
    )


@pytest.mark.parametrize("centre", CrackCentre)
@pytest.mark.parametrize("share", [0.07, 0.33, 0.7, 1.1])
def test_the_table_is_the_solution_between_its_points(centre, share):
    half = HalfLength(share * sheet().pitch)
    exact = stiffened_crack(sheet(), half, centre)
    read = stiffened_table(sheet(), centre).at(half)
    assert read.factor == pytest.approx(exact.factor, rel=0.012)
    assert read.stiffener == pytest.approx(exact.stiffener, rel=0.012)


def test_the_table_is_made_once_for_a_panel_and_ends_where_it_says():
    first = stiffened_table(sheet(), CrackCentre.MID_BAY)
    assert stiffened_table(sheet(), CrackCentre.MID_BAY) is first
    assert first.lengths[0] == pytest.approx(SHORTEST * 254)
    assert first.lengths[-1] == pytest.approx(LONGEST * 254)


def test_with_next_to_no_stiffeners_it_is_the_plain_skin():
    thin = {"frame_area": recorded(1e-4, "mm2")}
    stiffened, plain = found(METHOD, SHELL, **thin), found(PLAIN, CRACK)
    assert stiffened.residual_strength_mpa == pytest.approx(plain.residual_strength_mpa)
    for one, other in zip(stiffened.lives, plain.lives, strict=True):
        assert one.cycles == pytest.approx(other.cycles, rel=2e-3)


def test_whole_stiffeners_never_shorten_the_life_of_the_plain_skin():
    assert found(METHOD, SHELL).lives[1].cycles > found(PLAIN, CRACK).lives[1].cycles
    assert unknown(METHOD, SHELL).life_cycles >= unknown(PLAIN, CRACK).life_cycles


def test_it_goes_where_the_plain_method_refuses():
    # 12 mm of crack beyond a frame 5 mm away: no longer inside one bay.
    near = {"surroundings": around(x=5.0)}
    assert found(PLAIN, CRACK, **near).outcome is Outcome.NOT_COVERED
    centre = {"centre_stiffener": said("intact_stiffener")}
    assert found(METHOD, SHELL, **near, **centre).outcome is Outcome.COMPUTED


def test_a_broken_stiffener_is_worse_than_a_whole_one():
    words = ("broken_stiffener", "intact_stiffener")
    broken, whole = (
        found(
            METHOD,
            WORKSHEET,
            crack_length=recorded(5 * INCH, "mm"),
            centre_stiffener=said(word),
        )
        for word in words
    )
    assert line(broken, "F_st") > 1 > line(whole, "F_st")
    assert broken.residual_strength_mpa < whole.residual_strength_mpa
    assert broken.lives[1].cycles < whole.lives[1].cycles


def test_two_bays_are_judged_by_the_arrest_at_both_neighbours():
    result = found(
        METHOD,
        WORKSHEET,
        crack_length=recorded(6 * INCH, "mm"),
        centre_stiffener=said("broken_stiffener"),
    )
    rows = [m for m in result.margins if m.mechanism.startswith("two-bay crack")]
    assert rows
    panel = sp.StiffenedPanel(
        68 * KSI_ROOT_INCH,
        MODULUS,
        MODULUS,
        65 * KSI,
        WORKSHEET["fastener_strength"].value,
    )
    exact = sp.two_bay_strength(sheet(), panel, lambda a: 1.0)
    assert line(result, "S_arr") == pytest.approx(exact.peak.stress, rel=0.02)
    assert line(result, "S_cr") == pytest.approx(exact.critical, rel=0.02)
    # Arrest gives no credit: the strength is the least on the way.
    assert result.residual_strength_mpa <= rows[0].strength


def test_arrest_is_shown_where_it_is_reached_and_said_where_not():
    shown = found(METHOD, WORKSHEET, crack_length=recorded(4 * INCH, "mm"))
    rows = [m for m in shown.margins if m.mechanism.startswith("arrest")]
    assert rows[0].strength == line(shown, "S_arr")
    # In the shell the plain bulging factor ends short of the frame.
    note = [row.formula for row in found(METHOD, SHELL).note]
    assert any(text.startswith("No arrest at the next stiffener") for text in note)
    held = found(METHOD, SHELL, stiffened_bulging=recorded(1.0, "-"))
    assert line(held, "S_arr") > 0
    less = found(METHOD, SHELL, stiffened_bulging=recorded(0.9, "-"))
    assert less.outcome is Outcome.NOT_COVERED


def test_the_strength_on_the_way_never_rises_again():
    result = found(METHOD, WORKSHEET, crack_length=recorded(2 * INCH, "mm"))
    strengths = [y for x, y in result.curves[0].points if x >= 2 * INCH]
    least = strengths[0]
    for strength in strengths:
        assert strength <= least * 1.005
        least = min(least, strength)


def test_round_the_shell_it_crosses_stringers_and_needs_the_bending():
    stiffened = {**ROUND, **STIFFENERS}
    result = found(METHOD, stiffened)
    assert line(result, "b") == 150.0
    plain = found("pressurised-skin-circumferential-crack", ROUND)
    assert result.required_residual_mpa == plain.required_residual_mpa
    missing = found(METHOD, stiffened, mean_longitudinal_stress=None)
    assert [m.name for m in missing.missing] == ["mean_longitudinal_stress"]


@pytest.mark.parametrize(
    "name",
    ["frame_area", "frame_pitch", "fastener_flexibility", "fastener_strength",
     "stiffener_strength", "centre_stiffener", "modulus"],
)  # fmt: skip
def test_what_is_missing_is_named(name):
    result = found(METHOD, SHELL, **{name: None})
    assert result.outcome is Outcome.MISSING_INPUT
    assert [m.name for m in result.missing] == [name]


NEAR = Obstacle(ObstacleKind.CUTOUT, "X", 300.0, 700.0, -50.0, 50.0)


@pytest.mark.parametrize(
    ("base", "change", "test"),
    [
        (SHELL, {"element": said("stringer")}, "structural item"),
        (SHELL, {"crack_direction": said("diagonal")}, "direction of the crack"),
        (SHELL, {"crack_origin": said("edge")}, "where the crack starts"),
        (SHELL, {"surroundings": around(obstacles=(NEAR,))}, "any cut-out"),
        (WING, {"load_kind": said("shear")}, "kind of load"),
        (WING, {"surroundings": around(obstacles=(NEAR,)),
                "crack_length": recorded(60.0, "mm")}, "distance of a tip"),
        (WING, {"crack_length": recorded(400.0, "mm")}, "range of a published"),
    ],
)  # fmt: skip
def test_where_it_does_not_apply_it_says_why(base, change, test):
    result = found(METHOD, base, **change)
    assert result.outcome is Outcome.NOT_COVERED
    assert any(test in text for text in (*result.warnings, result.governing))


def test_a_broken_stiffener_is_no_structure_without_known_damage():
    result = unknown(METHOD, SHELL, centre_stiffener=said("broken_stiffener"))
    assert result.outcome is Outcome.NOT_COVERED
    assert "whole, where no crack is known" in result.warnings[0]


@settings(max_examples=5, deadline=None)
@given(st.floats(20, 240), st.floats(1.05, 1.3))
def test_a_longer_crack_is_never_stronger_on_its_way(length, more):
    short = found(METHOD, WING, crack_length=recorded(length, "mm"))
    long = dict(short.curves[0].points)
    beyond = [y for x, y in long.items() if x >= length * more]
    assert all(y <= short.residual_strength_mpa for y in beyond)


@settings(max_examples=5, deadline=None)
@given(st.floats(40, 200), st.floats(1.1, 2.0))
def test_more_stringer_never_lives_shorter(area, more):
    thin = found(METHOD, WING, stringer_area=recorded(area, "mm2"))
    thick = found(METHOD, WING, stringer_area=recorded(area * more, "mm2"))
    assert thick.lives[1].cycles >= thin.lives[1].cycles
