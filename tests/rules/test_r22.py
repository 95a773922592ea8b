"""R22: a change of usage recomputes all due items and logs them before and after.

Company practice: a planner must be able to say why an item's date is not what it was.
"""

from __future__ import annotations

import pytest

from fleet.digests import entry_digest
from fleet.models import HistoryEntry
from tests import due_rows as make
from tests.due_rows import TODAY, day, fly
from tests.reports.test_due_list import at_total, listed, required

pytestmark = pytest.mark.django_db


@pytest.fixture(autouse=True)
def demonstration_today(settings):
    settings.FRAMEBAY_TODAY = str(TODAY)


@pytest.fixture
def aircraft():
    """25,000 FC at joining, 4 a day for 90 days: 25,360 FC."""
    aircraft = make.aircraft()
    fly(aircraft, 90)
    return aircraft


def corrected(client, aircraft, n: int, **columns):
    client.force_login(make.user("planner"))
    row = aircraft.usage.get(day=day(n), replaced_by__isnull=True)
    said = {"cycles": "54", "minutes": "24:00", "source": "log 2", "reason": "missed"}
    address = f"/aircraft/{aircraft.pk}/usage/{row.pk}/correct/"
    answer = client.post(address, said | columns)
    assert answer.status_code == 200, answer
    return HistoryEntry.objects.latest("sequence")


def test_what_moved_is_logged_before_and_after_with_the_correction(client, aircraft):
    """An item due at 25,400 FC had 40 left; with 50 flights more it is 10 past."""
    required(aircraft, at_total("25,400 FC"))
    entry = corrected(client, aircraft, 5)
    assert entry.action == "usage_correct"
    assert "40 FC left" in entry.origin.split("→")[0]
    assert "overdue, −10 FC left" in entry.origin.split("→")[1]
    assert entry.digest == entry_digest(entry), "the log is inside the chained entry"


def test_every_item_that_moved_is_logged_and_none_that_did_not(client, aircraft):
    """Landings are not corrected, so an item that counts them stands where it stood."""
    required(aircraft, at_total("25,400 FC"), title="lug")
    required(aircraft, at_total("25,420 FC"), title="pin")
    required(aircraft, at_total("25,380 landings"), title="wheel")
    columns = {"cycles": "3", "landings": "4", "minutes": "3:20"}
    entry = corrected(client, aircraft, 5, **columns)
    assert entry.origin.count("→") == 2, entry.origin
    assert "wheel" not in entry.origin


def test_that_nothing_moved_is_logged_too(client, aircraft):
    entry = corrected(client, aircraft, 5)
    assert entry.origin == "No due item moved."


def test_the_list_follows_at_once(client, aircraft):
    required(aircraft, at_total("25,400 FC"))
    before = listed(as_of=day(89)).rows[0]
    corrected(client, aircraft, 5)
    after = listed(as_of=day(89)).rows[0]
    assert before.state != after.state


def test_who_may_read_the_history_reads_what_moved(client, aircraft):
    required(aircraft, at_total("25,400 FC"))
    corrected(client, aircraft, 5)
    client.force_login(make.user("auditor"))
    assert "40 FC left" in client.get("/history/").content.decode()
