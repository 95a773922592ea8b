"""A published solution just outside its range refuses, and just inside computes."""

from __future__ import annotations

from collections.abc import Callable

import pytest

from repairs.analysis.errors import OutOfRangeError
from repairs.analysis.growth import closure, laws, plastic_zone
from repairs.analysis.intensity import (
    bulging,
    corner,
    holes,
    part_through,
    rows,
    small_defect,
    stiffened_sheet,
    through,
)
from repairs.analysis.intensity.part_through import PartThrough
from repairs.analysis.loads import manoeuvre, shell
from repairs.analysis.methods.stop_drilled import stop_hole_kt
from repairs.analysis.scatter import factors, tolerance
from repairs.analysis.spectra import gust_loads
from repairs.analysis.strength import (
    buckling,
    columns,
    crippling,
    residual,
    toughness,
)
from repairs.analysis.stress_life import mean_stress, notches, severity
from repairs.analysis.types import Grade, Reference

LAW = laws.WalkerLaw(1e-12, 3.0, 0.6, Reference("test", Grade.RECORDED))
ANGLE = crippling.Angle


def deep(aspect: float, depth: float) -> PartThrough:
    return PartThrough(depth, depth / aspect, 1.0)


def sheet(flexibility: float = 1e-5) -> stiffened_sheet.StiffenedSheet:
    return stiffened_sheet.StiffenedSheet(
        1.4, 72e3, 0.33, 500, 200, 72e3, 25, 4.8, flexibility
    )


CASES: dict[str, tuple[Callable[[float], object], float, float]] = {
    "secant, 2a/W to 0.7": (
        lambda x: through.centre_crack_secant(x / 2, 1), 0.7, 0.7001),
    "centre crack, 2a/W to 0.99": (
        lambda x: through.centre_crack_tada(x / 2, 1), 0.99, 0.9901),
    "edge crack quartic, a/W to 0.6": (
        lambda x: through.edge_crack_polynomial(x, 1), 0.6, 0.6001),
    "edge crack, a/W to 0.95": (
        lambda x: through.edge_crack_tada(x, 1), 0.95, 0.9501),
    "edge crack in bending quartic, a/W to 0.6": (
        lambda x: through.edge_crack_bending_polynomial(x, 1), 0.6, 0.6001),
    "edge crack in bending, a/W to 0.95": (
        lambda x: through.edge_crack_bending_tada(x, 1), 0.95, 0.9501),
    "double edge crack, 2a/W to 0.99": (
        lambda x: through.double_edge_crack(x / 2, 1), 0.99, 0.9901),
    "one crack at a hole, D/W to 0.5": (
        lambda x: holes.hole_single(1e-3, x, 1), 0.499, 0.501),
    "two cracks at a hole, r + c to 0.45 W": (
        lambda x: holes.hole_double(x - 0.1, 0.2, 1), 0.449, 0.4501),
    "handbook's f0, c/r from 0": (holes.handbook_f0, 0.0, -1e-9),
    "pin factor, D/W to 0.5": (
        lambda x: holes.bearing_factor(0.5, x), 0.5, 0.5001),
    "pin factor, c/r from 0": (
        lambda x: holes.bearing_factor(x, 0.2), 0.0, -0.01),
    "pin on two cracks, c/r from 0.1": (
        lambda x: holes.hole_double_bearing(x, 2, 20), 0.1001, 0.0999),
    "surface crack, a/c from 0.2": (
        lambda x: part_through.surface_crack(deep(x, 0.1), 10, 90), 0.2001, 0.1999),
    "surface crack, a/c to 2": (
        lambda x: part_through.surface_crack(deep(x, 0.1), 10, 90), 1.999, 2.001),
    "surface crack, a/t to 1": (
        lambda x: part_through.surface_crack(deep(1, x), 10, 90), 1.0, 1.001),
    "corner crack at a hole, r/t to 3": (
        lambda x: part_through.corner_crack_at_hole(deep(1, 0.1), x, 50, 10),
        3.0, 3.001),
    "corner crack at a hole, r/t from 0.5": (
        lambda x: part_through.corner_crack_at_hole(deep(1, 0.1), x, 50, 10),
        0.5, 0.499),
    "plate corner crack, a/c from 0.3": (
        lambda x: corner.corner_crack(deep(x, 0.1), 10, 90), 0.301, 0.299),
    "bore crack, a/t to 0.5": (
        lambda x: corner.bore_crack(deep(0.5, x), 1, 50), 0.5, 0.501),
    "bending of a surface crack, a/t to 0.8": (
        lambda x: corner.surface_bending(deep(1, x), 90), 0.8, 0.801),
    "bulging, a/sqrt(Rt) to 5": (bulging.bulging_handbook, 5.0, 5.001),
    "crack round a shell, to 5": (bulging.circumferential_factor, 5.0, 5.001),
    "shell radius above 0": (
        lambda x: bulging.shell_parameter(1, x, 1), 1.0, -1.0),
    "shell thickness above 0": (
        lambda x: bulging.shell_parameter(1, 1, x), 1.0, 0.0),
    "row of cracks, 2a/p to 0.99": (
        lambda x: rows.endless_row(rows.CrackRow(x / 2, 1)), 0.99, 0.991),
    "stiffened sheet, a/b to 2.2": (
        lambda x: stiffened_sheet.stiffened_crack(
            sheet(), x * 500, stiffened_sheet.CrackCentre.MID_BAY),
        0.3, 2.201),
    "small defect, area from 0": (
        lambda x: small_defect.surface_defect_intensity(100, x), 0.0, -1e-9),
    "small defect, length above 0": (
        lambda x: small_defect.semi_ellipse_area(0.1, x), 0.1, 0.0),
    "Walker, R below 1": (lambda x: LAW.rate(100, x), 0.999, 1.0),
    "Elber, R to 0.7": (closure.elber_share, 0.7, 0.701),
    "Elber, R from -0.1": (closure.elber_share, -0.1, -0.101),
    "Newman's opening, R from -1": (
        lambda x: closure.newman_opening(x, 1, 0.3), -1.0, -1.001),
    "Newman's opening, level to 0.8": (
        lambda x: closure.newman_opening(0, 1, x), 0.8, 0.801),
    "plastic zone, yield above 0": (
        lambda x: plastic_zone.irwin_radius(
            100, x, plastic_zone.StressState.PLANE_STRESS),
        1.0, 0.0),
    "thin shell, R/t from 20": (
        lambda x: shell.hoop_stress(0.06, x, 1), 20.0, 19.99),
    "small aeroplanes to 19,000 lb": (
        lambda x: manoeuvre.manoeuvre_limits(x, manoeuvre.Category.NORMAL),
        19_000.0, 19_001.0),
    "negative manoeuvre, up to VD": (
        lambda x: gust_loads.negative_manoeuvre_limit(x, 250, 300), 300.0, 300.1),
    "net section, width removed to the whole": (
        lambda x: residual.net_section_yield(300, x, 1), 1.0, 1.001),
    "long-crack line, 2a from W/3": (
        lambda x: residual.wide_sheet_long_line(3000, x / 2, 1), 0.334, 0.333),
    "fracture, a crack of some length": (
        lambda x: residual.fracture_strength(3000, 1, x), 1e-6, 0.0),
    "plane-strain size, yield above 0": (
        lambda x: toughness.plane_strain_size(1000, x), 1.0, 0.0),
    "Irwin's Kc of sheet, beta to 3": (
        lambda x: toughness.irwin_toughness(100, 100, 1 / x), 2.999, 3.001),
    "plate buckling, b/t from 5": (
        lambda x: buckling.plate_stress(4, 72e3, 0.33, 1, x), 5.0, 4.99),
    "clamped and free plate, Poisson's ratio to 0.33": (
        lambda x: buckling.compression_coefficient(
            buckling.Edges.CLAMPED_FREE, 500, 100, x),
        0.33, 0.331),
    "column, fixity to 4": (
        lambda x: columns.euler_stress(72e3, 5, 500, x), 4.0, 4.01),
    "sheet between rivets, p/t from 3": (
        lambda x: columns.inter_rivet_stress(72e3, 0.33, 1, x, 3, 280), 3.0, 2.99),
    "crippling, b'/t from 3": (
        lambda x: crippling.needham(
            ANGLE(x, x, 1, crippling.FreeEdges.TWO), 72e3, 280),
        3.0, 2.99),
    "dish, no deeper than half its length": (
        lambda x: notches.notch_factor(x, 2), 1.0, 1.001),
    "stop hole, a from rho": (lambda x: stop_hole_kt(x, 1), 1.0, 0.999),
    "hole in a strip, D/W to 0.5": (
        lambda x: severity.hole_kt(x, 1), 0.5, 0.501),
    "Goodman, mean below the strength": (
        lambda x: mean_stress.goodman(10, x, 400), 399.0, 400.0),
    "tolerance factor, two tests": (
        lambda x: tolerance.tolerance_factor(int(x), 0.9, 0.95), 2, 1),
    "scatter factor, one test": (
        lambda x: factors.factor_predictive(0.14, 3, int(x)), 1, 0),
}  # fmt: skip


@pytest.mark.parametrize("name", CASES)
def test_just_outside_its_range_it_refuses(name):
    solution, inside, outside = CASES[name]
    solution(inside)
    with pytest.raises(OutOfRangeError) as refusal:
        solution(outside)
    words = str(refusal.value)
    assert "outside" in words
    assert words.rstrip().endswith(".")


@pytest.mark.parametrize("name", CASES)
def test_no_number_is_outside_every_range(name):
    if name.startswith(("tolerance", "scatter")):
        pytest.skip("a count of tests is a whole number")
    with pytest.raises(OutOfRangeError):
        CASES[name][0](float("nan"))
