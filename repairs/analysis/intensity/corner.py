r"""Part-through cracks beyond the usual two: plate corner, bore of a hole, bending.

Like `part_through`, whose crack these share: tension functions return
:math:`F/\sqrt{Q}` for :math:`K = (F/\sqrt Q)\,S\sqrt{\pi a}`; the bending functions
return H, the share of it that outer-fibre bending stress counts with,
:math:`K = (S_t + H S_b)(F/\sqrt{Q})\sqrt{\pi a}`.

References
----------
.. [1] Newman and Raju, NASA TM-85793, as transcribed in public codes that agree.
"""

from __future__ import annotations

import math

from repairs.analysis.errors import within
from repairs.analysis.intensity.holes import newman_g2
from repairs.analysis.intensity.part_through import (
    PartThrough,
    hole_width,
    shah,
    shape_factor,
)
from repairs.analysis.types import Grade, Reference

CORNER_IN_PLATE = Reference(
    "Newman and Raju, NASA TM-85793, eqs. 47-51, quarter-elliptical corner crack, as "
    "transcribed in public codes",
    Grade.QUOTED,
)
BORE_CRACK = Reference(
    "Newman and Raju, surface crack at the bore of a hole, in public university notes; "
    "t read as the full thickness, which reproduces the notes' two answers",
    Grade.QUOTED,
)
PLATE_BENDING = Reference(
    "Newman and Raju, NASA TM-85793, bending multipliers H, as transcribed in a public "
    "code",
    Grade.QUOTED,
)
RANGE = "Newman-Raju"


def corner_crack(crack: PartThrough, width: float, angle: float) -> float:
    r"""Return :math:`F/\sqrt{Q}` of a corner crack at a plate edge, in tension [1]_.

    Parameters
    ----------
    crack
        Depth a along the thickness, length c along the surface, thickness t [mm].
    width
        Plate width b from the cracked edge to the other [mm].
    angle
        Angle from the wide surface (0) to the edge face (90) [deg].

    Returns
    -------
    float
        Factor on S sqrt(pi a) [-].

    Notes
    -----
    Range 0.3 <= a/c <= 2, a/t <= 1, c/b <= 0.5. At a/c 0.4 to 0.5 the depth tip is 6 to
    15 % above the USAF handbook's table; at a/c 0.2, outside this range, they part by
    26 %.

    References
    ----------
    .. [1] See `CORNER_IN_PLATE`.
    """
    aspect = within("Depth over length a/c", crack.depth / crack.length, 0.3, 2, RANGE)
    x = within("Depth over thickness", crack.depth / crack.thickness, 0, 1, RANGE)
    reach = within("Length over width", crack.length / width, 0, 0.5, RANGE)
    phi = math.radians(angle)
    if aspect <= 1:
        m1 = 1.08 - 0.03 * aspect
        m2 = -0.44 + 1.06 / (0.3 + aspect)
        m3 = -0.5 + 0.25 * aspect + 14.8 * (1 - aspect) ** 15
        depth = x
    else:
        flat = 1 / aspect
        m1 = math.sqrt(flat) * (1.08 - 0.03 * flat)
        m2, m3 = 0.375 * flat**2, -0.25 * flat**2
        depth = x / aspect  # c/t
    g1 = 1 + (0.08 + 0.4 * depth**2) * (1 - math.sin(phi)) ** 3
    g2 = 1 + (0.08 + 0.15 * depth**2) * (1 - math.cos(phi)) ** 3
    lam = reach * math.sqrt(x)
    fw = 1 - 0.2 * lam + 9.4 * lam**2 - 19.4 * lam**3 + 27.1 * lam**4
    q, ellipse = shape_factor(aspect, phi)
    return (m1 + m2 * x**2 + m3 * x**4) * g1 * g2 * ellipse * fw / math.sqrt(q)


def bore_crack(
    crack: PartThrough, radius: float, half_width: float, *, cracks: int = 1
) -> float:
    r"""Return :math:`F/\sqrt{Q}` of a surface crack in a hole's bore, in tension [1]_.

    .. math::
        M_1 = 1,\; M_2 = \frac{0.05}{0.11 + (a/c)^{1.5}},\;
        M_3 = \frac{0.29}{0.23 + (a/c)^{1.5}}

    at the end of the crack's axis along the thickness, where it is largest.

    Parameters
    ----------
    crack
        Half-length a along the bore, length c from the hole edge, thickness t [mm].
    radius
        Hole radius r [mm].
    half_width
        Half of the plate width b, hole on the centre line [mm].
    cracks
        1 or 2 (symmetric). One crack is the symmetric value times Shah's factor.

    Returns
    -------
    float
        Factor on S sqrt(pi a) [-].

    Notes
    -----
    Range 0.2 <= a/c <= 1, a/t <= 0.5, 0.5 <= r/t <= 3, (r + c)/b <= 0.5 (limits from
    memory). The report is remembered to take half the thickness for t: that is 1 %
    higher in the notes' case.

    References
    ----------
    .. [1] See `BORE_CRACK`.
    """
    a, c, t = crack.depth, crack.length, crack.thickness
    aspect = within("Half-length over length a/c", a / c, 0.2, 1, RANGE)
    x = within("Half-length over thickness", a / t, 0, 0.5, RANGE)
    within("Hole radius over thickness", radius / t, 0.5, 3, RANGE)
    bulk = aspect**1.5
    series = 1 + 0.05 / (0.11 + bulk) * x**2 + 0.29 / (0.23 + bulk) * x**4
    lam = 1 / (1 + c / radius * math.cos(0.9 * math.pi / 2))
    g2 = newman_g2(lam) / (1 + 0.08 * lam**2)
    g3 = 1 + 0.1 * (1 - x) ** 10
    q, _ = shape_factor(aspect, math.pi / 2)
    width = hole_width(crack, radius, half_width, cracks)
    symmetric = series * g2 * g3 * width / math.sqrt(q)
    return float(symmetric if cracks == 2 else symmetric * shah(crack, radius))


def surface_bending(crack: PartThrough, angle: float) -> float:
    """Return H of a semi-elliptical surface crack in bending [-].

    Parameters
    ----------
    crack
        Depth, half surface length and thickness [mm].
    angle
        Angle from the free surface (0) to the deepest point (90) [deg].

    Returns
    -------
    float
        Multiplier of outer-fibre bending stress [-]; may be negative at the deepest
        point of a deep crack, which then lies in compression.

    Notes
    -----
    Range 0.2 <= a/c <= 2, a/t <= 0.8 (limits from memory).

    References
    ----------
    .. [1] See `PLATE_BENDING`.
    """
    return _bending(crack, angle, 0.55)


def corner_bending(crack: PartThrough, angle: float) -> float:
    """Return H of a corner crack in bending about the wide faces [-].

    Parameters
    ----------
    crack
        Depth, length along the surface, thickness [mm].
    angle
        Angle from the wide surface (0) to the edge face (90) [deg].

    Returns
    -------
    float
        Multiplier of outer-fibre bending stress [-].

    Notes
    -----
    Range 0.2 <= a/c <= 2, a/t <= 0.8 (limits from memory).

    References
    ----------
    .. [1] See `PLATE_BENDING`.
    """
    return _bending(crack, angle, 0.64)


def _bending(crack: PartThrough, angle: float, deep: float) -> float:
    """Return H1 + (H2 - H1) sin^p; `deep` is 0.55 for surface, 0.64 for corner."""
    aspect = within("Depth over length a/c", crack.depth / crack.length, 0.2, 2, RANGE)
    x = within("Depth over thickness", crack.depth / crack.thickness, 0, 0.8, RANGE)
    flat = min(aspect, 1 / aspect)
    power = 0.2 + flat + 0.6 * x
    if aspect <= 1:
        first = 1 - 0.34 * x - 0.11 * aspect * x
        linear = -1.22 - 0.12 * aspect
        square = deep - 1.05 * aspect**0.75 + 0.47 * aspect**1.5
    else:
        first = 1 + (-0.04 - 0.41 * flat) * x
        first += (0.55 - 1.93 * flat**0.75 + 1.38 * flat**1.5) * x**2
        linear = -2.11 + 0.77 * flat
        square = deep - 0.72 * flat**0.75 + 0.14 * flat**1.5
    second = 1 + linear * x + square * x**2
    return float(first + (second - first) * math.sin(math.radians(angle)) ** power)
