"""Every kind of spectrum from its plain data, as a database row keeps it."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from repairs.analysis.errors import InputError
from repairs.analysis.spectra.cycles import ConstantCycle, PressureCycle
from repairs.analysis.spectra.exceedance import ExceedanceTable
from repairs.analysis.spectra.per_flight import FlightCycles, cycles_of
from repairs.analysis.spectra.plain import Kind
from repairs.analysis.spectra.sequence import UserSequence
from repairs.analysis.spectra.wing_sequence import WingSequence

UNKNOWN_KIND = "A spectrum is of kind {read!r}. Use one of: {known}."

StressSpectrum = ConstantCycle | WingSequence | UserSequence | ExceedanceTable
"""Kinds that state stress themselves."""
Spectrum = StressSpectrum | PressureCycle


def spectrum_from(data: Mapping[str, Any]) -> Spectrum:
    """Return the spectrum that plain data states, every choice in it.

    Without a kind it is a constant cycle: so rows of the first schema read.

    Raises
    ------
    InputError
        A kind or key is unknown, missing or not what its name promises.
    """
    match data.get("kind", Kind.CYCLE):
        case Kind.CYCLE:
            return ConstantCycle.from_data(data)
        case Kind.PRESSURE:
            return PressureCycle.from_data(data)
        case Kind.WING_SEQUENCE:
            return WingSequence.from_data(data)
        case Kind.SEQUENCE:
            return UserSequence.from_data(data)
        case Kind.EXCEEDANCE:
            return ExceedanceTable.from_data(data)
        case read:
            raise InputError(UNKNOWN_KIND.format(read=read, known=", ".join(Kind)))


def flight_of(spectrum: StressSpectrum) -> FlightCycles:
    """Return the cycles of a flight of a spectrum, treated and counted as it states.

    A block of the wing sequence takes tens of milliseconds: done once a spectrum.
    """
    return cycles_of(spectrum.sequence(), spectrum.treatment)
