"""A spectrum as the record holds it: its name and source, its flight counted once.

Two records of equal content give the same flight, whatever they are called.
"""

from __future__ import annotations

import json
from dataclasses import dataclass, field
from functools import lru_cache

from repairs.analysis.note import Note
from repairs.analysis.spectra.content import Spectrum, flight_of, spectrum_from
from repairs.analysis.spectra.cycles import PressureCycle
from repairs.analysis.spectra.in_words import choices, kind_of
from repairs.analysis.spectra.per_flight import FlightCycles
from repairs.analysis.spectra.wing_sequence import TABLE, WingSequence
from repairs.analysis.types import Grade, Reference

WING, GROUND = "standard transport wing sequence", "ground over mean stress"
IN_WORDS = "spectrum {name}: {kind}"


@lru_cache(maxsize=64)
def spectrum_of(content: str) -> Spectrum:
    """Return the spectrum that a record's text states; equal texts are read once."""
    return spectrum_from(json.loads(content))


@lru_cache(maxsize=64)
def flight_counted(content: str) -> FlightCycles:
    """Return the flight of a record's text; equal texts are counted once."""
    spectrum = spectrum_of(content)
    assert not isinstance(spectrum, PressureCycle), "it states no stress"
    return flight_of(spectrum)


@dataclass(frozen=True, slots=True)
class RecordedSpectrum:
    """A spectrum with its name, source and digest, as an input of a calculation.

    Parameters
    ----------
    name, source
        Of the record.
    digest
        Of its content: what two spectra are compared by.
    spectrum
        What the content states.
    flight
        Its counted cycles per flight [MPa, -]; None for a pressure cycle, which
        states shares of a pressure.
    """

    name: str
    source: str
    digest: str
    spectrum: Spectrum = field(repr=False)
    flight: FlightCycles | None = field(compare=False, repr=False)

    @classmethod
    def read(
        cls, name: str, source: str, digest: str, content: str
    ) -> RecordedSpectrum:
        """Return the spectrum of a record's text."""
        spectrum = spectrum_of(content)
        pressure = isinstance(spectrum, PressureCycle)
        flight = None if pressure else flight_counted(content)
        return cls(name, source, digest, spectrum, flight)

    @property
    def reference(self) -> Reference:
        """Where the record is from."""
        return Reference(self.source, Grade.RECORDED)

    @property
    def grade(self) -> Grade:
        """The least known part of it: the standard wing sequence is from memory."""
        wing = isinstance(self.spectrum, WingSequence)
        return TABLE.grade if wing else Grade.RECORDED

    def as_data(self) -> dict[str, object]:
        """Return what is frozen with a calculation; the content by its digest."""
        return {
            "name": self.name,
            "source": self.source,
            "digest": self.digest,
            "grade": str(self.grade),
            "choices": [list(pair) for pair in choices(self.spectrum)],
        }

    def write(self, note: Note) -> None:
        """Write name, source and every choice down, with what must be said of them."""
        words = IN_WORDS.format(name=self.name, kind=kind_of(self.spectrum))
        chosen = "; ".join(
            f"{title} {value}" for title, value in choices(self.spectrum)
        )
        note.step("", words, chosen, None, "", self.reference)
        if isinstance(self.spectrum, WingSequence):
            note.step("", WING, "", None, "", TABLE)
            note.given("S_g/S_mf", GROUND, self.spectrum.ground_ratio)
        for warning in self.warnings:
            note.warn(warning)

    @property
    def warnings(self) -> tuple[str, ...]:
        """What must be said with every result of this spectrum."""
        if isinstance(self.spectrum, PressureCycle) or self.flight is None:
            return ()
        return (*self.spectrum.warnings, *self.flight.warnings)

    @property
    def residue(self) -> str:
        """How counting ended, in words."""
        if isinstance(self.spectrum, PressureCycle):
            return ""
        return str(self.spectrum.treatment.residue).replace("_", " ")

    @property
    def counted(self) -> FlightCycles:
        """The counted flight of a spectrum that states stress."""
        assert self.flight is not None, "a pressure cycle states no stress"
        return self.flight
