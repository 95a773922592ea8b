"""A crack in corroded skin: the plain method on what is left."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.assessment import assess
from repairs.analysis.registry import evaluate
from repairs.analysis.types import Outcome, Use
from tests.repairs.analysis.cases import CRACK, THICKNESS, inputs, recorded, said

METHOD, PLAIN = "crack-in-corroded-skin", "pressurised-skin-longitudinal-crack"
THINNED = {
    **CRACK,
    "damage_type": said("crack"),
    "crack_origin": said("corrosion_pit"),
    "remaining_thickness": recorded(1.2, "mm"),
    "gauge_uncertainty": recorded(0.02, "mm"),
}


def thinned(use: Use = Use.FOUND_DAMAGE, **changes):
    return evaluate(METHOD, use, inputs(THINNED, **changes))


def line(result, symbol: str) -> float:
    return next(li.value for li in result.note if li.symbol == symbol)


def test_nothing_lost_is_the_plain_crack():
    whole = thinned(
        remaining_thickness=recorded(THICKNESS, "mm"),
        gauge_uncertainty=recorded(0.0, "mm"),
    )
    plain = evaluate(PLAIN, Use.FOUND_DAMAGE, inputs(THINNED))
    assert whole.margin_residual == pytest.approx(plain.margin_residual, rel=1e-12)
    assert [li.cycles for li in whole.lives] == [li.cycles for li in plain.lives]


def test_it_is_the_plain_crack_of_a_skin_as_thin():
    # Pressure over the thickness left, and bulging on it: the same as thin skin.
    thin = evaluate(
        PLAIN, Use.FOUND_DAMAGE, inputs(THINNED, thickness=recorded(1.18, "mm"))
    )
    result = thinned()
    assert result.outcome is Outcome.COMPUTED
    assert result.margin_residual == pytest.approx(thin.margin_residual, rel=1e-9)
    assert line(result, "F_b") == pytest.approx(line(thin, "F_b"))
    assert line(result, "t_left") == pytest.approx(1.18)


def test_cladding_is_taken_off():
    clad = {"clad": said("yes"), "clad_thickness": recorded(0.07, "mm")}
    assert line(thinned(**clad), "t_left") == pytest.approx(1.11)
    assert [m.name for m in thinned(clad=said("yes")).missing] == ["clad_thickness"]


def test_only_a_crack_from_corrosion_and_with_its_thickness():
    assert thinned(crack_origin=said("skin")).outcome is Outcome.NOT_COVERED
    missing = thinned(remaining_thickness=None, gauge_uncertainty=None)
    names = [m.name for m in missing.missing]
    assert names == ["remaining_thickness", "gauge_uncertainty"]
    assert thinned(Use.NO_KNOWN_CRACK).outcome is Outcome.NOT_COVERED


def test_unpressurised_skin_has_its_recorded_stress_raised():
    wing = {
        "pressurised": said("no"),
        "limit_flight_stress": recorded(120.0, "MPa"),
        "cycle_max_stress": recorded(70.0, "MPa"),
        "cycle_ratio": recorded(0.0, "-"),
    }
    plain = evaluate(
        "unpressurised-skin-crack", Use.FOUND_DAMAGE, inputs(THINNED, **wing)
    )
    result = thinned(**wing)
    share = 1.18 / THICKNESS
    assert 1 + result.margin_residual == pytest.approx(
        share * (1 + plain.margin_residual), rel=1e-9
    )


def test_the_thinned_crack_governs_over_the_plain_one():
    whole = assess(Use.FOUND_DAMAGE, inputs(THINNED))
    assert whole.result.margin_residual == pytest.approx(thinned().margin_residual)


@settings(max_examples=10, deadline=None)
@given(st.floats(0.7, 1.3), st.floats(0.02, 0.3))
def test_thinner_is_never_better(left, less):
    thick = thinned(remaining_thickness=recorded(left, "mm"))
    thin = thinned(remaining_thickness=recorded(left - less, "mm"))
    assert thin.margin_residual < thick.margin_residual
    assert thin.lives[1].cycles <= thick.lives[1].cycles
