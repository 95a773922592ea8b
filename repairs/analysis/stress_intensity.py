r"""Stress-intensity factors of through cracks, one function per published solution.

Every function returns the dimensionless factor F of

.. math:: K = F\,S\,\sqrt{\pi a}

with S the *gross* stress and a the length its name says: half-length of a crack with
two tips, or length from the edge it starts at. Each enforces the range it was
published for and refuses outside it.

References
----------
.. [1] USAF Damage Tolerant Design Handbook, section 11.3, Tables 11.3.10 to 11.3.13.
.. [2] Tada, Paris and Irwin, The Stress Analysis of Cracks Handbook.
.. [3] Public university notes on fracture mechanics of aircraft structure.
"""

from __future__ import annotations

import math

from repairs.analysis.errors import within
from repairs.analysis.types import (
    EdgeLength,
    Grade,
    GrossStress,
    HalfLength,
    Reference,
)

SECANT = Reference(
    "Feddersen, secant width correction, in public university notes", Grade.QUOTED
)
TADA_CENTRE = Reference(
    "Tada, Paris and Irwin, centre crack, in public university notes", Grade.QUOTED
)
EDGE_TADA = Reference(
    "Tada, Paris and Irwin, edge crack in tension, in public university notes",
    Grade.QUOTED,
)
BULGING_HANDBOOK = Reference(
    "USAF Damage Tolerant Design Handbook, Table 11.3.13 (Newman 1976)", Grade.PRINT
)
BULGING_FOLIAS = Reference(
    "Folias fit for an axial crack in a cylinder; from memory, unverified",
    Grade.MEMORY,
)


def intensity(factor: float, stress: GrossStress, length: float) -> float:
    r"""Return the stress-intensity factor :math:`F S \sqrt{\pi a}`.

    Parameters
    ----------
    factor
        Dimensionless factor F [-].
    stress
        Gross stress [MPa].
    length
        Crack length the factor is defined on [mm].

    Returns
    -------
    float
        Stress-intensity factor [MPa*sqrt(mm)].

    Notes
    -----
    Range of the factor.

    References
    ----------
    .. [1] Definition of F.
    """
    return factor * stress * math.sqrt(math.pi * length)


def secant(angle: float) -> float:
    """Return 1/cos of an angle [rad]."""
    return 1.0 / math.cos(angle)


def centre_crack_secant(half_length: HalfLength, width: float) -> float:
    r"""Return F of a centre crack in a sheet, :math:`\sqrt{\sec(\pi a/W)}` [1]_.

    Parameters
    ----------
    half_length
        Half-length a [mm].
    width
        Full width W [mm].

    Returns
    -------
    float
        Factor F [-].

    Notes
    -----
    Range 2a/W <= 0.7, within 0.4 % of the Tada form there. Free side edges.

    References
    ----------
    .. [1] Feddersen, in public university notes; see `SECANT`.
    """
    ratio = within("Crack length over width", 2 * half_length / width, 0, 0.7, "secant")
    return math.sqrt(secant(math.pi * ratio / 2))


def centre_crack_tada(half_length: HalfLength, width: float) -> float:
    r"""Return F of a centre crack after Tada [1]_.

    .. math:: F = (1 - 0.025 x^2 + 0.06 x^4)\sqrt{\sec(\pi x/2)},\quad x = 2a/W

    Parameters
    ----------
    half_length
        Half-length a [mm].
    width
        Full width W [mm].

    Returns
    -------
    float
        Factor F [-].

    Notes
    -----
    Range 0 <= 2a/W < 1 (0.1 % stated); enforced to 0.99.

    References
    ----------
    .. [1] Tada, Paris and Irwin; see `TADA_CENTRE`.
    """
    x = within("Crack length over width", 2 * half_length / width, 0, 0.99, "Tada")
    return (1 - 0.025 * x**2 + 0.06 * x**4) * math.sqrt(secant(math.pi * x / 2))


def edge_crack_polynomial(length: EdgeLength, width: float) -> float:
    r"""Return F of an edge crack in tension as a quartic [1]_.

    .. math:: F = 1.122 - 0.231x + 10.55x^2 - 21.71x^3 + 30.382x^4,\quad x = a/W

    Parameters
    ----------
    length
        Length a from the edge [mm].
    width
        Full width W [mm].

    Returns
    -------
    float
        Factor F [-].

    Notes
    -----
    Range a/W <= 0.6, 0.9 %. Free ends: a restrained panel has a much lower F.

    References
    ----------
    .. [1] In public university notes; see `EDGE_TADA`.
    """
    x = within("Edge crack length over width", length / width, 0, 0.6, "quartic fit")
    return 1.122 - 0.231 * x + 10.55 * x**2 - 21.71 * x**3 + 30.382 * x**4


def edge_crack_tada(length: EdgeLength, width: float) -> float:
    r"""Return F of an edge crack in tension after Tada [1]_.

    .. math::
        F = \sqrt{\tfrac{2}{\pi x}\tan\tfrac{\pi x}{2}}\;
        \frac{0.752 + 2.02x + 0.37(1-\sin(\pi x/2))^3}{\cos(\pi x/2)},\quad x = a/W

    Parameters
    ----------
    length
        Length a from the edge [mm].
    width
        Full width W [mm].

    Returns
    -------
    float
        Factor F [-].

    Notes
    -----
    Range 0 < a/W < 1; enforced to 0.95. Free ends.

    References
    ----------
    .. [1] Tada, Paris and Irwin; see `EDGE_TADA`.
    """
    x = within("Edge crack length over width", length / width, 1e-9, 0.95, "Tada")
    angle = math.pi * x / 2
    shape = 0.752 + 2.02 * x + 0.37 * (1 - math.sin(angle)) ** 3
    return math.sqrt(math.tan(angle) / angle) * shape / math.cos(angle)


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
    x = within("Shell parameter a/sqrt(R t)", parameter, 0, 5, "handbook bulging fit")
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
    x = within("Shell parameter a/sqrt(R t)", parameter, 0, 5, "Folias fit")
    return math.sqrt(1 + 1.255 * x**2 - 0.0135 * x**4)
