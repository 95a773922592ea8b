"""Usage through its service: what is recorded, what is refused and why."""

from __future__ import annotations

import datetime as dt
from dataclasses import replace

import pytest

from fleet.due import Counter
from fleet.models import HistoryEntry, UsageRecord
from fleet.selectors.counters import aircraft_standing, aircraft_standings
from fleet.services.aircraft import aircraft_set_state
from fleet.services.usage import (
    UsageRefused,
    usage_correct,
    usage_import,
    usage_record,
)
from fleet.usage_lines import UsageLine
from tests import due_rows as make
from tests.due_rows import FIRST, SOURCE, day, fly

pytestmark = pytest.mark.django_db


def refused(aircraft, *lines: UsageLine, source: str = SOURCE) -> list[str]:
    with pytest.raises(UsageRefused) as error:
        usage_import(
            actor=None,
            at=make.AT,
            today=make.TODAY,
            aircraft=aircraft,
            lines=lines,
            source=source,
        )
    return error.value.problems


class TestRecord:
    def test_totals_are_the_opening_counters_plus_the_rows(self):
        aircraft = make.aircraft()
        fly(aircraft, 3)
        at = aircraft_standing(aircraft, as_of=day(2)).counters
        assert (at.minutes, at.cycles, at.landings) == (1_200_600, 25_012, 25_012)
        assert at.pressurisations is None
        earlier = aircraft_standing(aircraft, as_of=day(0)).counters
        assert earlier.cycles == 25_004

    def test_an_import_is_one_history_entry(self):
        aircraft = make.aircraft()
        fly(aircraft, 30)
        entry = HistoryEntry.objects.get(action="usage_import")
        assert entry.stream == f"aircraft:{aircraft.pk}"
        assert entry.items.count() == 1

    def test_pressurisations_are_summed_only_while_every_row_has_them(self):
        aircraft = make.aircraft(opening_pressurisations=24_000)
        line = UsageLine(day(0), 4, 200, pressurisations=3)
        record(aircraft, line)
        assert (
            aircraft_standing(aircraft, as_of=day(0)).counters.pressurisations == 24_003
        )
        record(aircraft, UsageLine(day(1), 4, 200))
        assert (
            aircraft_standing(aircraft, as_of=day(1)).counters.pressurisations is None
        )


def record(aircraft, line: UsageLine) -> UsageRecord:
    return usage_record(
        actor=None,
        at=make.AT,
        today=make.TODAY,
        aircraft=aircraft,
        line=line,
        source=SOURCE,
    )


class TestRefusals:
    def test_future_and_foreign_days(self):
        aircraft = make.aircraft(data_to=dt.date(2024, 12, 30))
        problems = refused(
            aircraft,
            UsageLine(dt.date(2025, 1, 2), 1, 60),
            UsageLine(dt.date(2024, 12, 31), 1, 60),
            UsageLine(dt.date(2024, 9, 30), 1, 60),
        )
        assert problems == [
            "2024-09-30 lies before 2024-10-01, the first day recorded here for "
            "Q7-TSA; what was flown earlier is in its opening counters.",
            "2024-12-31 lies after 2024-12-30, the day Q7-TSA left.",
            "2025-01-02 lies after today, 2025-01-01; usage is recorded when it has "
            "been flown.",
        ]
        assert not UsageRecord.objects.exists()

    @pytest.mark.parametrize(
        ("line", "says"),
        [
            (UsageLine(FIRST, -1, 60), "cycles -1 on 2024-10-01 is negative"),
            (UsageLine(FIRST, 1, -60), "minutes -60 on 2024-10-01 is negative"),
            (UsageLine(FIRST, 61, 60), "cycles 61 on 2024-10-01 is above 60"),
            (UsageLine(FIRST, 0, 60), "1:00 FH without a flight"),
            (UsageLine(FIRST, 2, 60, landings=1), "1 landings for 2 flights"),
            (
                UsageLine(FIRST, 2, 60, cycles_without_minutes=3),
                "3 flights without hours on 2024-10-01, but only 2 flights",
            ),
            (UsageLine(FIRST, 2, None), "so all 2 flights are without hours, not 0"),
        ],
    )
    def test_numbers_that_cannot_be(self, line, says):
        (problem,) = refused(make.aircraft(), line)
        assert says in problem

    def test_a_day_is_recorded_once(self):
        aircraft = make.aircraft()
        fly(aircraft, 1)
        assert refused(aircraft, UsageLine(FIRST, 5, 100)) == [
            "2024-10-01 is already recorded with 4 FC and 3:20 FH; to change it, "
            "correct that row."
        ]
        line = UsageLine(day(1), 5, 100)
        assert refused(aircraft, line, line) == [
            "2024-10-02 is given twice in these lines; keep one."
        ]

    def test_days_and_flights_do_not_overlap(self):
        aircraft = make.aircraft()
        fly(aircraft, 1)
        (problem,) = refused(aircraft, UsageLine(FIRST, 1, 50, flight=1))
        assert problem.startswith("2024-10-01 already has a line for the whole day")
        record(aircraft, UsageLine(day(1), 1, 50, flight=1))
        record(aircraft, UsageLine(day(1), 1, 50, flight=2))
        (problem,) = refused(aircraft, UsageLine(day(1), 3, 150))
        assert problem.startswith("2024-10-02 already has flights")

    def test_a_total_that_runs_backwards_names_both_totals(self):
        aircraft = make.aircraft()
        fly(aircraft, 1)
        (problem,) = refused(
            aircraft, UsageLine(day(1), 4, 200, total_cycles=24_990, where="Line 3: ")
        )
        assert problem.startswith(
            "Line 3: the log's total of 24,990 FC after 2024-10-02 is below 25,004 FC"
        )

    def test_a_total_that_disagrees_is_refused_and_the_right_one_taken(self):
        aircraft = make.aircraft()
        fly(aircraft, 1)
        line = UsageLine(day(1), 4, 200, total_cycles=25_009)
        (problem,) = refused(aircraft, line)
        assert "does not agree with 25,008 FC" in problem
        record(aircraft, replace(line, total_cycles=25_008, total_minutes=1_200_400))

    def test_a_source_is_needed(self):
        (problem,) = refused(make.aircraft(), UsageLine(FIRST, 1, 60), source=" ")
        assert problem.startswith("Name the source")


class TestCorrection:
    def test_a_correction_is_a_new_row_and_counts_instead(self):
        aircraft = make.aircraft()
        (row,) = fly(aircraft, 1)
        new = correct(row, UsageLine(FIRST, 6, 300))
        assert (new.revision, new.replaces) == (1, row)
        assert aircraft_standing(aircraft, as_of=FIRST).counters.cycles == 25_006

    def test_what_was_known_before_the_correction_stays_answerable(self):
        aircraft = make.aircraft()
        (row,) = fly(aircraft, 1)
        correct(row, UsageLine(FIRST, 6, 300), at=make.AT + dt.timedelta(hours=2))
        then = make.AT + dt.timedelta(hours=1)
        standing = aircraft_standing(aircraft, as_of=FIRST, known_at=then)
        assert standing.counters.cycles == 25_004

    def test_the_same_row_is_corrected_once(self):
        aircraft = make.aircraft()
        (row,) = fly(aircraft, 1)
        correct(row, UsageLine(FIRST, 6, 300))
        with pytest.raises(UsageRefused, match="correct the row that replaced it"):
            correct(row, UsageLine(FIRST, 7, 300))

    def test_a_correction_needs_its_reason(self):
        (row,) = fly(make.aircraft(), 1)
        with pytest.raises(UsageRefused, match="Say why"):
            correct(row, UsageLine(FIRST, 6, 300), reason="")


def correct(row, line, *, at=make.AT, reason="log page misread") -> UsageRecord:
    return usage_correct(
        actor=None, at=at, record=row, line=line, source=SOURCE, reason=reason
    )


def state(aircraft, word: str, from_on: dt.date) -> None:
    aircraft_set_state(aircraft=aircraft, state=word, from_on=from_on, at=make.AT)


class TestStanding:
    def test_data_are_current_to_the_last_day_before_the_first_gap(self):
        aircraft = make.aircraft()
        assert aircraft_standing(aircraft, as_of=day(9)).current_to == day(-1)
        fly(aircraft, 5)
        fly(aircraft, 3, start=7)
        standing = aircraft_standing(aircraft, as_of=day(20))
        assert standing.current_to == day(4)
        assert standing.counters.cycles == 25_000 + 8 * 4
        fly(aircraft, 2, start=5, cycles=0, minutes=0)
        assert aircraft_standing(aircraft, as_of=day(20)).current_to == day(9)

    def test_rates_are_exact_and_leave_parked_days_out(self):
        aircraft = make.aircraft()
        fly(aircraft, 30)
        fly(aircraft, 30, cycles=0, minutes=0, start=30)
        fly(aircraft, 20, start=60)
        state(aircraft, "parked", day(30))
        state(aircraft, "in_service", day(60))
        standing = aircraft_standing(aircraft, as_of=day(79))
        assert standing.rates_by_window[90][Counter.CYCLES] == 4
        assert standing.rates_by_window[30][Counter.CYCLES] == 4
        assert standing.standing.rates[Counter.MINUTES] == 200

    def test_a_new_or_parked_aircraft_has_no_rate(self):
        aircraft = make.aircraft()
        assert not aircraft_standing(aircraft, as_of=day(1)).standing.rates
        fly(aircraft, 30)
        state(aircraft, "stored", day(30))
        stored = aircraft_standing(aircraft, as_of=day(31))
        assert stored.state == "stored"
        assert not stored.standing.rates

    def test_unknown_hours_are_said_and_replaced_by_the_longest_flight(self):
        aircraft = make.aircraft()
        for flight, minutes in ((1, 48), (2, 97), (3, None)):
            missing = 1 if minutes is None else 0
            line = UsageLine(
                FIRST, 1, minutes, flight=flight, cycles_without_minutes=missing
            )
            record(aircraft, line)
        standing = aircraft_standing(aircraft, as_of=FIRST)
        assert standing.flights_without_hours == 1
        assert standing.counters.minutes == 1_200_000 + 48 + 97 + 97
        assert standing.counters.cycles == 25_003
        assert standing.hours_note.startswith("at least 1 flight without hours")

    def test_hours_stay_unknown_when_no_flight_is_timed(self):
        aircraft = make.aircraft()
        fly(aircraft, 1, minutes=None)
        standing = aircraft_standing(aircraft, as_of=FIRST)
        assert standing.counters.minutes is None
        assert "no timed flight" in standing.hours_note

    @pytest.mark.parametrize("gap", [False, True])
    def test_queries_do_not_grow_with_the_fleet(
        self, gap, django_assert_max_num_queries
    ):
        fleet = [make.aircraft(f"Q7-T{n:02d}") for n in range(12)]
        for n, aircraft in enumerate(fleet):
            fly(aircraft, 2 + n % 3)
            if gap:
                fly(aircraft, 2, start=10)
        with django_assert_max_num_queries(4):
            standings = aircraft_standings(fleet, as_of=day(30))
        assert len(standings) == 12
