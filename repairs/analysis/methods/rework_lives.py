"""What reworked skin lives: stress-life left and growth of a flaw assumed to remain.

The smaller of both over their factors is the threshold; damage that was evaluated as
found gets lives only.
"""

from __future__ import annotations

from dataclasses import replace

from repairs.analysis.growth.path import (
    CrackPath,
    Start,
    curves,
    grow,
    repeat_after,
)
from repairs.analysis.inputs import Inputs
from repairs.analysis.inspection import intervals
from repairs.analysis.inspection.flaws import (
    AssumedFlaw,
    FlawKind,
    FlawLocation,
    rogue_flaw,
)
from repairs.analysis.note import Note
from repairs.analysis.stress_life import left as fatigue
from repairs.analysis.types import Interval, Reference, Result, Use

REMAINS = "growth of the flaw assumed to remain"
LAYER = (
    "Cladding, shot peening or another treated layer that was taken off with the "
    "material is in no curve here; restore it, or count the life as without."
)
WORKED_BACK = (
    "A flaw worked back from lives (equivalent initial flaw) is no size: it holds only "
    "with the growth law and the spectrum it was worked back with."
)
INPUTS = ("toughness", "growth_law", *fatigue.INPUTS)
COUNTED = ("life_base", "accumulated_cycles")
"""What a threshold counts from, and what is left to its caps."""


def assumed_flaw(inputs: Inputs, thickness: float) -> AssumedFlaw:
    """Return the flaw assumed to remain: adopted, else the location's published one.

    An adopted size is the depth of a semicircular surface flaw.
    """
    given = inputs.maybe("assumed_flaw")
    if given is None:
        return rogue_flaw(FlawLocation.ELSEWHERE, thickness)
    reference = Reference(given.source, given.grade)
    if given.value >= thickness:
        return AssumedFlaw(FlawKind.THROUGH, 2 * given.value, thickness, reference)
    return AssumedFlaw(FlawKind.SURFACE, 2 * given.value, given.value, reference)


def write_cautions(inputs: Inputs, note: Note) -> None:
    """Write what the lives of skin or an edge that was worked do not hold."""
    note.text(LAYER)
    if inputs.maybe("assumed_flaw") is not None:
        note.text(WORKED_BACK)


def with_lives(
    inputs: Inputs,
    use: Use,
    note: Note,
    path: CrackPath,
    start: Start,
    left: fatigue.StressLife,
    draft: Result,
    title: str = REMAINS,
    base: str | None = None,
) -> Result:
    """Fill lives, threshold and repeat from stress-life and from growth.

    Lives count from `base`, else from what the record says.
    """
    grown = grow(inputs, note, path, start, path.loads.residual)
    base = base or inputs.word("life_base") or ""
    growth = intervals.life(title, grown.cycles, base, grown.remark)
    propose = use is Use.NO_KNOWN_CRACK
    chosen = fatigue.governing_life(inputs, note, left, growth, base, propose=propose)
    lived = intervals.life("mean stress-life left", left.remaining, base, left.remark)
    repeat: Interval | None = None
    if propose:
        repeat = repeat_after(inputs, note, path, grown.end)
    else:
        note.warn(intervals.FOUND_DAMAGE_LIFE)
    return replace(
        draft,
        lives=(lived, growth),
        life_cycles=chosen.life.cycles,
        life_base=base,
        life_after_factor_cycles=chosen.after_factor,
        scatter_factor=chosen.factor,
        threshold=chosen.threshold,
        repeat=repeat,
        missing=intervals.still_missing(inputs),
        curves=(*curves(path, start.length, base), *left.curves),
    )
