"""A scratch or gouge as found: a sharp flaw across the thickness."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.intensity.part_through import PartThrough, surface_crack
from repairs.analysis.intensity.through import edge_crack_polynomial, edge_crack_tada
from repairs.analysis.registry import evaluate
from repairs.analysis.types import ROOT_1000, EdgeLength, Outcome, Use
from tests.outside import outside
from tests.repairs.analysis.cases import FTU, FTY, SHELL, inputs, recorded, said

METHOD = "scratch-as-found"
SCRATCH = {
    **SHELL,
    "damage_type": said("scratch"),
    "damage_direction": said("longitudinal"),
    "damage_depth": recorded(0.10, "mm"),
    "damage_depth_uncertainty": recorded(0.02, "mm"),
    "earlier_depth": recorded(0.0, "mm"),
}
AXIAL = {
    "damage_direction": said("circumferential"),
    "limit_longitudinal_stress": recorded(80.0, "MPa"),
    "mean_longitudinal_stress": recorded(40.0, "MPa"),
    "flight_smallest_share": recorded(0.0, "-"),
    "flight_largest_share": recorded(1.5, "-"),
}


def scratched(use: Use = Use.FOUND_DAMAGE, **changes):
    return evaluate(METHOD, use, inputs(SCRATCH, **changes))


def line(result, symbol: str) -> float:
    return next(li.value for li in result.note if li.symbol == symbol)


def test_a_scratch_of_a_tenth_of_a_millimetre_reaches_a_long_crack_threshold():
    factor = edge_crack_tada(EdgeLength(0.1), 1.016)
    outside(
        "Scratch as an edge crack across the thickness: F",
        source="quartic of the same edge crack, in public university notes",
        given="depth 0.1 mm in 1.016 mm",
        published=edge_crack_polynomial(EdgeLength(0.1), 1.016),
        computed=factor,
        rel=0.01,
        route="another method",
    )
    delta_k = factor * 150 * (3.141592653589793 * 0.1) ** 0.5 / ROOT_1000
    assert delta_k == pytest.approx(3.147, rel=0.01)


@pytest.mark.parametrize("share", [0.05, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6])
def test_the_bound_holds_a_surface_flaw_of_any_length(share):
    long = surface_crack(PartThrough(share, 4.999 * share, 1.0), 1e3, 90.0)
    assert edge_crack_tada(EdgeLength(share), 1.0) > long


def test_the_flaw_is_the_depth_with_its_uncertainty_in_the_sound_thickness():
    result = scratched()
    assert line(result, "F") == pytest.approx(edge_crack_tada(EdgeLength(0.12), 1.4))
    net = {r.mechanism: r.strength for r in result.margins}
    assert net["net section, ultimate"] == pytest.approx(FTU * 1.28 / 1.4)
    assert net["net-section yield"] == pytest.approx(FTY * 1.28 / 1.4)


def test_published_loss_of_life_is_said():
    assert any("Talia and Talia" in li.source for li in scratched().note)


def test_a_root_radius_is_no_relief():
    smooth = scratched(root_radius=recorded(5.0, "mm"))
    assert smooth.life_cycles == scratched().life_cycles


def test_a_scratch_in_the_cladding_is_taken_whole():
    clad = {"clad": said("yes"), "clad_thickness": recorded(0.07, "mm")}
    through, within = (
        scratched(**clad, through_clad=said(word)) for word in ("yes", "no")
    )
    assert through.life_cycles == within.life_cycles
    assert any("all the same" in li.formula for li in within.note)
    assert through.life_cycles < scratched().life_cycles


def test_round_the_section_it_needs_the_stress_along_it():
    missing = scratched(damage_direction=said("circumferential"))
    assert missing.outcome is Outcome.MISSING_INPUT
    assert "mean_longitudinal_stress" in [m.name for m in missing.missing]
    result = scratched(**AXIAL)
    assert result.outcome is Outcome.COMPUTED
    assert any("stress along the section" in li.formula for li in result.note)


def test_an_unknown_direction_is_taken_across_the_load():
    result = scratched(damage_direction=None)
    assert result.life_cycles == scratched().life_cycles
    assert any("whatever its direction" in li.formula for li in result.note)


def test_pressed_or_sheared_skin_is_not_covered():
    for kind in ("compression", "shear"):
        assert scratched(load_kind=said(kind)).outcome is Outcome.NOT_COVERED


def test_it_gets_lives_and_never_an_interval():
    result = scratched()
    assert result.threshold is result.repeat is None
    assert len(result.lives) == 2
    assert scratched(Use.NO_KNOWN_CRACK).outcome is Outcome.NOT_COVERED
    assert {c.key for c in result.curves} == {"residual_strength", "growth"}


def test_nearly_through_is_not_covered():
    result = scratched(damage_depth=recorded(1.36, "mm"))
    assert result.outcome is Outcome.NOT_COVERED


@settings(max_examples=12, deadline=None)
@given(st.floats(0.03, 0.6), st.floats(0.02, 0.3))
def test_a_deeper_scratch_is_never_better(depth, deeper):
    shallow = scratched(damage_depth=recorded(depth, "mm"))
    deep = scratched(damage_depth=recorded(depth + deeper, "mm"))
    assert deep.margin_residual < shallow.margin_residual
    assert deep.lives[1].cycles <= shallow.lives[1].cycles


@settings(max_examples=8, deadline=None)
@given(st.floats(1.0, 1.5))
def test_thinner_skin_lives_less(thickness):
    thin = scratched(thickness=recorded(thickness, "mm"))
    thick = scratched(thickness=recorded(thickness + 0.2, "mm"))
    assert thin.life_cycles <= thick.life_cycles


def test_a_skin_flown_by_pressure_alone_says_that_round_it_needs_more():
    result = scratched(**{**AXIAL, "mean_longitudinal_stress": recorded(-5.0, "MPa")})
    assert result.outcome is Outcome.NOT_COVERED
    assert result.governing == "1 g stress along the section"
