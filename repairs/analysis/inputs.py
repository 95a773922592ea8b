"""The inputs of one evaluation: numbers, words, curves, laws and policies by name.

There is no default of a load, a scatter factor or a detectable size.
"""

from __future__ import annotations

from collections.abc import Mapping

from repairs.analysis.errors import (
    UNKNOWN_INPUT,
    WRONG_KIND,
    WRONG_UNIT,
    InputError,
)
from repairs.analysis.growth.laws import RecordedLaw
from repairs.analysis.input_specs import SPECS, TOUGHNESS_UNIT, InputSpec
from repairs.analysis.inspection.known import Detection
from repairs.analysis.plain import as_plain
from repairs.analysis.scatter.factors import FatiguePolicy
from repairs.analysis.spectra.recorded import RecordedSpectrum
from repairs.analysis.stress_life.curves import StressLifeFamily
from repairs.analysis.surroundings import Surroundings
from repairs.analysis.types import MissingInput, Sourced, Stated

__all__ = ["SPECS", "TOUGHNESS_UNIT", "InputSpec", "Inputs", "Value"]

Value = (
    Sourced
    | Stated
    | StressLifeFamily
    | RecordedLaw
    | FatiguePolicy
    | Surroundings
    | Detection
    | RecordedSpectrum
)


class Inputs:
    """The inputs of one evaluation, each of a known name, kind and unit."""

    def __init__(self, values: Mapping[str, Value]) -> None:
        for name, value in values.items():
            if name not in SPECS:
                raise InputError(
                    UNKNOWN_INPUT.format(name=name, known=", ".join(SPECS))
                )
            spec = SPECS[name]
            if not isinstance(value, spec.kind):
                raise InputError(
                    WRONG_KIND.format(
                        name=name, read=value, expected=spec.kind.__name__
                    )
                )
            if isinstance(value, Sourced) and value.unit != spec.unit:
                raise InputError(
                    WRONG_UNIT.format(name=name, read=value.unit, expected=spec.unit)
                )
        self._values = dict(values)

    @property
    def values(self) -> dict[str, Value]:
        """The inputs given, by name, without defaults."""
        return dict(self._values)

    def __contains__(self, name: str) -> bool:
        return name in self._values or SPECS[name].default is not None

    def number(self, name: str) -> Sourced:
        """Return a number that is known to be there."""
        found = self.maybe(name)
        if found is None:
            raise InputError(f"Input {name} is needed and missing.")
        return found

    def maybe(self, name: str) -> Sourced | None:
        """Return a number, its published default, or None."""
        value = self._values.get(name, SPECS[name].default)
        return value if isinstance(value, Sourced) else None

    def word(self, name: str) -> str | None:
        """Return a stated word, or None."""
        value = self._values.get(name)
        return value.value if isinstance(value, Stated) else None

    def law(self, name: str = "growth_law") -> RecordedLaw | None:
        """Return a growth law, or None."""
        value = self._values.get(name)
        return value if isinstance(value, RecordedLaw) else None

    def family(self) -> StressLifeFamily | None:
        """Return the stress-life curves, or None."""
        value = self._values.get("stress_life")
        return value if isinstance(value, StressLifeFamily) else None

    def policy(self, name: str) -> FatiguePolicy | None:
        """Return a fatigue policy, or None."""
        value = self._values.get(name)
        return value if isinstance(value, FatiguePolicy) else None

    def detection(self) -> Detection | None:
        """Return the detection curve of the method chosen, or None."""
        value = self._values.get("detection")
        return value if isinstance(value, Detection) else None

    def spectrum(self) -> RecordedSpectrum | None:
        """Return the spectrum that the panel or the place is flown by, or None."""
        value = self._values.get("spectrum")
        return value if isinstance(value, RecordedSpectrum) else None

    def surroundings(self) -> Surroundings | None:
        """Return what lies round the location, or None."""
        value = self._values.get("surroundings")
        return value if isinstance(value, Surroundings) else None

    def missing(self, names: tuple[str, ...]) -> tuple[MissingInput, ...]:
        """Return those of the names that are not there, with where to enter them."""
        specs = (SPECS[name] for name in names if name not in self)
        return tuple(MissingInput(s.name, s.title, s.where) for s in specs)

    def impossible(self, names: tuple[str, ...]) -> tuple[InputSpec, ...]:
        """Return those of the names whose number cannot be true of anything."""
        found = ((SPECS[name], self.maybe(name)) for name in names)
        return tuple(
            spec
            for spec, given in found
            if given is not None and not spec.takes(given.value)
        )

    def as_data(self) -> dict[str, object]:
        """Return all inputs given as plain data, by name."""
        return {
            name: {"kind": type(value).__name__, **_plain(value)}
            for name, value in sorted(self._values.items())
        }


def _plain(value: Value) -> dict[str, object]:
    """A value's parts; a spectrum gives its digest and choices, not its cycles."""
    if isinstance(value, RecordedSpectrum):
        return value.as_data()
    plain: dict[str, object] = as_plain(value)
    return plain
