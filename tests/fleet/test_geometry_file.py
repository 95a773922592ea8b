"""A geometry file with mistakes: every one is named, with its item and its mending."""

from __future__ import annotations

import re
import tomllib
from pathlib import Path

import pytest

from fleet.location.geometry import GeometryFileError, geometry_from_toml
from fleet.units import FACTORS

ENDINGS = [f"_{unit}" for units in FACTORS.values() for unit in units]
FILE = Path(__file__).parents[2] / "fixtures" / "ard52.toml"

SMALL = """
format = 1
[type]
code = "T-1"
name = "Testbed"
unit = "mm"
source = "invented"
[[variants]]
code = "only"
name = "Testbed"
source = "invented"
[[panel_materials]]
key = "skin"
name = "2024"
temper = "T3"
form = "bare sheet"
clad = false
[[sections]]
code = "BODY"
title = "body"
kind = "shell"
words = ["fuselage"]
station_words = ["STA"]
datum = "nose"
start_mm = 0
end_mm = 1000
reference_mm = 500
[sections.frames]
prefix = "FR"
words = ["FR"]
first_number = 1
count = 4
first_station_mm = 200
pitch_mm = 200
[sections.stringers]
prefix = "S-"
words = ["S"]
origin = "crown"
count = 8
[[sections.panels]]
label = "SKIN"
stations = [0, 1000]
all = true
thickness_mm = 2
material = "skin"
criticality = "principal"
criticality_source = "invented"
source = "invented"
[[zones]]
code = "100"
title = "body"
section = "BODY"
"""


def problems(text: str) -> list[str]:
    with pytest.raises(GeometryFileError) as caught:
        geometry_from_toml(text)
    return caught.value.problems


def changed(*changes: tuple[str, str]) -> str:
    text = SMALL
    for old, new in changes:
        assert text.count(old) >= 1, old
        text = text.replace(old, new, 1)
    return text


def test_the_small_file_is_right() -> None:
    geometry = geometry_from_toml(SMALL)
    assert geometry.section("BODY").frames[3].map_mm == 800.0
    assert geometry.unit == "mm"


@pytest.mark.parametrize(
    ("old", "new", "problem"),
    [
        ("format = 1", "format = 7", "this program reads geometry format 1"),
        (
            'unit = "mm"',
            'unit = "cubit"',
            "“unit” is 'cubit'; it must be one of in, mm",
        ),
        ('code = "T-1"', "", "type: “code” is missing; give a text"),
        (
            "thickness_mm = 2",
            "thickness_mm = -2",
            "panels SKIN: “thickness_mm” is -2; it must be more than 0",
        ),
        (
            "thickness_mm = 2",
            "thickness = 2",
            "panels SKIN: “thickness” is missing; give it with its unit in the key, "
            "as thickness_mm",
        ),
        (
            "thickness_mm = 2",
            "thickness_mm = 2\nthickness_in = 0.08",
            "panels SKIN: give only one of thickness_mm, thickness_in",
        ),
        (
            "thickness_mm = 2",
            "thickness_mm = nan",
            "panels SKIN: “thickness_mm” is nan; it must be a finite number",
        ),
        (
            'material = "skin"',
            'material = "tin"',
            "material “tin” is not in panel_materials; listed are: skin",
        ),
        (
            'criticality = "principal"',
            'criticality = "high"',
            "it must be one of principal, fatigue_critical, secondary, unknown",
        ),
        (
            "stations = [0, 1000]",
            "stations = [1000, 0]",
            "the second lies ahead of the first; exchange",
        ),
        ("stations = [0, 1000]", "stations = [0, 1100]", "reach outside section BODY"),
        ("stations = [0, 1000]", "stations = [0]", "give two of them, [from, to]"),
        (
            "stations = [0, 1000]",
            'stations = [0, "9Z"]',
            "station '9Z' is neither a number nor the label of a listed frame",
        ),
        ("all = true", "", "give its reach across by just one of"),
        ("all = true", 'stringers = ["S-1", "S-99L"]', "no stringer is called 'S-99L'"),
        ("count = 8", "count = 7", "“count” must be even"),
        ("count = 4", "count = 0", "“count” is 0; it must be a whole number of 1"),
        ("pitch_mm = 200", "pitch_mm = 0", "“pitch_mm” is 0; it must be more than 0"),
        ("end_mm = 1000", "end_mm = 0", "“end” is not aft of “start”"),
        ('kind = "shell"', 'kind = "box"', "it must be one of shell, surface"),
        (
            "reference_mm = 500",
            "reference_mm = 500\nprofile_mm = [[0, 500], [0, 400]]",
            "the stations must rise",
        ),
        (
            "reference_mm = 500",
            "reference_mm = 500\nprofile_mm = [[0, 500], [900, 400]]",
            "must reach from “start” to “end”",
        ),
        (
            "reference_mm = 500",
            "reference_mm = 500\ncolour = 'red'",
            "sections BODY: “colour” is not known here",
        ),
        (
            'section = "BODY"',
            'section = "TAIL"',
            "zones 100: section “TAIL” is not listed; use BODY",
        ),
        ("clad = false", "clad = 1", "“clad” is 1; it must be true or false"),
    ],
)
def test_each_mistake_is_named(old: str, new: str, problem: str) -> None:
    found = problems(changed((old, new)))
    assert any(problem in line for line in found), found
    assert len(found) <= 2, found


def test_every_mistake_of_a_file_is_named_at_once() -> None:
    found = problems(
        changed(
            ("thickness_mm = 2", "thickness_mm = 0"),
            ("pitch_mm = 200", "pitch_mm = -1"),
            ("clad = false", "clad = 3"),
            ('section = "BODY"', 'section = "ELSE"'),
            ('name = "Testbed"', "name = 5"),
        )
    )
    for word in ("thickness_mm", "pitch_mm", "clad", "ELSE", "name"):
        assert any(word in line for line in found), (word, found)


def test_what_is_listed_twice_is_named() -> None:
    panel = SMALL[SMALL.index("[[sections.panels]]") : SMALL.index("[[zones]]")]
    text = SMALL.replace(panel, panel + panel)
    assert problems(text) == [
        "sections BODY: panel “SKIN” is listed twice; give each its name."
    ]


def test_a_file_that_is_no_toml_says_where() -> None:
    found = problems("format = = 1")
    assert len(found) == 1
    assert "line 1" in found[0]


def test_a_file_without_variants_is_refused() -> None:
    found = problems(SMALL.replace("[[variants]]", "[[versions]]"))
    assert any("no variant is given" in line for line in found)


def test_a_scatter_factor_below_one_is_refused() -> None:
    policy = """
[[fatigue_policies]]
use = "stress_life"
factor = 0.5
multiplies = "median"
spectrum_severity_inside = false
source = "invented"
"""
    assert "may not lengthen it" in problems(SMALL + policy)[0]


def test_a_plug_of_an_unknown_variant_is_refused() -> None:
    text = FILE.read_text().replace('variants = ["S"]', 'variants = ["T"]', 1)
    assert problems(text) == [
        "sections FUS plug_frames 24A: variant “T” is not listed; name one of base, S."
    ]


def test_a_plug_after_no_frame_is_refused() -> None:
    text = FILE.read_text().replace('after = "24"', 'after = "94"', 1)
    assert (
        "a plug frame stands after frame 94, which is not listed" in problems(text)[0]
    )


def test_a_relief_pressure_below_the_normal_one_is_refused() -> None:
    text = FILE.read_text().replace("relief_psi = 8.6", "relief_psi = 7.6")
    assert "the relief pressure is below the normal one" in problems(text)[0]


def test_a_clad_thickness_of_a_bare_sheet_is_refused() -> None:
    text = changed(("thickness_mm = 2", "thickness_mm = 2\nclad_per_side_mm = 0.1"))
    assert "material “skin” is not clad" in problems(text)[0]


def keys_of(data: object) -> set[str]:
    """Every key of the file at any depth, without its unit."""
    found: set[str] = set()
    if isinstance(data, dict):
        for key, value in data.items():
            bare = next((key[: -len(e)] for e in ENDINGS if key.endswith(e)), key)
            found |= {bare} | keys_of(value)
    elif isinstance(data, list):
        for value in data:
            found |= keys_of(value)
    return found


def test_the_documentation_names_every_key_of_the_demonstration_file() -> None:
    described = FILE.with_name("README.md").read_text()
    data = tomllib.loads(FILE.read_text())
    missing = {
        key
        for key in keys_of(data)
        if not re.search(rf"[`.\[]{key}[_`\]< ]", described)
    }
    assert not missing
