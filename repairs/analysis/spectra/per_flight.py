r"""What one flight does: counted cycles per flight, and their equivalents.

Equal cycles are put together exactly, so a block of hundreds of thousands becomes a few
hundred entries. The equivalent of a growth law is the stress of one cycle per flight
from zero that grows a crack as much,

.. math::
    S_{eq} = \Big[\sum n_i \big(S_{max,i}(1-R_i)^{\gamma}\big)^m\Big]^{1/m}

with :math:`S_{max,i}` alone for R < 0: compression does not grow the crack.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from repairs.analysis.errors import InputError
from repairs.analysis.growth.laws import StressCycle, WalkerLaw
from repairs.analysis.spectra.counting import CountedCycles, counted
from repairs.analysis.spectra.sequence import (
    Floats,
    LoadSequence,
    Treatment,
    flights_of,
)
from repairs.analysis.types import GrossStress

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


def growth_stresses(flight: FlightCycles, gamma: float) -> Floats:
    r"""Return what each cycle puts into Walker's law instead of its range.

    .. math:: S_{max}(1-R)^\gamma \text{ for } R \ge 0,\quad S_{max} \text{ for } R < 0

    Parameters
    ----------
    flight
        Cycles of a flight.
    gamma
        Walker's exponent [-].

    Returns
    -------
    ndarray
        Shape (n,) [MPa].

    Notes
    -----
    Range: that of the law's data. The rule for compression is that of
    `growth.laws.WalkerLaw`.

    References
    ----------
    .. [1] Walker's equation, as in Dowling, Mechanical Behavior of Materials.
    """
    power = np.where(flight.ratios >= 0, gamma, 0.0)
    stresses: Floats = flight.maxima * (1 - flight.ratios) ** power
    return stresses


def equivalent_cycle(flight: FlightCycles, law: WalkerLaw) -> StressCycle:
    r"""Return the cycle from zero, once a flight, that grows a crack as much.

    .. math:: S_{eq}^m = \sum n_i \big(S_{max,i}(1-R_i)^\gamma\big)^m

    Parameters
    ----------
    flight
        Cycles of a flight.
    law
        Growth law.

    Returns
    -------
    StressCycle
        R = 0; lives computed with it are flights.

    Notes
    -----
    Range: no retardation, no threshold, factors on K that do not depend on stress. The
    growth of a flight is spread over its cycles at one crack length, which is exact in
    the limit of small growth in a flight.

    References
    ----------
    .. [1] Walker's equation summed over a flight at constant crack length; exact.
    """
    total = float(
        flight.per_flight @ growth_stresses(flight, law.gamma) ** law.exponent
    )
    return StressCycle(GrossStress(total ** (1 / law.exponent)), 0.0)
