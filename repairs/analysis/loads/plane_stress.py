r"""Stress at a point of the skin: along, around and in shear; which crack sees what.

Directions are measured from the axis of the section (longitudinal, x) towards the
circumference (y). A longitudinal crack runs along x and sees the hoop stress; a
circumferential one sees the axial stress, bending of the whole section included.

References
----------
.. [1] Mohr's circle; equilibrium.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from repairs.analysis.errors import UNKNOWN_FORM, InputError, within
from repairs.analysis.types import Grade, GrossStress, Reference

PLANE_STRESS = Reference("Plane stress at a point, Mohr's circle", Grade.DERIVED)
CRACK_ANGLES = {"longitudinal": 0.0, "circumferential": 90.0}
"""Angle of a crack from the axis of the section [degrees]."""


@dataclass(frozen=True, slots=True)
class Principal:
    """Principal stresses [MPa]; `angle` of the largest from the axis [degrees]."""

    largest: float
    smallest: float
    angle: float


@dataclass(frozen=True, slots=True)
class PlaneStress:
    """Axial, hoop and shear stress of the skin at one point [MPa]."""

    axial: float
    hoop: float
    shear: float = 0.0

    def principal(self) -> Principal:
        """Return the principal stresses and the direction of the largest.

        A crack grows across the largest: at 90 degrees to `angle`.
        """
        mean = (self.axial + self.hoop) / 2
        half = (self.axial - self.hoop) / 2
        radius = math.hypot(half, self.shear)
        angle = math.degrees(math.atan2(self.shear, half)) / 2
        return Principal(mean + radius, mean - radius, angle)

    def across(self, angle: float) -> GrossStress:
        r"""Return the stress that opens a crack at an angle from the axis [MPa].

        .. math:: s_x\sin^2\theta + s_h\cos^2\theta - 2\tau\sin\theta\cos\theta

        Parameters
        ----------
        angle
            Of the crack from the axis, theta [degrees]; 0 = longitudinal.

        Returns
        -------
        GrossStress
            Normal stress [MPa]; below 0 the crack is pressed shut.

        Notes
        -----
        Range -90 to 90 degrees. A skew crack is also sheared; that part is not in it.

        References
        ----------
        .. [1] See `PLANE_STRESS`.
        """
        within("Angle of the crack, degrees", angle, -90, 90, "a direction")
        theta = math.radians(angle)
        sine, cosine = math.sin(theta), math.cos(theta)
        return GrossStress(
            self.axial * sine**2
            + self.hoop * cosine**2
            - 2 * self.shear * sine * cosine
        )

    def across_crack(self, direction: str) -> GrossStress:
        """Return the stress across a crack of a direction in words [MPa]."""
        if direction not in CRACK_ANGLES:
            raise InputError(
                UNKNOWN_FORM.format(name=direction, known=", ".join(CRACK_ANGLES))
            )
        return self.across(CRACK_ANGLES[direction])

    @property
    def von_mises(self) -> float:
        """Equivalent stress for yielding, plane stress [MPa]."""
        a, h, t = self.axial, self.hoop, self.shear
        return math.sqrt(a * a - a * h + h * h + 3 * t * t)


def skin_point(
    hoop: float, axial: float, bending: float, shear: float = 0.0
) -> PlaneStress:
    """Return the stress at a point of a fuselage skin under pressure and bending.

    Parameters
    ----------
    hoop, axial
        From pressure [MPa].
    bending
        Longitudinal stress from bending of the section, tension positive [MPa]. It adds
        to the axial stress and never to the hoop stress.
    shear
        From shear and torsion of the section [MPa].

    Returns
    -------
    PlaneStress
        All three [MPa].

    Notes
    -----
    No range.

    References
    ----------
    .. [1] Superposition.
    """
    return PlaneStress(axial + bending, hoop, shear)
