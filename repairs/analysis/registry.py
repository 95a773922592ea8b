"""The methods there are, and how one is run."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Protocol

from repairs.analysis.errors import UNKNOWN_METHOD, InputError, OutOfRangeError
from repairs.analysis.inputs import Inputs
from repairs.analysis.methods import (
    blend_out,
    circumferential_crack,
    corrosion_found,
    edge_crack,
    flat_crack,
    hole,
    hole_row,
    loaded_hole,
    member_crack,
    member_failed,
    member_hole,
    member_section,
    nick_blended,
    nick_found,
    scratch_found,
    screening,
    skew_crack,
    skin_crack,
    stiffened_crack,
    stop_drilled,
    thinned_crack,
    thinned_panel,
    wear,
)
from repairs.analysis.note import Note
from repairs.analysis.types import (
    Applicability,
    MissingInput,
    Outcome,
    Result,
    Use,
)

NEEDS_ENGINEER = (
    "No method applies: {test}, {value}; required {limit}. Needs an engineer."
)
NO_METHOD = "No method of this program covers this damage. Needs an engineer."
NEEDS_INPUT = "Incomplete: {title} is not recorded; enter it {where}."
IMPOSSIBLE = (
    "{title} reads {value:g} {unit}; a number {expected} is expected. Enter it again, "
    "{where}."
)
JUDGED = ("detectable_length", "assumed_flaw", "validity_cycles", "class_maximum")
"""Inputs that no method requires and that shape its answer."""
STIFFENERS_WHOLE = "Stiffeners that cross the crack are whole: look at them."
UNAPPROVED = "Unapproved calculation."


@dataclass(frozen=True, slots=True)
class Method:
    """One published calculation, its version, and what it assumes.

    The version goes up whenever the same inputs could give another result.
    """

    id: str
    version: int
    title: str
    module: Calculation
    assumptions: tuple[str, ...] = ()


class Calculation(Protocol):
    """What a module of `repairs.analysis.methods` offers."""

    def required(self, inputs: Inputs, use: Use) -> tuple[str, ...]:
        """Return the inputs that must be there."""

    def tests(self, inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
        """Test on the record whether the method applies."""

    def compute(self, inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
        """Calculate; tests have passed and nothing required is missing."""


METHODS: dict[str, Method] = {
    method.id: method
    for method in (
        Method(
            "pressurised-skin-longitudinal-crack",
            2,
            "Longitudinal through crack in pressurised skin",
            skin_crack,
        ),
        Method(
            "pressurised-skin-circumferential-crack",
            1,
            "Circumferential through crack in pressurised skin",
            circumferential_crack,
            (STIFFENERS_WHOLE,),
        ),
        Method(
            "pressurised-skin-skew-crack",
            1,
            "Diagonal crack or one of unknown direction in pressurised skin",
            skew_crack,
            (STIFFENERS_WHOLE,),
        ),
        Method(
            "unpressurised-skin-crack",
            1,
            "Through crack in unpressurised skin",
            flat_crack,
            (STIFFENERS_WHOLE,),
        ),
        Method(
            "stiffened-skin-crack",
            1,
            "Crack in stiffened skin, between or across stiffeners",
            stiffened_crack,
            (
                "The crack lies evenly about mid-bay or about a stiffener, as stated.",
                "Equal stiffeners with one row of fasteners each, all sound but the "
                "one stated as broken; no cracks at holes ahead of the tips.",
                "Stiffeners themselves do not crack while the skin crack grows.",
            ),
        ),
        Method("edge-crack", 1, "Crack from an edge", edge_crack),
        Method("stop-drilled-crack", 1, "Stop-drilled crack", stop_drilled),
        Method("corrosion-blend-out", 2, "Damage blended out of skin", blend_out),
        Method(
            "corrosion-as-found",
            1,
            "Corrosion of skin as found, pits as one flaw",
            corrosion_found,
            ("One face is corroded; both faces at one spot need an engineer.",),
        ),
        Method(
            "scratch-as-found",
            1,
            "Scratch or gouge in skin as found",
            scratch_found,
        ),
        Method("nick-as-found", 1, "Nick in a sheet's edge as found", nick_found),
        Method("nick-blended", 1, "Nick in a sheet's edge blended out", nick_blended),
        Method("wear-as-found", 1, "Worn skin as found", wear),
        Method("crack-in-corroded-skin", 1, "Crack in corroded skin", thinned_crack),
        Method(
            "thinned-panel-buckling",
            1,
            "Thinned skin in compression or shear",
            thinned_panel,
        ),
        Method("dent-screening", 1, "Dent, screened", screening.DENT),
        Method("crease-screening", 1, "Crease, screened", screening.CREASE),
        Method(
            "bird-strike-screening", 1, "Bird strike, screened", screening.BIRD_STRIKE
        ),
        Method(
            "lightning-screening", 1, "Lightning on metal, screened", screening.MELTED
        ),
        Method("heat-screening", 1, "Heat on metal, screened", screening.HEATED),
        Method("open-or-trimmed-hole", 2, "Open or trimmed hole", hole),
        Method("loaded-fastener-hole", 1, "Loaded fastener hole", loaded_hole),
        Method("row-of-cracked-holes", 1, "Row of cracked holes", hole_row),
        Method("failed-member", 1, "Failed member", member_failed),
        Method("damaged-member-section", 1, "Section left of a member", member_section),
        Method("cracked-member-flange", 1, "Crack in a member's flange", member_crack),
        Method("cracked-member-hole", 1, "Fastener hole in a member", member_hole),
    )
}


def method_named(name: str) -> Method:
    """Return the method of an id, else refuse with the ids there are."""
    if name not in METHODS:
        raise InputError(UNKNOWN_METHOD.format(name=name, known=", ".join(METHODS)))
    return METHODS[name]


def evaluate(name: str, use: Use, inputs: Inputs, *, first_line: int = 1) -> Result:
    """Run a method: tests, then inputs, then numbers. The outcome is one of three.

    A failed test ends in *not covered* with the test, its value and its limit; a
    missing input in *missing input* with where to enter it; neither gives a number.
    Lines of the note are numbered from `first_line`.
    """
    method = method_named(name)
    if impossible := _impossible(method, use, inputs):
        return impossible
    tests = method.module.tests(inputs, use)
    draft = Result(
        method.id,
        method.version,
        method.title,
        use,
        Outcome.COMPUTED,
        applicability=tests,
        assumptions=method.assumptions,
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
    missing = inputs.missing(method.module.required(inputs, use))
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
    return _computed(method, use, inputs, draft, Note(first_line))


def _impossible(method: Method, use: Use, inputs: Inputs) -> Result | None:
    """Answer where a number cannot be true: as incomplete, with what was read."""
    names = dict.fromkeys((*method.module.required(inputs, use), *JUDGED))
    found = inputs.impossible(tuple(names))
    if not found:
        return None
    return Result(
        method.id,
        method.version,
        method.title,
        use,
        Outcome.MISSING_INPUT,
        missing=tuple(MissingInput(s.name, s.title, s.where) for s in found),
        warnings=tuple(
            IMPOSSIBLE.format(
                title=spec.title,
                value=inputs.number(spec.name).value,
                unit=spec.unit,
                expected=spec.expected,
                where=spec.where,
            )
            for spec in found
        ),
        assumptions=method.assumptions,
    )


def _computed(
    method: Method, use: Use, inputs: Inputs, draft: Result, note: Note
) -> Result:
    """Compute; outside a solution's range the outcome is *not covered*."""
    note.text(f"{method.title}, version {method.version}")
    try:
        result = method.module.compute(inputs, use, note, draft)
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
