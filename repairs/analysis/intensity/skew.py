r"""A crack at any angle to the main stress: by how much taking it across falls short.

A crack whose normal leans by phi from the largest principal stress S1 has, with
:math:`\lambda = S_2/S_1`,

.. math::
    K_I = S_1\sqrt{\pi a}\,(\cos^2\phi + \lambda\sin^2\phi),\qquad
    K_{II} = S_1\sqrt{\pi a}\,(1 - \lambda)\sin\phi\cos\phi

and turns to where the stress across its new direction is largest,

.. math::
    K_{eq} = \max_\theta\;\cos\tfrac\theta2\,\Bigl[K_I\cos^2\tfrac\theta2
             - \tfrac32 K_{II}\sin\theta\Bigr]

References
----------
.. [1] Erdogan and Sih, 1963: largest tangential stress; as in public documentation of
   a finite-element program.
"""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

from repairs.analysis.errors import within
from repairs.analysis.types import Grade, Reference

TANGENTIAL = Reference(
    "Erdogan and Sih, largest tangential stress at the tip of a skew crack, as in "
    "public documentation",
    Grade.QUOTED,
)
ANGLES = 1801
"""Leans tried from 0 to 90 degrees; the largest is met to 1e-6."""


def tangential(opening: float, sliding: float) -> float:
    """Return the K that opens the direction a mixed crack turns to.

    Parameters
    ----------
    opening, sliding
        K_I, not below 0, and K_II [MPa*sqrt(mm)].

    Returns
    -------
    float
        K_eq [MPa*sqrt(mm)].

    Notes
    -----
    Range K_I >= 0: crack faces that touch are taken without friction.

    References
    ----------
    .. [1] See `TANGENTIAL`.
    """
    within("K_I", opening, 0, math.inf, "an open crack")
    return float(_turned(np.array([opening]), np.array([sliding]))[0])


def _turned(
    opening: NDArray[np.float64], sliding: NDArray[np.float64]
) -> NDArray[np.float64]:
    size = np.abs(sliding)
    root = np.sqrt(opening**2 + 8 * size**2)
    # tan(theta/2) of the direction, in the form that K_II = 0 leaves at 0.
    half = np.arctan2(2 * size, opening + root)
    bracket = opening * np.cos(half) ** 2 + 1.5 * size * np.sin(2 * half)
    return np.asarray(np.cos(half) * bracket, dtype=np.float64)


def skew_bound(ratio: float) -> float:
    r"""Return the largest K of any direction over K across the largest stress [-].

    Parameters
    ----------
    ratio
        Smallest over largest principal stress, lambda [-].

    Returns
    -------
    float
        Factor on :math:`S_1\sqrt{\pi a}`, at least 1 [-].

    Notes
    -----
    Range -1 <= lambda <= 1. Centre crack in a wide sheet. 1.30 in pure shear,
    1.03 in one-way tension, 1 from about lambda 0.4 on.

    References
    ----------
    .. [1] See `TANGENTIAL`.
    """
    share = within("Smallest over largest principal stress", ratio, -1, 1, "skew crack")
    phi = np.linspace(0, math.pi / 2, ANGLES)
    opening = np.maximum(np.cos(phi) ** 2 + share * np.sin(phi) ** 2, 0.0)
    sliding = (1 - share) * np.sin(phi) * np.cos(phi)
    return float(_turned(opening, sliding).max())
