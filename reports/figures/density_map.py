"""The density map: decided in a data object, then drawn as SVG for the page.

Cells without exposure never look like cells without findings. Colour classes follow
the drawn cells; edges passed in make two maps comparable.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from functools import cached_property
from itertools import pairwise

import numpy as np

from fleet.drawing import svg
from fleet.drawing.notes import datum_words, view_words
from fleet.drawing.sheet import Sheet
from fleet.drawing.skeleton import edge_names, side_names
from fleet.drawing.svg import Box, Label
from reports.density import (
    CLASSES,
    FEW,
    NO_EXPOSURE,
    NONE_FOUND,
    Density,
    class_edges,
    class_numbers,
)
from reports.hot_spots import Window, window_mm
from reports.lattice import Counts, Floats

DARK = 3
"""From this class on, what is written on a cell is light."""

LEAST_HIGH = 9.0
"""A cell of at least this height holds its count in print."""


@dataclass(frozen=True)
class Cell:
    """One cell on paper, in one or two parts where the drawing is cut."""

    along: int
    around: int
    parts: Sequence[Box]


@dataclass(frozen=True)
class DensityFigure:
    """What a density map shows.

    ``smoothed`` colours by rates drawn towards their mean; the words always give the
    plain rate. ``outside`` are findings by cell that are in no rate; ``spots`` are
    windows with their letters; ``given_edges`` are those of a map to compare with.
    """

    title: str
    sheet: Sheet
    unit: str
    density: Density
    smoothed: bool = True
    outside: Mapping[tuple[int, int], int] = field(default_factory=dict)
    spots: Sequence[tuple[str, Window]] = ()
    given_edges: Sequence[float] | None = None

    @cached_property
    def shown(self) -> Floats:
        """The rate that colours each cell."""
        return self.density.smoothed if self.smoothed else self.density.rate

    @cached_property
    def edges(self) -> Sequence[float]:
        """Lower edges of the colour classes in the unit of the rate."""
        return self.given_edges or class_edges(self.shown[self.density.counts > 0])

    @cached_property
    def classes(self) -> Counts:
        """The class of each cell."""
        return class_numbers(self.density, self.shown, self.edges)

    @cached_property
    def cells(self) -> list[Cell]:
        """Every cell that is skin on some variant, where it lies on paper."""
        lattice = self.density.lattice
        found = []
        for along, around in np.argwhere(lattice.present).tolist():
            ends = lattice.along_mm[along : along + 2].tolist()
            sides = lattice.across_mm[around : around + 2].tolist()
            parts = [
                self.sheet.corners((ends[0], ends[1]), span)
                for span in self.sheet.spans(sides[0], sides[1])
            ]
            found.append(Cell(along, around, parts))
        return found

    def legend(self) -> list[tuple[str, str]]:
        """Class names and words, lowest first; only what is shown."""
        present = set(self.classes[self.density.lattice.present].tolist())
        rows = [("d0", "none found")] if NONE_FOUND in present else []
        if max(present, default=NONE_FOUND) > NONE_FOUND:
            rows += self._class_rows()
        if self.density.few.any():
            rows.append(("few", f"fewer than {FEW} found"))
        if NO_EXPOSURE in present:
            rows.append(("dx", "no exposure"))
        if self.outside:
            rows.append(("outside", "found outside the data, in no rate"))
        return rows

    def _class_rows(self) -> list[tuple[str, str]]:
        shown = [rate_words(edge) for edge in self.edges]
        pairs = enumerate(pairwise(shown[1:]), start=2)
        return [
            ("d1", f"below {shown[1]}"),
            *((f"d{number}", f"{low}–{high}") for number, (low, high) in pairs),
            (f"d{CLASSES}", f"{shown[-1]} and more"),
        ]

    def cell_words(self, along: int, around: int) -> str:
        """What a cell says when pointed at."""
        density, lattice = self.density, self.density.lattice
        name = f"{lattice.frames[along]}, {lattice.stringers[around]}"
        count = int(density.counts[along, around])
        if not density.exposed[along, around]:
            return f"{name}: no exposure; {count} found"
        low, high = (float(end[along, around]) for end in density.interval)
        exposure = density.exposure[along, around] / density.denominator.per
        per = f"{density.denominator.per:,.0f} " if density.denominator.per != 1 else ""
        return (
            f"{name}: {count} found in {exposure:,.3g} m² × {per}"
            f"{density.denominator.unit}; "
            f"{rate_words(float(density.rate[along, around]))} "
            f"(95 % {rate_words(low)} to {rate_words(high)}) "
            f"{density.denominator.rate_unit}"
        )


def rate_words(rate: float) -> str:
    """A rate to two figures, without powers of ten."""
    if rate == 0:
        return "0"
    places = max(0, 1 - int(np.floor(np.log10(abs(rate)))))
    return f"{rate:,.{min(places, 6)}f}"


def swatch(name: str) -> str:
    """A legend's little picture, for use beside its words."""
    ground = svg.tag(
        "rect", class_=name if name[0] == "d" else "d2", width=22, height=14
    )
    over = ""
    if name == "few":
        over = svg.tag("path", class_="few", d="M1 13L8 1")
    elif name == "dx":
        over = svg.tag("path", class_="cross", d="M1 1L21 13M1 13L21 1")
    elif name == "outside":
        ground = svg.tag("circle", class_="outside", cx=11, cy=7, r=3)
    return svg.tag(
        "svg", ground, over, class_="swatch", viewBox="0 0 22 14", aria_hidden="true"
    )


def density_svg(figure: DensityFigure) -> str:
    """The map for the page: one tab stop, words on each cell that holds a finding."""
    sheet = figure.sheet
    names = [*edge_names(sheet), *side_names(sheet)]
    top = sheet.plot.bottom + 36
    notes = [view_words(sheet), datum_words(sheet, figure.unit)]
    body = [
        *_grounds(figure),
        *_found(figure),
        *_openings(figure),
        *_outside(figure),
        *_spots(figure),
        *(name.drawn("tick") for name in names),
        *(
            Label(words, sheet.plot.right, top + 14 * row, "end").drawn("tick")
            for row, words in enumerate(notes)
        ),
    ]
    density = figure.density
    return svg.root(
        body,
        size=(sheet.width, top + 22),
        class_="density",
        title=figure.title,
        description=(
            f"{density.denominator.rate_unit}, by bay. {density.counted} counted; "
            f"the table below holds the same numbers."
        ),
    )


def _grounds(figure: DensityFigure) -> Iterator[str]:
    """All cells without findings, in two paths: none found, and no exposure."""
    for number, class_, words in (
        (NONE_FOUND, "d0", "none found"),
        (NO_EXPOSURE, "dx", "no exposure: nothing could have been found here"),
    ):
        boxes = [
            box
            for cell in figure.cells
            if figure.classes[cell.along, cell.around] == number
            for box in cell.parts
        ]
        if boxes:
            title = svg.tag("title", svg.text(words))
            outline = "".join(_boxed(box) for box in boxes)
            yield svg.tag("path", title, class_=class_, d=outline)
            if number == NO_EXPOSURE:
                crosses = "".join(_crossed(box) for box in boxes)
                yield svg.tag("path", class_="cross", d=crosses)


def _boxed(box: Box) -> str:
    """A cell's outline, a little inside its edges so that cells stay apart."""
    n = svg.number
    wide, high = box.right - box.left - 1, box.bottom - box.top - 1
    return f"M{n(box.left + 0.5)} {n(box.top + 0.5)}h{n(wide)}v{n(high)}h{n(-wide)}z"


def _crossed(box: Box) -> str:
    n = svg.number
    left, right = n(box.left + 1), n(box.right - 1)
    top, bottom = n(box.top + 1), n(box.bottom - 1)
    return f"M{left} {top}L{right} {bottom}M{left} {bottom}L{right} {top}"


def _found(figure: DensityFigure) -> Iterator[str]:
    """Cells with findings, each with its words; small counts with a stroke across."""
    density = figure.density
    strokes: dict[str, list[str]] = {"few": [], "few dark": []}
    counts = []
    for cell in figure.cells:
        number = int(figure.classes[cell.along, cell.around])
        if number in (NONE_FOUND, NO_EXPOSURE):
            continue
        words = svg.tag("title", svg.text(figure.cell_words(cell.along, cell.around)))
        outline = "".join(_boxed(box) for box in cell.parts)
        yield svg.tag("path", words, class_=f"d{number}", d=outline)
        if density.few[cell.along, cell.around]:
            tone = "few dark" if number >= DARK else "few"
            strokes[tone] += [_stroke(box) for box in cell.parts]
        count = str(int(density.counts[cell.along, cell.around]))
        counts += [_count(count, box, number) for box in cell.parts[:1]]
    for tone, parts in strokes.items():
        yield svg.tag("path", class_=tone, d="".join(parts))
    yield from counts


def _stroke(box: Box) -> str:
    """A stroke in the left third of the cell, so that the count stays legible."""
    n = svg.number
    end = box.left + 1 + (box.right - box.left) / 3
    return f"M{n(box.left + 1)} {n(box.bottom - 1)}L{n(end)} {n(box.top + 1)}"


def _count(count: str, box: Box, number: int) -> str:
    """The count written in the cell; seen on paper, where colour may be grey."""
    if box.bottom - box.top < LEAST_HIGH - 1:
        return ""
    return svg.tag(
        "text",
        count,
        class_="count dark" if number >= DARK else "count",
        x=(box.left + box.right) / 2,
        y=(box.top + box.bottom) / 2 + 2.8,
        text_anchor="middle",
    )


def _openings(figure: DensityFigure) -> Iterator[str]:
    """Doors and hatches as outlines, for finding one's way."""
    for cutout in figure.sheet.section.cutouts:
        if cutout.kind == "window":
            continue
        along = (cutout.box.map1_mm, cutout.box.map2_mm)
        for span in figure.sheet.spans(cutout.box.s1_mm, cutout.box.s2_mm):
            box = figure.sheet.corners(along, span)
            yield svg.tag(
                "rect",
                class_="opening",
                x=box.left,
                y=box.top,
                width=box.right - box.left,
                height=box.bottom - box.top,
                rx=cutout.corner_radius_mm * figure.sheet.scale,
            )


def _outside(figure: DensityFigure) -> Iterator[str]:
    """Findings from days that are in no rate, as small rings."""
    for cell in figure.cells:
        count = figure.outside.get((cell.along, cell.around), 0)
        if count and cell.parts:
            box = cell.parts[0]
            yield svg.tag(
                "circle",
                svg.tag("title", svg.text(f"{count} found outside the data")),
                class_="outside",
                cx=(box.left + box.right) / 2,
                cy=(box.top + box.bottom) / 2,
                r=3.0,
            )


def _spots(figure: DensityFigure) -> Iterator[str]:
    """Hot spots as outlines with their letters."""
    for letter, window in figure.spots:
        for box in spot_boxes(figure, window):
            yield svg.tag(
                "rect",
                class_="spot",
                x=box.left,
                y=box.top,
                width=box.right - box.left,
                height=box.bottom - box.top,
            )
            yield Label(letter, box.left - 5, box.top + 10, "end").drawn("label b")


def spot_boxes(figure: DensityFigure, window: Window) -> list[Box]:
    """A window on paper; two parts if it passes the cut."""
    low, high, left, right = window_mm(window, figure.density.lattice)
    return [
        figure.sheet.corners((low, high), span)
        for span in figure.sheet.spans(left, right)
    ]
