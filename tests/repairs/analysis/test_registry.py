"""Every registered method keeps the rules that hold for all of them."""

from __future__ import annotations

import inspect
import re

import pytest

from repairs.analysis.errors import InputError
from repairs.analysis.inputs import SPECS, Inputs
from repairs.analysis.intensity import (
    bulging,
    compounding,
    part_through,
    stiffened_sheet,
)
from repairs.analysis.intensity import corner as corner_crack
from repairs.analysis.intensity import holes as hole_intensity
from repairs.analysis.intensity import rows as crack_row
from repairs.analysis.intensity import through as stress_intensity
from repairs.analysis.loads import shell as loads
from repairs.analysis.registry import METHODS, evaluate, method_named, methods_for
from repairs.analysis.scatter import estimates as life_estimates
from repairs.analysis.scatter import factors as scatter
from repairs.analysis.scatter import tolerance
from repairs.analysis.strength import link_up, load_paths, r_curve, toughness
from repairs.analysis.strength import residual as residual_strength
from repairs.analysis.strength import stiffened as stiffened_strength
from repairs.analysis.types import Grade, Outcome, Sourced, Stated, Use


@pytest.mark.parametrize("method", METHODS.values(), ids=METHODS)
@pytest.mark.parametrize("use", Use)
def test_nothing_recorded_is_incomplete_and_never_a_number(method, use):
    result = evaluate(method.id, use, Inputs({}))
    assert result.outcome is Outcome.MISSING_INPUT
    assert {m.name for m in result.missing} == {
        name for name in method.required(Inputs({}), use) if SPECS[name].default is None
    }
    assert all(m.where for m in result.missing)
    assert result.residual_strength_mpa is None
    assert result.life_cycles is None
    assert result.threshold is result.repeat is None


@pytest.mark.parametrize("method", METHODS.values(), ids=METHODS)
def test_what_is_not_skin_is_not_covered_before_anything_is_missing(method):
    found = evaluate(
        method.id,
        Use.FOUND_DAMAGE,
        Inputs({"element": Stated("stringer", "F-0001")}),
    )
    assert found.outcome is Outcome.NOT_COVERED
    assert found.governing == "structural item"
    assert "stringer" in found.warnings[0]
    assert "Needs an engineer" in found.warnings[0]


def test_there_is_no_default_of_load_factor_or_detectable_size():
    defaults = {name for name, spec in SPECS.items() if spec.default is not None}
    assert defaults == {
        "clearance_multiple",
        "residual_pressure_factor",
        "ultimate_factor",
    }


def test_an_input_nobody_knows_or_in_another_unit_is_refused():
    with pytest.raises(InputError, match="No method knows"):
        Inputs({"thicknes": Sourced(1, "mm", "s", Grade.RECORDED)})
    with pytest.raises(InputError, match="is in in"):
        Inputs({"thickness": Sourced(0.05, "in", "s", Grade.RECORDED)})
    with pytest.raises(InputError, match="is expected"):
        Inputs({"element": Sourced(0.05, "mm", "s", Grade.RECORDED)})
    with pytest.raises(InputError, match="no source"):
        Sourced(1.0, "mm", " ", Grade.RECORDED)
    with pytest.raises(InputError, match="finite"):
        Sourced(float("nan"), "mm", "s", Grade.RECORDED)


def test_an_unknown_method_is_refused_with_the_ids_there_are():
    with pytest.raises(InputError, match="corrosion-blend-out"):
        method_named("feeling")
    assert methods_for("dent") == ()


FORMULAS = [
    function
    for module in (
        bulging,
        compounding,
        corner_crack,
        crack_row,
        hole_intensity,
        life_estimates,
        link_up,
        load_paths,
        loads,
        part_through,
        r_curve,
        residual_strength,
        scatter,
        stiffened_sheet,
        stiffened_strength,
        stress_intensity,
        tolerance,
        toughness,
    )
    for name, function in inspect.getmembers(module, inspect.isfunction)
    if function.__module__ == module.__name__
    and "Parameters" in (function.__doc__ or "")
]


@pytest.mark.parametrize("function", FORMULAS, ids=lambda f: f.__name__)
def test_a_formula_states_units_range_and_source(function):
    text = function.__doc__
    for heading in ("Returns", "Notes", "References"):
        assert heading in text, f"{function.__name__} lacks {heading}"
    assert re.search(r"[Rr]ange", text), f"{function.__name__} states no range"
    parameters = text.split("Parameters")[1].split("Returns")[0]
    for name in inspect.signature(function).parameters:
        assert name in parameters, f"{function.__name__} does not describe {name}"
    assert re.search(r"\[(mm|MPa|-|MPa\*sqrt\(mm\)|deg|cycles)", text)
