"""A window of an unrolled section laid on paper: from mm to the drawing's units.

Shells are drawn with one scale both ways, across at the reference radius, always as
seen from outside: what lies wholly on the right-hand side has the nose to the right, as
to somebody standing there; everything else has the nose to the left. Open surfaces are
drawn to their true chord.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import cached_property

from fleet.drawing.svg import Box
from fleet.location.geometry import Section

LEFT, RIGHT, TOP = 64.0, 54.0, 34.0
TALLEST = 560.0


@dataclass(frozen=True)
class Window:
    """The part shown [mm]: along on the drawing's axis, across from the crown."""

    along1_mm: float
    along2_mm: float
    across1_mm: float
    across2_mm: float


@dataclass(frozen=True)
class Sheet:
    """A section on paper, on one variant's true axis or (variant None) the map axis.

    ``skin`` is the skin looked at on a surface with two of them; empty means both.
    """

    section: Section
    variant: str | None = None
    skin: str = ""
    window: Window | None = None
    width: float = 1180.0

    # -- what is shown ----------------------------------------------------------

    @cached_property
    def shown(self) -> Window:
        """The window, or the whole section."""
        s = self.section
        return self.window or Window(
            self.along_of(s.map1_mm), self.along_of(s.map2_mm), s.s1_mm, s.s2_mm
        )

    def along_of(self, map_mm: float) -> float:
        """A map position on the drawing's axis; inside an absent plug, the plug."""
        if self.variant is None:
            return map_mm
        x_mm = self.section.x_of(map_mm, self.variant)
        if x_mm is not None:
            return x_mm
        plug = max(p.map_mm for p in self.section.plugs if p.map_mm < map_mm)
        return self.section.x_of(plug, self.variant) or plug

    def map_of(self, along_mm: float) -> float:
        """The map position of a place on the drawing's axis."""
        if self.variant is None:
            return along_mm
        return self.section.map_of(along_mm, self.variant)

    @cached_property
    def frames(self) -> list[tuple[str, str, float]]:
        """Name, station label and place along of each frame inside the window."""
        prefix = self.section.frame_prefix
        found = []
        for frame in self.section.frames:
            place = frame.map_mm if self.variant is None else frame.x_mm(self.variant)
            if place is not None and self._along_shown(place):
                found.append((f"{prefix} {frame.label}", frame.station_label, place))
        return found

    def _along_shown(self, along_mm: float) -> bool:
        return self.shown.along1_mm - 1e-6 <= along_mm <= self.shown.along2_mm + 1e-6

    def spans(self, s1_mm: float, s2_mm: float) -> Iterator[tuple[float, float]]:
        """The parts of a span across that fall into the window, round the shell too."""
        low, high = self.shown.across1_mm, self.shown.across2_mm
        wrap = self.section.wrap_mm
        for turn in (-1, 0, 1) if wrap else (0,):
            shift = turn * (wrap or 0.0)
            start, end = max(s1_mm + shift, low), min(s2_mm + shift, high)
            if start < end or (s1_mm == s2_mm and start == end):
                yield start, end
                if s1_mm == s2_mm:
                    return

    # -- which way round --------------------------------------------------------

    @property
    def turned(self) -> bool:
        """Whether the nose (root, foot) is on the right of the drawing."""
        section = self.section
        if section.is_shell:
            return self.right_side
        return (section.side == "L") != (self.skin == "lower")

    @property
    def right_side(self) -> bool:
        """Whether the window lies wholly right of the crown line."""
        wrap = self.section.wrap_mm
        if wrap is None:
            return False
        return (
            self.shown.across1_mm > -1e-6 and self.shown.across2_mm <= wrap / 2 + 1e-6
        )

    @property
    def left_side(self) -> bool:
        """Whether the window lies wholly left of the crown line."""
        return self.section.is_shell and self.shown.across2_mm <= 1e-6

    @property
    def upward(self) -> bool:
        """Whether s grows up the drawing; a mirror image would be seen from inside."""
        two_skins = self.section.skins == ("left", "right")
        return (self.section.is_shell and not self.turned) or two_skins

    # -- on paper ---------------------------------------------------------------

    @cached_property
    def scale(self) -> float:
        """Drawing units per mm, the same both ways."""
        along = self.shown.along2_mm - self.shown.along1_mm
        across = self.shown.across2_mm - self.shown.across1_mm
        return min((self.width - LEFT - RIGHT) / along, TALLEST / across)

    @cached_property
    def plot(self) -> Box:
        """The area of the structure on paper."""
        wide = (self.shown.along2_mm - self.shown.along1_mm) * self.scale
        high = (self.shown.across2_mm - self.shown.across1_mm) * self.scale
        return Box(LEFT, TOP, LEFT + wide, TOP + high)

    def x(self, along_mm: float) -> float:
        """Across the paper."""
        if self.turned:
            return self.plot.right - (along_mm - self.shown.along1_mm) * self.scale
        return self.plot.left + (along_mm - self.shown.along1_mm) * self.scale

    def y(self, s_mm: float, along_mm: float) -> float:
        """Down the paper; a surface narrows with its chord."""
        if not self.section.is_shell:
            s_mm *= self.section.scale_at(self.map_of(along_mm))
        if self.upward:
            return self.plot.bottom - (s_mm - self.shown.across1_mm) * self.scale
        return self.plot.top + (s_mm - self.shown.across1_mm) * self.scale

    def line_across(self, along_mm: float) -> list[tuple[float, float]]:
        """A frame's line, edge to edge."""
        low, high = self.shown.across1_mm, self.shown.across2_mm
        x = self.x(along_mm)
        return [(x, self.y(low, along_mm)), (x, self.y(high, along_mm))]

    def line_along(self, s_mm: float) -> list[tuple[float, float]]:
        """A stringer's line over the window, bent where the profile bends."""
        return self.line_between(s_mm, self.shown.along1_mm, self.shown.along2_mm)

    def line_between(
        self, s_mm: float, low: float, high: float
    ) -> list[tuple[float, float]]:
        """A line at one s between two places along."""
        knots = []
        if not self.section.is_shell:
            ends = (self.along_of(place) for place, _ in self.section.profile)
            knots = [place for place in ends if low < place < high]
        return [(self.x(a), self.y(s_mm, a)) for a in (low, *knots, high)]

    def corners(self, along: tuple[float, float], across: tuple[float, float]) -> Box:
        """The rectangle on paper about a patch."""
        middle = (along[0] + along[1]) / 2
        xs = [self.x(place) for place in along]
        ys = [self.y(s, middle) for s in across]
        return Box(min(xs), min(ys), max(xs), max(ys))

    def clip(self, along: tuple[float, float]) -> tuple[float, float] | None:
        """The part of a span along inside the window; None if there is none."""
        low = max(along[0], self.shown.along1_mm)
        high = min(along[1], self.shown.along2_mm)
        return (low, high) if low <= high else None
