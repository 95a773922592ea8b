"""Small pieces every drawing needs: elements, numbers, text widths, free places.

Drawings carry classes only: the site's style sheet gives them their look, so a
strict content-security policy holds and paper and dark screens need no new drawing.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from html import escape
from itertools import pairwise

TEXT_SIZE = 11.0
"""Height of drawing text in user units, as in the style sheet's ``svg text``."""

_NARROW = frozenset("fijlrtI.,:;'|!()[] -·/")
_WIDE = frozenset("mwMW—%@")


def number(value: float) -> str:
    """Coordinate with at most one decimal, and never ``-0``."""
    text = f"{value:.1f}".removesuffix(".0")
    return "0" if text == "-0" else text


def tag(name: str, *children: str, **attributes: str | float | None) -> str:
    """One element: ``class_`` is class, ``text_anchor`` text-anchor, None is left out.

    Children are markup already; put ``text()`` around words.
    """
    parts = [name]
    for key, value in attributes.items():
        if value is None:
            continue
        shown = value if isinstance(value, str) else number(value)
        attribute = key.removesuffix("_").replace("_", "-")
        parts.append(f'{attribute}="{escape(shown)}"')
    opening = " ".join(parts)
    return f"<{opening}>{''.join(children)}</{name}>" if children else f"<{opening}/>"


def text(words: str) -> str:
    """Words made safe for markup."""
    return escape(words)


def root(
    body: Iterable[str],
    *,
    size: tuple[float, float],
    class_: str,
    title: str,
    description: str,
    role: str = "img",
) -> str:
    """The outer element, named by its title and explained by its description.

    A drawing with links inside takes ``role="group"``: an image hides its links.
    """
    head = [tag("title", text(title)), tag("desc", text(description))]
    return tag(
        "svg",
        *head,
        *body,
        class_=class_,
        role=role,
        aria_label=title,
        viewBox=f"0 0 {number(size[0])} {number(size[1])}",
    )


def path(points: Sequence[tuple[float, float]], *, closed: bool = False) -> str:
    """Path data through points."""
    steps = " L".join(f"{number(x)} {number(y)}" for x, y in points)
    return f"M{steps}{' Z' if closed else ''}"


def text_width(words: str, *, size: float = TEXT_SIZE) -> float:
    """Width estimated on the wide side of common sans-serif faces."""
    ems = sum(
        0.36 if letter in _NARROW else 0.98 if letter in _WIDE else 0.64
        for letter in words
    )
    return ems * size


@dataclass(frozen=True)
class Box:
    """A rectangle of the drawing, y downwards."""

    left: float
    top: float
    right: float
    bottom: float

    def meets(self, other: Box) -> bool:
        """Whether the two share area."""
        return (
            self.left < other.right
            and other.left < self.right
            and self.top < other.bottom
            and other.top < self.bottom
        )

    def inside(self, outer: Box) -> bool:
        """Whether this lies wholly within the other."""
        return (
            self.left >= outer.left
            and self.right <= outer.right
            and self.top >= outer.top
            and self.bottom <= outer.bottom
        )

    def crossed_by(self, points: Sequence[tuple[float, float]]) -> bool:
        """Whether the polyline through the points enters the rectangle."""
        return any(self._crossed(start, end) for start, end in pairwise(points))

    def _crossed(self, start: tuple[float, float], end: tuple[float, float]) -> bool:
        """Clip the segment against each side (Liang and Barsky 1984)."""
        enter, leave = 0.0, 1.0
        run, rise = end[0] - start[0], end[1] - start[1]
        for step, room in (
            (-run, start[0] - self.left),
            (run, self.right - start[0]),
            (-rise, start[1] - self.top),
            (rise, self.bottom - start[1]),
        ):
            if step == 0:
                if room < 0:
                    return False
            elif step < 0:
                enter = max(enter, room / step)
            else:
                leave = min(leave, room / step)
        return enter <= leave


@dataclass(frozen=True)
class Label:
    """Words at a base point, with the side they grow to."""

    words: str
    x: float
    y: float
    anchor: str = "start"

    @property
    def box(self) -> Box:
        """The area the words take."""
        width = text_width(self.words)
        left = self.x - {"start": 0.0, "middle": width / 2, "end": width}[self.anchor]
        return Box(left, self.y - 0.8 * TEXT_SIZE, left + width, self.y + 3)

    def drawn(self, class_: str) -> str:
        """The text element."""
        return tag(
            "text",
            text(self.words),
            class_=class_,
            x=self.x,
            y=self.y,
            text_anchor=None if self.anchor == "start" else self.anchor,
        )


def first_free(
    candidates: Iterable[Label],
    *,
    within: Box,
    taken: Iterable[Box],
    lines: Iterable[Sequence[tuple[float, float]]] = (),
) -> Label | None:
    """The first label inside the drawing that covers nothing; None if there is none."""
    taken, lines = tuple(taken), tuple(lines)
    for label in candidates:
        box = label.box
        if (
            box.inside(within)
            and not any(box.meets(other) for other in taken)
            and not any(box.crossed_by(line) for line in lines)
        ):
            return label
    return None
