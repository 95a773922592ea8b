"""Every location text of the demo reads and lands where the damage really is.

The truth was worked out from the drawing rules in inches, apart from the type geometry
file and from the reader, so each checks the others.
"""

from __future__ import annotations

import math
from pathlib import Path

import pytest

from fleet.location.geometry import TypeGeometry, geometry_from_toml
from fleet.location.place import LocationRefused, Place
from fleet.location.placing import place
from fleet.location.reader import read
from reports.demo.fleet import BY_MSN
from reports.demo.records import DemoFinding, DemoRepair, Scenario
from reports.demo.scenario import draw

INCH_MM = 25.4
WRAP_MM = 2 * math.pi * 56 * INCH_MM
FIXTURES = Path(__file__).parents[2] / "fixtures"


@pytest.fixture(scope="module")
def geometry() -> TypeGeometry:
    return geometry_from_toml((FIXTURES / "ard52.toml").read_text())


@pytest.fixture(scope="module", params=[1, 2])
def scenario(request: pytest.FixtureRequest) -> Scenario:
    return draw(request.param)


def placed(record: DemoFinding | DemoRepair, geometry: TypeGeometry) -> Place:
    return place(read(record.location), geometry, BY_MSN[record.msn].variant)


def distance_along(found: Place, x_in: float) -> float:
    """Inches from the true place to the reach of the text; 0 inside it."""
    x_mm = x_in * INCH_MM
    return max(found.x1_mm - x_mm, x_mm - found.x2_mm, 0.0) / INCH_MM


def distance_across(found: Place, across_in: float) -> float:
    """The same round the shell, at its reference radius."""
    assert found.s1_mm is not None
    assert found.s2_mm is not None
    past = (across_in * INCH_MM - found.s1_mm) % WRAP_MM
    reach = found.s2_mm - found.s1_mm
    return 0.0 if past <= reach else min(past - reach, WRAP_MM - past) / INCH_MM


def check(record: DemoFinding | DemoRepair, geometry: TypeGeometry) -> None:
    found, truth = placed(record, geometry), record.truth
    where = f"{record.key}: {record.location} -> {found.canonical}"
    assert found.section == truth.section, where
    assert distance_along(found, truth.x_in) <= truth.x_tolerance_in + 0.01, where
    if truth.across_in is not None:
        away = distance_across(found, truth.across_in)
        assert away <= truth.across_tolerance_in, where


def test_every_true_text_lands_on_the_damage(
    scenario: Scenario, geometry: TypeGeometry
) -> None:
    wrong = set(scenario.planted["side_flips"]) | set(scenario.planted["to_be_placed"])
    for record in [*scenario.findings, *scenario.repairs]:
        if record.key not in wrong:
            check(record, geometry)


def test_no_text_asks_for_a_yes(scenario: Scenario, geometry: TypeGeometry) -> None:
    unplaced = set(scenario.planted["to_be_placed"])
    for record in scenario.findings:
        if record.key not in unplaced:
            assert not placed(record, geometry).needs_yes, record.location


def test_a_flipped_side_lands_as_far_from_the_crown_on_the_other_side(
    scenario: Scenario, geometry: TypeGeometry
) -> None:
    for key in scenario.planted["side_flips"]:
        record = next(f for f in scenario.findings if f.key == key)
        found, across_in = placed(record, geometry), record.truth.across_in
        assert across_in is not None
        assert distance_across(found, -across_in) <= 4.5
        apart = min(2 * abs(across_in), WRAP_MM / INCH_MM - 2 * abs(across_in))
        assert distance_across(found, across_in) > apart - 9


def test_label_600_on_a_stretched_aircraft_lies_640_in_aft(
    scenario: Scenario, geometry: TypeGeometry
) -> None:
    key = scenario.planted["station_label_on_stretched"][0]
    record = next(f for f in scenario.findings if f.key == key)
    found = placed(record, geometry)
    assert found.x1_mm == pytest.approx(640 * INCH_MM)
    on_base = place(read(record.location), geometry, "base")
    assert on_base.map_mm == pytest.approx(found.map_mm)
    assert on_base.x1_mm == pytest.approx(600 * INCH_MM)


def test_words_without_a_station_are_refused(
    scenario: Scenario, geometry: TypeGeometry
) -> None:
    key = scenario.planted["to_be_placed"][0]
    record = next(f for f in scenario.findings if f.key == key)
    with pytest.raises(LocationRefused, match="along the section"):
        placed(record, geometry)
