"""The methods this program has: id, version, what each is for, and how it is run."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace

from repairs.analysis.errors import UNKNOWN_METHOD, InputError, OutOfRangeError
from repairs.analysis.inputs import Inputs
from repairs.analysis.methods import blend_out, hole, skin_crack
from repairs.analysis.note import Note
from repairs.analysis.types import Applicability, Outcome, Result, Use

NEEDS_ENGINEER = (
    "No method applies: {test}, {value}; required {limit}. Needs an engineer."
)
NO_METHOD = "No method of this program covers this damage. Needs an engineer."
NEEDS_INPUT = "Incomplete: {title} is not recorded; enter it {where}."
UNAPPROVED = "Unapproved calculation."


@dataclass(frozen=True, slots=True)
class Method:
    """One published calculation, its version, and what it may be asked.

    The version goes up whenever the same inputs could give another result.
    """

    id: str
    version: int
    title: str
    damage_types: tuple[str, ...]
    uses: tuple[Use, ...]
    required: Callable[[Inputs, Use], tuple[str, ...]]
    tests: Callable[[Inputs, Use], tuple[Applicability, ...]]
    compute: Callable[[Inputs, Use, Note, Result], Result]


BOTH = (Use.FOUND_DAMAGE, Use.NO_KNOWN_CRACK)
METHODS: dict[str, Method] = {
    method.id: method
    for method in (
        Method(
            "pressurised-skin-longitudinal-crack",
            1,
            "Longitudinal through crack in pressurised skin",
            ("crack",),
            BOTH,
            skin_crack.required,
            skin_crack.tests,
            skin_crack.compute,
        ),
        Method(
            "corrosion-blend-out",
            1,
            "Corrosion blended out",
            ("corrosion", "scratch", "gouge", "nick", "wear"),
            BOTH,
            blend_out.required,
            blend_out.tests,
            blend_out.compute,
        ),
        Method(
            "open-or-trimmed-hole",
            1,
            "Open or trimmed hole",
            ("hole",),
            BOTH,
            hole.required,
            hole.tests,
            hole.compute,
        ),
    )
}


def method_named(name: str) -> Method:
    """Return the method of an id, else refuse with the ids there are."""
    if name not in METHODS:
        raise InputError(UNKNOWN_METHOD.format(name=name, known=", ".join(METHODS)))
    return METHODS[name]


def methods_for(damage_type: str) -> tuple[Method, ...]:
    """Return the methods that take a damage type, in order of preference."""
    return tuple(m for m in METHODS.values() if damage_type in m.damage_types)


def evaluate(name: str, use: Use, inputs: Inputs) -> Result:
    """Run a method: tests, then inputs, then numbers. The outcome is one of three.

    A failed test ends in *not covered* with the test, its value and its limit; a
    missing input in *missing input* with where to enter it; neither gives a number.
    """
    method = method_named(name)
    tests = method.tests(inputs, use)
    draft = Result(
        method.id,
        method.version,
        method.title,
        use,
        Outcome.COMPUTED,
        applicability=tests,
    )
    failed = [test for test in tests if test.met is False]
    if failed:
        return replace(
            draft,
            outcome=Outcome.NOT_COVERED,
            governing=failed[0].test,
            warnings=tuple(
                NEEDS_ENGINEER.format(test=t.test, value=t.value, limit=t.limit)
                for t in failed
            ),
        )
    missing = inputs.missing(method.required(inputs, use))
    unknown = [test for test in tests if test.met is None]
    if missing or unknown:
        return replace(
            draft,
            outcome=Outcome.MISSING_INPUT,
            missing=missing,
            warnings=(
                *(NEEDS_INPUT.format(title=m.title, where=m.where) for m in missing),
                *(f"Test not answered: {t.test}, {t.value}." for t in unknown),
            ),
        )
    return _computed(method, use, inputs, draft)


def _computed(method: Method, use: Use, inputs: Inputs, draft: Result) -> Result:
    """Compute; outside a solution's range the outcome is *not covered*."""
    note = Note()
    try:
        result = method.compute(inputs, use, note, draft)
    except OutOfRangeError as refusal:
        return replace(
            draft,
            outcome=Outcome.NOT_COVERED,
            governing="range of a published solution",
            note=note.lines,
            warnings=(f"No method applies: {refusal} Needs an engineer.",),
        )
    return replace(
        result,
        note=note.lines,
        warnings=(UNAPPROVED, *result.warnings, *note.warnings),
        source_from_memory=note.source_from_memory,
        barred=note.barred,
    )
