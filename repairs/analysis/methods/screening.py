"""Damage no published method calculates: what is recorded is screened, never counted.

Every row is a question of the record with its answer and what it would have to be, so
that an engineer sees at once what stands in the way: first of limits recorded for the
type, then of an approval. The outcome is always *not covered*.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from repairs.analysis.inputs import Inputs
from repairs.analysis.methods import applicability as apply
from repairs.analysis.note import Note
from repairs.analysis.types import Applicability, Result, Use

Question = Callable[[Inputs], Applicability]
LIMITS_OR_APPROVAL = "limits recorded for the type, or an approval"


@dataclass(frozen=True, slots=True)
class Screening:
    """Questions of one damage type, and why no number follows from their answers."""

    questions: tuple[Question, ...]
    subject: str
    reason: str
    instead: str = LIMITS_OR_APPROVAL

    def required(self, inputs: Inputs, use: Use) -> tuple[str, ...]:
        """Return what must be there: nothing beyond the tests."""
        del self, inputs, use
        return ("element",)

    def tests(self, inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
        """Answer the questions; the last row says that no method follows."""
        del use
        known = False if inputs.word("element") else None
        return (
            apply.word_is(inputs, "element", "structural item", "skin"),
            *(question(inputs) for question in self.questions),
            Applicability(self.subject, self.reason, self.instead, known),
        )

    def compute(self, inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
        """Return the draft; not reached, as the last test is never met."""
        del self, inputs, use, note
        return draft


def asked(name: str, test: str, allowed: str) -> Question:
    """Return the question whether a word of the record is the one allowed."""
    return lambda inputs: apply.word_is(inputs, name, test, allowed)


def clear_of_fasteners(inputs: Inputs) -> Applicability:
    """Return whether the damage keeps clear of the nearest fastener."""
    given = inputs.maybe("fastener_distance")
    distance = given.value if given else None
    return apply.above("distance to the nearest fastener", distance, 0.0, "mm")


def shape(inputs: Inputs) -> Applicability:
    """Return width over depth, which limits for dents are written in."""
    width, depth = (inputs.maybe(name) for name in ("damage_width", "damage_depth"))
    test = "width over depth, second longest dimension over greatest depth"
    wanted = "as the recorded limits of the type allow"
    if width is None or depth is None or depth.value <= 0:
        return Applicability(test, apply.NOT_RECORDED, wanted, None)
    return Applicability(test, f"{width.value / depth.value:.1f}", wanted, None)


DENT = Screening(
    (
        asked("creased", "dent is creased", "no"),
        asked("dent_cracked", "dent is cracked, by a non-destructive test", "no"),
        asked("material_removed", "material removed in the dent", "no"),
        asked("fasteners_pulled", "fasteners pulled or loose", "no"),
        asked("dent_over", "what the dent lies over", "mid_bay"),
        clear_of_fasteners,
        shape,
    ),
    "strength and fatigue of a dent",
    "a smooth one hardly changes tension strength, but buckling and fatigue; no "
    "published method covers them",
)
CREASE = Screening(
    (asked("fasteners_pulled", "fasteners pulled or loose", "no"),),
    "strength and fatigue of a crease",
    "no published method covers it",
)
BIRD_STRIKE = Screening(
    (asked("penetrated", "skin penetrated", "no"),),
    "strength and fatigue of skin that a bird struck",
    "no published method covers it",
    "each dent, crack and hole found recorded by itself",
)
MELTED = Screening(
    (),
    "strength and fatigue of metal that lightning melted or burnt",
    "its size does not say how deep the heat went",
    "heat-affected metal removed, shown by conductivity, and the rework recorded as a "
    "blend or a hole; else an approval",
)
HEATED = Screening(
    (),
    "strength of metal that was too hot",
    "not a matter of its size: temper and strength are to be shown by conductivity and "
    "hardness",
    LIMITS_OR_APPROVAL,
)
