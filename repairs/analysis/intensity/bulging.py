r"""Cracks in a pressurised cylinder: bulging of the crack edges, as a factor on K.

Longitudinal crack: the handbook's form is the default; the others can be chosen by
name. All are fits to linear shell theory: for long cracks in thin skins at working
pressure they are too high, and none gives credit to frames or tear straps.

Circumferential crack: half of the hoop stress is the least of its load. It is computed
only with the longitudinal bending stress of the fuselage beside the pressure.

References
----------
.. [1] USAF Damage Tolerant Design Handbook, Table 11.3.13 (Newman 1976); the same
   expression stands in a published table of cylinder solutions with
   :math:`\sigma_h = pR/t`.
.. [2] Anderson, Fracture Mechanics, Table 12.29: through-wall flaws in cylinders, read
   in a public extract.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

from repairs.analysis.errors import UNKNOWN_FORM, InputError, within
from repairs.analysis.types import Grade, GrossStress, HalfLength, Reference, Sourced

BULGING_HANDBOOK = Reference(
    "USAF Damage Tolerant Design Handbook, Table 11.3.13 (Newman 1976)", Grade.PRINT
)
BULGING_FOLIAS = Reference(
    "Folias fit for an axial crack in a cylinder; from memory, unverified",
    Grade.MEMORY,
)
BULGING_TADA = Reference(
    "Tada, Paris and Irwin, axial crack in a cylinder; from memory, unverified",
    Grade.MEMORY,
)
BULGING_ERDOGAN = Reference(
    "Erdogan and Kibler, axial crack in a cylinder; from memory, unverified",
    Grade.MEMORY,
)
CIRCUMFERENTIAL = Reference(
    "Anderson, Fracture Mechanics, Table 12.29, circumferential through-wall flaw "
    "under pressure, in a public extract",
    Grade.QUOTED,
)
NEEDS_BENDING = (
    "A circumferential crack is not computed from pressure alone: that is wrong by one "
    "to two decades of life. Enter the panel's longitudinal bending stress."
)
LONGEST = 5.0
"""Longest crack of all these forms, a/sqrt(R t)."""


def shell_parameter(half_length: HalfLength, radius: float, thickness: float) -> float:
    """Return the shell parameter l = a/sqrt(R t) [-].

    Parameters
    ----------
    half_length
        Half-length a [mm].
    radius
        Shell radius R [mm].
    thickness
        Shell thickness t [mm].

    Returns
    -------
    float
        l [-].

    Notes
    -----
    Range R, t > 0.

    References
    ----------
    .. [1] USAF Damage Tolerant Design Handbook, Table 11.3.13.
    """
    within("Shell radius, mm", radius, 1e-6, 1e6, "a shell")
    within("Shell thickness, mm", thickness, 1e-6, 1e3, "a shell")
    return half_length / math.sqrt(radius * thickness)


def bulging_handbook(parameter: float) -> float:
    r"""Return the bulging factor of an axial crack, handbook form (default) [1]_.

    .. math:: F = \sqrt{1 + 0.52l + 1.29l^2 - 0.074l^3}

    Parameters
    ----------
    parameter
        l = a/sqrt(R t) [-].

    Returns
    -------
    float
        Factor on K [-].

    Notes
    -----
    Range 0 <= l <= 5 (longest crack of the comparison with linear shell forms).
    4 to 11 % above the Folias form. Linear shell: too high for long cracks in thin
    shells at working pressure. No credit for frames or tear straps.

    References
    ----------
    .. [1] See `BULGING_HANDBOOK`.
    """
    x = within("Shell parameter a/sqrt(R t)", parameter, 0, LONGEST, "handbook fit")
    return math.sqrt(1 + 0.52 * x + 1.29 * x**2 - 0.074 * x**3)


def bulging_folias(parameter: float) -> float:
    r"""Return the bulging factor of an axial crack, Folias fit (selectable) [1]_.

    .. math:: F = \sqrt{1 + 1.255l^2 - 0.0135l^4}

    Parameters
    ----------
    parameter
        l = a/sqrt(R t) [-].

    Returns
    -------
    float
        Factor on K [-].

    Notes
    -----
    Range 0 <= l <= 5.

    References
    ----------
    .. [1] See `BULGING_FOLIAS` (from memory, unverified).
    """
    x = within("Shell parameter a/sqrt(R t)", parameter, 0, LONGEST, "Folias fit")
    return math.sqrt(1 + 1.255 * x**2 - 0.0135 * x**4)


def bulging_tada(parameter: float) -> float:
    r"""Return the bulging factor of an axial crack after Tada (selectable) [1]_.

    .. math::
        F = \sqrt{1 + 1.25l^2}\;(l \le 1),\qquad F = 0.6 + 0.9l\;(1 \le l \le 5)

    Parameters
    ----------
    parameter
        l = a/sqrt(R t) [-].

    Returns
    -------
    float
        Factor on K [-].

    Notes
    -----
    Range 0 <= l <= 5; both parts give 1.5 at l = 1.

    References
    ----------
    .. [1] See `BULGING_TADA` (from memory, unverified).
    """
    x = within("Shell parameter a/sqrt(R t)", parameter, 0, LONGEST, "Tada's fit")
    return math.sqrt(1 + 1.25 * x**2) if x <= 1 else 0.6 + 0.9 * x


def bulging_erdogan(parameter: float, poisson: float = 0.33) -> float:
    r"""Return the bulging factor of an axial crack after Erdogan and Kibler [1]_.

    .. math::
        F = 0.614 + 0.481\lambda + 0.386e^{-1.25\lambda},\quad
        \lambda = [12(1 - \nu^2)]^{1/4}\,l

    Parameters
    ----------
    parameter
        l = a/sqrt(R t) [-].
    poisson
        Poisson's ratio [-]; 0.33 for aluminium.

    Returns
    -------
    float
        Factor on K [-].

    Notes
    -----
    Range 0 <= l <= 5, 0 <= nu <= 0.5.

    References
    ----------
    .. [1] See `BULGING_ERDOGAN` (from memory, unverified).
    """
    x = within("Shell parameter a/sqrt(R t)", parameter, 0, LONGEST, "Erdogan's fit")
    within("Poisson's ratio", poisson, 0, 0.5, "an elastic solid")
    scaled = float((12 * (1 - poisson**2)) ** 0.25) * x
    return 0.614 + 0.481 * scaled + 0.386 * math.exp(-1.25 * scaled)


@dataclass(frozen=True, slots=True)
class BulgingForm:
    """One published bulging factor of l = a/sqrt(R t), by name."""

    name: str
    factor: Callable[[float], float]
    reference: Reference


BULGING_FORMS: dict[str, BulgingForm] = {
    form.name: form
    for form in (
        BulgingForm("handbook", bulging_handbook, BULGING_HANDBOOK),
        BulgingForm("folias", bulging_folias, BULGING_FOLIAS),
        BulgingForm("tada", bulging_tada, BULGING_TADA),
        BulgingForm("erdogan-kibler", bulging_erdogan, BULGING_ERDOGAN),
    )
}
"""The forms there are; the first is the default."""


def bulging_form(name: str = "handbook") -> BulgingForm:
    """Return the bulging form of a name, else refuse with the names there are."""
    if name not in BULGING_FORMS:
        known = ", ".join(BULGING_FORMS)
        raise InputError(UNKNOWN_FORM.format(name=name, known=known))
    return BULGING_FORMS[name]


@dataclass(frozen=True, slots=True)
class LongitudinalStress:
    """What pulls a circumferential crack open: pressure and bending, both [MPa].

    Bending is the flight-by-flight stress at the crack, with its source; None is
    refused, zero is an answer.
    """

    pressure: GrossStress
    bending: Sourced | None

    @property
    def total(self) -> GrossStress:
        """Pressure part plus bending part, gross [MPa]."""
        if self.bending is None:
            raise InputError(NEEDS_BENDING)
        return GrossStress(self.pressure + self.bending.value)


def circumferential_factor(parameter: float) -> float:
    r"""Return the membrane factor of a circumferential crack in a cylinder [1]_.

    .. math::
        F = 1 + 0.1501\gamma^{1.5}\;(\gamma \le 2),\qquad
        F = 0.8875 + 0.2625\gamma\;(2 \le \gamma \le 5)

    Parameters
    ----------
    parameter
        gamma = a/sqrt(R t), a half of the crack along the circumference [-].

    Returns
    -------
    float
        Factor on K [-].

    Notes
    -----
    Range 0 <= gamma <= 5; at gamma = 2 the higher of both parts is returned (they part
    by 0.8 %). The stress is taken as even along the crack, at its largest.

    References
    ----------
    .. [1] See `CIRCUMFERENTIAL`.
    """
    x = within("Shell parameter a/sqrt(R t)", parameter, 0, LONGEST, "a cylinder fit")
    return 1 + 0.1501 * x**1.5 if x <= 2 else 0.8875 + 0.2625 * x


def circumferential_intensity(
    half_length: HalfLength,
    radius: float,
    thickness: float,
    stress: LongitudinalStress,
) -> float:
    r"""Return K of a circumferential crack, :math:`F(\gamma)(S_p + S_b)\sqrt{\pi a}`.

    Parameters
    ----------
    half_length
        Half of the crack along the circumference, a [mm].
    radius, thickness
        Shell radius and skin thickness [mm].
    stress
        Longitudinal stresses of pressure and of bending [MPa].

    Returns
    -------
    float
        Stress-intensity factor [MPa*sqrt(mm)].

    Notes
    -----
    Range of `circumferential_factor`; refuses without a bending stress.

    References
    ----------
    .. [1] See `CIRCUMFERENTIAL`.
    """
    factor = circumferential_factor(shell_parameter(half_length, radius, thickness))
    return factor * stress.total * math.sqrt(math.pi * half_length)
