"""What no method may do: guess an input, or call worse damage better."""

from __future__ import annotations

import math

import pytest

from repairs.analysis.inputs import SPECS, Inputs
from repairs.analysis.registry import METHODS, evaluate
from repairs.analysis.types import Outcome, Result, Sourced, Use
from tests.repairs.analysis.method_cases import CASES, RUNS, SCREENING

NEEDED = [
    (name, use, given)
    for name, use in RUNS
    for given in METHODS[name].module.required(Inputs(CASES[name]), use)
    if given in CASES[name]
]
STIFFENED = "stiffened-skin-crack"
"""Its table of a panel is slow to make: only what leaves the panel alone is varied."""
CAPS = ("validity_cycles", "class_maximum", "accumulated_cycles")
"""What only shortens a proposed interval; without it none is shorter."""
LONGER = ("crack_length", "edge_crack_length", "damage_depth", "member_lost_area")
THINNER = ("thickness", "remaining_thickness", "member_thickness")
STRESSES = (
    "normal_pressure",
    "external_pressure",
    "relief_pressure",
    "limit_flight_stress",
    "limit_longitudinal_stress",
    "mean_longitudinal_stress",
    "limit_shear_stress",
    "mean_shear_stress",
    "cycle_max_stress",
    "member_limit_force",
    "member_limit_moment",
    "member_limit_shear",
    "neighbour_limit_force",
)


def run(name: str, use: Use, *left_out: str, **scaled: float) -> Result:
    values = {k: v for k, v in CASES[name].items() if k not in left_out}
    for key, factor in scaled.items():
        old = values.get(key)
        if isinstance(old, Sourced):
            values[key] = Sourced(old.value * factor, old.unit, old.source, old.grade)
    return evaluate(name, use, Inputs(values))


def numbers(result: Result) -> dict[str, float]:
    """What a reader could take for an answer; a life without end is infinite."""
    found = {
        "residual strength": result.residual_strength_mpa,
        "margin to residual": result.margin_residual,
        "margin to ultimate": result.margin_ultimate,
        "threshold": result.threshold_cycles,
        "repeat": result.repeat_cycles,
    }
    lives = {
        f"life, {life.title}": math.inf if life.cycles is None else life.cycles
        for life in result.lives
    }
    return {k: v for k, v in {**found, **lives}.items() if v is not None}


def test_every_method_has_a_full_set_of_inputs():
    assert {*CASES, *SCREENING} == set(METHODS)


@pytest.mark.parametrize(("name", "use"), RUNS)
def test_the_full_set_gives_an_answer(name, use):
    assert run(name, use).outcome is Outcome.COMPUTED


@pytest.mark.parametrize("use", Use)
@pytest.mark.parametrize("name", SCREENING)
def test_a_screening_never_gives_a_number(name, use):
    result = evaluate(name, use, Inputs(SCREENING[name]))
    assert result.outcome is Outcome.NOT_COVERED
    assert numbers(result) == {}


@pytest.mark.parametrize(("name", "use", "left_out"), NEEDED)
def test_a_missing_input_never_becomes_a_number(name, use, left_out):
    result = run(name, use, left_out)
    assert result.outcome is not Outcome.COMPUTED
    assert numbers(result) == {}
    assert result.note == ()
    assert left_out in {m.name for m in result.missing} or result.warnings


@pytest.mark.parametrize(("name", "use"), RUNS)
def test_knowing_less_is_never_better(name, use):
    """An input left out that is not required may cost, and never pays."""
    whole = numbers(run(name, use))
    required = METHODS[name].module.required(Inputs(CASES[name]), use)
    for left_out in set(CASES[name]) - {*required, *CAPS}:
        for what, value in numbers(run(name, use, left_out)).items():
            assert value <= whole.get(what, math.inf) * (1 + 1e-9), (left_out, what)


WORSE = {"longer or deeper": (LONGER, 1), "thinner": (THINNER, -1),
         "more stress": (STRESSES, 1)}  # fmt: skip
WORSENED = [
    pytest.param(name, use, varied, power, id=f"{name}-{use}-{what}")
    for name, use in RUNS
    for what, (varied, power) in WORSE.items()
    if set(varied) & set(CASES[name])
    # Of thinner skin the stiffeners take a larger share.
    if not (name == STIFFENED and varied is THINNER)
]


@pytest.mark.parametrize(("name", "use", "varied", "power"), WORSENED)
def test_worse_is_never_better(name, use, varied, power):
    base = numbers(run(name, use))
    worse = numbers(run(name, use, **dict.fromkeys(varied, 1.1**power)))
    for what, value in worse.items():
        assert value <= base.get(what, math.inf) * (1 + 1e-6), what


IMPOSSIBLE = [
    (name, use, given, value)
    for name, use, given in NEEDED
    if isinstance(CASES[name][given], Sourced)
    for value in (0.0, -1.0)
    if SPECS[given].expected == "more than zero"
    or (SPECS[given].expected and value < 0)
]


@pytest.mark.parametrize(("name", "use", "given", "value"), IMPOSSIBLE)
def test_an_impossible_number_is_asked_for_again(name, use, given, value):
    # A negative uncertainty lengthens a life, a thickness of zero divides by it.
    old = CASES[name][given]
    wrong = Sourced(value, old.unit, old.source, old.grade)
    result = evaluate(name, use, Inputs({**CASES[name], given: wrong}))
    assert result.outcome is not Outcome.COMPUTED
    assert numbers(result) == {}
    assert given in {m.name for m in result.missing}
    assert any(f"reads {value:g}" in warning for warning in result.warnings)


@pytest.mark.parametrize("name", ["unpressurised-skin-crack", "edge-crack"])
def test_a_panel_without_load_is_refused_and_has_no_infinite_margin(name):
    result = run(name, Use.FOUND_DAMAGE, limit_flight_stress=0.0)
    assert result.outcome is Outcome.NOT_COVERED
    assert numbers(result) == {}
