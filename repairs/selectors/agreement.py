"""Recorded counters against usage: which events lie outside what was flown that day.

Counters at an event are a recorded fact with their own source. A later correction of
usage changes none of them; it only shows which no longer agree.
"""

from __future__ import annotations

from bisect import bisect_right
from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date
from typing import Any

from fleet.models import Aircraft
from fleet.selectors.counters import aircraft_standing, usage_current
from repairs.models import Accomplishment, Disposition, Event, Finding, Repair


@dataclass(frozen=True)
class Disagreement:
    """An event whose recorded cycles are not among those flown on its day."""

    what: str
    on: date
    recorded: int
    least: int
    most: int


def disagreements(aircraft: Aircraft) -> list[Disagreement]:
    """Events of the aircraft whose cycles lie outside their day, oldest first; seven
    queries. Days for which data are not current are left out."""
    days, totals = _totals(aircraft)
    found = []
    for what, on, recorded in _events(aircraft):
        if not days or not days[0] <= on <= days[-1]:
            continue
        n = bisect_right(days, on)
        least = totals[n - 1] if n else aircraft.opening_cycles
        if not least <= recorded <= totals[n]:
            found.append(Disagreement(what, on, recorded, least, totals[n]))
    return sorted(found, key=lambda x: (x.on, x.what))


def _totals(aircraft: Aircraft) -> tuple[list[date], list[int]]:
    """Days up to the data-current-to date, and total cycles: before the first day, then
    at the end of each."""
    current_to = aircraft_standing(aircraft, as_of=date.max).current_to
    flown: dict[date, int] = {}
    rows = usage_current().filter(aircraft=aircraft, day__lte=current_to)
    for day, cycles in rows.order_by("day").values_list("day", "cycles"):
        flown[day] = flown.get(day, 0) + cycles
    totals = [aircraft.opening_cycles]
    for cycles in flown.values():
        totals.append(totals[-1] + cycles)
    return list(flown), totals


def _events(aircraft: Aircraft) -> Iterable[tuple[str, date, int]]:
    sources: tuple[tuple[Any, str, str], ...] = (
        (Finding.objects.filter(aircraft=aircraft), "found_on", "number"),
        (Repair.objects.filter(aircraft=aircraft), "released_on", "number"),
        (Disposition.objects.filter(aircraft=aircraft), "decided_on", "number"),
        (Event.objects.filter(aircraft=aircraft), "happened_on", "number"),
        (
            Accomplishment.objects.filter(
                subject__aircraft=aircraft, replaced_by__isnull=True
            ),
            "done_on",
            "subject__requirement__number",
        ),
    )
    for rows, day, name in sources:
        known = rows.filter(**{f"{day}__isnull": False}, at_cycles__isnull=False)
        yield from known.values_list(name, day, "at_cycles")
