"""The open or trimmed hole as a whole."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.methods.hole import hole_kt
from repairs.analysis.registry import evaluate
from repairs.analysis.surroundings import Obstacle, ObstacleKind
from repairs.analysis.types import KSI, Outcome, Use
from tests.repairs.analysis.cases import (
    CURVES,
    FTU,
    FTY,
    HOLE,
    PSI,
    RADIUS,
    THICKNESS,
    around,
    inputs,
    recorded,
    said,
)

METHOD = "open-or-trimmed-hole"
HOOP = 8.5 * PSI * RADIUS / THICKNESS
CRACKED = {
    "hole_cracked": said("yes"),
    "both_sides": said("no"),
    "edge_crack_length": recorded(5.0, "mm"),
    "edge_crack_uncertainty": recorded(1.0, "mm"),
}


def hole(use: Use = Use.NO_KNOWN_CRACK, **changes):
    return evaluate(METHOD, use, inputs(HOLE, **changes))


@pytest.mark.parametrize("share", [0.05, 0.1, 0.2, 0.25, 0.3, 0.4, 0.5])
def test_kt_agrees_with_heywood(share):
    # Heywood's 2 + (1 - D/W)^3 on net stress, from memory; both fit Howland, and part
    # by 1.6 % at D/W 0.5.
    assert hole_kt(share, 1.0) == pytest.approx(2 + (1 - share) ** 3, rel=0.017)


def test_kt_of_a_small_hole_is_three():
    assert hole_kt(0.0, 1.0) == 3.0


def test_net_section_is_what_carries():
    result = hole(strip_width=recorded(50.0, "mm"), edge_distance=recorded(25.0, "mm"))
    share = 1 - 6.35 / 50
    assert result.residual_strength_mpa == pytest.approx(FTU * share)
    assert result.margin_residual == pytest.approx(FTU * share / (1.15 * HOOP) - 1)


def test_the_nearer_edge_decides_the_width():
    near = hole(edge_distance=recorded(15.0, "mm"))
    assert near.residual_strength_mpa == pytest.approx(FTU * (1 - 6.35 / 30))


def test_stress_life_is_read_at_the_hole_on_net_stress():
    high = {"radius": recorded(3000.0, "mm"), "thickness": recorded(0.9, "mm")}
    result = hole(
        **high, strip_width=recorded(60.0, "mm"), edge_distance=recorded(30.0, "mm")
    )
    stress = 8.5 * PSI * 3000 / 0.9
    x = 6.35 / 60
    kt = 3 - 3.13 * x + 3.66 * x**2 - 1.53 * x**3
    old = CURVES.cycles(1.0, stress, 0.0)
    new = CURVES.cycles(kt, stress / (1 - x), 0.0)
    left = next(li for li in result.lives if "stress" in li.title)
    assert left.cycles == math.floor((1 - 20_000 / old) * new)


def test_a_known_crack_has_lives_and_no_interval():
    result = hole(Use.FOUND_DAMAGE, **CRACKED)
    assert result.outcome is Outcome.COMPUTED
    assert [li.base for li in result.lives] == ["from finding"] * 2
    assert result.threshold is result.repeat is None
    assert result.residual_strength_mpa <= FTY * (1 - (6.35 + 6) / 500) + 1e-9


def test_a_known_crack_without_its_size_is_incomplete():
    result = hole(Use.FOUND_DAMAGE, hole_cracked=said("yes"))
    assert {m.name for m in result.missing} == {
        "edge_crack_length",
        "edge_crack_uncertainty",
        "both_sides",
    }


def test_cracks_on_both_sides_are_not_covered():
    result = hole(Use.FOUND_DAMAGE, **{**CRACKED, "both_sides": said("yes")})
    assert result.outcome is Outcome.NOT_COVERED


def test_a_loaded_hole_is_refused_because_its_bearing_load_is_not_recorded():
    result = hole(hole_load=said("loaded"))
    assert result.outcome is Outcome.NOT_COVERED
    assert "bearing load" in result.warnings[0]
    assert result.life_cycles is None


def test_a_hole_in_a_joint_row_is_refused():
    lap = Obstacle(ObstacleKind.JOINT, "LAP S-12R", 0, 508, -10, 10)
    result = hole(surroundings=around(6.0, (lap,)))
    assert result.outcome is Outcome.NOT_COVERED
    assert "LAP S-12R" in result.warnings[0]


def test_a_hole_wider_than_half_the_strip_is_refused():
    result = hole(strip_width=recorded(12.0, "mm"))
    assert result.outcome is Outcome.NOT_COVERED


def test_width_that_nobody_recorded_is_asked_for():
    result = hole(strip_width=None)
    assert "strip_width" in [m.name for m in result.missing]


def test_thin_sheet_starts_with_a_through_flaw_and_thick_with_a_corner():
    thin = hole(thickness=recorded(1.2, "mm"))
    assert any("through flaw" in li.formula for li in thin.note)
    thick = hole()
    assert any("corner flaw" in li.formula for li in thick.note)
    assert any(li.symbol == "N_bt" and li.value > 0 for li in thick.note)


def test_a_large_hole_in_thin_sheet_says_that_the_corner_is_grown_as_through():
    result = hole(hole_diameter=recorded(60.0, "mm"))
    assert result.outcome is Outcome.COMPUTED
    assert any("grown as a through crack" in w for w in result.warnings)


def test_the_crack_stays_inside_its_bay():
    narrow = hole(surroundings=around(3.0, bay=(200.0, 308.0)))
    assert "FR 28" in narrow.lives[1].remark
    assert narrow.lives[1].cycles < hole().lives[1].cycles


@settings(max_examples=15, deadline=None)
@given(st.floats(3, 40), st.floats(1.05, 2))
def test_a_larger_hole_is_never_stronger(diameter, more):
    small = hole(hole_diameter=recorded(diameter, "mm"))
    large = hole(hole_diameter=recorded(diameter * more, "mm"))
    assert large.residual_strength_mpa < small.residual_strength_mpa


def test_high_stress_ends_in_no_method():
    result = hole(yield_strength=recorded(5 * KSI, "MPa"))
    assert result.outcome is Outcome.NOT_COVERED
