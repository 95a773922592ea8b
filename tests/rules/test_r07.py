"""R7: a deferred item not fixed at the check is re-raised, linked, same origin date.

AMC M.A.403(d): a deferred defect that is not rectified is carried over with its
original date.
"""

from __future__ import annotations

import datetime as dt

import pytest
from django.core.exceptions import ValidationError

from fleet.due import Counters
from repairs.selectors.deferrals import chain_of, origin_on
from repairs.services.assessing import finding_assess, finding_link
from tests.factories import NOW, program
from tests.finding_rows import close, defer, repaired
from tests.record_rows import DATA, FOUND, assessed, found

pytestmark = pytest.mark.django_db
CHECK = FOUND + dt.timedelta(days=9)
FURTHER = {"decided_on": CHECK, "limit": Counters(cycles=10_500)}


def again(world, earlier, kind="same_damage"):
    """Recorded anew at the check and linked to what was deferred."""
    finding = found(world, found_on=CHECK, occasion="check")
    finding_link(
        finding=finding,
        earlier=earlier,
        kind=kind,
        decided_by=world.assessor,
        on=CHECK,
        actor=world.engineer,
        at=NOW,
    )
    return finding


def reassessed(world, finding):
    return finding_assess(
        finding=finding,
        proof=program(world.assessor),
        on=CHECK,
        data=DATA,
        actor=world.engineer,
        at=NOW,
    )


def test_the_deferral_decided_again_at_the_check_keeps_number_and_origin(world):
    finding = assessed(world)
    first = defer(world, finding)
    second = defer(world, finding, **FURTHER, replaces=first)
    assert (second.number, second.replaces) == (first.number, first)
    assert second.found_on == FOUND


def test_the_damage_recorded_anew_and_linked_keeps_the_origin_date(world):
    earlier = assessed(world)
    defer(world, earlier)
    finding = reassessed(world, again(world, earlier))
    assert origin_on([finding]) == FOUND
    second = defer(world, finding, **FURTHER)
    assert second.found_on == FOUND
    assert chain_of([finding]).words == "found 2024-12-20, deferred 2nd time"


def test_recording_it_anew_does_not_escape_the_limit_that_is_passed(world):
    earlier = assessed(world)
    defer(world, earlier)
    finding = reassessed(world, again(world, earlier))
    past = Counters(606_000, 10_400, 10_400)
    with pytest.raises(ValidationError, match="10,300 FC, now 10,400 FC"):
        defer(world, finding, **FURTHER, at=past)


def test_different_damage_has_a_date_of_its_own(world):
    earlier = assessed(world)
    defer(world, earlier)
    finding = reassessed(world, again(world, earlier, kind="different"))
    assert defer(world, finding, **FURTHER).found_on == CHECK


def test_damage_after_a_repair_is_new_damage(world):
    earlier = assessed(world)
    defer(world, earlier)
    repaired(world, earlier)
    earlier.refresh_from_db()
    close(world, earlier)
    finding = reassessed(world, again(world, earlier, kind="grew_from"))
    assert origin_on([finding]) == CHECK
