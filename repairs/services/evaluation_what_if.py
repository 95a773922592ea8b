"""What if a number were another: calculated beside the record's, and never kept."""

from __future__ import annotations

import datetime as dt
import json
from collections.abc import Iterable, Mapping
from dataclasses import asdict, dataclass, replace
from typing import Any

from fleet.canonical import canonical
from fleet.units import UnitError
from repairs.analysis.errors import AnalysisError
from repairs.analysis.input_specs import InputSpec
from repairs.analysis.inputs import SPECS, Value
from repairs.analysis.scatter.factors import FatiguePolicy
from repairs.analysis.sensitivity import SPREAD_OF
from repairs.analysis.types import Grade, Sourced, Stated
from repairs.input_text import input_read
from repairs.services.evaluation_gathered import Choice
from repairs.services.evaluation_place import Subject
from repairs.services.evaluation_prepare import Prepared, evaluation_prepare
from repairs.services.evaluation_texts import outputs_of
from repairs.services.stated import bounds_of

WHAT_IF = "what if, not recorded"
NOT_OFFERED = "“{text}” is no answer here; write one of: {words}."
NOT_CHANGED = "This cannot be changed here."
CANNOT = "With these numbers nothing can be calculated: {why}"
ARITHMETIC = "a division by zero or a number without bound on the way."


def what_if_read(
    texts: Mapping[str, str], given: Mapping[str, Value]
) -> tuple[dict[str, Value], dict[str, str]]:
    """Values typed in place of recorded ones, and what is wrong with the others."""
    instead: dict[str, Value] = {}
    wrong: dict[str, str] = {}
    for name, text in texts.items():
        if not text.strip():
            continue
        try:
            instead |= _read(SPECS[name], text.strip(), given)
        except (UnitError, AnalysisError) as error:
            wrong[name] = str(error)
    return instead, wrong


def _read(spec: InputSpec, text: str, given: Mapping[str, Value]) -> dict[str, Value]:
    if spec.kind is Stated:
        word = text.lower().replace(" ", "_")
        if word not in spec.words:
            words = ", ".join(one.replace("_", " ") for one in spec.words)
            raise UnitError(NOT_OFFERED.format(text=text, words=words))
        return {spec.name: Stated(word, WHAT_IF)}
    unit = spec.unit or "-"
    read = input_read(text, unit, bare=True)
    bounds_of(spec).check(read.value, text, spec.title)
    number = Sourced(read.value, unit, WHAT_IF, Grade.RECORDED)
    if spec.kind is FatiguePolicy:
        policy = given.get(spec.name)
        if isinstance(policy, FatiguePolicy):
            return {spec.name: replace(policy, factor=number)}
        return {spec.name: FatiguePolicy(number, spec.title)}
    if spec.kind is not Sourced:
        raise UnitError(NOT_CHANGED)
    found: dict[str, Value] = {spec.name: number}
    if read.uncertainty is not None and (more := SPREAD_OF.get(spec.name)):
        found[more] = Sourced(read.uncertainty, unit, WHAT_IF, Grade.RECORDED)
    return found


def what_if(
    *, subject: Subject, choice: Choice, as_of: dt.date, instead: Mapping[str, Value]
) -> tuple[Prepared | None, str]:
    """The calculation with other values, or why there is none. Nothing is kept."""
    try:
        return (
            evaluation_prepare(
                subject=subject, choice=choice, as_of=as_of, instead=instead
            ),
            "",
        )
    except AnalysisError as refusal:
        return None, CANNOT.format(why=refusal)
    except ArithmeticError:
        return None, CANNOT.format(why=ARITHMETIC)


def prepared_data(prepared: Prepared) -> dict[str, Any]:
    """A calculation that is not kept, as the data a kept one would have."""
    result = prepared.result
    outputs: dict[str, Any] = json.loads(canonical(outputs_of(prepared.assessment)))
    tests = json.loads(canonical([asdict(test) for test in result.applicability]))
    return outputs | {"applicability": tests}


@dataclass(frozen=True, slots=True)
class Changed:
    """One number of a what-if in words."""

    title: str
    text: str


def changed_words(texts: Mapping[str, str], names: Iterable[str]) -> list[Changed]:
    """What a what-if changes, as typed."""
    return [Changed(SPECS[name].title, texts[name].strip()) for name in names]
