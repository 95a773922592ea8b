"""R24: an aircraft past its limit of validity is not released.

14 CFR 26.21(b): the limit of validity of the engineering data is a total of flight
cycles, of flight hours, or of both. 14 CFR 121.1115 (from memory): no operation beyond
it. It may be reached and not passed: at the limit there is no further cycle.
"""

from __future__ import annotations

import pytest

from fleet.models import Variant
from reports.release_rules import STOPS
from reports.release_stops import StopsQuery, release_stops
from tests.release_causes import JUDGED_ON, change, fly

pytestmark = pytest.mark.django_db


def lines(world, **asked):
    found = release_stops(world.aircraft, StopsQuery(JUDGED_ON, JUDGED_ON, **asked))
    stands = [one for one in found.stops if one.cause == "validity"]
    beside = [one for one in found.open_items if one.address[0] == "aircraft"]
    return stands, beside


def limit(world, **columns):
    change(world.aircraft, validity_source="ALS 9-10", **columns)


@pytest.mark.parametrize(
    ("cycles", "stands"), [(10_079, True), (10_080, True), (10_081, False)]
)
def test_at_its_limit_in_cycles_there_is_no_further_flight(world, cycles, stands):
    """The aircraft has flown 10,080 FC."""
    limit(world, validity_cycles=cycles)
    assert bool(lines(world)[0]) is stands


@pytest.mark.parametrize(
    ("minutes", "stands"), [(604_000, True), (604_001, False), (650_000, False)]
)
def test_hours_count_as_cycles_do(world, minutes, stands):
    """It has flown 604,000 minutes."""
    limit(world, validity_minutes=minutes)
    assert bool(lines(world)[0]) is stands


def test_of_two_limits_the_one_that_is_reached_stops_it(world):
    limit(world, validity_cycles=10_080, validity_minutes=650_000)
    assert lines(world)[0]


def test_the_flights_ahead_must_lie_within_it(world):
    limit(world, validity_cycles=10_082)
    assert not lines(world, flights=2)[0]
    assert lines(world, flights=3)[0]


def test_flying_on_reaches_it(world):
    limit(world, validity_cycles=10_084)
    assert not lines(world)[0]
    fly(world, JUDGED_ON)
    assert lines(world)[0]


def test_the_variants_limit_holds_where_the_aircraft_has_none_of_its_own(world):
    Variant.objects.filter(pk=world.variant.pk).update(
        validity_cycles=10_000, validity_minutes=None
    )
    world.aircraft.refresh_from_db()
    assert lines(world)[0]
    limit(world, validity_cycles=60_000)
    assert not lines(world)[0]


def test_short_of_it_the_rest_is_shown_beside(world):
    """100 FC at 4 a day are 25 days."""
    limit(world, validity_cycles=10_180)
    stands, beside = lines(world)
    assert not stands
    assert "remaining 100 FC" in beside[0].stands
    assert "26.21" in STOPS["validity"].basis
