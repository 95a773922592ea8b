"""Seals of the history's end, and whether the history still agrees with them."""

from __future__ import annotations

import datetime as dt
from collections.abc import Collection, Sequence
from dataclasses import dataclass
from pathlib import Path

from django.conf import settings

from fleet.canonical import plain
from fleet.models import HistoryEntry, HistorySeal
from fleet.sealing import Seal

SEPARATOR = " "
DISAGREES = "Entry {sequence} disagrees with its seal of {sealed_at}."
FORGED = "The seal of entry {sequence}, of {sealed_at}, is not genuine: its signature "
FORGED += "is not that of its key over what it says."
UNKNOWN_KEY = (
    "The seal of entry {sequence}, of {sealed_at}, was made with a key that is not "
    "among those of this installation ({file})."
)
OTHER_DATABASE = "The seal of entry {sequence}, of {sealed_at}, is of another history."
DAY = dt.timedelta(days=1)


@dataclass(frozen=True)
class SealLine:
    """One seal as the page shows it; `problem` is empty when the history agrees."""

    row: HistorySeal
    seal: Seal
    problem: str


def keys_file() -> Path:
    """The list of the public keys that seals were ever made with here."""
    return Path(settings.SEALS) / "keys.txt"


def known_keys() -> frozenset[str] | None:
    """Public keys used here, the present one last written; None if none was kept."""
    path = keys_file()
    if not path.exists():
        return None
    lines = path.read_text(encoding="ascii").splitlines()
    return frozenset(line.split(SEPARATOR)[0] for line in lines if line)


def database_identity() -> str:
    """Digest of the first entry: every copy of this history has it, no other does."""
    first = HistoryEntry.objects.order_by("sequence").values_list("digest", flat=True)
    return first.first() or ""


def seal_of(row: HistorySeal) -> Seal:
    """The seal that the row keeps: its signature column holds the rest of the text."""
    parts = [*row.signature.split(SEPARATOR), "", "", ""]
    return Seal(
        database=parts[0],
        sequence=row.sequence,
        digest=row.digest,
        sealed_at=plain(row.sealed_at),
        where_published=row.where_published,
        public_key=parts[1],
        signature=parts[2],
    )


def seal_problem(
    seal: Seal,
    identity: str,
    keys: Collection[str] | None,
    digest: str | None,
) -> str:
    """Why the seal does not vouch for the history, or ''; `digest` is the entry's."""
    if not seal.is_genuine:
        words = FORGED
    elif seal.database != identity:
        words = OTHER_DATABASE
    elif seal.digest != digest:
        words = DISAGREES
    elif keys is not None and seal.public_key not in keys:
        words = UNKNOWN_KEY
    else:
        return ""
    return words.format(
        sequence=seal.sequence, sealed_at=seal.sealed_at, file=keys_file().name
    )


def seal_lines(rows: Sequence[HistorySeal]) -> list[SealLine]:
    """The seals with what the history says of them today; two queries."""
    sequences = {row.sequence for row in rows}
    digests = dict(
        HistoryEntry.objects.filter(sequence__in=sequences).values_list(
            "sequence", "digest"
        )
    )
    identity, keys = database_identity(), known_keys()
    lines = []
    for row in rows:
        seal = seal_of(row)
        problem = seal_problem(seal, identity, keys, digests.get(row.sequence))
        lines.append(SealLine(row, seal, problem))
    return lines


def last_seal() -> HistorySeal | None:
    return HistorySeal.objects.order_by("sequence", "pk").last()
