"""Models of retardation after overloads, with the evidence they rest on.

Off unless asked for, and never in place of the life without it. The formulas stand in
`loop`, which runs them.
"""

from __future__ import annotations

from dataclasses import dataclass

from repairs.analysis.errors import within
from repairs.analysis.growth import loop
from repairs.analysis.growth.laws import Floats
from repairs.analysis.growth.plastic_zone import SHARES, StressState
from repairs.analysis.types import ROOT_1000, Reference

WHEELER_CAUTION = (
    "Wheeler's exponent depends on material, crack size, level of K and spectrum. It "
    "is not for service life from few data, nor for a spectrum unlike the one it was "
    "fitted on."
)
WILLENBORG_CAUTION = (
    "The generalised Willenborg model rests on a shut-off ratio and a threshold fitted "
    "elsewhere; compressive loads, which shorten life again, are not in it."
)
BESIDE = "The retarded life stands beside the life without retardation, never for it."


@dataclass(frozen=True, slots=True)
class Wheeler:
    """Wheeler's model with the evidence its exponent was fitted on.

    Parameters
    ----------
    exponent
        w [-].
    yield_stress
        Tension yield strength [MPa].
    state
        Stress state of the plastic zone.
    evidence
        Tests that the exponent was fitted on: material, spectrum, document.
    """

    exponent: float
    yield_stress: float
    state: StressState
    evidence: Reference

    def __post_init__(self) -> None:
        within("Wheeler's exponent", self.exponent, 0, 5, "fits of the model")
        within("Yield strength, MPa", self.yield_stress, 1e-9, 1e5, "a metal")

    @property
    def cautions(self) -> tuple[str, ...]:
        """What is said with every life of this model."""
        return WHEELER_CAUTION, BESIDE

    @property
    def reference(self) -> Reference:
        """Source of the model."""
        return loop.WHEELER

    @property
    def in_words(self) -> str:
        """The model and its constants."""
        return f"Wheeler, w {self.exponent:g}, {self.state}"

    def fill(self, constants: Floats) -> int:
        """Write the model's constants for the loop; return its number there."""
        constants[loop.ZONE] = SHARES[self.state] / self.yield_stress**2
        constants[loop.EXPONENT] = self.exponent
        return loop.BY_WHEELER


@dataclass(frozen=True, slots=True)
class Willenborg:
    """Generalised Willenborg model.

    Parameters
    ----------
    threshold
        Kmax at threshold for R = 0 [MPa*sqrt(mm)].
    shut_off
        Overload ratio that stops the crack [-], above 1.
    yield_stress
        Tension yield strength [MPa].
    state
        Stress state of the plastic zone.
    evidence
        Source of threshold and shut-off ratio.
    """

    threshold: float
    shut_off: float
    yield_stress: float
    state: StressState
    evidence: Reference

    def __post_init__(self) -> None:
        within("Shut-off overload ratio", self.shut_off, 1.001, 10, "the model")
        within("Threshold, MPa√mm", self.threshold, 0, 1e6, "the model")
        within("Yield strength, MPa", self.yield_stress, 1e-9, 1e5, "a metal")

    @property
    def cautions(self) -> tuple[str, ...]:
        """What is said with every life of this model."""
        return WILLENBORG_CAUTION, BESIDE

    @property
    def reference(self) -> Reference:
        """Source of the model."""
        return loop.WILLENBORG

    @property
    def in_words(self) -> str:
        """The model and its constants."""
        threshold = self.threshold / ROOT_1000
        return (
            f"generalised Willenborg, K_th {threshold:g} MPa√m, shut-off ratio "
            f"{self.shut_off:g}, {self.state}"
        )

    def fill(self, constants: Floats) -> int:
        """Write the model's constants for the loop; return its number there."""
        constants[loop.ZONE] = SHARES[self.state] / self.yield_stress**2
        constants[loop.THRESHOLD] = self.threshold
        constants[loop.SHUT_OFF] = self.shut_off
        return loop.BY_WILLENBORG


Retardation = Wheeler | Willenborg
