r"""A fastener hole with cracks: the load that passes it and the load its pin gives up.

With :math:`\lambda` the share of a strip's load that the fastener takes,
:math:`P = \lambda\,\sigma W_0 t`, both parts add:

.. math::
    K = \sigma\sqrt{\pi c}\,\Bigl[(1 - \lambda)F_{by}
        + \lambda\frac{W_0}{D}F_{br}\Bigr]

:math:`W_0` is the strip whose load is shared; the width W that enters the factors may
be less, where an edge is near.

References
----------
.. [1] USAF Damage Tolerant Design Handbook, Tables 11.3.10 to 11.3.12.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from repairs.analysis.errors import within
from repairs.analysis.intensity import holes as hi
from repairs.analysis.intensity.part_through import PartThrough, corner_crack_at_hole
from repairs.analysis.types import EdgeLength, Grade, Reference

SUPERPOSED = Reference(
    "Bypass and bearing parts of K added: linear superposition", Grade.DERIVED
)
CORNER_UNDER_PIN = Reference(
    "rule of this program: corner crack in tension times bearing over bypass of a "
    "through crack as long as the point's distance from the hole edge, compounding by "
    "ratios after Cartwright and Rooke",
    Grade.RECORDED,
)
SHORTEST_SPLIT = 0.1
"""c/r from which the splitting pair holds; below it one crack's solution is scaled."""


@dataclass(frozen=True, slots=True)
class CrackedHole:
    """A hole and its cracks: diameter D, width W that counts [mm], 1 or 2 cracks.

    `transfer` is the share of the load of a strip `strip` mm wide that the fastener
    takes [-]; 0 for an open hole.
    """

    diameter: float
    width: float
    cracks: int = 1
    transfer: float = 0.0
    strip: float = 0.0

    @property
    def bearing(self) -> float:
        """Bearing stress over gross stress, P/(D t) over sigma [-]."""
        return self.transfer * self.strip / self.diameter


def through_factor(c_edge: EdgeLength, hole: CrackedHole) -> float:
    r"""Return F of through cracks at a hole, open or loaded by its fastener [1]_.

    Parameters
    ----------
    c_edge
        Crack length from the hole edge, of each crack [mm].
    hole
        Hole, width, number of cracks and load transfer.

    Returns
    -------
    float
        Factor on gross stress times sqrt(pi c) [-].

    Notes
    -----
    Range 0 <= transfer <= 1, D/W <= 0.5 and D/2 + c <= 0.45 W.

    References
    ----------
    .. [1] See `SUPERPOSED`, and `HOLE_SINGLE`, `HOLE_DOUBLE`, `HOLE_BEARING`.
    """
    share = within("Load transfer", hole.transfer, 0, 1, "a share of the strip's load")
    plain = hi.hole_double if hole.cracks == 2 else hi.hole_single
    bypass = plain(c_edge, hole.diameter, hole.width)
    if share == 0:
        return bypass
    return (1 - share) * bypass + hole.bearing * _bearing(c_edge, hole)


def _bearing(c_edge: EdgeLength, hole: CrackedHole) -> float:
    """Return F on the bearing stress; two short cracks as one, joined at c/r 0.1."""
    size = hole.diameter, hole.width
    if hole.cracks == 1:
        return hi.hole_single_bearing(c_edge, *size)
    joint = EdgeLength(SHORTEST_SPLIT * hole.diameter / 2 * (1 + 1e-9))
    if c_edge >= joint:
        return hi.hole_double_bearing(c_edge, *size)
    more = hi.hole_double_bearing(joint, *size) / hi.hole_single_bearing(joint, *size)
    return more * hi.hole_single_bearing(c_edge, *size)


def corner_factor(crack: PartThrough, hole: CrackedHole, angle: float) -> float:
    r"""Return :math:`F/\sqrt{Q}` of corner cracks at a hole, open or loaded [1]_.

    Parameters
    ----------
    crack
        Depth along the bore, length from the hole edge, thickness [mm].
    hole
        Hole, width, number of cracks and load transfer.
    angle
        Angle from the free surface (0) to the bore (90) [deg].

    Returns
    -------
    float
        Factor on gross stress times sqrt(pi a) [-].

    Notes
    -----
    Range of `corner_crack_at_hole` and of `through_factor`. Load even through the
    thickness: a pin that bends loads one face more.

    References
    ----------
    .. [1] See `CORNER_AT_HOLE`, `CORNER_UNDER_PIN`.
    """
    bypass = corner_crack_at_hole(
        crack, hole.diameter / 2, hole.width / 2, angle, cracks=hole.cracks
    )
    share = within("Load transfer", hole.transfer, 0, 1, "a share of the strip's load")
    if share == 0:
        return bypass
    away = EdgeLength(crack.length * math.cos(math.radians(angle)))
    over = hi.bearing_over_bypass(away, hole.diameter, hole.width)
    return bypass * (1 - share + hole.bearing * over)
