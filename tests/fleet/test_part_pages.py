"""Safe-life pages as people use them."""

from __future__ import annotations

import datetime as dt

import pytest
from django.contrib.messages import get_messages

from fleet.models import PartInstallation
from tests import due_rows as make
from tests.due_rows import FIRST, TODAY, day, fly
from tests.fleet.test_part_services import at, earlier, install, limit, remove

pytestmark = pytest.mark.django_db


@pytest.fixture(autouse=True)
def demonstration_today(settings):
    settings.FRAMEBAY_TODAY = str(TODAY)


@pytest.fixture
def part():
    """4,920 FC at installation day plus 92 days at 4 FC: 5,000 FC limit, 12 days."""
    limit("5,000 FC")
    aircraft, part = make.aircraft(), make.part("0447")
    install(part, aircraft, 20_400, on=dt.date(2020, 1, 1))
    fly(aircraft, 92)
    return part


def as_user(client, role="planner", of=None):
    client.force_login(make.user(role, of))


def text(response) -> str:
    return response.content.decode()


class TestList:
    def test_each_serial_shows_limit_accumulated_remaining_and_forecast(
        self, client, part
    ):
        """25,368 - 20,400 = 4,968 flown; 32 left, 8 days after 2024-12-31."""
        as_user(client)
        page = text(client.get("/safe-life/"))
        for expected in (
            "s/n 0447",
            "Q7-TSA, MLG LH",
            "5,000 FC from manufacture",
            "4,968 FC",
            "<b>32 FC</b>",
            "100 %",
            "2025-01-08",
            "complete",
        ):
            assert expected in page

    def test_what_cannot_be_computed_leads(self, client, part):
        limit("9,000 FC", part_number=make.part_number("ARD-9"))
        broken = make.part(
            "0999", part_number=make.part_number("ARD-9"), chain="broken"
        )
        as_user(client)
        page = text(client.get("/safe-life/"))
        assert page.index(str(broken)) < page.index("s/n 0447")
        assert "the back-to-birth record is broken" in page

    def test_a_filter_finds_by_registration(self, client, part):
        as_user(client)
        assert "s/n 0447" in text(client.get("/safe-life/?text=q7-tsa"))
        assert "No serial matches" in text(client.get("/safe-life/?text=q7-tsx"))

    def test_an_outsider_sees_none(self, client, part):
        as_user(client, of=make.operator("OTH"))
        assert "No serial matches" in text(client.get("/safe-life/"))


class TestPage:
    def test_the_card_shows_stints_and_gaps_as_rows(self, client, part):
        earlier(part, "gap", "blocked", at(0), from_on=FIRST, to_on=day(20))
        as_user(client)
        page = text(client.get(f"/safe-life/{part.pk}/"))
        assert "Q7-TSA, MLG LH, base" in page
        assert "gap, blocked" in page
        assert "The record to birth is not complete" in page

    def test_it_says_what_the_aircraft_shows_when_life_ends(self, client, part):
        as_user(client)
        assert "25,400 FC" in text(client.get(f"/safe-life/{part.pk}/"))


class TestOnAndOff:
    def test_removal_starts_from_the_aircraft_as_flown(self, client, part):
        as_user(client)
        address = f"/safe-life/{part.pk}/remove/"
        assert 'value="25368"' in text(client.get(address))
        response = client.post(
            address,
            {
                "on": "2024-12-31",
                "at_minutes": "20,306:40",
                "at_cycles": "25,368",
                "at_landings": "25,368",
                "reason": "heavy check",
                "state": "in_store",
            },
        )
        assert response.status_code == 302
        assert PartInstallation.objects.get().removed_cycles == 25_368

    def test_a_refused_installation_says_every_reason(self, client, part):
        remove(part, 25_368, on=dt.date(2024, 12, 31), release="")
        other = make.aircraft("Q7-TSB")
        as_user(client)
        response = client.post(
            f"/safe-life/{part.pk}/install/",
            {
                "aircraft": other.pk,
                "position": "MLG LH",
                "configuration": make.configuration().pk,
                "on": "2024-12-30",
                "at_minutes": "20,000:00",
                "at_cycles": "25,000",
                "at_landings": "25,000",
            },
        )
        page = text(response)
        assert "has no release reference" in page
        assert "2024-12-30 lies before 2024-12-31" in page

    def test_a_part_from_store_is_installed(self, client, part):
        spare = make.part("0448")
        other = make.aircraft("Q7-TSB")
        as_user(client)
        response = client.post(
            f"/safe-life/{spare.pk}/install/",
            {
                "aircraft": other.pk,
                "position": "MLG LH",
                "configuration": make.configuration().pk,
                "on": "2024-12-30",
                "at_minutes": "20,000:00",
                "at_cycles": "25,000",
                "at_landings": "25,000",
            },
        )
        (message,) = get_messages(response.wsgi_request)
        assert str(message).startswith("s/n 0448 is installed")


@pytest.mark.parametrize("end", ["", "install/", "remove/"])
def test_an_outsider_finds_no_part(client, part, end):
    as_user(client, of=make.operator("OTH"))
    assert client.get(f"/safe-life/{part.pk}/{end}").status_code == 404


@pytest.mark.parametrize("end", ["install/", "remove/"])
def test_an_auditor_may_not_move_parts(client, part, end):
    as_user(client, "auditor")
    assert client.get(f"/safe-life/{part.pk}/{end}").status_code == 403


@pytest.mark.parametrize("count", [1, 20])
def test_queries_do_not_grow_with_parts(client, count, django_assert_max_num_queries):
    limit("5,000 FC")
    for n in range(count):
        install(make.part(), make.aircraft(f"Q7-T{n:02d}"), 25_000)
    as_user(client)
    with django_assert_max_num_queries(15):
        response = client.get("/safe-life/")
    assert response.content.count(b'<th scope="row">') == count


class TestNew:
    DATA = {"serial": "17", "chain": "complete", "release_reference": "certificate 9"}

    def test_a_serial_of_a_new_part_number(self, client):
        as_user(client)
        data = self.DATA | {"new_number": "ARD-9", "new_title": "Side stay"}
        response = client.post("/safe-life/new/", data)
        page = text(client.get(response.url))
        assert "ARD-9" in page
        assert "so the part counts as due" in page

    @pytest.mark.parametrize("extra", [{}, {"new_number": "ARD-9"}])
    def test_a_serial_needs_its_part_number_with_title(self, client, extra):
        as_user(client)
        page = text(client.post("/safe-life/new/", self.DATA | extra))
        assert "Choose a part number, or give a new one with its title." in page

    def test_a_serial_is_recorded_once(self, client, part):
        as_user(client)
        data = self.DATA | {"serial": "0447", "part_number": part.part_number_id}
        assert "There is one already" in text(client.post("/safe-life/new/", data))

    def test_a_life_limit_is_keyed_with_its_unit(self, client, part):
        as_user(client)
        data = {
            "part_number": part.part_number_id,
            "entered": "4,990",
            "base": "birth",
            "carry_over": "most_restrictive",
            "document": make.document().pk,
            "effective_from": "2024-01-01",
        }
        refused = text(client.post("/safe-life/limits/new/", data))
        assert "“4,990” is not an interval" in refused
        client.post("/safe-life/limits/new/", data | {"entered": "4,990 FC"})
        page = text(client.get(f"/safe-life/{part.pk}/"))
        assert "4,990 FC from manufacture" in page
        assert "awaits second keying" in page

    @pytest.mark.parametrize("address", ["new/", "limits/new/"])
    def test_an_auditor_enters_nothing(self, client, address):
        as_user(client, "auditor")
        assert client.get(f"/safe-life/{address}").status_code == 403
