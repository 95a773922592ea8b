"""How an answer moves when each of its inputs is a little less or a little more.

Each number is changed alone, by its own uncertainty where one is known, else by a tenth
of itself, and everything is calculated again. Nothing is drawn from a distribution: the
table says which number is worth measuring better, not how likely an answer is.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, replace

from repairs.analysis.assessment import assess
from repairs.analysis.errors import AnalysisError
from repairs.analysis.growth.laws import RecordedLaw
from repairs.analysis.inputs import SPECS, Inputs, Value
from repairs.analysis.scatter.factors import FatiguePolicy
from repairs.analysis.types import Outcome, Result, Sourced, Use

SHARE = 0.1
SPREAD_OF = {
    "crack_length": "crack_length_uncertainty",
    "edge_crack_length": "edge_crack_uncertainty",
    "damage_depth": "damage_depth_uncertainty",
    "remaining_thickness": "gauge_uncertainty",
}
"""Measured numbers whose uncertainty is an input of its own."""
WHOLE = frozenset({"crack_count", "hole_count"})
"""Counted things, of which there is no tenth."""
BY_RULE = frozenset({"residual_pressure_factor", "ultimate_factor", "proof_factor"})
"""Fixed by a rule, so not uncertain."""
LAW_CONSTANT = "C of the {title}"


@dataclass(frozen=True, slots=True)
class Answers:
    """The three quantities that are followed; None where there is none."""

    margin_residual: float | None = None
    margin_ultimate: float | None = None
    usable_life: int | None = None
    why_none: str = ""


@dataclass(frozen=True, slots=True)
class Moved:
    """One input, how far it was moved, and the answers at both ends."""

    name: str
    title: str
    unit: str
    value: float
    step: float
    stated: bool
    less: Answers
    more: Answers

    def reach(self, base: Answers, quantity: str) -> float:
        """How far the answer moves at most; without end where it is lost."""
        at = getattr(base, quantity)
        ends = (getattr(self.less, quantity), getattr(self.more, quantity))
        if at is None:
            return 0.0
        return max(math.inf if end is None else abs(end - at) for end in ends)


@dataclass(frozen=True, slots=True)
class Sensitivity:
    """The answers as they stand, and what each input does to them."""

    base: Answers
    moved: tuple[Moved, ...]

    def ranked(self, quantity: str) -> tuple[Moved, ...]:
        """Inputs that move a quantity, the farthest first."""
        rows = [row for row in self.moved if row.reach(self.base, quantity) > 0]
        return tuple(sorted(rows, key=lambda row: -row.reach(self.base, quantity)))

    @property
    def still(self) -> tuple[str, ...]:
        """Inputs that move none of the quantities."""
        quantities = ("margin_residual", "margin_ultimate", "usable_life")
        return tuple(
            row.title
            for row in self.moved
            if not any(row.reach(self.base, name) for name in quantities)
        )


def sensitivity(
    use: Use, inputs: Inputs, spreads: Mapping[str, float] | None = None
) -> Sensitivity:
    """Calculate again with each number less and more.

    `spreads` are uncertainties stated beside the inputs, by name, in their unit.
    """
    known = dict(spreads or {})
    base = _answers(use, inputs)
    rows = []
    for name, value in _numbers(inputs):
        number = _number_of(value)
        step = known.get(name) or _spread(inputs, name)
        size = step or SHARE * abs(number)
        if size == 0:
            continue
        less, more = (_again(use, inputs, name, change) for change in (-size, size))
        title = SPECS[name].title
        if isinstance(value, RecordedLaw):
            title = LAW_CONSTANT.format(title=title)
        unit = value.unit if isinstance(value, Sourced) else "-"
        rows.append(
            Moved(name, title, unit, number, size, step is not None, less, more)
        )
    return Sensitivity(base, tuple(rows))


def _numbers(inputs: Inputs) -> Iterator[tuple[str, Value]]:
    """What can be moved: numbers given or defaulted, factors, constants of a law."""
    values = inputs.values
    spread_names = set(SPREAD_OF.values())
    for name, spec in SPECS.items():
        value = values.get(name, spec.default)
        if name in spread_names | WHOLE | BY_RULE:
            continue
        if isinstance(value, Sourced | FatiguePolicy | RecordedLaw):
            yield name, value


def _number_of(value: Value) -> float:
    if isinstance(value, FatiguePolicy):
        return value.factor.value
    if isinstance(value, RecordedLaw):
        return value.coefficient
    assert isinstance(value, Sourced), "only these are moved"
    return value.value


def _moved(value: Value, change: float) -> Value:
    if isinstance(value, FatiguePolicy):
        factor = value.factor
        return replace(value, factor=replace(factor, value=factor.value + change))
    if isinstance(value, RecordedLaw):
        return replace(value, coefficient=value.coefficient + change)
    assert isinstance(value, Sourced), "only these are moved"
    return replace(value, value=value.value + change)


def _spread(inputs: Inputs, name: str) -> float | None:
    """A measured number's uncertainty, if the record has one."""
    found = inputs.maybe(SPREAD_OF[name]) if name in SPREAD_OF else None
    return found.value if found and found.value > 0 else None


def _again(use: Use, inputs: Inputs, name: str, change: float) -> Answers:
    """The answers with one input moved; a number nothing may be has none."""
    value = inputs.values.get(name, SPECS[name].default)
    assert value is not None, "only what is given is moved"
    try:
        return _answers(use, Inputs(inputs.values | {name: _moved(value, change)}))
    except (AnalysisError, ArithmeticError) as refusal:
        return Answers(why_none=str(refusal))


def _answers(use: Use, inputs: Inputs) -> Answers:
    """The quantities of one calculation, or why there are none."""
    result = assess(use, inputs).result
    if result.outcome is not Outcome.COMPUTED:
        return Answers(why_none=_why(result))
    return Answers(
        result.margin_residual, result.margin_ultimate, result.life_after_factor_cycles
    )


def _why(result: Result) -> str:
    return result.warnings[0] if result.warnings else result.outcome.replace("_", " ")
