"""Nothing happened to an aircraft before it was made."""

from __future__ import annotations

import datetime as dt

from fleet.models import Aircraft

BEFORE_MANUFACTURE = (
    "{day} lies before {aircraft} was manufactured on {made}: mend the day here, or "
    "the date of manufacture on the aircraft."
)


def made_before(aircraft: Aircraft, day: dt.date | None) -> list[str]:
    """Why the day cannot be; empty: it can, or the date of manufacture is unknown."""
    made = aircraft.manufactured_on
    if made is None or day is None or day >= made:
        return []
    return [BEFORE_MANUFACTURE.format(day=day, aircraft=aircraft, made=made)]
