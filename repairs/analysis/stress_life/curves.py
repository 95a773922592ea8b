r"""Stress-life curves in the handbook's equivalent-stress form.

.. math:: \log_{10} N = A_1 - A_2\log_{10}(S_{eq} - A_4),\qquad
          S_{eq} = S_{max}(1 - R)^{A_3}

Stress is *net* section, and in the unit the coefficients were printed in; a curve
carries that unit's size, so coefficients stay as printed and are never converted.
Between curves of one family: ln S linear in ln Kt at fixed life and stress ratio,
between the two bracketing curves only. Where curves cross the lower holds, so that a
higher Kt is never the longer life. At or below the last term there is no finite life
on the curve, which is not unlimited life.

A curve is the median of one product form and finish: two smooth curves of one alloy
differ by two decades, so a family is of one form, and bare is not clad.

References
----------
.. [1] MIL-HDBK-5J, section 9.3.4 (form) and the figure named by each curve.
"""

from __future__ import annotations

import functools
import math
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.optimize import brentq

from repairs.analysis.errors import AnalysisError, within
from repairs.analysis.types import Grade, NetStress

NO_FINITE_LIFE = "no finite life on this curve; not unlimited life"
EMPTY_FAMILY = "A stress-life family needs at least one curve, each with its own Kt."
LONGEST_LOG_LIFE = 30.0
"""Bracket of the inversion: there a curve has reached its last term to 1e-6."""
HALVINGS = 44
"""Of that bracket, for many cycles at once: log life to 2e-12."""
LN_10 = math.log(10)
RATIO_OF_CURVE = "the stress ratios tested on the curve Kt {kt:g}, {source}"
OTHER_CURVE = "Choose a curve tested at this stress ratio."

Array = NDArray[np.float64]


@dataclass(frozen=True, slots=True)
class StressLifeCurve:
    """One equivalent-stress curve with its coefficients as printed.

    Parameters
    ----------
    kt
        Stress-concentration factor on net stress [-].
    a1, a2, a3, a4
        Coefficients as printed; a4 in the printed stress unit.
    stress_unit_mpa
        Size of the printed stress unit [MPa]; 6.894757 for ksi.
    source, grade
        Figure or table, and how it was read.
    standard_error
        Of log10 N about the curve [-]; lots and laboratories are in it, so it is no
        scatter of one batch. None = not known.
    ratios
        Smallest and largest stress ratio tested [-]; None = not known.
    thickness
        Of the specimens [mm]; None = not known.
    """

    kt: float
    a1: float
    a2: float
    a3: float
    a4: float
    stress_unit_mpa: float
    source: str
    grade: Grade
    standard_error: float | None = None
    ratios: tuple[float, float] | None = None
    thickness: float | None = None

    def equivalent(self, max_stress: NetStress, ratio: float) -> float:
        """Return Seq in the printed stress unit."""
        self.check_ratio(ratio)
        return float(max_stress / self.stress_unit_mpa * (1 - ratio) ** self.a3)

    def cycles(self, max_stress: NetStress, ratio: float) -> float | None:
        """Return cycles to failure, None at or below the last term."""
        excess = self.equivalent(max_stress, ratio) - self.a4
        if excess <= 0:
            return None
        return float(10 ** (self.a1 - self.a2 * math.log10(excess)))

    def max_stress(self, log_life: float, ratio: float) -> NetStress:
        """Return Smax [MPa] that gives a life of 10**log_life cycles."""
        self.check_ratio(ratio)
        excess = 10 ** ((self.a1 - log_life) / self.a2)
        printed = (excess + self.a4) / (1 - ratio) ** self.a3
        return NetStress(printed * self.stress_unit_mpa)

    def check_ratio(self, ratio: float) -> None:
        """Refuse a stress ratio outside those tested, where they are known."""
        within("Stress ratio R", ratio, -10, 0.999, "R = Smin/Smax of a tension cycle")
        if self.ratios is not None:
            what = RATIO_OF_CURVE.format(kt=self.kt, source=self.source)
            within("Stress ratio R", ratio, *self.ratios, what, OTHER_CURVE)

    def lives(self, maximum: Array, ratio: Array) -> Array:
        """Return cycles to failure of many cycles, inf at or below the last term."""
        self._check_ratios(ratio)
        excess = maximum / self.stress_unit_mpa * (1 - ratio) ** self.a3 - self.a4
        found = np.full(maximum.shape, np.inf)
        above = excess > 0
        found[above] = 10 ** (self.a1 - self.a2 * np.log10(excess[above]))
        return found

    def scale(self, ratio: Array) -> Array:
        """Return Smax [MPa] of one printed unit of Seq, for many stress ratios."""
        self._check_ratios(ratio)
        return np.asarray(self.stress_unit_mpa * (1 - ratio) ** -self.a3)

    def maxima(self, log_life: Array | float, scale: Array) -> Array:
        """Return Smax [MPa] at lives of 10**log_life; `scale` of the stress ratios."""
        excess = np.exp((self.a1 - np.asarray(log_life)) * (LN_10 / self.a2))
        return np.asarray((excess + self.a4) * scale)

    def _check_ratios(self, ratio: Array) -> None:
        for extreme in (float(np.min(ratio)), float(np.max(ratio))):
            self.check_ratio(extreme)


@dataclass(frozen=True, slots=True)
class StressLifeFamily:
    """Curves of one material and form at several Kt, in order of Kt.

    Parameters
    ----------
    material, form
        As the handbook names them; bare and clad are different forms.
    clad
        Whether the specimens were clad.
    curves
        At least one, no two with the same Kt.
    """

    material: str
    form: str
    clad: bool
    curves: tuple[StressLifeCurve, ...]

    def __post_init__(self) -> None:
        factors = [curve.kt for curve in self.curves]
        if not factors or factors != sorted(set(factors)):
            raise AnalysisError(EMPTY_FAMILY)

    def bracket(self, kt: float) -> tuple[StressLifeCurve, StressLifeCurve]:
        """Return the curves below and above `kt`, the same one twice on a curve."""
        low, high = self.curves[0].kt, self.curves[-1].kt
        within(
            "Kt", kt, low, high, "the curves recorded", "Record a curve that brackets."
        )
        below = max((c for c in self.curves if c.kt <= kt), key=lambda c: c.kt)
        above = min((c for c in self.curves if c.kt >= kt), key=lambda c: c.kt)
        return below, above

    def max_stress(self, kt: float, log_life: float, ratio: float) -> NetStress:
        """Return Smax [MPa] at a life of 10**log_life, by ln S on ln Kt.

        Parameters
        ----------
        kt
            Stress-concentration factor on net stress [-].
        log_life
            log10 of the life [cycles].
        ratio
            Stress ratio R [-].

        Returns
        -------
        NetStress
            Largest stress of the cycle on the net section [MPa].

        Notes
        -----
        Range: the Kt of the recorded curves; no extrapolation.
        """
        below, above = self.bracket(kt)
        low = self._lower_envelope(below, log_life, ratio)
        high = self._lower_envelope(above, log_life, ratio)
        if below is above:
            return low
        share = math.log(kt / below.kt) / math.log(above.kt / below.kt)
        return NetStress(low * (high / low) ** share)

    def _lower_envelope(
        self, curve: StressLifeCurve, log_life: float, ratio: float
    ) -> NetStress:
        """Lowest stress of this and every blunter curve: crossed curves use it."""
        return min(
            c.max_stress(log_life, ratio) for c in self.curves if c.kt <= curve.kt
        )

    def cycles(self, kt: float, max_stress: NetStress, ratio: float) -> float | None:
        """Return mean cycles to failure, None where no curve point is that low.

        Parameters
        ----------
        kt
            Stress-concentration factor on net stress [-].
        max_stress
            Largest stress of the cycle on the net section [MPa], above zero.
        ratio
            Stress ratio R [-].

        Returns
        -------
        float or None
            Life [cycles]; None means `NO_FINITE_LIFE`.

        Notes
        -----
        Range: the Kt of the recorded curves, and the stress ratios tested where they
        are known.
        """
        within("Largest stress, MPa", max_stress, 0, 1e4, "a tension cycle")

        def excess(log_life: float) -> float:
            return self.max_stress(kt, log_life, ratio) - max_stress

        if excess(LONGEST_LOG_LIFE) >= 0:
            return None
        if excess(0.0) <= 0:
            return 1.0
        root = brentq(excess, 0.0, LONGEST_LOG_LIFE, xtol=1e-12, rtol=1e-12)
        return float(10**root)

    def lives(self, kt: float, maximum: Array, ratio: Array) -> Array:
        """Return mean cycles to failure of many cycles at once.

        Parameters
        ----------
        kt
            Stress-concentration factor on net stress [-].
        maximum
            Largest stresses on the net section [MPa], above zero, shape (n,).
        ratio
            Stress ratios R [-], shape (n,).

        Returns
        -------
        ndarray
            Lives [cycles], shape (n,); inf means `NO_FINITE_LIFE`.

        Notes
        -----
        Range of `cycles`; the same rule, solved by halving where Kt lies between two
        curves.
        """
        below, above = self.bracket(kt)
        if below is above:
            alike = [c.lives(maximum, ratio) for c in self.curves if c.kt <= kt]
            return np.asarray(np.maximum(np.min(alike, axis=0), 1.0))
        stress = self._between(kt, ratio)
        short, long = np.zeros(maximum.shape), np.full(maximum.shape, LONGEST_LOG_LIFE)
        never = stress(LONGEST_LOG_LIFE) >= maximum
        for _ in range(HALVINGS):
            middle = (short + long) / 2
            survives = stress(middle) >= maximum
            short = np.where(survives, middle, short)
            long = np.where(survives, long, middle)
        return np.where(never, np.inf, 10**short)

    def maxima(self, kt: float, log_life: Array | float, ratio: Array) -> Array:
        """Return Smax [MPa] of many cycles at lives of 10**log_life, by ln S on ln Kt.

        Parameters
        ----------
        kt
            Stress-concentration factor on net stress [-].
        log_life
            log10 of the lives [cycles], shape (n,) or one for all.
        ratio
            Stress ratios R [-], shape (n,).

        Returns
        -------
        ndarray
            Largest stresses on the net section [MPa], shape (n,).

        Notes
        -----
        Range of `max_stress`.
        """
        return self._between(kt, ratio)(log_life)

    def _between(self, kt: float, ratio: Array) -> Callable[[Array | float], Array]:
        """Return Smax [MPa] of many cycles as a function of log life."""
        below, above = self.bracket(kt)
        blunter = [(c, c.scale(ratio)) for c in self.curves if c.kt <= below.kt]
        scale = above.scale(ratio)

        def stress(log_life: Array | float) -> Array:
            each = (curve.maxima(log_life, own) for curve, own in blunter)
            low = functools.reduce(np.minimum, each)
            if below is above:
                return low
            high = np.minimum(low, above.maxima(log_life, scale))
            share = math.log(kt / below.kt) / math.log(above.kt / below.kt)
            return np.asarray(low * (high / low) ** share)

        return stress
