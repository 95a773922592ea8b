"""What all cracks in skin share, whatever they grow from and whatever pulls at them.

A known crack gives strength, margins and lives; skin without known crack a threshold
from an assumed flaw, and a repeat.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass, replace

from repairs.analysis.growth.path import (
    CrackPath,
    Start,
    curves,
    grow,
    repeat_after,
    with_found_lives,
    with_margins,
)
from repairs.analysis.inputs import Inputs
from repairs.analysis.inspection import intervals
from repairs.analysis.inspection.flaws import FlawLocation, rogue_flaw
from repairs.analysis.loads.longitudinal import (
    REACH_INPUTS as REACH_INPUTS,
)
from repairs.analysis.loads.longitudinal import (
    SpectrumReach,
    states_stress,
)
from repairs.analysis.loads.panel_loads import largest_stress
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods.applicability import NONE_HERE, NOT_RECORDED
from repairs.analysis.methods.sheet import (
    DEPTH_INPUTS,
    Sheet,
    depth_counts,
    flaw_start,
    found_start,
    write_strength,
)
from repairs.analysis.note import Note
from repairs.analysis.strength.residual import Strength
from repairs.analysis.types import (
    INCH,
    Applicability,
    FullLength,
    Result,
    Use,
    half,
)

SKIN_INPUTS = (
    "element",
    "pressurised",
    "crack_origin",
    "surroundings",
    "thickness",
    "yield_strength",
    "toughness",
    "growth_law",
)
MEASURED = ("crack_length", "crack_length_uncertainty")
COUNTED = ("accumulated_cycles", "life_base")
OBSTACLE_TEST = "distance of a tip from any cut-out, joint row or repair edge"


def crack_needed(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return what a use needs beside the skin: sizes of the crack, or counters."""
    if use is Use.NO_KNOWN_CRACK:
        return COUNTED
    return MEASURED + (DEPTH_INPUTS if depth_counts(inputs) else ())


def alone(inputs: Inputs, use: Use) -> Applicability:
    """Test that no other crack or hole acts on this one: a crack length lies between.

    Several cracks need the distance between them; one needs none.
    """
    test, wanted = "distance to the next hole or crack", "one crack length"
    length, count = half_length_of(inputs, use), inputs.maybe("crack_count")
    gap = inputs.maybe("ligament")
    if gap is None:
        several = count is not None and count.value > 1
        shown = f"not recorded, {count.value:g} cracks" if count and several else ""
        return Applicability(
            test, shown or "none recorded", wanted, None if several else True
        )
    if length is None:
        return Applicability(test, f"{gap.value:.1f} mm", wanted, None)
    limit = f"at least {2 * length:.1f} mm ({wanted})"
    return Applicability(test, f"{gap.value:.1f} mm", limit, gap.value >= 2 * length)


def spectrum_reach(inputs: Inputs) -> SpectrumReach | None:
    """Return how far a flight's stresses reach; None where only a spectrum says it."""
    if not all(name in inputs for name in REACH_INPUTS):
        return None
    smallest, largest = (inputs.number(name) for name in REACH_INPUTS)
    return SpectrumReach(smallest, largest)


def away_from_edges(inputs: Inputs) -> Applicability:
    """Test that the crack has two tips in skin: it starts at no hole and no edge."""
    barred = ("fastener_hole", "edge", "cut_out_corner")
    return apply.word_outside(inputs, "crack_origin", "where the crack starts", barred)


def stiffener_whole(inputs: Inputs) -> Applicability:
    """Test that no broken stiffener is recorded at the crack."""
    word = inputs.word("centre_stiffener")
    shown = word.replace("_", " ") if word else "none recorded as broken"
    return Applicability(
        "stiffener under the crack", shown, "not broken", word != "broken_stiffener"
    )


def mean_tension(inputs: Inputs) -> Applicability:
    """Test that a flight's stress along the section opens the crack.

    Where the 1 g stress presses, the largest of a flight is not at its largest share.
    """
    if states_stress(inputs):
        top = largest_stress(inputs)
        return apply.above("largest stress of the spectrum", top, 0.0, "MPa")
    mean = inputs.maybe("mean_longitudinal_stress")
    value = mean.value if mean else None
    return apply.above("1 g stress along the section", value, 0.0, "MPa")


def half_length_of(inputs: Inputs, use: Use) -> float | None:
    """Return the half-length that is evaluated [mm], None while it is unknown."""
    if use is Use.NO_KNOWN_CRACK:
        return 0.125 * INCH
    measured, more = (inputs.maybe(name) for name in MEASURED)
    return (measured.value + more.value) / 2 if measured and more else None


def tips_clear(
    inputs: Inputs, use: Use, keep: Callable[[float], float | None], rule: str
) -> Applicability:
    """Test the distance of a tip from all obstacles, whichever way the crack runs.

    The crack may point at the nearest of them. `keep` turns its half-length into the
    distance to keep [mm].
    """
    around, length = inputs.surroundings(), half_length_of(inputs, use)
    limit = None if length is None else keep(length)
    wanted = rule if limit is None else f"at least {limit:.1f} mm ({rule})"
    if around is None or limit is None or length is None:
        return Applicability(OBSTACLE_TEST, NOT_RECORDED, wanted, None)
    nearest = around.nearest_to_middle()
    if nearest is None:
        return Applicability(OBSTACLE_TEST, NONE_HERE, wanted, True)
    distance, label = nearest
    gap = distance - length
    return Applicability(
        OBSTACLE_TEST, f"{gap:.1f} mm to {label}", wanted, gap >= limit
    )


def reach_of(inputs: Inputs, keep: Callable[[float], float]) -> tuple[float, str]:
    """Return how long half a crack may grow until a tip comes too near [mm], and what.

    `keep` turns the middle's distance from an obstacle into the largest half-length.
    """
    around = inputs.surroundings()
    nearest = around.nearest_to_middle() if around else None
    if nearest is None:
        return math.inf, "nothing recorded"
    return keep(nearest[0]), nearest[1]


@dataclass(frozen=True, slots=True)
class CrackCase:
    """A path, how its strength is written down, and where a crack on it begins [mm].

    `measured` writes a known crack's length down as the path counts it, `known` turns
    it into the through crack it is or becomes; `assumed` gives that of skin without
    known crack.
    """

    path: CrackPath
    write: Callable[[float], Strength]
    measured: Callable[[], float]
    known: Callable[[float], Start]
    assumed: Callable[[], Start]


def in_sheet(inputs: Inputs, note: Note, sheet: Sheet, path: CrackPath) -> CrackCase:
    """Return the crack of a plain sheet."""
    flaw = rogue_flaw(FlawLocation.ELSEWHERE, sheet.thickness)
    return CrackCase(
        path,
        lambda a: write_strength(sheet, path, note, a),
        lambda: measured_half(inputs, note),
        lambda a: found_start(inputs, sheet, path, note, a),
        lambda: flaw_start(sheet, path, note, flaw),
    )


def evaluated(
    inputs: Inputs, use: Use, note: Note, draft: Result, crack: CrackCase
) -> Result:
    """Evaluate a known crack, or skin without one."""
    if use is Use.FOUND_DAMAGE:
        return _known(inputs, note, draft, crack)
    return _assumed(inputs, note, draft, crack)


def measured_half(inputs: Inputs, note: Note) -> float:
    """Write a measured length down; return half of it with its uncertainty [mm]."""
    measured = note.given("2a", "measured length", inputs.number(MEASURED[0]))
    more = note.given("u", "its uncertainty", inputs.number(MEASURED[1]))
    a = half(FullLength(measured + more))
    note.step("a", "(2a + u) / 2", f"({measured:.2f} + {more:.2f}) / 2", a, "mm")
    return a


def _known(inputs: Inputs, note: Note, draft: Result, crack: CrackCase) -> Result:
    a = crack.measured()
    strength = crack.write(a)
    draft = with_margins(crack.path.loads, note, strength, draft)
    start = crack.known(a)
    return with_found_lives(
        inputs, note, crack.path, start.length, draft, start.cycles_before
    )


def _assumed(inputs: Inputs, note: Note, draft: Result, crack: CrackCase) -> Result:
    path, start = crack.path, crack.assumed()
    draft = with_margins(path.loads, note, crack.write(start.length), draft)
    grown = grow(inputs, note, path, start, path.loads.residual)
    base = inputs.word("life_base") or ""
    factored = intervals.over_factor(
        inputs, note, grown.cycles, "growth_policy", "threshold"
    )
    title = "from the assumed flaw until residual strength is lost"
    life = intervals.life(title, grown.cycles, base, grown.remark)
    return replace(
        draft,
        lives=(life,),
        life_cycles=life.cycles,
        life_base=base,
        life_after_factor_cycles=factored.whole,
        scatter_factor=factored.factor,
        threshold=intervals.interval(inputs, note, factored.cycles, base, "N_thr"),
        repeat=repeat_after(inputs, note, path, grown.end),
        missing=intervals.still_missing(inputs),
        curves=curves(path, start.length, base),
    )
