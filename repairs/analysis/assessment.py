"""All methods that a damage asks for, run together; what governs is the lesser.

Every group of a damage must be answered; inside a group the first method that can
compute stands for it, the ones after it are the bound that serves until the inputs of
the better one are recorded. Of the groups' answers the lesser holds, quantity by
quantity, and the result names the method each is from.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from enum import StrEnum

from repairs.analysis.coverage import COVERAGE_KEY, COVERAGE_VERSION, groups_for
from repairs.analysis.inputs import Inputs
from repairs.analysis.inspection.known import with_plan
from repairs.analysis.note import Note
from repairs.analysis.registry import NO_METHOD, evaluate
from repairs.analysis.scatter.factors import FatiguePolicy
from repairs.analysis.types import (
    Interval,
    Outcome,
    Result,
    Sourced,
    UltimateKept,
    Use,
)

UNANSWERED = "{title} is not answered: {why}"
STANDS_IN = "{title} stands in for {better}, which lacks: {lacking}."
NAMED = 4
"""How many of the inputs that a method lacks a sentence names."""
LESSER = "{what} is that of {title}."


class Part(StrEnum):
    """What one method's result is to the whole."""

    ANSWERS = "answers"
    BESIDE = "beside"
    UNANSWERED = "unanswered"
    NOT_APPLICABLE = "not_applicable"


@dataclass(frozen=True, slots=True)
class Answer:
    """One method's result and its part in the whole."""

    part: Part
    result: Result


@dataclass(frozen=True, slots=True)
class Assessment:
    """Every method asked, in order, and the one result that follows from them."""

    answers: tuple[Answer, ...]
    result: Result

    @property
    def versions(self) -> str:
        """Ids and versions of all methods asked, as `|id@version|...|`."""
        asked = [f"{a.result.method}@{a.result.version}" for a in self.answers]
        return "|".join(("", f"{COVERAGE_KEY}@{COVERAGE_VERSION}", *asked, ""))


def assess(use: Use, inputs: Inputs) -> Assessment:
    """Run every method the damage asks for, and say what governs."""
    answers: list[Answer] = []
    for group in groups_for(inputs):
        answers += _group(tuple(group), use, inputs, _lines(answers))
    return Assessment(tuple(answers), _planned(inputs, _whole(use, answers)))


def _planned(inputs: Inputs, result: Result) -> Result:
    """Judge the plan a result proposes, where the chance of detection is recorded."""
    detection = inputs.detection()
    if detection is None or result.use is Use.FOUND_DAMAGE:
        return result
    note = Note(result.note[-1].number + 1 if result.note else 1)
    policy = inputs.policy("repeat_policy")
    target = inputs.maybe("detection_target")
    judged = with_plan(result, detection, scatter_of(policy), target, note)
    return replace(
        judged,
        note=(*result.note, *note.lines),
        warnings=(*result.warnings, *note.warnings),
        source_from_memory=result.source_from_memory or note.source_from_memory,
        barred=(*result.barred, *note.barred),
    )


def scatter_of(policy: FatiguePolicy | None) -> Sourced | None:
    """Scatter of the growth life, where the type's policy states it."""
    if policy is None or policy.log_deviation is None:
        return None
    return replace(policy.factor, value=policy.log_deviation)


def _lines(answers: list[Answer]) -> int:
    return sum(len(answer.result.note) for answer in answers)


def _group(
    names: tuple[str, ...], use: Use, inputs: Inputs, lines: int
) -> Iterator[Answer]:
    """Run alternatives; the first that computes answers, the rest stand beside it."""
    answered, lacking = False, []
    found: list[Result] = []
    for name in names:
        result = evaluate(name, use, inputs, first_line=lines + 1)
        lines += len(result.note)
        found.append(result)
    computed = any(result.outcome is Outcome.COMPUTED for result in found)
    for result in found:
        if result.outcome is Outcome.NOT_COVERED:
            yield Answer(Part.NOT_APPLICABLE, result)
        elif result.outcome is Outcome.MISSING_INPUT:
            lacking.append(result)
            part = Part.BESIDE if computed else Part.UNANSWERED
            yield Answer(part, result)
        elif answered:
            yield Answer(Part.BESIDE, result)
        else:
            answered = True
            yield Answer(Part.ANSWERS, _standing_in(result, lacking))


def _standing_in(result: Result, lacking: list[Result]) -> Result:
    """Say what the better methods lack, for which this one stands in."""
    words = tuple(
        STANDS_IN.format(title=result.title, better=r.title, lacking=_lacking(r))
        for r in lacking
    )
    return replace(result, warnings=(*result.warnings, *words))


def _lacking(result: Result) -> str:
    unknown = [test.test for test in result.applicability if test.met is None]
    names = list(dict.fromkeys([*(item.title for item in result.missing), *unknown]))
    more = len(names) - NAMED
    return ", ".join(names[:NAMED]) + (f" and {more} more" if more > 0 else "")


def _whole(use: Use, answers: list[Answer]) -> Result:
    """The one result: the lesser of the answers, or why there is none."""
    computed = [a.result for a in answers if a.part is Part.ANSWERS]
    open_ = [a.result for a in answers if a.part is Part.UNANSWERED]
    if computed:
        return _lesser(computed, open_)
    if open_:
        return min(open_, key=_open_questions)
    nothing = Result("", 0, "", use, Outcome.NOT_COVERED)
    if not answers:
        return replace(nothing, warnings=(NO_METHOD,))
    fewest = min(_failed(answer.result) for answer in answers)
    nearest = [a.result for a in answers if _failed(a.result) == fewest]
    return replace(
        nearest[0],
        warnings=tuple(
            f"{result.title}: {warning}" if len(nearest) > 1 else warning
            for result in nearest
            for warning in result.warnings
        ),
    )


def _open_questions(result: Result) -> int:
    """How much a method lacks: inputs, and tests the record does not answer."""
    unknown = [test for test in result.applicability if test.met is None]
    return len(result.missing) + len(unknown)


def _failed(result: Result) -> int:
    """How many tests speak against a method: the fewest is the one to explain."""
    return sum(test.met is False for test in result.applicability)


def _lesser(computed: list[Result], open_: list[Result]) -> Result:
    """The governing result with every quantity at its least over all answers."""
    lead = min(computed, key=_severity)
    whole = _merged(lead, computed)
    for fields, what, least in _QUANTITIES:
        source = min(computed, key=least)
        if least(source) < least(lead):
            whole = replace(
                whole,
                **{name: getattr(source, name) for name in fields},
                warnings=(
                    *whole.warnings,
                    LESSER.format(what=what, title=source.title),
                ),
            )
    kept = [result.ultimate_kept for result in computed]
    worst = (UltimateKept.NO, UltimateKept.NOT_SHOWN, UltimateKept.YES)
    whole = replace(whole, ultimate_kept=next(word for word in worst if word in kept))
    unanswered = tuple(
        UNANSWERED.format(title=r.title, why=_lacking(r) + " missing.") for r in open_
    )
    return replace(
        whole,
        warnings=(*whole.warnings, *unanswered),
        barred=(*whole.barred, *unanswered),
    )


def _severity(result: Result) -> tuple[float, float, float]:
    return (
        _or_infinite(result.margin_residual),
        _or_infinite(result.margin_ultimate),
        _or_infinite(result.life_after_factor_cycles),
    )


def _or_infinite(value: float | None) -> float:
    return math.inf if value is None else value


def _cycles(interval: Interval | None) -> float:
    """A threshold or repeat that was refused (no cycles) is the least of all."""
    if interval is None:
        return math.inf
    return -1.0 if interval.cycles is None else interval.cycles


_QUANTITIES: tuple[tuple[tuple[str, ...], str, Callable[[Result], float]], ...] = (
    (
        (
            "residual_strength_mpa",
            "required_residual_mpa",
            "residual_case",
            "margin_residual",
        ),
        "The residual margin",
        lambda r: _or_infinite(r.margin_residual),
    ),
    (
        ("ultimate_mpa", "ultimate_case", "margin_ultimate"),
        "The ultimate margin",
        lambda r: _or_infinite(r.margin_ultimate),
    ),
    (
        ("life_cycles", "life_base"),
        "The life before its factor",
        lambda r: _or_infinite(r.life_cycles),
    ),
    (
        ("life_after_factor_cycles", "scatter_factor"),
        "The life after its factor",
        lambda r: _or_infinite(r.life_after_factor_cycles),
    ),
    (("threshold",), "The threshold", lambda r: _cycles(r.threshold)),
    (("repeat",), "The repeat interval", lambda r: _cycles(r.repeat)),
)


def _merged(lead: Result, computed: list[Result]) -> Result:
    """The lead's result with the notes, curves and warnings of all of them."""
    if len(computed) == 1:
        return lead

    def every(name: str) -> tuple:  # type: ignore[type-arg]
        rows = [item for result in computed for item in getattr(result, name)]
        return tuple(dict.fromkeys(rows))

    return replace(
        lead,
        warnings=every("warnings"),
        note=every("note"),
        curves=(
            *lead.curves,
            *(c for r in computed if r is not lead for c in r.curves),
        ),
        lives=every("lives"),
        margins=every("margins"),
        assumptions=every("assumptions"),
        missing=every("missing"),
        cases_not_checked=every("cases_not_checked"),
        source_from_memory=any(result.source_from_memory for result in computed),
        barred=every("barred"),
    )
