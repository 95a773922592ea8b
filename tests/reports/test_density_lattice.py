"""Cells of the demonstration type's sections: where they lie and how large they are."""

from __future__ import annotations

import math
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from fleet.location.geometry import Box, Section, geometry_from_toml
from reports.lattice import Lattice, lattice_of

FIXTURE = Path(__file__).parents[2] / "fixtures" / "ard52.toml"
INCH = 25.4
IN2_M2 = 0.0254**2


@pytest.fixture(scope="module")
def geometry():
    return geometry_from_toml(FIXTURE.read_text(encoding="utf-8"))


@pytest.fixture(scope="module")
def fuselage(geometry):
    return geometry.section("FUS")


def uncut(section: Section) -> Section:
    return replace(section, cutouts=())


def row(cells: Lattice, name: str) -> int:
    return list(cells.frames).index(name)


def test_a_whole_bay_has_the_area_of_its_sides(fuselage):
    """20 in by 9 degrees of a 56 in radius: 175.929 in², 0.113502 m²."""
    cells = lattice_of(uncut(fuselage), ["base"])
    one = cells.area_m2["base"][row(cells, "FR 12"), 7]
    assert one == pytest.approx(20 * 56 * math.radians(9) * IN2_M2, rel=1e-12)
    assert one == pytest.approx(0.113502, abs=5e-7)


def test_ten_bays_of_the_barrel_have_the_area_of_a_cylinder(fuselage):
    cells = lattice_of(uncut(fuselage), ["base"])
    first = row(cells, "FR 10")
    cylinder = cells.area_m2["base"][first : first + 10].sum()
    assert cylinder == pytest.approx(2 * math.pi * 56 * 200 * IN2_M2, rel=1e-12)
    assert cylinder == pytest.approx(45.401, abs=5e-4)


def test_tapered_ends_are_frusta(fuselage):
    """Whole skin without cut-outs: the two frusta's mean girths and the barrel."""
    cells = lattice_of(uncut(fuselage), ["base", "S"])
    ends = 2 * math.pi * (20 + 56) / 2 * (180 + 160)
    barrel = 2 * math.pi * 56 * 660
    plug = 2 * math.pi * 56 * 40
    assert cells.area_m2["base"].sum() == pytest.approx((ends + barrel) * IN2_M2)
    assert cells.area_m2["S"].sum() == pytest.approx((ends + barrel + plug) * IN2_M2)


def test_plug_cells_belong_to_the_stretched_variant_alone(fuselage):
    """FR 24A's cell lies in the plug; those about FR 24 and 24B lie half in it."""
    cells = lattice_of(fuselage, ["base", "S"])
    whole = 20 * 56 * math.radians(9) * IN2_M2
    for name, share in (("FR 24", 0.5), ("FR 24A", 0.0), ("FR 24B", 0.5)):
        index = row(cells, name)
        assert cells.area_m2["base"][index, 0] == pytest.approx(share * whole)
        assert cells.area_m2["S"][index, 0] == pytest.approx(whole)


def test_cut_outs_are_left_out(fuselage):
    """Every cut-out's area is missing once; corners count as square."""
    holes = sum(
        (c.box.map2_mm - c.box.map1_mm)
        * (c.box.s2_mm - c.box.s1_mm)
        * fuselage.scale_at((c.box.map1_mm + c.box.map2_mm) / 2)
        for c in fuselage.cutouts
    )
    whole = lattice_of(uncut(fuselage), ["S"]).area_m2["S"].sum()
    skin = lattice_of(fuselage, ["S"]).area_m2["S"].sum()
    assert whole - skin == pytest.approx(holes / 1e6, rel=1e-9)
    assert skin < whole


def test_a_cut_out_over_the_keel_is_taken_from_both_sides_of_the_cut(fuselage):
    half = fuselage.wrap_mm / 2
    hatch = replace(
        fuselage.cutouts[0],
        box=Box(400 * INCH, 440 * INCH, half - 100.0, half + 300.0),
    )
    cells = lattice_of(replace(fuselage, cutouts=(hatch,)), ["base"])
    whole = lattice_of(uncut(fuselage), ["base"])
    lost = (whole.area_m2["base"] - cells.area_m2["base"]).sum(axis=0)
    assert lost.sum() == pytest.approx(40 * INCH * 400.0 / 1e6)
    assert set(np.flatnonzero(lost > 1e-9)) == {20, 21}


def test_wings_are_trapezoids_and_the_fin_has_two_skins(geometry):
    """Chord 110 in at WS 0 and 45 in at WS 480; one skin of one wing."""
    wing = lattice_of(geometry.section("WING-R"), ["base"]).area_m2["base"]
    assert wing.sum() == pytest.approx((110 + 45) / 2 * 480 * IN2_M2)
    fin = geometry.section("FIN")
    skins = lattice_of(fin, ["base"]).area_m2["base"].sum()
    root, tip = fin.size_at(fin.map1_mm), fin.size_at(fin.map2_mm)
    one = (root + tip) / 2 * (fin.map2_mm - fin.map1_mm) / 1e6
    assert skins == pytest.approx(2 * one)


def test_a_door_has_only_its_own_cells(geometry):
    door = geometry.section("DOOR-1L")
    cells = lattice_of(door, ["base"])
    assert 0 < cells.present.sum() < 50
    assert "FR 30" not in {cells.frames[i] for i in np.argwhere(cells.present)[:, 0]}


@pytest.mark.parametrize("code", ["FUS", "WING-L", "FIN", "NAC-1"])
def test_every_point_lies_between_the_edges_of_its_own_cell(geometry, code):
    """The cell found from half-bays, as stored, against the cell found by its edges."""
    section = geometry.section(code)
    cells = lattice_of(section, ["base", "S"])
    generator = np.random.default_rng(5)
    for _ in range(400):
        along = generator.uniform(section.map1_mm, section.map2_mm)
        across = generator.uniform(section.s1_mm, section.s2_mm)
        i, j = cells.cells(
            np.array([section.half_along(along)]),
            np.array([section.half_across(across)]),
        )
        assert cells.along_mm[i[0]] - 1e-6 <= along <= cells.along_mm[i[0] + 1] + 1e-6
        low, high = cells.across_mm[j[0]], cells.across_mm[j[0] + 1]
        turns = (-1, 0, 1) if section.wrap_mm else (0,)
        shifts = [across + turn * (section.wrap_mm or 0.0) for turn in turns]
        assert any(low - 1e-6 <= place <= high + 1e-6 for place in shifts)


def test_either_side_of_a_frame_and_of_the_crown_is_one_cell(fuselage):
    cells = lattice_of(fuselage, ["base"])
    frame = fuselage.frame("20").map_mm
    halves = np.array(
        [fuselage.half_along(frame + d) for d in (-240.0, -1.0, 1.0, 240.0)]
    )
    around = np.array([fuselage.half_across(s) for s in (-100.0, -1.0, 0.0, 100.0)])
    along, across = cells.cells(halves, around)
    assert {cells.frames[i] for i in along} == {"FR 20"}
    assert {cells.stringers[i] for i in across} == {"S-1"}


def test_exposure_adds_each_variants_own_area(fuselage):
    """A plug's cells get the cycles of the aircraft that have the plug, no others."""
    cells = lattice_of(fuselage, ["base", "S"])
    exposure = cells.exposure({"base": 1000.0, "S": 200.0})
    bay = 20 * 56 * math.radians(9) * IN2_M2
    assert exposure[row(cells, "FR 24A"), 3] == pytest.approx(200.0 * bay)
    assert exposure[row(cells, "FR 30"), 3] == pytest.approx(1200.0 * bay)
    assert cells.exposure({}).sum() == 0.0
