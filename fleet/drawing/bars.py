"""Bars to both sides of a base value as SVG text, the longest first.

How an answer moves when each input is less and when it is more: less is an outline,
more is filled, and both values are printed, so that the drawing reads in grey.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import cached_property

from fleet.drawing import svg
from fleet.drawing.svg import Label

WIDTH, RIGHT = 560.0, 500.0
HEAD, ROW, FOOT, BAR = 30.0, 30.0, 8.0, 9.0
GAP, NARROWEST, WIDEST = 8.0, 120.0, 210.0
VALUE_ROOM = 62.0
NO_ANSWER = "no answer"
EMPTY = "Bars “{title}” have no rows; leave the drawing out and say so."
NOT_A_NUMBER = "Bars “{title}”: {label} reads {value}, which cannot be drawn."


@dataclass(frozen=True, slots=True)
class Bar:
    """One input, how far it is moved, and the answers less and more; None is none."""

    label: str
    step: str
    less: float | None
    more: float | None
    less_words: str = NO_ANSWER
    more_words: str = NO_ANSWER


@dataclass(frozen=True)
class Bars:
    """What the drawing shows; the base and the words of the values carry their unit."""

    title: str
    base: float
    base_words: str
    rows: Sequence[Bar]

    def __post_init__(self) -> None:
        """Refuse what cannot be drawn, saying what was read."""
        if not self.rows:
            raise ValueError(EMPTY.format(title=self.title))
        for row in self.rows:
            for value in (row.less, row.more):
                if value is not None and not math.isfinite(value):
                    raise ValueError(
                        NOT_A_NUMBER.format(
                            title=self.title, label=row.label, value=value
                        )
                    )

    @cached_property
    def height(self) -> float:
        """Room for the head and every row."""
        return HEAD + ROW * len(self.rows) + FOOT

    @cached_property
    def left(self) -> float:
        """Where the bars may begin: behind the longest label and a value."""
        longest = max(svg.text_width(row.label) for row in self.rows)
        return min(max(longest, NARROWEST), WIDEST) + GAP + VALUE_ROOM

    @cached_property
    def span(self) -> tuple[float, float]:
        """The least and the greatest value, with the base between."""
        values = [self.base]
        for row in self.rows:
            values += [value for value in (row.less, row.more) if value is not None]
        low, high = min(values), max(values)
        return (low, high) if high > low else (low - 1, high + 1)

    def at(self, value: float) -> float:
        """Where a value lies across."""
        low, high = self.span
        return self.left + (value - low) / (high - low) * (RIGHT - self.left)


def bars_svg(bars: Bars) -> str:
    """The drawing as one SVG element."""
    return svg.root(
        [
            *_base(bars),
            *(part for n in range(len(bars.rows)) for part in _row(bars, n)),
        ],
        size=(WIDTH, bars.height),
        class_="chart",
        title=bars.title,
        description=_summary(bars),
    )


def _summary(bars: Bars) -> str:
    words = [f"Base {bars.base_words}."]
    for row in bars.rows:
        ends = f"{row.less_words} when less, {row.more_words} when more."
        words.append(f"{row.label} {row.step}: {ends}")
    return " ".join(words)


def _base(bars: Bars) -> Iterator[str]:
    """The upright line of the base value, its words, and what the two bars mean."""
    x = bars.at(bars.base)
    yield svg.tag("line", class_="base", x1=x, x2=x, y1=HEAD - 6, y2=bars.height - FOOT)
    half = svg.text_width(bars.base_words) / 2
    middle = min(max(x, half + 2), WIDTH - half - 2)
    yield Label(bars.base_words, middle, HEAD - 12, "middle").drawn("label b")


def _row(bars: Bars, number: int) -> Iterator[str]:
    row, top = bars.rows[number], HEAD + ROW * number
    yield Label(_cut(row.label), 2.0, top + 9).drawn("axis")
    yield Label(row.step, 2.0, top + 21).drawn("tick")
    if number:
        yield svg.tag("line", class_="grid", x1=0, x2=WIDTH, y1=top - 3, y2=top - 3)
    sides = (
        (row.less, row.less_words, "less", 1.0),
        (row.more, row.more_words, "more", 2.0 + BAR),
    )
    for value, words, class_, down in sides:
        if value is None:
            yield Label(words, bars.at(bars.base) + 4, top + down + 7).drawn("tick")
            continue
        yield from _bar(bars, value, words, class_, top + down)


def _bar(
    bars: Bars, value: float, words: str, class_: str, top: float
) -> Iterator[str]:
    base, end = bars.at(bars.base), bars.at(value)
    if abs(end - base) >= 0.5:
        yield svg.tag(
            "rect",
            class_=class_,
            x=min(base, end),
            y=top,
            width=abs(end - base),
            height=BAR - 1,
        )
    outward = end < base
    place = Label(
        words, end - 4 if outward else end + 4, top + 7, "end" if outward else "start"
    )
    yield place.drawn("tick")


def _cut(words: str) -> str:
    """A label that is too long ends in an ellipsis; the table beside has it whole."""
    if svg.text_width(words) <= WIDEST:
        return words
    while svg.text_width(words + "…") > WIDEST:
        words = words[:-1]
    return words.rstrip() + "…"
