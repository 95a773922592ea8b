r"""Stress-intensity factors of part-through cracks (Newman and Raju).

The functions return :math:`F/\sqrt{Q}`, so that :math:`K = F_Q\,S\sqrt{\pi a}` with a
the depth and S the gross tension stress.

References
----------
.. [1] Newman and Raju, NASA TP-1578 and TM-85793, in public university notes.
.. [2] USAF Damage Tolerant Design Handbook, 11.3.8 and 11.3.11: growth is taken at
   10 and 90 degrees (surface crack), 10 and 80 degrees (corner crack at a hole).
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from repairs.analysis.errors import within
from repairs.analysis.intensity.holes import newman_g2
from repairs.analysis.intensity.through import secant
from repairs.analysis.types import Grade, Reference

CORNER_AT_HOLE = Reference(
    "Newman and Raju, NASA TM-85793, corner crack at a hole with Shah's factor for one "
    "crack, in public university notes",
    Grade.QUOTED,
)
SURFACE_CRACK = Reference(
    "Newman and Raju, NASA TM-85793, semi-elliptical surface crack, in public "
    "university notes",
    Grade.QUOTED,
)
ANGLES = Reference(
    "USAF Damage Tolerant Design Handbook, 11.3.8 and 11.3.11, growth angles",
    Grade.PRINT,
)
CORNER_ANGLES = (10.0, 80.0)
SURFACE_ANGLES = (10.0, 90.0)


@dataclass(frozen=True, slots=True)
class PartThrough:
    """A part-through crack: depth a, length c, in a plate of thickness t [mm].

    c is half the surface length of a surface crack, and the length from the hole edge
    of a corner crack.
    """

    depth: float
    length: float
    thickness: float


def shape_factor(aspect: float, phi: float) -> tuple[float, float]:
    """Return Q and f_phi of an ellipse of aspect a/c, at phi from the surface [rad]."""
    sine, cosine = math.sin(phi), math.cos(phi)
    if aspect <= 1:
        bow = (aspect * cosine) ** 2 + sine**2
        return 1 + 1.464 * aspect**1.65, bow**0.25
    bow = (sine / aspect) ** 2 + cosine**2
    return 1 + 1.464 / aspect**1.65, bow**0.25


def _series(crack: PartThrough, aspect: float) -> float:
    """Return the depth series M of a surface crack."""
    x = crack.depth / crack.thickness
    if aspect <= 1:
        m1 = 1.13 - 0.09 * aspect
        m2 = -0.54 + 0.89 / (0.2 + aspect)
        m3 = 0.5 - 1 / (0.65 + aspect) + 14 * (1 - aspect) ** 24
    else:
        flat = 1 / aspect
        m1 = math.sqrt(flat) * (1 + 0.04 * flat)
        m2, m3 = 0.2 * flat**4, -0.11 * flat**4
    return m1 + m2 * x**2 + m3 * x**4


def _near_surface(crack: PartThrough, aspect: float, phi: float) -> float:
    """Return g1 at the angle phi from the free surface [rad]."""
    x = crack.depth / crack.thickness
    return 1 + (0.1 + 0.35 * x**2 / max(1, aspect)) * (1 - math.sin(phi)) ** 2


def shah(crack: PartThrough, radius: float) -> float:
    """Return Shah's factor: one crack at a hole over two, K over K [-]."""
    area = crack.depth * crack.length / (crack.thickness * radius)
    return math.sqrt((4 / math.pi + area / 2) / (4 / math.pi + area))


def hole_width(
    crack: PartThrough, radius: float, half_width: float, cracks: int
) -> float:
    """Return the width factor of part-through cracks at a hole, range checked [-]."""
    c = crack.length
    within(
        "Hole radius plus crack over half-width",
        (radius + c) / half_width,
        0,
        0.5,
        "N-R",
    )
    swept = math.pi * (2 * radius + cracks * c)
    swept /= 4 * (half_width - c) + 2 * cracks * c
    depth = math.sqrt(crack.depth / crack.thickness)
    return math.sqrt(
        secant(math.pi * radius / (2 * half_width)) * secant(swept * depth)
    )


def _part_range(crack: PartThrough) -> None:
    within("Depth over length a/c", crack.depth / crack.length, 0.2, 2, "Newman-Raju")
    within("Depth over thickness", crack.depth / crack.thickness, 0, 1, "Newman-Raju")


def surface_crack(crack: PartThrough, half_width: float, angle: float) -> float:
    r"""Return :math:`F/\sqrt{Q}` of a semi-elliptical surface crack in tension [1]_.

    Parameters
    ----------
    crack
        Depth, half surface length and thickness [mm].
    half_width
        Half of the plate width b [mm].
    angle
        Angle from the free surface (0) to the deepest point (90) [deg].

    Returns
    -------
    float
        Factor on S sqrt(pi a) [-].

    Notes
    -----
    Range 0.2 <= a/c <= 2, a/t <= 1, c/b <= 0.5 (limits from memory); stated accuracy
    5 %.

    References
    ----------
    .. [1] See `SURFACE_CRACK`.
    """
    _part_range(crack)
    reach = within("Length over half-width", crack.length / half_width, 0, 0.5, "N-R")
    aspect, phi = crack.depth / crack.length, math.radians(angle)
    q, fphi = shape_factor(aspect, phi)
    depth = math.sqrt(crack.depth / crack.thickness)
    fw = math.sqrt(secant(math.pi / 2 * reach * depth))
    series = _series(crack, aspect) * _near_surface(crack, aspect, phi)
    return series * fphi * fw / math.sqrt(q)


def corner_crack_at_hole(
    crack: PartThrough,
    radius: float,
    half_width: float,
    angle: float,
    *,
    cracks: int = 1,
) -> float:
    r"""Return :math:`F/\sqrt{Q}` of corner cracks at a hole in tension [1]_.

    Parameters
    ----------
    crack
        Depth along the bore, length along the surface from the edge, thickness [mm].
    radius
        Hole radius r [mm].
    half_width
        Half of the plate width b, hole on the centre line [mm].
    angle
        Angle from the free surface (0) to the bore (90) [deg].
    cracks
        1 or 2 (symmetric). One crack is the symmetric value times Shah's factor.

    Returns
    -------
    float
        Factor on S sqrt(pi a) [-].

    Notes
    -----
    Range 0.2 <= a/c <= 2, a/t <= 1, 0.5 <= r/t <= 3, (r + c)/b <= 0.5 (limits from
    memory; 3 is common use beyond the published 2). Unloaded hole: no bearing.

    References
    ----------
    .. [1] See `CORNER_AT_HOLE`.
    """
    _part_range(crack)
    within("Hole radius over thickness", radius / crack.thickness, 0.5, 3, "N-R")
    a, c, t = crack.depth, crack.length, crack.thickness
    aspect, phi = a / c, math.radians(angle)
    q, fphi = shape_factor(aspect, phi)
    lam = 1 / (1 + c / radius * math.cos(0.85 * phi))
    g2 = newman_g2(lam) / (1 + 0.13 * lam**2)
    near = (1 + 0.1 * (1 - math.cos(phi)) ** 2) * (0.85 + 0.15 * (a / t) ** 0.25)
    if aspect <= 1:
        g3 = (1 + 0.04 * aspect) * near
        g4 = 1 - 0.7 * (1 - a / t) * (aspect - 0.2) * (1 - aspect)
    else:
        g3, g4 = (1.13 - 0.09 / aspect) * near, 1.0
    series = _series(crack, aspect) * _near_surface(crack, aspect, phi)
    width = hole_width(crack, radius, half_width, cracks)
    symmetric = series * g2 * g3 * g4 * fphi * width / math.sqrt(q)
    return float(symmetric if cracks == 2 else symmetric * shah(crack, radius))
