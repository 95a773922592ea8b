"""Loads for a crack whose direction to the stress is not known: the largest principal.

A crack of any direction is not opened by more than the largest principal stress of
the skin; by how much turning raises that stands in `intensity.skew`. Axial, hoop and
shear stress must all be recorded: none of them is taken as zero.
"""

from __future__ import annotations

from dataclasses import dataclass

from repairs.analysis.errors import InputError
from repairs.analysis.growth.laws import StressCycle
from repairs.analysis.inputs import Inputs
from repairs.analysis.loads import panel_loads as panels
from repairs.analysis.loads import shell as loads
from repairs.analysis.loads.longitudinal import (
    LONGITUDINAL_INPUTS,
    NEEDS_SPECTRUM,
    ONE_CYCLE,
    SpectrumReach,
)
from repairs.analysis.loads.panel_loads import PanelLoads, ShellInputs
from repairs.analysis.loads.plane_stress import PLANE_STRESS, PlaneStress
from repairs.analysis.loads.shell import LoadCase, Requirement
from repairs.analysis.note import Note
from repairs.analysis.types import GrossStress

SHEAR_INPUTS = ("limit_shear_stress", "mean_shear_stress")
SKEW_INPUTS = ("limit_flight_stress", *LONGITUDINAL_INPUTS, *SHEAR_INPUTS)
LARGEST = "largest principal stress, {title}"


@dataclass(frozen=True, slots=True)
class SkewLoads:
    """Loads as largest principal stress, and the smallest ratio S2/S1 met [-]."""

    panel: PanelLoads
    ratio: float


@dataclass(frozen=True, slots=True)
class _Flight:
    """Flight stresses beside pressure: around, along and in shear [MPa]."""

    hoop: float
    axial: float
    shear: float


def skew_loads(inputs: Inputs, note: Note, reach: SpectrumReach | None) -> SkewLoads:
    """Write down and return the largest principal stresses of a pressurised skin.

    Parameters
    ----------
    inputs
        Pressures, and limit and 1 g stresses along, around and in shear.
    note
        Takes every step.
    reach
        Smallest and largest of a flight over 1 g; None is refused.

    Returns
    -------
    SkewLoads
        Requirements and cycle [MPa], worst S2/S1 [-].

    Notes
    -----
    Range R/t >= 20. The cycle ends at the smallest principal stress on the ground.

    References
    ----------
    .. [1] See `PLANE_STRESS` and `longitudinal_loads`.
    """
    if reach is None:
        raise InputError(NEEDS_SPECTRUM)
    read = panels.read_shell(inputs, note)
    limit = _Flight(
        note.given("σ_lim,y", "limit hoop stress", inputs.number(SKEW_INPUTS[0])),
        note.given("σ_lim,x", "limit axial stress", inputs.number(SKEW_INPUTS[1])),
        note.given("τ_lim", "limit shear stress", inputs.number(SHEAR_INPUTS[0])),
    )
    mean = _Flight(
        0.0,
        note.given("σ_1g,x", "1 g axial stress", inputs.number(SKEW_INPUTS[2])),
        note.given("τ_1g", "1 g shear stress", inputs.number(SHEAR_INPUTS[1])),
    )
    low = note.given("r_min", "smallest share of a flight", reach.smallest)
    high = note.given("r_max", "largest share of a flight", reach.largest)
    points = _points(read, limit)
    top = _at(read, read.pressures.normal + read.pressures.external, mean, high)
    ground = _at(read, 0.0, mean, low)
    both = [point.principal() for _, _, point in points] + [top.principal()]
    largest = top.principal().largest
    smallest = min(0.0, ground.principal().smallest)
    found = PanelLoads(
        _requirement("residual", points),
        _requirement("static ultimate", points),
        StressCycle(GrossStress(largest), smallest / largest),
    )
    note.step(
        "σ₁",
        "largest principal stress of a flight",
        f"{top.axial:.2f} along, {top.hoop:.2f} around, {top.shear:.2f} shear",
        largest,
        "MPa",
        PLANE_STRESS,
    )
    note.warn(ONE_CYCLE, bars=True)
    panels.write_requirements(found, note)
    return SkewLoads(found, min(p.smallest / p.largest for p in both))


def _at(
    read: ShellInputs, pressure: float, flight: _Flight, share: float = 1.0
) -> PlaneStress:
    hoop = loads.hoop_stress(pressure, read.radius, read.thickness)
    return PlaneStress(
        hoop / 2 + share * flight.axial,
        hoop + share * flight.hoop,
        share * flight.shear,
    )


def _points(
    read: ShellInputs, limit: _Flight
) -> tuple[tuple[str, str, PlaneStress], ...]:
    """Return requirement, case and stresses of all four cases."""
    pressures, factors = read.pressures, read.factors
    normal, relief = pressures.normal + pressures.external, pressures.relief
    alone = _Flight(0.0, 0.0, 0.0)
    more, proof = factors.ultimate, factors.proof
    return (
        ("residual", loads.RESIDUAL_WITH_FLIGHT, _at(read, normal, limit)),
        (
            "residual",
            loads.RESIDUAL_PRESSURE.format(factor=factors.residual_pressure),
            _at(read, factors.residual_pressure * normal, alone),
        ),
        (
            "static ultimate",
            loads.ULTIMATE_WITH_FLIGHT.format(factor=more),
            _scaled(_at(read, relief, limit), more),
        ),
        (
            "static ultimate",
            loads.ULTIMATE_PRESSURE.format(factor=more, proof=proof),
            _at(read, more * proof * relief, alone),
        ),
    )


def _scaled(point: PlaneStress, factor: float) -> PlaneStress:
    return PlaneStress(factor * point.axial, factor * point.hoop, factor * point.shear)


def _requirement(
    name: str, points: tuple[tuple[str, str, PlaneStress], ...]
) -> Requirement:
    return Requirement(
        name,
        tuple(
            LoadCase(
                LARGEST.format(title=title), GrossStress(point.principal().largest)
            )
            for group, title, point in points
            if group == name
        ),
    )
