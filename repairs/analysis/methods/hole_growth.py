"""Growth at a hole: a corner flaw through the thickness, then cracks along the sheet.

Known cracks give strength and lives; a hole without known crack gives a threshold from
the flaw that is assumed there, and a repeat.
"""

from __future__ import annotations

from repairs.analysis.errors import OutOfRangeError
from repairs.analysis.growth.path import (
    CrackPath,
    Start,
    with_found_lives,
    with_margins,
)
from repairs.analysis.growth.two_directions import TwoFactors, grow_part_through
from repairs.analysis.inputs import Inputs
from repairs.analysis.inspection.flaws import FlawKind, FlawLocation, rogue_flaw
from repairs.analysis.intensity.loaded_hole import CORNER_UNDER_PIN, corner_factor
from repairs.analysis.intensity.part_through import (
    CORNER_ANGLES,
    CORNER_AT_HOLE,
    PartThrough,
)
from repairs.analysis.methods.hole_geometry import Hole, write_strength
from repairs.analysis.methods.rework_lives import with_lives
from repairs.analysis.methods.sheet import stands
from repairs.analysis.note import Note
from repairs.analysis.stress_life import left as fatigue
from repairs.analysis.types import Result, Use

AS_THROUGH = (
    "The corner flaw is grown as a through crack: it leaves the range of the corner "
    "solution, or would not stand once through. Shortens the life."
)
AT_THE_HOLE = "growth of the flaw assumed at the hole"
TAKEN_AS_THROUGH = "A crack not said to be part-through is taken as through."
STRENGTH_AS_THROUGH = (
    "Strength is that of a through crack as long as the corner crack is along the "
    "surface: lower than its own."
)


def with_known_crack(
    inputs: Inputs, note: Note, hole: Hole, path: CrackPath, draft: Result
) -> Result:
    """Fill strength and lives of measured cracks at the hole; never an interval."""
    measured = note.given(
        "c", "crack from the hole edge", inputs.number("edge_crack_length")
    )
    more = note.given("u", "its uncertainty", inputs.number("edge_crack_uncertainty"))
    c = measured + more
    start = Start(c)
    if inputs.word("crack_through") == "no":
        note.text(STRENGTH_AS_THROUGH)
        deep = note.given("a", "crack depth", inputs.number("crack_depth"))
        deep += note.given(
            "u", "its uncertainty", inputs.number("crack_depth_uncertainty")
        )
        start = corner_start(hole, path, note, deep, c)
    else:
        note.text(TAKEN_AS_THROUGH)
    strength = write_strength(hole, path, note, c)
    known = with_margins(path.loads, note, strength, draft)
    return with_found_lives(
        inputs, note, path, start.length, known, start.cycles_before
    )


def corner_factors(hole: Hole) -> TwoFactors:
    """Return factors of corner cracks at the hole, at the surface and at the bore."""

    def factors(depth: float, length: float) -> tuple[float, float]:
        crack = PartThrough(depth, length, hole.thickness)
        along, inward = CORNER_ANGLES
        bulging = hole.bulging(length)
        return (
            bulging * corner_factor(crack, hole.at, along),
            bulging * corner_factor(crack, hole.at, inward),
        )

    return factors


def corner_start(
    hole: Hole, path: CrackPath, note: Note, depth: float, length: float
) -> Start:
    """Grow a corner crack through the thickness, or take it as through at once.

    As through where the corner solution ends, and where a through crack of the length
    it breaks through with would not bear what is required.
    """
    if depth >= hole.thickness:
        return Start(length)
    law, cycle = path.growth()
    try:
        grown = grow_part_through(
            law, corner_factors(hole), cycle, (depth, length), hole.thickness
        )
    except OutOfRangeError:
        note.warn(AS_THROUGH)
        return Start(length)
    if not stands(path, grown.length):
        note.warn(AS_THROUGH)
        return Start(length)
    if hole.at.bearing:
        note.step("", "bearing on the corner crack", "", None, "", CORNER_UNDER_PIN)
    note.step(
        "N_bt",
        "cycles until the corner crack is through, 10° and 80°",
        f"a {depth:.2f} to {hole.thickness:.2f} mm",
        grown.cycles,
        "cycles",
        CORNER_AT_HOLE,
    )
    return Start(grown.length, grown.cycles)


def flaw_start(hole: Hole, path: CrackPath, note: Note) -> Start:
    """Write the assumed flaw at the hole down; return the through crack it becomes."""
    flaw = rogue_flaw(FlawLocation.HOLE, hole.thickness)
    note.step("c₀", f"assumed {flaw.kind} flaw", "", flaw.length, "mm", flaw.reference)
    if flaw.kind is FlawKind.THROUGH:
        return Start(flaw.length)
    return corner_start(hole, path, note, flaw.depth, flaw.length)


def with_assumed_flaw(
    inputs: Inputs,
    use: Use,
    note: Note,
    hole: Hole,
    path: CrackPath,
    left: fatigue.StressLife,
    draft: Result,
) -> Result:
    """Fill lives, threshold and repeat from stress-life and from an assumed flaw."""
    start = flaw_start(hole, path, note)
    write_strength(hole, path, note, start.length)
    return with_lives(inputs, use, note, path, start, left, draft, AT_THE_HOLE)
