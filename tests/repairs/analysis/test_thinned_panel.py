"""Thinned skin in compression or shear: buckling on what is left."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.assessment import Part, assess
from repairs.analysis.registry import evaluate
from repairs.analysis.strength.load_kinds import Mechanism, margin_after_loss
from repairs.analysis.types import Outcome, UltimateKept, Use
from tests.outside import outside
from tests.repairs.analysis.cases import FTY, KSI, SHELL, inputs, recorded, said

METHOD = "thinned-panel-buckling"
E, NU = 73_000.0, 0.33
PRESSED = {
    **SHELL,
    "damage_type": said("corrosion"),
    "pressurised": said("no"),
    "load_kind": said("compression"),
    "damage_removed": said("yes"),
    "thickness": recorded(2.5, "mm"),
    "remaining_thickness": recorded(2.3, "mm"),
    "gauge_uncertainty": recorded(0.05, "mm"),
    "earlier_depth": recorded(0.0, "mm"),
    "frame_pitch": recorded(600.0, "mm"),
    "stringer_pitch": recorded(200.0, "mm"),
    "modulus": recorded(E, "MPa"),
    "poisson": recorded(NU, "-"),
    "compression_yield": recorded(40 * KSI, "MPa"),
    "shear_strength": recorded(38 * KSI, "MPa"),
    "limit_longitudinal_stress": recorded(-20.0, "MPa"),
    "limit_shear_stress": recorded(15.0, "MPa"),
}


def pressed(use: Use = Use.NO_KNOWN_CRACK, **changes):
    return evaluate(METHOD, use, inputs(PRESSED, **changes))


def line(result, symbol: str) -> float:
    return next(li.value for li in result.note if li.symbol == symbol)


def test_the_panel_left_buckles_as_a_plate_of_its_thickness():
    result = pressed()
    closed = 4 * math.pi**2 * E / (12 * (1 - NU**2)) * (2.25 / 200) ** 2
    outside(
        "Thinned panel in compression: elastic buckling stress",
        source="classical plate theory, k = 4 where the length is a whole multiple",
        given="t left 2.25 mm, b 200 mm, a 600 mm, E 73 000 MPa, ν 0.33",
        published=closed,
        computed=line(result, "σ_e"),
        unit="MPa",
        rel=1e-9,
        route="closed form",
    )
    assert result.margin_ultimate == pytest.approx(closed * 0.9 / 30 - 1)
    assert result.margin_residual == pytest.approx(closed * 0.9 / 20 - 1)


def test_a_tenth_lost_costs_a_fifth_of_the_stress_and_a_quarter_of_the_load():
    gone = recorded(2.5, "mm")
    whole = pressed(remaining_thickness=gone, gauge_uncertainty=recorded(0.0, "mm"))
    thin = pressed()
    assert line(thin, "σ_e") / line(whole, "σ_e") == pytest.approx(0.81)
    outside(
        "Thinned panel: margin of buckling after a loss of a tenth",
        source="(1 + MS) t_r³ − 1, thickness scaling",
        given="a tenth of the thickness lost over the panel",
        published=margin_after_loss(
            whole.margin_ultimate, 0.9, Mechanism.COMPRESSION_BUCKLING
        ),
        computed=thin.margin_ultimate,
        rel=1e-9,
        route="another method",
    )


def test_in_shear_the_shorter_side_counts_and_ultimate_shear_is_a_limit():
    result = pressed(load_kind=said("shear"))
    k = 5.35 + 4 * (200 / 600) ** 2
    elastic = k * math.pi**2 * E / (12 * (1 - NU**2)) * (2.25 / 200) ** 2
    assert line(result, "σ_e") == pytest.approx(elastic)
    names = {row.mechanism for row in result.margins}
    assert names == {Mechanism.SHEAR_BUCKLING, Mechanism.SHEAR_ULTIMATE}


def test_a_thick_panel_is_capped_under_yield():
    thick = pressed(
        thickness=recorded(14.0, "mm"), remaining_thickness=recorded(13.5, "mm")
    )
    assert line(thick, "σ_cr") < 40 * KSI
    assert line(thick, "σ_e") > 40 * KSI
    sheared = pressed(
        load_kind=said("shear"),
        thickness=recorded(14.0, "mm"),
        remaining_thickness=recorded(13.5, "mm"),
    )
    assert line(sheared, "σ_cr") < FTY / math.sqrt(3)


def test_loads_together_are_not_checked_so_ultimate_is_not_shown():
    result = pressed()
    assert result.ultimate_kept is UltimateKept.NOT_SHOWN
    assert result.lives == ()
    assert result.threshold is result.repeat is result.life_cycles is None
    assert any("no life follows" in w for w in result.warnings)
    lost = pressed(limit_longitudinal_stress=recorded(-60.0, "MPa"))
    assert lost.ultimate_kept is UltimateKept.NO


def test_as_found_it_takes_depth_and_refuses_hidden_attack():
    found = {
        "damage_removed": said("no"),
        "corrosion_type": said("pitting"),
        "damage_depth": recorded(0.2, "mm"),
        "damage_depth_uncertainty": recorded(0.05, "mm"),
        "remaining_thickness": None,
        "gauge_uncertainty": None,
    }
    result = pressed(Use.FOUND_DAMAGE, **found)
    assert result.margin_ultimate == pytest.approx(pressed().margin_ultimate)
    hidden = pressed(**{**found, "corrosion_type": said("exfoliation")})
    assert hidden.outcome is Outcome.NOT_COVERED


def test_other_loads_are_not_its_and_missing_pitches_are_named():
    assert pressed(load_kind=said("tension")).governing == "kind of load"
    missing = pressed(stringer_pitch=None, modulus=None)
    assert {m.name for m in missing.missing} == {"stringer_pitch", "modulus"}


def test_a_blend_in_a_compression_panel_is_answered_by_its_buckling():
    whole = assess(Use.NO_KNOWN_CRACK, inputs(PRESSED))
    answered = [a.result.method for a in whole.answers if a.part is Part.ANSWERS]
    assert METHOD in answered
    tension = assess(Use.NO_KNOWN_CRACK, inputs(PRESSED, load_kind=said("tension")))
    assert METHOD not in [a.result.method for a in tension.answers]


@settings(max_examples=15, deadline=None)
@given(st.floats(1.5, 2.4), st.floats(0.02, 0.4))
def test_thinner_is_never_better(left, less):
    thick = pressed(remaining_thickness=recorded(left, "mm"))
    thin = pressed(remaining_thickness=recorded(left - less, "mm"))
    assert thin.margin_ultimate < thick.margin_ultimate
