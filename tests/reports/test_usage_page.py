"""Usage on its page: recorded, pasted, corrected, with what a correction moves."""

from __future__ import annotations

import pytest
from django.contrib.messages import get_messages
from django.core.files.uploadedfile import SimpleUploadedFile

from fleet.models import UsageRecord
from repairs.models import Finding
from repairs.selectors.agreement import disagreements
from tests import due_rows as make
from tests.due_rows import AT, TODAY, day, fly
from tests.reports.test_due_list import at_total, required

pytestmark = pytest.mark.django_db


@pytest.fixture(autouse=True)
def demonstration_today(settings):
    settings.FRAMEBAY_TODAY = str(TODAY)


@pytest.fixture
def aircraft():
    """25,000 FC at joining, 4 a day for 90 days: 25,360 FC on 2024-12-29."""
    aircraft = make.aircraft()
    fly(aircraft, 90)
    return aircraft


def as_user(client, role="planner", of=None):
    client.force_login(make.user(role, of))


def address(aircraft, end="") -> str:
    return f"/aircraft/{aircraft.pk}/usage/{end}"


def finding(aircraft, on, cycles) -> Finding:
    return Finding.objects.create(
        operator=aircraft.operator,
        aircraft=aircraft,
        number="F-0001",
        damage_type="dent",
        state="reported",
        found_on=on,
        at_cycles=cycles,
        place_entered="FR 31 S-14L",
        entered_at=AT,
    )


def test_counters_rates_and_rows_are_shown(client, aircraft):
    as_user(client)
    text = client.get(address(aircraft)).content.decode()
    assert "data current to 2024-12-29: 20,300:00 FH · 25,360 FC" in text
    assert '<td class="num">4.00</td>' in text
    assert "2024-12-29" in text


def test_a_day_is_recorded_with_unknown_hours_said(client, aircraft):
    as_user(client)
    data = {"day": "2024-12-30", "cycles": "1", "source": "log 9", "step": "one"}
    response = client.post(address(aircraft), data)
    (said,) = get_messages(response.wsgi_request)
    assert str(said) == "1 line recorded; data are current to 2024-12-30."
    text = client.get(address(aircraft)).content.decode()
    assert "At least 1 flight without hours" in text


def test_a_refusal_comes_back_with_what_was_typed(client, aircraft):
    as_user(client)
    data = {"day": "2024-12-29", "cycles": "7", "source": "log 9", "step": "one"}
    text = client.post(address(aircraft), data).content.decode()
    assert "2024-12-29 is already recorded with 4 FC and 3:20 FH" in text
    assert 'value="7"' in text


TABLE = "date,cycles,hours\n2024-12-30,5,4:31\n2024-12-31,0,0:00\n"


@pytest.mark.parametrize("as_file", [True, False])
def test_a_table_is_recorded_whole(client, aircraft, as_file):
    as_user(client)
    data = {"source": "log 9", "step": "table"}
    if as_file:
        data["upload"] = SimpleUploadedFile("usage.csv", TABLE.encode())
    else:
        data["table"] = TABLE
    response = client.post(address(aircraft), data)
    (said,) = get_messages(response.wsgi_request)
    assert str(said) == "2 lines recorded; data are current to 2024-12-31."


@pytest.mark.parametrize(
    ("table", "says"),
    [
        (TABLE + "2025-01-02,1,1:00\n", "Line 4: 2025-01-02 lies after today"),
        (TABLE.replace("4:31", "4h31"), "Line 2: hours “4h31” cannot be read"),
        ("", "Paste a table or choose a file."),
    ],
)
def test_one_bad_line_refuses_the_table(client, aircraft, table, says):
    as_user(client)
    data = {"table": table, "source": "log 9", "step": "table"}
    assert says in client.post(address(aircraft), data).content.decode()
    assert UsageRecord.objects.count() == 90


def test_a_correction_lists_what_moved_and_what_no_longer_agrees(client, aircraft):
    """50 flights more on day 5: 25,410 FC; an item due at 25,400 is 10 past it, and a
    finding on day 20 at 25,082 FC no longer lies in its day."""
    required(aircraft, at_total("25,400 FC"))
    found = finding(aircraft, day(20), 25_082)
    assert disagreements(aircraft) == []
    row = aircraft.usage.get(day=day(5))
    as_user(client)
    response = client.post(
        address(aircraft, f"{row.pk}/correct/"),
        {
            "cycles": "54",
            "minutes": "24:00",
            "source": "log 2",
            "reason": "fifty flights were missed",
        },
    )
    text = response.content.decode()
    assert "due soon, 40 FC left, forecast 2025-01-08" in text
    assert "<b>overdue, −10 FC left</b>" in text
    assert "F-0001" in text
    assert "25,130 to 25,134 FC" in text
    found.refresh_from_db()
    assert found.at_cycles == 25_082


def test_a_correction_without_its_reason_is_not_made(client, aircraft):
    row = aircraft.usage.get(day=day(5))
    as_user(client)
    data = {"cycles": "5", "minutes": "4:00", "source": "log 2", "reason": ""}
    response = client.post(address(aircraft, f"{row.pk}/correct/"), data)
    assert "This field is required" in response.content.decode()
    assert not UsageRecord.objects.filter(revision=1).exists()


def test_events_outside_the_data_are_not_called_wrong(aircraft):
    finding(aircraft, day(-30), 24_000)
    assert disagreements(aircraft) == []


@pytest.mark.parametrize("end", ["", "{row}/correct/"])
def test_an_outsider_finds_nothing(client, aircraft, end):
    row = aircraft.usage.first()
    as_user(client, of=make.operator("OTH"))
    page = address(aircraft, end.format(row=row.pk))
    assert client.get(page).status_code == 404


def test_an_auditor_reads_but_does_not_record(client, aircraft):
    as_user(client, "auditor")
    page = client.get(address(aircraft))
    assert page.status_code == 200
    assert "Record the table" not in page.content.decode()
    data = {"day": "2024-12-30", "cycles": "1", "source": "log 9"}
    assert client.post(address(aircraft), data).status_code == 403
    row = aircraft.usage.first()
    assert client.get(address(aircraft, f"{row.pk}/correct/")).status_code == 403


def test_a_row_of_another_aircraft_is_not_corrected_here(client, aircraft):
    other = make.aircraft("Q7-TSB")
    (row,) = fly(other, 1)
    as_user(client)
    assert client.get(address(aircraft, f"{row.pk}/correct/")).status_code == 404


@pytest.mark.parametrize("days", [1, 40])
def test_queries_do_not_grow_with_rows(client, days, django_assert_max_num_queries):
    aircraft = make.aircraft()
    fly(aircraft, days)
    as_user(client)
    with django_assert_max_num_queries(14):
        client.get(address(aircraft))
