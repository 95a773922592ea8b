"""What a section of an aircraft type is made of, in mm on the section's own axes.

Along: `x_mm` is the true distance from the datum on one variant, `map_mm` the same
point on the axis that holds the plugs of every variant. Across: `s_mm` at the
section's reference size (radius of a shell, chord of a surface).
"""

from __future__ import annotations

import math
from bisect import bisect_right
from dataclasses import dataclass, field

from fleet.location.parts import (
    TINY_MM,
    Box,
    Cutout,
    Frame,
    Joint,
    Panel,
    Plane,
    Plug,
    Stringer,
)

FramesOn = tuple[tuple[Frame, ...], tuple[float, ...]]


@dataclass(frozen=True)
class Section:
    """One section with its axes, lines, panels, cut-outs, joints and planes."""

    code: str
    title: str
    kind: str
    side: str
    ata: str
    station_words: tuple[str, ...]
    words: tuple[str, ...]
    frame_prefix: str
    frame_words: tuple[str, ...]
    stringer_prefix: str
    stringer_words: tuple[str, ...]
    stringer_origin: str
    negative_stations: bool
    map1_mm: float
    map2_mm: float
    s1_mm: float
    s2_mm: float
    skins: tuple[str, ...]
    datum_text: str
    reference_mm: float
    profile: tuple[tuple[float, float], ...]
    axis_wl_mm: float | None
    parent: str
    frame_pitch_mm: float
    plugs: tuple[Plug, ...] = ()
    frames: tuple[Frame, ...] = ()
    stringers: tuple[Stringer, ...] = ()
    panels: tuple[Panel, ...] = ()
    cutouts: tuple[Cutout, ...] = ()
    joints: tuple[Joint, ...] = ()
    planes: tuple[Plane, ...] = ()
    frame_area_mm2: float | None = None
    stringer_area_mm2: float | None = None
    _frame_maps: tuple[float, ...] = field(init=False, repr=False, compare=False)
    _stringer_turns: tuple[float, ...] = field(init=False, repr=False, compare=False)
    _on: dict[str, FramesOn] = field(init=False, repr=False, compare=False)
    is_shell: bool = field(init=False, repr=False, compare=False)
    wrap_mm: float | None = field(init=False, repr=False, compare=False)
    """Once round a shell at the reference radius; None on an open surface."""

    def __post_init__(self) -> None:
        shell = self.kind == "shell"
        object.__setattr__(self, "is_shell", shell)
        wrap = 2.0 * math.pi * self.reference_mm if shell else None
        object.__setattr__(self, "wrap_mm", wrap)
        object.__setattr__(self, "_on", {})
        maps = tuple(f.map_mm - TINY_MM for f in self.frames)
        turns = tuple(self._turn(t.s_mm) - TINY_MM for t in self.stringers)
        object.__setattr__(self, "_frame_maps", maps)
        object.__setattr__(self, "_stringer_turns", turns)

    # -- axes -----------------------------------------------------------------

    def map_of(self, x_mm: float, variant: str) -> float:
        """The map position of a true distance on this variant."""
        map_mm = x_mm
        for plug in self.plugs:
            if variant not in plug.variants and map_mm > plug.map_mm + TINY_MM:
                map_mm += plug.length_mm
        return map_mm

    def x_of(self, map_mm: float, variant: str) -> float | None:
        """The true distance of a map position; None in a plug the variant lacks."""
        x_mm = map_mm
        for plug in self.plugs:
            if variant not in plug.variants and map_mm > plug.map_mm + TINY_MM:
                if map_mm <= plug.end_mm + TINY_MM:
                    return None
                x_mm -= plug.length_mm
        return x_mm

    def size_at(self, map_mm: float) -> float:
        """Radius of the shell, or chord of the surface, by the file's straight runs."""
        before = self.profile[0]
        for after in self.profile[1:]:
            if map_mm <= after[0]:
                share = (map_mm - before[0]) / (after[0] - before[0])
                return before[1] + max(0.0, share) * (after[1] - before[1])
            before = after
        return before[1]

    radius_at = size_at

    def scale_at(self, map_mm: float) -> float:
        """True length across per mm of s."""
        return self.size_at(map_mm) / self.reference_mm

    def wrapped(self, s_mm: float) -> float:
        """s brought into [-wrap/2, wrap/2) on a shell; unchanged on a surface."""
        wrap = self.wrap_mm
        if wrap is None or -wrap / 2 <= s_mm < wrap / 2:
            return s_mm
        return (s_mm + wrap / 2) % wrap - wrap / 2

    def arc_between(self, s1_mm: float, s2_mm: float, map_mm: float) -> float:
        """True shorter distance across between two points at one map position."""
        return abs(self.wrapped(s2_mm - s1_mm)) * self.scale_at(map_mm)

    def _turn(self, s_mm: float) -> float:
        wrap = self.wrap_mm
        if wrap is None:
            return s_mm
        turn = s_mm % wrap
        return 0.0 if wrap - turn < TINY_MM else turn

    def bl_of(self, map_mm: float, s_mm: float) -> float:
        """Butt line of a point on a shell's skin; right positive."""
        return self.size_at(map_mm) * math.sin(s_mm / self.reference_mm)

    def wl_of(self, map_mm: float, s_mm: float) -> float | None:
        """Water line of a point on a shell's skin; None if the file gives no axis."""
        if self.axis_wl_mm is None:
            return None
        angle = s_mm / self.reference_mm
        return self.axis_wl_mm + self.size_at(map_mm) * math.cos(angle)

    # -- bays -----------------------------------------------------------------

    def bay_along(self, map_mm: float) -> int:
        """Ordinal of the frame ahead of the point; 0 ahead of the first frame."""
        return bisect_right(self._frame_maps, map_mm)

    def half_along(self, map_mm: float) -> int:
        """Half-bay number: twice the bay, plus one past its middle."""
        bay = self.bay_along(map_mm)
        lines = (self.map1_mm, *(f.map_mm for f in self.frames), self.map2_mm)
        return 2 * bay + (map_mm >= (lines[bay] + lines[bay + 1]) / 2 - TINY_MM)

    def bay_across(self, s_mm: float) -> int:
        """Ordinal of the stringer line before the point.

        Shells count clockwise (looking forward) from the crown line, which is 0, once
        round; surfaces count from 1 at the first line, 0 ahead of it.
        """
        bay = bisect_right(self._stringer_turns, self._turn(s_mm))
        return bay - 1 if self.is_shell else bay

    def half_across(self, s_mm: float) -> int:
        """Half-bay number across, counted as `bay_across`."""
        turn, bay = self._turn(s_mm), self.bay_across(s_mm)
        turns = [self._turn(t.s_mm) for t in self.stringers]
        if self.wrap_mm is not None:
            lines = [*turns, self.wrap_mm]
        else:
            lines = [self.s1_mm, *turns, self.s2_mm]
        return 2 * bay + (turn >= (lines[bay] + lines[bay + 1]) / 2 - TINY_MM)

    # -- what is there --------------------------------------------------------

    def frame(self, label: str) -> Frame | None:
        return next((f for f in self.frames if f.label == label), None)

    def stringer(self, label: str) -> Stringer | None:
        return next((t for t in self.stringers if t.label == label), None)

    def panel_at(self, map_mm: float, s_mm: float, surface: str = "") -> Panel | None:
        """The panel under a point; `surface` tells upper from lower on a wing."""
        for panel in self.panels:
            if panel.surface in ("outer", surface) and panel.box.holds(
                map_mm, s_mm, self.wrap_mm
            ):
                return panel
        return None

    def cutout_at(self, map_mm: float, s_mm: float) -> Cutout | None:
        """The cut-out strictly inside which the point lies; its edge is surround."""
        for cutout in self.cutouts:
            if cutout.box.holds(map_mm, s_mm, self.wrap_mm, -2.0 * TINY_MM):
                return cutout
        return None

    def surround_at(self, map_mm: float, s_mm: float) -> Cutout | None:
        """The cut-out in whose thicker surround the point lies."""
        if self.cutout_at(map_mm, s_mm):
            return None
        for cutout in self.cutouts:
            if cutout.surround_width_mm and cutout.box.holds(
                map_mm, s_mm, self.wrap_mm, cutout.surround_width_mm
            ):
                return cutout
        return None

    def thickness_at(
        self, map_mm: float, s_mm: float, surface: str = ""
    ) -> float | None:
        """Skin thickness: the surround's where there is one, else the panel's."""
        if self.cutout_at(map_mm, s_mm):
            return None
        surround = self.surround_at(map_mm, s_mm)
        if surround:
            return surround.surround_thickness_mm
        panel = self.panel_at(map_mm, s_mm, surface)
        return panel.thickness_mm if panel else None

    # -- how far --------------------------------------------------------------

    def distance_to_box(
        self, box: Box, map_mm: float, s_mm: float, variant: str
    ) -> float:
        """True shortest distance on this variant to a box; infinite if it has none."""
        near_map = min(max(map_mm, box.map1_mm), box.map2_mm)
        here, there = self.x_of(map_mm, variant), self.x_of(near_map, variant)
        if here is None or there is None:
            return math.inf
        if box.holds(near_map, s_mm, self.wrap_mm):
            across = 0.0
        else:
            across = min(
                self.arc_between(s_mm, edge, map_mm) for edge in (box.s1_mm, box.s2_mm)
            )
        return math.hypot(there - here, across)

    def nearest_cutout(
        self, map_mm: float, s_mm: float, variant: str
    ) -> tuple[Cutout, float] | None:
        """The nearest cut-out and its true distance (0 inside)."""
        found = [
            (c, self.distance_to_box(c.box, map_mm, s_mm, variant))
            for c in self.cutouts
        ]
        return min(found, key=lambda pair: pair[1]) if found else None

    def nearest_joint(
        self, map_mm: float, s_mm: float, variant: str
    ) -> tuple[Joint, float] | None:
        """The nearest lap or butt joint and its true distance."""
        found = [
            (j, self.distance_to_box(j.box, map_mm, s_mm, variant)) for j in self.joints
        ]
        return min(found, key=lambda pair: pair[1]) if found else None

    def frames_on(self, variant: str) -> FramesOn:
        """The frames this variant has, in order, and where they stand on it."""
        found = self._on.get(variant)
        if found is None:
            pairs = [(f, f.x_mm(variant)) for f in self.frames]
            here = [(f, x) for f, x in pairs if x is not None]
            found = tuple(f for f, _ in here), tuple(x for _, x in here)
            self._on[variant] = found
        return found

    def nearest_frame(self, x_mm: float, variant: str) -> tuple[Frame, float] | None:
        """The nearest frame this variant has and the true distance to it."""
        frames, places = self.frames_on(variant)
        at = bisect_right(places, x_mm)
        beside = [(frames[i], abs(places[i] - x_mm)) for i in (at - 1, at)
                  if 0 <= i < len(frames)]  # fmt: skip
        return min(beside, key=lambda pair: pair[1]) if beside else None
