"""Flights whose gusts come in an order drawn from a stored seed.

The order is the same on every machine and with every version of the library: only the
raw 64-bit numbers of PCG64 are used, started by `SeedSequence`. Both are fixed by their
published definitions, which a library's shuffling is not.
"""

from __future__ import annotations

import numpy as np
from numpy.random import PCG64, SeedSequence

from repairs.analysis.errors import InputError
from repairs.analysis.spectra.sequence import Floats, Whole

WRONG_SEED = "The seed reads {read!r}; a whole number of at least 0 is expected."


class Keys:
    """One run of raw numbers; each order drawn goes on where the last ended."""

    def __init__(self, seed: object) -> None:
        if not isinstance(seed, int) or isinstance(seed, bool) or seed < 0:
            raise InputError(WRONG_SEED.format(read=seed))
        self._bits = PCG64(SeedSequence(seed))

    def order(self, group: Whole) -> Whole:
        """Return places that put each group's members in drawn order, groups in order.

        Each member takes one key; equal keys keep the order of the list.
        """
        order: Whole = np.lexsort((self._raw(len(group)), group))
        return order

    def below(self, count: int, limit: int) -> Whole:
        """Return whole numbers in [0, limit): the keys' upper 32 bits, scaled."""
        upper = self._raw(count) >> np.uint64(32)
        return ((upper * np.uint64(limit)) >> np.uint64(32)).astype(np.int64)

    def _raw(self, count: int) -> np.ndarray[tuple[int], np.dtype[np.uint64]]:
        return self._bits.random_raw(count)


def flown(
    gusts: Whole, upper: Floats, lower: Floats, ground: float, mean: float
) -> tuple[Floats, Whole]:
    """Return the turning points of flights and where each flight starts.

    Parameters
    ----------
    gusts
        Gust cycles in each flight, shape (flights,).
    upper, lower
        Stress of their halves in the order flown, shape (sum of gusts,) [MPa].
    ground, mean
        Stress on the ground, and in undisturbed flight before landing [MPa].

    Returns
    -------
    points
        Ground, then upper and lower half in turn, then mean, per flight [MPa].
    starts
        Place of each flight's ground stress, shape (flights,).
    """
    ends = np.cumsum(2 * gusts + 2)
    flight_of = np.repeat(np.arange(len(gusts)), gusts)
    place = 2 * (np.arange(len(upper)) + flight_of) + 1
    points = np.empty(ends[-1])
    points[ends - 1] = mean
    points[place] = upper
    points[place + 1] = lower
    starts: Whole = np.concatenate([[0], ends[:-1]])
    points[starts] = ground
    return points, starts
