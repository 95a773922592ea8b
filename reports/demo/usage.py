"""Daily utilisation of the demo fleet, and the counters it adds up to."""

from __future__ import annotations

import datetime as dt
import math
from dataclasses import dataclass

from reports.demo.fleet import (
    BY_MSN,
    FLEET,
    DemoAircraft,
    day_date,
    day_number,
)
from reports.demo.stream import Stream

LEGS_A_DAY, MOST_LEGS = 5.6, 10
SLACK_DAYS = range(440, 620)
SHORTEST_LEG_MIN = 18
HOURS_MISSING = {1002: 1_500, 1010: 1_901, 1014: 2_153}
"""The first flying day from here on has one leg whose hours nobody wrote down."""


@dataclass(frozen=True, slots=True)
class UsageDay:
    """What one aircraft flew on one day; a day without flight is a row too."""

    msn: int
    day: dt.date
    cycles: int
    minutes: int
    cycles_without_minutes: int


@dataclass(frozen=True, slots=True)
class Counters:
    """An aircraft's counters at one moment."""

    minutes: int
    cycles: int


class Logbook:
    """The usage of one aircraft and its counters at the end of any day."""

    def __init__(self, aircraft: DemoAircraft, days: list[UsageDay]) -> None:
        self.aircraft = aircraft
        self.days = days
        minutes, cycles = aircraft.opening_hours * 60, aircraft.opening_cycles
        self._totals = [Counters(minutes, cycles)]
        for day in days:
            minutes, cycles = minutes + day.minutes, cycles + day.cycles
            self._totals.append(Counters(minutes, cycles))

    @property
    def final(self) -> Counters:
        return self._totals[-1]

    def at(self, date: dt.date) -> Counters:
        """At the end of a day; before the data, in proportion to the opening age."""
        index = day_number(date) - self.aircraft.from_day + 1
        if index > 0:
            return self._totals[min(index, len(self._totals) - 1)]
        opening, born = self._totals[0], self.aircraft.manufactured_on
        age = (self.aircraft.joined_on - born).days
        lived = max(0, (date - born).days)
        return Counters(
            opening.minutes * lived // age,
            opening.cycles * lived // age,
        )

    def date_at_cycles(self, cycles: int) -> dt.date:
        """The first day whose evening count reaches these cycles."""
        if cycles > self.aircraft.opening_cycles:
            low, high = 0, len(self._totals) - 1
            while low < high:
                middle = (low + high) // 2
                if self._totals[middle].cycles >= cycles:
                    high = middle
                else:
                    low = middle + 1
            return day_date(self.aircraft.from_day + low - 1)
        born = self.aircraft.manufactured_on
        age = (self.aircraft.joined_on - born).days
        share = cycles / self.aircraft.opening_cycles
        return born + dt.timedelta(days=min(age - 1, math.ceil(age * share)))


def logbooks_draw(seed: int) -> dict[int, Logbook]:
    """The usage of the whole fleet, by serial number."""
    return {
        aircraft.msn: Logbook(aircraft, _usage_draw(seed, aircraft))
        for aircraft in FLEET
    }


def years_of_service(date: dt.date, msn: int) -> float:
    return (date - BY_MSN[msn].manufactured_on).days / 365.25


def _usage_draw(seed: int, aircraft: DemoAircraft) -> list[UsageDay]:
    stream = Stream(seed, "util", aircraft.msn)
    missing_from = HOURS_MISSING.get(aircraft.msn)
    rows = []
    for day in range(aircraft.from_day, aircraft.to_day):
        legs = _legs_draw(stream, aircraft, day)
        without = 0
        if missing_from is not None and day >= missing_from and len(legs) > 1:
            legs[-1], without, missing_from = 0, 1, None
        if aircraft.is_stored(day):
            legs = []
        rows.append(
            UsageDay(aircraft.msn, day_date(day), len(legs), sum(legs), without)
        )
    return rows


def _legs_draw(stream: Stream, aircraft: DemoAircraft, day: int) -> list[int]:
    """Minutes of each leg of a day: counts Poisson-like, lengths skewed."""
    if aircraft.in_check(day):
        return []
    date = day_date(day)
    year_angle = 2 * math.pi * (date.timetuple().tm_yday - 105) / 365.25
    mean = LEGS_A_DAY * (1 + 0.18 * math.sin(year_angle))
    mean *= 0.35 if day in SLACK_DAYS else 1.0
    mean *= 0.8 if date.weekday() == 5 else 1.0
    return [
        max(SHORTEST_LEG_MIN, int(stream.lognormal(52, 0.28)))
        for _ in range(stream.poisson(mean, at_most=MOST_LEGS))
    ]
