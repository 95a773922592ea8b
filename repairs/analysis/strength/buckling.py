r"""Buckling of flat plates in compression, shear and in-plane bending.

.. math:: \sigma_{cr} = k\,\frac{\pi^2 E}{12(1 - \nu^2)}\Bigl(\frac tb\Bigr)^2

k here always goes with :math:`\pi^2/12(1-\nu^2)`; tables that fold it in print K = 3.62
for k = 4. A curved panel is taken as flat, which is below its own stress: no public
curve of the rise by curvature was read in numbers.

References
----------
.. [1] Gerard and Becker, NACA TN 3781, handbook of structural stability, flat plates;
   figures 14 and 22 in a public digitisation.
.. [2] Energy (Ritz) solutions of the same plates, in this program's tests.
"""

from __future__ import annotations

import math
from collections.abc import Collection
from enum import StrEnum

from repairs.analysis.errors import InputError, within
from repairs.analysis.types import Grade, Reference

PLATE = Reference("Thin flat plate, classical buckling theory", Grade.DERIVED)
COMPRESSION_K = Reference(
    "Classical buckling coefficients in compression, exact for long plates; agree with "
    "NACA TN 3781 figure 14",
    Grade.DERIVED,
)
SHEAR_K = Reference(
    "Shear: 5.35 + 4(b/a)^2 and 8.98 + 5.6(b/a)^2 as fits to NACA TN 3781 figure 22, "
    "its points read in a public digitisation",
    Grade.QUOTED,
)
BENDING_K = Reference(
    "In-plane bending of a long web, classical buckling coefficients", Grade.DERIVED
)
JOHNSON = Reference(
    "Johnson's parabola, after Ostenfeld also for plates, as in public codes",
    Grade.QUOTED,
)
NO_COEFFICIENT = (
    "No coefficient for {load} with {edges}. Use one of: {known}, or needs an engineer."
)


class Edges(StrEnum):
    """How the two unloaded edges are held; the loaded ones are simply supported."""

    SIMPLE = "both unloaded edges simply supported"
    CLAMPED = "both unloaded edges clamped"
    CLAMPED_SIMPLE = "one unloaded edge clamped, one simply supported"
    SIMPLE_FREE = "one unloaded edge simply supported, one free"
    CLAMPED_FREE = "one unloaded edge clamped, one free"


_LONG_COMPRESSION = {
    Edges.CLAMPED: 6.97,
    Edges.CLAMPED_SIMPLE: 5.40,
    Edges.CLAMPED_FREE: 1.249,
}
"""k of long plates; the last for Poisson's ratio 0.33, above it for less."""
_SHEAR = {Edges.SIMPLE: (5.35, 4.0), Edges.CLAMPED: (8.98, 5.6)}
_BENDING = {Edges.SIMPLE: 23.88, Edges.CLAMPED: 39.56}


def plate_stress(
    coefficient: float, modulus: float, poisson: float, thickness: float, width: float
) -> float:
    r"""Return the elastic buckling stress of a flat plate.

    .. math:: k\,\frac{\pi^2 E}{12(1 - \nu^2)}\Bigl(\frac tb\Bigr)^2

    Parameters
    ----------
    coefficient
        k, with this constant [-].
    modulus
        E_c, in compression [MPa].
    poisson
        Poisson's ratio [-].
    thickness
        Smallest thickness left of the whole panel [mm].
    width
        b: across the load in compression and bending, the shorter side in shear [mm].

    Returns
    -------
    float
        Elastic buckling stress [MPa]; see `johnson` above half of yield.

    Notes
    -----
    Range b/t >= 5, 0 <= nu <= 0.5. Loss of thickness over the whole panel is assumed:
    below what a local blend costs.

    References
    ----------
    .. [1] See `PLATE`.
    """
    within("Poisson's ratio", poisson, 0, 0.5, "isotropic metal")
    within("Width over thickness", width / thickness, 5, 1e5, "a thin plate")
    return (
        coefficient
        * math.pi**2
        * modulus
        / (12 * (1 - poisson**2))
        * (thickness / width) ** 2
    )


def compression_coefficient(
    edges: Edges, length: float, width: float, poisson: float
) -> float:
    r"""Return k in compression along the length.

    All edges simply supported: the least of :math:`(m/\phi + \phi/m)^2` over whole m,
    :math:`\phi = a/b`. One edge free: :math:`6(1 - \nu)/\pi^2`. Others: of the long
    plate.

    Parameters
    ----------
    edges
        Of the unloaded sides.
    length, width
        a along the load, b across it [mm].
    poisson
        Poisson's ratio [-].

    Returns
    -------
    float
        k [-].

    Notes
    -----
    Range a/b >= 0.2; Poisson's ratio to 0.33 with a free edge beside a clamped one. A
    shorter plate has more than the long plate's k, which is then low and safe.

    References
    ----------
    .. [1] See `COMPRESSION_K`.
    """
    ratio = within("Length over width", length / width, 0.2, 1e6, "a plate")
    if edges is Edges.SIMPLE:
        waves = {max(math.floor(ratio), 1), max(math.ceil(ratio), 1)}
        return min((m / ratio + ratio / m) ** 2 for m in waves)
    if edges is Edges.SIMPLE_FREE:
        return 6 * (1 - poisson) / math.pi**2
    if edges is Edges.CLAMPED_FREE:
        within("Poisson's ratio", poisson, 0, 0.33, "clamped beside a free edge")
    return _LONG_COMPRESSION[edges]


def shear_coefficient(edges: Edges, length: float, width: float) -> float:
    r"""Return k in shear: :math:`5.35 + 4(b/a)^2` or, clamped, 8.98 and 5.6.

    Parameters
    ----------
    edges
        All four edges simply supported or all clamped.
    length, width
        Longer side a and shorter side b, in either order [mm].

    Returns
    -------
    float
        k on the shorter side [-].

    Notes
    -----
    No range of a/b. Within 3.5 % of energy solutions, at most 2 % above them; within
    5 % of the digitised curve. Other edges are refused.

    References
    ----------
    .. [1] See `SHEAR_K`.
    """
    _known("shear", _SHEAR, edges)
    constant, rise = _SHEAR[edges]
    return constant + rise * (min(length, width) / max(length, width)) ** 2


def bending_coefficient(edges: Edges) -> float:
    """Return k of a long web bent in its own plane, on its largest stress [-].

    Parameters
    ----------
    edges
        Both long edges simply supported or both clamped.

    Returns
    -------
    float
        k on the full depth [-].

    Notes
    -----
    Range: long web, pure bending, neutral axis in the middle.

    References
    ----------
    .. [1] See `BENDING_K`.
    """
    _known("in-plane bending", _BENDING, edges)
    return _BENDING[edges]


def _known(load: str, table: Collection[Edges], edges: Edges) -> None:
    if edges not in table:
        known = "; ".join(table)
        raise InputError(NO_COEFFICIENT.format(load=load, edges=edges, known=known))


def johnson(elastic: float, cut_off: float) -> float:
    r"""Return the buckling stress below a cut-off: Johnson's parabola.

    .. math::
        \sigma = F_0\Bigl(1 - \frac{F_0}{4\sigma_e}\Bigr)\;(\sigma_e > F_0/2),\qquad
        \sigma_e\;\text{otherwise}

    Parameters
    ----------
    elastic
        Elastic buckling stress, of a column Euler's [MPa].
    cut_off
        F_0: crippling strength of a column's section, compression yield of a plate,
        shear yield in shear [MPa].

    Returns
    -------
    float
        Buckling stress [MPa].

    Notes
    -----
    Range both above 0. Meets the elastic stress with equal slope at half the cut-off.

    References
    ----------
    .. [1] See `JOHNSON`.
    """
    within("Elastic buckling stress, MPa", elastic, 1e-9, 1e12, "a stress")
    within("Cut-off stress, MPa", cut_off, 1e-9, 1e6, "a strength")
    if elastic <= cut_off / 2:
        return elastic
    return cut_off * (1 - cut_off / (4 * elastic))


def effective_width(
    modulus: float, poisson: float, thickness: float, stress: float
) -> float:
    r"""Return the width of buckled skin that still works with one stiffener.

    .. math:: w = t\sqrt{\frac{4\pi^2}{12(1 - \nu^2)}\cdot\frac{E}{\sigma}}

    Parameters
    ----------
    modulus
        E_c of the skin [MPa].
    poisson
        Poisson's ratio [-].
    thickness
        Skin thickness left [mm].
    stress
        Stress of the stiffener [MPa].

    Returns
    -------
    float
        Whole width, half of it on each side [mm]; 1.90 t sqrt(E/F) at nu = 0.3.

    Notes
    -----
    Range sigma > 0; not more than the stiffener pitch. Sheet between stiffeners simply
    supported by them.

    References
    ----------
    .. [1] von Karman: the width that would buckle at this stress; see `PLATE`.
    """
    within("Stress of the stiffener, MPa", stress, 1e-9, 1e6, "compression")
    constant = 4 * math.pi**2 / (12 * (1 - poisson**2))
    return thickness * math.sqrt(constant * modulus / stress)
