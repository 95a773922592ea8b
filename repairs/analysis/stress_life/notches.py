r"""Stress concentration of a smooth dish in a surface and of a notch at an edge.

.. math:: K_t = 1 + 2\sqrt{d/\rho},\qquad \rho = \frac{w^2 + d^2}{2d}

with w half of the *full* length: a 20:1 blend has 2w/d = 20 and Kt 1.281. The radius is
that of the circular arc through both ends and the bottom.
"""

from __future__ import annotations

import math

from repairs.analysis.errors import within
from repairs.analysis.types import Grade, Reference

NOTCH = Reference(
    "Inglis 1913, elliptical notch, as in public benchmark text (2:1 hole gives 5)",
    Grade.QUOTED,
)
EDGE_NOTCH = Reference(
    "Inglis 1913, times 3.065/3: Peterson, chart 2.9, semicircular notch at the edge "
    "of a wide strip, in public code",
    Grade.QUOTED,
)
SEMICIRCLE_AT_EDGE = 3.065
DEEPEST = "a shallow dish: no deeper than half of its length"


def dish_radius(depth: float, full_length: float) -> float:
    """Return the radius of the arc through both ends and the bottom of a dish.

    Parameters
    ----------
    depth, full_length
        Depth d and full length 2w [mm].

    Returns
    -------
    float
        Radius [mm].

    Notes
    -----
    Range 0 < d <= w.

    References
    ----------
    .. [1] Geometry.
    """
    w = full_length / 2
    within("Depth over half of the length", depth / w, 1e-12, 1, DEEPEST)
    return (w**2 + depth**2) / (2 * depth)


def notch_factor(depth: float, full_length: float) -> float:
    r"""Return Kt of a smooth dish, :math:`1 + 2\sqrt{d/\rho}`.

    Parameters
    ----------
    depth
        Total depth d [mm].
    full_length
        Full length of the blend, 2w [mm]; a 20:1 blend has 2w/d = 20.

    Returns
    -------
    float
        Kt on the stress of the section that is left [-].

    Notes
    -----
    Range 0 < d <= w. Two-dimensional groove: a round dish is below it.

    References
    ----------
    .. [1] See `NOTCH`.
    """
    return 1 + 2 * math.sqrt(depth / dish_radius(depth, full_length))


def edge_notch_factor(depth: float, full_length: float) -> float:
    r"""Return Kt of a notch at an edge, :math:`1.0217\,(1 + 2\sqrt{d/\rho})`.

    Parameters
    ----------
    depth
        Depth d from the edge [mm].
    full_length
        Full length of the notch along the edge, 2w [mm].

    Returns
    -------
    float
        Kt [-]; here used on the stress of the section left, which is on the safe side.

    Notes
    -----
    Range 0 < d <= w. The free edge raises the stress of a semicircle by 2 %, of a
    shallower notch by less. Without the bending of a strip free to bend.

    References
    ----------
    .. [1] See `EDGE_NOTCH`.
    """
    return SEMICIRCLE_AT_EDGE / 3 * notch_factor(depth, full_length)
