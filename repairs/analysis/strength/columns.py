r"""Columns and sheet between rivets: Euler, Johnson, tangent modulus.

.. math:: \sigma_E = \frac{c\,\pi^2 E}{(L/\rho)^2}

c is the fixity of the ends: 1 pinned, 4 clamped; it is an input.

References
----------
.. [1] Euler; Johnson; Engesser and Shanley for the tangent modulus.
.. [2] Ramberg and Osgood, NACA TN 902: stress and strain in three numbers.
"""

from __future__ import annotations

import math

from scipy.optimize import brentq

from repairs.analysis.errors import within
from repairs.analysis.strength.buckling import johnson
from repairs.analysis.types import Grade, Reference, Sourced

EULER = Reference("Euler column", Grade.DERIVED)
JOHNSON_COLUMN = Reference(
    "Johnson's parabola tangent to Euler's curve, crippling as cut-off, as in public "
    "texts on aircraft structure",
    Grade.QUOTED,
)
TANGENT = Reference(
    "Tangent modulus of the Ramberg-Osgood law (NACA TN 902) in place of E",
    Grade.DERIVED,
)
INTER_RIVET = Reference(
    "Sheet between rivets as a wide column, elementary; fixity is an input",
    Grade.DERIVED,
)


def _fixity(value: float, source: str) -> Sourced:
    return Sourced(value, "-", source, Grade.QUOTED)


_NIU, _FLABEL = "Niu, as quoted in public text", "Flabel, as quoted in public text"
RIVET_FIXITY: dict[str, tuple[Sourced, ...]] = {
    "universal head": (_fixity(3.0, _FLABEL), _fixity(4.0, _NIU)),
    "flat head": (_fixity(4.0, _FLABEL),),
    "brazier head": (_fixity(3.0, _NIU),),
    "spot weld": (_fixity(3.5, _FLABEL),),
    "countersunk, shear head": (_fixity(1.0, _FLABEL), _fixity(1.0, _NIU)),
    "countersunk, tension head": (_fixity(1.5, _FLABEL), _fixity(1.0, _NIU)),
}
"""Published fixities; sources disagree, and none is taken without being chosen."""


def euler_stress(
    modulus: float, gyration: float, length: float, fixity: float
) -> float:
    r"""Return Euler's stress, :math:`c\pi^2E/(L/\rho)^2`.

    Parameters
    ----------
    modulus
        E_c [MPa].
    gyration
        Smallest radius of gyration of what is left [mm].
    length
        Free length L [mm].
    fixity
        c of the ends [-].

    Returns
    -------
    float
        Stress [MPa].

    Notes
    -----
    Range 0.25 <= c <= 4. Bends only: an open section may twist before, at less.

    References
    ----------
    .. [1] See `EULER`.
    """
    within("End fixity", fixity, 0.25, 4, "free to clamped ends")
    within("Free length, mm", length, 1e-6, 1e6, "a length")
    return fixity * math.pi**2 * modulus * (gyration / length) ** 2


def column_stress(
    modulus: float, gyration: float, length: float, fixity: float, crippling: float
) -> float:
    r"""Return the strength of a column with its section's crippling as cut-off.

    .. math::
        F_c = F_{cc}\Bigl[1 - \frac{F_{cc}(L/\rho)^2}{4c\pi^2E}\Bigr]
        \quad\text{to}\quad \frac{L}{\rho\sqrt c} = \pi\sqrt{2E/F_{cc}}

    then Euler's.

    Parameters
    ----------
    modulus, gyration, length, fixity
        As `euler_stress`.
    crippling
        F_cc of the section left [MPa].

    Returns
    -------
    float
        Stress [MPa].

    Notes
    -----
    Range of `euler_stress`. A blended or trimmed leg changes F_cc too.

    References
    ----------
    .. [1] See `JOHNSON_COLUMN`.
    """
    return johnson(euler_stress(modulus, gyration, length, fixity), crippling)


def tangent_modulus(
    stress: float, modulus: float, yield_stress: float, shape: float
) -> float:
    r"""Return the slope of the stress-strain curve.

    .. math:: E_t = \frac{E}{1 + 0.002\,n\,\frac{E}{F_{cy}}
              \bigl(\sigma/F_{cy}\bigr)^{n-1}}

    Parameters
    ----------
    stress
        Stress [MPa].
    modulus, yield_stress
        E_c and F_cy at 0.2 % offset [MPa].
    shape
        n of Ramberg and Osgood [-].

    Returns
    -------
    float
        E_t [MPa].

    Notes
    -----
    Range 2 <= n <= 100, stress to 1.2 F_cy.

    References
    ----------
    .. [1] See `TANGENT`.
    """
    within("Shape number n", shape, 2, 100, "a metal")
    within("Stress over compression yield", stress / yield_stress, 0, 1.2, "the curve")
    bend = 0.002 * shape * modulus / yield_stress
    return modulus / (1 + bend * math.pow(stress / yield_stress, shape - 1))


def tangent_stress(
    elastic: float, modulus: float, yield_stress: float, shape: float
) -> float:
    r"""Return the buckling stress with the tangent modulus in place of E.

    The root of :math:`\sigma = \sigma_e\,E_t(\sigma)/E`, not above F_cy.

    Parameters
    ----------
    elastic
        Elastic buckling stress sigma_e [MPa].
    modulus, yield_stress, shape
        As `tangent_modulus`.

    Returns
    -------
    float
        Stress [MPa].

    Notes
    -----
    Range of `tangent_modulus`. Exact for a column; low and safe for a plate.

    References
    ----------
    .. [1] See `TANGENT`.
    """

    def excess(stress: float) -> float:
        slope = tangent_modulus(stress, modulus, yield_stress, shape)
        return stress - elastic * slope / modulus

    top = min(elastic, yield_stress)
    if excess(top) <= 0:
        return top
    return float(brentq(excess, 0.0, top, xtol=1e-9 * top))


def inter_rivet_stress(
    modulus: float,
    poisson: float,
    thickness: float,
    pitch: float,
    fixity: float,
    yield_stress: float,
    shape: float | None = None,
) -> float:
    r"""Return the stress at which sheet buckles between rivets.

    .. math:: F_{ir} = c\,\frac{\pi^2E}{12(1 - \nu^2)}\Bigl(\frac tp\Bigr)^2

    Parameters
    ----------
    modulus, poisson
        E_c [MPa] and Poisson's ratio [-].
    thickness
        Sheet thickness left [mm].
    pitch
        Rivet pitch along the load [mm].
    fixity
        c by head, chosen from `RIVET_FIXITY` or stated [-].
    yield_stress
        F_cy [MPa].
    shape
        Ramberg-Osgood n; None = unknown.

    Returns
    -------
    float
        Stress [MPa], never above F_cy: with the tangent modulus, which matters above
        about 0.7 F_cy; without n by Johnson's parabola from half of F_cy.

    Notes
    -----
    Range 0.5 <= c <= 4, p/t >= 3.

    References
    ----------
    .. [1] See `INTER_RIVET`, `TANGENT`.
    """
    within("Rivet fixity", fixity, 0.5, 4, "heads published")
    within("Pitch over thickness", pitch / thickness, 3, 1e4, "a thin sheet")
    elastic = (
        fixity
        * math.pi**2
        * modulus
        / (12 * (1 - poisson**2))
        * (thickness / pitch) ** 2
    )
    if shape is None:
        return johnson(elastic, yield_stress)
    return tangent_stress(elastic, modulus, yield_stress, shape)
