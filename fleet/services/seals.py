"""Sealing the end of the history, so that moving it back is found out later.

A seal stands outside the history that it seals: it is neither an entry nor explained
by one, and what proves it is its signature.
"""

from __future__ import annotations

import datetime as dt
import os
from pathlib import Path

from cryptography.hazmat.primitives.asymmetric.ed25519 import Ed25519PrivateKey
from django.conf import settings
from django.core.exceptions import ValidationError

from fleet.kept_files import written_whole
from fleet.models import HistoryHead, HistorySeal
from fleet.sealing import Seal, key_new, key_read, key_text, public_text, seal_sign
from fleet.selectors.seals import (
    SEPARATOR,
    database_identity,
    keys_file,
    known_keys,
    last_seal,
)

EMPTY = "There is nothing to seal: the history has no entry yet."
BAD_KEY = (
    "The seal key in {where} could not be read; expected base64 of the 32 bytes of an "
    "Ed25519 private key. Put the right key back, or move it away to have one made."
)
FIXED_KEY = (
    "The seal key comes from FRAMEBAY_SEAL_KEY; set the new key there and seal again."
)


def history_seal(*, at: dt.datetime, again: bool = False) -> Seal | None:
    """Sign the end of the history and keep the seal, as a row and as a text file.

    None when that end is sealed already and no other seal is asked for.
    """
    head = HistoryHead.objects.get(pk=1)
    if not head.sequence:
        raise ValidationError(EMPTY)
    last = last_seal()
    if (
        last
        and not again
        and (last.sequence, last.digest)
        == (
            head.sequence,
            head.digest,
        )
    ):
        return None
    return _sealed(_key(at), head, at)


def seal_key_change(*, at: dt.datetime) -> list[Seal]:
    """A new key from now on. The old one seals the end once more and is then deleted,
    the new one seals the same end: so each vouches for the other."""
    if settings.SEAL_KEY:
        raise ValidationError(FIXED_KEY)
    head = HistoryHead.objects.get(pk=1)
    if not head.sequence:
        raise ValidationError(EMPTY)
    made = [_sealed(_key(at), head, at)]
    Path(settings.SEAL_KEY_FILE).unlink()
    return [*made, _sealed(_key(at), head, at)]


def _sealed(key: Ed25519PrivateKey, head: HistoryHead, at: dt.datetime) -> Seal:
    path = _free_name(at.date(), head.sequence)
    seal = seal_sign(
        key,
        database=database_identity(),
        sequence=head.sequence,
        digest=head.digest,
        at=at,
        where_published=path.name,
    )
    with written_whole(path) as file:
        file.write(seal.text.encode())
    HistorySeal.objects.create(
        sequence=seal.sequence,
        digest=seal.digest,
        sealed_at=at,
        where_published=seal.where_published,
        signature=SEPARATOR.join((seal.database, seal.public_key, seal.signature)),
    )
    return seal


def _free_name(day: dt.date, sequence: int) -> Path:
    """seal-2026-12-01.txt; a second seal of the day names its entry too."""
    folder = Path(settings.SEALS)
    names = [f"seal-{day}.txt", f"seal-{day}-{sequence}.txt"]
    names += [f"seal-{day}-{sequence}-{n}.txt" for n in range(2, 1_000)]
    return next(folder / name for name in names if not (folder / name).exists())


def _key(at: dt.datetime) -> Ed25519PrivateKey:
    """The key from the environment or the key file, made at first use; its public half
    joins the list of keys used here."""
    path = Path(settings.SEAL_KEY_FILE)
    if not settings.SEAL_KEY and not path.exists():
        handle = os.open(path, os.O_WRONLY | os.O_CREAT | os.O_EXCL, 0o600)
        with os.fdopen(handle, "w") as file:
            file.write(key_text(key_new()))
    try:
        key = key_read(settings.SEAL_KEY or path.read_text())
    except ValueError as error:
        where = "FRAMEBAY_SEAL_KEY" if settings.SEAL_KEY else str(path)
        raise ValidationError(BAD_KEY.format(where=where)) from error
    _list(public_text(key), at.date())
    return key


def _list(public: str, day: dt.date) -> None:
    if public in (known_keys() or ()):
        return
    kept = keys_file()
    before = kept.read_bytes() if kept.exists() else b""
    with written_whole(kept) as file:
        file.write(before + f"{public}{SEPARATOR}since {day}\n".encode())
