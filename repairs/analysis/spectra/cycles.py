"""One cycle per flight: of constant stress, or of the cabin's pressure.

A cycle is stated by its largest stress and ratio, or by its range and ratio; which of
the two is stored, because a change of R then moves the life in opposite directions.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from enum import StrEnum
from typing import Any, Self

import numpy as np

from repairs.analysis.errors import InputError, within
from repairs.analysis.spectra.plain import NO_KEY, Content, Kind
from repairs.analysis.spectra.sequence import LoadSequence, Residue, Treatment
from repairs.analysis.types import GrossStress

ONE_STRESS = (
    "A cycle states either cycle_max_mpa or cycle_range_mpa beside cycle_ratio; "
    "{read} given."
)


class StatedBy(StrEnum):
    """Which stress of a cycle is given beside its ratio."""

    MAXIMUM = "cycle_max_mpa"
    RANGE = "cycle_range_mpa"


@dataclass(frozen=True, slots=True)
class ConstantCycle:
    """One cycle per flight, by its largest stress or its range, and R = Smin/Smax.

    Parameters
    ----------
    stated_by
        Which stress is given.
    stress
        That stress [MPa].
    ratio
        R [-].
    """

    stated_by: StatedBy
    stress: float
    ratio: float

    def __post_init__(self) -> None:
        within("Stress of the cycle, MPa", self.stress, 1e-9, 1e4, "a tension cycle")
        within("Stress ratio R", self.ratio, -10, 0.999, "a tension cycle")

    @property
    def maximum(self) -> GrossStress:
        """Largest stress [MPa]."""
        if self.stated_by is StatedBy.MAXIMUM:
            return GrossStress(self.stress)
        return GrossStress(self.stress / (1 - self.ratio))

    @property
    def treatment(self) -> Treatment:
        """Nothing is left to choose: the cycle comes again and is whole."""
        return Treatment(Residue.REPEATING)

    @property
    def warnings(self) -> tuple[str, ...]:
        """Nothing was chosen that must be said."""
        return ()

    def sequence(self) -> LoadSequence:
        """Return the cycle as a block of one flight."""
        points = np.array([self.maximum * self.ratio, self.maximum])
        return LoadSequence(points, 1, repeats=True)

    def as_data(self) -> dict[str, object]:
        """Return the cycle as plain data."""
        return {
            "kind": str(Kind.CYCLE),
            str(self.stated_by): self.stress,
            "cycle_ratio": self.ratio,
        }

    @classmethod
    def from_data(cls, data: Mapping[str, Any]) -> Self:
        """Return the cycle that plain data states."""
        stated = [by for by in StatedBy if by in data]
        if len(stated) != 1:
            read = " and ".join(stated) or "neither"
            raise InputError(ONE_STRESS.format(read=read))
        content = Content(Kind.CYCLE, data)
        made = cls(stated[0], content.number(stated[0]), content.number("cycle_ratio"))
        content.done()
        return made


@dataclass(frozen=True, slots=True)
class PressureCycle:
    """One pressurisation per flight, by shares of the normal differential.

    Parameters
    ----------
    share
        Differential the flight really reaches, over the normal one [-].
    ground_share
        Differential on the ground, over the normal one; below zero if outside
        pressure is the higher [-].
    ground
        What the minimum on the ground is, in words.
    """

    share: float
    ground_share: float
    ground: str

    def __post_init__(self) -> None:
        within(
            "Share of the normal differential",
            self.share,
            0.01,
            1,
            "a flight within normal operation",
            "Record a flight above the normal differential as an occurrence.",
        )
        within(
            "Share of the normal differential on the ground",
            self.ground_share,
            -0.1 * self.share,
            0.9 * self.share,
            "the minimum of the cycle",
        )
        if not self.ground.strip():
            raise InputError(NO_KEY.format(kind=Kind.PRESSURE, key="ground"))

    def cycle(self, stress_at_normal: GrossStress) -> ConstantCycle:
        """Return the cycle where the normal differential gives this stress [MPa]."""
        return ConstantCycle(
            StatedBy.MAXIMUM,
            self.share * stress_at_normal,
            self.ground_share / self.share,
        )

    def as_data(self) -> dict[str, object]:
        """Return the cycle as plain data."""
        return {
            "kind": str(Kind.PRESSURE),
            "share_of_normal": self.share,
            "ground_share_of_normal": self.ground_share,
            "ground": self.ground,
        }

    @classmethod
    def from_data(cls, data: Mapping[str, Any]) -> Self:
        """Return the cycle that plain data states."""
        content = Content(Kind.PRESSURE, data)
        made = cls(
            content.number("share_of_normal"),
            content.number("ground_share_of_normal"),
            content.text("ground"),
        )
        content.done()
        return made
