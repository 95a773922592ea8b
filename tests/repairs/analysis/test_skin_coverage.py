"""Which methods a crack in skin asks, which answers, and what stands beside it."""

from __future__ import annotations

import pytest

from repairs.analysis.assessment import Part, assess
from repairs.analysis.surroundings import Obstacle, ObstacleKind
from repairs.analysis.types import Outcome, Use
from tests.repairs.analysis.cases import CRACK, around, inputs, said
from tests.repairs.analysis.crack_cases import (
    DRILLED,
    EDGE,
    FLAT,
    ROUND,
    SKEW,
    STIFFENERS,
)

LONGITUDINAL = "pressurised-skin-longitudinal-crack"
ROUND_IT = "pressurised-skin-circumferential-crack"
SKEWED = "pressurised-skin-skew-crack"
UNPRESSURISED = "unpressurised-skin-crack"
STIFFENED = "stiffened-skin-crack"


def asked(base, **changes):
    return assess(
        Use.FOUND_DAMAGE, inputs({**base, "damage_type": said("crack")}, **changes)
    )


def parts(found):
    return {answer.result.method: answer.part for answer in found.answers}


@pytest.mark.parametrize(
    ("base", "method"),
    [
        (CRACK, LONGITUDINAL),
        (ROUND, ROUND_IT),
        (SKEW, SKEWED),
        (FLAT, UNPRESSURISED),
        (EDGE, "edge-crack"),
        ({**CRACK, **STIFFENERS}, STIFFENED),
        ({**ROUND, **STIFFENERS}, STIFFENED),
        ({**FLAT, **STIFFENERS}, STIFFENED),
    ],
)
def test_each_crack_is_answered_by_its_method(base, method):
    found = asked(base)
    assert found.result.outcome is Outcome.COMPUTED
    assert found.result.method == method
    assert parts(found)[method] is Part.ANSWERS
    assert found.result.threshold is None


def test_the_plain_skin_stands_in_and_says_what_the_better_method_lacks():
    result = asked(CRACK).result
    words = next(w for w in result.warnings if "stands in for" in w)
    assert "Crack in stiffened skin" in words
    assert not any("Stop-drilled" in w for w in result.warnings)


def test_the_plain_skin_is_the_bound_beside_the_stiffened_one():
    found = asked({**CRACK, **STIFFENERS})
    assert parts(found)[LONGITUDINAL] is Part.BESIDE
    plain = next(a.result for a in found.answers if a.result.method == LONGITUDINAL)
    assert plain.life_cycles <= found.result.life_cycles


def test_a_direction_nobody_knows_gets_the_bound_where_its_loads_are_recorded():
    found = asked(SKEW, crack_direction=None)
    assert found.result.method == SKEWED
    assert any("direction of the crack" in w for w in found.result.warnings)


def test_a_direction_nobody_knows_without_those_loads_is_what_is_asked_for():
    result = asked(CRACK, crack_direction=None).result
    assert result.outcome is Outcome.MISSING_INPUT
    assert [m.name for m in result.missing] == ["crack_direction"]


def test_round_the_shell_without_bending_nothing_is_computed():
    result = asked(ROUND, mean_longitudinal_stress=None).result
    assert result.outcome is Outcome.MISSING_INPUT
    assert result.method == ROUND_IT
    assert [m.name for m in result.missing] == ["mean_longitudinal_stress"]


def test_near_a_cut_out_the_refusal_names_the_cut_out():
    near = Obstacle(ObstacleKind.CUTOUT, "window 3", 300.0, 400.0, -50.0, 50.0)
    result = asked(CRACK, surroundings=around(obstacles=(near,))).result
    assert result.outcome is Outcome.NOT_COVERED
    assert "cut-out" in result.governing
    assert all("window 3" in warning for warning in result.warnings)


def test_a_stop_drilled_crack_is_answered_as_drilled():
    found = asked({**FLAT, **DRILLED, "crack_length": FLAT["crack_length"]})
    assert found.result.method == "stop-drilled-crack"
    assert parts(found)[UNPRESSURISED] is Part.BESIDE


def test_a_corner_of_a_cut_out_says_that_its_stress_is_wanted():
    result = asked(EDGE, crack_origin=said("cut_out_corner")).result
    assert result.outcome is Outcome.NOT_COVERED
    assert result.governing == "local stress at the corner of the cut-out"


def test_a_stop_hole_recorded_as_repair_is_a_drilled_crack():
    drilled = {**FLAT, "stop_hole_diameter": DRILLED["stop_hole_diameter"]}
    result = asked(drilled, repair_kind=said("stop_drill")).result
    assert result.method == "stop-drilled-crack"
    assert result.outcome is Outcome.COMPUTED


def test_a_stop_hole_is_never_structure_without_known_crack():
    drilled = {**FLAT, **DRILLED, "repair_kind": said("stop_drill")}
    given = inputs({**drilled, "damage_type": said("crack")})
    result = assess(Use.NO_KNOWN_CRACK, given).result
    assert result.outcome is Outcome.NOT_COVERED
    assert "known damage" in result.warnings[0]
    assert result.threshold is result.repeat is None


def test_new_skin_gets_a_threshold_and_a_repeat():
    renewed = {**CRACK, "damage_type": said("crack")}
    given = inputs(renewed, repair_kind=said("replacement"))
    result = assess(Use.NO_KNOWN_CRACK, given).result
    assert result.method == LONGITUDINAL
    assert result.threshold is not None
    assert result.repeat is not None
