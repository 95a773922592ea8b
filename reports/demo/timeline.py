"""The demo is loaded in the order in which its records were entered."""

from __future__ import annotations

import datetime as dt
from collections.abc import Callable, Iterable
from dataclasses import dataclass
from enum import IntEnum
from itertools import groupby

from reports.demo.fleet import DATA_BEGIN, DEMO_TODAY

Act = Callable[[dt.datetime], None]


class Rank(IntEnum):
    """The order of one month's papers on the desk."""

    AIRCRAFT = 0
    STATE = 1
    USAGE = 2
    PART = 3
    REMOVE = 4
    INSTALL = 5
    GAP = 6
    EVENT = 7
    FINDING = 8
    MEASUREMENT = 9
    ASSESSMENT = 10
    DISPOSITION = 11
    REPAIR = 12
    REQUIREMENT = 13
    REKEYING = 14
    ACCOMPLISHMENT = 15
    CLOSING = 16


@dataclass(frozen=True, slots=True)
class Step:
    """One call of a service: the day of the record, its rank on that day, and a key.

    ``joined_on`` is when the aircraft's data begin: what is older was entered then.
    """

    day: dt.date
    rank: Rank
    key: str
    act: Act
    joined_on: dt.date = DATA_BEGIN

    @property
    def entered_on(self) -> dt.date:
        """With the month's papers, on the first day after it; never after today.

        Records older than the data are entered on the day the aircraft joins.
        """
        if self.day < self.joined_on:
            return self.joined_on
        return min(month_after(self.day), DEMO_TODAY)


def month_after(day: dt.date) -> dt.date:
    """The first day of the month after this day's."""
    year, month0 = divmod(day.year * 12 + day.month, 12)
    return dt.date(year, month0 + 1, 1)


def steps_run(steps: Iterable[Step], say: Callable[[str], None]) -> None:
    """Run the steps in order; each entry is one second after the one before it."""
    ordered = sorted(steps, key=lambda s: (s.entered_on, s.rank, s.day, s.key))
    year = 0
    for entered_on, on_day in groupby(ordered, key=lambda step: step.entered_on):
        if entered_on.year != year:
            year = entered_on.year
            say(f"records entered in {year}")
        at = dt.datetime.combine(entered_on, dt.time(6), dt.UTC)
        for second, step in enumerate(on_day):
            step.act(at + dt.timedelta(seconds=second))
