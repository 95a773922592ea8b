"""The materials file: conversion by exact factors, and its refusals."""

from __future__ import annotations

import pytest

from fleet.material_file import MaterialFileError, materials_from_toml
from tests.factories import FIXTURES

HEAD = 'format = 1\n[[materials]]\nname = "X"\n'
ROW = """[[materials.properties]]
quantity = "tension_yield"
value = {value}
unit = "{unit}"
basis = "a"
source = "{source}"
seen = "print"
"""


@pytest.fixture(scope="module")
def shipped():
    return materials_from_toml((FIXTURES / "materials.toml").read_text("utf-8"))


def values(shipped, form: str, name: str = "2024", temper: str = "T3"):
    (entry,) = [
        m
        for m in shipped.materials
        if (m.name, m.temper, m.form) == (name, temper, form)
    ]
    return {(p.quantity, p.basis, p.thickness_min_mm): p for p in entry.properties}


def test_ksi_becomes_mpa_by_the_exact_factor(shipped):
    # 64 ksi = 64 x 6.894757293168 MPa (exact by definition of pound and inch).
    row = values(shipped, "bare sheet")["tension_ultimate_mpa", "a", 0.254]
    assert row.value == pytest.approx(441.26447, abs=1e-5)
    assert row.thickness_max_mm == pytest.approx(3.2512)


def test_density_and_modulus_are_converted(shipped):
    rows = values(shipped, "bare sheet")
    # 0.1 lb/in3 = 2767.990 kg/m3; 10.5 Msi = 72394.95 MPa.
    assert rows["density_kg_per_m3", "typical", 0.0].value == pytest.approx(2767.990)
    assert rows["elastic_modulus_mpa", "typical", 0.0].value == pytest.approx(
        72394.95, abs=0.01
    )


def test_both_growth_laws_are_in_one_unit(shipped):
    rows = values(shipped, "bare sheet")
    c, m = (
        rows[f"walker_faa_{name}", "fit", 0.0].value
        for name in ("c_mm_mpa_root_mm", "m")
    )
    # The FAA fit in SI: 3.116e-8 mm/cycle per (MPa sqrt(m))^m, computed independently.
    assert c * 1000 ** (m / 2) == pytest.approx(3.116e-8, rel=3e-4)
    c, m = (
        rows[f"walker_dowling_{name}", "fit", 0.0].value
        for name in ("c_mm_mpa_root_mm", "m")
    )
    assert c * 1000 ** (m / 2) == pytest.approx(1.42e-8, rel=1e-9)


def test_curve_coefficients_stay_as_printed(shipped):
    rows = values(shipped, "bare sheet")
    printed = [
        rows[f"stress_life_kt1_{name}", "fit", 0.0].value
        for name in ("a1", "a2", "a3", "a4_ksi")
    ]
    assert printed == [11.1, 3.97, 0.56, 15.8]


def test_toughness_is_only_an_adopted_demo_value(shipped):
    for material in shipped.materials:
        assert not [p for p in material.properties if "toughness" in p.quantity]
    (toughness,) = shipped.adopted
    assert toughness.value == pytest.approx(100 * 1000**0.5)
    assert "invented" in toughness.document


def test_every_number_has_a_source_and_how_it_was_read(shipped):
    for material in shipped.materials:
        for row in material.properties:
            assert row.source
            assert row.seen in ("print", "quoted", "memory")
            assert ("from memory" in row.source) == (row.seen == "memory")


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("format = 2", "format 2"),
        ("format = ", "TOML"),
        (HEAD + ROW.format(value='"x"', unit="ksi", source="s"), "number is expected"),
        (HEAD + ROW.format(value=1, unit="stone", source="s"), "write one of ksi"),
        (HEAD + ROW.format(value=1, unit="ksi", source=" "), "source is missing"),
        (HEAD + 2 * ROW.format(value=1, unit="ksi", source="s"), "given twice"),
        (HEAD + ROW.format(value="nan", unit="ksi", source="s"), "number is expected"),
    ],
)
def test_what_is_wrong_is_said(text, said):
    with pytest.raises(MaterialFileError, match=said):
        materials_from_toml(text)
