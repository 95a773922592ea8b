"""Stress-life left under what a flight does: one cycle, or a recorded spectrum."""

from __future__ import annotations

from repairs.analysis.inputs import Inputs
from repairs.analysis.loads.flown import Flown
from repairs.analysis.note import Note
from repairs.analysis.stress_life.damage_sum import Below, BelowLastTerm
from repairs.analysis.stress_life.left import StressLife, stress_life_left
from repairs.analysis.stress_life.spectrum import spectrum_life_left

WORDS = {
    "none_counts": Below.NONE,
    "slope_continued": Below.SLOPE,
    "slope_doubled": Below.DOUBLE,
}
NO_JOIN = (
    "Below the last term “{option}” is stated, but not the life the curve is continued "
    "from: state the longest life tested. Until then none counts."
)


def flown_life_left(
    inputs: Inputs, note: Note, kt: float, after: Flown, before: Flown
) -> StressLife:
    """Return the life left at the new stress and Kt, less the share already used.

    Parameters
    ----------
    inputs, note
        Of the evaluation.
    kt
        Stress-concentration factor on net stress now [-]; 1 before.
    after, before
        A flight on the net section now, and on the undamaged one [MPa].
    """
    net, whole = after.net_cycles, before.net_cycles
    if net is None or whole is None:
        return stress_life_left(inputs, note, kt, after.cycle, before.cycle)
    below = below_last_term(inputs, note)
    return spectrum_life_left(inputs, note, kt, net, whole, below=below)


def below_last_term(inputs: Inputs, note: Note) -> BelowLastTerm | None:
    """Return what is stated of cycles at or below the last term; None = nothing."""
    word = inputs.word("below_last_term")
    if word is None:
        return None
    option = WORDS[word]
    if option is Below.NONE:
        return BelowLastTerm(option)
    join = inputs.maybe("below_join_life")
    if join is None:
        note.warn(NO_JOIN.format(option=option))
        return None
    return BelowLastTerm(option, join)
