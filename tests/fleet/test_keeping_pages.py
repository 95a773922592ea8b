"""What the pages say of backups and seals, and who sees it."""

from __future__ import annotations

import datetime as dt
from pathlib import Path

import pytest
from django.conf import settings as the_settings
from django.core.management import CommandError, call_command
from django.urls import reverse

from fleet.models import Backup, HistorySeal
from fleet.selectors import keeping
from fleet.selectors.keeping import (
    NO_BACKUP,
    NO_SEAL,
    age_words,
    backup_warning,
    seal_warning,
)
from fleet.services.backups import backup_make
from fleet.services.history import Writing
from fleet.services.people import policy_set
from fleet.services.seals import history_seal
from tests.factories import NOW, TODAY, operator_make, user_make
from tests.queries import assert_same_queries

pytestmark = pytest.mark.django_db
HOUR = dt.timedelta(hours=1)


@pytest.fixture
def operator():
    return operator_make()


@pytest.fixture
def administrator(operator):
    return user_make(operator, "administrator")


@pytest.fixture
def of_a_day(operator):
    """AMC CAMO.A.220: a backup updated within 24 hours of a new entry (public copy)."""
    return policy_set(
        key=keeping.BACKUP_HOURS,
        value=24,
        unit="hours",
        source="AMC CAMO.A.220",
        grade="quoted",
        effective_from=TODAY,
        regime="EASA",
        at=NOW,
    )


def test_the_warning_begins_when_the_backup_is_older_than_the_policy(
    administrator, of_a_day, tmp_path
):
    assert backup_warning(administrator, at=NOW, on=TODAY) == NO_BACKUP
    backup_make(folder=tmp_path, at=NOW)
    assert backup_warning(administrator, at=NOW + 24 * HOUR, on=TODAY) == ""
    told = backup_warning(administrator, at=NOW + 25 * HOUR, on=TODAY)
    assert "25 h old" in told
    assert "24 h (AMC CAMO.A.220)" in told


def test_of_two_operators_policies_the_strictest_counts(
    administrator, operator, of_a_day, tmp_path
):
    policy_set(
        key=keeping.BACKUP_HOURS,
        value=8,
        unit="hours",
        source="company procedure",
        grade="practice",
        effective_from=TODAY,
        operator=operator,
        at=NOW,
    )
    backup_make(folder=tmp_path, at=NOW)
    assert "8 h" in backup_warning(administrator, at=NOW + 9 * HOUR, on=TODAY)


def test_without_a_policy_it_never_passes(administrator, tmp_path):
    backup_make(folder=tmp_path, at=NOW)
    assert "no policy “backup_hours”" in backup_warning(administrator, at=NOW, on=TODAY)


def test_administrators_are_warned_on_every_page_and_others_are_not(
    client, administrator, operator
):
    client.force_login(administrator)
    assert NO_BACKUP in client.get(reverse("overview")).content.decode()
    client.force_login(user_make(operator, "engineer"))
    assert NO_BACKUP not in client.get(reverse("overview")).content.decode()


def test_the_seal_is_called_old_only_when_entries_were_added_since(operator):
    assert seal_warning(at=NOW) == NO_SEAL
    history_seal(at=NOW)
    assert seal_warning(at=NOW + 100 * HOUR) == ""
    operator_make("TWO", "Two Air")
    assert seal_warning(at=NOW + 24 * HOUR) == ""
    assert "25 h old, and" in seal_warning(at=NOW + 25 * HOUR)


def test_the_history_page_warns_of_an_old_seal(client, administrator):
    client.force_login(administrator)
    assert NO_SEAL in client.get(reverse("history")).content.decode()


def test_the_seals_page_prints_the_last_seal_and_says_which_agree(
    client, administrator, settings
):
    seal = history_seal(at=NOW)
    client.force_login(administrator)
    page = client.get(reverse("seals")).content.decode()
    assert seal.digest in page
    assert seal.signature.replace("+", "&#x2B;") in page or seal.signature in page
    assert "<td>agrees</td>" in page
    with Writing(actor=None, action="x_make", at=NOW):
        HistorySeal.objects.create(
            sequence=1, digest="x", sealed_at=NOW, where_published="", signature=""
        )
    assert "does not agree" in client.get(reverse("seals")).content.decode()


def test_the_keeping_page_tells_backups_and_the_last_good_restore(
    client, administrator, tmp_path
):
    made = backup_make(folder=tmp_path, at=NOW)
    client.force_login(administrator)
    page = client.get(reverse("keeping")).content.decode()
    assert str(made.path) in page
    assert "nobody has shown yet" in page
    _restored(made.row, problems="fleet_operator 1 differs")
    assert "nobody has shown yet" in client.get(reverse("keeping")).content.decode()
    _restored(made.row)
    page = client.get(reverse("keeping")).content.decode()
    assert "nobody has shown yet" not in page
    assert "fleet_operator 1 differs" in page


def _restored(made: Backup, problems: str = "") -> None:
    with Writing(actor=None, action="backup_restore", at=NOW) as w:
        w.create(
            Backup(
                kind="restored",
                made_at=NOW,
                place=made.place,
                byte_count=made.byte_count,
                digest=made.digest,
                sequence=made.sequence,
                problems=problems,
            )
        )


@pytest.mark.parametrize("name", ["keeping", "seals"])
def test_long_lists_ask_no_more_of_the_database(client, administrator, tmp_path, name):
    client.force_login(administrator)
    made = backup_make(folder=tmp_path, at=NOW)
    history_seal(at=NOW)

    def grow() -> None:
        for n in range(20):
            _restored(made.row)
            history_seal(at=NOW + n * HOUR, again=True)

    assert_same_queries(client, reverse(name), grow)


def test_a_drill_restores_elsewhere_and_records_the_outcome_here(
    operator, tmp_path, monkeypatch
):
    made = backup_make(folder=tmp_path, at=NOW)
    monkeypatch.setattr("sys.argv", [str(Path(the_settings.BASE_DIR) / "manage.py")])
    call_command("restore", made.path, drill=True)
    row = Backup.objects.get(kind="restored")
    assert (row.problems, row.digest) == ("", made.row.digest)


def test_a_drill_that_fails_is_recorded_too(operator, tmp_path, monkeypatch):
    made = backup_make(folder=tmp_path, at=NOW)
    failing = tmp_path / "fails.py"
    failing.write_text("import sys; sys.exit('fleet_operator 1 differs')")
    monkeypatch.setattr("sys.argv", [str(failing)])
    with pytest.raises(CommandError, match="differs"):
        call_command("restore", made.path, drill=True)
    assert Backup.objects.get(kind="restored").problems == "fleet_operator 1 differs"


def test_an_age_is_told_in_hours_and_then_in_days():
    assert age_words(dt.timedelta(hours=25, minutes=59)) == "25 h"
    assert age_words(dt.timedelta(days=3, hours=5)) == "3 days"
