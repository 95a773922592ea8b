r"""Growth laws: how far a crack grows in one cycle of a range of K.

Paris, Walker, Forman, and a threshold as a stored option. Laws on an effective range
(closure) stand in `closure`. Every law gives one rate and arrays of rates; those whose
rate is a power of the range times a function of R are `PowerLaw` and may be summed over
a flight.

References
----------
.. [1] Paris and Erdogan; Walker; Forman, Kearney and Engle; all as in Dowling,
   Mechanical Behavior of Materials.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Protocol, runtime_checkable

import numpy as np
from numpy.typing import NDArray

from repairs.analysis.errors import AnalysisError, OutOfRangeError, within
from repairs.analysis.types import (
    INCH,
    KSI_ROOT_INCH,
    ROOT_1000,
    GrossStress,
    Reference,
)

Floats = NDArray[np.float64]
"""Array of numbers."""

FAST_FRACTURE = (
    "ΔK is {delta_k:.4g}, at or above (1 − R) Kc = {end:.4g} MPa√mm: Forman's law has "
    "no rate there. End the growth at a shorter crack."
)
SHORT_FOR_THRESHOLD = (
    "A threshold holds for long cracks only: growth starts at {start:.4g} mm, the law "
    "is recorded for cracks from {longer:.4g} mm. Leave the threshold out."
)
VARIABLE_AMPLITUDE = (
    "A threshold holds under constant amplitude only; here the cycles differ. Leave "
    "the threshold out."
)


@runtime_checkable
class GrowthLaw(Protocol):
    """Growth rate of a range of K and a stress ratio, with the constants' source."""

    @property
    def reference(self) -> Reference:
        """Source of the constants."""

    def rate(self, delta_k: float, ratio: float) -> float:
        """Return da/dN [mm/cycle] of the full range of K [MPa*sqrt(mm)] and R."""

    def rates(self, delta_k: Floats, ratio: Floats) -> Floats:
        """Return da/dN [mm/cycle] of arrays of ranges and stress ratios."""


class PowerLaw(GrowthLaw, Protocol):
    r"""A law :math:`da/dN = C\,[u(R)\,\Delta K]^m`."""

    @property
    def coefficient(self) -> float:
        """C [mm/cycle per (MPa*sqrt(mm))^m]."""

    @property
    def exponent(self) -> float:
        """m [-]."""

    def shares(self, ratio: Floats) -> Floats:
        """Return u(R), the share of the range that counts [-]."""


@dataclass(frozen=True, slots=True)
class WalkerLaw:
    r"""Growth law :math:`da/dN = C\,[\Delta K/(1-R)^{1-\gamma}]^m` for R >= 0.

    For R < 0 only the tension part counts: :math:`K_{max}` in place of the bracket.

    Parameters
    ----------
    coefficient
        C [mm/cycle per (MPa*sqrt(mm))^m].
    exponent
        m [-].
    gamma
        Walker's exponent [-]; 1 makes it Paris' law at any R >= 0.
    reference
        Source of the constants.
    remark
        Sheet, direction, range of the data, as recorded.
    """

    coefficient: float
    exponent: float
    gamma: float
    reference: Reference
    remark: str = ""

    @classmethod
    def from_mpa_root_metre(
        cls, c: float, m: float, gamma: float, reference: Reference, remark: str = ""
    ) -> WalkerLaw:
        """Make the law from C printed in mm/cycle per (MPa*sqrt(m))^m."""
        return cls(c / ROOT_1000**m, m, gamma, reference, remark)

    @classmethod
    def from_ksi_root_inch(
        cls, c: float, m: float, gamma: float, reference: Reference, remark: str = ""
    ) -> WalkerLaw:
        """Make the law from C printed in in/cycle per (ksi*sqrt(in))^m."""
        return cls(c * INCH / KSI_ROOT_INCH**m, m, gamma, reference, remark)

    def rate(self, delta_k: float, ratio: float) -> float:
        """Return da/dN.

        Parameters
        ----------
        delta_k
            Full range of K, compression included [MPa*sqrt(mm)].
        ratio
            Stress ratio R [-].

        Returns
        -------
        float
            Growth rate [mm/cycle].

        Notes
        -----
        Range R < 1. Data of the law end near R = 0.7 and near the toughness.
        """
        within("Stress ratio R", ratio, -10, 0.999, "Walker")
        within("Range of K, MPa√mm", delta_k, 0, 1e9, "a crack that is pulled")
        power = 1 - self.gamma if ratio >= 0 else 1.0
        return float(
            self.coefficient * (delta_k / (1 - ratio) ** power) ** self.exponent
        )

    def rates(self, delta_k: Floats, ratio: Floats) -> Floats:
        """Return da/dN of arrays, as `rate`."""
        driven: Floats = delta_k * self.shares(ratio)
        return self.coefficient * driven**self.exponent

    def shares(self, ratio: Floats) -> Floats:
        """Return 1/(1 - R)^(1 - gamma), and 1/(1 - R) for R < 0 [-]."""
        ratios_within(ratio, -10, 0.999, "Walker")
        power = np.where(ratio >= 0, 1 - self.gamma, 1.0)
        share: Floats = (1 - ratio) ** -power
        return share


@dataclass(frozen=True, slots=True)
class FormanLaw:
    r"""Growth law :math:`da/dN = C\,\Delta K^m/[(1-R)K_c - \Delta K]` for R >= 0.

    For R < 0 only the tension part counts: :math:`K_{max}` as range, at R = 0.

    Parameters
    ----------
    coefficient
        C [mm/cycle per (MPa*sqrt(mm))^(m-1)].
    exponent
        m [-].
    toughness
        Kc of the fit [MPa*sqrt(mm)]: a constant of this law for the sheet it was
        fitted on, not a fracture toughness.
    reference
        Source of the constants.
    remark
        Sheet, direction, range of the data, as recorded.
    """

    coefficient: float
    exponent: float
    toughness: float
    reference: Reference
    remark: str = ""

    @classmethod
    def from_mpa_root_metre(
        cls, c: float, m: float, kc: float, reference: Reference, remark: str = ""
    ) -> FormanLaw:
        """Make the law from C in mm/cycle per (MPa*sqrt(m))^(m-1), Kc in MPa*sqrt(m).

        One power of K less than in Paris' law, for the denominator has the unit of K.
        """
        return cls(c / ROOT_1000 ** (m - 1), m, kc * ROOT_1000, reference, remark)

    @classmethod
    def from_ksi_root_inch(
        cls, c: float, m: float, kc: float, reference: Reference, remark: str = ""
    ) -> FormanLaw:
        """Make the law from C in in/cycle per (ksi*sqrt(in))^(m-1), Kc ksi*sqrt(in)."""
        made = c * INCH / KSI_ROOT_INCH ** (m - 1)
        return cls(made, m, kc * KSI_ROOT_INCH, reference, remark)

    def rate(self, delta_k: float, ratio: float) -> float:
        """Return da/dN.

        Parameters
        ----------
        delta_k
            Full range of K, compression included [MPa*sqrt(mm)].
        ratio
            Stress ratio R [-].

        Returns
        -------
        float
            Growth rate [mm/cycle].

        Notes
        -----
        Range R < 1 and Kmax below the Kc of the fit, else refused.
        """
        return float(self.rates(np.array([delta_k]), np.array([ratio]))[0])

    def rates(self, delta_k: Floats, ratio: Floats) -> Floats:
        """Return da/dN of arrays, as `rate`."""
        ratios_within(ratio, -10, 0.999, "Forman")
        counted: Floats = delta_k / np.where(ratio < 0, 1 - ratio, 1.0)
        end: Floats = (1 - np.maximum(ratio, 0)) * self.toughness
        worst = int(np.argmax(counted / end))
        if not counted.flat[worst] < end.flat[worst]:
            raise OutOfRangeError(
                FAST_FRACTURE.format(delta_k=counted.flat[worst], end=end.flat[worst])
            )
        return self.coefficient * counted**self.exponent / (end - counted)


RecordedLaw = WalkerLaw | FormanLaw
"""Laws whose constants a material may have on record; Paris' is Walker's at gamma 1."""


@dataclass(frozen=True, slots=True)
class Threshold:
    r"""Range of K without growth, :math:`\Delta K_{th}(R) = \Delta K_{th0}(1-R)^g`.

    `at_zero` in MPa*sqrt(mm); `longer_than` is the crack length from which a crack
    counts as long [mm]. A record, never a default.
    """

    at_zero: float
    power: float
    longer_than: float
    reference: Reference

    def at(self, ratio: float) -> float:
        """Return the threshold at a stress ratio R < 1 [MPa*sqrt(mm)]."""
        within("Stress ratio R", ratio, -10, 0.999, "threshold")
        return float(self.at_zero * (1 - ratio) ** self.power)


@dataclass(frozen=True, slots=True)
class ThresholdLaw:
    """A law that gives no growth at or below a threshold.

    For long cracks under constant amplitude only; what sums over unlike cycles, grows a
    part-through flaw or starts at a shorter crack refuses it. A retarded crack, or one
    of the size of an assumed flaw, grows below it.
    """

    law: GrowthLaw
    threshold: Threshold

    @property
    def reference(self) -> Reference:
        """Source of the law's constants."""
        return self.law.reference

    def rate(self, delta_k: float, ratio: float) -> float:
        """Return da/dN [mm/cycle], 0 at or below the threshold."""
        if delta_k <= self.threshold.at(ratio):
            return 0.0
        return self.law.rate(delta_k, ratio)

    def rates(self, delta_k: Floats, ratio: Floats) -> Floats:
        """Return da/dN of arrays, as `rate`."""
        ends = self.threshold.at_zero * (1 - ratio) ** self.threshold.power
        return np.where(delta_k <= ends, 0.0, self.law.rates(delta_k, ratio))


def ratios_within(ratio: Floats, low: float, high: float, why: str) -> None:
    """Refuse stress ratios outside a law's range."""
    if ratio.size:
        within("Stress ratio R", float(ratio.min()), low, high, why)
        within("Stress ratio R", float(ratio.max()), low, high, why)


def refuse_threshold(law: GrowthLaw, message: str) -> None:
    """Refuse a law with a threshold where a threshold does not hold."""
    if isinstance(law, ThresholdLaw):
        raise AnalysisError(message)


def refuse_short(law: GrowthLaw, start: float) -> None:
    """Refuse a threshold for a crack shorter than its data are for."""
    if isinstance(law, ThresholdLaw) and start < law.threshold.longer_than:
        raise OutOfRangeError(
            SHORT_FOR_THRESHOLD.format(start=start, longer=law.threshold.longer_than)
        )


def el_haddad_length(threshold: float, endurance_range: float) -> float:
    r"""Return the length below which a crack is short, :math:`(\Delta K_{th}/\Delta
    S_e)^2/\pi`.

    Parameters
    ----------
    threshold
        Threshold range of long cracks [MPa*sqrt(mm)].
    endurance_range
        Range of stress an uncracked piece endures [MPa].

    Returns
    -------
    float
        Length a0 [mm].

    Notes
    -----
    Range F = 1. Cracks of several a0 begin to grow as long ones do.

    References
    ----------
    .. [1] El Haddad, Smith and Topper, 1979.
    """
    return (threshold / endurance_range) ** 2 / math.pi


@dataclass(frozen=True, slots=True)
class StressCycle:
    """A constant-amplitude cycle of gross stress [MPa], ratio R = Smin/Smax."""

    maximum: GrossStress
    ratio: float

    @property
    def span(self) -> float:
        """Smax - Smin [MPa]."""
        return self.maximum * (1 - self.ratio)


def delta_k(factor: float, cycle: StressCycle, length: float) -> float:
    """Return the range of K at a crack length [MPa*sqrt(mm)]."""
    return factor * cycle.span * math.sqrt(math.pi * length)
