"""Corrosion as found: pits as one flaw, what is refused, and how an answer moves."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.intensity.part_through import PartThrough, surface_crack
from repairs.analysis.intensity.small_defect import (
    semi_ellipse_area,
    surface_defect_intensity,
)
from repairs.analysis.intensity.through import edge_crack_tada
from repairs.analysis.registry import evaluate
from repairs.analysis.types import ROOT_1000, EdgeLength, Outcome, Use
from tests.outside import outside
from tests.repairs.analysis.cases import (
    FTU,
    RADIUS,
    SHELL,
    around,
    inputs,
    recorded,
    said,
)

METHOD = "corrosion-as-found"
PITS = {
    **SHELL,
    "damage_type": said("corrosion"),
    "corrosion_type": said("pitting"),
    "damage_removed": said("no"),
    "damage_length": recorded(2.0, "mm"),
    "damage_depth": recorded(0.30, "mm"),
    "damage_depth_uncertainty": recorded(0.05, "mm"),
    "earlier_depth": recorded(0.0, "mm"),
}


def corroded(use: Use = Use.FOUND_DAMAGE, **changes):
    return evaluate(METHOD, use, inputs(PITS, **changes))


def line(result, symbol: str) -> float:
    return next(li.value for li in result.note if li.symbol == symbol)


def test_pits_of_a_semicircle_by_two_published_routes():
    # Depth and half-length 0.3 mm, 150 MPa.
    newman = surface_crack(PartThrough(0.3, 0.3, 1000.0), 1e6, 0.0)
    murakami = surface_defect_intensity(150.0, semi_ellipse_area(0.3, 0.3))
    outside(
        "Corrosion pit as a surface flaw: largest K, Murakami's square root of area",
        source="Newman and Raju, NASA TM-85793, the same semicircle at its surface tip",
        given="semicircular pit, depth 0.3 mm, deep metal, stress 150 MPa",
        published=newman * 150 * math.sqrt(math.pi * 0.3) / ROOT_1000,
        computed=murakami / ROOT_1000,
        unit="MPa√m",
        rel=0.005,
        route="another method",
    )
    outside(
        "Murakami's surface defect: factor on σ √(π a) of a semicircle",
        source="public study of rough surfaces, equations 2 and 3: 0.65 σ √(π √A), "
        "A = 0.5 π r²",
        given="radius 1",
        published=0.65 * (math.pi / 2) ** 0.25,
        computed=surface_defect_intensity(1.0, semi_ellipse_area(1.0, 1.0))
        / math.sqrt(math.pi),
        rel=1e-9,
        route="quoted",
    )


@pytest.mark.parametrize("aspect", [0.2, 0.4, 0.6, 0.8, 1.0])
def test_murakami_stays_near_newman_and_raju_over_the_shapes_of_pits(aspect):
    depth, half = aspect, 1.0
    flaw = PartThrough(depth, half, 1000.0)
    newman = max(surface_crack(flaw, 1e6, angle) for angle in (0.0, 45.0, 90.0))
    outside(
        "Murakami's surface defect against Newman and Raju's ellipse, largest K",
        source="Newman and Raju, NASA TM-85793",
        given=f"a/c {aspect:g}, deep metal",
        published=newman * math.sqrt(math.pi * depth),
        computed=surface_defect_intensity(1.0, semi_ellipse_area(depth, half)),
        unit="√mm per MPa",
        rel=0.12,
        route="another method",
    )


def test_a_longer_shallow_defect_is_cut_off():
    assert semi_ellipse_area(0.1, 5.0) == pytest.approx(0.1)
    assert semi_ellipse_area(0.1, 0.1) == pytest.approx(math.pi / 2 * 0.01)


def test_the_whole_patch_is_the_flaw_and_not_its_deepest_pit():
    short, long = corroded(damage_length=recorded(0.7, "mm")), corroded()
    assert line(long, "c") == pytest.approx(1.0)
    assert long.life_cycles < short.life_cycles
    assert any("clusters" in li.source for li in long.note)


def test_a_narrow_deep_pit_is_widened_to_what_the_solution_reaches():
    result = corroded(damage_length=recorded(0.1, "mm"))
    assert line(result, "c") == pytest.approx(0.35 / 2)
    assert result.outcome is Outcome.COMPUTED


def test_a_long_patch_is_an_edge_crack_across_the_thickness():
    result = corroded(damage_length=recorded(40.0, "mm"))
    assert line(result, "F") == pytest.approx(
        edge_crack_tada(EdgeLength(0.35), 1.4), rel=1e-9
    )
    assert any("longer than" in li.formula for li in result.note)
    assert result.life_cycles < corroded().life_cycles


def test_the_lesser_of_thinned_section_and_flaw_holds():
    result = corroded()
    mechanisms = {row.mechanism for row in result.margins}
    assert "net section, ultimate" in mechanisms
    assert {"fracture", "net-section yield"} <= mechanisms
    lowest = min(row.value for row in result.margins if row.value is not None)
    assert min(result.margin_ultimate, result.margin_residual) == pytest.approx(lowest)


def test_thickness_lost_is_depth_uncertainty_earlier_blends_and_cladding():
    result = corroded(
        clad=said("yes"),
        clad_thickness=recorded(0.07, "mm"),
        earlier_depth=recorded(0.1, "mm"),
    )
    assert line(result, "t_left") == pytest.approx(1.4 - 0.35 - 0.1 - 0.07)
    net = next(r for r in result.margins if r.mechanism == "net section, ultimate")
    assert net.strength == pytest.approx(FTU * 0.88 / 1.4)


def test_a_smaller_thickness_measured_goes_before_the_depth():
    result = corroded(
        remaining_thickness=recorded(0.9, "mm"), gauge_uncertainty=recorded(0.02, "mm")
    )
    assert line(result, "t_left") == pytest.approx(0.88)
    assert any("more" in w or "more is lost" in w for w in result.warnings)


@pytest.mark.parametrize(
    "kind", ["exfoliation", "intergranular", "stress_corrosion", "fretting"]
)
def test_attack_that_hides_its_reach_is_refused_in_words(kind):
    result = corroded(corrosion_type=said(kind))
    assert result.outcome is Outcome.NOT_COVERED
    assert result.governing == "type of corrosion"
    assert "cannot be calculated: remove it first" in result.warnings[0]
    assert result.residual_strength_mpa is None


def test_a_type_nobody_recorded_is_incomplete():
    result = corroded(corrosion_type=said("unknown"))
    assert result.outcome is Outcome.MISSING_INPUT


def test_known_damage_never_gets_an_interval():
    result = corroded()
    assert result.outcome is Outcome.COMPUTED
    assert result.threshold is result.repeat is None
    assert [life.title for life in result.lives] == [
        "until static ultimate strength is lost",
        "until residual strength is lost",
    ]
    assert any("no leave to fly" in w for w in result.warnings)
    other = corroded(Use.NO_KNOWN_CRACK)
    assert other.outcome is Outcome.NOT_COVERED
    assert other.governing == "what the result is for"


def test_removed_corrosion_and_corrosion_in_compression_are_not_its():
    assert corroded(damage_removed=said("yes")).governing == "damage still there"
    assert corroded(load_kind=said("compression")).governing == "kind of load"


def test_depth_through_the_skin_is_refused():
    result = corroded(damage_depth=recorded(1.38, "mm"))
    assert result.outcome is Outcome.NOT_COVERED
    assert "Measure it again" in result.warnings[0]


def test_the_threshold_is_information_only():
    known = recorded(3.0 * ROOT_1000, "MPa*sqrt(mm)")
    with_it, without = corroded(growth_threshold=known), corroded()
    assert with_it.life_cycles == without.life_cycles
    assert line(with_it, "ΔK_th") == pytest.approx(3.0)


def test_a_wing_skin_uses_its_recorded_cycle():
    wing = {
        "pressurised": said("no"),
        "thickness": recorded(3.5, "mm"),
        "surroundings": around(bay=None),
        "limit_flight_stress": recorded(175.0, "MPa"),
        "cycle_max_stress": recorded(100.0, "MPa"),
        "cycle_ratio": recorded(-0.2, "-"),
    }
    assert corroded(**wing).outcome is Outcome.COMPUTED


@settings(max_examples=12, deadline=None)
@given(st.floats(0.05, 0.5), st.floats(0.02, 0.3), st.floats(0.5, 60.0))
def test_deeper_corrosion_is_never_better(depth, deeper, length):
    def at(value):
        return corroded(
            damage_depth=recorded(value, "mm"), damage_length=recorded(length, "mm")
        )

    shallow, deep = at(depth), at(depth + deeper)
    assert deep.margin_ultimate <= shallow.margin_ultimate
    assert deep.lives[1].cycles <= shallow.lives[1].cycles


def test_a_larger_shell_lives_less():
    assert (
        corroded(radius=recorded(1.1 * RADIUS, "mm")).life_cycles
        < corroded().life_cycles
    )
