r"""Stress-intensity factors of through cracks, one function per published solution.

Every function returns the dimensionless factor F of

.. math:: K = F\,S\,\sqrt{\pi a}

with S the *gross* stress and a the length its name says: half-length of a crack with
two tips, or length from the edge it starts at. Each enforces the range it was
published for and refuses outside it.

References
----------
.. [1] USAF Damage Tolerant Design Handbook, section 11.3.
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
EDGE_BENDING_TADA = Reference(
    "Tada, Paris and Irwin, edge crack in bending, in the USAF Damage Tolerant Design "
    "Handbook, section 11.3",
    Grade.PRINT,
)
EDGE_BENDING_QUARTIC = Reference(
    "Edge crack in bending, quartic fit, in public university notes", Grade.QUOTED
)
DOUBLE_EDGE = Reference(
    "Tada, Paris and Irwin, double edge crack in tension, in a public transcription; "
    "the sign of its last term proved by the exact limit of a short ligament",
    Grade.QUOTED,
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


def edge_crack_bending_polynomial(length: EdgeLength, width: float) -> float:
    r"""Return F of an edge crack in bending as a quartic, on :math:`6M/(tW^2)` [1]_.

    .. math:: F = 1.122 - 1.40x + 7.33x^2 - 13.08x^3 + 14.0x^4,\quad x = a/W

    Parameters
    ----------
    length
        Length a from the edge in tension [mm].
    width
        Full width W [mm].

    Returns
    -------
    float
        Factor F on the outer-fibre stress [-].

    Notes
    -----
    Range a/W <= 0.6; up to 2.2 % above the Tada form.

    References
    ----------
    .. [1] See `EDGE_BENDING_QUARTIC`.
    """
    x = within("Edge crack length over width", length / width, 0, 0.6, "quartic fit")
    return 1.122 - 1.40 * x + 7.33 * x**2 - 13.08 * x**3 + 14.0 * x**4


def edge_crack_bending_tada(length: EdgeLength, width: float) -> float:
    r"""Return F of an edge crack in bending after Tada, on :math:`6M/(tW^2)` [1]_.

    .. math::
        F = \sqrt{\tfrac{2}{\pi x}\tan\tfrac{\pi x}{2}}\;
        \frac{0.923 + 0.199(1-\sin(\pi x/2))^4}{\cos(\pi x/2)},\quad x = a/W

    Parameters
    ----------
    length
        Length a from the edge in tension [mm].
    width
        Full width W [mm].

    Returns
    -------
    float
        Factor F on the outer-fibre stress [-].

    Notes
    -----
    Range 0 < a/W < 1; enforced to 0.95.

    References
    ----------
    .. [1] See `EDGE_BENDING_TADA`.
    """
    x = within("Edge crack length over width", length / width, 1e-9, 0.95, "Tada")
    angle = math.pi * x / 2
    shape = 0.923 + 0.199 * (1 - math.sin(angle)) ** 4
    return math.sqrt(math.tan(angle) / angle) * shape / math.cos(angle)


def double_edge_crack(length: EdgeLength, width: float) -> float:
    r"""Return F of two equal edge cracks facing each other, in tension [1]_.

    .. math::
        F = \frac{1.122 - 0.561x - 0.205x^2 + 0.471x^3 - 0.190x^4}{\sqrt{1 - x}},
        \quad x = 2a/W

    Parameters
    ----------
    length
        Length a of each crack from its edge [mm].
    width
        Full width W [mm].

    Returns
    -------
    float
        Factor F [-].

    Notes
    -----
    Range 0 <= 2a/W < 1 (0.5 % stated); enforced to 0.99.

    References
    ----------
    .. [1] See `DOUBLE_EDGE`.
    """
    x = within("Both cracks over width", 2 * length / width, 0, 0.99, "Tada")
    series = 1.122 - 0.561 * x - 0.205 * x**2 + 0.471 * x**3 - 0.190 * x**4
    return series / math.sqrt(1 - x)
