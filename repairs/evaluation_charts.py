"""Stored curves of an evaluation as drawings. Pure."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from typing import Any

from fleet.drawing.chart import Chart, Level, Point, Series, Upright, chart_svg
from repairs.evaluation_figures import INSPECTIONS
from repairs.evaluation_text import number_text

Curve = Mapping[str, Any]
GROWTH, STRESS_LIFE = "growth", "stress_life"
MANY_CYCLES = 10_000
MOST_INSPECTIONS = 25
WHAT_IF = "what if:"
NO_LIFE = "no finite life on this curve"
THRESHOLD_WORDS = "first inspection"


def charts_of(
    data: Mapping[str, Any], beside: Mapping[str, Any] | None = None
) -> list[tuple[str, str]]:
    """Title and drawing of every curve, inspections on the growth curve.

    `beside` is a second calculation, drawn into the same axes as "what if".
    """
    others = {curve["key"]: curve for curve in beside["curves"]} if beside else {}
    drawn: list[tuple[str, str]] = []
    seen: set[str] = set()
    for curve in data["curves"]:
        if curve["key"] == INSPECTIONS:
            continue
        other = None if curve["key"] in seen else others.get(curve["key"])
        seen.add(curve["key"])
        marks = inspections(data, curve) if curve["key"] == GROWTH else []
        drawn.append((curve["title"], chart_of(curve, other, marks)))
    drawn += [
        (f"{curve['title']}, what if", chart_of(curve))
        for key, curve in others.items()
        if key not in seen and key != INSPECTIONS
    ]
    return drawn


def inspections(data: Mapping[str, Any], curve: Curve) -> list[Upright]:
    """Inspections along the growth curve: the threshold, then each repeat.

    Only of structure without known crack, and only those before the curve ends; when
    there are too many to draw, the first alone, which says how often they repeat.
    """
    planned = [one for one in data["curves"] if one["key"] == INSPECTIONS]
    if planned:
        return _looks(planned[0]["marks"], curve["points"][-1][0])
    threshold, repeat = data["threshold"], data["repeat"]
    if not threshold or threshold["cycles"] is None:
        return []
    end = curve["points"][-1][0]
    first, step = threshold["cycles"], repeat["cycles"] if repeat else None
    words = f"{THRESHOLD_WORDS} {first:,}" + (f", then every {step:,}" if step else "")
    found = [Upright(float(first), words)]
    if step and (end - first) / step <= MOST_INSPECTIONS:
        count = int((end - first) // step)
        found += [Upright(float(first + step * n)) for n in range(1, count + 1)]
    return [mark for mark in found if mark.value <= end]


def _looks(marks: Sequence[Mapping[str, Any]], end: float) -> list[Upright]:
    """The inspections of a plan; when there are too many to draw, the first alone."""
    cycles = [mark["x"] for mark in marks if mark["x"] <= end]
    if not cycles:
        return []
    words = f"{THRESHOLD_WORDS} {cycles[0]:,.0f}, {len(cycles)} before the end"
    rest = cycles[1:] if len(cycles) <= MOST_INSPECTIONS else []
    return [Upright(cycles[0], words), *(Upright(one) for one in rest)]


def chart_of(
    curve: Curve, other: Curve | None = None, uprights: list[Upright] | None = None
) -> str:
    """A curve as SVG; cycles are drawn in thousands once they are many."""
    by_powers = curve["key"] == STRESS_LIFE
    scale, unit = _scale(curve, by_powers=by_powers)
    x_label = f"{curve['x_label']}, {unit}" if unit else curve["x_label"]
    named = [mark for mark in curve["marks"] if mark["x"] is not None]
    return chart_svg(
        Chart(
            title=curve["title"],
            x_label=x_label,
            y_label=f"{curve['y_label']}, {curve['y_unit']}",
            series=list(_series(curve, other, scale)),
            levels=[*_levels(curve), *_levels(other, WHAT_IF, besides=curve)],
            point=Point(named[0]["x"] / scale, named[0]["y"], named[0]["label"])
            if named
            else None,
            uprights=[Upright(one.value / scale, one.label) for one in uprights or ()],
            x_log=by_powers,
        )
    )


def _levels(
    curve: Curve | None, prefix: str = "", besides: Curve | None = None
) -> Iterator[Level]:
    """Reference lines, the first dashed; of a second curve those that differ."""
    lines = [mark for mark in curve["marks"] if mark["x"] is None] if curve else []
    known = {mark["y"] for mark in besides["marks"]} if besides else set()
    for number, mark in enumerate(lines):
        if mark["y"] not in known:
            words = _level_words(curve, mark)  # type: ignore[arg-type]
            yield Level(mark["y"], f"{prefix} {words}".strip(), soft=number == 0)


def _level_words(curve: Curve, mark: Mapping[str, Any]) -> str:
    """A reference line in words; a stress that no stress-life curve reaches says so."""
    if curve["key"] == STRESS_LIFE:
        return f"{mark['label']}: {NO_LIFE}"
    return f"{mark['label']} {number_text(mark['y'])} {curve['y_unit']}"


def _scale(curve: Curve, *, by_powers: bool) -> tuple[float, str]:
    if curve["x_unit"] != "cycles":
        return 1.0, curve["x_unit"]
    if not by_powers and curve["points"][-1][0] >= MANY_CYCLES:
        return 1000.0, "thousands"
    return 1.0, ""


def _series(curve: Curve, other: Curve | None, scale: float) -> Iterator[Series]:
    """The curve, and the same relation of the second calculation if they differ."""
    pair = other is not None and other["points"] != curve["points"]
    yield _one(curve, "as recorded" if pair else curve["title"], scale)
    if pair and other is not None:
        yield _one(other, "what if", scale)


def _one(curve: Curve, name: str, scale: float) -> Series:
    points = curve["points"]
    return Series(name, [x / scale for x, _ in points], [y for _, y in points])
