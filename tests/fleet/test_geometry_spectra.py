"""Load spectra and kinds of load in a geometry file, and the rows they become."""

from __future__ import annotations

import json

import pytest
from django.core.exceptions import ValidationError

from fleet.canonical import canonical, digest, plain
from fleet.location.geometry import GeometryFileError, geometry_from_toml
from fleet.models import Panel, Spectrum
from fleet.services.materials import materials_load
from fleet.services.structure import geometry_load
from repairs.analysis.errors import InputError
from repairs.analysis.spectra.content import spectrum_from
from tests.factories import FIXTURES, NOW
from tests.fleet.test_geometry_file import SMALL

CONTENT = (FIXTURES / "ard52.toml").read_text(encoding="utf-8")
HEAD = '[[spectra]]\nname = "one"\nsource = "invented"\n'
CYCLE = HEAD + 'kind = "cycle"\ncycle_max_ksi = 10\ncycle_ratio = 0\n'
PRESSURE = (
    HEAD + 'kind = "pressure"\nshare_of_normal = 0.9\nground_share_of_normal = 0\n'
    'ground = "doors open"\n'
)
WING = (
    HEAD + 'kind = "wing_sequence"\nmean_flight_stress_mpa = 70\nground_ratio = -0.5\n'
    'ground_ratio_source = "report"\nground_ratio_grade = "quoted"\nseed = 1\n'
    'halves = "drawn_apart"\ntruncate_above = "II"\nomit_below = "IX"\n'
)
SEQUENCE = (
    HEAD + 'kind = "sequence"\npoints_mpa = [0, 100, 20, 80]\nflights = 1\n'
    'repeats = true\nresidue = "repeating"\nclip_above_mpa = 90\n'
)
LEVELS = (
    HEAD + 'kind = "exceedance"\nlevels_mpa = [20, 40, 60]\nnumbers = [100, 10, 0]\n'
    'counts = "exceedances"\ncounted_at = "upper_edge"\nflights = 10\nmean_mpa = 70\n'
    'ground_mpa = -20\nseed = 3\nresidue = "repeating"\n'
)
EVERY = {
    "cycle": CYCLE,
    "pressure": PRESSURE,
    "wing_sequence": WING,
    "sequence": SEQUENCE,
    "exceedance": LEVELS,
}


def with_spectrum(spectrum: str, panel: str = "") -> str:
    return SMALL.replace("thickness_mm = 2", f"thickness_mm = 2\n{panel}") + spectrum


@pytest.mark.parametrize("kind", EVERY)
def test_every_kind_reads_to_what_calculations_take(kind):
    (read,) = geometry_from_toml(with_spectrum(EVERY[kind])).spectra
    data = json.loads(read.content)
    assert read.kind == data["kind"] == kind
    assert spectrum_from(data).as_data() == data


def test_stress_is_converted_where_the_file_is_read():
    (read,) = geometry_from_toml(with_spectrum(CYCLE)).spectra
    assert json.loads(read.content)["cycle_max_mpa"] == pytest.approx(68.947573)


@pytest.mark.parametrize(
    ("kind", "old", "new", "problem"),
    [
        ("cycle", "cycle_ratio = 0", "cycle_ratio = 1", "“cycle_ratio” is"),
        ("cycle", "cycle_max_ksi", "cycle_max", "either “cycle_max” or “cycle_range”"),
        ("cycle", "cycle_max_ksi = 10", "cycle_max_ksi = -1", "must be more than 0"),
        ("cycle", '"cycle"', '"gusts"', "must be one of cycle, pressure"),
        ("cycle", 'source = "invented"', "", "spectra one: “source” is missing"),
        ("pressure", "0.9", "1.2", "a share of the normal differential, 0.01 to 1"),
        ("pressure", "ground_share_of_normal = 0", "ground_share_of_normal = 0.85",
         "-0.1 to 0.9 of “share_of_normal”"),
        ("wing_sequence", "seed = 1", "seed = -1", "a whole number of 0 or more"),
        ("wing_sequence", "-0.5", "1.0", "“ground_ratio” is ground over mean"),
        ("wing_sequence", '"IX"', '"I"', "no gust would be left"),
        ("wing_sequence", '"quoted"', '"sure"', "it must be one of print, derived"),
        ("wing_sequence", "halves", "half", "“halves” is missing"),
        ("sequence", "[0, 100, 20, 80]", "[0]", "two stresses or more"),
        ("sequence", "repeats = true", "repeats = false", "residue half_cycles"),
        ("sequence", "flights = 1", "flights = 0", "a whole number of 1 or more"),
        ("sequence", "clip_above_mpa = 90", "clip_above_mpa = 9\nclip_below_mpa = 10",
         "exchange them"),
        ("sequence", "20, 80", '20, "x"', "a list of finite numbers"),
        ("exceedance", "[20, 40, 60]", "[20, 60, 40]", "must rise from above 0"),
        ("exceedance", "[100, 10, 0]", "[100, 0]", "one for one"),
        ("exceedance", "[100, 10, 0]", "[10, 100, 0]", "exceedances only fall"),
        ("exceedance", "[100, 10, 0]", "[100, 10, 1]", "never exceeded"),
        ("exceedance", '"exceedances"', '"occurrences"', "counted_at = level"),
        ("exceedance", "ground_mpa = -20", "ground_mpa = 90", "above “mean”"),
        ("exceedance", "seed = 3", "seed = 3\ngust = 1", "“gust” is not known here"),
    ],
)  # fmt: skip
def test_each_mistake_is_named(kind, old, new, problem):
    text = EVERY[kind]
    assert text.count(old) >= 1, old
    with pytest.raises(GeometryFileError) as caught:
        geometry_from_toml(with_spectrum(text.replace(old, new, 1)))
    assert any(problem in line for line in caught.value.problems), caught.value.problems
    assert all("spectra one" in line for line in caught.value.problems)


def test_what_calculations_refuse_the_file_refuses_too():
    one_off = json.loads(
        geometry_from_toml(with_spectrum(SEQUENCE)).spectra[0].content
    ) | {"repeats": False}
    with pytest.raises(InputError):
        spectrum_from(one_off)


def test_a_panel_names_a_spectrum_of_the_file():
    panel = 'spectrum = "one"\nload_kind = "shear"'
    geometry = geometry_from_toml(with_spectrum(CYCLE, panel))
    read = geometry.panel("BODY", "SKIN")
    assert (read.spectrum, read.load_kind) == ("one", "shear")
    with pytest.raises(GeometryFileError, match="“two” is not in spectra"):
        geometry_from_toml(with_spectrum(CYCLE, 'spectrum = "two"'))
    with pytest.raises(GeometryFileError, match="must be one of tension, compression"):
        geometry_from_toml(with_spectrum(CYCLE, 'load_kind = "heat"'))


def test_the_wing_sequence_is_refused_off_the_wings_lower_surface():
    with pytest.raises(GeometryFileError, match="lower surface of a transport's wing"):
        geometry_from_toml(with_spectrum(WING, 'spectrum = "one"'))
    where = CONTENT.index("thickness_mm = 1.6", CONTENT.index('label = "tail box"'))
    named = 'spectrum = "ARD-52 wing lower middle"\n'
    with pytest.raises(GeometryFileError, match="holds for the lower surface"):
        geometry_from_toml(CONTENT[:where] + named + CONTENT[where:])


@pytest.fixture
def _materials(db: None) -> None:
    materials_load(path=FIXTURES / "materials.toml", actor=None, at=NOW)


def load(content: str = CONTENT) -> None:
    geometry_load(content=content, actor=None, at=NOW)


@pytest.mark.usefixtures("_materials")
def test_wing_panels_carry_the_sequence_at_their_1_g_stress():
    load()
    lower = Panel.objects.filter(section__code="WING-R", label__startswith="LOWER ")
    boxed = lower.exclude(label__contains="EDGE").select_related("spectrum")
    for panel in boxed:
        content = json.loads(panel.spectrum.content)
        assert content["mean_flight_stress_mpa"] == panel.mean_stress_mpa
        assert content["place"] == "wing_lower_surface"
        assert panel.load_kind == "tension"
    assert len(boxed) == 3
    upper = Panel.objects.get(section__code="WING-R", label="UPPER 0-160")
    assert (upper.spectrum, upper.load_kind) == (None, "compression")
    crown = Panel.objects.get(label="CROWN 500-700")
    assert (crown.spectrum, crown.load_kind) == (None, "pressure")


@pytest.mark.usefixtures("_materials")
def test_the_same_spectrum_is_kept_and_another_is_its_next_revision():
    load()
    load(CONTENT + "\n# read again\n")
    assert Spectrum.objects.count() == 3
    load(CONTENT.replace("seed = 1973", "seed = 1974", 1))
    first, second = Spectrum.objects.filter(name="ARD-52 wing lower inboard")
    assert (second.revision, second.replaces) == (2, first)
    assert second.content_digest == digest(second.content)
    assert Panel.objects.filter(spectrum=second).count() == 2


@pytest.mark.usefixtures("_materials")
def test_a_panel_without_either_keeps_the_digest_it_had():
    load()
    panel = Panel.objects.get(section__code="HT-L", label="LOWER 0-170")
    before = (
        "thickness_mm", "clad_mm", "radius_mm", "limit_stress_mpa", "mean_stress_mpa",
        "ultimate_load_n_per_mm", "material_id", "criticality", "pressurised",
    )  # fmt: skip
    columns = {name: plain(getattr(panel, name)) for name in before}
    assert panel.content_digest == digest(canonical(columns))
    wing = Panel.objects.get(section__code="WING-L", label="LOWER 0-160")
    assert wing.content_digest != digest(
        canonical({name: plain(getattr(wing, name)) for name in before})
    )


@pytest.mark.usefixtures("_materials")
def test_a_bad_spectrum_loads_nothing():
    with pytest.raises(ValidationError, match="ground over mean"):
        load(CONTENT.replace("ground_ratio = -0.5", "ground_ratio = 5", 1))
    assert not Spectrum.objects.exists()
