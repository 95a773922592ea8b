"""Backups: whole or refused, readable without the program, and back again.

AMC CAMO.A.220 and AMC M.A.614 ask for a backup that can be relied on (read in public
copies); that a restored record is the same one is checked here value by value.
"""

from __future__ import annotations

import datetime as dt
import hashlib
import json
import os
import subprocess
import sys
import zipfile
from io import StringIO
from pathlib import Path

import pytest
from django.apps import apps
from django.conf import settings as the_settings
from django.core.exceptions import ValidationError
from django.core.management import CommandError, call_command
from django.db import DatabaseError, connection

from fleet.backup_file import MANIFEST, BackupReader, NotABackup
from fleet.kept_files import attachment_path
from fleet.models import Attachment, Backup, HistoryHead, Operator
from fleet.selectors.verify import problems
from fleet.services.backups import PREFIX, backup_make, copied_models
from fleet.services.restoring import backup_restore
from fleet.services.seals import history_seal
from repairs.models import Finding
from tests.altered_rows import update
from tests.factories import NOW, operator_make
from tests.one_of_each import one_of_each_make
from tests.record_rows import found

pytestmark = pytest.mark.django_db
LATER = NOW + dt.timedelta(days=1)
ROOT = Path(the_settings.BASE_DIR)
# What making and restoring a backup adds to.
GROWS = {"fleet_backup", "fleet_historyentry", "fleet_historyitem", "fleet_historyhead"}


def contents(made) -> dict[str, tuple[str, int | None]]:
    """Name of each file in the backup to its digest and rows, but for what grows."""
    return {
        name: (member.sha256, member.rows)
        for name, member in made.manifest.files.items()
        if name.removeprefix("tables/").removesuffix(".jsonl") not in GROWS
        and name != "README.txt"
    }


@pytest.fixture
def each():
    return one_of_each_make()


def test_what_is_restored_is_what_was_there(each, settings, tmp_path):
    history_seal(at=NOW)
    made = backup_make(folder=tmp_path, at=NOW)
    head = HistoryHead.objects.get()
    settings.ATTACHMENTS, settings.SEALS = tmp_path / "other", tmp_path / "seals too"
    later = found(each.world)
    done = backup_restore(backup=BackupReader(made.path), at=LATER, replace=True)
    assert done.problems == []
    assert not Finding.objects.filter(number=later.number).exists()
    assert done.row.sequence == made.manifest.sequence == head.sequence - 1
    again = backup_make(folder=tmp_path, at=LATER)
    assert contents(again) == contents(made)
    assert again.manifest.database == made.manifest.database
    row = Attachment.objects.get()
    assert attachment_path(row.original_sha256).is_file()


def test_after_restoring_new_records_follow_on(each, tmp_path):
    """Keys, record numbers and the chain go on after those that were put back."""
    made = backup_make(folder=tmp_path, at=NOW)
    lost = found(each.world)
    backup_restore(backup=BackupReader(made.path), at=LATER, replace=True)
    anew = found(each.world)
    assert anew.number == lost.number
    assert list(problems(files=True)) == []
    with (  # the triggers are back
        pytest.raises(DatabaseError, match="never changed"),
        connection.cursor() as cursor,
    ):
        cursor.execute("DELETE FROM fleet_historyitem")


def test_everything_recorded_is_in_it():
    tables = {model._meta.db_table for model in copied_models()}
    recorded = {
        model._meta.db_table
        for model in apps.get_models(include_auto_created=True)
        if model._meta.app_label in the_settings.RECORDED_APPS
    }
    assert recorded <= tables
    assert "django_session" not in tables


def test_it_can_be_read_without_the_program(each, tmp_path):
    made = backup_make(folder=tmp_path, at=NOW)
    with zipfile.ZipFile(made.path) as file:
        assert file.testzip() is None
        lines = file.read("tables/repairs_finding.jsonl").decode().splitlines()
        columns, *rows = map(json.loads, lines)
        assert "tables/NAME.jsonl" in file.read("README.txt").decode()
    row = next(row for row in rows if row[0] == each.finding.pk)
    finding = dict(zip(columns, row, strict=True))
    assert finding["number"] == each.finding.number
    assert finding["found_on"] == each.finding.found_on.isoformat()
    assert finding["x1_mm"] == each.finding.x1_mm


def test_no_secret_key_is_in_it(each, tmp_path, settings):
    history_seal(at=NOW)
    secret = Path(settings.SEAL_KEY_FILE).read_bytes()
    made = backup_make(folder=tmp_path, at=NOW)
    with zipfile.ZipFile(made.path) as file:
        kept = [file.read(name) for name in file.namelist()]
    for key in (secret, the_settings.SECRET_KEY.encode()):
        assert not any(key in content for content in kept)


def test_a_database_with_records_is_not_overwritten_unasked(tmp_path):
    operator = operator_make()
    made = backup_make(folder=tmp_path, at=NOW)
    with pytest.raises(ValidationError, match="holds records already"):
        backup_restore(backup=BackupReader(made.path), at=NOW)
    assert Operator.objects.get() == operator


def test_replacing_asks_first(tmp_path, monkeypatch):
    operator_make()
    made = backup_make(folder=tmp_path, at=NOW)
    monkeypatch.setattr("builtins.input", lambda _: "no")
    with pytest.raises(CommandError, match="Nothing was changed"):
        call_command("restore", made.path, replace=True)
    assert not Backup.objects.filter(kind="restored").exists()
    monkeypatch.setattr("builtins.input", lambda _: "replace")
    out = StringIO()
    call_command("restore", made.path, replace=True, stdout=out)
    assert "Everything agrees" in out.getvalue()


@pytest.fixture
def small(tmp_path):
    operator_make()
    return backup_make(folder=tmp_path, at=NOW).path


def test_a_backup_cut_short_is_refused_and_named(small):
    whole = small.read_bytes()
    for share in (0.3, 0.9, 0.999):
        small.write_bytes(whole[: int(len(whole) * share)])
        with pytest.raises(NotABackup, match=str(small)):
            BackupReader(small)
    small.write_bytes(b"")
    with pytest.raises(CommandError, match=str(small)):
        call_command("restore", small)


def rewritten(path: Path, change) -> None:
    """The zip written anew, sound as a zip, with members changed."""
    with zipfile.ZipFile(path) as file:
        members = {name: file.read(name) for name in file.namelist()}
    change(members)
    with zipfile.ZipFile(path, "w") as file:
        for name, content in members.items():
            file.writestr(name, content)


@pytest.mark.parametrize(
    ("change", "told"),
    [
        (
            lambda m: m.update({"tables/fleet_operator.jsonl": b"[]\n"}),
            "fleet_operator.jsonl was altered",
        ),
        (lambda m: m.pop("tables/fleet_user.jsonl"), "fleet_user.jsonl .* missing"),
        (lambda m: m.update(more=b"x"), "more is not in its manifest"),
        (lambda m: m.pop(MANIFEST), "no manifest.json"),
        (lambda m: m.update({MANIFEST: b"{}"}), "manifest.json cannot be read"),
        (lambda m: m.update({MANIFEST: b'{"format": 9}'}), "says format 9, expected 1"),
    ],
)
def test_an_altered_backup_is_refused_and_the_file_named(small, change, told):
    rewritten(small, change)
    with pytest.raises(NotABackup, match=told):
        BackupReader(small)


def test_a_flipped_byte_anywhere_is_found(small):
    whole = bytearray(small.read_bytes())
    for place in range(60, len(whole) - 3_000, len(whole) // 12):
        broken = whole.copy()
        broken[place] ^= 0xFF
        small.write_bytes(broken)
        try:
            backup = BackupReader(small)
        except NotABackup:
            continue
        whole_still = backup.manifest.digest  # a byte of the zip's own, no content
        small.write_bytes(whole)
        assert whole_still == BackupReader(small).manifest.digest


def test_records_altered_before_the_backup_are_named_after_it(tmp_path):
    operator = operator_make()
    update(Operator, operator.pk, Operator._meta.get_field("name"), "Taken over")
    made = backup_make(folder=tmp_path, at=NOW)
    with pytest.raises(CommandError, match=f"fleet_operator {operator.pk} differs"):
        call_command("restore", made.path, replace=True, no_input=True)
    row = Backup.objects.get(kind="restored")
    assert "differs" in row.problems


def test_a_lost_or_altered_file_is_said_when_the_backup_is_made(each, tmp_path):
    sha256 = Attachment.objects.get().original_sha256
    attachment_path(sha256).write_bytes(b"another")
    with pytest.raises(CommandError, match=f"{sha256} was altered"):
        call_command("backup", to=tmp_path)
    attachment_path(sha256).unlink()
    with pytest.raises(CommandError, match=f"{sha256} is not in the store"):
        call_command("backup", to=tmp_path)
    assert all(sha256 in row.problems for row in Backup.objects.all())


def test_a_column_added_since_begins_empty(tmp_path):
    """A backup of an older version, whose table lacks a column that may be empty."""
    operator_make()
    made = backup_make(folder=tmp_path, at=NOW)
    older = _without(made.path, "fleet_user", "second_factor_since")
    done = backup_restore(backup=BackupReader(older), at=LATER, replace=True)
    assert done.problems == []
    needed = _without(made.path, "fleet_operator", "name")
    with pytest.raises(ValidationError, match="lacks the column name"):
        backup_restore(backup=BackupReader(needed), at=LATER, replace=True)


def test_a_backup_of_a_newer_version_is_refused(tmp_path):
    operator_make()
    made = backup_make(folder=tmp_path, at=NOW)
    newer = _renamed(made.path, "fleet_operator", "fleet_futurething")
    with pytest.raises(ValidationError, match="does not know: fleet_futurething"):
        backup_restore(backup=BackupReader(newer), at=LATER, replace=True)


def _with_digests(path: Path, change) -> Path:
    """Changed members under a manifest that agrees with them."""

    def mend(members: dict[str, bytes]) -> None:
        change(members)
        manifest = json.loads(members.pop(MANIFEST))
        before = manifest["files"]
        manifest["files"] = {
            name: before.get(name, {"rows": 0})
            | {
                "sha256": hashlib.sha256(content).hexdigest(),
                "byte_count": len(content),
            }
            for name, content in members.items()
        }
        members[MANIFEST] = json.dumps(manifest).encode()

    changed = path.with_name(f"changed-{path.name}")
    changed.write_bytes(path.read_bytes())
    rewritten(changed, mend)
    return changed


def _without(path: Path, table: str, column: str) -> Path:
    def drop(members: dict[str, bytes]) -> None:
        name = f"tables/{table}.jsonl"
        lines = [json.loads(line) for line in members[name].splitlines()]
        place = lines[0].index(column)
        kept = [json.dumps(line[:place] + line[place + 1 :]) for line in lines]
        members[name] = ("\n".join(kept) + "\n").encode()

    return _with_digests(path, drop)


def _renamed(path: Path, table: str, other: str) -> Path:
    def rename(members: dict[str, bytes]) -> None:
        members[f"tables/{other}.jsonl"] = members.pop(f"tables/{table}.jsonl")

    return _with_digests(path, rename)


def test_only_the_newest_are_kept(tmp_path):
    operator_make()
    for day in range(4):
        backup_make(folder=tmp_path, at=NOW + dt.timedelta(days=day), keep=2)
    kept = sorted(path.name for path in tmp_path.glob(f"{PREFIX}*"))
    assert kept == ["framebay-20250103-090000.zip", "framebay-20250104-090000.zip"]
    with pytest.raises(CommandError, match="at least one"):
        call_command("backup", to=tmp_path, keep=0)


def test_no_half_backup_is_left_where_one_is_looked_for(tmp_path, monkeypatch):
    operator_make()

    def full(*_: object) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr("fleet.services.backups.BackupWriter.table", full)
    with pytest.raises(CommandError, match="No space left"):
        call_command("backup", to=tmp_path)
    assert list(tmp_path.iterdir()) == []
    assert not Backup.objects.exists()


def manage(*arguments: object, data: Path) -> str:
    """A command of its own process, on SQLite in the folder."""
    environment = {k: v for k, v in os.environ.items() if k != "DATABASE_URL"}
    done = subprocess.run(
        [sys.executable, "manage.py", *map(str, arguments)],
        cwd=ROOT,
        env=environment | {"FRAMEBAY_DATA": str(data)},
        capture_output=True,
        text=True,
        check=False,
    )
    assert done.returncode == 0, done.stdout + done.stderr
    return done.stdout


def test_it_goes_into_an_empty_sqlite_database_and_back_into_this_one(each, tmp_path):
    """From this database, whichever it is, to SQLite and back: nothing differs."""
    made = backup_make(folder=tmp_path / "here", at=NOW)
    data = tmp_path / "data"
    assert "Everything agrees" in manage("restore", made.path, data=data)
    manage("backup", "--to", tmp_path / "there", data=data)
    (path,) = (tmp_path / "there").iterdir()
    done = backup_restore(backup=BackupReader(path), at=LATER, replace=True)
    assert done.problems == []
    again = backup_make(folder=tmp_path / "here", at=LATER)
    assert contents(again) == contents(made)
