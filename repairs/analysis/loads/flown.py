"""What one flight does to a section: one cycle, or a recorded spectrum's cycles."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np

from repairs.analysis.growth.blocks import CycleBlock, CycleTable, equivalent_cycle
from repairs.analysis.growth.laws import PowerLaw, StressCycle
from repairs.analysis.note import Note
from repairs.analysis.spectra.counting import treated
from repairs.analysis.spectra.cycles import PressureCycle
from repairs.analysis.spectra.recorded import RecordedSpectrum
from repairs.analysis.stress_life.damage_sum import NetCycles
from repairs.analysis.types import GrossStress

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
        Stress here over the spectrum's [-].
    """

    cycle: StressCycle
    spectrum: RecordedSpectrum | None = None
    factor: float = 1.0

    @classmethod
    def of(cls, spectrum: RecordedSpectrum) -> Flown:
        """Return the flight of a spectrum that states stress."""
        flight = spectrum.counted
        top = float(flight.maxima.max())
        low = float((flight.maxima * flight.ratios).min())
        return cls(StressCycle(GrossStress(top), low / top), spectrum)

    def times(self, factor: float) -> Flown:
        """Return the same flight with every stress times a factor [-]."""
        top = GrossStress(self.cycle.maximum * factor)
        cycle = StressCycle(top, self.cycle.ratio)
        return replace(self, cycle=cycle, factor=self.factor * factor)

    def growth_cycle(self, law: PowerLaw) -> StressCycle:
        """Return the cycle that grows a crack as much as a mean flight [MPa]."""
        if self.spectrum is None:
            return self.cycle
        flight = self.spectrum.counted
        maxima = flight.maxima * self.factor
        table = CycleTable(maxima, flight.ratios, flight.per_flight, 1)
        return equivalent_cycle(law, table)

    @property
    def net_cycles(self) -> NetCycles | None:
        """Counted cycles as a damage sum takes them; None for a constant cycle."""
        if self.spectrum is None:
            return None
        flight = self.spectrum.counted
        return NetCycles(flight.maxima * self.factor, flight.ratios, flight.per_flight)

    def block(self) -> CycleBlock | None:
        """Return the treated sequence in the order flown; None for a constant cycle."""
        stated = self.spectrum.spectrum if self.spectrum else None
        if stated is None or isinstance(stated, PressureCycle):
            return None
        flown = treated(stated.sequence(), stated.treatment)
        points = np.asarray(flown.stresses) * self.factor
        return CycleBlock.from_turning_points(points, flown.flights, flown.starts)


def write_flight(note: Note, spectrum: RecordedSpectrum) -> Flown:
    """Write a spectrum that states stress down and return its flight."""
    spectrum.write(note)
    flown, flight = Flown.of(spectrum), spectrum.counted
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
