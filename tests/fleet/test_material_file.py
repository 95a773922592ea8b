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
CURVE = """[[materials.curves]]
kt = 1.0
a1 = 10.0
a2 = 3.0
a3 = 0.5
a4 = 0.0
stress_unit = "ksi"
{more}
source = "s"
seen = "print"
"""
LAW = """[[materials.growth]]
key = "x"
law = "{law}"
rank = 1
c = 1e-8
m = 3.0
unit = "mm/cycle, MPa sqrt(m)"
source = "s"
seen = "print"
"""
TOUGH = """[[materials.toughness]]
meaning = "{meaning}"
value = 30.0
unit = "ksi sqrt(in)"
width_in = 16.0
held_flat = "{held}"
source = "s"
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


def test_a_toughness_that_is_used_is_only_an_adopted_demo_value(shipped):
    # What is recorded beside it holds for one sheet or for a fit, and is never used by
    # itself: its quantity is another and its basis is typical.
    for material in shipped.materials:
        rows = [p for p in material.properties if "toughness" in p.quantity]
        assert not [p for p in rows if p.quantity.startswith("fracture_toughness")]
        assert {p.basis for p in rows} <= {"typical"}
        assert all("kept from buckling: " in p.source for p in rows)
    adopted = [p for p in shipped.adopted if p.quantity.startswith("fracture")]
    assert {p.form: round(p.value / 1000**0.5, 9) for p in adopted} == {
        "clad sheet": 100.0,
        "plate": 90.0,
    }
    assert all("invented" in p.document for p in shipped.adopted)


def test_what_is_known_of_the_tests_behind_a_curve_is_kept(shipped):
    rows = values(shipped, "bare sheet")
    assert rows["stress_life_kt1_standard_error", "fit", 0.0].value == 0.38
    assert rows["stress_life_kt2_thickness_mm", "fit", 0.0].value == pytest.approx(
        0.090 * 25.4
    )
    assert ("stress_life_kt4_standard_error", "fit", 0.0) not in rows


def test_tested_ratios_are_read_as_a_pair():
    curve = CURVE.format(more="ratios = [-1, 0.5]")
    (entry,) = materials_from_toml(HEAD + curve).materials
    ratios = {p.quantity: p.value for p in entry.properties if "ratio" in p.quantity}
    assert ratios == {
        "stress_life_kt1_ratio_min": -1,
        "stress_life_kt1_ratio_max": 0.5,
    }


def test_a_forman_law_keeps_its_rate_in_other_units(shipped):
    # 2024-T3, dK 20 MPa sqrt(m), R 0: 6.410e-4 mm/cycle, computed independently from
    # the constants as printed.
    rows = values(shipped, "bare sheet")
    c, m, kc = (
        rows[f"forman_dowling_{name}", "fit", 0.0].value
        for name in ("c_mm_mpa_root_mm", "m", "kc_mpa_root_mm")
    )
    delta = 20 * 1000**0.5
    assert c * delta**m / (kc - delta) == pytest.approx(6.410e-4, rel=3e-4)


def test_a_paris_law_keeps_its_rate_in_other_units(shipped):
    # AC 33.14-1: 9.25e-13 m/cycle at 1 MPa sqrt(m).
    rows = values(shipped, "disk", "Ti-6Al-4V", "generic")
    c, m = (
        rows[f"paris_ac3314_{name}", "fit", 0.0].value
        for name in ("c_mm_mpa_root_mm", "m")
    )
    assert c * 1000 ** (m / 2) == pytest.approx(9.25e-10, rel=1e-9)


def test_forms_and_finishes_are_materials_of_their_own(shipped):
    keys = [(m.name, m.temper, m.form) for m in shipped.materials]
    assert len(keys) == len(set(keys))
    smooth = {
        m.form
        for m in shipped.materials
        if (m.name, m.temper) == ("7075", "T6")
        and any(p.quantity == "stress_life_kt1_a1" for p in m.properties)
    }
    assert smooth == {"bare sheet", "various wrought products"}


def test_every_number_has_a_source_and_how_it_was_read(shipped):
    for material in shipped.materials:
        for row in material.properties:
            assert row.source
            assert row.seen in ("print", "quoted", "memory")
            assert ("from memory" in row.source) == (row.seen == "memory")


def test_a_toughness_carries_the_width_of_its_panel():
    text = HEAD + TOUGH.format(meaning="apparent", held="yes")
    (entry,) = materials_from_toml(text).materials
    found = {p.quantity: p for p in entry.properties}
    # 30 ksi sqrt(in) = 30 x 1.0988435 MPa sqrt(m), of the conversion table.
    toughness = found["toughness_apparent_mpa_root_mm"]
    assert toughness.value == pytest.approx(30 * 1.0988435 * 1000**0.5, rel=1e-7)
    assert toughness.source == "s; kept from buckling: yes"
    assert found["toughness_apparent_panel_width_mm"].value == pytest.approx(406.4)


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
        (HEAD + CURVE.format(more="ratios = [-1]"), "ratios reads"),
        (HEAD + LAW.format(law="hart"), "write one of walker, forman, paris"),
        (HEAD + LAW.format(law="forman"), "kc reads"),
        (HEAD + TOUGH.format(meaning="good", held="no"), "write one of plane_strain"),
        (HEAD + TOUGH.format(meaning="apparent", held="?"), "write one of yes, no"),
    ],
)
def test_what_is_wrong_is_said(text, said):
    with pytest.raises(MaterialFileError, match=said):
        materials_from_toml(text)
