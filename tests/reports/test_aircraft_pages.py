"""The aircraft list and an aircraft's page."""

from __future__ import annotations

import pytest

from fleet.models import Aircraft, Variant
from fleet.selectors.aircraft import fleet_seen
from fleet.services.aircraft import aircraft_leave, aircraft_set_state
from tests import due_rows as make
from tests.factories import NOW, aircraft_make
from tests.placed_rows import INCH, finding_make, fleet_make, repair_make
from tests.queries import assert_same_queries

pytestmark = pytest.mark.django_db


@pytest.fixture
def fleet():
    return fleet_make()


@pytest.fixture
def reader(client, fleet):
    user = make.user("manager", fleet.operator)
    client.force_login(user)
    return client


def text_of(client, address: str) -> str:
    response = client.get(address)
    assert response.status_code == 200
    return " ".join(response.content.decode().split())


def test_the_list_shows_counters_with_their_date(reader, fleet):
    text = text_of(reader, "/aircraft/")
    assert "3 in the fleet" in text
    assert ">Q7-AAA</a>" in text
    assert "10,000:00" in text  # 600,000 minutes
    assert "2018-12-31" in text  # no usage yet: the day before the first


def test_the_list_counts_open_findings_and_those_to_be_placed(reader, fleet):
    aircraft = fleet.aircraft["Q7-AAA"]
    for x in ((640 * INCH, 642 * INCH), None):
        finding_make(fleet.placing, aircraft, x=x, s=(0.0, 10.0) if x else None)
    finding_make(fleet.placing, aircraft, x=(1e4, 1e4), s=(0.0, 1.0), state="accepted")
    finding_make(fleet.placing, aircraft, x=(1e4, 1e4), s=(0.0, 1.0), state="closed")
    text = text_of(reader, "/aircraft/?text=aaa")
    assert '<td class="num">2 <span class="soon">1 to be placed</span></td>' in text
    assert '<td class="num">1</td></tr>' in text


def test_the_list_is_filtered_by_mark_and_state(reader, fleet):
    aircraft_set_state(
        aircraft=fleet.aircraft["Q7-AAB"],
        state="stored",
        from_on=make.TODAY,
        at=NOW,
    )
    stored = text_of(reader, "/aircraft/?state=stored")
    assert "Q7-AAB" in stored
    assert "Q7-AAA" not in stored
    assert "No aircraft answers this filter" in text_of(reader, "/aircraft/?text=zzz")


def test_an_aircraft_that_left_is_listed_with_its_period(reader, fleet):
    aircraft_leave(
        aircraft=fleet.aircraft["Q7-AAB"],
        left_on=make.TODAY,
        reason="handed back",
        at=NOW,
    )
    text = text_of(reader, "/aircraft/")
    assert "2 in the fleet" in text
    assert "<h2>Ended" in text
    assert f"<td>{make.TODAY}</td>" in text


def test_the_list_costs_the_same_for_more_aircraft(reader, fleet):
    variant = fleet.placing.variants["base"]

    def grow():
        for n in range(6):
            made = aircraft_make(fleet.operator, variant, f"Q7-GR{n}")
            finding_make(fleet.placing, made, x=(1e4, 1e4), s=(0.0, 1.0))

    assert_same_queries(reader, "/aircraft/", grow, ceiling=14)


def test_a_page_costs_the_same_for_more_records(reader, fleet):
    aircraft = fleet.aircraft["Q7-AAA"]

    def grow():
        for n in range(4):
            place = {"x": (1e4 + n, 1e4 + n), "s": (0.0, 1.0)}
            finding_make(fleet.placing, aircraft, **place)
            finding_make(fleet.placing, aircraft, state="accepted", **place)
            repair_make(fleet.placing, aircraft, **place)

    grow()
    assert_same_queries(reader, f"/aircraft/{aircraft.pk}/", grow, ceiling=45)


def test_an_aircraft_that_left_keeps_its_page(reader, fleet):
    aircraft = fleet.aircraft["Q7-AAB"]
    aircraft_leave(aircraft=aircraft, left_on=make.TODAY, reason="handed back", at=NOW)
    text = text_of(reader, f"/aircraft/{aircraft.pk}/")
    assert f"This aircraft left on {make.TODAY}" in text
    assert "Report damage" not in text


def test_a_page_says_what_is_left_to_the_limit_of_validity(reader, fleet):
    Variant.objects.update(validity_cycles=34_000, validity_minutes=32_000 * 60)
    aircraft = fleet.aircraft["Q7-AAA"]
    text = text_of(reader, f"/aircraft/{aircraft.pk}/")
    assert "34,000 FC" in text
    assert ">24,000</td>" in text  # 34,000 - 10,000 FC
    assert ">22,000:00</td>" in text  # 32,000 - 10,000 FH


def test_the_limit_of_validity_stops_the_aircraft_when_it_is_reached(reader, fleet):
    aircraft = fleet.aircraft["Q7-AAA"]
    Variant.objects.update(validity_cycles=10_000)
    assert "The limit of validity is reached" in text_of(
        reader, f"/aircraft/{aircraft.pk}/"
    )


def test_an_aircrafts_own_limit_of_validity_goes_before_its_variants(fleet):
    Variant.objects.update(validity_cycles=34_000, source="type data")
    Aircraft.objects.update(validity_minutes=90_000, validity_source="extension 3")
    row = Aircraft.objects.select_related("variant").get(registration="Q7-AAA")
    (seen,) = fleet_seen([row], as_of=make.TODAY)
    assert (seen.validity.cycles, seen.validity.minutes) == (None, 90_000)
    assert seen.validity.source == "extension 3"


def test_an_aircraft_without_a_limit_of_validity_says_so(reader, fleet):
    text = text_of(reader, f"/aircraft/{fleet.aircraft['Q7-AAA'].pk}/")
    assert "None is recorded for this aircraft or its variant" in text


def test_open_findings_and_accepted_damage_stand_apart(reader, fleet):
    aircraft = fleet.aircraft["Q7-AAA"]
    place = {"x": (1e4, 1e4), "s": (0.0, 1.0)}
    opened = finding_make(fleet.placing, aircraft, **place)
    accepted = finding_make(fleet.placing, aircraft, state="accepted", **place)
    text = text_of(reader, f"/aircraft/{aircraft.pk}/")
    before, _, after = text.partition("Damage accepted")
    assert opened.number in before
    assert accepted.number in after


def test_days_behind_are_counted_to_the_day_before(reader, fleet, settings):
    make.fly(make.aircraft("Q7-FLY", of=fleet.operator), 10)  # to 2024-10-10
    settings.FRAMEBAY_TODAY = "2024-10-11"
    row = text_of(reader, "/aircraft/?text=FLY")
    assert "2024-10-10" in row
    assert "days behind" not in row
    settings.FRAMEBAY_TODAY = "2024-10-14"
    assert "3 days behind" in text_of(reader, "/aircraft/?text=FLY")
