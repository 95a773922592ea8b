"""A new registration, operator or set of rules: the aircraft's next period."""

from __future__ import annotations

import datetime as dt

from django.core.exceptions import ValidationError

from fleet.models import Aircraft, AircraftPeriod, Operator, Organisation, User
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing

LEFT = "{aircraft} left on {day}; a period that follows begins with a new record."
TOO_EARLY = (
    "{day} is not after {began}, when the period that holds began; give a later day."
)


def aircraft_period_open(
    *,
    aircraft: Aircraft,
    operator: Operator,
    registration: str,
    regime: str,
    from_on: dt.date,
    reason: str,
    at: dt.datetime,
    camo: Organisation | None = None,
    owner: Organisation | None = None,
    at_minutes: int | None = None,
    at_cycles: int | None = None,
    at_landings: int | None = None,
    at_pressurisations: int | None = None,
    actor: User | None = None,
) -> AircraftPeriod:
    """End the period that holds the day before, and begin the next.

    Who operated the aircraft until then goes on reading that period, and no other.
    """
    with Writing(
        actor=actor,
        action="aircraft_period_open",
        at=at,
        operator=aircraft.operator,
        stream=stream_of(aircraft),
        reason=reason,
    ) as w:
        row = w.locked(Aircraft.objects.all(), pk=aircraft.pk)
        if row.data_to is not None:
            raise ValidationError(LEFT.format(aircraft=row, day=row.data_to))
        for before in row.periods.filter(to_on__isnull=True):
            if from_on <= before.from_on:
                early = TOO_EARLY.format(day=from_on, began=before.from_on)
                raise ValidationError({"from_on": early})
            w.change(before, to_on=from_on - dt.timedelta(days=1))
        period = w.create(
            AircraftPeriod(
                aircraft=row,
                operator=operator,
                registration=registration,
                regime=regime,
                camo=camo,
                owner=owner,
                from_on=from_on,
                at_minutes=at_minutes,
                at_cycles=at_cycles,
                at_landings=at_landings,
                at_pressurisations=at_pressurisations,
            )
        )
        w.change(row, registration=registration, operator_id=operator.pk)
    return period
