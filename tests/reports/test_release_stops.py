"""What stands between an aircraft and its release: each stop with its cause."""

from __future__ import annotations

import csv
import datetime as dt
import json
from io import StringIO

import pytest
from django.core.management import CommandError, call_command

from fleet.due import Counters
from repairs.services.repair_entry import Answered
from repairs.services.requirement_draft import LimitEntry
from reports.release_rules import OPEN_ITEMS, STOPS
from reports.release_stops import EMPTY, StopsQuery, release_stops
from tests.factories import TODAY
from tests.finding_rows import decide, defer, repaired
from tests.queries import assert_same_queries
from tests.record_rows import CRACK, FOUND, assessed, found
from tests.release_causes import CAUSES, JUDGED_ON, fly, legacy, planned, raised

pytestmark = pytest.mark.django_db
NEVER = ("airworthy", "cleared", "fit for", "fit to")


def judged(world, as_of=JUDGED_ON, **asked):
    query = StopsQuery(as_of, asked.pop("today", as_of), **asked)
    return release_stops(world.aircraft, query, user=world.engineer)


def causes(world, **asked) -> set[str]:
    return {one.cause for one in judged(world, **asked).stops}


def beside(world, **asked) -> set[str]:
    return {one.cause for one in judged(world, **asked).open_items}


def test_nothing_recorded_is_no_stop(world):
    found_ = judged(world)
    assert (list(found_.stops), list(found_.open_items)) == ([], [])
    assert not found_.behind


def test_every_stop_has_a_way_in_and_out():
    assert set(CAUSES) == set(STOPS)


@pytest.mark.parametrize("cause", CAUSES)
def test_a_stop_appears_with_its_cause_and_goes_with_it(world, cause):
    lift = CAUSES[cause](world)
    stops = [one for one in judged(world).stops if one.cause == cause]
    assert len(stops) == 1
    assert stops[0].item
    assert stops[0].stands
    lift()
    assert cause not in causes(world)


def test_each_rule_names_its_basis_and_what_would_lift_it():
    for rule in STOPS.values():
        assert rule.words.endswith(".")
        assert rule.basis_words
        assert rule.lifted_by.endswith(".")
        assert not any(word in f"{rule.words} {rule.lifted_by}" for word in NEVER)


class TestOpenItems:
    def test_accepted_damage_is_open_and_no_stop(self, world):
        decide(world, assessed(world))
        assert causes(world) == set()
        assert beside(world) == {"accepted"}

    def test_a_deferral_within_its_limit_shows_the_limit_beside(self, world):
        defer(world, assessed(world), limit=Counters(cycles=12_000))
        assert causes(world) == set()
        (line,) = judged(world).open_items
        assert line.cause == "deferred"
        assert line.stands.endswith(f"found {FOUND}, to 12,000 FC")

    def test_what_is_due_soon_is_shown_within_the_days_asked(self, world):
        """4 FC a day: 100 FC left are 25 days from 20 December, 24 from the next."""
        raised(world, "10,180 FC")
        assert beside(world, within_days=24) == {"due"}
        assert beside(world, within_days=23) == set()

    def test_a_planned_repair_is_no_stop(self, world):
        planned(world)
        assert (causes(world), beside(world)) == (set(), {"planned"})

    def test_damage_not_shown_removed_under_a_repair_is_told_beside(self, world):
        finding = assessed(world)
        repaired(
            world,
            finding,
            findings=(Answered(finding, covers=True, damage_removed="unknown"),),
        )
        assert "hides" in beside(world)

    def test_a_report_that_is_undecided_has_its_own_clock_and_stops_nothing(
        self, world
    ):
        """121.703: a report is due within its hours, whether the aircraft flies or
        not; it is no condition of the release."""
        found(world, damage_type="crack", typed=CRACK, place_entered="STA 500, S-4R")
        assert "report_undecided" in beside(world)
        assert "report_undecided" not in STOPS
        assert set(OPEN_ITEMS).isdisjoint(STOPS)


class TestCounters:
    """D37: before a flight, what remains must hold it: one cycle, and its hours."""

    def test_one_cycle_left_holds_one_flight_and_not_two(self, world):
        raised(world, "10,081 FC")
        assert causes(world) == set()
        assert causes(world, flights=2) == {"overdue"}

    def test_hours_left_must_hold_the_leg(self, world):
        """604,000 minutes are 10,066:40; to 10,070 FH 3:20 are left."""
        raised(world, "10,070 FH")
        assert causes(world, leg_minutes=200) == set()
        assert causes(world, leg_minutes=201) == {"overdue"}

    def test_a_date_is_the_last_permitted_day(self, world):
        """Rulings of the calendar: due on the day itself it may still be flown."""
        finding = assessed(world)
        defer(world, finding, limit=Counters(), limit_on=JUDGED_ON)
        assert causes(world) == set()
        assert causes(world, as_of=JUDGED_ON + dt.timedelta(days=1)) == {"deferral"}

    def test_what_cannot_be_computed_stops_it_and_says_why(self, world):
        """R23: a missing input is never taken as passed."""
        base = LimitEntry("threshold", "500 FC", base="release")
        raised(world, "", limits=(base,))
        (stop,) = judged(world).stops
        assert stop.cause == "overdue"
        assert "cannot be computed: no flight cycles recorded" in stop.stands

    def test_usage_that_lags_is_said_on_top_and_judged_as_it_stands(self, world):
        raised(world, "10,082 FC")
        found_ = judged(world, as_of=JUDGED_ON + dt.timedelta(days=3))
        assert found_.behind
        (stop,) = found_.stops
        assert "presumed overdue, counters not reported since" in stop.stands

    def test_a_day_in_the_past_says_what_is_not_undone(self, world):
        assert judged(world).states_note == ""
        assert "recorded today" in judged(world, today=TODAY).states_note

    def test_what_was_found_later_is_not_in_an_earlier_list(self, world):
        found(world)
        day = FOUND - dt.timedelta(days=1)
        assert causes(world, as_of=day) == set()


class TestOutside:
    @pytest.fixture
    def reader(self, client, world, settings):
        settings.FRAMEBAY_TODAY = JUDGED_ON.isoformat()
        client.force_login(world.users["certifier"])
        return client

    def page(self, reader, world, query="") -> str:
        response = reader.get(f"/aircraft/{world.aircraft.pk}/before-release/{query}")
        assert response.status_code == 200
        return " ".join(response.content.decode().split())

    def test_an_empty_list_says_that_release_is_for_certifying_staff(
        self, reader, world
    ):
        text = self.page(reader, world)
        assert (
            "<p>nothing recorded here stands open; release is for certifying staff</p>"
            in text
        )
        assert "Blank is not zero" in text
        assert "judged on counters to 2024-12-20" in text

    def test_the_page_links_each_record_with_its_rule_and_way_out(self, reader, world):
        finding = found(world)
        decide(world, assessed(world, place_entered="STA 500, S-4R"))
        text = self.page(reader, world)
        assert f'href="/findings/{finding.pk}/"' in text
        assert "M.A.403(b)" in text
        assert "Its assessment against cited data, and a disposition." in text
        assert "accepted, damage remains" in text
        assert EMPTY not in text
        assert not any(word in text for word in NEVER)

    def test_a_field_that_cannot_be_read_is_named(self, reader, world):
        assert "Enter a valid date" in self.page(reader, world, "?as_of=soon")

    def test_the_page_leads_with_usage_that_is_not_current(self, reader, world):
        text = self.page(reader, world, "?as_of=2024-12-25")
        assert "Usage is not current: data end on 2024-12-20" in text

    def test_the_csv_carries_rules_facts_and_digest(self, reader, world):
        found(world)
        address = f"/aircraft/{world.aircraft.pk}/before-release/?format=csv"
        body = reader.get(address).content.decode("utf-8-sig")
        rows = list(csv.reader(StringIO(body)))
        line = dict(zip(rows[0], rows[1], strict=True))
        assert line["kind"] == "stop"
        assert line["basis"] == "M.A.403(b)"
        facts = dict(row for row in rows if len(row) == 2)
        assert facts["as of"] == JUDGED_ON.isoformat()
        assert facts["judged on"] == "counters to 2024-12-20"
        assert facts["stops"] == "1"
        assert len(facts["digest of the rows (SHA-256)"]) == 64

    def test_the_page_costs_the_same_for_twenty_of_everything(self, reader, world):
        def grow(count=19):
            for n in range(count):
                found(world, place_entered=f"STA {500 + n}, S-4R")
                legacy(world)
                raised(world, "10,080 FC")

        grow(1)
        address = f"/aircraft/{world.aircraft.pk}/before-release/"
        assert_same_queries(reader, address, grow, ceiling=50)


def told(world, **options) -> tuple[str, int]:
    """What the command prints, and the status it exits with."""
    out, options = StringIO(), {"as_of": JUDGED_ON.isoformat()} | options
    mark = options.pop("mark", world.aircraft.registration)
    try:
        call_command("release_stops", mark, stdout=out, **options)
    except SystemExit as left:
        return out.getvalue(), int(left.code or 0)
    return out.getvalue(), 0


class TestCommand:
    def test_its_exit_status_tells_whether_any_stop_stands(self, world):
        text, status = told(world)
        assert status == 0
        assert EMPTY in text
        found(world)
        text, status = told(world)
        assert status == 1
        assert EMPTY not in text
        assert "lifted by: Its assessment" in text

    def test_json_has_the_same_stops_and_digest(self, world):
        found(world)
        fly(world)
        text, status = told(world, format="json")
        said = json.loads(text)
        assert status == 1
        assert [one["cause"] for one in said["stops"]] == ["not_assessed"]
        assert said["judged_on"] == f"counters to {JUDGED_ON}"
        assert said["digest"] == judged(world).digest

    def test_csv_says_the_sentence_when_none_stands(self, world):
        text, status = told(world, format="csv")
        assert status == 0
        assert list(csv.reader(StringIO(text)))[1] == [EMPTY]

    @pytest.mark.parametrize(
        ("options", "says"),
        [
            ({"mark": "Q7-NOT"}, "registrations are: Q7-AAA"),
            ({"as_of": "31.1.2025"}, "write it as 2025-01-31"),
            ({"flights": 0}, "give at least 1"),
        ],
    )
    def test_what_is_asked_wrongly_exits_with_two(self, world, options, says):
        with pytest.raises(CommandError, match=says) as refused:
            told(world, **options)
        assert refused.value.returncode == 2
