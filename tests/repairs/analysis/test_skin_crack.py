"""The longitudinal skin crack as a whole, against an independent short calculation."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import quad, solve_ivp
from scipy.optimize import brentq

from repairs.analysis.growth.laws import FormanLaw
from repairs.analysis.registry import evaluate
from repairs.analysis.surroundings import Obstacle, ObstacleKind
from repairs.analysis.types import (
    Grade,
    Outcome,
    Reference,
    Sourced,
    Stated,
    UltimateKept,
    Use,
)
from tests.repairs.analysis.cases import (
    CRACK,
    FTY,
    KC,
    PSI,
    RADIUS,
    THICKNESS,
    around,
    inputs,
    recorded,
    said,
)

METHOD = "pressurised-skin-longitudinal-crack"
HOOP = 8.5 * PSI * RADIUS / THICKNESS


def found(**changes):
    return evaluate(METHOD, Use.FOUND_DAMAGE, inputs(CRACK, **changes))


def unknown(**changes):
    return evaluate(METHOD, Use.NO_KNOWN_CRACK, inputs(CRACK, **changes))


def beta(a: float) -> float:
    """Handbook bulging and secant, written again for the check."""
    x = a / math.sqrt(RADIUS * THICKNESS)
    bulging = math.sqrt(1 + 0.52 * x + 1.29 * x * x - 0.074 * x**3)
    return bulging / math.sqrt(math.cos(math.pi * a / 5080))


def bulged(a: float) -> float:
    x = a / math.sqrt(RADIUS * THICKNESS)
    return math.sqrt(1 + 0.52 * x + 1.29 * x * x - 0.074 * x**3)


def critical(stress: float) -> float:
    return brentq(lambda a: KC - stress * beta(a) * math.sqrt(math.pi * a), 1, 200)


def test_requirements_are_two_with_their_own_cases():
    result = found()
    assert result.required_residual_mpa == pytest.approx(1.15 * HOOP)
    assert result.ultimate_mpa == pytest.approx(
        1.5 * 1.33 * 8.6 * PSI * RADIUS / THICKNESS
    )
    assert "1.15" in result.residual_case
    assert "1.33" in result.ultimate_case


def test_pressure_only_leaves_ultimate_not_shown_and_says_so():
    result = found()
    assert result.margin_ultimate > 0
    assert result.ultimate_kept is UltimateKept.NOT_SHOWN
    assert len(result.cases_not_checked) == 2
    assert any("Pressure only" in w for w in result.warnings)


def test_with_flight_loads_recorded_ultimate_is_answered():
    kept = found(limit_flight_stress=recorded(10.0, "MPa"))
    assert kept.ultimate_kept is UltimateKept.YES
    lost = found(limit_flight_stress=recorded(300.0, "MPa"))
    assert lost.ultimate_kept is UltimateKept.NO
    assert lost.life_cycles == 0


def test_critical_sizes_and_lives_agree_with_an_independent_integration():
    result = found()
    law = CRACK["growth_law"]

    def slowness(a, n):
        k = beta(a) * HOOP * math.sqrt(math.pi * a)
        return [1 / (law.coefficient * k**law.exponent)]

    ends = [
        critical(stress)
        for stress in (result.ultimate_mpa, result.required_residual_mpa)
    ]
    for life, end in zip(result.lives, ends, strict=True):
        solved = solve_ivp(slowness, (12.0, end), [0.0], rtol=1e-10, atol=1e-6)
        assert life.cycles == pytest.approx(solved.y[0, -1], abs=1)
    marks = {m.label: m.y for m in result.curves[1].marks}
    assert marks["residual lost"] == pytest.approx(2 * ends[1], rel=1e-6)
    assert result.life_cycles == result.lives[0].cycles


def test_known_damage_gets_no_interval():
    result = found()
    assert result.threshold is result.repeat is None
    assert not [line for line in result.note if line.symbol in ("N_rep", "N_thr")]
    assert result.life_base == "from finding"


def test_uncertainty_is_added_to_the_measured_length():
    longer = found(crack_length_uncertainty=recorded(2.0, "mm"))
    same = found(crack_length=recorded(26.0, "mm"))
    assert longer.residual_strength_mpa == same.residual_strength_mpa


def test_a_crack_without_its_uncertainty_is_incomplete():
    result = found(crack_length_uncertainty=None)
    assert result.outcome is Outcome.MISSING_INPUT
    assert [m.name for m in result.missing] == ["crack_length_uncertainty"]


def test_threshold_and_repeat_are_capped_by_the_limit_of_validity():
    result = unknown()
    assert (result.threshold.cycles, result.threshold.cap) == (
        34_000,
        "limit of validity",
    )
    assert result.threshold.uncapped == result.lives[0].cycles // 2
    assert result.repeat.cycles == 14_000
    assert result.repeat.uncapped > 14_000


def test_the_operators_maximum_of_the_class_caps_too():
    result = unknown(class_maximum=recorded(4_000, "cycles"))
    assert result.repeat.cycles == result.threshold.cycles == 4_000


@pytest.mark.parametrize(
    ("left_out", "words"),
    [
        ("growth_policy", "No scatter factor"),
        ("repeat_policy", "No scatter factor"),
        ("detectable_length", "No detectable size"),
    ],
)
def test_without_a_factor_or_a_size_there_is_no_interval(left_out, words):
    result = unknown(**{left_out: None})
    assert result.outcome is Outcome.COMPUTED
    gone = result.threshold if left_out == "growth_policy" else result.repeat
    assert gone is None
    assert any(words in w for w in result.warnings)
    assert left_out in [m.name for m in result.missing]


def test_a_detectable_size_beyond_critical_gives_no_repeat():
    result = unknown(detectable_length=recorded(250.0, "mm"))
    assert result.repeat is None
    assert any("not below the critical size" in w for w in result.warnings)


def test_past_the_limit_of_validity_there_is_no_repeat():
    result = unknown(accumulated_cycles=recorded(34_000, "cycles"))
    assert result.repeat_cycles is None
    assert any("needs an engineer" in w for w in result.warnings)


def obstacle(kind: ObstacleKind, x1: float, s1: float) -> Obstacle:
    return Obstacle(kind, "X", x1, x1 + 400, s1, s1 + 400)


@pytest.mark.parametrize("kind", ObstacleKind)
def test_near_an_obstacle_no_method_applies(kind):
    # 3 sqrt(R t) = 133.9 mm; tip at 266, obstacle at 390 is 124 mm away.
    near = around(obstacles=(obstacle(kind, 390.0, -200.0),))
    result = found(surroundings=near)
    assert result.outcome is Outcome.NOT_COVERED
    assert result.residual_strength_mpa is None
    assert result.life_cycles is None
    assert kind.value in result.governing
    assert "124.0 mm" in result.warnings[0]
    assert "133.9 mm" in result.warnings[0]


def test_far_from_it_the_crack_is_followed_only_as_far_as_it_is_valid():
    far = around(obstacles=(obstacle(ObstacleKind.CUTOUT, 420.0, -200.0),))
    result = found(surroundings=far)
    assert result.outcome is Outcome.COMPUTED
    assert "cut-out X" in result.lives[1].remark
    assert result.lives[1].cycles < found().lives[1].cycles


@pytest.mark.parametrize(
    ("change", "test"),
    [
        ({"crack_direction": said("circumferential")}, "direction of the crack"),
        ({"crack_origin": said("fastener_hole")}, "where the crack starts"),
        ({"element": said("stringer")}, "structural item"),
        ({"pressurised": said("no")}, "panel is pressurised"),
        ({"surroundings": around(half_along=260.0)}, "inside one bay"),
        ({"thickness": recorded(80.0, "mm")}, "radius over thickness"),
    ],
)
def test_each_applicability_test_refuses_without_a_number(change, test):
    result = found(**change)
    assert result.outcome is Outcome.NOT_COVERED
    assert any(test in w for w in result.warnings)
    assert result.margin_residual is None


def test_an_origin_nobody_knows_is_asked_for():
    result = found(crack_origin=said("unknown"))
    assert result.outcome is Outcome.MISSING_INPUT
    assert any("where the crack starts" in w for w in result.warnings)


def test_values_from_memory_bar_approval_until_adopted():
    result = found()
    assert result.source_from_memory
    assert any("barred from approval" in b for b in result.barred)
    adopted = Sourced(1.15, "-", "14 CFR 25.571, page seen, by two", Grade.ADOPTED)
    result = found(residual_pressure_factor=adopted)
    assert not result.source_from_memory
    assert result.barred == ()


def test_above_45000_ft_the_proof_factor_is_1_67():
    high = found(ceiling=recorded(51_000, "ft"))
    assert high.ultimate_mpa == pytest.approx(found().ultimate_mpa * 1.67 / 1.33)
    line = next(line for line in high.note if line.symbol == "k_proof")
    assert "not recorded, the larger factor taken" in line.source


def test_the_european_proof_factor_is_the_same_at_any_altitude():
    for rules, factor in (("EASA", 1.33), ("FAA", 1.67)):
        regime = Stated(rules, "period of the operator")
        high = found(ceiling=recorded(51_000, "ft"), regime=regime)
        assert high.ultimate_mpa == pytest.approx(found().ultimate_mpa * factor / 1.33)


def test_second_growth_law_is_shown_beside_the_first():
    second = replace(CRACK["growth_law"], coefficient=2e-13)
    lines = [li for li in found(second_growth_law=second).note if li.symbol == "N′"]
    assert len(lines) == 2


def test_the_short_crack_line_touches_the_bulged_fracture_curve():
    # Where the line ends it meets fracture at 2/3 of yield, whatever bulging does.
    length = brentq(
        lambda a: (KC / bulged(a)) ** 2 * 9 / (2 * math.pi * FTY**2) - 2 * a, 1, 80
    )
    just = found(crack_length=recorded(2 * length * 0.999999, "mm"))
    assert just.residual_strength_mpa == pytest.approx(2 / 3 * FTY, rel=1e-3)
    each = {m.mechanism: m.strength for m in just.margins}
    assert each["fracture"] == pytest.approx(each["short-crack line"], rel=1e-3)


FORMAN = FormanLaw.from_mpa_root_metre(
    7.13e-6, 2.70, 150.0, Reference("a fit", Grade.QUOTED)
)


def forman_flights(end: float) -> float:
    """Cycles of Forman's law at R = 0 from 12 mm, integrated again in MPa√m."""

    def slowness(a: float) -> float:
        k = HOOP * beta(a) * math.sqrt(math.pi * a / 1000)
        return (150.0 - k) / (7.13e-6 * k**2.70)

    return quad(slowness, 12.0, end, epsabs=0, epsrel=1e-10)[0]


def test_formans_law_may_stand_beside_or_alone():
    end = critical(1.15 * HOOP)
    beside = found(second_growth_law=FORMAN)
    last = [line for line in beside.note if line.symbol == "N′"][-1]
    assert last.value == pytest.approx(forman_flights(end), rel=1e-6)
    alone = found(growth_law=FORMAN)
    residual = next(life for life in alone.lives if "residual" in life.title)
    assert residual.cycles == math.floor(forman_flights(end))
    written = next(line for line in alone.note if line.symbol == "C")
    assert written.value == pytest.approx(7.13e-6)
    assert "Kc" in written.formula


def test_a_second_law_that_ends_before_the_crack_does_is_told_and_stops_nothing():
    short = replace(FORMAN, toughness=HOOP)
    result = found(second_growth_law=short)
    assert result.outcome is Outcome.COMPUTED
    assert any("no life to compare" in line.formula for line in result.note)


def test_the_note_can_be_followed_line_by_line():
    note = found().note
    assert [line.number for line in note] == list(range(1, len(note) + 1))
    by_symbol = {line.symbol: line for line in note}
    assert by_symbol["K_max"].value == pytest.approx(
        beta(12) * HOOP * math.sqrt(math.pi * 12 / 1000)
    )
    assert all(line.grade for line in note if line.source)


@settings(max_examples=20, deadline=None)
@given(st.floats(5, 120), st.floats(1.01, 1.5))
def test_a_longer_crack_is_never_stronger_and_never_lives_longer(length, more):
    short = found(crack_length=recorded(length, "mm"))
    long = found(crack_length=recorded(length * more, "mm"))
    assert long.residual_strength_mpa < short.residual_strength_mpa
    assert long.life_cycles <= short.life_cycles


@settings(max_examples=10, deadline=None)
@given(st.floats(1.0, 2.0), st.floats(1.02, 1.3))
def test_a_thinner_skin_is_never_better(thickness, more):
    thin = unknown(thickness=recorded(thickness, "mm"))
    thick = unknown(thickness=recorded(thickness * more, "mm"))
    assert thin.life_cycles < thick.life_cycles
    assert thin.margin_residual < thick.margin_residual
