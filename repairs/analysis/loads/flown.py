"""What one flight does to a section: one cycle, or a recorded spectrum's cycles."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

from repairs.analysis.growth.blocks import CycleBlock, CycleTable, equivalent_cycle
from repairs.analysis.growth.laws import FormanLaw, GrowthLaw, StressCycle
from repairs.analysis.growth.per_flight import UNIT_CYCLE, FlightLaw
from repairs.analysis.note import Note
from repairs.analysis.spectra.counting import treated
from repairs.analysis.spectra.cycles import PressureCycle
from repairs.analysis.spectra.recorded import RecordedSpectrum
from repairs.analysis.stress_life.damage_sum import NetCycles
from repairs.analysis.types import GrossStress

Floats = NDArray[np.float64]
COUNTED = "cycles per flight, rainflow-counted (E1049), residue: {residue}"
TOP = "largest stress of a flight"
REACH = "smallest {low:.2f} MPa"


@dataclass(frozen=True, slots=True)
class Flown:
    """One flight as stress on a section.

    Parameters
    ----------
    cycle
        From the flight's smallest to its largest stress [MPa]; all there is without a
        spectrum.
    spectrum
        Recorded, stating stress; None = one constant cycle a flight.
    factor
        Stress here over the spectrum's, pressure included [-].
    pressure
        What pressure adds to the spectrum's stress in flight [MPa]. On the ground it
        adds nothing: at and below the smallest stress that every flight goes down to.
    """

    cycle: StressCycle
    spectrum: RecordedSpectrum | None = None
    factor: float = 1.0
    pressure: float = 0.0

    @classmethod
    def of(cls, spectrum: RecordedSpectrum, pressure: float = 0.0) -> Flown:
        """Return the flight of a spectrum that states stress, with pressure added."""
        flight = spectrum.counted
        top = float(flight.maxima.max()) + pressure
        low = float((flight.maxima * flight.ratios).min())
        cycle = StressCycle(GrossStress(top), low / top)
        return cls(cycle, spectrum, pressure=pressure)

    def times(self, factor: float) -> Flown:
        """Return the same flight with every stress times a factor [-]."""
        top = GrossStress(self.cycle.maximum * factor)
        cycle = StressCycle(top, self.cycle.ratio)
        return replace(self, cycle=cycle, factor=self.factor * factor)

    def growth_cycle(self, law: GrowthLaw) -> StressCycle:
        """Return the cycle that grows a crack as much as a mean flight [MPa]."""
        if self.spectrum is None:
            return self.cycle
        maxima, ratios, per_flight = self._counted(self.spectrum)
        return equivalent_cycle(law, CycleTable(maxima, ratios, per_flight, 1))

    def growth(self, law: GrowthLaw) -> tuple[GrowthLaw, StressCycle]:
        """Return the law and the cycle that give a crack's growth in a mean flight.

        For a power of the range the law itself and one equivalent cycle; for any other
        the sum over the flight's cycles.
        """
        if self.spectrum is None or not isinstance(law, FormanLaw):
            return law, self.growth_cycle(law)
        maxima, ratios, per_flight = self._counted(self.spectrum)
        table = CycleTable(maxima, ratios, per_flight, 1)
        return FlightLaw(law, table), UNIT_CYCLE

    @property
    def net_cycles(self) -> NetCycles | None:
        """Counted cycles as a damage sum takes them; None for a constant cycle."""
        if self.spectrum is None:
            return None
        return NetCycles(*self._counted(self.spectrum))

    def _counted(self, spectrum: RecordedSpectrum) -> tuple[Floats, Floats, Floats]:
        """Return largest stress, ratio and number per flight of each counted cycle."""
        flight = spectrum.counted
        if not self.pressure:
            return flight.maxima * self.factor, flight.ratios, flight.per_flight
        level = ground_level(spectrum)
        minima = flight.maxima * flight.ratios
        maxima = flight.maxima + self.pressure
        if level is not None:
            minima = np.where(minima > level, minima + self.pressure, minima)
        return maxima * self.factor, minima / maxima, flight.per_flight

    def block(self) -> CycleBlock | None:
        """Return the treated sequence in the order flown; None for a constant cycle."""
        stated = self.spectrum.spectrum if self.spectrum else None
        if stated is None or isinstance(stated, PressureCycle):
            return None
        flown = treated(stated.sequence(), stated.treatment)
        points = np.asarray(flown.stresses)
        if self.pressure:
            level = ground_level(self.spectrum) if self.spectrum else None
            if level is None:
                return None
            points = np.where(points > level, points + self.pressure, points)
        points = points * self.factor
        return CycleBlock.from_turning_points(points, flown.flights, flown.starts)


@lru_cache(maxsize=64)
def ground_level(spectrum: RecordedSpectrum) -> float | None:
    """Return the stress at or below which a flight may be on the ground [MPa].

    The highest of what its flights go down to; None where flights are not told apart.
    """
    stated = spectrum.spectrum
    if isinstance(stated, PressureCycle):
        return None
    sequence = stated.sequence()
    if sequence.starts is None:
        return None
    return float(np.minimum.reduceat(sequence.stresses, sequence.starts).max())


def write_flight(
    note: Note, spectrum: RecordedSpectrum, pressure: float = 0.0
) -> Flown:
    """Write a spectrum that states stress down and return its flight."""
    spectrum.write(note)
    flown, flight = Flown.of(spectrum, pressure), spectrum.counted
    note.step(
        "n",
        COUNTED.format(residue=spectrum.residue),
        f"{len(flight.maxima)} different",
        float(flight.per_flight.sum()) + flight.in_compression,
        "-",
    )
    low = flown.cycle.maximum * flown.cycle.ratio
    note.step("σ_max", TOP, REACH.format(low=low), flown.cycle.maximum, "MPa")
    return flown
