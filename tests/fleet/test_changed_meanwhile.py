"""Two people at one record, one after the other: the second is told what changed, keeps
what was typed, and may send it again. (At the same moment: tests/together.)"""

from __future__ import annotations

import datetime as dt
import html

import pytest
from django.core.exceptions import ValidationError
from django.test import Client

from fleet.models import Organisation, PartNumber, Policy, SafeLifePart, SentForm
from fleet.selectors.verify import problems
from fleet.services.history import Writing
from fleet.services.opening import opening_correct
from fleet.services.people import organisation_create, policy_set
from fleet.services.sending import CHANGED, KEY_FIELD
from tests import due_rows as make
from tests.due_rows import AT, TODAY, day, fly
from tests.forms import form_in, form_on

pytestmark = pytest.mark.django_db
TOLD = CHANGED.split("}")[1].split(";")[0]


@pytest.fixture(autouse=True)
def demonstration_today(settings):
    settings.FRAMEBAY_TODAY = str(TODAY)


def as_user(role: str, of=None) -> Client:
    client = Client()
    client.force_login(make.user(role, of))
    return client


def text(answer) -> str:
    return html.unescape(answer.content.decode())


def test_the_second_is_told_keeps_what_was_typed_and_may_send_again():
    aircraft = make.aircraft()
    address = f"/aircraft/{aircraft.pk}/state/"
    first, second = as_user("administrator"), as_user("administrator")
    forms = [
        form_on(client, address)
        | {"state": state, "from_on": str(on), "reason": "lease"}
        for client, state, on in (
            (first, "stored", day(10)),
            (second, "parked", day(20)),
        )
    ]
    assert first.post(address, forms[0]).status_code == 302
    told = second.post(address, forms[1])
    assert TOLD in text(told)
    assert "Robin Administrator: aircraft set state" in text(told)
    assert f"to on: — → {day(9)}" in text(told)
    again = form_in(told)
    assert (again["state"], again["from_on"]) == ("parked", str(day(20)))
    assert again[KEY_FIELD] == forms[1][KEY_FIELD], "nothing was written with it"
    assert second.post(address, again).status_code == 302
    assert [span.state for span in aircraft.spans.all()] == [
        "in_service",
        "stored",
        "parked",
    ]


def test_what_changed_before_the_page_was_opened_is_no_news():
    aircraft = make.aircraft()
    address = f"/aircraft/{aircraft.pk}/state/"
    client = as_user("administrator")
    for state, on in (("stored", day(10)), ("parked", day(20))):
        form = form_on(client, address) | {
            "state": state,
            "from_on": str(on),
            "reason": "lease",
        }
        assert client.post(address, form).status_code == 302


def test_an_incomplete_form_does_not_hide_a_later_change():
    """Refused for itself first, at an old page; then the change is still told."""
    aircraft = make.aircraft()
    address = f"/aircraft/{aircraft.pk}/state/"
    first, second = as_user("administrator"), as_user("administrator")
    incomplete = form_on(second, address) | {
        "state": "parked",
        "from_on": "",
        "reason": "x",
    }
    refused = second.post(address, incomplete)
    assert TOLD not in text(refused)
    form = form_on(first, address) | {
        "state": "stored",
        "from_on": str(day(10)),
        "reason": "x",
    }
    first.post(address, form)
    mended = form_in(refused) | {"from_on": str(day(20))}
    assert TOLD in text(second.post(address, mended))


def test_a_row_that_is_never_changed_is_told_by_what_replaced_it():
    aircraft = make.aircraft()
    fly(aircraft, 9)
    row = aircraft.usage.get(day=day(5))
    address = f"/aircraft/{aircraft.pk}/usage/{row.pk}/correct/"
    first, second = as_user("planner"), as_user("planner")
    said = {"source": "log 2", "reason": "missed", "minutes": "3:20"}
    forms = [form_on(client, address) | said for client in (first, second)]
    first.post(address, forms[0] | {"cycles": "6", "landings": "6"})
    told = text(second.post(address, forms[1] | {"cycles": "7", "landings": "7"}))
    assert TOLD in told
    assert "cycles: 4 FC → 6 FC" in told
    assert aircraft.usage.filter(day=day(5)).count() == 2


def test_of_a_blind_second_entry_no_value_of_the_first_is_told():
    aircraft = make.aircraft()
    keyer = make.user("administrator")
    address = f"/aircraft/{aircraft.pk}/opening/"
    second = as_user("planner")
    form = form_on(second, address)
    counters = {f"opening_{name}": n for name, n in zip(
        ("minutes", "cycles", "landings", "pressurisations"),
        (1_234_567, 24_680, 24_681, 24_682), strict=True,
    )}  # fmt: skip
    opening_correct(
        aircraft=aircraft, counters=counters, reason="misread", actor=keyer, at=AT
    )
    said = {"opening_minutes": "1:00", "opening_cycles": 1, "opening_landings": 1}
    told = text(second.post(address, form | said))
    assert TOLD in told
    assert "Robin Administrator: opening corrected" in told
    for value in ("24680", "24,680", "24681", "24682", "1234567", "20,576"):
        assert value not in told


def test_a_policy_replaced_meanwhile_is_told_with_both_values():
    operator = make.operator()
    columns = {"key": "report_hours", "unit": "hours", "source": "376/2014, 4(7)"}
    columns |= {"grade": "quoted"}
    at = {"at": AT, "operator": operator, "effective_from": day(0)}
    held = policy_set(**columns, **at, value=96)
    client = as_user("administrator")
    form = form_on(client, "/policies/new/?key=report_hours")
    at["effective_from"] = day(1)
    policy_set(**columns, **at, value=72, replaces=held)
    said = columns | {"value": "48", "effective_from": str(day(2))}
    assert "value: 96 → 72" in text(client.post("/policies/new/", form | said))
    assert Policy.objects.count() == 2


def test_what_is_taken_is_told_with_who_took_it_and_when():
    organisation_create(
        code="ONE", name="One", kind="owner", at=AT, actor=make.user("administrator")
    )
    with pytest.raises(ValidationError) as refused:
        organisation_create(code="ONE", name="Two", kind="owner", at=AT)
    told = " ".join(refused.value.messages)
    assert "one already, or someone else has just recorded it: code" in told
    assert "Robin Administrator on 2025-01-01 at 09:00 UTC" in told


def renamed(row: Organisation, **columns: str) -> None:
    with Writing(actor=None, action="organisation_rename", at=AT) as w:
        w.change(row, **columns)


@pytest.fixture
def read_twice() -> tuple[Organisation, Organisation]:
    made = organisation_create(code="ONE", name="One", kind="owner", at=AT)
    return made, Organisation.objects.get(pk=made.pk)


def test_a_service_does_not_write_over_a_column_it_read_before(read_twice):
    one, other = read_twice
    renamed(one, name="First")
    with pytest.raises(ValidationError, match="name: One → First"):
        renamed(other, name="Second")
    assert Organisation.objects.get(pk=one.pk).name == "First"


def test_a_change_of_another_column_is_taken_over_and_the_history_agrees(read_twice):
    one, other = read_twice
    renamed(one, name="First")
    renamed(other, code="TWO")
    assert (other.name, other.code) == ("First", "TWO")
    assert list(problems()) == []


def test_a_new_part_number_and_its_serial_are_recorded_both_or_neither():
    make.part("0447", part_number=make.part_number())
    client = as_user("planner")
    form = form_on(client, "/safe-life/new/")
    said = {"new_number": "ARD-NEW-1", "new_title": "Lug", "chain": "complete"}
    future = {"serial": "1", "manufactured_on": str(dt.date(2010, 1, 1))}
    refused = client.post("/safe-life/new/", form | said | future | {"chain": "x"})
    assert refused.status_code == 200
    assert not PartNumber.objects.filter(number="ARD-NEW-1").exists()
    assert not SentForm.objects.exists()
    assert client.post("/safe-life/new/", form | said | future).status_code == 302
    assert SafeLifePart.objects.get(serial="1").part_number.number == "ARD-NEW-1"
