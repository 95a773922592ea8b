"""Mistakes that a result cannot prevent, and therefore says."""

from __future__ import annotations

from dataclasses import replace

import pytest

from repairs.analysis.inspection.intervals import over_factor
from repairs.analysis.note import Note
from repairs.analysis.registry import METHODS, evaluate
from repairs.analysis.scatter.factors import Multiplied, published_factor
from repairs.analysis.types import Life, Outcome, Result, Use
from tests.repairs.analysis.cases import BLEND, CRACK, inputs, recorded
from tests.repairs.analysis.method_cases import CASES, RUNS

HIGH = {**BLEND, "radius": recorded(3000.0, "mm")}
"""A blend in skin so highly stressed that its stress-life is finite."""


def run(name: str, use: Use, **changes) -> Result:
    return evaluate(name, use, inputs(CASES[name], **changes))


def said(result: Result) -> str:
    lines = (f"{line.formula} {line.substitution}" for line in result.note)
    return "\n".join((*lines, *result.warnings))


def test_a_factor_on_tests_does_not_divide_a_calculated_life():
    # AC 23-13A: 4.96 is for one full-scale test, 8 for a life by analysis.
    tested = published_factor("AC 23-13A, full-scale tests: 1")
    result = evaluate(
        "corrosion-blend-out",
        Use.NO_KNOWN_CRACK,
        inputs(HIGH, stress_life_policy=tested),
    )
    assert any("made for another life" in reason for reason in result.barred)
    analysis = published_factor("AC 23-13A, analysis")
    result = evaluate(
        "corrosion-blend-out",
        Use.NO_KNOWN_CRACK,
        inputs(HIGH, stress_life_policy=analysis),
    )
    assert not any("made for another life" in reason for reason in result.barred)


@pytest.mark.parametrize(
    ("name", "right"),
    [
        ("stress_life_policy", Multiplied.ANALYSIS_MEDIAN),
        ("growth_policy", Multiplied.GROWTH),
        ("repeat_policy", Multiplied.GROWTH),
    ],
)
def test_each_policy_divides_the_life_it_is_made_for(name, right):
    policy = BLEND[name]
    for multiplies in (*Multiplied, "calculated life, in words of the type"):
        note = Note()
        given = inputs(BLEND, **{name: replace(policy, multiplies=multiplies)})
        over_factor(given, note, 1000.0, name, "threshold")
        wrong = multiplies in {*Multiplied} - {right}
        assert bool(note.barred) is wrong


def test_a_factor_for_average_usage_is_told_from_one_with_severity():
    # AC 23-13A puts 1.5 deviations of severity into its flight spectra, not its factor.
    result = evaluate(
        "corrosion-blend-out",
        Use.NO_KNOWN_CRACK,
        inputs(HIGH, stress_life_policy=published_factor("AC 23-13A, analysis")),
    )
    assert any("severity of the spectrum" in warning for warning in result.warnings)


def test_a_curve_is_neither_an_allowable_nor_the_life_to_a_crack_one_finds():
    result = run("corrosion-blend-out", Use.NO_KNOWN_CRACK)
    assert "median life of small specimens until they part" in said(result)


def test_the_error_of_a_curve_is_not_stacked_on_a_scatter_factor():
    # The handbook's 0.27 to 0.41 holds lots and laboratories: 6.8 to 18.5 at 99.9 %.
    family = BLEND["stress_life"]
    first = replace(family.curves[0], standard_error=0.38)
    result = run(
        "corrosion-blend-out",
        Use.NO_KNOWN_CRACK,
        stress_life=replace(family, curves=(first, *family.curves[1:])),
    )
    plain = run("corrosion-blend-out", Use.NO_KNOWN_CRACK)
    assert "not stacked on the scatter factor" in said(result)
    assert result.threshold == plain.threshold


def test_a_blend_takes_its_peened_or_clad_layer_with_it():
    for name in ("corrosion-blend-out", "nick-blended"):
        assert "shot peening" in said(run(name, Use.NO_KNOWN_CRACK))


def test_a_flaw_worked_back_from_lives_is_no_size():
    # Published for 7075: an equivalent initial flaw is a parameter of its model.
    words = "equivalent initial flaw"
    assert words not in said(run("corrosion-blend-out", Use.NO_KNOWN_CRACK))
    adopted = run(
        "corrosion-blend-out", Use.NO_KNOWN_CRACK, assumed_flaw=recorded(0.3, "mm")
    )
    assert words in said(adopted)


def test_a_detectable_size_is_no_step_between_never_and_always():
    result = evaluate(
        "pressurised-skin-longitudinal-crack", Use.NO_KNOWN_CRACK, inputs(CRACK)
    )
    assert result.repeat is not None
    assert "counts as always found" in said(result)


def test_no_finite_life_is_never_said_to_be_unlimited():
    result = run("corrosion-blend-out", Use.NO_KNOWN_CRACK)
    life = next(li for li in result.lives if li.title == "mean stress-life left")
    assert life.cycles is None
    assert "no finite life on this curve; not unlimited life" in life.remark


# Of every method


@pytest.mark.parametrize(("name", "use"), RUNS)
def test_cycles_are_whole_and_known_damage_has_no_interval(name, use):
    result = run(name, use)
    lives: tuple[Life, ...] = result.lives
    counted = [li.cycles for li in lives] + [result.life_cycles]
    counted += [result.threshold_cycles, result.repeat_cycles]
    assert all(value is None or type(value) is int for value in counted)
    assert all(life.base for life in lives)
    if use is Use.FOUND_DAMAGE:
        assert result.threshold is None
        assert result.repeat is None
    for interval in (result.threshold, result.repeat):
        if interval is not None and interval.cycles is not None:
            assert interval.cycles <= interval.uncapped


@pytest.mark.parametrize(("name", "use"), RUNS)
def test_intensities_are_shown_in_root_metres(name, use):
    # Inside they are MPa sqrt(mm), 31.62 times as much; a note never mixes the two.
    units = {line.unit for line in run(name, use).note}
    assert "MPa√mm" not in units
    assert "MPa*sqrt(mm)" not in units


@pytest.mark.parametrize(("name", "use"), RUNS)
def test_ultimate_is_its_own_requirement_and_not_residual_times_a_factor(name, use):
    result = run(name, use)
    if result.required_residual_mpa is None or result.ultimate_mpa is None:
        return
    if "pressure" in result.ultimate_case + result.residual_case:
        ratio = result.ultimate_mpa / result.required_residual_mpa
        assert ratio != pytest.approx(1.5, rel=1e-6)
    assert result.ultimate_case
    assert result.residual_case


@pytest.mark.parametrize(("name", "use"), RUNS)
def test_every_result_is_an_unapproved_calculation(name, use):
    result = run(name, use)
    assert result.outcome is Outcome.COMPUTED
    assert result.warnings[0] == "Unapproved calculation."


def test_every_method_is_among_those_held_to_this():
    screened = {name for name in METHODS if name.endswith("screening")}
    assert {name for name, _ in RUNS} == set(METHODS) - screened
