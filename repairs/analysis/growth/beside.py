"""Retarded growth through a recorded spectrum, beside the life that counts.

Only where an engineer asks for it and states the model's constants with the tests they
were fitted on. It is written down for comparison and nothing rests on it.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from repairs.analysis.errors import AnalysisError
from repairs.analysis.growth.by_cycle import Following, SequenceGrowth, life_by_cycle
from repairs.analysis.growth.laws import RecordedLaw
from repairs.analysis.growth.plastic_zone import StressState
from repairs.analysis.growth.retardation import Retardation, Wheeler, Willenborg
from repairs.analysis.growth.separable import Factor
from repairs.analysis.growth.told import write_sequence_life
from repairs.analysis.growth.two_directions import FlawPath
from repairs.analysis.inputs import Inputs
from repairs.analysis.loads.flown import Flown
from repairs.analysis.note import Note
from repairs.analysis.types import Reference

NOT_USED = "for comparison; not used"
BESIDE = (
    "Retardation is asked for: the through crack once more, cycle by cycle, without "
    "and with it. For comparison; not used. The order flown gives other cycles than "
    "counting pairs, so that the life without it differs too."
)
NEEDS_SPECTRUM = (
    "Retardation is asked for, but a flight is one constant cycle here: there is no "
    "overload that could retard."
)
LACKING = "Retardation is asked for and not shown: {names} not stated."
NOT_SHOWN = "Retardation is asked for and not shown: {why}"
CONSTANTS = {
    "wheeler": ("wheeler_exponent", "stress_state", "yield_strength"),
    "willenborg": (
        "shut_off_ratio",
        "growth_threshold",
        "stress_state",
        "yield_strength",
    ),
}
STATES = {
    "plane_stress": StressState.PLANE_STRESS,
    "plane_strain": StressState.PLANE_STRAIN,
}
THROUGH = 1.0
"""Depth and thickness of a crack that is through: one number, whichever."""
TIMES_LONGER, MOST_CYCLES = 20.0, 5e7
"""How far it is followed: times the life without it, and cycles at most."""


@dataclass(frozen=True, slots=True)
class Through:
    """A through crack's growth that counts: from start to end [mm], in flights."""

    factor: Factor
    flown: Flown
    law: RecordedLaw
    start: float
    end: float
    flights: float


def asked(inputs: Inputs) -> bool:
    """Return whether a model of retardation is stated."""
    return inputs.word("retardation") in CONSTANTS


def grown_beside(inputs: Inputs, note: Note, through: Through) -> SequenceGrowth | None:
    """Write the retarded growth down and return it; say why if there is none."""
    if through.flown.spectrum is None:
        note.warn(NEEDS_SPECTRUM)
        return None
    word = inputs.word("retardation") or ""
    if lacking := inputs.missing(CONSTANTS[word]):
        names = ", ".join(item.title for item in lacking)
        note.warn(LACKING.format(names=names))
        return None
    try:
        return _followed(note, through, model_of(inputs))
    except AnalysisError as refusal:
        note.warn(NOT_SHOWN.format(why=refusal))
        return None


def model_of(inputs: Inputs) -> Retardation:
    """Return the model stated, its constants with the source of their fit."""
    strength = inputs.number("yield_strength").value
    state = STATES[inputs.word("stress_state") or ""]
    if inputs.word("retardation") == "wheeler":
        given = inputs.number("wheeler_exponent")
        evidence = Reference(given.source, given.grade)
        return Wheeler(given.value, strength, state, evidence)
    given = inputs.number("shut_off_ratio")
    threshold = inputs.number("growth_threshold")
    evidence = Reference(f"{given.source}; {threshold.source}", given.grade)
    return Willenborg(threshold.value, given.value, strength, state, evidence)


def _followed(
    note: Note, through: Through, model: Retardation
) -> SequenceGrowth | None:
    block = through.flown.block()
    assert block is not None, "a spectrum that states stress is flown"
    most = MOST_CYCLES * block.flights / block.cycles
    flights = min(TIMES_LONGER * through.flights + block.flights, most)
    following = Following(math.ceil(flights), None, model)
    path = FlawPath(None, through.factor, THROUGH, through.end)
    start = (THROUGH, through.start)
    life = life_by_cycle(through.law, block, path, start, following)
    note.text(BESIDE)
    write_sequence_life(note, life, following)
    return life.retarded
