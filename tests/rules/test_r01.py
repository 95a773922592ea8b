"""R1: no release while damage that seriously hazards flight safety stands open.

M.A.403(a): "any aircraft defect that hazards seriously the flight safety shall be
rectified before further flight". What nobody has judged yet counts as such: (b)
leaves that judgement to authorised staff, so it cannot be taken as passed.
"""

from __future__ import annotations

import pytest

from fleet.due import Counters
from reports.release_rules import STOPS
from reports.release_stops import StopsQuery, release_stops
from tests.factories import aircraft_make
from tests.finding_rows import close, decide, defer, rectified, repaired
from tests.record_rows import CRACK, HOLDER, assessed, found
from tests.release_causes import JUDGED_ON, inspected, planned

pytestmark = pytest.mark.django_db


def stops(world) -> dict[str, str]:
    found_ = release_stops(world.aircraft, StopsQuery(JUDGED_ON, JUDGED_ON))
    return {one.cause: one.item for one in found_.stops}


def test_damage_to_rectify_before_further_flight_stops_the_release(world):
    finding = assessed(world)
    decide(world, finding, kind="rectify")
    assert stops(world)["to_rectify"].startswith(finding.number)
    assert STOPS["to_rectify"].basis == "M.A.403(a)"


def test_it_stops_until_the_work_is_recorded_and_certified(world):
    finding = rectified(world)
    assert set(stops(world)) == {"rectified"}
    close(world, finding)
    assert stops(world) == {}


def test_a_planned_repair_does_not_lift_it(world):
    decide(world, assessed(world), kind="rectify")
    planned(world)
    assert set(stops(world)) == {"to_rectify"}


def test_damage_that_nobody_judged_stops_the_release(world):
    finding = found(world)
    assert set(stops(world)) == {"not_assessed"}
    assessed(world, finding)
    assert set(stops(world)) == {"not_decided"}
    decide(world, finding)
    assert stops(world) == {}


def test_a_crack_in_pse_flies_only_on_the_holders_approval(world):
    finding = assessed(world, damage_type="crack", typed=CRACK, element="skin")
    decide(
        world,
        finding,
        kind="accept_with_inspection",
        basis=HOLDER,
        limit=Counters(cycles=10_300),
        new_requirement=inspected(world, "50 FC", "repeat"),
    )
    assert "crack" not in stops(world)


def test_damage_deferred_within_its_limit_does_not_stop_it(world):
    """M.A.403(c): what does not hazard flight safety may be deferred within limits."""
    defer(world, assessed(world))
    assert stops(world) == {}


def test_another_aircrafts_damage_does_not_stop_this_one(world):
    other = aircraft_make(world.operator, world.variant, "Q7-AAB")
    found(world, aircraft=other)
    assert stops(world) == {}


def test_an_answer_to_one_damage_leaves_the_other_standing(world):
    one, two = assessed(world), assessed(world, place_entered="STA 500, S-4R")
    decide(world, one, two, kind="rectify")
    close(world, _repaired(world, one))
    assert stops(world)["to_rectify"].startswith(two.number)


def _repaired(world, finding):
    repaired(world, finding)
    finding.refresh_from_db()
    return finding
