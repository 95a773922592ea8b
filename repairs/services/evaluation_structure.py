"""Frames and stringers at a place, or ribs and stringers: section area and pitch.

A pitch is the true distance between the two neighbours of the place on this variant.
Where the damage touches more bays than one, the widest counts: it holds back least.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from itertools import pairwise

from fleet.location.geometry import Section as SectionGeometry
from repairs.selectors.neighbours import section_geometry
from repairs.services.evaluation_gathered import Gathered
from repairs.services.evaluation_place import Subject, middle_s

TOUCHES_MM = 0.01
"""A place nearer to a frame than this stands on it and touches both bays."""
WIDEST = "the widest of {each} mm touched"
Line = tuple[float, str]
"""Where a stiffener stands, from the middle of the damage [mm], and its name."""


@dataclass(frozen=True, slots=True)
class Bay:
    """The room between two neighbouring stiffeners [mm], and their names."""

    width: float
    between: str


def stiffener_inputs(found: Gathered, subject: Subject, half_mm: float) -> None:
    """Area and pitch of what stiffens the skin round a placed damage."""
    section = section_geometry(subject)
    if section is None or subject.x1_mm is None:
        return
    source = f"geometry {subject.geometry}"
    found.number("frame_area", section.frame_area_mm2, f"{source}: {section.title}")
    found.number(
        "stringer_area", section.stringer_area_mm2, f"{source}: {section.title}"
    )
    low, high = subject.x1_mm, subject.x2_mm or subject.x1_mm
    half = max(half_mm, (high - low) / 2)
    frames = _frames(section, (low + high) / 2, subject.aircraft.variant.code)
    _pitch(found, "frame_pitch", bays_touched(frames, half), source)
    if subject.s1_mm is not None and subject.map_mm is not None:
        scale = section.scale_at(subject.map_mm)
        across = ((subject.s2_mm or subject.s1_mm) - subject.s1_mm) / 2 * scale
        stringers = _stringers(section, middle_s(subject), scale)
        half = max(half_mm, across)
        _pitch(found, "stringer_pitch", bays_touched(stringers, half), source)


def _frames(section: SectionGeometry, middle: float, variant: str) -> list[Line]:
    """Frames or ribs that this variant has."""
    return [
        (at - middle, f"{section.frame_prefix} {frame.label}")
        for frame in section.frames
        if (at := frame.x_mm(variant)) is not None
    ]


def _stringers(section: SectionGeometry, middle: float, scale: float) -> list[Line]:
    """Stringers, once more either way round a shell."""
    wrap = section.wrap_mm
    turns = (-1, 0, 1) if wrap else (0,)
    return [
        ((line.s_mm - middle + turn * (wrap or 0.0)) * scale, line.label)
        for line in section.stringers
        for turn in turns
    ]


def bays_touched(lines: Iterable[Line], half: float) -> list[Bay]:
    """The bays that the damage touches; none where no stiffener is on one side."""
    ordered, reach = sorted(lines), half + TOUCHES_MM
    return [
        Bay(end - start, f"{first} to {second}")
        for (start, first), (end, second) in pairwise(ordered)
        if start <= reach and end >= -reach
    ]


def _pitch(found: Gathered, name: str, bays: list[Bay], source: str) -> None:
    if not bays:
        return
    widest = max(bays, key=lambda bay: bay.width)
    widths = dict.fromkeys(f"{bay.width:.1f}" for bay in bays)
    more = f"; {WIDEST.format(each=', '.join(widths))}" if len(widths) > 1 else ""
    found.number(name, widest.width, f"{source}: {widest.between}{more}")
