"""The due list as page, CSV and command."""

from __future__ import annotations

import csv
import json
from io import StringIO

import pytest
from django.core.management import CommandError, call_command

from tests import due_rows as make
from tests.due_rows import day, fly
from tests.reports.test_due_list import at_total, required

pytestmark = pytest.mark.django_db


@pytest.fixture
def overdue():
    aircraft = make.aircraft()
    fly(aircraft, 21)
    required(aircraft, at_total("25,070 FC"), title="=SUM(A1)")
    return aircraft


def page(client, user, query=""):
    client.force_login(user)
    return client.get(f"/due/?as_of={day(20)}&{query}")


def told(**options) -> str:
    out = StringIO()
    call_command("due_list", stdout=out, as_of=str(day(20)), **options)
    return out.getvalue()


def test_the_page_leads_with_what_is_overdue(client, overdue):
    response = page(client, make.user("planner"))
    text = response.content.decode()
    assert response.status_code == 200
    assert '<th colspan="8" scope="rowgroup" class="overdue">overdue</th>' in text
    assert "<b>−14 FC</b>" in text
    assert f"data current to {day(20)}" in text
    assert "unverified: awaits second keying" in text


def test_an_outsider_sees_none_of_it(client, overdue):
    text = page(client, make.outsider("planner")).content.decode()
    assert "Q7-TSA" not in text
    assert "Nothing is due" in text
    assert "Q7-TSA" not in page(client, make.outsider(), "format=csv").content.decode()


def test_nobody_sees_it_without_signing_in(client):
    assert client.get("/due/").status_code == 302


def test_filters_stay_in_the_address_and_bad_ones_are_named(client, overdue):
    user = make.user("planner")
    text = page(client, user, "aircraft=q7-tsa&within=10").content.decode()
    assert "format=csv" in text
    assert "aircraft=q7-tsa&amp;within=10" in text
    assert "Enter a whole number" in page(client, user, "within=soon").content.decode()


def test_the_csv_guards_formulas_and_prints_its_facts(client, overdue):
    response = page(client, make.user("planner"), "format=csv")
    rows = list(csv.reader(StringIO(response.content.decode("utf-8-sig"))))
    line = dict(zip(rows[0], rows[1], strict=True))
    assert line["item"].startswith("I-0001")
    assert line["remaining FC"] == "-14"
    assert line["state"] == "overdue"
    facts = dict(row[:2] for row in rows if len(row) == 2)
    assert facts["as of"] == str(day(20))
    assert len(facts["digest of the rows (SHA-256)"]) == 64


def test_the_command_prints_json_with_digest_and_counts(overdue):
    found = json.loads(told(format="json"))
    assert found["counts"]["overdue"] == 1
    assert found["data_current_to"] == str(day(20))
    assert found["rows"][0]["remaining FC"] == -14
    assert found["digest"] == json.loads(told(format="json"))["digest"]


def test_the_command_prints_a_table(overdue):
    text = told(aircraft="q7-tsa")
    assert "OVERDUE" in text
    assert "−14 FC" in text
    assert f"data current to: {day(20)}" in text


@pytest.mark.parametrize(
    ("options", "says"),
    [
        ({"aircraft": "Q7-XXX"}, "registrations are: Q7-TSA"),
        ({"known_at": "noon"}, "“noon” is not a time"),
        ({"within_days": -1}, "not between 0 and"),
    ],
)
def test_the_command_says_what_it_cannot_read(overdue, options, says):
    with pytest.raises(CommandError, match=says):
        told(**options)


def test_a_date_that_is_none_is_refused():
    with pytest.raises(CommandError, match="write it as 2025-01-31"):
        call_command("due_list", as_of="31.1.2025")


@pytest.mark.parametrize("count", [1, 20])
def test_queries_do_not_grow_with_rows(client, count, django_assert_max_num_queries):
    for n in range(count):
        aircraft = make.aircraft(f"Q7-T{n:02d}")
        fly(aircraft, 21)
        required(aircraft, at_total("25,070 FC"))
    client.force_login(make.user("planner"))
    with django_assert_max_num_queries(18):
        response = client.get(f"/due/?as_of={day(20)}")
    assert response.content.count(b'class="od"') == count
