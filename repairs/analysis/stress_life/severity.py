r"""Stress at the edge of a fastener hole: bypass and bearing load together.

.. math::
    SSF = \alpha\beta\Bigl[K_{tb}\,\theta\,\lambda\frac WD + K_{tg}(1 - \lambda)\Bigr]

on gross stress, after Jarfall. :math:`\alpha` (preparation of the hole) and
:math:`\beta` (its filling) would lower it; both are 1 here: no credit is taken.

References
----------
.. [1] Jarfall 1967; Niu, Airframe Structural Design, chapter 7.
"""

from __future__ import annotations

from bisect import bisect_left
from dataclasses import dataclass

from repairs.analysis.errors import within
from repairs.analysis.types import Grade, Reference

SEVERITY = Reference(
    "Jarfall's stress severity factor with bearing factors of Niu, Airframe Structural "
    "Design, fig. 7.7, from a public digitisation; curves not checked against the book",
    Grade.QUOTED,
)
HOLE_KT = Reference(
    "Roark, Formulas for Stress and Strain, Table 17.1, central hole in a strip, as in "
    "a public transcription",
    Grade.QUOTED,
)
NO_CREDIT = (
    "No credit for hole preparation, filling, clamping or interference; neither "
    "fretting nor the bending of a single lap is in it."
)
KTB, THETA = "digitised curve of bearing", "digitised curve of pin bending"
BEARING_KT = (
    (0.05, 1.045), (0.10, 1.106), (0.15, 1.182), (0.20, 1.282), (0.25, 1.406),
    (0.30, 1.558), (0.35, 1.746), (0.40, 1.973), (0.45, 2.266), (0.50, 2.65),
)  # fmt: skip
"""D/W and the peak stress of a pin-loaded hole over its bearing stress [-]."""
SINGLE_SHEAR = (
    (0.2, 1.197), (0.3, 1.305), (0.4, 1.410), (0.5, 1.515), (0.6, 1.628),
    (0.8, 1.850), (1.0, 2.080), (1.2, 2.336), (1.5, 2.782), (2.0, 3.679),
    (2.5, 4.567), (3.0, 5.461),
)  # fmt: skip
"""t/D and how much a bending pin in single shear raises the bearing stress [-]."""


@dataclass(frozen=True, slots=True)
class LoadedHole:
    """Hole D, width that counts W, sheet t, strip W0 whose load is shared [mm].

    `transfer` is the share of the strip's load that the fastener takes [-].
    """

    diameter: float
    width: float
    thickness: float
    strip: float
    transfer: float


def hole_kt(diameter: float, width: float) -> float:
    r"""Return Kt of a central hole in a strip, on net stress.

    .. math:: K_{tn} = 3 - 3.13x + 3.66x^2 - 1.53x^3,\quad x = D/W

    Parameters
    ----------
    diameter
        Hole diameter D [mm].
    width
        Full width W [mm].

    Returns
    -------
    float
        Kt on net stress [-].

    Notes
    -----
    Range 0 <= D/W <= 0.5 here. One-way tension: hoop tension with half of it across
    has a lower Kt.

    References
    ----------
    .. [1] See `HOLE_KT`.
    """
    x = within("Hole diameter over width", diameter / width, 0, 0.5, "strip with hole")
    return 3 - 3.13 * x + 3.66 * x**2 - 1.53 * x**3


def severity_factor(hole: LoadedHole) -> float:
    r"""Return Jarfall's stress severity factor on gross stress, single shear [1]_.

    .. math:: K_{tb}\,\theta\,\lambda\,W_0/D + K_{tg}(1 - \lambda)

    Parameters
    ----------
    hole
        Hole, width, sheet, strip and load transfer [mm, -].

    Returns
    -------
    float
        Peak stress over gross stress [-].

    Notes
    -----
    Range 0.05 <= D/W <= 0.5, t/D <= 3, 0 <= transfer <= 1. Below t/D 0.2 the factor of
    pin bending is that at 0.2, from above. Alpha and beta are 1.

    References
    ----------
    .. [1] See `SEVERITY`.
    """
    share = within("Load transfer", hole.transfer, 0, 1, "a share of the strip's load")
    x = within("Hole diameter over width", hole.diameter / hole.width, 0.05, 0.5, KTB)
    slender = within(
        "Thickness over hole diameter", hole.thickness / hole.diameter, 0, 3, THETA
    )
    bypass = hole_kt(hole.diameter, hole.width) / (1 - x)
    bearing = _between(BEARING_KT, x) * _between(SINGLE_SHEAR, max(slender, 0.2))
    return bearing * share * hole.strip / hole.diameter + bypass * (1 - share)


def _between(rows: tuple[tuple[float, float], ...], x: float) -> float:
    """Interpolate linearly in a table whose range holds x."""
    after = max(1, bisect_left(rows, (x,)))
    (x1, y1), (x2, y2) = rows[after - 1], rows[after]
    return y1 + (y2 - y1) * (x - x1) / (x2 - x1)
