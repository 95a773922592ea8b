r"""A pressurised shell with frames and stringers: smeared, and between two frames.

Smeared areas give the *mean* over a bay. At mid-bay the skin sees close to the whole
pressure, and more than the mean, so a smeared hoop stress is refused there; frames that
float on clips and stringers give no relief at all.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import StrEnum

from repairs.analysis.errors import InputError, within
from repairs.analysis.loads.shell import axial_stress, hoop_stress, smeared_skin_ratios
from repairs.analysis.types import Grade, GrossStress, Reference

SMEARED = Reference(
    "Equilibrium and compatibility of skin, frames and stringers, areas smeared",
    Grade.DERIVED,
)
BETWEEN_FRAMES = Reference(
    "Cylinder between equal rings as a beam on an elastic foundation", Grade.DERIVED
)
NOT_MID_BAY = (
    "The smeared hoop stress of {mean:.4g} MPa is a mean over the bay and may not be "
    "used mid-bay, where it is unconservative. Use the whole p R/t of {whole:.4g} MPa, "
    "or the stress between frames."
)


class Attachment(StrEnum):
    """How frames hold the skin; floating ones hang on clips and stringers only."""

    SHEAR_TIED = "shear-tied"
    FLOATING = "floating"


class Place(StrEnum):
    """Where in a bay a stress is asked for."""

    MID_BAY = "mid-bay"
    MEAN = "mean over the bay"


@dataclass(frozen=True, slots=True)
class Frames:
    """Equal frames: section area [mm^2], pitch [mm] and attachment."""

    area: float
    pitch: float
    attachment: Attachment


@dataclass(frozen=True, slots=True)
class Stringers:
    """Equal stringers: section area [mm^2] and pitch [mm]."""

    area: float
    pitch: float


@dataclass(frozen=True, slots=True)
class ShellStresses:
    """Mean stresses of a stiffened shell [MPa]; `frame` is None for floating frames.

    `whole_hoop` is p R/t, as if there were no frames.
    """

    mean_hoop: GrossStress
    axial: GrossStress
    frame: float | None
    stringer: float
    whole_hoop: GrossStress

    def hoop(self, place: Place) -> GrossStress:
        """Return the hoop stress of the skin at a place; mid-bay is refused [MPa]."""
        if place is Place.MID_BAY and self.mean_hoop < self.whole_hoop:
            raise InputError(
                NOT_MID_BAY.format(mean=self.mean_hoop, whole=self.whole_hoop)
            )
        return self.mean_hoop


def smeared_stresses(
    pressure: float,
    radius: float,
    thickness: float,
    frames: Frames,
    stringers: Stringers,
    poisson: float,
) -> ShellStresses:
    r"""Return mean skin, frame and stringer stresses with the Poisson coupling [1]_.

    .. math:: s_f = s_h - \nu s_x,\qquad s_s = s_x - \nu s_h

    Parameters
    ----------
    pressure
        Differential pressure [MPa].
    radius, thickness
        Of the skin [mm].
    frames, stringers
        Areas and pitches; one modulus with the skin.
    poisson
        Poisson's ratio [-].

    Returns
    -------
    ShellStresses
        Mean over the bay [MPa].

    Notes
    -----
    Range of `smeared_skin_ratios`. Floating frames are left out: no relief, and no
    stress is given for them.

    References
    ----------
    .. [1] See `SMEARED`.
    """
    tied = frames.attachment is Attachment.SHEAR_TIED
    frame_ratio = frames.area / (frames.pitch * thickness) if tied else 0.0
    stringer_ratio = stringers.area / (stringers.pitch * thickness)
    whole = hoop_stress(pressure, radius, thickness)
    hoop, axial = (
        ratio * whole
        for ratio in smeared_skin_ratios(frame_ratio, stringer_ratio, poisson)
    )
    return ShellStresses(
        GrossStress(hoop),
        GrossStress(axial),
        hoop - poisson * axial if tied else None,
        axial - poisson * hoop,
        whole,
    )


@dataclass(frozen=True, slots=True)
class BayStresses:
    """Membrane hoop stress of the skin at mid-bay and at a frame, and the frame's."""

    mid_bay: GrossStress
    at_frame: GrossStress
    frame: float


def hoop_between_frames(
    pressure: float,
    radius: float,
    thickness: float,
    frames: Frames,
    poisson: float,
    axial: float | None = None,
) -> BayStresses:
    r"""Return the hoop stress at mid-bay and at the frames of a long shell [1]_.

    With :math:`\beta^4 = 3(1 - \nu^2)/(Rt)^2`, :math:`\alpha = \beta L/2`,
    :math:`g = a_f\alpha`, S, C, s, c the hyperbolic and circular sine and cosine of
    :math:`\alpha`, and :math:`s_0 = pR/t - \nu s_x`,

    .. math::
        K = \frac{-g}{C^2s^2 + S^2c^2 + g(sc + SC)},\quad
        s_{mid} = s_0[1 + K(Cs + Sc)] + \nu s_x,\quad
        s_{frame} = s_0[1 + K(sc + SC)] + \nu s_x

    Parameters
    ----------
    pressure
        Differential pressure [MPa].
    radius, thickness
        Of the skin [mm].
    frames
        Shear-tied frames, as rings in the skin's plane.
    poisson
        Poisson's ratio [-].
    axial
        Axial skin stress [MPa]; None = p R/(2t).

    Returns
    -------
    BayStresses
        Membrane hoop stresses of the skin, and the frame's own [MPa].

    Notes
    -----
    Range 0.05 <= alpha <= 50; shear-tied frames. Linear: the axial force does not
    straighten the skin between frames. Bending of the skin at a frame is not given.

    References
    ----------
    .. [1] See `BETWEEN_FRAMES`.
    """
    if frames.attachment is not Attachment.SHEAR_TIED:
        raise InputError(
            "Frames are floating: they give the skin no relief. Use p R/t everywhere."
        )
    within("Poisson's ratio", poisson, 0, 0.5, "isotropic metal")
    whole = hoop_stress(pressure, radius, thickness)
    along = axial_stress(pressure, radius, thickness) if axial is None else axial
    beta = math.pow(3 * (1 - poisson**2), 0.25) / math.sqrt(radius * thickness)
    a = within("beta L/2", beta * frames.pitch / 2, 0.05, 50, "cosh and sinh")
    g = a * frames.area / (frames.pitch * thickness)
    cosh, sinh, cos, sin = math.cosh(a), math.sinh(a), math.cos(a), math.sin(a)
    ring = sin * cos + sinh * cosh
    k = -g / ((cosh * sin) ** 2 + (sinh * cos) ** 2 + g * ring)
    free = whole - poisson * along
    frame = free * (1 + k * ring)
    return BayStresses(
        GrossStress(free * (1 + k * (cosh * sin + sinh * cos)) + poisson * along),
        GrossStress(frame + poisson * along),
        frame,
    )
