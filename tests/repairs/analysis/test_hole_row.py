"""Rows of cracked holes: link-up, fracture and section, and the bound of a row."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.inputs import TOUGHNESS_UNIT
from repairs.analysis.intensity.rows import CrackRow, endless_row
from repairs.analysis.registry import evaluate
from repairs.analysis.strength import link_up as lu
from repairs.analysis.types import (
    INCH,
    KSI,
    KSI_ROOT_INCH,
    HalfLength,
    Outcome,
    Use,
)
from tests.outside import outside
from tests.repairs.analysis.cases import (
    CURVES,
    FTY,
    HOLE,
    SHELL,
    around,
    inputs,
    recorded,
    said,
)

METHOD = "row-of-cracked-holes"
ROW = {
    **SHELL,
    "surroundings": around(3.0),
    "hole_load": said("open"),
    "crack_origin": said("fastener_hole"),
    "crack_direction": said("longitudinal"),
    "hole_diameter": recorded(4.83, "mm"),
    "hole_pitch": recorded(25.4, "mm"),
    "edge_crack_length": recorded(1.5, "mm"),
    "edge_crack_uncertainty": recorded(0.2, "mm"),
    "life_base": said("since new"),
}
LEAD = {
    **ROW,
    "pressurised": said("no"),
    "panel_length": recorded(36 * INCH, "mm"),
    "crack_length": recorded(8 * INCH, "mm"),
    "crack_length_uncertainty": recorded(0.0, "mm"),
    "ligament": recorded(INCH, "mm"),
    "hole_diameter": recorded(0.25 * INCH, "mm"),
    "hole_pitch": recorded(2 * INCH, "mm"),
    "edge_crack_length": recorded(0.02 * INCH, "mm"),
    "edge_crack_uncertainty": recorded(0.0, "mm"),
    "yield_strength": recorded(42 * KSI, "MPa"),
    "toughness": recorded(120 * KSI_ROOT_INCH, TOUGHNESS_UNIT),
    "limit_flight_stress": recorded(50.0, "MPa"),
    "cycle_max_stress": recorded(50.0, "MPa"),
    "cycle_ratio": recorded(0.0, "-"),
    "surroundings": around(102.0, bay=(-2000.0, 2000.0), x=0.0),
}


def row(use: Use = Use.FOUND_DAMAGE, base=ROW, **changes):
    return evaluate(METHOD, use, inputs(base, **changes))


def strengths(result) -> dict[str, float]:
    return {m.mechanism: m.strength for m in result.margins}


# A lead crack


@pytest.mark.parametrize(
    ("ligament", "swift", "corrected"), [(1.0, 28.365, 21.615), (0.5, 20.057, 18.236)]
)
def test_a_lead_crack_links_up_at_the_worked_stress(ligament, swift, corrected):
    found = strengths(row(base=LEAD, ligament=recorded(ligament * INCH, "mm")))
    for what, published in (
        (lu.LINK_UP, swift),
        ("link-up, with the test-based correction", corrected),
    ):
        outside(
            "Row of cracked holes, " + what,
            source="Public university notes on multiple-site damage, 2024-T3, "
            "recomputed by hand",
            given=f"a 4, W 36, l 0.02, hole 0.25, ligament {ligament:g} in, Sy 42 ksi",
            published=published,
            computed=found[what] / KSI,
            unit="ksi",
            rel=0.005,
            route="quoted",
        )


def test_fracture_of_the_lead_crack_is_the_notes_comparison():
    outside(
        "Row of cracked holes, fracture of the lead crack alone",
        source="Public university notes on multiple-site damage",
        given="Kc 120 ksi√in, a 4, W 36 in",
        published=32.81,
        computed=strengths(row(base=LEAD))["fracture"] / KSI,
        unit="ksi",
        absolute=0.01,
        route="quoted",
    )


def test_the_corrected_link_up_governs_over_lead_crack_fracture():
    result = row(base=LEAD)
    assert result.outcome is Outcome.COMPUTED
    assert result.governing.startswith("link-up")
    assert result.residual_strength_mpa == min(strengths(result).values())


def test_another_alloy_has_swifts_stress_and_says_so():
    result = row(base=LEAD, stress_life=replace(CURVES, material="6061-T6"))
    assert "link-up, with the test-based correction" not in strengths(result)
    assert any("No test-based correction" in w for w in result.warnings)


def test_a_lead_crack_lives_no_longer_than_its_ligament():
    result = row(base=LEAD)
    assert all(li.base == "from finding" for li in result.lives)
    last = result.curves[1].points[-1][1]
    assert last <= 9 * INCH + 1e-6


def test_a_lead_crack_without_its_ligament_is_incomplete():
    result = row(base=LEAD, ligament=None)
    assert [m.name for m in result.missing] == ["ligament"]


# Equal cracks


def test_the_section_left_is_that_between_the_cracks():
    left = 1 - (4.83 + 2 * 1.7) / 25.4
    assert strengths(row())["net-section yield"] == pytest.approx(FTY * left)


def test_two_equal_tips_touch_at_swifts_stress_by_hand():
    # Both zones r = (K / Sy)^2 / 2 pi fill the ligament: S = Sy sqrt(L / c) / F.
    result = row()
    factor = next(li.value for li in result.note if li.symbol == "F" and li.value)
    ligament = 25.4 - 4.83 - 2 * 1.7
    by_hand = FTY * math.sqrt(ligament / 1.7) / factor
    assert strengths(result)[lu.LINK_UP] == pytest.approx(min(by_hand, FTY))


def test_long_cracks_from_small_holes_are_a_row_of_cracks():
    # Exact row of cracks of the same tip to tip; strips with free sides lie above.
    result = row(
        hole_diameter=recorded(1.0, "mm"),
        edge_crack_length=recorded(6.0, "mm"),
        edge_crack_uncertainty=recorded(0.0, "mm"),
        pressurised=said("no"),
        limit_flight_stress=recorded(50.0, "MPa"),
        cycle_max_stress=recorded(50.0, "MPa"),
        cycle_ratio=recorded(0.0, "-"),
    )
    factor = next(li.value for li in result.note if li.symbol == "F" and li.value)
    exact = endless_row(CrackRow(HalfLength(6.5), 25.4)) * math.sqrt(6.5 / 6.0)
    assert 1 <= factor / exact < 1.08


def test_one_crack_is_no_row():
    result = row(crack_count=recorded(1, "-"))
    assert result.outcome is Outcome.NOT_COVERED
    assert result.governing == "number of cracks in the row"


def test_an_unknown_number_is_bounded_by_a_row_without_end():
    unknown, three = row(), row(crack_count=recorded(3, "-"))
    assert unknown.outcome is three.outcome is Outcome.COMPUTED
    assert unknown.residual_strength_mpa <= three.residual_strength_mpa
    assert any("every hole" in w for w in unknown.warnings)
    assert any("3 cracks recorded" in w for w in three.warnings)


def test_without_number_and_pitch_both_are_asked_for():
    result = row(hole_pitch=None)
    assert {"hole_pitch", "crack_count"} <= {m.name for m in result.missing}
    assert result.residual_strength_mpa is None


def test_a_measured_ligament_goes_before_the_pitch():
    near = row(ligament=recorded(4.0, "mm"))
    assert strengths(near)[lu.LINK_UP] < strengths(row())[lu.LINK_UP]
    assert near.life_cycles <= row().life_cycles


def test_a_loaded_row_needs_its_load_transfer():
    result = row(hole_load=said("loaded"), edge_distance=recorded(12.7, "mm"))
    assert [m.name for m in result.missing] == ["load_transfer"]
    loaded = row(
        hole_load=said("loaded"),
        edge_distance=recorded(12.7, "mm"),
        load_transfer=recorded(0.33, "-"),
        bearing_strength=recorded(820.0, "MPa"),
    )
    assert loaded.outcome is Outcome.COMPUTED
    assert loaded.life_cycles < row().life_cycles
    assert "bearing at the hole" in strengths(loaded)


def test_cracks_that_nearly_meet_are_not_covered():
    result = row(edge_crack_length=recorded(9.5, "mm"))
    assert result.outcome is Outcome.NOT_COVERED
    assert result.residual_strength_mpa is None


@settings(max_examples=12, deadline=None)
@given(st.floats(0.5, 5.0), st.floats(1.05, 1.4))
def test_longer_cracks_are_weaker_and_shorter_lived(c, more):
    short = row(edge_crack_length=recorded(c, "mm"))
    long = row(edge_crack_length=recorded(c * more, "mm"))
    assert long.residual_strength_mpa < short.residual_strength_mpa
    assert long.life_cycles <= short.life_cycles


@settings(max_examples=8, deadline=None)
@given(st.floats(20.0, 40.0), st.floats(1.05, 1.5))
def test_a_wider_pitch_is_stronger(pitch, more):
    near = row(hole_pitch=recorded(pitch, "mm"))
    far = row(hole_pitch=recorded(pitch * more, "mm"))
    assert far.residual_strength_mpa > near.residual_strength_mpa


def test_a_row_is_never_stronger_than_one_of_its_holes():
    alone = evaluate(
        "open-or-trimmed-hole",
        Use.FOUND_DAMAGE,
        inputs(
            {**HOLE, **ROW},
            hole_cracked=said("yes"),
            both_sides=said("yes"),
            strip_width=recorded(200.0, "mm"),
            edge_distance=recorded(100.0, "mm"),
        ),
    )
    assert row().residual_strength_mpa < alone.residual_strength_mpa
    assert row().life_cycles < alone.life_cycles


def test_found_cracks_get_no_interval_and_sisters_get_one():
    found = row()
    assert found.threshold is found.repeat is None
    sister = row(Use.NO_KNOWN_CRACK, detectable_length=recorded(3.0, "mm"))
    assert sister.threshold.uncapped is not None
    assert sister.repeat.uncapped is not None
    assert any("every hole" in w for w in sister.warnings)
