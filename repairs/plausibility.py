"""Doubts about what was typed: asked and kept with their answer, never a refusal. Pure.

A range check lets a slipped decimal through; a ratio worked out on the spot does not.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date

from fleet.amounts import amount_write
from fleet.due import COUNTED, Counter, Counters, Standing
from repairs.measured import Measured, sizes_of
from repairs.measurements import ASKED_RATIOS, RATIO_TOLERANCE, Ratio

LENGTH_BELOW_WIDTH = "length_below_width"
DEPTH_OVER_THICKNESS = "depth_over_thickness"
DEPTH_OVER_WIDTH = "depth_over_width"
RATIO_DIFFERS = "ratio_differs"
UNIT_SLIP = "unit_slip"
COUNTERS_AHEAD = "counters_ahead"
COUNTERS_BELOW = "counters_below"
PLACE_WARNING = "place_warning"

ASKED = {
    LENGTH_BELOW_WIDTH: (
        "Length {length} is below width {width}; the length is the longest dimension. "
        "Are they the right way round?"
    ),
    DEPTH_OVER_THICKNESS: (
        "Depth {depth} is not below the thickness {thickness:.2f} mm of {panel}. "
        "Is the depth right, and is it still a {damage_type}?"
    ),
    DEPTH_OVER_WIDTH: (
        "Depth {depth} is not below width {width}; is one of them wrong, or is it a "
        "hole?"
    ),
    RATIO_DIFFERS: (
        "{label} is {worked_out:g}, but the typed sizes give {actual:.4g}.{hint} "
        "Which of them is right?"
    ),
    UNIT_SLIP: "{what} would fit if {entered} were in the other unit: inches or mm?",
    COUNTERS_AHEAD: (
        "The counters lie {ahead} above usage to {current_to}, more than the highest "
        "30-day rate gives to {found_on} (at most {allowed}). Why?"
    ),
    COUNTERS_BELOW: (
        "The counters lie {below} below usage on {found_on}. Which is wrong?"
    ),
    PLACE_WARNING: "The location was read with {code}. Is “{canonical}” meant?",
}
SLIPPED_DECIMAL = " A decimal point may have slipped."
MM_PER_INCH = 25.4


@dataclass(frozen=True, slots=True)
class Question:
    """A doubt: its code, and what is asked in words with the numbers."""

    code: str
    asked: str


def size_questions(
    damage_type: str,
    measured: Iterable[Measured],
    *,
    thickness_mm: float | None,
    panel: str,
) -> list[Question]:
    """Doubts about the sizes, from the sizes alone and the thickness they lie in."""
    by_name = {one.quantity: one for one in measured}
    found = [
        _ratio(damage_type, by_name),
        _length_and_width(by_name),
        _depth(damage_type, by_name, thickness_mm, panel),
        _depth_and_width(by_name),
    ]
    first: dict[str, Question] = {}
    for question in found:
        if question is not None:
            first.setdefault(question.code, question)
    return list(first.values())


def ahead_of_usage(at: Counters, usage: Counters) -> bool:
    """Whether any stated counter lies above what usage gives."""
    return any(
        at[c] is not None and usage[c] is not None and at[c] > usage[c]  # type: ignore[operator]
        for c in COUNTED
    )


def counter_questions(
    at: Counters, standing: Standing, *, found_on: date
) -> list[Question]:
    """Counters above what the highest rate allows, or below usage that day.

    Up to the highest rate they are only flagged: a log sheet may be on its way.
    """
    ahead: list[tuple[str, str]] = []
    below: list[str] = []
    days = (found_on - standing.current_to).days if standing.current_to else 0
    for counter in COUNTED:
        stated, flown = at[counter], standing.at[counter]
        if stated is None or flown is None or stated == flown:
            continue
        if stated < flown:
            unsure = standing.reconstructed_minutes if counter is Counter.MINUTES else 0
            if stated < flown - unsure:
                below.append(amount_write(counter, flown - unsure - stated))
            continue
        allowed = int(standing.high_rates.get(counter, 0) * max(days, 0))
        if stated - flown > allowed:
            ahead.append(
                (amount_write(counter, stated - flown), amount_write(counter, allowed))
            )
    questions = []
    if ahead:
        text = ASKED[COUNTERS_AHEAD].format(
            ahead=" and ".join(a for a, _ in ahead),
            allowed=" and ".join(b for _, b in ahead),
            current_to=standing.current_to,
            found_on=found_on,
        )
        questions.append(Question(COUNTERS_AHEAD, text))
    if below:
        text = ASKED[COUNTERS_BELOW].format(
            below=" and ".join(below), found_on=found_on
        )
        questions.append(Question(COUNTERS_BELOW, text))
    return questions


def _ratio(damage_type: str, by_name: dict[str, Measured]) -> Question | None:
    ratio = ASKED_RATIOS.get(damage_type)
    if ratio is None:
        return None
    kept = by_name.get(ratio.kept_with)
    sizes = sizes_of(by_name.values())
    if kept is None or not kept.worked_out or not sizes.get(ratio.denominator):
        return None
    if not sizes.get(ratio.numerator):
        return None
    actual = sizes[ratio.numerator] / sizes[ratio.denominator]
    factor = kept.worked_out / actual
    if abs(factor - 1) <= RATIO_TOLERANCE:
        return None
    if any(abs(factor * slip - 1) <= RATIO_TOLERANCE for slip in _INCH_SLIPS):
        what = f"{ratio.label.capitalize()} ({kept.worked_out:g})"
        text = ASKED[UNIT_SLIP].format(what=what, entered=kept.entered)
        return Question(UNIT_SLIP, text)
    return Question(RATIO_DIFFERS, _ratio_text(ratio, kept.worked_out, actual))


_INCH_SLIPS = (MM_PER_INCH, 1 / MM_PER_INCH)
_DECIMAL_SLIPS = (10.0, 0.1, 100.0, 0.01)


def _ratio_text(ratio: Ratio, worked_out: float, actual: float) -> str:
    factor = worked_out / actual
    slipped = any(abs(factor * by - 1) <= RATIO_TOLERANCE for by in _DECIMAL_SLIPS)
    return ASKED[RATIO_DIFFERS].format(
        label=ratio.label.capitalize(),
        worked_out=worked_out,
        actual=actual,
        hint=SLIPPED_DECIMAL if slipped else "",
    )


def _length_and_width(by_name: dict[str, Measured]) -> Question | None:
    length, width = by_name.get("length_mm"), by_name.get("width_mm")
    if length is None or width is None or length.value is None or width.value is None:
        return None
    if length.value >= width.value:
        return None
    other_unit = length.unit != width.unit
    if other_unit and length.value * MM_PER_INCH >= width.value:
        text = ASKED[UNIT_SLIP].format(what="The length", entered=length.entered)
        return Question(UNIT_SLIP, text)
    text = ASKED[LENGTH_BELOW_WIDTH].format(length=length.entered, width=width.entered)
    return Question(LENGTH_BELOW_WIDTH, text)


def _depth_and_width(by_name: dict[str, Measured]) -> Question | None:
    depth, width = by_name.get("depth_mm"), by_name.get("width_mm")
    if depth is None or width is None or depth.value is None or width.value is None:
        return None
    if depth.value < width.value:
        return None
    text = ASKED[DEPTH_OVER_WIDTH].format(depth=depth.entered, width=width.entered)
    return Question(DEPTH_OVER_WIDTH, text)


def _depth(
    damage_type: str,
    by_name: dict[str, Measured],
    thickness_mm: float | None,
    panel: str,
) -> Question | None:
    depth = by_name.get("depth_mm")
    if depth is None or depth.value is None or thickness_mm is None:
        return None
    if damage_type not in THINS or depth.value < thickness_mm:
        return None
    if depth.unit == "in" and depth.value / MM_PER_INCH < thickness_mm:
        text = ASKED[UNIT_SLIP].format(what="The depth", entered=depth.entered)
        return Question(UNIT_SLIP, text)
    text = ASKED[DEPTH_OVER_THICKNESS].format(
        depth=depth.entered,
        thickness=thickness_mm,
        panel=panel,
        damage_type=damage_type,
    )
    return Question(DEPTH_OVER_THICKNESS, text)


THINS = frozenset({"scratch", "gouge", "corrosion", "wear", "lightning"})
"""Damage whose depth is metal lost, and so stays below the thickness."""
