r"""Largest stress intensity of a small surface defect of any shape (Murakami).

.. math:: K_{max} = 0.65\,S\sqrt{\pi\sqrt{area}}

with the area projected on the plane across the stress. A check of surface-crack
solutions, which have a shape.
"""

from __future__ import annotations

import math

from repairs.analysis.errors import within
from repairs.analysis.types import Grade, Reference

MURAKAMI = Reference(
    "Murakami, 0.65 S sqrt(pi sqrt(area)) of a surface defect, in two public texts",
    Grade.QUOTED,
)
LONG_DEFECT = Reference(
    "Murakami, sqrt(area) of a long shallow defect is sqrt(10) times its depth",
    Grade.MEMORY,
)
LONG_AREA = 10.0
"""Area over depth squared beyond which a longer shallow defect is no worse [-]."""


def semi_ellipse_area(depth: float, half_length: float) -> float:
    """Return the projected area of a surface defect, a long one cut off.

    Parameters
    ----------
    depth, half_length
        Depth a and half of the surface length c [mm].

    Returns
    -------
    float
        Area [mm^2], no more than 10 a^2.

    Notes
    -----
    Range a > 0, c > 0.

    References
    ----------
    .. [1] See `LONG_DEFECT`.
    """
    within("Depth of the defect, mm", depth, 1e-9, 1e3, "a defect")
    within("Half-length of the defect, mm", half_length, 1e-9, 1e4, "a defect")
    return min(math.pi / 2 * depth * half_length, LONG_AREA * depth**2)


def surface_defect_intensity(stress: float, area: float) -> float:
    """Return the largest K along a surface defect's front.

    Parameters
    ----------
    stress
        Stress across the projected area [MPa].
    area
        Projected area [mm^2], of units [mm] squared.

    Returns
    -------
    float
        Stress-intensity factor [MPa*sqrt(mm)].

    Notes
    -----
    Range: small against the thickness; no effect of a back surface.

    References
    ----------
    .. [1] See `MURAKAMI`.
    """
    within("Area of the defect, mm²", area, 0, 1e6, "a defect")
    return 0.65 * stress * math.sqrt(math.pi * math.sqrt(area))
