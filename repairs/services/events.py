"""Events: hard landings, strikes, hail and the like."""

from __future__ import annotations

import datetime as dt

from django.core.exceptions import ValidationError

from fleet.due import Counters
from fleet.models import Aircraft, User
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from fleet.services.numbers import number_next
from fleet.services.parts import counter_columns
from repairs.models import Event
from repairs.services.authority import operator_on
from repairs.services.manufacture import made_before
from repairs.services.reports import questions_open_write


def event_record(
    *,
    aircraft: Aircraft,
    kind: str,
    happened_on: dt.date,
    counters: Counters,
    description: str,
    actor: User | None,
    at: dt.datetime,
) -> Event:
    """An event as reported, with the question whether it is to be reported further.

    It stays open until its inspections are closed.
    """
    if refused := made_before(aircraft, happened_on):
        raise ValidationError({"happened_on": refused})
    operator = operator_on(aircraft, happened_on)
    with Writing(
        actor=actor,
        action="event_record",
        at=at,
        operator=operator,
        stream=stream_of(aircraft),
    ) as w:
        row = w.create(
            Event(
                operator=operator,
                aircraft=aircraft,
                number=number_next(w, operator=operator, kind="V"),
                kind=kind,
                state="open",
                happened_on=happened_on,
                description=description,
                **counter_columns("at", counters),
            )
        )
        questions_open_write(w, row)
    return row


def event_close(
    *, event: Event, reason: str, actor: User | None, at: dt.datetime
) -> Event:
    """The inspection the event called for is done, and what it showed."""
    with Writing(
        actor=actor,
        action="event_close",
        at=at,
        operator=event.operator,
        stream=stream_of(event.aircraft),
        reason=reason,
    ) as w:
        row = w.locked(Event.objects.all(), pk=event.pk)
        w.change(row, state="closed")
    return row
