r"""A member's section as rectangles: its properties, whole and with a piece cut away.

Area, centroid and second moments are exact sums over the rectangles; a cut (thickness
lost, a flange removed, a hole) takes its rectangle out of each, and everything is found
anew, product of inertia and shift of the neutral axis included.

References
----------
.. [1] Parallel-axis theorem; bending of an unsymmetric section: elementary.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass
from itertools import combinations

from repairs.analysis.errors import InputError
from repairs.analysis.types import Grade, Reference

SECTION = Reference(
    "Parallel-axis theorem and bending of an unsymmetric section", Grade.DERIVED
)
OVERLAP = "Rectangles {one} and {two} of the section overlap. Enter each area once."
NOTHING_LEFT = "Nothing is left of the section. Check the cut's position and size."
NOT_A_RECTANGLE = (
    "Rectangle reads {x1:.4g} to {x2:.4g} by {y1:.4g} to {y2:.4g} mm; each first "
    "number must be the smaller. Enter it again."
)


@dataclass(frozen=True, slots=True)
class Rectangle:
    """A rectangle of the section, its sides along x and y [mm]."""

    x1: float
    x2: float
    y1: float
    y2: float

    def __post_init__(self) -> None:
        if not (self.x1 < self.x2 and self.y1 < self.y2):  # also refuses NaN
            raise InputError(
                NOT_A_RECTANGLE.format(x1=self.x1, x2=self.x2, y1=self.y1, y2=self.y2)
            )

    @property
    def area(self) -> float:
        """Area [mm^2]."""
        return (self.x2 - self.x1) * (self.y2 - self.y1)

    def overlaps(self, other: Rectangle) -> bool:
        """Whether the two share area; a common edge is none."""
        return (
            self.x1 < other.x2
            and other.x1 < self.x2
            and self.y1 < other.y2
            and other.y1 < self.y2
        )

    def without(self, cut: Rectangle) -> Iterator[Rectangle]:
        """Yield the up to four rectangles left when `cut` is taken away."""
        if not self.overlaps(cut):
            yield self
            return
        low, high = max(self.y1, cut.y1), min(self.y2, cut.y2)
        for x1, x2, y1, y2 in (
            (self.x1, self.x2, self.y1, low),
            (self.x1, self.x2, high, self.y2),
            (self.x1, cut.x1, low, high),
            (cut.x2, self.x2, low, high),
        ):
            if x1 < x2 and y1 < y2:
                yield Rectangle(x1, x2, y1, y2)


@dataclass(frozen=True, slots=True)
class Section:
    """A section made of rectangles that do not overlap."""

    rectangles: tuple[Rectangle, ...]

    def __post_init__(self) -> None:
        if not self.rectangles:
            raise InputError(NOTHING_LEFT)
        for one, two in combinations(self.rectangles, 2):
            if one.overlaps(two):
                raise InputError(OVERLAP.format(one=one, two=two))

    def without(self, cut: Rectangle) -> Section:
        """Return what is left when `cut` is taken out of every rectangle."""
        return Section(
            tuple(left for part in self.rectangles for left in part.without(cut))
        )

    def corners(self) -> Iterator[tuple[float, float]]:
        """Yield the corners of all rectangles [mm]; an extreme fibre is one of them."""
        for part in self.rectangles:
            for x in (part.x1, part.x2):
                yield x, part.y1
                yield x, part.y2


@dataclass(frozen=True, slots=True)
class Properties:
    """Properties of a section about its own centroid.

    Parameters
    ----------
    area
        [mm^2].
    x, y
        Centroid [mm].
    ixx, iyy, ixy
        Integrals of y^2, x^2 and xy about the centroid [mm^4].
    """

    area: float
    x: float
    y: float
    ixx: float
    iyy: float
    ixy: float

    @property
    def principal(self) -> tuple[float, float]:
        """Largest and smallest second moment of area [mm^4]."""
        mean = (self.ixx + self.iyy) / 2
        radius = math.hypot((self.ixx - self.iyy) / 2, self.ixy)
        return mean + radius, mean - radius

    @property
    def least_gyration(self) -> float:
        """Smallest radius of gyration [mm]."""
        return math.sqrt(self.principal[1] / self.area)

    def stress_slopes(self, moment_x: float, moment_y: float) -> tuple[float, float]:
        r"""Return the slopes of bending stress along x and y [MPa/mm].

        .. math::
            \frac{M_yI_{xx} - M_xI_{xy}}{I_{xx}I_{yy} - I_{xy}^2},\quad
            \frac{M_xI_{yy} - M_yI_{xy}}{I_{xx}I_{yy} - I_{xy}^2}

        M_x pulls at +y, M_y at +x [N mm].
        """
        determinant = self.ixx * self.iyy - self.ixy**2
        return (
            (moment_y * self.ixx - moment_x * self.ixy) / determinant,
            (moment_x * self.iyy - moment_y * self.ixy) / determinant,
        )


def properties(section: Section) -> Properties:
    """Return area, centroid and second moments of a section.

    Parameters
    ----------
    section
        Rectangles [mm].

    Returns
    -------
    Properties
        About the section's own centroid.

    Notes
    -----
    No range: exact.

    References
    ----------
    .. [1] See `SECTION`.
    """
    parts = [
        (r.area, (r.x1 + r.x2) / 2, (r.y1 + r.y2) / 2, r.x2 - r.x1, r.y2 - r.y1)
        for r in section.rectangles
    ]
    area = sum(a for a, *_ in parts)
    x0 = sum(a * x for a, x, *_ in parts) / area
    y0 = sum(a * y for a, _, y, *_ in parts) / area
    return Properties(
        area,
        x0,
        y0,
        sum(a * ((y - y0) ** 2 + h * h / 12) for a, _, y, _, h in parts),
        sum(a * ((x - x0) ** 2 + w * w / 12) for a, x, _, w, _ in parts),
        sum(a * (x - x0) * (y - y0) for a, x, y, *_ in parts),
    )


@dataclass(frozen=True, slots=True)
class FibreStress:
    """Largest and smallest stress of a section [MPa], tension positive."""

    largest: float
    smallest: float


def fibre_stress(
    section: Section,
    force: float,
    moment_x: float = 0.0,
    moment_y: float = 0.0,
    at: tuple[float, float] | None = None,
) -> FibreStress:
    r"""Return the extreme fibre stresses under a force and moments.

    .. math:: \sigma = \frac NA + a(x - x_c) + b(y - y_c)

    Parameters
    ----------
    section
        What is left of the member.
    force
        Axial force, tension positive [N].
    moment_x, moment_y
        Moments that pull at +y and at +x [N mm].
    at
        Point the force acts through [mm], as the centroid before a cut; None = through
        the section's own centroid. A shifted centroid bends the section.

    Returns
    -------
    FibreStress
        Extremes over all corners [MPa].

    Notes
    -----
    Range: elastic. Local buckling is not in it.

    References
    ----------
    .. [1] See `SECTION`.
    """
    own = properties(section)
    if at is not None:
        moment_x += force * (at[1] - own.y)
        moment_y += force * (at[0] - own.x)
    along_x, along_y = own.stress_slopes(moment_x, moment_y)
    stresses = [
        force / own.area + along_x * (x - own.x) + along_y * (y - own.y)
        for x, y in section.corners()
    ]
    return FibreStress(max(stresses), min(stresses))
