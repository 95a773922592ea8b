"""Nothing happened to an aircraft or a part before it was made."""

from __future__ import annotations

import datetime as dt

from fleet.models import Aircraft, SafeLifePart

BEFORE_MANUFACTURE = (
    "{day} lies before {item} was manufactured on {made}: mend the day here, or the "
    "date of manufacture on record."
)


def made_before(item: Aircraft | SafeLifePart | None, day: dt.date | None) -> list[str]:
    """Why the day cannot be; empty: it can, or the date of manufacture is unknown."""
    made = item.manufactured_on if item is not None else None
    if made is None or day is None or day >= made:
        return []
    return [BEFORE_MANUFACTURE.format(day=day, item=item, made=made)]
