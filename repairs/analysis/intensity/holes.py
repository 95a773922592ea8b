r"""Stress-intensity factors of through cracks from a hole, open or pin-loaded.

As in `stress_intensity`, each function returns F of :math:`K = F\,S\sqrt{\pi c}`, with
c the length from the hole *edge* and S the gross stress (or the bearing stress).

References
----------
.. [1] USAF Damage Tolerant Design Handbook, section 11.3, Tables 11.3.10 to 11.3.12.
.. [2] Newman, J. C., 1976, cracks at a circular hole (the g2 polynomial).
.. [3] Public university notes on fracture mechanics of aircraft structure.
"""

from __future__ import annotations

import math

from repairs.analysis.errors import within
from repairs.analysis.intensity.through import secant
from repairs.analysis.types import EdgeLength, Grade, Reference

HOLE_SINGLE = Reference(
    "USAF Damage Tolerant Design Handbook, Table 11.3.12 (f0); "
    "width terms from public university notes",
    Grade.PRINT,
)

HOLE_DOUBLE_RATIONAL = Reference(
    "Rational fit to two cracks at a hole, in public university notes", Grade.QUOTED
)

HOLE_DOUBLE = Reference(
    "Newman 1976, g2 polynomial; width terms from public university notes",
    Grade.QUOTED,
)

HOLE_BEARING = Reference(
    "USAF Damage Tolerant Design Handbook, Tables 11.3.10 to 11.3.12", Grade.PRINT
)

HOLE_DOUBLE_BEARING = Reference(
    "rule of this program: pin load as half of even tension and half of a splitting "
    "pair of forces across hole and cracks, the hole taken as part of the crack",
    Grade.RECORDED,
)


def hole_single(c_edge: EdgeLength, diameter: float, width: float) -> float:
    r"""Return F of one through crack from a hole in a sheet under tension [1]_.

    .. math::
        f_0(z) = 0.7071 + 0.7548z + 0.3415z^2 + 0.642z^3 + 0.9196z^4,
        \quad z = 1/(1 + c/r)

    times the width terms for one crack,
    :math:`F_w = \sqrt{\sec(\pi r/W)\sec(\pi(r + c/2)/(W - c))}` and
    :math:`F_{ww} = 1 - N^{-W/D}(2c/(W-D))^{W/D + 0.5}`,
    :math:`N = \max(2.275,\; 2.65 - 0.24(2.75 - W/D)^2)`.

    Parameters
    ----------
    c_edge
        Crack length from the hole edge [mm].
    diameter
        Hole diameter D [mm].
    width
        Full width W, hole on the centre line [mm].

    Returns
    -------
    float
        Factor F on :math:`\sqrt{\pi c}` [-].

    Notes
    -----
    Range D/W <= 0.5 and D/2 + c <= 0.45 W. Within 5 % of Bowie's values (7 % where
    they were only quoted). Unloaded hole: no bearing.

    References
    ----------
    .. [1] See `HOLE_SINGLE`.
    """
    _hole_range(c_edge, diameter, width)
    r, c = diameter / 2, c_edge
    slender = width / diameter
    fw = math.sqrt(
        secant(math.pi * r / width) * secant(math.pi * (r + c / 2) / (width - c))
    )
    base = max(2.275, 2.65 - 0.24 * (2.75 - slender) ** 2)
    lost = math.pow(2 * c / (width - diameter), slender + 0.5)
    fww = 1 - math.pow(base, -slender) * lost
    return handbook_f0(c / r) * fw * fww


def handbook_f0(ratio: float) -> float:
    """Return f0 of one crack at a hole, wide sheet, `ratio` = c/r [-].

    Parameters
    ----------
    ratio
        Crack length from the edge over hole radius, c/r [-].

    Returns
    -------
    float
        Factor on sqrt(pi c) [-]; 3.365 at c/r = 0, 0.7071 for a long crack.

    Notes
    -----
    Range c/r >= 0.

    References
    ----------
    .. [1] USAF Damage Tolerant Design Handbook, Table 11.3.12.
    """
    z = 1 / (1 + within("Crack length over hole radius", ratio, 0, 1e6, "f0"))
    return 0.7071 + 0.7548 * z + 0.3415 * z**2 + 0.642 * z**3 + 0.9196 * z**4


def hole_double(c_edge: EdgeLength, diameter: float, width: float) -> float:
    r"""Return F of two equal through cracks from a hole, Newman's polynomial [1]_.

    .. math:: g_2 = 1 + 0.358l + 1.425l^2 - 1.578l^3 + 2.156l^4,\quad l = r/(r + c)

    times the width terms for two cracks (see `hole_double_rational`).

    Parameters
    ----------
    c_edge
        Crack length from the hole edge, each side [mm].
    diameter
        Hole diameter D [mm].
    width
        Full width W, hole on the centre line [mm].

    Returns
    -------
    float
        Factor F on :math:`\sqrt{\pi c}` [-].

    Notes
    -----
    Range D/W <= 0.5 and D/2 + c <= 0.45 W.

    References
    ----------
    .. [1] See `HOLE_DOUBLE`.
    """
    r = diameter / 2
    return newman_g2(r / (r + c_edge)) * _double_width(c_edge, diameter, width)


def newman_g2(ligament: float) -> float:
    """Return Newman's g2 polynomial of l = r/(r + c) [-]."""
    x = ligament
    return 1 + 0.358 * x + 1.425 * x**2 - 1.578 * x**3 + 2.156 * x**4


def hole_double_rational(c_edge: EdgeLength, diameter: float, width: float) -> float:
    r"""Return F of two equal cracks from a hole, rational fit (cross-check) [1]_.

    .. math:: F_2 = \frac{3.404 + 3.8172y}{1 + 3.9273y - 0.00695y^2},\quad y = c/r

    with :math:`F_w = \sqrt{\sec(\pi r/W)\sec(\pi(r+c)/W)}` and
    :math:`F_{ww} = 1 - [(1.32W/D - 0.14)^{-(0.98 + (0.1W/D)^{0.1})} - 0.02]
    (2c/(W-D))^N`, N = 4.5 (W/D >= 2) else W/D + 2.5.

    Parameters
    ----------
    c_edge
        Crack length from the hole edge, each side [mm].
    diameter
        Hole diameter D [mm].
    width
        Full width W, hole on the centre line [mm].

    Returns
    -------
    float
        Factor F on :math:`\sqrt{\pi c}` [-].

    Notes
    -----
    Range c/r <= 10: beyond it the quadratic term makes the fit drift.

    References
    ----------
    .. [1] See `HOLE_DOUBLE_RATIONAL`.
    """
    y = within("Crack length over hole radius", 2 * c_edge / diameter, 0, 10, "F2 fit")
    factor = (3.404 + 3.8172 * y) / (1 + 3.9273 * y - 0.00695 * y**2)
    return factor * _double_width(c_edge, diameter, width)


def _double_width(c_edge: EdgeLength, diameter: float, width: float) -> float:
    _hole_range(c_edge, diameter, width)
    r, slender = diameter / 2, width / diameter
    fw = math.sqrt(secant(math.pi * r / width) * secant(math.pi * (r + c_edge) / width))
    power = 4.5 if slender >= 2 else slender + 2.5
    exponent = 0.98 + math.pow(0.1 * slender, 0.1)
    depth = math.pow(1.32 * slender - 0.14, -exponent) - 0.02
    lost = depth * math.pow(2 * c_edge / (width - diameter), power)
    return fw * (1 - lost)


def _hole_range(c_edge: EdgeLength, diameter: float, width: float) -> None:
    within("Hole diameter over width", diameter / width, 1e-9, 0.5, "width terms")
    reach = (diameter / 2 + c_edge) / width
    within("Hole radius plus crack over width", reach, 0, 0.45, "width terms")
    within("Crack length from the hole edge, mm", c_edge, 0, width, "a length")


def hole_single_bearing(c_edge: EdgeLength, diameter: float, width: float) -> float:
    r"""Return F of one crack at a hole loaded by a pin, on the bearing stress [1]_.

    .. math::
        K = s_{br}\sqrt{\pi c}\,\bigl(f_0\tfrac{D}{2W} + f_1\bigr) G_w,\quad
        f_1 = 0.078z + 0.7588z^2 - 0.4293z^3 + 0.0644z^4 + 0.651z^5,

    :math:`G_w = \sqrt{\sec[(\pi/2)(D + c)/(W - c)]}`, :math:`s_{br} = P/(Dt)`.

    Parameters
    ----------
    c_edge
        Crack length from the hole edge [mm].
    diameter
        Hole diameter D [mm].
    width
        Full width W [mm].

    Returns
    -------
    float
        Factor F on :math:`s_{br}\sqrt{\pi c}` [-].

    Notes
    -----
    Range as `hole_single`. The bypass part is `hole_single` on the bypass stress; the
    two add.

    References
    ----------
    .. [1] See `HOLE_BEARING`.
    """
    _hole_range(c_edge, diameter, width)
    gw = math.sqrt(secant(math.pi / 2 * (diameter + c_edge) / (width - c_edge)))
    return bearing_factor(2 * c_edge / diameter, diameter / width) * gw


def bearing_factor(ratio: float, slender: float) -> float:
    """Return f0 D/(2W) + f1 of one crack at a pin-loaded hole, before width [-].

    Parameters
    ----------
    ratio
        Crack length from the edge over hole radius, c/r [-].
    slender
        Hole diameter over width, D/W [-].

    Returns
    -------
    float
        Factor on the bearing stress [-].

    Notes
    -----
    Range c/r >= 0 and D/W <= 0.5.

    References
    ----------
    .. [1] See `HOLE_BEARING`.
    """
    plain = handbook_f0(ratio)
    within("Hole diameter over width", slender, 0, 0.5, "width terms")
    z = 1 / (1 + ratio)
    f1 = 0.078 * z + 0.7588 * z**2 - 0.4293 * z**3 + 0.0644 * z**4 + 0.651 * z**5
    return plain * slender / 2 + f1


def hole_double_bearing(c_edge: EdgeLength, diameter: float, width: float) -> float:
    r"""Return F of two equal cracks at a pin-loaded hole, on the bearing stress [1]_.

    .. math::
        K = \tfrac12\Bigl[s_{br}\tfrac DW\sqrt{\pi c}\,g_2
        + \frac{P}{t\sqrt{\pi(r + c)}}\Bigr] F_w,\quad s_{br} = P/(Dt)

    Parameters
    ----------
    c_edge
        Crack length from the hole edge, each side [mm].
    diameter
        Hole diameter D [mm].
    width
        Full width W, hole on the centre line [mm].

    Returns
    -------
    float
        Factor F on :math:`s_{br}\sqrt{\pi c}` [-].

    Notes
    -----
    Range c/r >= 0.1 (there 12 % above the handbook's one crack, a third above at 0.05),
    D/W <= 0.5 and D/2 + c <= 0.45 W. The bypass part is `hole_double` on the bypass
    stress; the two add.

    References
    ----------
    .. [1] See `HOLE_DOUBLE_BEARING`.
    """
    radius = diameter / 2
    within("Crack length over hole radius", c_edge / radius, 0.1, 1e6, "splitting pair")
    even = diameter / width * newman_g2(radius / (radius + c_edge))
    split = diameter / (math.pi * math.sqrt(c_edge * (radius + c_edge)))
    return (even + split) / 2 * _double_width(c_edge, diameter, width)


def bearing_over_bypass(c_edge: EdgeLength, diameter: float, width: float) -> float:
    """Return K per bearing stress over K per gross stress of one through crack [-].

    No solution for a corner crack under a pin was read. Multiplying the corner crack's
    K under tension by this ratio, at its own length, carries the pin's effect over by
    compounding; the load that acts through the thickness is taken as even.

    Parameters
    ----------
    c_edge
        Crack length from the hole edge [mm].
    diameter
        Hole diameter D [mm].
    width
        Full width W [mm].

    Returns
    -------
    float
        Ratio [-].

    Notes
    -----
    Range as `hole_single`. An unloaded fastener hole has no such part.

    References
    ----------
    .. [1] Cartwright and Rooke, compounding by ratios of boundary factors.
    """
    bearing = hole_single_bearing(c_edge, diameter, width)
    return bearing / hole_single(c_edge, diameter, width)
