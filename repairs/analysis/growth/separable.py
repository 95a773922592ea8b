r"""Growth under one repeated cycle: one table of cycles over length, many lives.

With :math:`\Delta K = F(a)\,\Delta S\sqrt{\pi a}` and a constant stress cycle the
equation is separable,

.. math:: N = \int_{a_0}^{a_1} \frac{da}{da/dN(a)}

The integrand over ln a is replaced on each panel by the polynomial through its
Chebyshev points, which is integrated exactly; a panel is halved until the polynomial's
last terms vanish. No retardation and no threshold unless the law has one.

References
----------
.. [1] Paris' law integrated; elementary. Clenshaw and Curtis: integration of a
   Chebyshev series.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Callable, Iterator

import numpy as np
from scipy.optimize import brentq

from repairs.analysis.errors import AnalysisError, OutOfRangeError, within
from repairs.analysis.growth.laws import (
    Floats,
    GrowthLaw,
    PowerLaw,
    StressCycle,
    delta_k,
    refuse_short,
)

SEPARABLE = "N = ∫ da / (da/dN)"
BACKWARDS = "Growth is asked from {low:.4g} to {high:.4g} mm; the end must be larger."
NO_GROWTH = (
    "The law gives no growth at {length:.4g} mm: its threshold is not exceeded there, "
    "so that no life follows."
)
CURVE_POINTS = 60

Factor = Callable[[float], float]
"""F(a): dimensionless factor at a crack length [mm]."""

NODES = 12
WIDEST, NARROWEST = 0.7, 1e-4
"""Panel width in ln a: at the start, and where halving stops (a kink of the factor)."""
SMALL = 1e-9
"""Last terms of a panel's series over its mean, below which it is not halved."""


def _series() -> tuple[Floats, Floats, Floats]:
    """Return the points, values to coefficients, and coefficients to their integral."""
    order = np.arange(NODES)
    angles = math.pi * (order + 0.5) / NODES
    fit = 2 / NODES * np.cos(np.outer(order, angles))
    fit[0] /= 2
    integral = np.zeros((NODES + 1, NODES))
    for k in range(1, NODES + 1):
        integral[k, k - 1] = (1 if k == 1 else 0.5) / k
        if k + 1 < NODES:
            integral[k, k + 1] = -0.5 / k
    integral[0] = -((-1.0) ** np.arange(1, NODES + 1)) @ integral[1:]
    return np.cos(angles), fit, integral


POINTS, FIT, INTEGRAL = _series()


def _sum(coefficients: Floats, where: Floats) -> Floats:
    """Return the Chebyshev series, one column of coefficients a point in [-1, 1]."""
    later, latest = np.zeros_like(where), np.zeros_like(where)
    for row in coefficients[:0:-1]:
        later, latest = row + 2 * where * later - latest, later
    total: Floats = coefficients[0] + where * later - latest
    return total


class GrowthTable:
    """Cycles over crack length for one law, factor and cycle, from `low` to `high` mm.

    Parameters
    ----------
    law
        Growth law.
    factor
        F(a) [-], asked inside (low, high) only.
    cycle
        Stress cycle [MPa], or the equivalent cycle of a flight.
    low, high
        Crack lengths the table spans [mm].
    kinks
        Lengths where the factor's slope or curvature jumps [mm]: panels begin there.

    Notes
    -----
    Relative error below 1e-8 for a factor that is smooth; a kink costs panels.
    """

    def __init__(
        self,
        law: GrowthLaw,
        factor: Factor,
        cycle: StressCycle,
        low: float,
        high: float,
        kinks: tuple[float, ...] = (),
    ) -> None:
        if not 0 < low <= high < math.inf:
            raise AnalysisError(BACKWARDS.format(low=low, high=high))
        refuse_short(law, low)
        self.low, self.high = low, high
        self._law, self._factor, self._cycle = law, factor, cycle
        self._kinks = [math.log(k) for k in kinks if low < k < high]
        panels = list(self._panels(math.log(low), math.log(high)))
        self._edges = np.array([begin for begin, _, _ in panels] + [math.log(high)])
        self._half = np.diff(self._edges) / 2
        self._slowness = np.array([series for _, _, series in panels]).T
        self._integral = INTEGRAL @ self._slowness * self._half
        self._before = np.concatenate(([0.0], np.cumsum(self._integral.sum(axis=0))))

    def _panels(
        self, begin: float, end: float
    ) -> Iterator[tuple[float, float, Floats]]:
        """Give begin, end and series of each panel, halved until it is smooth."""
        count = max(1, math.ceil((end - begin) / WIDEST))
        edges = sorted({*np.linspace(begin, end, count + 1), *self._kinks})
        waiting = [(float(a), float(b)) for a, b in itertools.pairwise(edges)]
        while waiting:
            left, right = waiting.pop(0)
            middle = (left + right) / 2
            series = FIT @ self._slownesses(middle + (right - left) / 2 * POINTS)
            smooth = abs(series[-2]) + abs(series[-1]) <= SMALL * abs(series[0])
            if smooth or right - left < NARROWEST:
                yield left, right, series
            else:
                waiting[:0] = [(left, middle), (middle, right)]

    def _slownesses(self, logs: Floats) -> Floats:
        """Return dN/d(ln a) at logarithms of lengths inside the table."""
        lengths = np.exp(logs)
        factors = np.array([self._factor(float(a)) for a in lengths])
        ranges = factors * self._cycle.span * np.sqrt(np.pi * lengths)
        rates = self._law.rates(ranges, np.full(ranges.shape, self._cycle.ratio))
        if not np.all(rates > 0):
            raise OutOfRangeError(NO_GROWTH.format(length=lengths[np.argmin(rates)]))
        slow: Floats = lengths / rates
        return slow

    @property
    def total(self) -> float:
        """Cycles from the lowest to the highest length."""
        return float(self._before[-1])

    def cycles_from_low(self, lengths: Floats) -> Floats:
        """Return cycles from `low` to each length [mm]."""
        if lengths.size:
            for end in (lengths.min(), lengths.max()):
                within("Crack length, mm", float(end), self.low, self.high, "the table")
        logs = np.log(lengths)
        panel = np.clip(
            np.searchsorted(self._edges, logs, side="right") - 1, 0, len(self._half) - 1
        )
        where = np.clip((logs - self._edges[panel]) / self._half[panel] - 1, -1, 1)
        inside: Floats = self._before[panel] + _sum(self._integral[:, panel], where)
        return inside

    def lives(self, starts: Floats, ends: Floats) -> Floats:
        """Return cycles from each start to its end [mm], many at once."""
        if np.any(starts > ends):
            worst = int(np.argmax(starts - ends))
            raise AnalysisError(
                BACKWARDS.format(
                    low=np.ravel(starts)[worst], high=np.ravel(ends)[worst]
                )
            )
        found: Floats = self.cycles_from_low(ends) - self.cycles_from_low(starts)
        return found

    def life(self, start: float, end: float) -> float:
        """Return cycles from one length to another [mm]."""
        both = self.cycles_from_low(np.array([start, end]))
        if start > end:
            raise AnalysisError(BACKWARDS.format(low=start, high=end))
        return float(both[1] - both[0])

    def lengths_after(self, starts: Floats, cycles: Floats) -> Floats:
        """Return the length of each crack after its cycles [mm].

        A crack that would be past `high` by then is refused.
        """
        wanted = self.cycles_from_low(starts) + cycles
        within("Cycles", float(cycles.min(initial=0)), 0, math.inf, "growth")
        most = float(wanted.max(initial=0))
        within("Cycles of the growth table", most, 0, self.total, "the table's end")
        panel = np.clip(
            np.searchsorted(self._before, wanted, side="right") - 1,
            0,
            len(self._half) - 1,
        )
        integral, slow = self._integral[:, panel], self._slowness[:, panel]
        target = wanted - self._before[panel]
        low, high = np.full(target.shape, -1.0), np.ones(target.shape)
        where = -1 + 2 * target / (self._before[panel + 1] - self._before[panel])
        for _ in range(60):
            over = _sum(integral, where) - target
            low, high = np.where(over < 0, where, low), np.where(over < 0, high, where)
            newton = where - over / (_sum(slow, where) * self._half[panel])
            inside = (newton >= low) & (newton <= high)
            following = np.where(inside, newton, (low + high) / 2)
            moved = float(np.abs(following - where).max(initial=0))
            where = following
            if moved < 1e-14:
                break
        lengths: Floats = np.exp(self._edges[panel] + (where + 1) * self._half[panel])
        return lengths


def paris_cycles(
    law: PowerLaw, factor: float, cycle: StressCycle, start: float, end: float
) -> float:
    r"""Return the closed-form life for a constant factor F (used as a check).

    .. math:: N = \frac{a_1^{1-m/2} - a_0^{1-m/2}}{C(F\,\Delta S\sqrt\pi)^m(1-m/2)}

    Parameters
    ----------
    law
        Growth law, a power of the range.
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
    law: GrowthLaw, factor: Factor, cycle: StressCycle, start: float, end: float
) -> float:
    """Return cycles from one crack length to another.

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
    Range 0 < start <= end, inside the range of `factor`. As `GrowthTable`, which
    serves many lives of one crack.

    References
    ----------
    .. [1] See the module.
    """
    if start == end > 0:
        return 0.0
    return GrowthTable(law, factor, cycle, start, end).total


def growth_history(
    law: GrowthLaw, factor: Factor, cycle: StressCycle, start: float, end: float
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
    return history_of(GrowthTable(law, factor, cycle, start, end), start, end)


def history_of(
    table: GrowthTable, start: float, end: float
) -> tuple[tuple[float, float], ...]:
    """Return (cycles from `start`, length) of a table, equally spaced in ln a."""
    lengths = np.geomspace(start, end, CURVE_POINTS)
    lengths[0], lengths[-1] = start, end  # geomspace rounds its ends
    cycles = table.cycles_from_low(lengths)
    points = zip((cycles - cycles[0]).tolist(), lengths.tolist(), strict=True)
    return tuple(points)


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
