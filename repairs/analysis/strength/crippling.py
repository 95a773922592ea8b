r"""Crippling of formed and extruded sections: Needham's angles, Gerard's families.

Both use the section as it is left: a blended leg brings its own thickness.

References
----------
.. [1] Needham, the ultimate strength of aluminium-alloy formed structural shapes, J.
   Aero. Sci. 1954, in public university notes.
.. [2] Gerard, NACA TN 3784, in a public copy with garbled typography.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import StrEnum

from repairs.analysis.errors import InputError, within
from repairs.analysis.types import Grade, Reference

NEEDHAM = Reference(
    "Needham 1954, formula and constants in public university notes", Grade.QUOTED
)
GERARD = Reference(
    "Gerard, NACA TN 3784, read in a public copy with garbled typography",
    Grade.QUOTED,
)
CUT_OFF = Reference(
    "Greatest crippling strength by shape, Bruhn C7; from memory, unverified",
    Grade.MEMORY,
)


class FreeEdges(StrEnum):
    """How many of an angle's two long edges are free."""

    TWO = "two edges free"
    ONE = "one edge free"
    NONE = "no edge free"


_NEEDHAM_C = {FreeEdges.TWO: 0.316, FreeEdges.ONE: 0.342, FreeEdges.NONE: 0.366}


class Family(StrEnum):
    """Gerard's families of sections."""

    ANGLE = "angles, tubes, many corners"
    STRAIGHT = "straight unloaded edges: T, cruciform, H"
    TWO_CORNERS = "two corners: Z, J, channel"


_LARGEST = {Family.ANGLE: 0.7, Family.STRAIGHT: 0.8, Family.TWO_CORNERS: 0.9}


@dataclass(frozen=True, slots=True)
class Angle:
    """One angle of a section: both legs to the centre line, thickness, edges [mm]."""

    leg_a: float
    leg_b: float
    thickness: float
    edges: FreeEdges

    @property
    def area(self) -> float:
        """Area of both legs [mm^2]."""
        return (self.leg_a + self.leg_b) * self.thickness


def needham(angle: Angle, modulus: float, yield_stress: float) -> float:
    r"""Return the crippling stress of one angle.

    .. math:: F_{cc} = C_e\frac{\sqrt{F_{cy}E_c}}{(b'/t)^{0.75}},\quad b' = (a + b)/2

    Parameters
    ----------
    angle
        Legs measured to centre lines; outside lengths give less.
    modulus, yield_stress
        E_c and F_cy [MPa].

    Returns
    -------
    float
        Stress [MPa], not above F_cy.

    Notes
    -----
    Range 3 <= b'/t <= 100. For thick legs the published cut-off of the shape is lower;
    see `largest_crippling`.

    References
    ----------
    .. [1] See `NEEDHAM`.
    """
    slender = (angle.leg_a + angle.leg_b) / 2 / angle.thickness
    within("Mean leg over thickness", slender, 3, 100, "formed angles")
    stress = _NEEDHAM_C[angle.edges] * math.sqrt(yield_stress * modulus)
    return min(stress / math.pow(slender, 0.75), yield_stress)


def needham_section(
    angles: tuple[Angle, ...], modulus: float, yield_stress: float
) -> float:
    """Return the crippling stress of a section cut into angles, weighed by area.

    Parameters
    ----------
    angles
        The whole section, each area once.
    modulus, yield_stress
        E_c and F_cy [MPa].

    Returns
    -------
    float
        Stress [MPa].

    Notes
    -----
    Range of `needham`.

    References
    ----------
    .. [1] See `NEEDHAM`.
    """
    if not angles:
        raise InputError("No angle is given. Cut the section into angles.")
    load = sum(needham(a, modulus, yield_stress) * a.area for a in angles)
    return load / sum(a.area for a in angles)


def gerard(
    family: Family,
    area: float,
    thickness: float,
    modulus: float,
    yield_stress: float,
    elements: int = 2,
) -> float:
    r"""Return Gerard's crippling stress.

    .. math::
        0.56\Bigl[\frac{gt^2}{A}\sqrt{\frac{E_c}{F_{cy}}}\Bigr]^{0.85}F_{cy},\quad
        0.67[\ldots]^{0.40}F_{cy},\quad
        3.2\Bigl[\frac{t^2}{A}\Bigl(\frac{E_c}{F_{cy}}\Bigr)^{1/3}\Bigr]^{0.75}F_{cy}

    Parameters
    ----------
    family
        Angles and tubes; straight edges; two corners.
    area, thickness
        Of the section left [mm^2], [mm].
    modulus, yield_stress
        E_c and F_cy [MPa].
    elements
        g, cuts and flanges: angle 2, T 3, H 7, square tube 12; not used for two
        corners.

    Returns
    -------
    float
        Stress [MPa], not above F_cy.

    Notes
    -----
    Range 1 <= g <= 30, t^2/A <= 0.5. Read from a garbled page: hold it against Needham.

    References
    ----------
    .. [1] See `GERARD`.
    """
    within("Elements g", elements, 1, 30, "sections tested")
    within("t^2/A", thickness**2 / area, 1e-6, 0.5, "thin sections")
    stiff, flat = modulus / yield_stress, thickness**2 / area
    if family is Family.TWO_CORNERS:
        share = 3.2 * math.pow(flat * math.cbrt(stiff), 0.75)
    elif family is Family.ANGLE:
        share = 0.56 * math.pow(elements * flat * math.sqrt(stiff), 0.85)
    else:
        share = 0.67 * math.pow(elements * flat * math.sqrt(stiff), 0.40)
    return min(share, 1.0) * yield_stress


def largest_crippling(family: Family, yield_stress: float) -> float:
    """Return the greatest crippling stress by shape [MPa].

    Parameters
    ----------
    family
        Gerard's family of the section.
    yield_stress
        F_cy [MPa].

    Returns
    -------
    float
        Stress [MPa]: 0.7, 0.8 or 0.9 of F_cy.

    Notes
    -----
    Range: the families listed. From memory: a result that rests on it is barred from
    approval.

    References
    ----------
    .. [1] See `CUT_OFF`.
    """
    return _LARGEST[family] * yield_stress
