"""The demo operator's aircraft: twelve ARD-52, by serial number, with their states."""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass

DATA_BEGIN = dt.date(2019, 1, 1)
DEMO_TODAY = dt.date(2025, 1, 1)
LAST_DAY = (DEMO_TODAY - DATA_BEGIN).days
CHECK_EVERY_DAYS, CHECK_DAYS = 730, 18
LEGS_A_YEAR = 1_815


@dataclass(frozen=True, slots=True)
class StateSpan:
    """One state of an aircraft; ``until`` is the last day, None while it lasts."""

    state: str
    begin: dt.date
    until: dt.date | None


@dataclass(frozen=True, slots=True)
class DemoAircraft:
    """An aircraft while its data are in the register: days [from_day, to_day)."""

    registration: str
    msn: int
    variant: str
    from_day: int
    to_day: int
    opening_hours: int
    opening_cycles: int
    stored_from_day: int | None = None

    @property
    def joined_on(self) -> dt.date:
        return day_date(self.from_day)

    @property
    def left_on(self) -> dt.date | None:
        """The first day it was no longer here; None for an aircraft still here."""
        return None if self.to_day == LAST_DAY else day_date(self.to_day)

    @property
    def manufactured_on(self) -> dt.date:
        age_days = round(self.opening_cycles / LEGS_A_YEAR * 365.25)
        return self.joined_on - dt.timedelta(days=age_days + 20)

    def in_check(self, day: int) -> bool:
        """Eighteen days every two years, each aircraft at its own phase."""
        phase = 37 * (self.msn % 17)
        return (day - phase) % CHECK_EVERY_DAYS < CHECK_DAYS

    def is_stored(self, day: int) -> bool:
        return self.stored_from_day is not None and day >= self.stored_from_day

    def check_days(self) -> list[int]:
        """The first day in the data of every check."""
        return [
            day
            for day in range(self.from_day, min(self.to_day, LAST_DAY))
            if self.in_check(day)
            and (day == self.from_day or not self.in_check(day - 1))
        ]

    def state_spans(self) -> tuple[StateSpan, ...]:
        """In service, in maintenance or stored, without gap or overlap."""
        spans: list[StateSpan] = []
        state, begin = "", self.from_day
        for day in range(self.from_day, self.to_day + 1):
            now = self._state(day) if day < self.to_day else ""
            if now != state:
                if state:
                    until = day_date(day - 1) if day < LAST_DAY else None
                    spans.append(StateSpan(state, day_date(begin), until))
                state, begin = now, day
        return tuple(spans)

    def _state(self, day: int) -> str:
        if self.is_stored(day):
            return "stored"
        return "in_maintenance" if self.in_check(day) else "in_service"


def day_date(day: int) -> dt.date:
    """The date of a day number; day 0 is the first day of the data."""
    return DATA_BEGIN + dt.timedelta(days=day)


def day_number(date: dt.date) -> int:
    return (date - DATA_BEGIN).days


FLEET = (
    DemoAircraft("Q7-BFA", 1001, "base", 0, LAST_DAY, 18_400, 21_200),
    DemoAircraft("Q7-BFB", 1002, "base", 0, LAST_DAY, 17_950, 20_650),
    DemoAircraft("Q7-BFC", 1003, "base", 0, LAST_DAY, 16_020, 18_700),
    DemoAircraft("Q7-BFD", 1005, "base", 0, LAST_DAY, 15_500, 17_900, 2_085),
    DemoAircraft("Q7-BFE", 1006, "base", 0, 1_826, 14_210, 16_450),
    DemoAircraft("Q7-BFF", 1009, "base", 0, LAST_DAY, 9_030, 10_400),
    DemoAircraft("Q7-BFG", 1010, "base", 212, LAST_DAY, 8_800, 10_020),
    DemoAircraft("Q7-BFH", 1014, "base", 0, LAST_DAY, 6_100, 7_000),
    DemoAircraft("Q7-BFJ", 1021, "S", 0, LAST_DAY, 2_400, 2_750),
    DemoAircraft("Q7-BFK", 1022, "S", 0, LAST_DAY, 2_210, 2_540),
    DemoAircraft("Q7-BFL", 1026, "S", 580, LAST_DAY, 0, 0),
    DemoAircraft("Q7-BFM", 1027, "S", 790, LAST_DAY, 0, 0),
)
BY_MSN = {aircraft.msn: aircraft for aircraft in FLEET}
