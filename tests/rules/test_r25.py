"""R25: dates and counters of an entry cannot precede manufacture; above the recorded
usage they are accepted and flagged.

Trade practice: nothing happened to an aircraft before it was made; a log sheet may be
on its way, so counters ahead of usage are a recorded fact with their source.
"""

from __future__ import annotations

import datetime as dt

import pytest
from django.core.exceptions import ValidationError

from fleet.due import Counters
from fleet.models import Aircraft
from repairs.models import Event, Finding, Repair
from repairs.services.events import event_record
from tests.factories import NOW
from tests.finding_rows import repaired
from tests.record_rows import FOUND, found

pytestmark = pytest.mark.django_db
MADE = dt.date(2015, 6, 1)
EVE = MADE - dt.timedelta(days=1)


@pytest.fixture
def made(world):
    """The aircraft with its date of manufacture on record."""
    Aircraft.objects.filter(pk=world.aircraft.pk).update(manufactured_on=MADE)
    aircraft = Aircraft.objects.get(pk=world.aircraft.pk)
    return aircraft


def test_a_find_before_manufacture_is_refused_beside_its_field(world, made):
    with pytest.raises(ValidationError) as refused:
        found(world, aircraft=made, found_on=EVE)
    assert list(refused.value.message_dict) == ["found_on"]
    assert "lies before Q7-AAA was manufactured on 2015-06-01" in str(refused.value)
    assert not Finding.objects.exists()
    assert found(world, aircraft=made, found_on=MADE).found_on == MADE


def test_a_release_before_manufacture_is_refused(world, made):
    with pytest.raises(ValidationError, match="lies before Q7-AAA was manufactured"):
        repaired(world, None, aircraft=made, findings=(), released_on=EVE, legacy=True)
    assert not Repair.objects.exists()


def test_an_event_before_manufacture_is_refused(world, made):
    with pytest.raises(ValidationError, match="lies before Q7-AAA was manufactured"):
        event_record(
            aircraft=made,
            kind="hail",
            happened_on=EVE,
            counters=Counters(),
            description="",
            actor=None,
            at=NOW,
        )
    assert not Event.objects.exists()


def test_an_unknown_date_of_manufacture_refuses_nothing(world):
    assert world.aircraft.manufactured_on is None
    assert found(world, found_on=dt.date(1995, 1, 1)).state == "reported"


def test_counters_above_usage_are_accepted_and_flagged(world):
    # Usage ends on the day at 10,080 FC and 604,000 min.
    ahead = found(world, found_on=FOUND, at=Counters(cycles=10_081))
    assert (ahead.at_cycles, ahead.counters_ahead) == (10_081, True)
    level = found(world, found_on=FOUND, at=Counters(cycles=10_080))
    assert not level.counters_ahead


def test_counters_below_nought_are_refused(world):
    with pytest.raises(ValidationError):
        found(world, at=Counters(cycles=-1))
