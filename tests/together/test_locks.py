"""Writings that lock in crossing orders do not stop each other, nor end in a fault.

PostgreSQL locks rows, so two writings can each hold what the other waits for; SQLite
has one writer at a time. Basis: PostgreSQL documentation, 13.3.4 Deadlocks, which
advises that all transactions lock in one order.
"""

from __future__ import annotations

from contextlib import suppress
from threading import Barrier, BrokenBarrierError

import pytest
from django.core.exceptions import ValidationError

from fleet.cleaning import BUSY
from fleet.models import Organisation
from fleet.selectors.verify import problems
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from repairs.models import Finding
from tests.factories import NOW
from tests.record_rows import found
from tests.together.threads import at_once

pytestmark = pytest.mark.django_db


def crossing(model, keys, stream):
    """Two deeds that change the same two rows, each beginning with the other one."""
    met = Barrier(2, timeout=0.3)

    def deed(first, second, name):
        def done():
            with Writing(actor=None, action="rows_set", at=NOW, stream=stream) as w:
                w.change(w.locked(model.objects.all(), pk=first), **name)
                with suppress(BrokenBarrierError):
                    met.wait()
                w.change(w.locked(model.objects.all(), pk=second), **name)

        return done

    one, other = keys
    return deed, (one, other), (other, one)


def test_about_one_aircraft_both_are_written_in_turn(world):
    keys = [found(world).pk, found(world).pk]
    stream = stream_of(world.aircraft)
    deed, ahead, back = crossing(Finding, keys, stream)
    ended = at_once(
        deed(*ahead, {"description": "one"}), deed(*back, {"description": "other"})
    )
    assert ended == [None, None]
    said = set(
        Finding.objects.filter(pk__in=keys).values_list("description", flat=True)
    )
    assert len(said) == 1, "one of the two wrote both rows last"
    assert list(problems()) == []


def test_where_they_do_stop_each_other_one_is_asked_to_send_again(world):
    keys = [_organisation("ONE"), _organisation("TWO")]
    deed, ahead, back = crossing(Organisation, keys, "fleet")
    ended = at_once(deed(*ahead, {"name": "one"}), deed(*back, {"name": "other"}))
    refused = [one for one in ended if one is not None]
    assert [one.messages for one in refused] in ([], [[BUSY]])
    assert all(isinstance(one, ValidationError) for one in refused)
    names = Organisation.objects.filter(pk__in=keys).values_list("name", flat=True)
    assert len(set(names)) == 1
    assert list(problems()) == []


def _organisation(code: str) -> int:
    with Writing(actor=None, action="organisation_create", at=NOW) as w:
        return w.create(Organisation(code=code, name=code, kind="operator")).pk
