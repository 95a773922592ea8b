"""Line charts as SVG text: decide in a data object, then draw.

Used for residual strength over crack length, crack growth over cycles and their like.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from functools import cached_property

from fleet.drawing import svg
from fleet.drawing.axis import Axis, log_axis, nice_axis
from fleet.drawing.svg import Box, Label

WIDTH, HEIGHT = 560.0, 270.0
TOP, RIGHT, BOTTOM = 14.0, 544.0, 228.0
LINE = 13.0

NOT_A_NUMBER = (
    "Chart “{title}”: {where} holds {value}, which cannot be drawn; "
    "leave the point out and say why beside the chart."
)
UNEQUAL = (
    "Chart “{title}”: series “{name}” has {x} x values and {y} y values; "
    "give one y for each x."
)
EMPTY = "Chart “{title}” has no points; give at least one series with two points."


@dataclass(frozen=True)
class Series:
    """One curve; the name is written beside it when the chart has several."""

    name: str
    x: Sequence[float]
    y: Sequence[float]


@dataclass(frozen=True)
class Level:
    """A horizontal reference line; ``soft`` draws it dashed."""

    value: float
    label: str
    soft: bool = False


@dataclass(frozen=True)
class Upright:
    """A dashed upright line, as an inspection; one of a row may carry the label."""

    value: float
    label: str = ""


@dataclass(frozen=True)
class Point:
    """A marked point, as the size found today."""

    x: float
    y: float
    label: str


@dataclass(frozen=True)
class Chart:
    """What a line chart shows; axis labels carry their unit ("crack length 2a, mm")."""

    title: str
    x_label: str
    y_label: str
    series: Sequence[Series]
    levels: Sequence[Level] = ()
    point: Point | None = None
    uprights: Sequence[Upright] = ()
    x_log: bool = False
    description: str = field(default="")

    def __post_init__(self) -> None:
        """Refuse what cannot be drawn, saying what was read."""
        for series in self.series:
            if len(series.x) != len(series.y):
                raise ValueError(
                    UNEQUAL.format(
                        title=self.title,
                        name=series.name,
                        x=len(series.x),
                        y=len(series.y),
                    )
                )
        if max((len(series.x) for series in self.series), default=0) < 2:
            raise ValueError(EMPTY.format(title=self.title))
        for where, value in self._values():
            if not math.isfinite(value):
                raise ValueError(
                    NOT_A_NUMBER.format(title=self.title, where=where, value=value)
                )

    def _values(self) -> Iterator[tuple[str, float]]:
        for series in self.series:
            for value in (*series.x, *series.y):
                yield f"series “{series.name}”", value
        for level in self.levels:
            yield f"level “{level.label}”", level.value
        if self.point is not None:
            yield "the marked point", self.point.x
            yield "the marked point", self.point.y
        for upright in self.uprights:
            yield f"upright “{upright.label}”", upright.value

    @cached_property
    def x_axis(self) -> Axis:
        """The axis over every curve and the marked point."""
        values = [x for series in self.series for x in series.x]
        values += [upright.value for upright in self.uprights]
        values += [self.point.x] if self.point else []
        if self.x_log:
            return log_axis(min(values), max(values))
        return nice_axis(min(values), max(values))

    @cached_property
    def y_axis(self) -> Axis:
        """The axis over every curve, reference line and the marked point."""
        values = [y for series in self.series for y in series.y]
        values += [level.value for level in self.levels]
        values += [self.point.y] if self.point else []
        return nice_axis(min(values), max(values))

    @cached_property
    def plot(self) -> Box:
        """The area of the curves; its left edge leaves room for the figures."""
        figures = (self.y_axis.label(tick) for tick in self.y_axis.ticks)
        widest = max(svg.text_width(words) for words in figures)
        title = LINE * len(self.y_words)
        return Box(left=widest + title + 13.0, top=TOP, right=RIGHT, bottom=BOTTOM)

    @cached_property
    def y_words(self) -> list[str]:
        """The title of the upright axis, in two lines if one were too long."""
        words = self.y_label.split(" ")
        if svg.text_width(self.y_label) <= HEIGHT - 10 or len(words) < 2:
            return [self.y_label]
        halves = (
            (" ".join(words[:cut]), " ".join(words[cut:]))
            for cut in range(1, len(words))
        )
        return list(min(halves, key=lambda pair: max(map(svg.text_width, pair))))

    @property
    def words_area(self) -> Box:
        """Where labels may stand: the plot and the margin above it."""
        return Box(self.plot.left, 2.0, RIGHT, BOTTOM)

    def at(self, x: float, y: float) -> tuple[float, float]:
        """Where a value lies on the drawing."""
        across = self.x_axis.share(x)
        return (
            self.plot.left + across * (RIGHT - self.plot.left),
            BOTTOM - self.y_axis.share(y) * (BOTTOM - TOP),
        )

    @cached_property
    def curves(self) -> tuple[tuple[tuple[float, float], ...], ...]:
        """Each series as points of the drawing."""
        return tuple(
            tuple(self.at(x, y) for x, y in zip(series.x, series.y, strict=True))
            for series in self.series
        )


def chart_svg(chart: Chart) -> str:
    """The chart as one SVG element."""
    return svg.root(
        [
            *_grid(chart),
            *_levels(chart),
            *_uprights(chart),
            *_curves(chart),
            *_labels(chart),
        ],
        size=(WIDTH, HEIGHT),
        class_="chart",
        title=chart.title,
        description=chart.description or _summary(chart),
    )


def _summary(chart: Chart) -> str:
    """The chart in words, for those who cannot see it."""
    words = [f"{chart.y_label} against {chart.x_label}."]
    for series in chart.series:
        words.append(
            f"{series.name}: from {series.y[0]:,.4g} at {series.x[0]:,.4g} "
            f"to {series.y[-1]:,.4g} at {series.x[-1]:,.4g}."
        )
    words += [f"{level.label}: {level.value:,.4g}." for level in chart.levels]
    if chart.point:
        words.append(
            f"{chart.point.label}: {chart.point.y:,.4g} at {chart.point.x:,.4g}."
        )
    words += [f"{one.label}: at {one.value:,.4g}." for one in chart.uprights]
    return " ".join(words)


def _grid(chart: Chart) -> Iterator[str]:
    """Hairlines, figures and the two axis titles."""
    for tick in chart.x_axis.ticks:
        x, _ = chart.at(tick, chart.y_axis.low)
        yield svg.tag("line", class_="grid", x1=x, x2=x, y1=TOP, y2=BOTTOM)
    for tick in chart.y_axis.ticks:
        _, y = chart.at(chart.x_axis.low, tick)
        yield svg.tag("line", class_="grid", x1=chart.plot.left, x2=RIGHT, y1=y, y2=y)
    yield from (label.drawn("tick") for label in _tick_labels(chart))
    middle = (chart.plot.left + RIGHT) / 2
    yield Label(chart.x_label, middle, HEIGHT - 6, "middle").drawn("axis")
    height = (TOP + BOTTOM) / 2 if len(chart.y_words) == 1 else HEIGHT / 2
    for row, words in enumerate(chart.y_words):
        place = (
            f"translate({svg.number(11 + LINE * row)} {svg.number(height)}) rotate(-90)"
        )
        yield svg.tag(
            "text",
            svg.text(words),
            class_="axis",
            transform=place,
            text_anchor="middle",
        )


def _tick_labels(chart: Chart) -> Iterator[Label]:
    """Figures of both axes, thinned where they would touch, pulled in at the edge."""
    reached = -math.inf
    for tick in chart.x_axis.ticks:
        x, _ = chart.at(tick, chart.y_axis.low)
        words = chart.x_axis.label(tick)
        x = min(x, WIDTH - 2 - svg.text_width(words) / 2)
        label = Label(words, x, BOTTOM + 15, "middle")
        if label.box.left > reached:
            reached = label.box.right + 4
            yield label
    for tick in chart.y_axis.ticks:
        _, y = chart.at(chart.x_axis.low, tick)
        yield Label(chart.y_axis.label(tick), chart.plot.left - 6, y + 3.5, "end")


def _levels(chart: Chart) -> Iterator[str]:
    for level in chart.levels:
        _, y = chart.at(chart.x_axis.low, level.value)
        class_ = "h2" if level.soft else "h1"
        yield svg.tag("line", class_=class_, x1=chart.plot.left, x2=RIGHT, y1=y, y2=y)


def _uprights(chart: Chart) -> Iterator[str]:
    for upright in chart.uprights:
        x, _ = chart.at(upright.value, chart.y_axis.low)
        yield svg.tag("line", class_="up", x1=x, x2=x, y1=TOP, y2=BOTTOM)


def _curves(chart: Chart) -> Iterator[str]:
    for number, curve in enumerate(chart.curves, start=1):
        yield svg.tag("path", class_=f"c{min(number, 3)}", d=svg.path(curve))
    if chart.point:
        x, y = chart.at(chart.point.x, chart.point.y)
        yield svg.tag("circle", class_="pt", cx=x, cy=y, r=4.0)


def _labels(chart: Chart) -> Iterator[str]:
    """Words beside the point, the reference lines and the curves, kept apart."""
    taken: list[Box] = []
    if chart.point:
        x, y = chart.at(chart.point.x, chart.point.y)
        taken.append(Box(x - 5, y - 5, x + 5, y + 5))
        yield _placed(chart, _beside(chart.point.label, x, y), taken, "label b")
    for level in chart.levels:
        _, y = chart.at(chart.x_axis.low, level.value)
        yield _placed(chart, _along(level.label, chart.plot, y), taken, "label")
    for upright in chart.uprights:
        if upright.label:
            x, _ = chart.at(upright.value, chart.y_axis.low)
            yield _placed(chart, _upright_label(upright.label, x), taken, "label")
    if len(chart.series) > 1:
        for series, curve in zip(chart.series, chart.curves, strict=True):
            places = [
                label
                for index in (-1, len(curve) // 2, len(curve) // 4, 0)
                for label in _beside(series.name, *curve[index])
            ]
            yield _placed(chart, places, taken, "label")


def _placed(chart: Chart, places: list[Label], taken: list[Box], class_: str) -> str:
    """The best of the places, added to what is taken.

    One free of curves and words if there is one; else free of words; else the first
    inside the plot, so that no label is lost.
    """
    rules = [_level_line(chart, level) for level in chart.levels]
    label = (
        svg.first_free(
            places, within=chart.words_area, taken=taken, lines=[*chart.curves, *rules]
        )
        or svg.first_free(
            places, within=chart.words_area, taken=taken, lines=chart.curves
        )
        or svg.first_free(places, within=chart.words_area, taken=taken)
        or svg.first_free(places, within=chart.words_area, taken=())
        or places[0]
    )
    taken.append(label.box)
    return label.drawn(class_)


def _level_line(chart: Chart, level: Level) -> tuple[tuple[float, float], ...]:
    _, y = chart.at(chart.x_axis.low, level.value)
    return (chart.plot.left, y), (RIGHT, y)


def _beside(words: str, x: float, y: float) -> list[Label]:
    """Places around a point, right and above first."""
    return [
        Label(words, x + across, y + down, anchor)
        for down in (-7.0, 16.0, -20.0, 29.0)
        for across, anchor in ((7.0, "start"), (-7.0, "end"), (0.0, "middle"))
    ]


def _along(words: str, plot: Box, y: float) -> list[Label]:
    """Places along a horizontal line, at its right end above it first."""
    ends = ((RIGHT - 4, "end"), (plot.left + 4, "start"))
    steps = [
        (RIGHT - share * (RIGHT - plot.left), "middle") for share in (0.3, 0.5, 0.7)
    ]
    return [
        Label(words, x, y + down, anchor)
        for x, anchor in (*ends, *steps)
        for down in (-5.0, 13.0)
    ]


def _upright_label(words: str, x: float) -> list[Label]:
    """Places beside an upright line, at its top first."""
    heights = [TOP + 10 + share * (BOTTOM - TOP - 16) for share in (0, 0.2, 0.4, 1)]
    return [
        Label(words, x + across, y, anchor)
        for y in heights
        for across, anchor in ((4.0, "start"), (-4.0, "end"))
    ]
