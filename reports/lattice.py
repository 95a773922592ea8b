"""The cells of an unrolled section, on which damage density is counted.

A cell is the patch around one frame and one stringer, and its edges lie at mid-bay:
people write round stations and frame numbers, and an edge there would throw half of
the counts to either side by chance. Areas are true skin areas, cut-outs left out.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fleet.location.geometry import Box, Section

Floats = NDArray[np.float64]
Counts = NDArray[np.int64]
Flags = NDArray[np.bool_]

MM2_PER_M2 = 1e6


@dataclass(frozen=True)
class Lattice:
    """The cells of one section, a row per frame and a column per stringer.

    Edges are in mm: along on the map axis that all variants share, across at the
    section's reference size; a shell's first column lies astride the crown line and
    the columns run on to the right, once round. ``area_m2`` gives each variant's skin
    area per cell, zero where the variant has no such patch.
    """

    frames: Sequence[str]
    stations: Sequence[str]
    stringers: Sequence[str]
    along_mm: Floats
    across_mm: Floats
    wraps: bool
    area_m2: Mapping[str, Floats]

    @property
    def shape(self) -> tuple[int, int]:
        """Cells along and around."""
        return len(self.frames), len(self.stringers)

    @cached_property
    def present(self) -> Flags:
        """Cells that are skin on some variant."""
        return np.asarray(sum(self.area_m2.values(), np.zeros(self.shape)) > 0)

    def exposure(self, amounts: Mapping[str, float]) -> Floats:
        """Area times what the aircraft of each variant flew, summed over variants."""
        total = np.zeros(self.shape)
        for variant, amount in amounts.items():
            total += self.area_m2[variant] * amount
        return total

    def cells(self, along_half: Counts, around_half: Counts) -> tuple[Counts, Counts]:
        """Cells of half-bays: half-bay k belongs to cell (k + 1) // 2.

        Around a closed shell the last half-bay belongs to the first stringer.
        """
        along = (along_half + 1) // 2
        around = (around_half + 1) // 2
        return along, around % self.shape[1] if self.wraps else around


def lattice_of(section: Section, variants: Sequence[str]) -> Lattice:
    """The cells of a section, numbered as its half-bays are."""
    frames = section.frames
    along_mm = _middles(
        [section.map1_mm, *(frame.map_mm for frame in frames), section.map2_mm]
    )
    lines = [line.s_mm for line in section.stringers]
    if section.wrap_mm is not None:
        turns = np.array(lines) % section.wrap_mm
        back = turns[-1] - section.wrap_mm
        across_mm = (np.array([back, *turns]) + np.array([*turns, section.wrap_mm])) / 2
        stringers = [line.label for line in section.stringers]
    else:
        across_mm = _middles([section.s1_mm, *lines, section.s2_mm])
        stringers = _ends([line.label for line in section.stringers])
    names = _ends([f"{section.frame_prefix} {frame.label}" for frame in frames])
    return Lattice(
        frames=names,
        stations=_ends([frame.station_label for frame in frames]),
        stringers=stringers,
        along_mm=along_mm,
        across_mm=across_mm,
        wraps=section.wrap_mm is not None,
        area_m2={v: _areas(section, v, along_mm, across_mm) for v in variants},
    )


def _middles(lines: Sequence[float]) -> Floats:
    """Edges of the cells about the lines; the outer two are the section's ends."""
    at = np.array(lines)
    return np.array([at[0], *((at[:-1] + at[1:]) / 2), at[-1]])


def _ends(labels: Sequence[str]) -> list[str]:
    """Labels of the cells, with the half bays before the first line and after the last.

    A section without lines has one cell each way, unnamed.
    """
    if not labels:
        return ["", ""]
    return [f"before {labels[0]}", *labels, f"after {labels[-1]}"]


def _areas(
    section: Section, variant: str, along_mm: Floats, across_mm: Floats
) -> Floats:
    """True skin area of each cell on one variant [m²]."""
    whole = Box(section.map1_mm, section.map2_mm, section.s1_mm, section.s2_mm)
    area = np.zeros((len(along_mm) - 1, len(across_mm) - 1))
    for start, end in _runs(section, variant):
        area += _overlap(section, whole, start, end, along_mm, across_mm)
        for cutout in section.cutouts:
            area -= _overlap(section, cutout.box, start, end, along_mm, across_mm)
    area[np.abs(area) < 1e-6] = 0.0
    return area / MM2_PER_M2


def _runs(section: Section, variant: str) -> list[tuple[float, float]]:
    """Stretches of the map axis that the variant has: all but the plugs it lacks."""
    runs, start = [], section.map1_mm
    for plug in section.plugs:
        if variant not in plug.variants:
            runs.append((start, plug.map_mm))
            start = plug.end_mm
    return [*runs, (start, section.map2_mm)]


def _overlap(
    section: Section,
    box: Box,
    start: float,
    end: float,
    along_mm: Floats,
    across_mm: Floats,
) -> Floats:
    """Area of the box within each cell and within start to end along [mm²].

    Tapered ends are integrated exactly: width across is s times the local scale.
    """
    low, high = max(box.map1_mm, start), min(box.map2_mm, end)
    if high <= low:
        return np.zeros((len(along_mm) - 1, len(across_mm) - 1))
    run = np.diff(_scale_integral(section, np.clip(along_mm, low, high)))
    turns = (-1, 0, 1) if section.wrap_mm is not None else (0,)
    wide = np.zeros(len(across_mm) - 1)
    for turn in turns:
        shift = turn * (section.wrap_mm or 0.0)
        wide += np.diff(np.clip(across_mm, box.s1_mm + shift, box.s2_mm + shift))
    return np.outer(np.maximum(run, 0.0), np.maximum(wide, 0.0))


def _scale_integral(section: Section, map_mm: Floats) -> Floats:
    """Integral of the section's scale from its first profile point to each place."""
    knots = np.array([place for place, _ in section.profile])
    scales = np.array([size for _, size in section.profile]) / section.reference_mm
    steps = np.diff(knots) * (scales[:-1] + scales[1:]) / 2
    whole = np.concatenate([[0.0], np.cumsum(steps)])
    at = np.clip(np.searchsorted(knots, map_mm, side="right") - 1, 0, len(knots) - 2)
    here = np.interp(map_mm, knots, scales)
    return np.asarray(whole[at] + (map_mm - knots[at]) * (scales[at] + here) / 2)
