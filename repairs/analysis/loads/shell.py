r"""Loads of a panel: pressurised shell stresses and the two strength requirements.

*Residual* and *static ultimate* are two requirements with loads of their own; one is
never the other times a factor. A case whose loads are not recorded is listed as not
checked, never taken as zero.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from repairs.analysis.errors import within
from repairs.analysis.types import Grade, GrossStress, Reference, Sourced

SHELL = Reference("Thin pressurised shell, elementary statics", Grade.DERIVED)

RESIDUAL_PRESSURE_FACTOR = Sourced(
    1.15,
    "-",
    "14 CFR 25.571(b), pressure alone with other loads omitted; "
    "wording from memory, unverified",
    Grade.MEMORY,
)
ULTIMATE_FACTOR = Sourced(
    1.5,
    "-",
    "14 CFR 25.303 at amendment 25-23, factor of safety on limit loads; read in its "
    "text of 2020",
    Grade.PRINT,
)
PROOF_FACTOR_TO_45000_FT = Sourced(
    1.33,
    "-",
    "14 CFR 25.365(d), relief valve setting with other loads omitted, read in a copy "
    "of an earlier amendment; the same words in 23.365(d) and 23.2225(c)(3)",
    Grade.QUOTED,
)
PROOF_FACTOR_ABOVE_45000_FT = Sourced(
    1.67,
    "-",
    "14 CFR 25.365(d), above 45,000 ft; from memory, unverified",
    Grade.MEMORY,
)
PROOF_FACTOR_EUROPEAN = Sourced(
    1.33,
    "-",
    "CS 25.365(d) at amendment 28, at any altitude; read in a public quotation",
    Grade.QUOTED,
)

RESIDUAL_WITH_FLIGHT = (
    "normal operating differential + external aerodynamic pressure, with limit flight "
    "loads"
)
RESIDUAL_PRESSURE = (
    "{factor:g} × (normal operating differential + external aerodynamic pressure), "
    "other loads omitted"
)
ULTIMATE_WITH_FLIGHT = "{factor:g} × (limit flight loads + relief-valve differential)"
ULTIMATE_PRESSURE = (
    "{factor:g} × {proof:g} × relief-valve differential, other loads omitted"
)
RESIDUAL_UNPRESSURISED = "limit flight loads"
ULTIMATE_UNPRESSURISED = "{factor:g} × limit flight loads"
NO_FLIGHT_LOADS = "limit flight stress not recorded for this panel"
PRESSURE_ONLY = (
    "Pressure only: {cases} not checked, because the limit flight stress is not "
    "recorded for this panel."
)


@dataclass(frozen=True, slots=True)
class LoadCase:
    """One load case: its name and the gross stress, or None where not checked."""

    title: str
    stress: GrossStress | None


@dataclass(frozen=True, slots=True)
class Requirement:
    """One strength requirement as the cases it is the largest of."""

    name: str
    cases: tuple[LoadCase, ...]

    @property
    def governing(self) -> tuple[GrossStress, str]:
        """The largest stress among the checked cases, and its case."""
        checked = [(c.stress, c.title) for c in self.cases if c.stress is not None]
        return max(checked)

    @property
    def not_checked(self) -> tuple[str, ...]:
        """Cases whose loads are not recorded."""
        return tuple(c.title for c in self.cases if c.stress is None)


@dataclass(frozen=True, slots=True)
class CabinPressures:
    """Differential pressures of a cabin [MPa]."""

    normal: float
    external: float
    relief: float


@dataclass(frozen=True, slots=True)
class LoadFactors:
    """The factors of the requirements [-]."""

    residual_pressure: float
    ultimate: float
    proof: float


def hoop_stress(pressure: float, radius: float, thickness: float) -> GrossStress:
    r"""Return the hoop stress of an unstiffened shell, :math:`pR/t`.

    Parameters
    ----------
    pressure
        Differential pressure [MPa].
    radius
        Shell radius [mm].
    thickness
        Skin thickness [mm].

    Returns
    -------
    GrossStress
        Hoop stress [MPa]. At mid-bay the skin carries it whole: frames give no relief
        there.

    Notes
    -----
    Range R/t >= 20, away from frames, bulkheads and cut-outs.

    References
    ----------
    .. [1] Elementary statics; see `SHELL`.
    """
    within("Radius over thickness", radius / thickness, 20, 1e6, "thin shell")
    return GrossStress(pressure * radius / thickness)


def axial_stress(pressure: float, radius: float, thickness: float) -> GrossStress:
    r"""Return the axial stress of a closed unstiffened shell, :math:`pR/(2t)`.

    Parameters
    ----------
    pressure
        Differential pressure [MPa].
    radius
        Shell radius [mm].
    thickness
        Skin thickness [mm].

    Returns
    -------
    GrossStress
        Axial stress [MPa].

    Notes
    -----
    Range R/t >= 20.

    References
    ----------
    .. [1] Elementary statics; see `SHELL`.
    """
    return GrossStress(hoop_stress(pressure, radius, thickness) / 2)


def smeared_skin_ratios(
    frame_ratio: float, stringer_ratio: float, poisson: float
) -> tuple[float, float]:
    r"""Return hoop and axial skin stress over :math:`pR/t`, frames smeared (a check).

    .. math::
        s_h(1 + a_f) - \nu a_f s_x = 1,\qquad s_x(1 + a_s) - \nu a_s s_h = 1/2

    Parameters
    ----------
    frame_ratio
        Frame area over frame pitch times thickness, a_f [-].
    stringer_ratio
        Stringer area over stringer pitch times thickness, a_s [-].
    poisson
        Poisson's ratio of skin, frame and stringer [-].

    Returns
    -------
    tuple of float
        Hoop and axial mean skin stress over pR/t [-].

    Notes
    -----
    The mean over a bay, for comparison only: at mid-bay the skin sees pR/t, so no
    method here takes credit for it. Range a_f, a_s >= 0, 0 <= nu <= 0.5.

    References
    ----------
    .. [1] Equilibrium and compatibility of skin, frames and stringers.
    """
    within("Poisson's ratio", poisson, 0, 0.5, "isotropic metal")
    within("Frame area ratio", frame_ratio, 0, 10, "an area")
    within("Stringer area ratio", stringer_ratio, 0, 10, "an area")
    a, b = 1 + frame_ratio, -poisson * frame_ratio
    c, d = -poisson * stringer_ratio, 1 + stringer_ratio
    determinant = a * d - b * c
    return (d - b / 2) / determinant, (a / 2 - c) / determinant


def shell_requirements(
    pressures: CabinPressures,
    radius: float,
    thickness: float,
    factors: LoadFactors,
    flight: GrossStress | None,
    across: Callable[[float, float, float], GrossStress] = hoop_stress,
) -> tuple[Requirement, Requirement]:
    """Return the residual and the static ultimate requirement of a pressurised skin.

    Parameters
    ----------
    pressures
        Normal operating, external aerodynamic and relief-valve differential [MPa].
    radius, thickness
        Of the skin [mm].
    factors
        Factors of both requirements [-].
    flight
        Gross stress across the crack or section from limit flight loads alone [MPa];
        None = not recorded, so the two cases with flight loads are not checked.
    across
        Stress of the pressure in that direction: `hoop_stress` or `axial_stress`.

    Returns
    -------
    tuple of Requirement
        Residual, static ultimate.

    Notes
    -----
    Range of `hoop_stress`. The factor 1.0 on the first residual case is meant: its
    loads are taken as ultimate already.

    References
    ----------
    .. [1] 14 CFR 25.571(b), 25.365(d), 25.303; see the factors of this module.
    """
    normal = across(pressures.normal + pressures.external, radius, thickness)
    relief = across(pressures.relief, radius, thickness)

    def combined(stress: float, factor: float) -> GrossStress | None:
        return None if flight is None else GrossStress(factor * (stress + flight))

    residual = Requirement(
        "residual",
        (
            LoadCase(RESIDUAL_WITH_FLIGHT, combined(normal, 1.0)),
            LoadCase(
                RESIDUAL_PRESSURE.format(factor=factors.residual_pressure),
                GrossStress(factors.residual_pressure * normal),
            ),
        ),
    )
    ultimate = Requirement(
        "static ultimate",
        (
            LoadCase(
                ULTIMATE_WITH_FLIGHT.format(factor=factors.ultimate),
                combined(relief, factors.ultimate),
            ),
            LoadCase(
                ULTIMATE_PRESSURE.format(factor=factors.ultimate, proof=factors.proof),
                GrossStress(factors.ultimate * factors.proof * relief),
            ),
        ),
    )
    return residual, ultimate


def unpressurised_requirements(
    flight: GrossStress, factor: float
) -> tuple[Requirement, Requirement]:
    """Return both requirements of a panel without pressure from its limit stress.

    Parameters
    ----------
    flight
        Gross stress from limit flight loads [MPa].
    factor
        Ultimate over limit load [-].

    Returns
    -------
    tuple of Requirement
        Residual (limit), static ultimate.

    Notes
    -----
    Range: a panel that carries load; its margins are over these stresses.

    References
    ----------
    .. [1] 14 CFR 25.571(b), 25.303.
    """
    within("Stress from limit flight loads, MPa", abs(flight), 1e-6, 1e5, "a load")
    ultimate = ULTIMATE_UNPRESSURISED.format(factor=factor)
    return (
        Requirement("residual", (LoadCase(RESIDUAL_UNPRESSURISED, flight),)),
        Requirement(
            "static ultimate", (LoadCase(ultimate, GrossStress(factor * flight)),)
        ),
    )
