"""Residual strength against published worked examples."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import AnalysisError
from repairs.analysis.strength import residual as rs
from repairs.analysis.types import GrossStress, HalfLength


def test_published_proof_stress_of_an_edge_crack_and_that_yield_comes_first():
    # Public notes: Kc 140 ksi*sqrt(in), a 0.4 in, beta 1.161 gives 107.6 ksi; Sy 65.
    fracture = rs.fracture_strength(140, 1.161, 0.4)
    assert fracture == pytest.approx(107.6, abs=0.05)
    found = rs.weakest(
        {rs.FRACTURE: fracture, rs.NET_SECTION: rs.net_section_yield(65, 0.4, 10)}
    )
    assert found.governing == rs.NET_SECTION


@pytest.mark.parametrize(
    ("toughness", "yield_stress", "expected"),
    [
        (43, 74, [(29.50, 67.83), (18.70, 61.67), (9.61, 49.33)]),
        (68, 63, [(46.66, 57.75), (29.57, 52.50), (15.19, 42.00)]),
        (144, 42, [(98.80, 38.50), (62.62, 35.00), (32.17, 28.00)]),
    ],
)
def test_edge_cracked_panel_of_the_public_notes(toughness, yield_stress, expected):
    # Polynomial as printed there, inputs there; outputs recomputed independently.
    for a, (fracture, net) in zip((0.5, 1.0, 2.0), expected, strict=True):
        x = a / 6
        beta = 1.12 - 0.231 * x + 10.55 * x**2 - 21.72 * x**3 + 30.39 * x**4
        assert rs.fracture_strength(toughness, beta, a) == pytest.approx(
            fracture, abs=0.006
        )
        assert rs.net_section_yield(yield_stress, a, 6) == pytest.approx(net, abs=0.006)


def test_short_crack_line_of_the_public_example():
    # Kc 68, Sy 63, W 10: at 2a = 0.6 in 55.45 ksi; touches at 2a = 1.6688, 42.00.
    assert rs.short_crack_line(68, 63, HalfLength(0.3), 10) == pytest.approx(
        55.45, abs=0.005
    )
    touch = rs.short_crack_line(68, 63, HalfLength(1.6687 / 2), 10)
    assert touch == pytest.approx(42.00, abs=0.005)
    assert rs.fracture_strength(68, 1, 1.6688 / 2) == pytest.approx(touch, abs=0.005)
    assert rs.short_crack_line(68, 63, HalfLength(0.9), 10) is None
    assert rs.short_crack_line(68, 63, HalfLength(0.3), 5.0) is None


def test_long_crack_line_of_the_public_example():
    at_touch = rs.wide_sheet_long_line(68, HalfLength(10 / 6), 10)
    assert at_touch == pytest.approx(29.72, abs=0.005)
    assert rs.wide_sheet_long_line(68, HalfLength(3), 10) == pytest.approx(
        17.83, abs=0.005
    )


@given(st.floats(0.01, 0.99))
def test_the_line_touches_but_never_crosses_the_fracture_curve(share):
    scale = (68 / 63) ** 2 * 9 / (2 * math.pi)
    half = HalfLength(share * scale / 2)
    line = rs.short_crack_line(68, 63, half, 10)
    assert line is not None
    assert line <= rs.fracture_strength(68, 1, half) + 1e-9


@given(st.floats(1, 100), st.floats(1.01, 2))
def test_a_longer_crack_is_never_stronger(a, more):
    def strength(x: float) -> float:
        return rs.weakest(
            {
                rs.FRACTURE: rs.fracture_strength(3000, 1, x),
                rs.NET_SECTION: rs.net_section_yield(320, 2 * x, 500),
                rs.SHORT_CRACK: rs.short_crack_line(3000, 320, HalfLength(x), 500),
            }
        ).stress

    assert strength(a * more) < strength(a)


@pytest.mark.parametrize(
    ("crack", "stress", "governing"),
    [
        (0.6, 55.45, rs.SHORT_CRACK),
        (2.5, 34.32, rs.FRACTURE),
        (6.0, 17.83, rs.LONG_CRACK),
    ],
)
def test_whole_construct_of_the_public_example(crack, stress, governing):
    # Kc 68, Sy 63, W 10 ksi, in: 55.45 and 17.83 recomputed independently; between
    # them 68/sqrt(pi 1.25) = 34.32.
    found = rs.feddersen(68, 63, HalfLength(crack / 2), 10)
    assert found.stress == pytest.approx(stress, abs=0.006)
    assert found.governing == governing


def test_a_panel_too_narrow_for_fracture_yields():
    # Narrowest of the example: 5.006 in.
    found = rs.feddersen(68, 63, HalfLength(0.5), 5.0)
    assert found.governing == rs.NET_SECTION
    assert found.stress == pytest.approx(63 * 0.8)
    assert rs.feddersen(68, 63, HalfLength(0.5), 5.01).governing != rs.NET_SECTION


@given(st.floats(0.01, 0.98), st.floats(1.0005, 1.02))
def test_the_construct_falls_without_a_jump(share, more):
    # Steepest where the short line starts and ends: 63 ksi over 3 touch lengths.
    here = rs.feddersen(68, 63, HalfLength(5 * share), 10).stress
    after = rs.feddersen(68, 63, HalfLength(5 * share * more), 10).stress
    assert 0 < here - after < 130 * share * (more - 1) + 1e-9


@given(st.floats(0.34, 0.7))
def test_the_long_line_stays_near_the_secant_form(share):
    # The lines stand for the width; at half the width 9 % above the secant form.
    half = HalfLength(5 * share)
    secant = math.sqrt(1 / math.cos(math.pi * share / 2))
    form = rs.fracture_strength(68, secant, half)
    assert rs.feddersen(68, 63, half, 10).stress == pytest.approx(form, rel=0.105)


def test_collapse_is_on_the_mean_of_yield_and_ultimate():
    assert rs.plastic_collapse(300, 400, 25, 100) == pytest.approx(350 * 0.75)
    assert rs.plastic_collapse(300, 300, 25, 100) == rs.net_section_yield(300, 25, 100)


@given(st.floats(0.01, 0.95))
def test_an_edge_crack_collapses_by_two_blocks_of_stress(share):
    # Second route: the split of the section left into tension and compression that
    # balances force, checked for moment about the middle of the full width.
    s = rs.edge_crack_collapse(1.0, 1.0, share, 1.0)
    left = 1 - share
    tension = (left + s) / 2  # next to the crack, since the load bends it open
    compression = left - tension
    arm_tension = share + tension / 2 - 0.5
    arm_compression = 1 - compression / 2 - 0.5
    moment = tension * arm_tension - compression * arm_compression
    assert moment == pytest.approx(0, abs=1e-9)
    assert s <= rs.plastic_collapse(1.0, 1.0, share, 1.0)


def test_each_mechanism_is_told_beside_the_governing_one():
    found = rs.weakest({"a": GrossStress(3.0), "b": GrossStress(2.0), "c": None})
    assert found.governing == "b"
    assert dict(found.each) == {"a": 3.0, "b": 2.0, "c": None}


def test_nothing_to_compare_is_refused():
    with pytest.raises(AnalysisError, match="None of a"):
        rs.weakest({"a": None})


def test_what_has_no_strength_is_left_out():
    found = rs.weakest({rs.FRACTURE: GrossStress(10.0), rs.SHORT_CRACK: None})
    assert found == rs.Strength(GrossStress(10.0), rs.FRACTURE)
