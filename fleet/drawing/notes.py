"""What stands below a structure map: scale bar, view, datum and legend."""

from __future__ import annotations

from collections.abc import Iterator

from fleet.drawing import svg
from fleet.drawing.sheet import Sheet
from fleet.drawing.svg import Box, Label
from fleet.drawing.symbols import symbol

UNIT_MM = {"in": 25.4, "mm": 1.0}
UNIT_WORDS = {"in": "inches", "mm": "millimetres"}
LINE = 18.0
_BARS = [size * 10.0**power for power in range(-1, 5) for size in (1.0, 2.0, 5.0)]

Piece = tuple[str, str]


def view_words(sheet: Sheet) -> str:
    """From where one looks, and which way round the drawing lies."""
    section = sheet.section
    if section.skins == ("left", "right"):
        return (
            f"{section.title}, both skins opened at the rear edge and seen from "
            "outside, root to the left, RH above"
        )
    if not section.is_shell:
        skin = f"{sheet.skin} skin" if sheet.skin else "upper and lower skin"
        where = "below" if sheet.skin == "lower" else "above"
        root = "right" if sheet.turned else "left"
        return f"{section.title}, {skin} seen from {where}, root to the {root}, fwd up"
    if sheet.turned:
        return (
            f"{section.title}, RH side seen from outside, nose to the right, crown up"
        )
    if sheet.left_side:
        return f"{section.title}, LH side seen from outside, nose to the left, crown up"
    return (
        f"{section.title}, unrolled and seen from outside, nose to the left, RH above"
    )


def datum_words(sheet: Sheet, unit: str) -> str:
    """What the station labels count from, and to what size the drawing is true."""
    section = sheet.section
    word = section.station_words[0] if section.station_words else "station"
    words = [f"{word} in {UNIT_WORDS[unit]}, datum {section.datum_text}"]
    if sheet.variant is None and section.plugs:
        words.append("plugs of all variants shown")
    if section.is_shell and len({size for _, size in section.profile}) > 1:
        radius = section.reference_mm / UNIT_MM[unit]
        words.append(f"true across at radius {radius:g} {unit}")
    return " · ".join(words)


def foot(sheet: Sheet, unit: str) -> Iterator[str]:
    """The scale bar with its length, an arrow to the front, view and datum."""
    plot, top = sheet.plot, sheet.plot.bottom + 34
    room = (plot.right - plot.left) / 6
    fitting = [bar for bar in _BARS if bar * UNIT_MM[unit] * sheet.scale <= room]
    bar = max(fitting, default=_BARS[0])
    long = bar * UNIT_MM[unit] * sheet.scale
    n = svg.number
    ends = f"M{n(plot.left)} {n(top - 4)} v8 m0 -4 h{n(long)} m0 -4 v8"
    yield svg.tag("path", class_="scale", d=ends)
    size = Label(f"{bar:g} {unit}", plot.left + long + 6, top + 4)
    yield size.drawn("tick")
    yield from _arrow(sheet, size.box.right + 24, top)
    words = [view_words(sheet), datum_words(sheet, unit)]
    beside = max(map(svg.text_width, words)) < plot.right - size.box.right - 110
    for number, line in enumerate(words):
        if beside:
            label = Label(line, plot.right, top + 4 + number * 15, "end")
        else:
            label = Label(line, plot.left, top + 22 + number * 15)
        yield label.drawn("tick")


def _arrow(sheet: Sheet, x: float, y: float) -> Iterator[str]:
    """Which way the low end of the station axis lies."""
    section = sheet.section
    word = "FWD" if section.is_shell else "ROOT"
    n = svg.number
    wide = svg.text_width(word)
    if sheet.turned:
        yield Label(word, x, y + 4).drawn("tick")
        head = f"M{n(x + wide + 6)} {n(y)} h22 m-6 -4 l6 4 l-6 4"
    else:
        head = f"M{n(x)} {n(y)} h22 m-16 -4 l-6 4 l6 4"
        yield Label(word, x + 28, y + 4).drawn("tick")
    yield svg.tag("path", class_="scale", d=head)


def legend(pieces: list[Piece], *, left: float, top: float, width: float) -> list[str]:
    """Marks with their words in rows, as many as fit."""
    drawn: list[str] = []
    x, y = left, top
    for mark, words in pieces:
        wide = 30 + svg.text_width(words) + 14
        if x + wide > width and x > left:
            x, y = left, y + LINE
        drawn.append(_sample(mark, x + 11, y))
        drawn.append(Label(words, x + 26, y + 4).drawn("tick"))
        x += wide
    return drawn


def legend_rows(pieces: list[Piece], *, left: float, width: float) -> int:
    """How many rows the legend takes."""
    rows, x = 1 if pieces else 0, left
    for _, words in pieces:
        wide = 30 + svg.text_width(words) + 14
        if x + wide > width and x > left:
            rows, x = rows + 1, left
        x += wide
    return rows


def _sample(mark: str, x: float, y: float) -> str:
    """A small picture of what a legend line explains."""
    if mark == "joint":
        return svg.tag("line", class_="joint", x1=x - 11, x2=x + 11, y1=y, y2=y)
    if mark == "panel":
        return svg.tag("line", class_="panel", x1=x - 11, x2=x + 11, y1=y, y2=y)
    if mark == "cutout":
        return svg.tag(
            "rect", class_="cutout", x=x - 8, y=y - 6, width=16, height=12, rx=3
        )
    if mark == "planned":
        return svg.tag(
            "rect", class_="repair planned", x=x - 10, y=y - 6, width=20, height=12
        )
    if mark in ("repair", "hides"):
        outer = svg.tag("rect", class_="repair", x=x - 10, y=y - 6, width=20, height=12)
        outer += svg.tag(
            "rect", class_="repair in", x=x - 7.5, y=y - 3.5, width=15, height=7
        )
        box = Box(x - 10, y - 6, x + 10, y + 6)
        return outer + crossed(box) if mark == "hides" else outer
    if mark == "extent":
        return svg.tag("rect", class_="extent", x=x - 9, y=y - 6, width=18, height=12)
    return symbol(mark, x, y)


def crossed(box: Box) -> str:
    """Two strokes corner to corner, for a repair with damage beneath it."""
    n = svg.number
    ends = (
        f"M{n(box.left)} {n(box.top)} L{n(box.right)} {n(box.bottom)} "
        f"M{n(box.left)} {n(box.bottom)} L{n(box.right)} {n(box.top)}"
    )
    return svg.tag("path", class_="repair cross-out", d=ends)
