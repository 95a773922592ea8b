"""R6: a deferral has a limit that cannot be passed; only a new signed decision that
cites data extends it, and its first date never changes.

M.A.403(b): authorised certifying staff decide, with maintenance data, whether a defect
hazards flight safety and may be deferred. M.A.403(c): it is rectified "as soon as
practicable ... and within any limits specified in the maintenance data". AMC
M.A.403(d): the original date is kept.
"""

from __future__ import annotations

import datetime as dt

import pytest
from django.core.exceptions import ValidationError

from fleet.due import Counters
from repairs.models import Approval, DuePoint
from repairs.selectors.deferrals import chain_of, passed_words
from tests.finding_rows import AT, decide, defer
from tests.record_rows import FOUND, HOLDER, MANUAL, assessed

pytestmark = pytest.mark.django_db
LATER = FOUND + dt.timedelta(days=10)


def at(cycles: int) -> Counters:
    return Counters(605_000, cycles, cycles)


def test_a_deferral_without_a_limit_is_refused(world):
    with pytest.raises(ValidationError, match="A deferral has a deferral limit"):
        defer(world, assessed(world), limit=Counters())


def test_a_deferral_is_decided_by_certifying_staff_only(world):
    with pytest.raises(ValidationError, match="certify release"):
        defer(world, assessed(world), by=world.assessor)


def test_a_deferral_cites_maintenance_data(world):
    uncited = type(MANUAL)("repair_manual", "", "")
    with pytest.raises(ValidationError, match="Name the basis"):
        defer(world, assessed(world), basis=uncited)


def test_the_crew_is_informed_between_the_find_and_the_decision(world):
    finding = assessed(world)
    eve = FOUND - dt.timedelta(days=1)
    for told in (None, eve, FOUND + dt.timedelta(days=1)):
        with pytest.raises(ValidationError, match="day the crew was informed"):
            defer(world, finding, crew_informed_on=told)
    assert defer(world, finding).crew_informed_on == FOUND


def test_a_limit_is_counted_from_counters_that_are_stated(world):
    with pytest.raises(ValidationError, match="State the flight cycles"):
        defer(world, assessed(world), at=Counters())


def test_an_extension_replaces_the_deferral_it_extends(world):
    finding = assessed(world)
    defer(world, finding)
    with pytest.raises(ValidationError, match="a further deferral replaces it"):
        defer(world, finding, decided_on=LATER, limit=Counters(cycles=10_500))


def test_an_extension_is_signed_and_cites_data_anew(world):
    finding = assessed(world)
    first = defer(world, finding)
    more = {"decided_on": LATER, "limit": Counters(cycles=10_500), "replaces": first}
    with pytest.raises(ValidationError, match="Name the basis"):
        defer(world, finding, **more, basis=type(MANUAL)("repair_manual", " ", " "))
    second = defer(world, finding, **more)
    signed = Approval.objects.filter(meaning="deferred", disposition=second)
    assert signed.get().signer_person == world.certifier


def test_the_first_date_stays_through_every_extension(world):
    finding = assessed(world)
    first = defer(world, finding)
    second = defer(world, finding, decided_on=LATER, replaces=first)
    third_on = LATER + dt.timedelta(days=1)
    third = defer(world, finding, decided_on=third_on, replaces=second)
    assert {x.found_on for x in (first, second, third)} == {FOUND}
    assert third.number == first.number
    assert chain_of([finding]).words == "found 2024-12-20, deferred 3rd time"
    running = DuePoint.objects.get(closed_on__isnull=True)
    assert "found 2024-12-20, deferred 3rd time" in running.basis


def test_a_limit_that_is_passed_is_not_extended(world):
    finding = assessed(world)
    first = defer(world, finding)
    more = {"decided_on": LATER, "limit": Counters(cycles=10_600), "replaces": first}
    with pytest.raises(ValidationError, match="10,300 FC, now 10,301 FC"):
        defer(world, finding, **more, at=at(10_301))
    # At the limit it is used up, not passed: the decision comes before the next flight.
    assert defer(world, finding, **more, at=at(10_300)).revision == 1


def test_a_calendar_limit_holds_through_its_last_day(world):
    finding = assessed(world)
    first = defer(world, finding, limit=Counters(), limit_on=LATER)
    day_after = LATER + dt.timedelta(days=1)
    more = {"limit": Counters(), "limit_on": dt.date(2025, 3, 1), "replaces": first}
    with pytest.raises(ValidationError, match="is passed"):
        defer(world, finding, **more, decided_on=day_after)
    assert defer(world, finding, **more, decided_on=LATER).revision == 1


def test_past_its_limit_damage_flies_on_a_holders_document_only(world):
    finding = assessed(world)
    first = defer(world, finding)
    more = {"decided_on": LATER, "limit": Counters(cycles=10_600), "replaces": first}
    assert defer(world, finding, **more, at=at(10_400), basis=HOLDER).revision == 1


def test_the_limit_is_not_escaped_by_deciding_to_rectify_and_deferring_anew(world):
    finding = assessed(world)
    first = defer(world, finding)
    decide(world, finding, kind="rectify", replaces=first, decided_on=LATER)
    with pytest.raises(ValidationError, match="is passed"):
        defer(
            world,
            finding,
            decided_on=LATER,
            at=at(10_400),
            limit=Counters(cycles=10_600),
        )


def test_what_is_passed_is_said_in_numbers(world):
    row = defer(world, assessed(world), limit_on=LATER)
    assert passed_words(row, AT, FOUND) == ""
    day_after = LATER + dt.timedelta(days=1)
    assert passed_words(row, at(10_400), day_after) == (
        "10,300 FC, now 10,400 FC and 2024-12-30, now 2024-12-31"
    )
