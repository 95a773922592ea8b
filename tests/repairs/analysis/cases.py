"""Inputs of one plausible panel, built for tests of whole methods."""

from __future__ import annotations

from repairs.analysis.growth.laws import WalkerLaw
from repairs.analysis.inputs import TOUGHNESS_UNIT, Inputs, Value
from repairs.analysis.scatter.factors import FatiguePolicy
from repairs.analysis.stress_life.curves import StressLifeCurve, StressLifeFamily
from repairs.analysis.surroundings import Obstacle, Surroundings
from repairs.analysis.types import (
    KSI,
    ROOT_1000,
    Grade,
    Reference,
    Sourced,
    Stated,
)

PSI = KSI / 1000
RADIUS, THICKNESS, KC = 1422.4, 1.4, 100 * ROOT_1000
FTY, FTU = 45 * KSI, 61 * KSI
FAA = Reference("DOT/FAA/AR-05/15, figure 3", Grade.QUOTED)
LAW = WalkerLaw.from_ksi_root_inch(1.67e-9, 3.273, 0.618, FAA)
SHEET_CURVES = (
    (1.0, 11.1, 3.97, 0.56, 15.8),
    (1.5, 7.5, 2.13, 0.66, 23.7),
    (2.0, 9.2, 3.33, 0.68, 12.3),
    (4.0, 8.3, 3.30, 0.66, 8.5),
    (5.0, 8.9, 3.73, 0.56, 3.9),
)
CURVES = StressLifeFamily(
    "2024-T3",
    "bare sheet",
    False,
    tuple(StressLifeCurve(*row, KSI, "MIL-HDBK-5J", Grade.QUOTED)
          for row in SHEET_CURVES),
)  # fmt: skip


def recorded(value: float, unit: str) -> Sourced:
    return Sourced(value, unit, "record of the test", Grade.RECORDED)


def said(word: str) -> Stated:
    return Stated(word, "record of the test")


def policy(factor: float) -> FatiguePolicy:
    return FatiguePolicy(
        recorded(factor, "-"), "life of the test", severity_inside=True
    )


def around(
    half_along: float = 12.0,
    obstacles: tuple[Obstacle, ...] = (),
    bay: tuple[float, float] | None = (0.0, 508.0),
    x: float = 254.0,
) -> Surroundings:
    """A damage in the middle of a 20 in bay, with nothing near."""
    return Surroundings(x, 0.0, half_along, bay, "FR 28 to FR 29", obstacles, "test")


SHELL: dict[str, Value] = {
    "element": said("skin"),
    "pressurised": said("yes"),
    "surroundings": around(),
    "thickness": recorded(THICKNESS, "mm"),
    "radius": recorded(RADIUS, "mm"),
    "panel_length": recorded(5080.0, "mm"),
    "normal_pressure": recorded(8.2 * PSI, "MPa"),
    "external_pressure": recorded(0.3 * PSI, "MPa"),
    "relief_pressure": recorded(8.6 * PSI, "MPa"),
    "ceiling": recorded(31_000, "ft"),
    "yield_strength": recorded(FTY, "MPa"),
    "tension_strength": recorded(FTU, "MPa"),
    "toughness": recorded(KC, TOUGHNESS_UNIT),
    "growth_law": LAW,
    "stress_life": CURVES,
    "stress_life_policy": policy(5.0),
    "growth_policy": policy(2.0),
    "repeat_policy": policy(3.0),
    "detectable_length": recorded(25.4, "mm"),
    "accumulated_cycles": recorded(20_000, "cycles"),
    "skin_cycles": recorded(20_000, "cycles"),
    "validity_cycles": recorded(34_000, "cycles"),
    "clad": said("no"),
}
CRACK: dict[str, Value] = {
    **SHELL,
    "crack_direction": said("longitudinal"),
    "crack_origin": said("skin"),
    "crack_length": recorded(24.0, "mm"),
    "crack_length_uncertainty": recorded(0.0, "mm"),
    "life_base": said("since new"),
}
BLEND: dict[str, Value] = {
    **SHELL,
    "damage_removed": said("yes"),
    "remaining_thickness": recorded(1.25, "mm"),
    "gauge_uncertainty": recorded(0.02, "mm"),
    "blend_length": recorded(24.0, "mm"),
    "earlier_depth": recorded(0.0, "mm"),
    "life_base": said("since blend-out"),
}
HOLE: dict[str, Value] = {
    **SHELL,
    "hole_load": said("open"),
    "hole_cracked": said("no"),
    "hole_diameter": recorded(6.35, "mm"),
    "edge_distance": recorded(254.0, "mm"),
    "strip_width": recorded(500.0, "mm"),
    "life_base": said("since release of R-0001"),
}


def inputs(base: dict[str, Value], **changes: Value | None) -> Inputs:
    """The base with some inputs changed, or left out with None."""
    values = {**base, **changes}
    return Inputs({name: value for name, value in values.items() if value is not None})
