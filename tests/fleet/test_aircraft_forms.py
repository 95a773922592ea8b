"""Adding an aircraft, keying its counters twice, changing its state: on pages."""

from __future__ import annotations

import datetime as dt

import pytest
from django.core.exceptions import ValidationError

from fleet.models import Aircraft, HistoryItem
from fleet.selectors.verify import problems
from fleet.services import opening
from fleet.services.periods import aircraft_period_open
from tests import factories

pytestmark = pytest.mark.django_db
COUNTERS = {
    "opening_minutes": "18,400:30",
    "opening_cycles": "21,200",
    "opening_landings": "21210",
    "opening_pressurisations": "",
}


@pytest.fixture
def operator():
    return factories.operator_make()


@pytest.fixture
def users(operator):
    return factories.users_make(operator)


@pytest.fixture
def variant():
    return factories.type_bare()[1]


@pytest.fixture
def send(client, users):
    """Send a form as a role; the answer after any redirect."""

    def sent(role, address, **data):
        client.force_login(users[role])
        return client.post(address, data, follow=True)

    return sent


@pytest.fixture
def aircraft(send, operator, variant) -> Aircraft:
    """Recorded on the page by the administrator."""
    send(
        "administrator",
        "/aircraft/new/",
        operator=operator.pk,
        variant=variant.pk,
        serial_number="1001",
        registration="Q7-NEW",
        data_from="2024-10-01",
        state="in_service",
        opening_source="joining record, page 3",
        **COUNTERS,
    )
    return Aircraft.objects.get()


def said(response) -> str:
    return " ".join(response.content.decode().split())


def test_an_aircraft_is_recorded_with_its_period_and_state(aircraft, users):
    assert (aircraft.opening_minutes, aircraft.opening_cycles) == (1_104_030, 21_200)
    assert aircraft.opening_pressurisations is None
    assert aircraft.opening_keyed_by == users["administrator"]
    assert aircraft.periods.get().at_landings == 21_210
    assert aircraft.spans.get().state == "in_service"
    assert list(problems()) == []


def test_a_wrong_entry_is_named_beside_its_field_and_nothing_is_recorded(
    send, operator, variant
):
    text = said(
        send(
            "administrator",
            "/aircraft/new/",
            operator=operator.pk,
            variant=variant.pk,
            registration="Q7-NEW",
            state="in_service",
            **COUNTERS | {"opening_minutes": "18,400 hours"},
        )
    )
    assert "“18,400 hours” is not a time in hours" in text
    assert 'value="18,400 hours"' in text  # as typed
    assert not Aircraft.objects.exists()


def test_a_registration_in_use_is_refused_in_words(send, aircraft, operator, variant):
    text = said(
        send(
            "administrator",
            "/aircraft/new/",
            operator=operator.pk,
            variant=variant.pk,
            serial_number="1002",
            registration="Q7-NEW",
            data_from="2024-10-01",
            state="in_service",
            opening_source="joining record",
            **COUNTERS,
        )
    )
    assert "There is one already" in text
    assert "registration" in text


def test_a_second_entry_that_agrees_is_kept_with_its_person(send, aircraft, users):
    page = f"/aircraft/{aircraft.pk}/"
    send("planner", f"{page}opening/", **COUNTERS)
    aircraft.refresh_from_db()
    assert aircraft.opening_rekeyed_by == users["planner"]
    assert list(problems()) == []


def test_the_second_entry_does_not_see_the_first(client, aircraft, users):
    client.force_login(users["planner"])
    text = said(client.get(f"/aircraft/{aircraft.pk}/opening/"))
    assert "21,200" not in text
    assert "18,400:30" not in text


def test_a_second_entry_that_differs_is_refused_without_showing_the_first(
    send, aircraft
):
    text = said(
        send(
            "planner",
            f"/aircraft/{aircraft.pk}/opening/",
            **COUNTERS | {"opening_cycles": "21300"},
        )
    )
    assert "Your flight cycles differs from the first entry" in text
    assert "21,200" not in text
    aircraft.refresh_from_db()
    assert aircraft.opening_rekeyed_by is None


def test_a_counter_left_out_is_not_a_zero(send, aircraft):
    text = said(
        send(
            "planner",
            f"/aircraft/{aircraft.pk}/opening/",
            **COUNTERS | {"opening_pressurisations": "0"},
        )
    )
    assert "Your pressurisation cycles differs" in text


def test_only_who_keyed_first_mends_the_first_entry_and_says_why(send, aircraft, users):
    address = f"/aircraft/{aircraft.pk}/opening/"
    mended = COUNTERS | {"opening_cycles": "21300"}
    assert "Not saved" in said(send("administrator", address, **mended))
    send("administrator", address, reason="misread a digit", **mended)
    aircraft.refresh_from_db()
    assert aircraft.opening_cycles == aircraft.periods.get().at_cycles == 21_300
    item = HistoryItem.objects.filter(table="fleet_aircraft").last()
    assert item.entry.reason == "misread a digit"
    assert '"opening_cycles":[21200,21300]' in item.changes
    send("planner", address, **mended)
    aircraft.refresh_from_db()
    assert aircraft.opening_rekeyed_by == users["planner"]


def test_agreed_counters_stand(send, aircraft, users):
    send("planner", f"/aircraft/{aircraft.pk}/opening/", **COUNTERS)
    text = said(send("engineer", f"/aircraft/{aircraft.pk}/opening/", **COUNTERS))
    assert opening.AGREED in text


def test_nobody_agrees_with_themselves(aircraft, users, now):
    counters = {name: getattr(aircraft, name) for name in opening.COLUMNS}
    with pytest.raises(ValidationError, match="a second person keys them again"):
        opening.opening_rekey(
            aircraft=aircraft, counters=counters, actor=users["administrator"], at=now
        )


def test_a_state_closes_the_one_before_it(send, aircraft):
    address = f"/aircraft/{aircraft.pk}/state/"
    send(
        "administrator",
        address,
        state="stored",
        from_on="2024-12-01",
        reason="no demand",
    )
    first, second = aircraft.spans.all()
    assert (str(first.to_on), second.state) == ("2024-11-30", "stored")


def test_a_state_cannot_begin_before_the_one_that_holds(send, aircraft):
    address = f"/aircraft/{aircraft.pk}/state/"
    text = said(
        send(
            "administrator",
            address,
            state="stored",
            from_on="2024-09-01",
            reason="no demand",
        )
    )
    assert "lies before" in text
    assert aircraft.spans.count() == 1


def period(operator, **changes):
    return {
        "operator": operator.pk,
        "registration": "Q7-XYZ",
        "regime": "FAA",
        "from_on": "2024-12-01",
        "at_cycles": "21,400",
        "reason": "sold",
    } | changes


def test_the_next_period_ends_the_one_before_it(send, aircraft, operator):
    address = f"/aircraft/{aircraft.pk}/period/"
    text = said(send("administrator", address, **period(operator)))
    assert "<h1>Q7-XYZ" in text
    first, second = aircraft.periods.all()
    assert (first.registration, str(first.to_on)) == ("Q7-NEW", "2024-11-30")
    assert (second.regime, second.at_cycles, second.at_minutes) == ("FAA", 21_400, None)
    aircraft.refresh_from_db()
    assert aircraft.registration == "Q7-XYZ"
    assert list(problems()) == []


def test_a_period_begins_after_the_one_that_holds(send, aircraft, operator):
    address = f"/aircraft/{aircraft.pk}/period/"
    early = period(operator, from_on="2024-10-01")
    text = said(send("administrator", address, **early))
    assert "2024-10-01 is not after 2024-10-01" in text
    assert aircraft.periods.count() == 1


def test_an_aircraft_is_not_handed_to_an_operator_one_does_not_administer(
    send, aircraft
):
    other = factories.operator_make("OTH", "Other Air")
    address = f"/aircraft/{aircraft.pk}/period/"
    assert "Not saved" in said(send("administrator", address, **period(other)))
    assert aircraft.periods.count() == 1


def test_the_operator_before_keeps_its_period_and_reads_no_other(
    send, client, aircraft, users, now
):
    other = factories.operator_make("OTH", "Other Air")
    aircraft_period_open(
        aircraft=aircraft,
        operator=other,
        registration="Q7-XYZ",
        regime="EASA",
        from_on=dt.date(2024, 12, 1),
        reason="sold",
        at=now,
    )
    client.force_login(users["engineer"])
    text = said(client.get(f"/aircraft/{aircraft.pk}/"))
    assert "This aircraft left on 2024-11-30" in text
    assert "<h1>Q7-NEW" in text
    assert "Q7-XYZ" not in text
    client.force_login(factories.user_make(other, "engineer", "theirs"))
    text = said(client.get(f"/aircraft/{aircraft.pk}/"))
    assert "<h1>Q7-XYZ" in text
    assert "Q7-NEW" in text
