"""Residual strength against published worked examples."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis import residual_strength as rs
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


def test_what_has_no_strength_is_left_out():
    found = rs.weakest({rs.FRACTURE: GrossStress(10.0), rs.SHORT_CRACK: None})
    assert found == rs.Strength(GrossStress(10.0), rs.FRACTURE)
