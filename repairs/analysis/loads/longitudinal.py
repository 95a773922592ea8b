"""Loads along the section, for cracks that run around it.

A circumferential crack sees the axial stress: half of the hoop stress from pressure,
and bending of the whole section. From pressure alone its life is wrong by one to two
decades, so nothing is computed without a sourced limit bending stress, a 1 g stress and
the reach of a flight-by-flight spectrum.
"""

from __future__ import annotations

from dataclasses import dataclass

from repairs.analysis.errors import UNKNOWN_FORM, InputError, within
from repairs.analysis.inputs import Inputs
from repairs.analysis.loads import panel_loads as panels
from repairs.analysis.loads import shell as loads
from repairs.analysis.loads.flight_cycle import ground_air_ground
from repairs.analysis.loads.flown import Flown, ground_level, write_flight
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.note import Note
from repairs.analysis.types import GrossStress, Sourced

NEEDS_SPECTRUM = (
    "A circumferential crack needs flight-by-flight stresses along the section, and no "
    "spectrum is given; pressure alone is wrong by one to two decades. Choose the "
    "spectrum of this panel."
)
BENDING_ADDS = (
    "Bending of the section adds to the axial stress of pressure; the hoop stress is "
    "not part of this direction."
)
ONE_CYCLE = (
    "One cycle a flight, from the ground to its largest stress: the cycles between are "
    "not counted and would shorten the life. Barred from approval until the panel's "
    "flight-by-flight spectrum is recorded."
)
OF_BENDING = (
    "The spectrum is taken as bending along the section without pressure, which is "
    "added in flight and not on the ground."
)
EVERY_MINIMUM = (
    "The spectrum does not tell its flights apart: every cycle is taken down to the "
    "ground's pressure, which shortens the life."
)
LIMIT, MEAN = "limit_longitudinal_stress", "mean_longitudinal_stress"
LONGITUDINAL_INPUTS = (LIMIT, MEAN)
REACH_INPUTS = ("flight_smallest_share", "flight_largest_share")
"""How far a flight's stresses reach, over the 1 g stress."""


@dataclass(frozen=True, slots=True)
class SpectrumReach:
    """Smallest stress on the ground and largest in flight, over the 1 g stress [-]."""

    smallest: Sourced
    largest: Sourced

    def __post_init__(self) -> None:
        within("Largest over 1 g stress", self.largest.value, 1, 10, "a flight")
        within("Smallest over 1 g stress", self.smallest.value, -10, 1, "the ground")


def states_stress(inputs: Inputs) -> bool:
    """Return whether a spectrum of stress is recorded for the panel."""
    spectrum = inputs.spectrum()
    return spectrum is not None and spectrum.flight is not None


def longitudinal_needed(inputs: Inputs) -> tuple[str, ...]:
    """Return the names of the load inputs this direction needs."""
    pressure = panels.PRESSURE_INPUTS if inputs.word("pressurised") == "yes" else ()
    flown = () if states_stress(inputs) else (MEAN,)
    return (LIMIT, *flown, *pressure)


def reach_needed(inputs: Inputs) -> tuple[str, ...]:
    """Return the names of what says how far a flight reaches, without a spectrum."""
    return () if states_stress(inputs) else REACH_INPUTS


def loads_across(
    direction: str, inputs: Inputs, note: Note, reach: SpectrumReach | None = None
) -> PanelLoads:
    """Return the loads across a crack of a direction, as stress on the undamaged skin.

    Parameters
    ----------
    direction
        "longitudinal": across it is hoop. "circumferential": across it is axial.
    inputs, note
        As for `panel_loads`.
    reach
        Of the panel's spectrum; a circumferential crack is refused without it.

    Returns
    -------
    PanelLoads
        Requirements and cycle [MPa].

    Notes
    -----
    Range of the two; a diagonal crack has no method here and is refused.

    References
    ----------
    .. [1] See `longitudinal_loads` and `panel_loads`.
    """
    if direction == "longitudinal":
        return panels.panel_loads(inputs, note)
    if direction == "circumferential":
        return longitudinal_loads(inputs, note, reach)
    raise InputError(
        UNKNOWN_FORM.format(name=direction, known="longitudinal, circumferential")
    )


def longitudinal_loads(
    inputs: Inputs, note: Note, reach: SpectrumReach | None
) -> PanelLoads:
    """Write down and return the loads along the section of a panel.

    Residual: axial stress of normal pressure with limit bending, and 1.15 times the
    pressure alone. Ultimate: 1.5 times limit bending with relief pressure, and 1.5
    times the proof factor on relief pressure. Flight: the panel's spectrum with
    pressure added in flight; else one cycle, from 1 g times the smallest share on the
    ground, without pressure, to 1 g times the largest share with pressure.

    Parameters
    ----------
    inputs
        `limit_longitudinal_stress`: limit bending alone, without pressure;
        `mean_longitudinal_stress`: 1 g bending alone.
    note
        Takes every step.
    reach
        Smallest and largest of a flight over 1 g; None is refused unless the panel's
        spectrum is recorded.

    Returns
    -------
    PanelLoads
        Requirements and cycle [MPa].

    Notes
    -----
    Range R/t >= 20. Axial stress is p R/(2t): no relief by stringers is taken.

    References
    ----------
    .. [1] 14 CFR 25.571(b), 25.365(d), 25.303; see `shell`.
    """
    if reach is None and not states_stress(inputs):
        raise InputError(NEEDS_SPECTRUM)
    limit = note.given(
        "σ_lim,x",
        "limit bending stress along the section, without pressure",
        inputs.number(LIMIT),
    )
    flight = GrossStress(limit)
    if inputs.word("pressurised") == "yes":
        read = panels.read_shell(inputs, note)
        residual, ultimate = loads.shell_requirements(
            read.pressures,
            read.radius,
            read.thickness,
            read.factors,
            flight,
            loads.axial_stress,
        )
        pressure = loads.axial_stress(
            read.pressures.normal + read.pressures.external, read.radius, read.thickness
        )
    else:
        factor = note.given(
            "k_ult", "factor of static ultimate", inputs.number("ultimate_factor")
        )
        residual, ultimate = loads.unpressurised_requirements(flight, factor)
        pressure = GrossStress(0.0)
    flown = _flown(inputs, note, reach, pressure)
    note.warn(BENDING_ADDS)
    found = PanelLoads(residual, ultimate, flown.cycle, flown)
    panels.write_requirements(found, note)
    return found


def _flown(
    inputs: Inputs, note: Note, reach: SpectrumReach | None, pressure: GrossStress
) -> Flown:
    """Write down and return a flight: its spectrum with pressure, else one cycle."""
    spectrum = inputs.spectrum()
    if spectrum is not None and spectrum.flight is not None:
        note.step(
            "σ_p", "(Δp + p_ext) R / (2 t)", OF_BENDING, pressure, "MPa", loads.SHELL
        )
        if pressure and ground_level(spectrum) is None:
            note.warn(EVERY_MINIMUM)
        return write_flight(note, spectrum, pressure)
    assert reach is not None, "longitudinal_loads() has refused it"
    mean = note.given(
        "σ_1g,x",
        "1 g bending stress along the section, without pressure",
        inputs.number(MEAN),
    )
    low = note.given("r_min", "smallest share of a flight", reach.smallest)
    high = note.given("r_max", "largest share of a flight", reach.largest)
    cycle = ground_air_ground((low * mean,), (high * mean + pressure,))
    note.step(
        "σ",
        "r_max σ_1g,x + (Δp + p_ext) R / (2 t)",
        f"{high:.3f} · {mean:.2f} + {pressure:.2f}",
        cycle.maximum,
        "MPa",
        loads.SHELL,
    )
    note.warn(ONE_CYCLE, bars=True)
    return Flown(cycle)
