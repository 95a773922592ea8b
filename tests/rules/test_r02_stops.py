"""R2, seen from the release: no repair without approved data, nor without stage 1 where
its structure is fatigue critical.

14 CFR 121.379(b): major repairs are done in accordance with approved technical data.
AMC 20-20A appendix 3 annex 1: stage 1, static strength and a schedule for the rest,
comes before return to service. The services refuse such a release; what came from
before our records, or from an import, is found here.
"""

from __future__ import annotations

import pytest

from reports.release_rules import STOPS
from reports.release_stops import StopsQuery, release_stops
from tests.finding_rows import repaired
from tests.record_rows import FOUND, assessed
from tests.release_causes import (
    JUDGED_ON,
    applicable,
    change,
    legacy,
    planned,
    reclassified,
)

pytestmark = pytest.mark.django_db
ABOUT_DATA = {"no_data", "stage_1", "other_serial"}


def stops(world) -> set[str]:
    found = release_stops(world.aircraft, StopsQuery(JUDGED_ON, JUDGED_ON))
    return {one.cause for one in found.stops} & ABOUT_DATA


def test_a_repair_whose_approval_data_nobody_knows_stops_the_release(world):
    row = legacy(world)
    assert stops(world) == {"no_data"}
    reclassified(world, row, stage_reached="3")
    assert stops(world) == set()
    assert STOPS["no_data"].basis == "14 CFR 121.379(b)"


def test_a_published_repair_within_its_limits_needs_no_stage(world):
    """An in-limits reference of the repair manual is approved data by itself."""
    repaired(world, assessed(world))
    assert stops(world) == set()


def test_no_stage_reached_on_fatigue_critical_structure_stops_the_release(world):
    row = legacy(
        world, category="pending", stage_reached="none", criticality="fatigue_critical"
    )
    assert "stage_1" in stops(world)
    reclassified(world, row, "b", stage_reached="1")
    assert stops(world) == set()


def test_unknown_criticality_counts_as_critical(world):
    row = legacy(world, category="pending", stage_reached="none")
    change(row, criticality="unknown")
    assert "stage_1" in stops(world)
    change(row, criticality="secondary")
    assert "stage_1" not in stops(world)


def test_where_the_programme_adopts_the_stages_data_alone_are_not_enough(world):
    """Acceptable means, not law: the stages hold where the programme adopts them."""
    row = repaired(world, assessed(world))
    change(row.approval_document, kind="design_approval")
    assert stops(world) == set()
    change(world.operator, programme_three_stages=True)
    assert stops(world) == {"stage_1"}


def test_data_that_do_not_hold_for_this_serial_are_no_data_for_it(world):
    row = repaired(world, assessed(world), released_on=FOUND)
    applicable(world, row.approval_document, "1", "2")
    assert stops(world) == {"other_serial"}


def test_a_repair_that_is_only_planned_is_not_released_and_stops_nothing(world):
    planned(world)
    assert stops(world) == set()
