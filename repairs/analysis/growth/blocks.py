"""Blocks of cycles that a crack grows under, and the one cycle that stands for them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.growth.closure import ElberLaw, NewmanLaw
from repairs.analysis.growth.laws import (
    VARIABLE_AMPLITUDE,
    Floats,
    FormanLaw,
    GrowthLaw,
    StressCycle,
    WalkerLaw,
    refuse_threshold,
)
from repairs.analysis.types import Grade, GrossStress, Reference

Whole = NDArray[np.int64]

NO_CYCLES = "All points of the sequence are the same stress: it has no cycle."
NO_FLIGHTS = "A block has {read} flights and {cycles} cycles; at least one is expected."
NOT_CYCLES = "A block's cycles must be finite, with R below 1; cycle {number} is not."
NO_TENSION = "No cycle of the block pulls: a crack does not grow under it."
NOT_A_POWER = (
    "Forman's law depends on the level of K: no one cycle stands for a flight. Grow "
    "the crack cycle by cycle."
)
EQUIVALENT = Reference(
    "Equivalent cycle of a repeated block: the sum of its growth under a power law; "
    "exact while the crack grows little in a block",
    Grade.DERIVED,
)
RISES = (
    "Each rise from a valley to the next peak is one cycle, of the flight its valley "
    "is in; points between are passed over, and the last valley of a block rises to "
    "its first peak. Larger ranges that counting pairs are missing: the life comes out "
    "longer."
)
CLOSED = (
    "Cycles are those that rainflow counting closes over the whole block, each where "
    "it closes."
)


@dataclass(frozen=True, eq=False)
class CycleBlock:
    """Cycles in the order flown, repeated block after block.

    Parameters
    ----------
    maximum
        Largest stress of each cycle, gross [MPa].
    ratio
        Stress ratio R of each [-].
    flights
        Flights in the block.
    ends
        Cycles done at the end of each flight; None = not known, shared out evenly.
    counting
        How the cycles were made from stresses flown, in words.
    """

    maximum: Floats
    ratio: Floats
    flights: int
    ends: Whole | None = None
    counting: str = ""

    def __post_init__(self) -> None:
        if self.flights < 1 or not self.maximum.size:
            raise InputError(
                NO_FLIGHTS.format(read=self.flights, cycles=self.maximum.size)
            )
        good = np.isfinite(self.maximum) & np.isfinite(self.ratio) & (self.ratio < 1)
        if not good.all():
            raise InputError(NOT_CYCLES.format(number=int(np.argmin(good)) + 1))
        if not (self.maximum > 0).any():
            raise InputError(NO_TENSION)

    @classmethod
    def from_turning_points(
        cls, points: Floats, flights: int, starts: Whole | None = None
    ) -> CycleBlock:
        """Make a repeated block from stresses in the order flown [MPa]; see `RISES`.

        `starts` is the index of each flight's first point. A cycle whose peak does not
        pull is kept and does no growth.
        """
        found = np.flatnonzero(points != np.roll(points, 1))
        turned = points[found]
        turns = (np.roll(turned, -1) - turned) * (turned - np.roll(turned, 1)) < 0
        found, turned = found[turns], turned[turns]
        if not found.size:
            raise InputError(NO_CYCLES)
        tops = np.roll(turned, -1)
        rising = tops > turned
        valleys, tops = turned[rising], tops[rising]
        ends = None
        if starts is not None:
            following = np.append(starts[1:], len(points))
            ends = np.searchsorted(found[rising], following)
        return cls(*_pulling(tops, valleys), flights, ends, RISES)

    @classmethod
    def from_counted(cls, maxima: Floats, minima: Floats, flights: int) -> CycleBlock:
        """Make a repeated block from counted cycles in the order they close [MPa].

        See `CLOSED`. As long as the per-flight form of the same count.
        """
        return cls(*_pulling(maxima, minima), flights, None, CLOSED)

    @property
    def cycles(self) -> int:
        """Cycles in the block."""
        return len(self.maximum)

    def whole_flights(self, cycles: int) -> int:
        """Return the whole flights done after a number of cycles, rounded down."""
        blocks, rest = divmod(cycles, self.cycles)
        if self.ends is None:
            return blocks * self.flights + rest * self.flights // self.cycles
        done = int(np.searchsorted(self.ends, rest, side="right")) if rest else 0
        return blocks * self.flights + done


def _pulling(tops: Floats, valleys: Floats) -> tuple[Floats, Floats]:
    """Return maximum and ratio of cycles; one that does not pull as 0 and 0."""
    ratio = np.divide(valleys, tops, out=np.zeros_like(tops), where=tops > 0)
    return np.where(tops > 0, tops, 0.0), ratio


def driven_ranges(law: GrowthLaw, maximum: Floats, ratio: Floats) -> Floats:
    """Return the range of each cycle that counts in a law, u(R) (Smax - Smin) [MPa].

    A cycle that does not pull counts nothing. Under the laws of Walker and Forman one
    that goes below zero counts from zero, however far below it goes.
    """
    refuse_threshold(law, VARIABLE_AMPLITUDE)
    pulling = maximum > 0
    if isinstance(law, WalkerLaw | FormanLaw):
        ratio = np.maximum(ratio, 0)
    share = np.ones_like(ratio)
    if isinstance(law, WalkerLaw | ElberLaw | NewmanLaw):
        share[pulling] = law.shares(ratio[pulling])
    found: Floats = np.where(pulling, maximum * (1 - ratio) * share, 0.0)
    return found


@dataclass(frozen=True, eq=False)
class CycleTable:
    """The different cycles of a block, how often each comes, and its flights."""

    maximum: Floats
    ratio: Floats
    counts: Floats
    flights: int

    @classmethod
    def of(cls, block: CycleBlock) -> CycleTable:
        """Count a block's cycles; done once a spectrum."""
        pairs = block.maximum + 1j * block.ratio  # sorts faster than rows do
        different, counts = np.unique(pairs, return_counts=True)
        return cls(different.real, different.imag, counts.astype(float), block.flights)


def equivalent_cycle(law: GrowthLaw, table: CycleTable) -> StressCycle:
    r"""Return the cycle from zero that grows a crack as much as a mean flight.

    .. math:: S_{eq} = \frac{1}{u(0)}
              \Bigl[\frac1{n_f}\sum_i n_i(u_i\,\Delta S_i)^m\Bigr]^{1/m}

    Growth under it counts flights, not cycles.

    Parameters
    ----------
    law
        A law whose rate is a power of the range times a function of R.
    table
        Cycles of a block and how often each comes [MPa].

    Returns
    -------
    StressCycle
        Maximum S_eq [MPa], R = 0.

    Notes
    -----
    Range: power laws without threshold, no retardation, a life of several blocks. The
    order of cycles has no part in it.

    References
    ----------
    .. [1] See `EQUIVALENT`.
    """
    driven = driven_ranges(law, table.maximum, table.ratio)
    if not isinstance(law, WalkerLaw | ElberLaw | NewmanLaw):
        raise OutOfRangeError(NOT_A_POWER)
    mean = float(table.counts @ driven**law.exponent) / table.flights
    at_zero = float(law.shares(np.zeros(1))[0])
    return StressCycle(GrossStress(mean ** (1 / law.exponent) / at_zero), 0.0)
