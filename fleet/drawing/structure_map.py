"""The structure map: a scaled drawing of an unrolled section with what was found on it.

Frames and stringers are hairlines with their names on the edges, panels a heavier line,
joints a chain line, cut-outs outlines, repairs double outlines, findings a mark of
their own at their size. Decide in the data objects, then draw; no queries here.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from typing import TypeVar

from fleet.drawing import notes, skeleton, svg
from fleet.drawing.sheet import Sheet
from fleet.drawing.svg import Box, Label
from fleet.drawing.symbols import LEAST, MOST, symbol

Span = tuple[float, float]
HALO = MOST + 5
REPAIRS = {
    "repair": "repair",
    "planned": "repair planned or in work",
    "hides": "repair over damage not shown to be removed",
}


@dataclass(frozen=True)
class MapMark:
    """A finding on the map [mm on the drawing's axes].

    ``across`` is None when the location says nothing of the circumference: such a
    finding cannot be drawn and is named below the map. ``faded`` is for damage that no
    longer remains.
    """

    label: str
    kind: str
    kind_words: str
    title: str
    href: str
    along: Span
    across: Span | None
    focus: bool = False
    faded: bool = False


@dataclass(frozen=True)
class MapRepair:
    """A repair on the map [mm on the drawing's axes]."""

    label: str
    title: str
    href: str
    along: Span
    across: Span | None
    focus: bool = False
    faded: bool = False
    planned: bool = False
    hides: bool = False

    @property
    def mark(self) -> str:
        """Which of the marks of the legend it bears: dashed, crossed or plain."""
        if self.planned:
            return "planned"
        return "hides" if self.hides else "repair"


@dataclass(frozen=True)
class StructureMap:
    """What a structure map shows; ``unit`` is the type's, "in" or "mm"."""

    title: str
    sheet: Sheet
    unit: str
    marks: Sequence[MapMark] = ()
    repairs: Sequence[MapRepair] = ()

    @cached_property
    def drawn_marks(self) -> list[tuple[MapMark, Box]]:
        """The findings inside the window, each with its true extent on paper."""
        return list(_on_paper(self.sheet, self.marks))

    @cached_property
    def drawn_repairs(self) -> list[tuple[MapRepair, Box]]:
        """The repairs inside the window, each with its true extent on paper."""
        return list(_on_paper(self.sheet, self.repairs))

    @property
    def undrawn(self) -> list[str]:
        """Labels of those that lie along the window but nowhere across."""
        items: list[MapMark | MapRepair] = [*self.marks, *self.repairs]
        return [
            item.label
            for item in items
            if item.across is None and self.sheet.clip(item.along)
        ]


Item = TypeVar("Item", MapMark, MapRepair)


def _on_paper(sheet: Sheet, items: Iterable[Item]) -> Iterator[tuple[Item, Box]]:
    for item in items:
        along = sheet.clip(item.along)
        if item.across is None or along is None:
            continue
        for across in sheet.spans(*item.across):
            yield item, sheet.corners(along, across)


def structure_map_svg(map_: StructureMap) -> str:
    """The map as one SVG element; every item is a link named by its title."""
    sheet = map_.sheet
    pieces = _legend(map_)
    top = sheet.plot.bottom + 90
    rows = notes.legend_rows(pieces, left=sheet.plot.left, width=sheet.width)
    names = [
        *skeleton.edge_names(sheet),
        *skeleton.side_names(sheet),
        *skeleton.cutout_names(sheet),
    ]
    body = [
        *skeleton.skeleton(sheet),
        *(name.drawn("tick") for name in names),
        *_items(map_, names),
        *notes.foot(sheet, map_.unit),
        *notes.legend(pieces, left=sheet.plot.left, top=top, width=sheet.width),
    ]
    return svg.root(
        body,
        size=(sheet.width, top - notes.LINE / 2 + rows * notes.LINE),
        class_="map",
        title=map_.title,
        description=_summary(map_),
        role="group",
    )


def _summary(map_: StructureMap) -> str:
    """The map in a sentence."""
    findings = len({mark.label for mark, _ in map_.drawn_marks})
    repairs = len({repair.label for repair, _ in map_.drawn_repairs})
    words = f"{notes.view_words(map_.sheet)}. Findings: {findings}; repairs: {repairs}."
    if map_.undrawn:
        words += f" No place across, so not drawn: {', '.join(map_.undrawn)}."
    return words


def _legend(map_: StructureMap) -> list[notes.Piece]:
    """One entry for each kind of thing on the map, and for nothing else."""
    kinds = {mark.kind: mark.kind_words for mark, _ in map_.drawn_marks}
    pieces = sorted(kinds.items(), key=lambda piece: piece[1])
    if any(_outlined(box) for _, box in map_.drawn_marks):
        pieces.append(("extent", "extent of a finding"))
    there = {repair.mark for repair, _ in map_.drawn_repairs}
    pieces += [(mark, words) for mark, words in REPAIRS.items() if mark in there]
    shown = "".join(skeleton.skeleton(map_.sheet))
    for class_, words in (
        ("cutout", "cut-out"),
        ("joint", "joint"),
        ("panel", "panel edge"),
    ):
        if f'class="{class_}"' in shown:
            pieces.append((class_, words))
    return pieces


def _items(map_: StructureMap, names: Sequence[Label]) -> Iterator[str]:
    """Repairs below, marks above them, what the page is about on top.

    That is named first, the others where room is left.
    """
    taken = [name.box for name in names]
    taken += [_marked(mark, box) for mark, box in map_.drawn_marks]
    for _, box in map_.drawn_repairs:
        taken += _sides(_least(box))
    page = Box(2, 2, map_.sheet.width - 2, map_.sheet.plot.bottom + 2)
    entries: list[tuple[MapMark | MapRepair, str, list[Label]]] = [
        (repair, _repair(repair, box), _around_repair(repair.label, _least(box)))
        for repair, box in map_.drawn_repairs
    ]
    entries += [
        (mark, _mark(mark, box), _around_mark(mark.label, _marked(mark, box)))
        for mark, box in map_.drawn_marks
    ]
    links: list[tuple[bool, str]] = []
    for item, drawing, places in sorted(entries, key=lambda one: not one[0].focus):
        label = _name(places, page, taken, focus=item.focus)
        links.append((item.focus, _link(item, drawing, label)))
    yield from (link for focus, link in links if not focus)
    yield from (link for focus, link in links if focus)


def _name(
    places: list[Label], page: Box, taken: list[Box], *, focus: bool
) -> Label | None:
    """The first free place; none if there is none, for names over names help nobody.

    What the page is about may be named farther off, and is named in any case.
    """
    if focus:
        moved = (-14.0, 14.0, -28.0, 28.0, -42.0, 42.0)
        places = places + [replace(one, y=one.y + d) for d in moved for one in places]
    label = svg.first_free(places, within=page, taken=taken)
    if label is None and focus:
        label = places[0]
    if label is not None:
        taken.append(label.box)
    return label


def _link(item: MapMark | MapRepair, drawing: str, label: Label | None) -> str:
    """The item as a link that says what it is when pointed at or read out."""
    classes = ["finding-item" if isinstance(item, MapMark) else "repair-item"]
    classes += ["focus"] if item.focus else []
    classes += ["faded"] if item.faded else []
    return svg.tag(
        "a",
        svg.tag("title", svg.text(item.title)),
        drawing,
        label.drawn("item") if label else "",
        class_=" ".join(classes),
        href=item.href,
        aria_label=item.title,
    )


def _centre(box: Box) -> tuple[float, float]:
    return (box.left + box.right) / 2, (box.top + box.bottom) / 2


def _marked(mark: MapMark, box: Box) -> Box:
    """The paper that a finding's mark takes, with its halo."""
    x, y = _centre(box)
    w = min(max((box.right - box.left) / 2, LEAST), MOST) + 1
    h = min(max((box.bottom - box.top) / 2, LEAST), MOST) + 1
    if mark.focus:
        w = h = HALO + 1
    return Box(x - w, y - h, x + w, y + h)


def _outlined(box: Box) -> bool:
    """Whether the extent is larger than the largest mark."""
    return box.right - box.left > 2 * MOST or box.bottom - box.top > 2 * MOST


def _mark(mark: MapMark, box: Box) -> str:
    x, y = _centre(box)
    parts = [svg.tag("circle", class_="hit", cx=x, cy=y, r=12.0)]
    if _outlined(box):
        parts.append(_rectangle("extent", box, 0.0))
    if mark.focus:
        parts.append(svg.tag("circle", class_="halo", cx=x, cy=y, r=HALO))
    w, h = (box.right - box.left) / 2, (box.bottom - box.top) / 2
    parts.append(symbol(mark.kind, x, y, w, h))
    return "".join(parts)


def _least(box: Box) -> Box:
    """A repair's outline, true to size but never too small to see."""
    x, y = _centre(box)
    w = max((box.right - box.left) / 2, 8.0)
    h = max((box.bottom - box.top) / 2, 6.0)
    return Box(x - w, y - h, x + w, y + h)


def _sides(box: Box) -> list[Box]:
    """The strips of paper that a repair's outlines take."""
    return [
        Box(box.left, box.top, box.right, box.top + 3),
        Box(box.left, box.bottom - 3, box.right, box.bottom),
        Box(box.left, box.top, box.left + 3, box.bottom),
        Box(box.right - 3, box.top, box.right, box.bottom),
    ]


def _repair(repair: MapRepair, box: Box) -> str:
    """Two outlines, so that grey print tells it from a cut-out; one dashed outline of
    what is planned; corner to corner a cross over damage that is not shown removed."""
    outer = _least(box)
    if repair.planned:
        return _rectangle("repair planned", outer, 0.0)
    drawn = _rectangle("repair", outer, 0.0) + _rectangle("repair in", outer, 2.5)
    return drawn + notes.crossed(outer) if repair.hides else drawn


def _rectangle(class_: str, box: Box, inset: float) -> str:
    return svg.tag(
        "rect",
        class_=class_,
        x=box.left + inset,
        y=box.top + inset,
        width=box.right - box.left - 2 * inset,
        height=box.bottom - box.top - 2 * inset,
    )


def _around_mark(words: str, area: Box) -> list[Label]:
    """Places for a finding's number, right and above first."""
    x, y = _centre(area)
    right, left = area.right + 3, area.left - 3
    above, below = area.top - 1, area.bottom + 10
    return [
        Label(words, right, above + 4),
        Label(words, right, y + 4),
        Label(words, right, below - 3),
        Label(words, left, above + 3, "end"),
        Label(words, left, y + 4, "end"),
        Label(words, left, below - 3, "end"),
        Label(words, x, above - 3, "middle"),
        Label(words, x, below + 2, "middle"),
    ]


def _around_repair(words: str, box: Box) -> list[Label]:
    """Places for a repair's number, outside its corners first."""
    x, y = _centre(box)
    return [
        Label(words, box.right + 4, box.top + 8),
        Label(words, box.left - 4, box.top + 8, "end"),
        Label(words, x, box.top - 4, "middle"),
        Label(words, x, box.bottom + 12, "middle"),
        Label(words, x, y + 4, "middle"),
    ]
