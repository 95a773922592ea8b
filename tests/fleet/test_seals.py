"""Seals of the history's end: what a chain alone cannot show, a seal does."""

from __future__ import annotations

import base64
import datetime as dt
import shutil
import stat
import subprocess
from pathlib import Path

import pytest
from cryptography.hazmat.primitives.asymmetric.ed25519 import Ed25519PublicKey
from django.core.exceptions import ValidationError
from django.core.management import CommandError, call_command
from django.db import connection

from fleet.digests import guarded_tables
from fleet.models import (
    HistoryEntry,
    HistoryHead,
    HistoryItem,
    HistorySeal,
    Organisation,
)
from fleet.sealing import NotASeal, key_read, public_text, seal_read
from fleet.selectors.seals import keys_file, last_seal, seal_lines
from fleet.selectors.verify import chain_problems, problems, seals_problems
from fleet.selectors.verify_rows import Read
from fleet.services.history import Writing
from fleet.services.seals import BAD_KEY, EMPTY, history_seal, seal_key_change
from fleet.triggers import triggers_install, triggers_remove
from tests.altered_rows import delete, update
from tests.factories import NOW

pytestmark = pytest.mark.django_db
LATER = NOW + dt.timedelta(days=1)


def organisation(code: str) -> Organisation:
    with Writing(actor=None, action="organisation_create", at=NOW) as w:
        return w.create(Organisation(code=code, name=code, kind="operator"))


@pytest.fixture
def three():
    return [organisation(code) for code in ("ONE", "TWO", "THREE")]


def cut_the_tail() -> None:
    """The last entry, its item and its row gone, the head moved back: no trace left."""
    triggers_remove(connection, guarded_tables())
    last = HistoryEntry.objects.latest("sequence")
    item = HistoryItem.objects.get(entry=last)
    delete(HistoryItem, item.pk)
    delete(HistoryEntry, last.pk)
    delete(Organisation, item.first_pk)
    head, before = HistoryHead.objects.get(), HistoryEntry.objects.latest("sequence")
    for name, value in (("sequence", before.sequence), ("digest", before.digest)):
        update(HistoryHead, head.pk, HistoryHead._meta.get_field(name), value)
    triggers_install(connection, guarded_tables())


def test_a_tail_cut_without_trace_is_found_by_a_seal_alone(three):
    seal = history_seal(at=NOW)
    cut_the_tail()
    assert list(chain_problems(Read())) == []
    assert "disagrees with its seal" in next(problems())
    triggers_remove(connection, guarded_tables())
    delete(HistorySeal, last_seal().pk)
    triggers_install(connection, guarded_tables())
    assert list(problems()) == []
    assert any("disagrees" in told for told in problems(outside=[seal]))


def test_the_command_holds_the_history_against_a_seal_kept_elsewhere(three, tmp_path):
    kept = tmp_path / "from the safe.txt"
    kept.write_text(history_seal(at=NOW).text)
    call_command("verify_history", seal=[kept])
    organisation("FOUR")
    call_command("verify_history", seal=[kept])  # later entries disturb no seal
    kept.write_text(kept.read_text().replace("entry: 3", "entry: 2"))
    with pytest.raises(CommandError, match="not genuine"):
        call_command("verify_history", seal=[kept])
    kept.write_text("Framebay history seal\n")
    with pytest.raises(CommandError, match="expected the line “database:”"):
        call_command("verify_history", seal=[kept])


def test_the_same_end_is_sealed_once_unless_asked_again(three):
    assert history_seal(at=NOW) is not None
    assert history_seal(at=LATER) is None
    assert history_seal(at=LATER, again=True) is not None
    organisation("FOUR")
    assert history_seal(at=LATER).sequence == 4
    assert HistorySeal.objects.count() == 3
    assert list(problems()) == []


def test_a_seal_is_a_file_that_can_be_printed(three, settings, capsys):
    call_command("seal_history")
    (file,) = Path(settings.SEALS).glob("seal-*.txt")
    assert file.read_text() in capsys.readouterr().out
    seal = seal_read(file.read_text(), file.name)
    assert (seal.sequence, seal.digest) == (3, HistoryHead.objects.get().digest)
    assert seal.database == HistoryEntry.objects.get(sequence=1).digest


@pytest.mark.parametrize("column", ["sealed_at", "where_published", "signature"])
def test_an_altered_seal_is_not_genuine(three, column):
    history_seal(at=NOW)
    triggers_remove(connection, guarded_tables())
    row = last_seal()
    field = HistorySeal._meta.get_field(column)
    value = LATER if column == "sealed_at" else f"{getattr(row, column)[:-4]}AAAA"
    update(HistorySeal, row.pk, field, value)
    assert any("not genuine" in told for told in seals_problems())


def test_a_seal_by_a_stranger_with_the_database_alone_is_found(three, settings):
    """Rewriting the chain and sealing it with a key of one's own does not help."""
    history_seal(at=NOW)
    own = keys_file().read_bytes()
    Path(settings.SEAL_KEY_FILE).unlink()
    history_seal(at=LATER, again=True)
    keys_file().write_bytes(own)
    told = list(seals_problems())
    assert len(told) == 1
    assert "not among those of this installation" in told[0]


def test_a_seal_of_another_history_is_refused(three):
    seal = history_seal(at=NOW)
    with connection.cursor() as cursor:
        triggers_remove(connection, guarded_tables())
        cursor.execute("UPDATE fleet_historyentry SET digest = 'x' WHERE sequence = 1")
    assert any("another history" in told for told in seals_problems([seal]))


def test_the_key_is_private_and_made_once(three, settings):
    history_seal(at=NOW)
    file = Path(settings.SEAL_KEY_FILE)
    assert stat.S_IMODE(file.stat().st_mode) == 0o600
    before = file.read_text()
    history_seal(at=LATER, again=True)
    assert file.read_text() == before
    assert public_text(key_read(before)) in keys_file().read_text()


def test_a_new_key_and_the_old_one_vouch_for_each_other(three, settings):
    first = history_seal(at=NOW)
    old, new = seal_key_change(at=LATER)
    assert old.public_key == first.public_key != new.public_key
    assert (old.sequence, old.digest) == (new.sequence, new.digest)
    assert list(seals_problems()) == []
    assert [line.problem for line in seal_lines(HistorySeal.objects.all())] == [""] * 3
    assert key_read(Path(settings.SEAL_KEY_FILE).read_text())


def test_a_key_that_cannot_be_read_is_said_and_not_replaced(three, settings):
    settings.SEAL_KEY = "no key"
    with pytest.raises(ValidationError, match="FRAMEBAY_SEAL_KEY could not be read"):
        history_seal(at=NOW)
    assert "{where}" in BAD_KEY


def test_an_empty_history_has_no_end_to_seal():
    with pytest.raises(ValidationError, match=EMPTY):
        history_seal(at=NOW)


def test_the_signature_is_a_plain_ed25519_one(three):
    """RFC 8032: the key is the last 32 bytes of its DER form (RFC 8410)."""
    seal = history_seal(at=NOW)
    der = base64.b64decode(seal.public_key)
    assert der[:12].hex() == "302a300506032b6570032100"  # RFC 8410, section 10.1
    signed = base64.b64decode(seal.signature)
    assert len(signed) == 64
    Ed25519PublicKey.from_public_bytes(der[12:]).verify(signed, seal.statement.encode())


# RFC 8032, section 7.1, test 1: secret key, public key.
RFC_SECRET = "9d61b19deffd5a60ba844af492ec2cc44449c5697b326919703bac031cae7f60"
RFC_PUBLIC = "d75a980182b10ab7d54bfed3c964073a0ee172f3daa62325af021a68f707511a"


def test_a_key_given_as_text_is_the_key_of_its_32_bytes():
    key = key_read(base64.b64encode(bytes.fromhex(RFC_SECRET)).decode())
    assert base64.b64decode(public_text(key))[12:].hex() == RFC_PUBLIC


@pytest.mark.skipif(shutil.which("openssl") is None, reason="needs the openssl command")
def test_openssl_verifies_a_seal_as_the_readme_says(three, settings, tmp_path):
    seal = history_seal(at=NOW)
    file = Path(settings.SEALS) / seal.where_published
    script = f"""
        head -n 7 {file} > statement
        sed -n 's/^public key: //p' {file} | base64 -d > key.der
        sed -n 's/^signature: //p' {file} | base64 -d > signature
        openssl pkeyutl -verify -pubin -keyform DER -inkey key.der \\
            -rawin -in statement -sigfile signature
    """
    done = subprocess.run(
        ["sh", "-c", script], cwd=tmp_path, capture_output=True, text=True, check=False
    )
    assert "Verified Successfully" in done.stdout, done.stdout + done.stderr


def test_what_is_no_seal_is_refused_line_by_line():
    with pytest.raises(NotASeal, match="expected the line"):
        seal_read("hello", "a note")
