r"""Stop-drilled crack: a notch to the far edges of its holes, and when it cracks again.

.. math:: K_t = 1 + 2\sqrt{a/\rho},\qquad 2a = \text{crack} + D,\quad \rho = D/2

with a hole of diameter D centred on each tip, which makes the notch longer than the
crack was. The life until a crack starts again is stress-life at that notch on
net-section stress, bulging included. Strength, and growth after a crack has started,
take the notch for a crack of its whole length.

A stop hole is no permanent repair. The rule of bridge practice that compares the range
of K over the root of the radius with a limit is for steel, and is not used.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from types import ModuleType

from repairs.analysis.errors import OutOfRangeError, within
from repairs.analysis.growth.laws import StressCycle
from repairs.analysis.growth.path import CrackPath, with_found_lives, with_margins
from repairs.analysis.inputs import Inputs
from repairs.analysis.inspection import intervals
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods import (
    circumferential_crack,
    flat_crack,
    skew_crack,
    skin_crack,
)
from repairs.analysis.methods.crack_case import measured_half
from repairs.analysis.methods.sheet import Sheet, write_strength
from repairs.analysis.note import Note
from repairs.analysis.stress_life import left as fatigue
from repairs.analysis.stress_life.flown import flown_life_left
from repairs.analysis.types import (
    Applicability,
    Grade,
    GrossStress,
    Life,
    Reference,
    Result,
    Use,
)

STOP_HOLE = Reference(
    "Inglis 1913, elliptical notch of the same length and root radius, as in public "
    "benchmark text",
    Grade.QUOTED,
)
CAUTIONS = (
    "A stop hole is no permanent repair.",
    "The tips must have been found by eddy current before drilling, and the holes "
    "shown free of cracks by eddy current after it; a hole that misses its tip stops "
    "nothing.",
    "The edges of the holes must be smooth: deburred, without tool marks.",
)
STEEL_RULE = (
    "The bridge rule on ΔK / √ρ is for steel and is not used for this material."
)
NO_START_LIFE = (
    "No life until a crack starts again: {refusal} The notch is taken for a growing "
    "crack at once."
)
DRILLED = "crack is stop-drilled"
FROM_DRILLING = "from stop-drilling"
STARTS = "until a crack starts again at the stop hole, mean stress-life"
AFTER = "after a crack has started again, {title}"


def plain_method(inputs: Inputs) -> ModuleType:
    """Return the plain method of the crack before it was drilled."""
    if inputs.word("pressurised") == "no":
        return flat_crack
    direction = inputs.word("crack_direction")
    if direction == "circumferential":
        return circumferential_crack
    return skew_crack if direction in ("diagonal", "radial") else skin_crack


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs for a use."""
    plain = plain_method(inputs).required(inputs, use)
    said = () if by_repair(inputs) else ("stop_drilled",)
    more = (*said, "stop_hole_diameter", *fatigue.INPUTS)
    return tuple(dict.fromkeys((*plain, *more)))


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    element, *others = plain_method(inputs).tests(inputs, use)
    drilled = said_drilled(inputs)
    found = use is Use.FOUND_DAMAGE
    known = Applicability(
        "what the evaluation is for",
        "damage found" if found else "structure without known crack",
        "damage found: a stop-drilled crack is known damage",
        found or drilled.met is not True,
    )
    return (element, drilled, known, *others)


def by_repair(inputs: Inputs) -> bool:
    """Return whether the repair itself is the stop hole."""
    return inputs.word("repair_kind") == "stop_drill"


def said_drilled(inputs: Inputs) -> Applicability:
    """Test that the crack is stop-drilled; one measured and not said to be is not."""
    if by_repair(inputs):
        return Applicability(DRILLED, "yes, by the repair", "yes", True)
    test = apply.word_is(inputs, "stop_drilled", DRILLED, "yes")
    if test.met is None and "crack_length" in inputs:
        return replace(test, met=False)
    return test


@dataclass(frozen=True, slots=True)
class Notch:
    """A crack with a hole of `diameter` on each tip; half-length to the far edges."""

    half_length: float
    diameter: float

    @property
    def kt(self) -> float:
        """Kt on gross stress, which exceeds that on net stress [-]."""
        return stop_hole_kt(self.half_length, self.diameter / 2)


def stop_hole_kt(half_length: float, radius: float) -> float:
    r"""Return Kt of a notch with round ends, :math:`1 + 2\sqrt{a/\rho}`.

    Parameters
    ----------
    half_length
        Half-length a to the far edges of the holes [mm].
    radius
        Radius of the holes, rho [mm].

    Returns
    -------
    float
        Kt on gross stress [-]; 3 for a hole alone.

    Notes
    -----
    Range a >= rho. Wide sheet.

    References
    ----------
    .. [1] See `STOP_HOLE`.
    """
    slender = within("Half-length over radius", half_length / radius, 1, 1e6, "a notch")
    return 1 + 2 * math.sqrt(slender)


def notch_of(inputs: Inputs, note: Note) -> Notch:
    """Write crack and holes down and return the notch they make."""
    half = measured_half(inputs, note)
    diameter = note.given(
        "D", "diameter of the stop hole", inputs.number("stop_hole_diameter")
    )
    notch = Notch(half + diameter / 2, diameter)
    note.step(
        "a_n",
        "half-length to the far edge of the hole, a + D / 2",
        f"{half:.2f} + {diameter / 2:.2f}",
        notch.half_length,
        "mm",
    )
    return notch


def start_again(
    inputs: Inputs, note: Note, sheet: Sheet, path: CrackPath, notch: Notch
) -> fatigue.StressLife:
    """Return the mean life until the notch cracks again; none outside the curves."""
    a, cycle = notch.half_length, path.loads.cycle
    raised = sheet.raised(a)
    note.step(
        "Kt",
        "1 + 2 √(a_n / ρ)",
        f"a_n = {a:.2f}, ρ = D / 2 = {notch.diameter / 2:.2f}",
        notch.kt,
        "-",
        STOP_HOLE,
    )
    net = cycle.maximum * raised / (1 - 2 * a / sheet.width)
    note.step(
        "σ_net",
        "σ F_b F_s / (1 − 2 a_n / W)",
        f"{cycle.maximum:.2f} · {raised:.4f} / (1 − {2 * a:.2f} / {sheet.width:.0f})",
        net,
        "MPa",
    )
    flown = path.loads.flown
    after = replace(
        flown,
        cycle=StressCycle(GrossStress(net), cycle.ratio),
        factor=flown.factor * net / cycle.maximum,
    )
    try:
        return flown_life_left(inputs, note, notch.kt, after, flown)
    except OutOfRangeError as refusal:
        words = NO_START_LIFE.format(refusal=refusal)
        note.warn(words)
        return fatigue.StressLife(None, words)


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the drilled crack as a notch; the tests have passed."""
    del use
    sheet, path = plain_method(inputs).prepared(inputs, note)
    notch = notch_of(inputs, note)
    strength = write_strength(sheet, path, note, notch.half_length)
    draft = with_margins(path.loads, note, strength, draft)
    begins = start_again(inputs, note, sheet, path, notch)
    grown = with_found_lives(inputs, note, path, notch.half_length, draft)
    for caution in (*CAUTIONS, STEEL_RULE):
        note.warn(caution)
    return _with_start(inputs, note, grown, begins)


def _with_start(
    inputs: Inputs, note: Note, grown: Result, begins: fatigue.StressLife
) -> Result:
    """Put the life until a crack starts again before the lives of its growth."""
    first = intervals.life(STARTS, begins.remaining, FROM_DRILLING, begins.remark)
    later = tuple(
        Life(AFTER.format(title=life.title), life.cycles, "from then on", life.remark)
        for life in grown.lives
    )
    known = replace(grown, lives=(first, *later))
    if begins.remaining is None or not grown.life_cycles:
        return known
    factored = intervals.over_factor(
        inputs, note, begins.remaining, "stress_life_policy", "life after factor"
    )
    return replace(
        known,
        life_cycles=first.cycles,
        life_base=FROM_DRILLING,
        life_after_factor_cycles=factored.whole,
        scatter_factor=factored.factor,
    )
