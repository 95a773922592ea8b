"""One mark per damage type, told apart by shape alone so that grey print will do.

Each draws about a centre within half a width and half a height. Strokes and fills come
from the style sheet: ``mark`` is open, ``mark full`` filled with ink, ``mark soft``
with grey.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from fleet.drawing import svg

LEAST = 5.0
"""Half size of the smallest mark; anything smaller on the aircraft is drawn so."""

MOST = 12.0
"""Half size of the largest mark; a larger extent gets an outline of its own."""

Draw = Callable[[float, float, float, float], str]


@dataclass(frozen=True)
class Symbol:
    """How a damage type is drawn: class and shape."""

    fill: str
    draw: Draw


def _lines(*strokes: list[tuple[float, float]]) -> Draw:
    """Open strokes through points given in half sizes."""

    def draw(x: float, y: float, w: float, h: float) -> str:
        paths = (svg.path([(x + a * w, y + b * h) for a, b in one]) for one in strokes)
        return svg.tag("path", class_="stroke", d=" ".join(paths))

    return draw


def _area(*corners: tuple[float, float]) -> Draw:
    """A closed shape with corners given in half sizes."""

    def draw(x: float, y: float, w: float, h: float) -> str:
        points = [(x + a * w, y + b * h) for a, b in corners]
        return svg.tag("path", d=svg.path(points, closed=True))

    return draw


def _disc(x: float, y: float, w: float, h: float) -> str:
    return svg.tag("ellipse", cx=x, cy=y, rx=w, ry=h)


def _target(x: float, y: float, w: float, h: float) -> str:
    dot = svg.tag("circle", class_="dot", cx=x, cy=y, r=2.0)
    return _disc(x, y, w, h) + dot


def _crack(x: float, y: float, w: float, h: float) -> str:
    """A zigzag along the longer side of the extent, at least 16 units long."""
    long = [(-1.0, 0.25), (-0.35, -0.4), (0.15, 0.4), (1.0, -0.35)]
    if h > w:
        shape = [(b * LEAST * 1.6, a * max(h, 8.0)) for a, b in long]
    else:
        shape = [(a * max(w, 8.0), b * LEAST * 1.6) for a, b in long]
    points = [(x + a, y + b) for a, b in shape]
    return svg.tag("path", class_="stroke", d=svg.path(points))


def _half_disc(x: float, y: float, w: float, h: float) -> str:
    n = svg.number
    lower = f"M{n(x - w)} {n(y)} A{n(w)} {n(h)} 0 0 0 {n(x + w)} {n(y)} Z"
    return _disc(x, y, w, h) + svg.tag("path", class_="dot", d=lower)


_TRIANGLE = _area((0, -1), (1, 0.85), (-1, 0.85))
_SQUARE = _area((-0.85, -0.85), (0.85, -0.85), (0.85, 0.85), (-0.85, 0.85))

SYMBOLS = {
    "dent": Symbol("soft", _disc),
    "scratch": Symbol("", _lines([(-1, 0.8), (1, -0.8)])),
    "gouge": Symbol("", _lines([(-1, 0.4), (0.6, -1)], [(-0.6, 1), (1, -0.4)])),
    "nick": Symbol("", _lines([(-1, -0.8), (0, 0.8), (1, -0.8)])),
    "crack": Symbol("", _crack),
    "corrosion": Symbol("full", _TRIANGLE),
    "hole": Symbol("", _target),
    "crease": Symbol(
        "",
        _lines([(-1.2, 0.5), (-0.7, -0.5), (-0.2, 0.5), (0.3, -0.5), (0.8, 0.5)]),
    ),
    "delamination": Symbol(
        "", _lines([(-1, -0.7), (1, -0.7)], [(-1, 0), (1, 0)], [(-1, 0.7), (1, 0.7)])
    ),
    "disbond": Symbol("", _disc),
    "impact": Symbol(
        "", _lines([(-0.9, -0.9), (0.9, 0.9)], [(-0.9, 0.9), (0.9, -0.9)])
    ),
    "lightning": Symbol("", _area((0, -1.2), (1, 0), (0, 1.2), (-1, 0))),
    "heat": Symbol("", _half_disc),
    "wear": Symbol("", _SQUARE),
    "fastener": Symbol("full", _SQUARE),
    "bird_strike": Symbol("", _TRIANGLE),
}

UNKNOWN_TYPE = (
    "No mark is known for damage type “{kind}”; known are {known}. "
    "Add its shape to fleet/drawing/symbols.py."
)


def symbol(kind: str, x: float, y: float, w: float = LEAST, h: float = LEAST) -> str:
    """The mark of a damage type about a centre; sizes are held to what can be read."""
    if kind not in SYMBOLS:
        known = ", ".join(sorted(SYMBOLS))
        raise ValueError(UNKNOWN_TYPE.format(kind=kind, known=known))
    shape = SYMBOLS[kind]
    w, h = (min(max(size, LEAST), MOST) for size in (w, h))
    class_ = " ".join(("mark", shape.fill)).rstrip()
    return svg.tag("g", shape.draw(x, y, w, h), class_=class_)
