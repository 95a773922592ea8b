"""Every registered method keeps the rules that hold for all of them."""

from __future__ import annotations

import importlib
import inspect
import pkgutil
import re

import pytest

import repairs.analysis
from repairs.analysis.coverage import COVERAGE, groups_for
from repairs.analysis.errors import InputError
from repairs.analysis.inputs import SPECS, Inputs
from repairs.analysis.registry import METHODS, evaluate, method_named
from repairs.analysis.types import Grade, Outcome, Sourced, Stated, Use


@pytest.mark.parametrize("method", METHODS.values(), ids=METHODS)
@pytest.mark.parametrize("use", Use)
def test_nothing_recorded_is_incomplete_and_never_a_number(method, use):
    result = evaluate(method.id, use, Inputs({}))
    assert result.outcome is Outcome.MISSING_INPUT
    assert {m.name for m in result.missing} == {
        name
        for name in method.module.required(Inputs({}), use)
        if SPECS[name].default is None
    }
    assert all(m.where for m in result.missing)
    assert result.residual_strength_mpa is None
    assert result.life_cycles is None
    assert result.threshold is result.repeat is None


@pytest.mark.parametrize("method", METHODS.values(), ids=METHODS)
def test_another_structural_item_is_not_covered_before_anything_is_missing(method):
    item = "skin" if "member" in method.id else "stringer"
    found = evaluate(
        method.id,
        Use.FOUND_DAMAGE,
        Inputs({"element": Stated(item, "F-0001")}),
    )
    assert found.outcome is Outcome.NOT_COVERED
    assert found.governing == "structural item"
    assert item in found.warnings[0]
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


def test_every_method_is_asked_by_some_damage_and_every_one_asked_exists():
    asked = {name for row in COVERAGE for group in row.groups for name in group}
    assert asked == set(METHODS)


def test_a_damage_without_a_method_asks_none():
    assert groups_for(Inputs({"damage_type": Stated("delamination", "F-0001")})) == ()


MODULES = [
    importlib.import_module(found.name)
    for found in pkgutil.walk_packages(
        repairs.analysis.__path__, f"{repairs.analysis.__name__}."
    )
]
FORMULAS = [
    function
    for module in MODULES
    for _, function in inspect.getmembers(module, inspect.isfunction)
    if function.__module__ == module.__name__
    and "References" in (function.__doc__ or "")
]


@pytest.mark.parametrize("function", FORMULAS, ids=lambda f: f.__name__)
def test_a_formula_states_units_range_and_source(function):
    text = function.__doc__
    for heading in ("Parameters", "Returns", "Notes"):
        assert heading in text, f"{function.__name__} lacks {heading}"
    assert re.search(r"[Rr]ange", text), f"{function.__name__} states no range"
    parameters = text.split("Parameters")[1].split("Returns")[0]
    for name in inspect.signature(function).parameters:
        assert name in parameters, f"{function.__name__} does not describe {name}"
    assert re.search(r"\[(mm|MPa|-|MPa\*sqrt\(mm\)|deg|cycles)", text)
