"""A form that is sent twice is written once, and leads to where the first one led."""

from __future__ import annotations

import uuid

import pytest
from django.contrib.messages import get_messages
from django.core.files.uploadedfile import SimpleUploadedFile

from fleet.models import HistoryEntry, Policy, SentForm, UsageRecord
from fleet.services.sending import KEY_FIELD, SENT_BEFORE, SHOWN_FIELD
from tests import due_rows as make
from tests.due_rows import TODAY, day
from tests.forms import form_in, form_on

pytestmark = pytest.mark.django_db
POLICY = "/policies/new/"


@pytest.fixture(autouse=True)
def demonstration_today(settings):
    settings.FRAMEBAY_TODAY = str(TODAY)


@pytest.fixture
def administrator(client):
    client.force_login(make.user("administrator"))
    return client


def typed(client, **changes) -> dict[str, str]:
    form = form_on(client, POLICY)
    said = {"key": "late_entry_days", "value": "30", "unit": "days", "grade": "quoted"}
    since = {"source": "M.A.305", "effective_from": str(day(0))}
    return form | said | since | changes


def said_of(response) -> list[str]:
    return [str(message) for message in get_messages(response.wsgi_request)]


def test_the_second_sending_writes_nothing_and_leads_where_the_first_led(administrator):
    form = typed(administrator)
    first, again = administrator.post(POLICY, form), administrator.post(POLICY, form)
    assert (first.status_code, first.url) == (again.status_code, again.url)
    assert any("nothing was written twice" in one for one in said_of(again))
    assert Policy.objects.filter(key="late_entry_days").count() == 1
    kept = SentForm.objects.get()
    entry = HistoryEntry.objects.latest("sequence")
    assert (kept.answer, kept.entry) == (first.url, entry)


def test_a_refused_form_leaves_its_key_free(administrator):
    form = typed(administrator)
    refused = administrator.post(POLICY, form | {"source": ""})
    assert refused.status_code == 200
    assert not SentForm.objects.exists()
    kept = form_in(refused)
    assert kept[KEY_FIELD] == form[KEY_FIELD]
    assert administrator.post(POLICY, kept | {"source": "M.A.305"}).status_code == 302


def test_what_the_database_refuses_leaves_the_key_free(administrator):
    """One policy of a key and day: the unique constraint answers, not the form."""
    administrator.post(POLICY, typed(administrator))
    again = typed(administrator)
    refused = administrator.post(POLICY, again)
    assert "one already" in refused.content.decode()
    assert form_in(refused)[KEY_FIELD] == again[KEY_FIELD]
    assert SentForm.objects.count() == 1


def test_a_form_altered_after_it_was_sent_is_asked_about_and_loses_nothing(
    administrator,
):
    form = typed(administrator)
    administrator.post(POLICY, form)
    altered = form | {"key": "report_hours", "value": "72", "unit": "hours"}
    asked = administrator.post(POLICY, altered)
    assert SENT_BEFORE[:28] in asked.content.decode()
    assert not Policy.objects.filter(key="report_hours").exists()
    kept = form_in(asked)
    assert (kept["key"], kept["value"]) == ("report_hours", "72")
    assert kept[KEY_FIELD] != form[KEY_FIELD]
    assert administrator.post(POLICY, kept).status_code == 302
    assert Policy.objects.filter(key="report_hours").count() == 1


def test_each_opening_of_a_page_is_a_form_of_its_own(administrator):
    assert typed(administrator)[KEY_FIELD] != typed(administrator)[KEY_FIELD]


def test_somebody_elses_key_leads_nowhere(administrator, client):
    form = typed(administrator)
    administrator.post(POLICY, form)
    client.force_login(make.user("administrator"))
    asked = client.post(POLICY, form)
    assert asked.status_code == 200
    assert Policy.objects.filter(key="late_entry_days").count() == 1


@pytest.mark.parametrize(
    "key", ["", "1", "x" * 5_000, "00000000-0000-0000-0000-00000000000g"]
)
def test_a_key_that_is_none_is_as_no_key(administrator, key):
    form = typed(administrator) | {KEY_FIELD: key, SHOWN_FIELD: "9" * 40}
    assert administrator.post(POLICY, form).status_code == 302
    assert not SentForm.objects.exists()


def test_a_table_of_usage_sent_twice_with_its_file_is_one_import(client):
    aircraft = make.aircraft()
    client.force_login(make.user("planner"))
    address = f"/aircraft/{aircraft.pk}/usage/"
    table = b"date,cycles,hours\n2024-10-01,4,3:20\n2024-10-02,3,2:30\n"
    form = form_on(client, address, which=1) | {"step": "table", "source": "log 12"}

    def send():
        upload = SimpleUploadedFile("flown.csv", table, content_type="text/csv")
        return client.post(address, form | {"upload": upload})

    first, again = send(), send()
    assert (first.status_code, again.status_code) == (302, 302)
    assert UsageRecord.objects.count() == 2
    assert any("nothing was written twice" in one for one in said_of(again))


def test_signing_in_and_out_needs_no_key(client, administrator):
    assert uuid.UUID(typed(administrator)[KEY_FIELD])
    assert administrator.post("/sign-out/").status_code == 302
    page = client.get("/sign-in/").content.decode()
    assert KEY_FIELD not in page
