r"""R-curve: stable growth under rising load, and where it turns unstable.

At each extension the sheet resists with :math:`K_R(\Delta a)`, so the stress it can
carry there is

.. math:: S(\Delta a) = \frac{K_R(\Delta a)}{F(a_0 + \Delta a)
          \sqrt{\pi(a_0 + \Delta a)}}

Its largest value is the strength; there K and K_R touch, with equal slopes. Length and
extension count the plastic zone in, or neither does.

References
----------
.. [1] ASTM E561 (curves are on effective extension); public university notes.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Callable
from dataclasses import dataclass
from enum import StrEnum

import numpy as np
from scipy.interpolate import PchipInterpolator
from scipy.optimize import minimize_scalar

from repairs.analysis.errors import InputError, within
from repairs.analysis.types import Grade, GrossStress, Reference

TANGENCY = Reference(
    "R-curve tangency (ASTM E561), as in public university notes", Grade.QUOTED
)
MIXED = (
    "The R-curve is on {curve} extension, the crack length is {length}. Enter both "
    "with the plastic zone, or both without."
)
NOT_RISING = "An R-curve needs at least 3 points, rising in extension and in K_R."
END_OF_DATA = (
    "K and K_R do not touch within the measured extension of {end:.2f} mm: the "
    "strength given is what was reached there, a lower bound."
)
TRIAL_POINTS = 200


class Extension(StrEnum):
    """Whether extension counts the plastic zone in."""

    PHYSICAL = "physical"
    EFFECTIVE = "effective"


@dataclass(frozen=True, slots=True)
class RCurve:
    """K_R [MPa*sqrt(mm)] on extension [mm], up to the largest measured.

    `resistance` must rise. `measured` is where the data end.
    """

    resistance: Callable[[float], float]
    measured: float
    extension: Extension
    reference: Reference

    @classmethod
    def power(
        cls,
        scale: float,
        exponent: float,
        measured: float,
        extension: Extension,
        reference: Reference,
    ) -> RCurve:
        """Make the curve :math:`K_R = A\\,\\Delta a^n` [MPa*sqrt(mm), mm]."""
        within("R-curve exponent", exponent, 0.01, 0.49, "a curve that can be touched")
        return cls(lambda more: scale * more**exponent, measured, extension, reference)

    @classmethod
    def measured_points(
        cls,
        points: tuple[tuple[float, float], ...],
        extension: Extension,
        reference: Reference,
    ) -> RCurve:
        """Make the curve through (extension, K_R) pairs, without overshoot."""
        rising = all(a[0] < b[0] and a[1] < b[1] for a, b in itertools.pairwise(points))
        if len(points) < 3 or not rising:
            raise InputError(NOT_RISING)
        along, across = zip(*points, strict=True)
        smooth = PchipInterpolator(along, across, extrapolate=False)
        first = points[0]

        def resistance(more: float) -> float:
            if more < first[0]:  # straight from the origin, which is conservative
                return first[1] * more / first[0]
            return float(smooth(more))

        return cls(resistance, points[-1][0], extension, reference)


@dataclass(frozen=True, slots=True)
class Instability:
    """Strength by tangency, with the stable growth before it.

    `reached` is False where the data end before K and K_R touch.
    """

    stress: GrossStress
    extension: float
    toughness: float
    reached: bool
    remark: str
    path: tuple[tuple[float, float], ...]


def instability(
    curve: RCurve,
    factor: Callable[[float], float],
    length: float,
    extension: Extension,
    largest: float = math.inf,
) -> Instability:
    r"""Return the strength of a crack by tangency, and its stable growth.

    Parameters
    ----------
    curve
        R-curve of this sheet.
    factor
        F of the crack's length [-].
    length
        Crack length F is defined on, before loading [mm].
    extension
        Whether `length` counts the plastic zone in; must agree with the curve.
    largest
        Longest length `factor` is valid for [mm].

    Returns
    -------
    Instability
        Gross stress [MPa], stable growth [mm], K there [MPa*sqrt(mm)], and the path
        (extension, stress).

    Notes
    -----
    Range of the measured extension and of `factor`; outside it the value is a lower
    bound and says so.

    References
    ----------
    .. [1] See `TANGENCY`.
    """
    if extension is not curve.extension:
        raise InputError(MIXED.format(curve=curve.extension, length=extension))
    end = min(curve.measured, largest - length)
    within("Room for stable growth, mm", end, 1e-9, 1e6, "range of the factor")

    def stress(more: float) -> float:
        whole = length + more
        return curve.resistance(more) / (factor(whole) * math.sqrt(math.pi * whole))

    trials = [float(x) for x in np.linspace(0, end, TRIAL_POINTS + 1)[1:]]
    path = tuple((more, stress(more)) for more in trials)
    best = max(range(len(path)), key=lambda i: path[i][1])
    reached = best < len(path) - 1
    more = trials[best]
    if reached:
        low = trials[best - 1] if best else 1e-9 * end
        found = minimize_scalar(
            lambda x: -stress(x),
            bounds=(low, trials[best + 1]),
            method="bounded",
            options={"xatol": 1e-10 * end},
        )
        more = float(found.x)
    remark = "" if reached else END_OF_DATA.format(end=end)
    return Instability(
        GrossStress(stress(more)),
        more,
        curve.resistance(more),
        reached,
        remark,
        path,
    )
