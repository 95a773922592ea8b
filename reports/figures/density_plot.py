"""The density map as a figure for paper: counts written in the cells."""

from __future__ import annotations

from collections.abc import Sequence

from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.patches import Patch, Rectangle

from fleet.drawing.notes import datum_words, view_words
from fleet.drawing.skeleton import edge_names, side_names
from fleet.drawing.svg import Box, Label
from reports.density import FEW, NO_EXPOSURE, NONE_FOUND
from reports.figures.density_map import DARK, DensityFigure, spot_boxes

UNITS_AN_INCH = 96.0
INK, MUTED, HAIR = "#1c2126", "#56606b", "#c8ced5"
COLOURS = ("#dfe3c0", "#bcb86b", "#7c7b78", "#3d4d6d", "#00224e")
"""Cividis from dark to light, paled at the low end so that an empty cell is paper."""

STROKE, HATCH_FEW, HATCH_NO_EXPOSURE = "#8a9099", "//", "xxx"


def density_plot(figure: DensityFigure, notes: Sequence[str]) -> Figure:
    """The map with its legend; notes (exposure, counts, what is beside) stand below."""
    sheet = figure.sheet
    low = sheet.plot.bottom + 96 + 15 * len(notes)
    drawn = Figure(
        figsize=((sheet.width + 20) / UNITS_AN_INCH, (low + 20) / UNITS_AN_INCH),
        dpi=150,
    )
    axes = drawn.add_axes((0.0, 0.0, 1.0, 1.0))
    axes.set_xlim(0, sheet.width + 20)
    axes.set_ylim(low, -20)
    axes.set_axis_off()
    axes.text(sheet.plot.left, -2, figure.title, size=10, weight="bold", color=INK)
    _cells(axes, figure)
    _lines(axes, figure)
    for name in [*edge_names(sheet), *side_names(sheet)]:
        _words(axes, name)
    words = [view_words(sheet), datum_words(sheet, figure.unit), *notes]
    for row, line in enumerate(words):
        _words(axes, Label(line, sheet.plot.left, sheet.plot.bottom + 66 + 15 * row))
    _legend(axes, figure)
    return drawn


def _words(axes: Axes, label: Label) -> None:
    side = {"start": "left", "middle": "center", "end": "right"}[label.anchor]
    axes.text(label.x, label.y, label.words, size=6.5, color=MUTED, ha=side)


def _rectangle(axes: Axes, box: Box, **look: object) -> None:
    corner = (box.left, box.top)
    size = (box.right - box.left, box.bottom - box.top)
    axes.add_patch(Rectangle(corner, *size, **look))  # type: ignore[arg-type]


def _look(number: int, *, few: bool) -> dict[str, object]:
    """Fill and hatch of a class."""
    if number == NO_EXPOSURE:
        return {"facecolor": "white", "edgecolor": HAIR, "hatch": HATCH_NO_EXPOSURE}
    if number == NONE_FOUND:
        return {"facecolor": "white", "edgecolor": HAIR}
    look: dict[str, object] = {"facecolor": COLOURS[number - 1], "edgecolor": HAIR}
    if few:
        look |= {"hatch": HATCH_FEW, "hatchcolor": STROKE, "hatch_linewidth": 0.4}
    return look


def _cells(axes: Axes, figure: DensityFigure) -> None:
    """Every cell by its class, the count in those that hold a finding."""
    density = figure.density
    for cell in figure.cells:
        where = cell.along, cell.around
        number = int(figure.classes[where])
        look = _look(number, few=bool(density.few[where]))
        for box in cell.parts:
            _rectangle(axes, box, linewidth=0.3, **look)
        if number >= 1:
            box = cell.parts[0]
            axes.text(
                (box.left + box.right) / 2,
                (box.top + box.bottom) / 2,
                str(int(density.counts[where])),
                size=4.5,
                ha="center",
                va="center",
                color="white" if number >= DARK else INK,
            )


def _lines(axes: Axes, figure: DensityFigure) -> None:
    """Doors, findings outside the data and hot spots."""
    sheet = figure.sheet
    for cutout in sheet.section.cutouts:
        if cutout.kind != "window":
            along = (cutout.box.map1_mm, cutout.box.map2_mm)
            for span in sheet.spans(cutout.box.s1_mm, cutout.box.s2_mm):
                box = sheet.corners(along, span)
                _rectangle(axes, box, fill=False, edgecolor=MUTED, linewidth=0.7)
    for cell in figure.cells:
        if figure.outside.get((cell.along, cell.around)):
            box = cell.parts[0]
            middle = (box.left + box.right) / 2, (box.top + box.bottom) / 2
            axes.plot(*middle, "o", color=INK, markersize=3, fillstyle="none")
    for letter, window in figure.spots:
        for box in spot_boxes(figure, window):
            _rectangle(axes, box, fill=False, edgecolor=INK, linewidth=1.4)
            axes.text(
                box.left - 4, box.top + 10, letter, size=8, weight="bold", ha="right"
            )


def _legend(axes: Axes, figure: DensityFigure) -> None:
    """The classes with their limits and the unit."""
    handles = []
    for name, words in figure.legend():
        if name == "outside":
            continue
        number = {"d0": NONE_FOUND, "dx": NO_EXPOSURE}.get(name)
        if name == "few":
            patch = Patch(facecolor="white", edgecolor=STROKE, hatch=HATCH_FEW)
            patch.set_label(f"fewer than {FEW} found")
        else:
            look = _look(int(name[1]) if number is None else number, few=False)
            patch = Patch(linewidth=0.5, label=words, **look)  # type: ignore[arg-type]
        handles.append(patch)
    sheet = figure.sheet
    where = (sheet.plot.left, sheet.plot.bottom + 24)
    axes.legend(
        handles=handles,
        loc="upper left",
        bbox_to_anchor=where,
        bbox_transform=axes.transData,
        ncols=len(handles),
        fontsize=6.5,
        frameon=False,
        borderaxespad=0.0,
        handlelength=1.6,
        columnspacing=1.4,
    )
    kind = "smoothed rate" if figure.smoothed else "rate"
    unit = f"{kind}, {figure.density.denominator.rate_unit}"
    _words(axes, Label(unit, sheet.plot.left, sheet.plot.bottom + 52))
