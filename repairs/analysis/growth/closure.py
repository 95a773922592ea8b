r"""Crack closure: the crack is open only in the upper part of a cycle.

.. math:: \frac{da}{dN} = C\,(U\,\Delta K)^m,\qquad U = \frac{1 - S_o/S_{max}}{1 - R}

with constants fitted on the effective range: constants of another law are wrong here.

References
----------
.. [1] Elber, ASTM STP 486.
.. [2] Newman, International Journal of Fracture 24, 1984.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np

from repairs.analysis.errors import within
from repairs.analysis.growth.laws import Floats, ratios_within
from repairs.analysis.types import ROOT_1000, Grade, Reference

ELBER = Reference(
    "Elber, ASTM STP 486: U of 2024-T3 sheet; from memory, unverified", Grade.MEMORY
)
NEWMAN_OPENING = Reference(
    "Newman 1984, crack-opening stress, in several public transcriptions that agree",
    Grade.QUOTED,
)
PLANE_STRESS, PLANE_STRAIN = 1.0, 3.0
"""Newman's constraint factor alpha at its two ends."""


def elber_share(ratio: float) -> float:
    """Return U = 0.5 + 0.4 R, the share of the range in which the crack is open [1]_.

    Parameters
    ----------
    ratio
        Stress ratio R [-].

    Returns
    -------
    float
        U [-].

    Notes
    -----
    Range -0.1 <= R <= 0.7, 2024-T3 sheet.

    References
    ----------
    .. [1] See `ELBER`.
    """
    return 0.5 + 0.4 * within("Stress ratio R", ratio, -0.1, 0.7, "Elber")


def newman_opening(ratio: float, constraint: float, level: float) -> float:
    r"""Return the opening stress over the maximum stress, at least R [1]_.

    .. math::
        S_o/S_{max} = A_0 + A_1R + A_2R^2 + A_3R^3\;(R \ge 0),\quad
        A_0 + A_1R\;(R < 0)

    :math:`A_0 = (0.825 - 0.34\alpha + 0.05\alpha^2)[\cos(\pi s/2)]^{1/\alpha}`,
    :math:`A_1 = (0.415 - 0.071\alpha)s`, :math:`A_2 = 1 - A_0 - A_1 - A_3`,
    :math:`A_3 = 2A_0 + A_1 - 1`.

    Parameters
    ----------
    ratio
        Stress ratio R [-].
    constraint
        alpha [-]: 1 plane stress, 3 plane strain.
    level
        s, maximum stress over flow stress [-].

    Returns
    -------
    float
        So/Smax [-].

    Notes
    -----
    Range -1 <= R < 1, 1 <= alpha <= 3, 0 <= s <= 0.8.

    References
    ----------
    .. [1] See `NEWMAN_OPENING`.
    """
    within("Stress ratio R", ratio, -1, 0.999, "Newman")
    alpha = within(
        "Constraint factor", constraint, PLANE_STRESS, PLANE_STRAIN, "Newman"
    )
    s = within("Maximum stress over flow stress", level, 0, 0.8, "Newman")
    a0 = 0.825 - 0.34 * alpha + 0.05 * alpha**2
    a0 *= math.cos(math.pi * s / 2) ** (1 / alpha)
    a1 = (0.415 - 0.071 * alpha) * s
    if ratio < 0:
        return float(max(ratio, a0 + a1 * ratio))
    a3 = 2 * a0 + a1 - 1
    a2 = 1 - a0 - a1 - a3
    return float(max(ratio, a0 + a1 * ratio + a2 * ratio**2 + a3 * ratio**3))


def newman_share(ratio: float, constraint: float, level: float) -> float:
    """Return U = (1 - So/Smax)/(1 - R) after Newman [-]; ranges of `newman_opening`."""
    return (1 - newman_opening(ratio, constraint, level)) / (1 - ratio)


@dataclass(frozen=True, slots=True)
class ElberLaw:
    """A power law on Elber's effective range.

    Parameters
    ----------
    coefficient
        C [mm/cycle per (MPa*sqrt(mm))^m], fitted on the effective range.
    exponent
        m [-].
    reference
        Source of the constants.
    remark
        Sheet, direction, range of the data, as recorded.
    """

    coefficient: float
    exponent: float
    reference: Reference
    remark: str = ""

    def rate(self, delta_k: float, ratio: float) -> float:
        """Return da/dN [mm/cycle] of the full range; R as `elber_share`."""
        driven = elber_share(ratio) * delta_k
        return float(self.coefficient * driven**self.exponent)

    def rates(self, delta_k: Floats, ratio: Floats) -> Floats:
        """Return da/dN of arrays, as `rate`."""
        driven: Floats = delta_k * self.shares(ratio)
        return self.coefficient * driven**self.exponent

    def shares(self, ratio: Floats) -> Floats:
        """Return U of stress ratios [-]."""
        ratios_within(ratio, -0.1, 0.7, "Elber")
        return 0.5 + 0.4 * ratio


@dataclass(frozen=True, slots=True)
class NewmanLaw:
    """A power law on the effective range after Newman's opening stress.

    Parameters
    ----------
    coefficient
        C [mm/cycle per (MPa*sqrt(mm))^m], fitted on the effective range.
    exponent
        m [-].
    constraint
        alpha of the fit [-].
    level
        Maximum stress over flow stress, of the cycle or of the whole sequence [-].
    reference
        Source of the constants.
    remark
        Sheet, direction, range of the data, as recorded.
    """

    coefficient: float
    exponent: float
    constraint: float
    level: float
    reference: Reference
    remark: str = ""

    @classmethod
    def from_mpa_root_metre(
        cls,
        c: float,
        m: float,
        closure: tuple[float, float],
        reference: Reference,
        remark: str = "",
    ) -> NewmanLaw:
        """Make the law from C in mm/cycle per (MPa*sqrt(m))^m, (alpha, level)."""
        return cls(c / ROOT_1000**m, m, *closure, reference, remark)

    def rate(self, delta_k: float, ratio: float) -> float:
        """Return da/dN [mm/cycle] of the full range; R as `newman_opening`."""
        driven = newman_share(ratio, self.constraint, self.level) * delta_k
        return float(self.coefficient * driven**self.exponent)

    def rates(self, delta_k: Floats, ratio: Floats) -> Floats:
        """Return da/dN of arrays, as `rate`."""
        driven: Floats = delta_k * self.shares(ratio)
        return self.coefficient * driven**self.exponent

    def shares(self, ratio: Floats) -> Floats:
        """Return U of stress ratios, each different one worked out once [-]."""
        different, where = np.unique(ratio, return_inverse=True)
        found = [newman_share(float(r), self.constraint, self.level) for r in different]
        return np.array(found, dtype=float)[where].reshape(ratio.shape)
