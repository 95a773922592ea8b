"""How well the plan that follows from an evaluation finds the crack it is for.

The growth curve of the assumed flaw, the proposed threshold and repeat, and the
recorded detection curve of the method give the chance that the crack is found before it
is critical, and the longest repeat that would meet the operator's target.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

import numpy as np

from repairs.analysis.errors import AnalysisError
from repairs.analysis.inspection.detection import DetectionCurve
from repairs.analysis.inspection.looks import Growth, Look, Phase, beyond_cover
from repairs.analysis.inspection.marks import inspection_curve, write_plan
from repairs.analysis.inspection.plan import longest_interval
from repairs.analysis.note import Note
from repairs.analysis.types import Plan, Result, Sourced

TITLE = "How surely the plan finds the crack"
NOT_JUDGED = "How surely the plan finds the crack is not calculated: {why}"
MOST_LOOKS = 500
"""More looks in a life than this are no plan; the search ends there."""
GROWTH = "growth"
"""Key of the curve of growth among a result's curves."""


@dataclass(frozen=True, slots=True)
class Detection:
    """A recorded detection curve, what hides part of the crack, how surely used."""

    title: str
    curve: DetectionCurve
    covered: float
    done: Sourced
    never: Sourced


def with_plan(
    result: Result,
    detection: Detection,
    scatter: Sourced | None,
    target: Sourced | None,
    note: Note,
) -> Result:
    """Return the result with its plan judged; unchanged where it proposes none."""
    growth = growth_of(result, scatter)
    threshold, repeat = result.threshold_cycles, result.repeat_cycles
    if growth is None or threshold is None or not repeat:
        return result
    note.text(TITLE)
    look = Look(
        detection.title,
        detection.curve,
        beyond_cover(growth.size, detection.covered),
        repeat,
        threshold,
        detection.done,
        detection.never,
    )
    try:
        found = write_plan(note, growth, (look,))
    except AnalysisError as refusal:
        note.warn(NOT_JUDGED.format(why=refusal))
        return result
    longest = None
    if target is not None:
        asked = note.given("P", "chance of detection asked for", target)
        longest = _longest(growth, look, asked, note)
    plan = Plan(
        found.mean,
        found.worst,
        found.scheduled,
        None if target is None else target.value,
        longest,
    )
    return replace(
        result,
        plan=plan,
        curves=(*result.curves, inspection_curve(growth, (look,), Phase.SCHEDULE)),
    )


def growth_of(result: Result, scatter: Sourced | None) -> Growth | None:
    """Return the growth of the flaw a result assumed, cycles before it was through
    first; None where the result has no growing crack."""
    drawn = next((curve for curve in result.curves if curve.key == GROWTH), None)
    if drawn is None or len(drawn.points) < 2:
        return None
    cycles = np.array([point[0] for point in drawn.points])
    size = np.array([point[1] for point in drawn.points])
    # A life on stress-life stands beside that of growth and is another one.
    longer = [life.cycles - cycles[-1] for life in result.lives if life.cycles]
    before = min((more for more in longer if more > -1), default=0)  # rounded down
    if before >= 1:
        cycles = np.concatenate([[0.0], cycles + before])
        size = np.concatenate([size[:1], size])
    rising = np.concatenate([[True], np.diff(cycles) > 0])
    return Growth(cycles[rising], size[rising], result.life_base, scatter)


def _longest(growth: Growth, look: Look, target: float, note: Note) -> int | None:
    """The longest repeat that meets a target in the worst phase, or why none does."""
    shortest = math.ceil(growth.life / MOST_LOOKS)
    try:
        found = longest_interval(
            growth, (look,), target, Phase.WORST, shortest=shortest
        )
    except AnalysisError as refusal:
        note.warn(str(refusal))
        return None
    note.step("I_P", "longest repeat that meets it in the worst phase", "", found,
              "cycles")  # fmt: skip
    return found
