r"""Crack growth under constant amplitude: Paris and Walker, integrated exactly.

With :math:`\Delta K = F(a)\,\Delta S\sqrt{\pi a}` and a constant stress cycle the
equation is separable,

.. math:: N = \int_{a_0}^{a_1} \frac{da}{da/dN(a)}

and the integral is evaluated by adaptive quadrature in ln a, which meets the closed
forms to 1e-6. Stepping cycle by cycle always lags the crack and is not used. No
retardation and no threshold: both lengthen life.

References
----------
.. [1] Paris and Erdogan; Walker; both as in Dowling, Mechanical Behavior of Materials.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from scipy.integrate import quad, solve_ivp
from scipy.optimize import brentq

from repairs.analysis.errors import AnalysisError, within
from repairs.analysis.types import (
    INCH,
    KSI_ROOT_INCH,
    ROOT_1000,
    GrossStress,
    Reference,
)

SEPARABLE = "N = ∫ da / (da/dN)"
BACKWARDS = "Growth is asked from {low:.4g} to {high:.4g} mm; the end must be larger."
CURVE_POINTS = 60

Factor = Callable[[float], float]
"""F(a): dimensionless factor at a crack length [mm]."""


@dataclass(frozen=True, slots=True)
class WalkerLaw:
    r"""Growth law :math:`da/dN = C\,[\Delta K/(1-R)^{1-\gamma}]^m` for R >= 0.

    For R < 0 only the tension part counts: :math:`K_{max}` in place of the bracket.

    Parameters
    ----------
    coefficient
        C [mm/cycle per (MPa*sqrt(mm))^m].
    exponent
        m [-].
    gamma
        Walker's exponent [-]; 1 makes it Paris' law at any R.
    reference
        Source of the constants.
    remark
        Sheet, direction, range of the data, as recorded.
    """

    coefficient: float
    exponent: float
    gamma: float
    reference: Reference
    remark: str = ""

    @classmethod
    def from_mpa_root_metre(
        cls, c: float, m: float, gamma: float, reference: Reference, remark: str = ""
    ) -> WalkerLaw:
        """Make the law from C printed in mm/cycle per (MPa*sqrt(m))^m."""
        return cls(c / ROOT_1000**m, m, gamma, reference, remark)

    @classmethod
    def from_ksi_root_inch(
        cls, c: float, m: float, gamma: float, reference: Reference, remark: str = ""
    ) -> WalkerLaw:
        """Make the law from C printed in in/cycle per (ksi*sqrt(in))^m."""
        return cls(c * INCH / KSI_ROOT_INCH**m, m, gamma, reference, remark)

    def rate(self, delta_k: float, ratio: float) -> float:
        """Return da/dN.

        Parameters
        ----------
        delta_k
            Full range of K, compression included [MPa*sqrt(mm)].
        ratio
            Stress ratio R [-].

        Returns
        -------
        float
            Growth rate [mm/cycle].

        Notes
        -----
        Range R < 1. Data of the law end near R = 0.7 and near the toughness.
        """
        within("Stress ratio R", ratio, -10, 0.999, "Walker")
        power = 1 - self.gamma if ratio >= 0 else 1.0
        return float(
            self.coefficient * (delta_k / (1 - ratio) ** power) ** self.exponent
        )


@dataclass(frozen=True, slots=True)
class StressCycle:
    """A constant-amplitude cycle of gross stress [MPa], ratio R = Smin/Smax."""

    maximum: GrossStress
    ratio: float

    @property
    def span(self) -> float:
        """Smax - Smin [MPa]."""
        return self.maximum * (1 - self.ratio)


def delta_k(factor: float, cycle: StressCycle, length: float) -> float:
    """Return the range of K at a crack length [MPa*sqrt(mm)]."""
    return factor * cycle.span * math.sqrt(math.pi * length)


def paris_cycles(
    law: WalkerLaw, factor: float, cycle: StressCycle, start: float, end: float
) -> float:
    r"""Return the closed-form life for a constant factor F (used as a check).

    .. math:: N = \frac{a_1^{1-m/2} - a_0^{1-m/2}}{C(F\,\Delta S\sqrt\pi)^m(1-m/2)}

    Parameters
    ----------
    law
        Growth law.
    factor
        Constant F [-].
    cycle
        Stress cycle [MPa].
    start, end
        Crack lengths a_0, a_1 [mm].

    Returns
    -------
    float
        Life [cycles].

    Notes
    -----
    Range m != 2 and m = 2 (logarithmic form).

    References
    ----------
    .. [1] Paris' law integrated; elementary.
    """
    rate = law.rate(delta_k(factor, cycle, 1.0), cycle.ratio)
    power = 1 - law.exponent / 2
    if power == 0:
        return math.log(end / start) / rate
    return float((end**power - start**power) / (rate * power))


def growth_cycles(
    law: WalkerLaw, factor: Factor, cycle: StressCycle, start: float, end: float
) -> float:
    """Return cycles from one crack length to another by quadrature.

    Parameters
    ----------
    law
        Growth law.
    factor
        F(a) [-].
    cycle
        Stress cycle [MPa].
    start, end
        Crack lengths [mm].

    Returns
    -------
    float
        Life [cycles].

    Notes
    -----
    Range 0 < start <= end, inside the range of `factor`. Relative error below 1e-8.

    References
    ----------
    .. [1] See the module.
    """
    if not 0 < start <= end:
        raise AnalysisError(BACKWARDS.format(low=start, high=end))

    def slowness(log_length: float) -> float:
        a = math.exp(log_length)
        return a / law.rate(delta_k(factor(a), cycle, a), cycle.ratio)

    value, _ = quad(
        slowness, math.log(start), math.log(end), epsabs=0, epsrel=1e-9, limit=200
    )
    return float(value)


def growth_history(
    law: WalkerLaw, factor: Factor, cycle: StressCycle, start: float, end: float
) -> tuple[tuple[float, float], ...]:
    """Return (cycles, length) from `start` to `end`, equally spaced in ln a.

    Parameters
    ----------
    law, factor, cycle, start, end
        As `growth_cycles` [mm, MPa].

    Returns
    -------
    tuple of (float, float)
        Cycles from `start` and crack length [cycles, mm].

    Notes
    -----
    Range as `growth_cycles`.
    """
    lengths = [float(a) for a in np.geomspace(start, end, CURVE_POINTS)]
    lengths[0], lengths[-1] = start, end  # geomspace rounds its ends
    total, points = 0.0, [(0.0, start)]
    for before, after in itertools.pairwise(lengths):
        total += growth_cycles(law, factor, cycle, before, after)
        points.append((total, after))
    return tuple(points)


@dataclass(frozen=True, slots=True)
class TwoAxisGrowth:
    """How a part-through crack grew: cycles, final depth and length [mm]."""

    cycles: float
    depth: float
    length: float


def grow_part_through(
    law: WalkerLaw,
    factors: Callable[[float, float], tuple[float, float]],
    cycle: StressCycle,
    start: tuple[float, float],
    thickness: float,
) -> TwoAxisGrowth:
    """Grow depth a and length c together until the crack is through.

    Parameters
    ----------
    law
        Growth law.
    factors
        (a, c) -> factors on S sqrt(pi a) at the length tip and at the depth tip [-].
    cycle
        Stress cycle [MPa].
    start
        Depth a and length c [mm].
    thickness
        Plate thickness; growth ends when a reaches it [mm].

    Returns
    -------
    TwoAxisGrowth
        Cycles to break through, and the lengths there.

    Notes
    -----
    Range of the factors. Relative tolerance 1e-8 in ln N; integrated on depth, so
    that the end is exact.

    References
    ----------
    .. [1] USAF Damage Tolerant Design Handbook, 11.3: two-point growth.
    """

    def slopes(depth: float, state: np.ndarray) -> list[float]:
        at_length, at_depth = factors(depth, float(state[0]))
        along = law.rate(delta_k(at_length, cycle, depth), cycle.ratio)
        inward = law.rate(delta_k(at_depth, cycle, depth), cycle.ratio)
        return [along / inward, 1 / inward]

    depth, length = start
    solved = solve_ivp(slopes, (depth, thickness), [length, 0.0], rtol=1e-8, atol=1e-9)
    if not solved.success:
        raise AnalysisError(f"Growth through the thickness failed: {solved.message}")
    return TwoAxisGrowth(float(solved.y[1, -1]), thickness, float(solved.y[0, -1]))


def critical_length(
    strength: Callable[[float], float], required: float, low: float, high: float
) -> float | None:
    """Return the crack length where strength falls to what is required.

    Parameters
    ----------
    strength
        Residual strength of a crack length [MPa], falling with length.
    required
        Required stress [MPa].
    low, high
        Lengths to search between [mm].

    Returns
    -------
    float or None
        Length [mm]; `low` if strength is lost there already, None if it is still
        enough at `high`.

    Notes
    -----
    Range of `strength`.
    """
    if strength(low) <= required:
        return low
    if strength(high) > required:
        return None
    return float(brentq(lambda a: strength(a) - required, low, high, xtol=1e-9))
