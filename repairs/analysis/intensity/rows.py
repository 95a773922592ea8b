r"""Cracks in a row along one line: exact solutions, and a bound for cracked holes.

F is defined on :math:`K = F\,S\sqrt{\pi a}` with S the stress far away and a half of
one crack.

References
----------
.. [1] Koiter; Irwin: endless row of equal cracks in a wide sheet, exact.
.. [2] Willmore; Erdogan: two equal cracks in a wide sheet, exact.
.. [3] Tada, Paris and Irwin, The Stress Analysis of Cracks Handbook, prints both.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from scipy.special import ellipe, ellipk

from repairs.analysis.errors import within
from repairs.analysis.intensity.holes import hole_double
from repairs.analysis.types import EdgeLength, Grade, HalfLength, Reference

ENDLESS_ROW = Reference(
    "Westergaard's stress function of an endless row of equal cracks, exact",
    Grade.DERIVED,
)
TWO_CRACKS = Reference("Willmore, two equal cracks on one line, exact", Grade.DERIVED)
HOLE_ROW = Reference(
    "Two cracks at a hole in a strip one pitch wide with free sides (Newman 1976): "
    "bound from above of the row, whose sides are held straight by symmetry",
    Grade.QUOTED,
)


@dataclass(frozen=True, slots=True)
class CrackRow:
    """Equal cracks on one line: half of one crack, and pitch from centre to centre."""

    half_length: HalfLength
    pitch: float

    @property
    def share(self) -> float:
        """Part of the line that is cracked, 2a over pitch [-]."""
        return within(
            "Crack length over pitch",
            2 * self.half_length / self.pitch,
            1e-12,
            0.99,
            "cracks that do not touch",
            "Treat what has joined as one crack.",
        )


def endless_row(row: CrackRow) -> float:
    r"""Return F of each crack of an endless row, exact [1]_.

    .. math:: F = \sqrt{\tan(\pi a/p)\,/\,(\pi a/p)}

    Parameters
    ----------
    row
        Half-length a and pitch p [mm].

    Returns
    -------
    float
        Factor F [-].

    Notes
    -----
    Range 0 < 2a/p < 1; enforced to 0.99. Wide sheet, equal cracks.

    References
    ----------
    .. [1] See `ENDLESS_ROW`.
    """
    angle = math.pi / 2 * row.share
    return math.sqrt(math.tan(angle) / angle)


@dataclass(frozen=True, slots=True)
class TwoTips:
    """F at the tips that face each other, and at the outer tips [-]."""

    inner: float
    outer: float


def two_cracks(row: CrackRow) -> TwoTips:
    r"""Return F of two equal cracks on one line, exact [1]_.

    With inner tips at :math:`\pm b`, outer at :math:`\pm c`,
    :math:`k^2 = 1 - b^2/c^2` and E, K the complete elliptic integrals of k,

    .. math::
        K_{in} = S\sqrt\pi\,\frac{c^2E/K - b^2}{\sqrt{b(c^2 - b^2)}},\qquad
        K_{out} = S\sqrt\pi\,\frac{c^2(1 - E/K)}{\sqrt{c(c^2 - b^2)}}

    Parameters
    ----------
    row
        Half-length a and pitch between the two centres [mm].

    Returns
    -------
    TwoTips
        Factors on :math:`S\sqrt{\pi a}` [-].

    Notes
    -----
    Range 0 < 2a/p < 1; enforced to 0.99. Wide sheet.

    References
    ----------
    .. [1] See `TWO_CRACKS`.
    """
    a = row.share / 2  # in units of the pitch
    inner, outer = 0.5 - a, 0.5 + a
    modulus = 1 - (inner / outer) ** 2
    share = float(ellipe(modulus) / ellipk(modulus))
    squares = outer**2 - inner**2
    return TwoTips(
        (outer**2 * share - inner**2) / math.sqrt(inner * squares * a),
        outer**2 * (1 - share) / math.sqrt(outer * squares * a),
    )


def row_of_cracked_holes(c_edge: EdgeLength, diameter: float, pitch: float) -> float:
    r"""Return F on :math:`\sqrt{\pi c}` of two cracks at each hole of a row [1]_.

    A row is cut midway between its holes into strips one pitch wide. Their sides are
    held straight by symmetry; leaving them free, as here, raises K: by 1 % where holes
    and cracks take a fifth of the pitch, 5 % at a half, 22 % at nine tenths.

    Parameters
    ----------
    c_edge
        Crack length from each hole edge [mm].
    diameter
        Hole diameter D [mm].
    pitch
        Hole pitch p along the row [mm].

    Returns
    -------
    float
        Factor F on gross stress [-].

    Notes
    -----
    Range D/p <= 0.5 and D/2 + c <= 0.45 p. Open holes in a wide sheet: the load that
    fasteners transfer is not in it.

    References
    ----------
    .. [1] See `HOLE_ROW`.
    """
    return hole_double(c_edge, diameter, pitch)
