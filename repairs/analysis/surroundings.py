"""What lies round a location: cut-outs, joint rows, repair edges, the bay's frames.

Coordinates are true distances on this aircraft: x along the section, s across on the
skin, both [mm], with any wrap already taken out by the caller.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import StrEnum


class ObstacleKind(StrEnum):
    """What a plain-skin solution must stay clear of."""

    CUTOUT = "cut-out"
    JOINT = "joint row"
    REPAIR = "repair edge"


@dataclass(frozen=True, slots=True)
class Obstacle:
    """A rectangle on the skin with its label [mm]."""

    kind: ObstacleKind
    label: str
    x1: float
    x2: float
    s1: float
    s2: float


@dataclass(frozen=True, slots=True)
class Surroundings:
    """A location's middle and extent, its bay and all obstacles of the section [mm].

    Parameters
    ----------
    x, s
        Middle of the damage.
    half_along
        Half of its extent along the section.
    bay
        Stations of the frames before and behind the middle; None = no frame there.
    bay_label
        As "FR 28 to FR 29".
    obstacles
        Cut-outs, joint rows and repairs of the section.
    source
        Geometry revision and record they are from.
    """

    x: float
    s: float
    half_along: float
    bay: tuple[float, float] | None
    bay_label: str
    obstacles: tuple[Obstacle, ...]
    source: str

    def nearest(self, kind: ObstacleKind) -> tuple[float, str] | None:
        """Return distance [mm] and label of the nearest obstacle of a kind, or None."""
        found = [(self._distance(o), o.label) for o in self.obstacles if o.kind is kind]
        return min(found, default=None)

    def nearest_to_middle(self) -> tuple[float, str] | None:
        """Return distance [mm] of the middle from the nearest obstacle of any kind."""
        found = [
            (math.hypot(*self._gaps(o)), f"{o.kind} {o.label}") for o in self.obstacles
        ]
        return min(found, default=None)

    def frame_room(self) -> float | None:
        """Return how far the nearer tip is from its frame [mm]; below 0 = beyond it."""
        if self.bay is None:
            return None
        return min(self.x - self.bay[0], self.bay[1] - self.x) - self.half_along

    def largest_half_length(self, clearance: float) -> tuple[float, str]:
        """Return the half-length at which a growing crack leaves the plain skin.

        Parameters
        ----------
        clearance
            Distance every tip must keep from every obstacle [mm].

        Returns
        -------
        tuple of (float, str)
            Half-length [mm] about the middle, and what it meets there.
        """
        limits: list[tuple[float, str]] = []
        if self.bay is not None:
            room = min(self.x - self.bay[0], self.bay[1] - self.x)
            limits.append((room, f"a frame of {self.bay_label}"))
        for obstacle in self.obstacles:
            along, across = self._gaps(obstacle)
            if across < clearance:
                reach = along - math.sqrt(clearance**2 - across**2)
                limits.append((reach, f"{obstacle.kind} {obstacle.label}"))
        return min(limits, default=(math.inf, "nothing recorded"))

    def _gaps(self, obstacle: Obstacle) -> tuple[float, float]:
        """Gaps from the middle to the rectangle along and across, 0 inside it."""
        along = max(obstacle.x1 - self.x, self.x - obstacle.x2, 0.0)
        across = max(obstacle.s1 - self.s, self.s - obstacle.s2, 0.0)
        return along, across

    def _distance(self, obstacle: Obstacle) -> float:
        along, across = self._gaps(obstacle)
        return math.hypot(max(along - self.half_along, 0.0), across)
