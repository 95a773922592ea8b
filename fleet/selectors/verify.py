"""Does the record agree with its history? The first disagreement is named."""

from __future__ import annotations

from collections.abc import Collection, Iterator
from pathlib import Path

from django.db import connection
from django.db.models import Exists, OuterRef

from fleet.digests import (
    entry_digest,
    guarded_tables,
    items_digest,
    recorded_models,
)
from fleet.kept_files import attachment_path, file_digest
from fleet.models import (
    Attachment,
    HistoryEntry,
    HistoryHead,
    HistoryItem,
    HistorySeal,
)
from fleet.sealing import Seal
from fleet.selectors.seals import database_identity, known_keys, seal_of, seal_problem
from fleet.selectors.verify_rows import CHUNK, Read, table_problems
from fleet.snapshot import snapshot
from fleet.triggers import trigger_names, triggers_at_work

GONE = "Entry {expected} is missing; the next one is {sequence}."
NOT_AFTER = "{entry} does not follow the entry before it."
NOT_IN_STREAM = "{entry} does not follow in its stream {stream}."
ENTRY_ALTERED = "{entry} was altered: its digest disagrees."
ITEMS_ALTERED = "{entry}: its items were altered, added or removed."
WRONG_HEAD = "The head of the chain does not name the last entry, {last}."
LOOSE_ITEM = "Item {pk} belongs to entry {entry}, which is not there."
NO_TABLE = "History tells of a table that is not there: {table}."
NO_TRIGGER = "The trigger {name}, which refuses changes, is missing or altered."
NO_FILE = "The {which} of attachment {pk} ({name}) is not in the store."
FILE_ALTERED = "The {which} of attachment {pk} ({name}) was altered."


def problems(
    read: Read | None = None, *, files: bool = False, outside: Collection[Seal] = ()
) -> Iterator[str]:
    """Every disagreement, the chain's first; reads all rows of one instant, so it
    takes a while.

    `files` reads the attachments too; `outside` are seals kept elsewhere.
    """
    read = read or Read()
    with snapshot():
        yield from chain_problems(read)
        yield from seals_problems(outside)
        recorded = recorded_models()
        for model in recorded:
            yield from table_problems(model, read)
        tables = {model._meta.db_table for model in recorded}
        told = HistoryItem.objects.order_by("table").values_list("table", flat=True)
        for table in told.distinct():
            if table not in tables:
                yield NO_TABLE.format(table=table)
        yield from trigger_problems()
        if files:
            yield from file_problems(read)


def chain_problems(read: Read, stream: str = "") -> Iterator[str]:
    """Sequence, digests and both chains of the entries; of one stream, its own."""
    read.turn_to("entries")
    before, expected = "", 1
    streams = dict[str, tuple[int, str]]()
    for entry, items in entries_with_items(stream):
        read.entries += 1
        name = f"Entry {entry.sequence} ({entry.action})"
        number, stream_before = streams.get(entry.stream, (0, ""))
        if not stream:
            if entry.sequence != expected:
                yield GONE.format(expected=expected, sequence=entry.sequence)
            if entry.previous_digest != before:
                yield NOT_AFTER.format(entry=name)
        if (entry.stream_sequence, entry.stream_previous_digest) != (
            number + 1,
            stream_before,
        ):
            yield NOT_IN_STREAM.format(entry=name, stream=entry.stream)
        if entry.digest != entry_digest(entry):
            yield ENTRY_ALTERED.format(entry=name)
        if entry.items_digest != items_digest(items):
            yield ITEMS_ALTERED.format(entry=name)
        streams[entry.stream] = (entry.stream_sequence, entry.digest)
        before, expected = entry.digest, entry.sequence + 1
    if not stream:
        yield from _end_problems(expected - 1, before)


def _end_problems(last: int, digest: str) -> Iterator[str]:
    """The head names the last entry, and no item lies outside an entry."""
    head = HistoryHead.objects.filter(pk=1).first()
    if head is None or (head.sequence, head.digest) != (last, digest):
        yield WRONG_HEAD.format(last=last)
    known = HistoryEntry.objects.filter(sequence=OuterRef("entry_id"))
    loose = HistoryItem.objects.filter(~Exists(known)).order_by("pk")
    for pk, entry in loose.values_list("pk", "entry_id").iterator(CHUNK):
        yield LOOSE_ITEM.format(pk=pk, entry=entry)


def entries_with_items(
    stream: str = "",
) -> Iterator[tuple[HistoryEntry, list[HistoryItem]]]:
    """Entries in order with their items, in chunks."""
    entries = HistoryEntry.objects.order_by("sequence")
    if stream:
        entries = entries.filter(stream=stream)
    last = 0
    while chunk := list(entries.filter(sequence__gt=last)[:CHUNK]):
        items: dict[int, list[HistoryItem]] = {}
        wanted = HistoryItem.objects.filter(
            entry_id__gte=chunk[0].sequence, entry_id__lte=chunk[-1].sequence
        )
        if stream:
            wanted = wanted.filter(entry__stream=stream)
        for item in wanted.order_by("entry_id", "number").iterator(CHUNK):
            items.setdefault(item.entry_id, []).append(item)
        for entry in chunk:
            yield entry, items.pop(entry.sequence, [])
        last = chunk[-1].sequence


def seals_problems(outside: Collection[Seal] = ()) -> Iterator[str]:
    """Seals that are not genuine, or that the history no longer agrees with."""
    identity, keys = database_identity(), known_keys()
    seals = [seal_of(row) for row in HistorySeal.objects.order_by("sequence", "pk")]
    sequences = {seal.sequence for seal in (*seals, *outside)}
    digests = dict(
        HistoryEntry.objects.filter(sequence__in=sequences).values_list(
            "sequence", "digest"
        )
    )
    for seal in (*seals, *outside):
        problem = seal_problem(seal, identity, keys, digests.get(seal.sequence))
        if problem:
            yield problem


def trigger_problems() -> Iterator[str]:
    """Triggers that should refuse changes and are missing, switched off or altered."""
    tables = guarded_tables()
    at_work = triggers_at_work(connection, tables)
    for name in sorted(trigger_names(connection.vendor, tables) - at_work):
        yield NO_TRIGGER.format(name=name)


def file_problems(read: Read) -> Iterator[str]:
    """Attachments whose bytes are lost or no longer what was received or shown."""
    read.turn_to("attachments")
    for row in Attachment.objects.order_by("pk").iterator(CHUNK):
        kept = {"original": row.original_sha256, "shown copy": row.sha256}
        if row.sha256 == row.original_sha256:
            kept.pop("shown copy")
        for which, sha256 in kept.items():
            read.files += 1
            found = _digest_on_disk(attachment_path(sha256))
            if found != sha256:
                words = FILE_ALTERED if found else NO_FILE
                yield words.format(which=which, pk=row.pk, name=row.original_name)


def _digest_on_disk(path: Path) -> str:
    return file_digest(path) if path.is_file() else ""
