"""The structure itself on paper: lines, panels, joints, cut-outs and their names."""

from __future__ import annotations

from collections.abc import Iterator

from fleet.drawing import svg
from fleet.drawing.sheet import Sheet
from fleet.drawing.svg import Box, Label
from fleet.location.geometry import Box as Patch

ROW = 12.5
"""Least distance of two names above each other."""


def skeleton(sheet: Sheet) -> Iterator[str]:
    """Everything of the structure but its names, back to front."""
    for _, _, place in sheet.frames:
        yield _line("frame", sheet.line_across(place))
    for line in sheet.section.stringers:
        for s_mm, _ in sheet.spans(line.s_mm, line.s_mm):
            yield _line("stringer", sheet.line_along(s_mm))
    yield from _outlines(sheet)
    for joint in sheet.section.joints:
        yield from _joint(sheet, joint.kind, joint.box)
    for cutout in sheet.section.cutouts:
        for box in _boxes(sheet, cutout.box):
            round_ = cutout.corner_radius_mm * sheet.scale
            yield _rectangle("cutout", box, min(round_, (box.right - box.left) / 2))


def _line(class_: str, points: list[tuple[float, float]]) -> str:
    if len(points) > 2:
        return svg.tag("path", class_=f"{class_} open", d=svg.path(points))
    (x1, y1), (x2, y2) = points
    return svg.tag("line", class_=class_, x1=x1, y1=y1, x2=x2, y2=y2)


def _rectangle(class_: str, box: Box, corner: float | None = None) -> str:
    return svg.tag(
        "rect",
        class_=class_,
        x=box.left,
        y=box.top,
        width=box.right - box.left,
        height=box.bottom - box.top,
        rx=corner or None,
    )


def _boxes(sheet: Sheet, patch: Patch) -> Iterator[Box]:
    """The parts of a patch of the section that fall into the window."""
    along = _along(sheet, patch)
    if along is not None:
        for across in sheet.spans(patch.s1_mm, patch.s2_mm):
            yield sheet.corners(along, across)


def _along(sheet: Sheet, patch: Patch) -> tuple[float, float] | None:
    return sheet.clip((sheet.along_of(patch.map1_mm), sheet.along_of(patch.map2_mm)))


def _outlines(sheet: Sheet) -> Iterator[str]:
    """Panels of the skin looked at, then the edge of the section or window."""
    section, shown = sheet.section, sheet.shown
    for panel in section.panels:
        if sheet.skin and panel.surface not in ("outer", sheet.skin):
            continue
        along = _along(sheet, panel.box)
        if along is None or along[0] == along[1]:
            continue
        for low, high in sheet.spans(panel.box.s1_mm, panel.box.s2_mm):
            yield _patch("panel", sheet, along, (low, high))
    yield _patch(
        "edge",
        sheet,
        (shown.along1_mm, shown.along2_mm),
        (shown.across1_mm, shown.across2_mm),
    )


def _patch(
    class_: str, sheet: Sheet, along: tuple[float, float], across: tuple[float, float]
) -> str:
    """A patch with sides that follow the section's taper."""
    near = sheet.line_between(across[0], *along)
    far = sheet.line_between(across[1], *along)
    return svg.tag("path", class_=class_, d=svg.path([*near, *far[::-1]], closed=True))


def _joint(sheet: Sheet, kind: str, patch: Patch) -> Iterator[str]:
    """A chain line along the middle of a joint."""
    along = _along(sheet, patch)
    if along is None:
        return
    if kind == "lap":
        middle = (patch.s1_mm + patch.s2_mm) / 2
        for s_mm, _ in sheet.spans(middle, middle):
            yield _line("joint", sheet.line_between(s_mm, *along))
        return
    place = (along[0] + along[1]) / 2
    for low, high in sheet.spans(patch.s1_mm, patch.s2_mm):
        x = sheet.x(place)
        ends = [(x, sheet.y(low, place)), (x, sheet.y(high, place))]
        yield _line("joint", ends)


def edge_names(sheet: Sheet) -> Iterator[Label]:
    """Frames above, station labels below, stringers at the left; thinned to fit."""
    page = Box(0, 0, sheet.width, sheet.plot.bottom + 40)
    taken: list[Box] = []
    for name, station, place in sheet.frames:
        x = sheet.x(place)
        above = Label(name, x, sheet.plot.top - 9, "middle")
        below = Label(station, x, sheet.plot.bottom + 15, "middle")
        pair = [above, below]
        if all(_fits(label, taken, page, gap=5.0) for label in pair):
            taken += [label.box for label in pair]
            yield from pair
    for line in sorted(sheet.section.stringers, key=lambda line: abs(line.s_mm)):
        for s_mm, _ in sheet.spans(line.s_mm, line.s_mm):
            label = _stringer_name(sheet, line.label, s_mm)
            if _fits(label, taken, page, gap=ROW - 11.8):
                taken.append(label.box)
                yield label


def _stringer_name(sheet: Sheet, name: str, s_mm: float) -> Label:
    """At the left edge; at the root of a surface, where the lines are widest apart."""
    shown = sheet.shown
    if sheet.turned and not sheet.section.is_shell:
        return Label(name, sheet.plot.right + 8, sheet.y(s_mm, shown.along1_mm) + 3.5)
    start = shown.along2_mm if sheet.turned else shown.along1_mm
    return Label(name, sheet.plot.left - 8, sheet.y(s_mm, start) + 3.5, "end")


def _fits(label: Label, taken: list[Box], page: Box, *, gap: float) -> bool:
    box = label.box
    wide = Box(box.left - gap, box.top - gap, box.right + gap, box.bottom + gap)
    return box.inside(page) and not any(wide.meets(other) for other in taken)


def cutout_names(sheet: Sheet) -> Iterator[Label]:
    """Names inside those cut-outs that have room for them."""
    for cutout in sheet.section.cutouts:
        for box in _boxes(sheet, cutout.box):
            middle = (box.left + box.right) / 2
            name = Label(
                cutout.label, middle, (box.top + box.bottom) / 2 + 3.5, "middle"
            )
            if name.box.inside(box):
                yield name


def side_names(sheet: Sheet) -> Iterator[Label]:
    """Crown, keel and the two sides in words, at the right edge."""
    section = sheet.section
    if not section.is_shell:
        yield from _skin_names(sheet)
        return
    half = (section.wrap_mm or 0.0) / 2
    low, high = sheet.shown.across1_mm, sheet.shown.across2_mm
    words = [("crown", 0.0, 0.0), ("keel", half, half)]
    words += [("RH", 0.0, half), ("LH", half, 2 * half)]
    for word, start, end in words:
        for s1, s2 in sheet.spans(start, end):
            at_edge = sheet.window is not None and s1 in (low, high) and s1 == s2
            if not at_edge:
                yield _at_right(sheet, word, (s1 + s2) / 2)


def _skin_names(sheet: Sheet) -> Iterator[Label]:
    section = sheet.section
    if section.skins == ("left", "right"):
        for word, start, end in (
            ("LH", section.s1_mm, 0.0),
            ("RH", 0.0, section.s2_mm),
        ):
            for s1, s2 in sheet.spans(start, end):
                yield _at_right(sheet, word, (s1 + s2) / 2)


def _at_right(sheet: Sheet, word: str, s_mm: float) -> Label:
    end = sheet.shown.along1_mm if sheet.turned else sheet.shown.along2_mm
    return Label(word, sheet.plot.right + 8, sheet.y(s_mm, end) + 3.5)
