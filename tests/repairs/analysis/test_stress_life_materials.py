"""The materials file's curves and laws against typed values and against each other."""

from __future__ import annotations

import math
import tomllib

import pytest

from repairs.analysis.growth.laws import FormanLaw, WalkerLaw
from repairs.analysis.stress_life.curves import StressLifeCurve
from repairs.analysis.types import KSI, Grade, Reference
from tests.factories import FIXTURES
from tests.repairs.analysis.cases import SHEET_CURVES

FILE = tomllib.loads((FIXTURES / "materials.toml").read_text("utf-8"))
MATERIALS = {(m["name"], m["temper"], m["form"]): m for m in FILE["materials"]}


def curves(*key: str) -> dict[float, StressLifeCurve]:
    return {
        row["kt"]: StressLifeCurve(
            row["kt"],
            *(row[name] for name in ("a1", "a2", "a3", "a4")),
            KSI,
            row["source"],
            Grade(row["seen"]),
        )
        for row in MATERIALS[key]["curves"]
    }


def test_the_sheet_family_is_as_typed_from_the_quotations():
    found = curves("2024", "T3", "bare sheet")
    assert [(c.kt, c.a1, c.a2, c.a3, c.a4) for c in found.values()] == list(
        SHEET_CURVES
    )


@pytest.mark.parametrize(
    ("strength", "stress"), [(125, 51.9), (150, 68.9), (200, 72.9), (260, 82.2)]
)
def test_steel_from_memory_is_plausible(strength, stress):
    # Smooth bar at 1e6 cycles, R -1, recomputed independently: 0.32 to 0.46 Ftu.
    (smooth, *notched) = curves("4340", f"Ftu {strength} ksi", "bar").values()
    assert smooth.grade is Grade.MEMORY
    found = smooth.max_stress(6, -1) / KSI
    assert found == pytest.approx(stress, abs=0.06)
    assert 0.3 < found / strength < 0.5
    for curve in notched:
        ratio = smooth.max_stress(6, -1) / curve.max_stress(6, -1)
        assert 2 < ratio < curve.kt


def test_every_curve_falls_with_life_and_says_how_it_was_read():
    for key, material in MATERIALS.items():
        for row in material.get("curves", []):
            curve = curves(*key)[row["kt"]]
            stresses = [curve.max_stress(n, 0) for n in (4, 5, 6, 7)]
            assert stresses == sorted(stresses, reverse=True)
            assert ("from memory" in row["source"]) == (row["seen"] == "memory")


PAIRS = [
    (("2024", "T3", "bare sheet"), 0.35),
    (("7075", "T6", "bare sheet"), 1.0),
]


@pytest.mark.parametrize(("key", "apart"), PAIRS)
@pytest.mark.parametrize("ratio", [0.0, 0.5])
def test_laws_of_two_sources_agree_where_both_have_data(key, apart, ratio):
    # Rate at dK 10 MPa sqrt(m): the sheet's Walker fit and Schwarmann's Forman fit.
    read = Reference("a test", Grade.QUOTED)
    rows = MATERIALS[key]["growth"]
    walker = next(r for r in rows if r.get("law", "walker") == "walker")
    forman = next(r for r in rows if r["key"] == "schwarmann")
    make = (
        WalkerLaw.from_ksi_root_inch
        if walker["unit"].startswith("in/")
        else WalkerLaw.from_mpa_root_metre
    )
    delta = 10 * math.sqrt(1000)
    one = make(walker["c"], walker["m"], walker["gamma"], read).rate(delta, ratio)
    other = FormanLaw.from_mpa_root_metre(
        forman["c"], forman["m"], forman["kc"], read
    ).rate(delta, ratio)
    assert abs(math.log(one / other)) < math.log(1 + apart)


@pytest.mark.parametrize(
    ("key", "rise"),
    [
        (("2024", "T3", "bare sheet"), 1.5),
        (("2014", "T6", "bare sheet"), 1.5),
        (("7475", "T7351", "plate"), 2.0),
    ],
)
def test_thickness_form_gives_back_the_quoted_growth_fit(key, rise):
    # Kc = KIc [1 + B exp(-(t/t0)^2)], t0 = 2.5 (KIc/Sy)^2, with the report's own Sy of
    # 53, 63 and 61 ksi: a round B gives back what is quoted to its last figure.
    strength = {"2024": 53, "2014": 63, "7475": 61}[key[0]]
    plane, fitted = MATERIALS[key]["toughness"]
    size = 2.5 * (plane["value"] / strength) ** 2
    share = fitted["thickness_in"][0] / size
    found = plane["value"] * (1 + rise * math.exp(-(share**2)))
    assert found == pytest.approx(fitted["value"], abs=0.05)
