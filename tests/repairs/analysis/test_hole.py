"""The open or trimmed hole as a whole."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.inspection.known import growth_of
from repairs.analysis.registry import evaluate
from repairs.analysis.stress_life.severity import hole_kt
from repairs.analysis.surroundings import Obstacle, ObstacleKind
from repairs.analysis.types import (
    INCH,
    KSI,
    KSI_ROOT_INCH,
    ROOT_1000,
    Outcome,
    Use,
)
from tests.outside import outside
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
    "crack_direction": said("longitudinal"),
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
        "crack_direction",
    }


def found(**changes):
    return hole(Use.FOUND_DAMAGE, **{**CRACKED, **changes})


def test_cracks_nobody_looked_for_are_not_taken_as_none():
    for word in (None, said("unknown")):
        result = hole(Use.FOUND_DAMAGE, hole_cracked=word)
        assert result.outcome is Outcome.MISSING_INPUT
        assert result.residual_strength_mpa is None
    assert found(both_sides=said("unknown")).outcome is Outcome.MISSING_INPUT
    assert hole(hole_cracked=None).outcome is Outcome.COMPUTED


def test_a_known_crack_needs_no_stress_life():
    lacking = dict.fromkeys(("stress_life", "skin_cycles", "life_base", "clad"))
    assert found(**lacking).outcome is Outcome.COMPUTED


def test_two_cracks_are_weaker_and_shorter_lived_than_one():
    one, two = found(), found(both_sides=said("yes"))
    assert two.outcome is Outcome.COMPUTED
    assert two.residual_strength_mpa < one.residual_strength_mpa
    assert two.life_cycles < one.life_cycles
    assert two.threshold is two.repeat is None


@pytest.mark.parametrize(
    ("both", "published", "tolerance"),
    [("yes", 7.63, 0.025), ("no", 7.47, 0.0007)],
    ids=["two", "one"],
)
def test_k_at_the_hole_is_that_of_the_published_worksheet(both, published, tolerance):
    # Two cracks: the worksheet's rational fit; Newman's polynomial is used here.
    inch = {"hole_diameter": 0.375, "strip_width": 5.0, "edge_distance": 2.5,
            "thickness": 0.125, "edge_crack_length": 0.08}  # fmt: skip
    flat = {name: recorded(value * INCH, "mm") for name, value in inch.items()}
    result = found(
        **flat,
        pressurised=said("no"),
        both_sides=said(both),
        edge_crack_uncertainty=recorded(0.0, "mm"),
        limit_flight_stress=recorded(8 * KSI, "MPa"),
        cycle_max_stress=recorded(8 * KSI, "MPa"),
        cycle_ratio=recorded(0.0, "-"),
    )
    k = next(line.value for line in result.note if line.symbol == "K_max")
    outside(
        "Cracks at an open hole, whole method",
        source="Public university worksheet on cracks at a hole",
        given=f"D 0.375, W 5, t 0.125, c 0.08 in, 8 ksi, cracks on both sides: {both}",
        published=published,
        computed=k * ROOT_1000 / KSI_ROOT_INCH,
        unit="ksi√in",
        rel=tolerance,
    )


def test_a_diagonal_crack_at_a_hole_is_not_covered():
    result = found(crack_direction=said("diagonal"))
    assert result.outcome is Outcome.NOT_COVERED
    assert result.governing == "direction of the crack"


ROUND = {
    "crack_direction": said("circumferential"),
    "limit_longitudinal_stress": recorded(60.0, "MPa"),
    "mean_longitudinal_stress": recorded(25.0, "MPa"),
    "flight_smallest_share": recorded(-0.2, "-"),
    "flight_largest_share": recorded(1.8, "-"),
}


def test_a_crack_round_the_shell_is_never_from_pressure_alone():
    result = found(crack_direction=said("circumferential"))
    assert result.outcome is Outcome.MISSING_INPUT
    assert "limit_longitudinal_stress" in {m.name for m in result.missing}
    assert result.life_cycles is None


def test_a_crack_round_the_shell_sees_axial_stress_and_does_not_bulge():
    result = found(**ROUND)
    assert result.outcome is Outcome.COMPUTED
    axial = 8.5 * PSI * RADIUS / (2 * THICKNESS)
    assert result.required_residual_mpa == pytest.approx(axial + 60, rel=1e-6)
    assert not any("bulging in F" in line.formula for line in result.note)
    more = found(**ROUND | {"limit_longitudinal_stress": recorded(90.0, "MPa")})
    assert more.margin_residual < result.margin_residual


def test_a_corner_crack_lives_longer_than_a_through_crack_of_its_length():
    sizes = {
        "edge_crack_length": recorded(1.2, "mm"),
        "crack_depth": recorded(0.6, "mm"),
        "crack_depth_uncertainty": recorded(0.1, "mm"),
    }
    corner = found(**sizes, crack_through=said("no"), thickness=recorded(3.2, "mm"))
    through = found(**sizes, crack_through=said("yes"), thickness=recorded(3.2, "mm"))
    assert any(line.symbol == "N_bt" for line in corner.note)
    assert corner.life_cycles > through.life_cycles
    assert corner.residual_strength_mpa == through.residual_strength_mpa


def test_a_corner_crack_without_its_depth_is_incomplete():
    result = found(crack_through=said("no"))
    assert "crack_depth" in [m.name for m in result.missing]


def test_a_corner_flaw_outside_its_solution_is_grown_as_through():
    wide = found(
        crack_through=said("no"),
        edge_crack_length=recorded(6.0, "mm"),
        crack_depth=recorded(0.5, "mm"),
        crack_depth_uncertainty=recorded(0.0, "mm"),
    )
    assert wide.outcome is Outcome.COMPUTED
    assert any("as a through crack" in w for w in wide.warnings)


def test_a_loaded_hole_is_another_method():
    result = hole(hole_load=said("loaded"))
    assert result.outcome is Outcome.NOT_COVERED
    assert "load of a fastener" in result.warnings[0]
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


def test_a_plan_is_judged_on_growth_and_not_on_stress_life():
    # The stress-life beside it is longer and has looks in it that growth has not.
    high = {"radius": recorded(3000.0, "mm"), "thickness": recorded(0.9, "mm")}
    strip = {"strip_width": recorded(60.0, "mm"), "edge_distance": recorded(30.0, "mm")}
    result = hole(**high, **strip, detectable_length=recorded(4.0, "mm"))
    lived, grown = result.lives
    assert lived.cycles > 2 * grown.cycles
    assert growth_of(result, None).life == pytest.approx(grown.cycles, abs=1)
