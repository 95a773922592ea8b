"""Copying all records, with the files kept beside them, to one file elsewhere."""

from __future__ import annotations

import datetime as dt
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from django.apps import apps
from django.conf import settings
from django.db import connection, models
from django.db.migrations.recorder import MigrationRecorder

from fleet.backup_file import ATTACHMENTS, SEALS, BackupWriter, Manifest
from fleet.kept_files import attachment_path, written_whole
from fleet.models import Attachment, Backup, HistoryHead
from fleet.selectors.seals import database_identity
from fleet.services.history import Writing
from fleet.snapshot import snapshot

CHUNK = 2_000
PREFIX, SUFFIX = "framebay-", ".zip"
# The framework makes these anew, or they hold nothing that outlives a day.
NOT_COPIED = frozenset({"admin", "auth", "axes", "contenttypes", "sessions"})
LOST = "attachment {sha256} is not in the store"
ALTERED = "attachment {sha256} was altered: its bytes have another digest"


@dataclass(frozen=True)
class Made:
    """A backup that was written."""

    row: Backup
    path: Path
    manifest: Manifest


def backup_make(
    *,
    folder: Path,
    at: dt.datetime,
    keep: int | None = None,
    say: Callable[[str], None] = lambda _: None,
) -> Made:
    """Write one instant of all records to a file in the folder, and record it.

    The file appears when it is whole. With `keep`, only so many of the newest stay.
    What could not be copied is named in `problems` of the row.
    """
    path = folder / f"{PREFIX}{at:%Y%m%d-%H%M%S}{SUFFIX}"
    manifest = _manifest_empty(at)
    with written_whole(path) as file, BackupWriter(file, manifest, at) as writer:
        _write(writer, say)
    with Writing(actor=None, action="backup_make", at=at) as w:
        row = w.create(
            Backup(
                kind="made",
                made_at=at,
                place=str(path),
                byte_count=path.stat().st_size,
                digest=manifest.digest,
                sequence=manifest.sequence,
                problems="\n".join(manifest.lost),
            )
        )
    if keep is not None:
        for old in sorted(folder.glob(f"{PREFIX}*{SUFFIX}"))[:-keep]:
            old.unlink()
    return Made(row, path, manifest)


def copied_models() -> list[type[models.Model]]:
    """Every table that a backup holds."""
    return [
        model
        for model in apps.get_models(include_auto_created=True)
        if model._meta.app_label not in NOT_COPIED and model._meta.managed
    ]


def _manifest_empty(at: dt.datetime) -> Manifest:
    made_at = at.astimezone(dt.UTC).isoformat()
    return Manifest(made_at=made_at, database="", sequence=0, head="", migrations=[])


def _write(writer: BackupWriter, say: Callable[[str], None]) -> None:
    manifest = writer.manifest
    with snapshot():
        head = HistoryHead.objects.get(pk=1)
        manifest.sequence, manifest.head = head.sequence, head.digest
        manifest.database = database_identity()
        applied = MigrationRecorder(connection).applied_migrations()
        manifest.migrations = sorted([app, name] for app, name in applied)
        for model in copied_models():
            say(model._meta.db_table)
            columns = [str(field.column) for field in model._meta.concrete_fields]
            writer.table(model._meta.db_table, columns, _rows(model))
        kept = _digests_kept()
    say(f"{len(kept):,} attachments")
    for sha256 in kept:
        _copy(writer, sha256)
    for seal in sorted(Path(settings.SEALS).glob("*.txt")):
        writer.file(f"{SEALS}{seal.name}", seal)


def _copy(writer: BackupWriter, sha256: str) -> None:
    path = attachment_path(sha256)
    if not path.is_file():
        writer.manifest.lost.append(LOST.format(sha256=sha256))
    elif writer.file(f"{ATTACHMENTS}{sha256}", path) != sha256:
        writer.manifest.lost.append(ALTERED.format(sha256=sha256))


def _digests_kept() -> list[str]:
    """Originals and shown copies of all attachments, each once."""
    pairs = Attachment.objects.values_list("sha256", "original_sha256")
    return sorted({sha256 for pair in pairs.iterator(CHUNK) for sha256 in pair})


def _rows(model: type[models.Model]) -> Iterator[list[Any]]:
    names = [field.attname for field in model._meta.concrete_fields]
    rows = model._base_manager.order_by("pk").values_list(*names)
    for row in rows.iterator(CHUNK):
        yield [_held(value) for value in row]


def _held(value: Any) -> Any:
    """As JSON holds it; numbers keep every digit."""
    if value is None or isinstance(value, bool | int | float | str):
        return value
    if isinstance(value, dt.datetime):
        return value.astimezone(dt.UTC).isoformat(timespec="microseconds")
    if isinstance(value, dt.date):
        return value.isoformat()
    return str(value)
