r"""Size of the plastic zone ahead of a crack, radius and diameter told apart.

.. math:: r_p = \frac{1}{n\pi}\Bigl(\frac{K}{S_y}\Bigr)^2

n = 2 in plane stress and 6 in plane strain for Irwin's radius; the zone reaches twice
that far. Retardation models count with the radius.

References
----------
.. [1] Irwin; as in the USAF Damage Tolerant Design Handbook, section 5.
"""

from __future__ import annotations

import math
from enum import StrEnum

from repairs.analysis.errors import within
from repairs.analysis.types import Grade, Reference

IRWIN = Reference("Irwin's plastic zone; elementary", Grade.DERIVED)


class StressState(StrEnum):
    """State of stress at the crack front."""

    PLANE_STRESS = "plane stress"
    PLANE_STRAIN = "plane strain"


SHARES = {
    StressState.PLANE_STRESS: 1 / (2 * math.pi),
    StressState.PLANE_STRAIN: 1 / (6 * math.pi),
}
"""Irwin's radius over (K/Sy)^2."""


def irwin_radius(intensity: float, yield_stress: float, state: StressState) -> float:
    """Return Irwin's radius r_p of the plastic zone [1]_.

    Parameters
    ----------
    intensity
        K [MPa*sqrt(mm)].
    yield_stress
        Tension yield strength [MPa].
    state
        Plane stress or plane strain.

    Returns
    -------
    float
        Radius [mm].

    Notes
    -----
    Range K >= 0, small beside crack and ligament.

    References
    ----------
    .. [1] See `IRWIN`.
    """
    within("Yield strength, MPa", yield_stress, 1e-9, 1e5, "a metal")
    within("K, MPa√mm", intensity, 0, 1e9, "a crack that is open")
    return SHARES[state] * (intensity / yield_stress) ** 2


def irwin_diameter(intensity: float, yield_stress: float, state: StressState) -> float:
    """Return the diameter of the plastic zone, twice `irwin_radius` [mm]."""
    return 2 * irwin_radius(intensity, yield_stress, state)
