"""What one flight does: the different cycles of a block, per flight.

Equal cycles are put together exactly, so a block of hundreds of thousands of cycles
becomes a few hundred entries for a damage sum or for growth without retardation.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from repairs.analysis.errors import InputError
from repairs.analysis.growth.blocks import CycleTable
from repairs.analysis.spectra.counting import CountedCycles, counted
from repairs.analysis.spectra.sequence import (
    Floats,
    LoadSequence,
    Treatment,
    flights_of,
)

NO_TENSION = (
    "No counted cycle has a largest stress above 0: there is no fatigue to compute."
)
NO_DAMAGE = (
    "{cycles:g} cycles of a flight stay in compression (largest stress not above 0) "
    "and are not counted as damage."
)


@dataclass(frozen=True, eq=False)
class FlightCycles:
    """Different cycles of a flight, each with how often it comes.

    Parameters
    ----------
    maxima, ratios
        Largest stress, above 0, and R = Smin/Smax, shape (n,) [MPa, -].
    per_flight
        How often each comes in a flight, on average of the block, shape (n,) [-].
    in_compression
        Cycles per flight whose largest stress is not above 0, left out above [-].
    """

    maxima: Floats
    ratios: Floats
    per_flight: Floats
    in_compression: float

    @property
    def warnings(self) -> tuple[str, ...]:
        """What must be said with every result of these cycles."""
        if not self.in_compression:
            return ()
        return (NO_DAMAGE.format(cycles=self.in_compression),)

    def growth_table(self) -> CycleTable:
        """Return the cycles of one flight as growth takes them."""
        return CycleTable(self.maxima, self.ratios, self.per_flight, 1)


def flight_cycles(cycles: CountedCycles, flights: int) -> FlightCycles:
    """Return counted cycles of a block as different cycles per flight.

    Parameters
    ----------
    cycles
        As counted over the block.
    flights
        Flights in the block [-].

    Returns
    -------
    FlightCycles
        Sorted by largest, then by smallest stress.

    Notes
    -----
    Range: at least one cycle that reaches into tension.
    """
    tension = cycles.maxima > 0
    if not tension.any():
        raise InputError(NO_TENSION)
    block = flights_of(flights)
    maxima, minima = cycles.maxima[tension], cycles.minima[tension]
    order = np.lexsort((minima, maxima))
    maxima, minima = maxima[order], minima[order]
    new = np.ones(len(order), dtype=bool)
    new[1:] = (np.diff(maxima) != 0) | (np.diff(minima) != 0)
    sums = np.add.reduceat(cycles.counts[tension][order], np.flatnonzero(new))
    return FlightCycles(
        maxima[new],
        minima[new] / maxima[new],
        sums / block,
        float(cycles.counts[~tension].sum()) / block,
    )


def cycles_of(sequence: LoadSequence, treatment: Treatment) -> FlightCycles:
    """Treat, count and reduce a sequence to the cycles of a flight."""
    return flight_cycles(counted(sequence, treatment), sequence.flights)
