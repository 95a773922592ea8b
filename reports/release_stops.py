"""What stands between an aircraft and its release, and what is open beside it.

Everything with a limit is read from the rows of the due list, so that nothing is judged
twice; the rest from findings, repairs and events themselves. A constant number of
queries. None listed is not a release: that is for certifying staff.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from datetime import date, timedelta

from fleet.canonical import canonical, digest
from fleet.due import Combine, Counter, Counters, DueState, Remaining
from fleet.models import Aircraft, User
from fleet.selectors.counters import AircraftStanding, aircraft_standing
from repairs.models import DueKind
from reports.due_list import DueList, DueQuery, due_list
from reports.due_rows import DueRow
from reports.release_rules import OPEN_ITEMS, STOPS
from reports.selectors.release_records import Line, record_lines

EMPTY = "nothing recorded here stands open; release is for certifying staff"
WITHIN = 30
CAUSE_OF_KIND = {
    DueKind.DEFERRAL: "deferral",
    DueKind.STAGE_CLOCK: "stage",
    DueKind.VALIDITY: "validity",
    DueKind.LIFE: "life",
    DueKind.ENGINEERING: "engineering",
}
CAUTIONS = (
    "The program records and releases nothing; what is not recorded is on no list.",
    "“No finding” is not “no damage”: it shows where people looked and with which "
    "method.",
    "Blank is not zero: a number that is missing makes its item a stop.",
    "Several small damages can interact; accepted damage is part of every judgement.",
)
STATES_NOW = (
    "The states of findings and repairs are those recorded today; dates and counters "
    "are judged on {as_of}."
)


@dataclass(frozen=True)
class StopsQuery:
    """What is asked: the day, and the flights that every limit must still hold."""

    as_of: date
    today: date
    within_days: int = WITHIN
    flights: int = 1
    leg_minutes: int | None = None

    @property
    def eve(self) -> date:
        """The day to which usage must be recorded."""
        return self.as_of - timedelta(days=1)

    @property
    def needs(self) -> Counters:
        """What the next flights use up on each counter."""
        minutes = max(self.leg_minutes or 1, 1)
        return Counters(minutes, self.flights, self.flights, self.flights)


@dataclass(frozen=True)
class ReleaseStops:
    """The stops and the open items of one aircraft as of a day."""

    aircraft: Aircraft
    query: StopsQuery
    standing: AircraftStanding
    stops: Sequence[Line]
    open_items: Sequence[Line]
    policies: Sequence[str]

    @property
    def behind(self) -> bool:
        """Usage does not reach the eve of the day: counters are too low."""
        current_to = self.standing.current_to
        return current_to is None or current_to < self.query.eve

    @property
    def states_note(self) -> str:
        """Said when the day lies in the past; else empty."""
        if self.query.as_of >= self.query.today:
            return ""
        return STATES_NOW.format(as_of=self.query.as_of)

    @property
    def digest(self) -> str:
        """SHA-256 of the rows as exported: two prints with one digest say the same."""
        return digest(canonical(self.rows))

    @property
    def rows(self) -> list[list[str]]:
        """Stops, then open items, in the columns of `HEADER`."""
        return [
            *(["stop", x.item, x.stands, *_rule(x.cause)] for x in self.stops),
            *(
                ["open", x.item, x.stands, OPEN_ITEMS[x.cause], "", ""]
                for x in self.open_items
            ),
        ]


HEADER = ("kind", "record", "how it stands", "rule", "basis", "lifted by")


def release_stops(
    aircraft: Aircraft, query: StopsQuery, *, user: User | None = None
) -> ReleaseStops:
    """Judged on the counters that are recorded up to the day; None reads as anyone."""
    listed = due_list(
        DueQuery(query.as_of, query.within_days, registration=aircraft.registration),
        user=user,
    )
    standing = next(
        (x for x in listed.fleet if x.aircraft.pk == aircraft.pk),
        None,
    ) or aircraft_standing(aircraft, as_of=query.as_of)
    lines = [
        *record_lines(aircraft, as_of=query.as_of),
        *_due_lines(listed, aircraft, query),
        *_unaccounted(listed, aircraft),
    ]
    return ReleaseStops(
        aircraft,
        query,
        standing,
        _sorted(lines, STOPS),
        _sorted(lines, OPEN_ITEMS),
        listed.policies,
    )


def _sorted(lines: Iterable[Line], causes: Iterable[str]) -> list[Line]:
    order = {cause: number for number, cause in enumerate(causes)}
    mine = [line for line in lines if line.cause in order]
    return sorted(mine, key=lambda line: (order[line.cause], line.item, line.stands))


def _rule(cause: str) -> list[str]:
    rule = STOPS[cause]
    return [rule.words, rule.basis_words, rule.lifted_by]


def _due_lines(
    listed: DueList, aircraft: Aircraft, query: StopsQuery
) -> Iterable[Line]:
    """Phases of events are read from the events themselves: they always stand."""
    for row in listed.rows:
        here = row.aircraft is not None and row.aircraft.pk == aircraft.pk
        if here and row.item.kind != DueKind.PHASE:
            cause = _cause(row) if stops_flight(row, query) else "due"
            yield Line(cause, row.item.item, row.item.address, _stands(row, query))


def _cause(row: DueRow) -> str:
    kind = DueKind(row.item.kind)
    if kind is DueKind.REPLACE:
        return "category_c" if row.item.address[0] == "repair" else "overdue"
    return CAUSE_OF_KIND.get(kind, "overdue")


def stops_flight(row: DueRow, query: StopsQuery) -> bool:
    """Whether what remains does not hold the next flights, or that is not known.

    A calendar limit is the last permitted day; a counter must still hold the flights.
    """
    if row.state is DueState.CANNOT_COMPUTE or _presumed(row, query):
        return True
    short = [_short(line, query.needs) for line in row.status.lines]
    if row.due.combine is Combine.LAST:
        return all(short)
    return any(short)


def _presumed(row: DueRow, query: StopsQuery) -> bool:
    """Counters not reported count against it; once reported, they alone are judged."""
    lags = row.current_to is None or row.current_to < query.eve
    return row.state is DueState.PRESUMED_OVERDUE and lags


def _short(line: Remaining, needs: Counters) -> bool:
    if line.counter is Counter.DAYS:
        return line.remaining < 0
    needed = needs[line.counter]
    return line.remaining < (1 if needed is None else needed)


def _stands(row: DueRow, query: StopsQuery) -> str:
    told = [
        f"due {cell.due}, {f'now {cell.now}, ' if cell.now else ''}"
        f"remaining {cell.remaining}"
        for cell in row.cells
    ]
    reported = row.state is DueState.PRESUMED_OVERDUE and not _presumed(row, query)
    said = row.notes if reported else row.said
    return "; ".join(filter(None, [*told, row.item.basis, *said, *row.item.marks]))


def _unaccounted(listed: DueList, aircraft: Aircraft) -> Iterable[Line]:
    for gap in listed.unaccounted:
        if any(item.pk == aircraft.pk for item in gap.aircraft):
            requirement = gap.requirement
            yield Line(
                "unaccounted",
                f"{requirement.number} {requirement.title}",
                ("requirement", requirement.pk),
                "no answer for this aircraft: what it may have to do is not known",
            )
