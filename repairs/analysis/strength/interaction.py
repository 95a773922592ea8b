r"""Loads together: published interaction curves and their margin.

With :math:`R_i` = applied over allowable of each load alone,

.. math:: R_1^{p_1} + R_2^{p_2} = 1

the margin is the factor on all loads together that reaches the curve, less one.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from scipy.optimize import brentq

from repairs.analysis.errors import UNKNOWN_FORM, InputError, within
from repairs.analysis.types import Grade, Reference


@dataclass(frozen=True, slots=True)
class Interaction:
    """Exponents of the two loads, in the order of the name, and the source."""

    first: float
    second: float
    reference: Reference


INTERACTIONS: dict[str, Interaction] = {
    "plate: compression and shear": Interaction(
        1,
        2,
        Reference(
            "Parabola for long plates; Batdorf and Stein, NACA TN 1223, read in part",
            Grade.QUOTED,
        ),
    ),
    "plate: bending and shear": Interaction(
        2,
        2,
        Reference(
            "Circle for webs, Gerard and Becker, NACA TN 3781; from memory, unverified",
            Grade.MEMORY,
        ),
    ),
    "material: tension and shear": Interaction(
        2,
        2,
        Reference(
            "Distortion energy, shear allowable at least tension/sqrt 3", Grade.DERIVED
        ),
    ),
    "any: straight line": Interaction(
        1,
        1,
        Reference("Straight line: safe where the curve bows outwards", Grade.DERIVED),
    ),
}


def interaction(name: str) -> Interaction:
    """Return an interaction by its name, else refuse with the names there are."""
    if name not in INTERACTIONS:
        raise InputError(UNKNOWN_FORM.format(name=name, known=", ".join(INTERACTIONS)))
    return INTERACTIONS[name]


def combined_margin(name: str, first: float, second: float) -> float:
    """Return the margin of two loads together.

    Parameters
    ----------
    name
        Of `INTERACTIONS`.
    first, second
        Applied over allowable of each alone, not negative [-]; tension beside shear of
        a plate is entered as 0.

    Returns
    -------
    float
        Factor to the curve less one [-]; infinite without load.

    Notes
    -----
    Range 0 <= R <= 1000. By energy the parabola of compression and shear holds within
    0.5 %; the circle of bending and shear is up to 5 % high for a square web.

    References
    ----------
    .. [1] The reference of the interaction.
    """
    curve = interaction(name)
    within("First ratio", first, 0, 1e3, "applied over allowable")
    within("Second ratio", second, 0, 1e3, "applied over allowable")
    if first == second == 0:
        return math.inf

    larger = max(first, second)

    def excess(share: float) -> float:
        return (
            math.pow(share * first / larger, curve.first)
            + math.pow(share * second / larger, curve.second)
            - 1
        )

    return float(brentq(excess, 0.0, 1 + 1e-9, rtol=1e-14)) / larger - 1


def beam_column_margin(axial: float, bending: float, over_euler: float) -> float:
    r"""Return the margin of compression with bending, bending grown by the thrust.

    .. math:: \lambda R_c + \lambda R_b\sec\Bigl(\frac\pi2
              \sqrt{\lambda P/P_E}\Bigr) = 1

    Parameters
    ----------
    axial, bending
        Applied over allowable of compression and of bending alone [-].
    over_euler
        Axial load over Euler's load in the plane of bending [-].

    Returns
    -------
    float
        Factor on all loads, less one [-]; infinite without load.

    Notes
    -----
    Range all >= 0. Pinned ends, equal moments at both: the largest growth.

    References
    ----------
    .. [1] Beam with thrust and equal end moments, exact; straight line of ratios.
    """
    within("Axial ratio", axial, 0, 1e3, "applied over allowable")
    within("Bending ratio", bending, 0, 1e3, "applied over allowable")
    within("Load over Euler's", over_euler, 0, 1e3, "a column")
    if axial == bending == 0:
        return math.inf

    def excess(factor: float) -> float:
        angle = math.pi / 2 * math.sqrt(factor * over_euler)
        return factor * (axial + bending / math.cos(angle)) - 1

    top = 1 / (axial + bending)
    if over_euler > 0:
        top = min(top, (1 - 1e-12) / over_euler)
    if excess(top) <= 0:
        return top - 1
    return float(brentq(excess, 0.0, top, rtol=1e-14)) - 1


BEAM_COLUMN = Reference(
    "Beam with thrust and equal end moments, straight line of ratios", Grade.DERIVED
)
