"""Inputs of cracks in skins and sheets, built on the plausible panel of `cases`."""

from __future__ import annotations

from repairs.analysis.inputs import Value
from repairs.analysis.registry import evaluate
from repairs.analysis.types import Result, Use
from tests.repairs.analysis.cases import CRACK, inputs, recorded, said

OF_PRESSURE = (
    "radius",
    "normal_pressure",
    "external_pressure",
    "relief_pressure",
    "ceiling",
)
ROUND: dict[str, Value] = {
    **CRACK,
    "crack_direction": said("circumferential"),
    "panel_width": recorded(2000.0, "mm"),
    "limit_longitudinal_stress": recorded(80.0, "MPa"),
    "mean_longitudinal_stress": recorded(25.0, "MPa"),
    "flight_smallest_share": recorded(-0.3, "-"),
    "flight_largest_share": recorded(1.8, "-"),
}
SKEW: dict[str, Value] = {
    **ROUND,
    "crack_direction": said("diagonal"),
    "limit_flight_stress": recorded(5.0, "MPa"),
    "limit_shear_stress": recorded(40.0, "MPa"),
    "mean_shear_stress": recorded(12.0, "MPa"),
}
FLAT: dict[str, Value] = {
    **{name: value for name, value in CRACK.items() if name not in OF_PRESSURE},
    "pressurised": said("no"),
    "load_kind": said("tension"),
    "panel_length": recorded(500.0, "mm"),
    "limit_flight_stress": recorded(150.0, "MPa"),
    "cycle_max_stress": recorded(80.0, "MPa"),
    "cycle_ratio": recorded(-0.2, "-"),
}
EDGE: dict[str, Value] = {
    **FLAT,
    "crack_origin": said("edge"),
    "strip_width": recorded(150.0, "mm"),
}
STIFFENERS: dict[str, Value] = {
    "frame_area": recorded(226.0, "mm2"),
    "frame_pitch": recorded(508.0, "mm"),
    "stringer_area": recorded(129.0, "mm2"),
    "stringer_pitch": recorded(150.0, "mm"),
    "modulus": recorded(72_400.0, "MPa"),
    "poisson": recorded(0.33, "-"),
    "centre_stiffener": said("mid_bay"),
    "stiffener_modulus": recorded(71_000.0, "MPa"),
    "stiffener_strength": recorded(450.0, "MPa"),
    "fastener_pitch": recorded(25.0, "mm"),
    "fastener_diameter": recorded(4.8, "mm"),
    "fastener_flexibility": recorded(4e-5, "mm/N"),
    "fastener_strength": recorded(4000.0, "N"),
}
DRILLED: dict[str, Value] = {
    "stop_drilled": said("yes"),
    "stop_hole_diameter": recorded(8.0, "mm"),
}


def found(method: str, base: dict[str, Value], **changes: Value | None) -> Result:
    """Evaluate a known crack."""
    return evaluate(method, Use.FOUND_DAMAGE, inputs(base, **changes))


def unknown(method: str, base: dict[str, Value], **changes: Value | None) -> Result:
    """Evaluate structure without known crack."""
    return evaluate(method, Use.NO_KNOWN_CRACK, inputs(base, **changes))


def line(result: Result, symbol: str) -> float:
    """Return the value of the last note line of a symbol."""
    value = [row.value for row in result.note if row.symbol == symbol][-1]
    assert value is not None
    return value
