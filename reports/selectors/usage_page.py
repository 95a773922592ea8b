"""What an aircraft has flown, and what a correction of it moves."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date
from fractions import Fraction

from django.db.models import QuerySet

from fleet.due import COUNTED, COUNTER_WORDS, Counter
from fleet.models import Aircraft, UsageRecord, User
from fleet.selectors.counters import (
    RATE_DAYS,
    WINDOWS,
    AircraftStanding,
    usage_current,
)
from fleet.units import hours_write
from repairs.selectors.agreement import Disagreement, disagreements
from reports.due_list import DueList, DueQuery, due_list
from reports.due_rows import DueRow


@dataclass(frozen=True)
class RateRow:
    """The daily rate on one counter over each window."""

    counter: str
    rates: Sequence[str]


@dataclass(frozen=True)
class Moved:
    """A due item before and after a correction; one of them may be off the list."""

    mark: str
    item: str
    before: str
    after: str


@dataclass(frozen=True)
class Consequences:
    """Everything of one aircraft that usage decides."""

    due: DueList
    disagree: list[Disagreement]


def usage_rows(aircraft: Aircraft) -> QuerySet[UsageRecord]:
    """Rows that count, newest first, with what they replaced."""
    return (
        usage_current()
        .filter(aircraft=aircraft)
        .select_related("replaces", "entered_by")
        .order_by("-day", "-flight_number")
    )


def rate_rows(standing: AircraftStanding) -> list[RateRow]:
    rates = standing.rates_by_window
    windows = sorted(WINDOWS)
    return [
        RateRow(
            COUNTER_WORDS[counter][0],
            [_rate(counter, rates.get(window, {}).get(counter)) for window in windows],
        )
        for counter in COUNTED
    ]


def _rate(counter: Counter, rate: Fraction | None) -> str:
    """Hours as h:mm, the rest with two decimals."""
    if rate is None:
        return "none"
    return (
        hours_write(int(rate)) if counter is Counter.MINUTES else f"{float(rate):.2f}"
    )


def consequences(user: User, aircraft: Aircraft, as_of: date) -> Consequences:
    """The aircraft's due list and its events that do not agree with usage."""
    query = DueQuery(
        as_of=as_of, within_days=RATE_DAYS, registration=aircraft.registration
    )
    return Consequences(due_list(query, user=user), disagreements(aircraft))


def moved(before: Consequences, after: Consequences) -> list[Moved]:
    """Due items that changed their remaining, state or forecast, or came or went."""
    old = {_key(row): row for row in before.due.rows}
    new = {_key(row): row for row in after.due.rows}
    return [
        Moved(
            mark=(new.get(key) or old[key]).mark,
            item=(new.get(key) or old[key]).item.item,
            before=_words(old.get(key)),
            after=_words(new.get(key)),
        )
        for key in [*new, *(key for key in old if key not in new)]
        if _words(old.get(key)) != _words(new.get(key))
    ]


def due_words(found: Consequences) -> dict[str, str]:
    """Every due item of the aircraft, and how it stands."""
    return {
        f"{row.item.item} ({row.item.basis})": _words(row) for row in found.due.rows
    }


def no_longer(before: Consequences, after: Consequences) -> list[Disagreement]:
    """Events that agreed with usage before and do not any more."""
    known = {(x.what, x.on, x.recorded) for x in before.disagree}
    return [x for x in after.disagree if (x.what, x.on, x.recorded) not in known]


def _key(row: DueRow) -> tuple[str, str, str]:
    return row.item.kind, row.item.item, row.item.basis


def _words(row: DueRow | None) -> str:
    if row is None:
        return "not within 90 days"
    limiting = next((cell for cell in row.cells if cell.limiting), None)
    left = f", {limiting.remaining} left" if limiting else ""
    day = f", forecast {row.forecast}" if row.forecast else ""
    return f"{row.state.value}{left}{day}"
