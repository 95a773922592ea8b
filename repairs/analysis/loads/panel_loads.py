"""From the record's loads to a panel's requirements and its cycle, with note lines."""

from __future__ import annotations

from dataclasses import dataclass, replace

from repairs.analysis.errors import InputError
from repairs.analysis.growth.laws import StressCycle
from repairs.analysis.inputs import Inputs
from repairs.analysis.loads import shell as loads
from repairs.analysis.loads import stiffened_shell as stiffened
from repairs.analysis.loads.flown import Flown, write_flight
from repairs.analysis.loads.shell import LoadCase, Requirement
from repairs.analysis.note import Note
from repairs.analysis.spectra.cycles import PressureCycle
from repairs.analysis.types import GrossStress, Sourced

FEET_45000 = 45_000.0
EUROPEAN = "EASA"
"""Rules that ask for one factor at any altitude; others for more above 45,000 ft."""
REGIME_UNKNOWN = "rules of the aircraft not recorded, the larger factor taken"
RUNNING_LOAD_CASE = "recorded ultimate running load of the panel"
ONE_DIRECTION = (
    "Hoop direction only: stresses along the section are not part of this method."
)

ABOVE_LIMIT = (
    "The spectrum's largest stress, {top:.1f} MPa, is above the stress from limit "
    "flight loads, {limit:.1f} MPa: one of them is of another place or too high."
)
NOT_HOOP = (
    "The panel's spectrum states stress along the section; the hoop cycle comes from "
    "the cabin's pressure and does not use it."
)
NOT_STRESS = (
    "The spectrum {name} is a pressure cycle, and the panel carries no pressure: "
    "record one that states its stress."
)

PRESSURE_INPUTS = (
    "normal_pressure",
    "external_pressure",
    "relief_pressure",
    "ceiling",
    "radius",
)
LIMIT, CYCLE = "limit_flight_stress", ("cycle_max_stress", "cycle_ratio")


@dataclass(frozen=True, slots=True)
class PanelLoads:
    """Both requirements and the cycle of one flight, on gross stress [MPa].

    Where a spectrum is recorded `flight` is what it does, and `cycle` goes from its
    smallest to its largest stress; else the cycle is all there is.
    """

    residual: Requirement
    ultimate: Requirement
    cycle: StressCycle
    flight: Flown | None = None

    @property
    def flown(self) -> Flown:
        """What one flight does: its spectrum, else its one cycle."""
        return self.flight or Flown(self.cycle)

    @property
    def not_checked(self) -> tuple[str, ...]:
        """Cases whose loads are not recorded."""
        return self.residual.not_checked + self.ultimate.not_checked

    def on_section(self, share: float) -> PanelLoads:
        """Return the same loads as stress on a section of `share` of the whole."""
        cycle = StressCycle(GrossStress(self.cycle.maximum / share), self.cycle.ratio)
        return PanelLoads(
            _scaled(self.residual, share),
            _scaled(self.ultimate, share),
            cycle,
            self.flight and self.flight.times(1 / share),
        )


def _scaled(requirement: Requirement, share: float) -> Requirement:
    return Requirement(
        requirement.name,
        tuple(
            LoadCase(
                case.title,
                None if case.stress is None else GrossStress(case.stress / share),
            )
            for case in requirement.cases
        ),
    )


def needed(inputs: Inputs) -> tuple[str, ...]:
    """Return the names of the load inputs this panel needs."""
    if inputs.word("pressurised") == "yes":
        return PRESSURE_INPUTS
    return recorded_needed(inputs)


def flight_needed(inputs: Inputs) -> tuple[str, ...]:
    """Return the names of what says what a flight does: a spectrum, else a cycle."""
    return ("spectrum",) if inputs.spectrum() else CYCLE


def recorded_needed(inputs: Inputs) -> tuple[str, ...]:
    """Return the names of the inputs that recorded stresses need."""
    return (LIMIT, *flight_needed(inputs))


def largest_stress(inputs: Inputs) -> float | None:
    """Return the largest stress of a flight as recorded [MPa], None if it is not."""
    spectrum = inputs.spectrum()
    if spectrum is not None and spectrum.flight is not None:
        return float(spectrum.flight.maxima.max())
    given = inputs.maybe(CYCLE[0])
    return given.value if given else None


def panel_loads(inputs: Inputs, note: Note) -> PanelLoads:
    """Write down and return the loads of a panel on its undamaged thickness.

    A pressurised panel: one pressure cycle a flight from zero to normal operating
    differential plus external aerodynamic pressure. Any other: the recorded cycle.
    """
    if inputs.word("pressurised") == "yes":
        found = _shell(inputs, note)
    else:
        found = _recorded(inputs, note)
    write_requirements(found, note)
    return found


@dataclass(frozen=True, slots=True)
class ShellInputs:
    """Pressures, geometry and factors of a pressurised skin, as read."""

    pressures: loads.CabinPressures
    radius: float
    thickness: float
    factors: loads.LoadFactors


def read_shell(inputs: Inputs, note: Note) -> ShellInputs:
    """Write down and return what the loads of a pressurised skin are made of."""
    normal = note.given(
        "Δp", "normal operating differential", inputs.number("normal_pressure")
    )
    external = note.given(
        "p_ext", "external aerodynamic pressure", inputs.number("external_pressure")
    )
    relief = note.given(
        "p_rel", "relief-valve differential", inputs.number("relief_pressure")
    )
    radius = note.given("R", "shell radius", inputs.number("radius"))
    thickness = note.given("t", "skin thickness", inputs.number("thickness"))
    factors = loads.LoadFactors(
        note.given(
            "k_res",
            "factor of residual, pressure alone",
            inputs.number("residual_pressure_factor"),
        ),
        note.given(
            "k_ult", "factor of static ultimate", inputs.number("ultimate_factor")
        ),
        note.given("k_proof", "factor of relief valve alone", _proof(inputs)),
    )
    pressures = loads.CabinPressures(normal, external, relief)
    return ShellInputs(pressures, radius, thickness, factors)


def _shell(inputs: Inputs, note: Note) -> PanelLoads:
    read = read_shell(inputs, note)
    pressures, radius, thickness = read.pressures, read.radius, read.thickness
    normal, external = pressures.normal, pressures.external
    given = inputs.maybe("limit_flight_stress")
    flight = (
        GrossStress(note.given("σ_fl", "hoop stress from limit flight loads", given))
        if given
        else None
    )
    residual, ultimate = loads.shell_requirements(
        pressures, radius, thickness, read.factors, flight
    )
    top = loads.hoop_stress(normal + external, radius, thickness)
    note.step(
        "σ",
        "(Δp + p_ext) R / t, whole at mid-bay, no relief by frames",
        f"({normal:.5f} + {external:.5f}) · {radius:.1f} / {thickness:.3f}",
        top,
        "MPa",
        loads.SHELL,
    )
    _beside_frames(inputs, note, read)
    note.warn(ONE_DIRECTION)
    return PanelLoads(
        residual,
        _with_running_load(inputs, note, ultimate, thickness),
        _pressed(inputs, note, read, top),
    )


def _pressed(
    inputs: Inputs, note: Note, read: ShellInputs, top: GrossStress
) -> StressCycle:
    """Return the hoop cycle of a flight, of the recorded differential if there is one.

    The external pressure is whole at the largest stress and none at the smallest.
    """
    spectrum = inputs.spectrum()
    if spectrum is None:
        return StressCycle(top, 0.0)
    if not isinstance(spectrum.spectrum, PressureCycle):
        note.warn(NOT_HOOP)
        return StressCycle(top, 0.0)
    spectrum.write(note)
    flown = spectrum.spectrum
    normal = loads.hoop_stress(read.pressures.normal, read.radius, read.thickness)
    largest = GrossStress(top - (1 - flown.share) * normal)
    smallest = flown.ground_share * normal
    note.step(
        "σ_max",
        "σ − (1 − share) Δp R / t",
        f"{top:.2f} − {1 - flown.share:.3f} · {normal:.2f}; "
        f"smallest {smallest:.2f} MPa",
        largest,
        "MPa",
    )
    return StressCycle(largest, smallest / largest)


def _beside_frames(inputs: Inputs, note: Note, read: ShellInputs) -> None:
    """Write what shear-tied frames would relieve, for comparison; none is taken."""
    names = ("frame_area", "frame_pitch", "stringer_area", "stringer_pitch", "poisson")
    given = [inputs.maybe(name) for name in names]
    numbers = [item.value for item in given if item is not None]
    if len(numbers) < len(names):
        return
    frame_area, frame_pitch, stringer_area, stringer_pitch, poisson = numbers
    frames = stiffened.Frames(frame_area, frame_pitch, stiffened.Attachment.SHEAR_TIED)
    stringers = stiffened.Stringers(stringer_area, stringer_pitch)
    pressure = read.pressures.normal + read.pressures.external
    mean = stiffened.smeared_stresses(
        pressure, read.radius, read.thickness, frames, stringers, poisson
    )
    bay = stiffened.hoop_between_frames(
        pressure, read.radius, read.thickness, frames, poisson, mean.axial
    )
    where = f"frames {frame_area:.1f} mm² every {frame_pitch:.0f} mm"
    note.beside(
        "σ_mean",
        "mean hoop stress of the bay if its frames are shear-tied; not for mid-bay",
        where,
        mean.mean_hoop,
        "MPa",
        stiffened.SMEARED,
    )
    note.beside(
        "σ_mid",
        "hoop stress at mid-bay if its frames are shear-tied",
        where,
        bay.mid_bay,
        "MPa",
        stiffened.BETWEEN_FRAMES,
    )


def _proof(inputs: Inputs) -> Sourced:
    adopted = inputs.maybe("proof_factor")
    if adopted:
        return adopted
    if inputs.number("ceiling").value <= FEET_45000:
        return loads.PROOF_FACTOR_TO_45000_FT
    regime = inputs.word("regime") or ""
    if regime.upper() == EUROPEAN:
        return loads.PROOF_FACTOR_EUROPEAN
    unknown = "" if regime else f"; {REGIME_UNKNOWN}"
    larger = loads.PROOF_FACTOR_ABOVE_45000_FT
    return replace(larger, source=larger.source + unknown)


def _recorded(inputs: Inputs, note: Note) -> PanelLoads:
    flight = GrossStress(
        note.given(
            "σ_lim",
            "stress from limit flight loads",
            inputs.number("limit_flight_stress"),
        )
    )
    factor = note.given(
        "k_ult", "factor of static ultimate", inputs.number("ultimate_factor")
    )
    flown = read_flight(inputs, note)
    if flown.spectrum is not None and flown.cycle.maximum > flight:
        note.warn(ABOVE_LIMIT.format(top=flown.cycle.maximum, limit=flight))
    thickness = note.given("t", "skin thickness", inputs.number("thickness"))
    residual, ultimate = loads.unpressurised_requirements(flight, factor)
    return PanelLoads(
        residual,
        _with_running_load(inputs, note, ultimate, thickness),
        flown.cycle,
        flown,
    )


def read_flight(inputs: Inputs, note: Note) -> Flown:
    """Write down and return what a flight does, from its spectrum or its cycle."""
    spectrum = inputs.spectrum()
    if spectrum is not None:
        if spectrum.flight is None:
            raise InputError(NOT_STRESS.format(name=spectrum.name))
        return write_flight(note, spectrum)
    top = note.given(
        "σ_max", "largest stress of a flight", inputs.number("cycle_max_stress")
    )
    ratio = note.given("R_σ", "stress ratio of a flight", inputs.number("cycle_ratio"))
    return Flown(StressCycle(GrossStress(top), ratio))


def _with_running_load(
    inputs: Inputs, note: Note, ultimate: Requirement, thickness: float
) -> Requirement:
    """Add the panel's recorded ultimate running load as a case of its own."""
    given = inputs.maybe("ultimate_running_load")
    if given is None:
        return ultimate
    running = note.given("N_ult", RUNNING_LOAD_CASE, given)
    case = LoadCase(RUNNING_LOAD_CASE, GrossStress(running / thickness))
    return Requirement(ultimate.name, (*ultimate.cases, case))


def write_requirements(found: PanelLoads, note: Note) -> None:
    """Write the governing stresses down and say what was not checked."""
    for symbol, requirement in (("σ_res", found.residual), ("σ_ult", found.ultimate)):
        stress, case = requirement.governing
        note.step(
            symbol, f"required, gross, {requirement.name}: {case}", "", stress, "MPa"
        )
    if found.not_checked:
        cases = "; ".join(found.not_checked)
        note.warn(loads.PRESSURE_ONLY.format(cases=cases))
