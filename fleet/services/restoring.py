"""Putting a backup back into a database, and proving that it is what it was."""

from __future__ import annotations

import datetime as dt
import itertools
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from django.conf import settings
from django.core.exceptions import ValidationError
from django.core.management.color import no_style
from django.db import connection, models, transaction

from fleet.backup_file import ATTACHMENTS, SEALS, BackupReader
from fleet.digests import guarded_tables
from fleet.kept_files import attachment_path, file_digest, written_whole
from fleet.models import Backup, HistoryHead
from fleet.selectors.verify import problems
from fleet.selectors.verify_rows import Read
from fleet.services.backups import copied_models
from fleet.services.history import Writing
from fleet.triggers import triggers_install, triggers_remove

BATCH = 2_000
TOLD = 20
"""Problems kept with the row; the command prints them all."""
SIGNED_IN = "django_session"
NOT_EMPTY = (
    "This database holds records already ({what}); nothing was restored. Restore into "
    "an empty database (another FRAMEBAY_DATA or DATABASE_URL), or say --replace to "
    "give up what is here for what the backup holds."
)
NO_TABLE = (
    "The backup holds a table that this program does not know: {table}. It was made by "
    "a newer version; restore it with that version. Nothing was restored."
)
NO_COLUMN = (
    "The backup's table {table} has a column unknown to this program: {column}. It was "
    "made by a newer version; restore it with that version. Nothing was restored."
)
MUST_BE_FILLED = (
    "The backup's table {table} lacks the column {column}, which may not be empty. "
    "Restore it with the version that made it, then migrate. Nothing was restored."
)


@dataclass(frozen=True)
class Restored:
    """What was put back, and what its verification found."""

    row: Backup
    read: Read
    problems: list[str]


def backup_restore(
    *,
    backup: BackupReader,
    at: dt.datetime,
    replace: bool = False,
    say: Callable[[str], None] = lambda _: None,
) -> Restored:
    """Put all rows and files back as they were, verify them, and record the outcome.

    Rows go in as one transaction: all, or nothing is changed. Raises ValidationError
    when the database is not empty, or of another make than the backup.
    """
    by_table = {model._meta.db_table: model for model in copied_models()}
    _check_columns(backup, by_table)
    held = records_held()
    if held and not replace:
        raise ValidationError(NOT_EMPTY.format(what=", ".join(held[:5])))
    say(f"writing {len(backup.manifest.attachments):,} attachments")
    _put_files(backup)
    with transaction.atomic():
        _empty(list(by_table), say)
        for table in backup.tables:
            say(f"{table} ({backup.manifest.files[f'tables/{table}.jsonl'].rows:,})")
            _fill(by_table[table], backup)
        _count_on(list(by_table.values()))
        connection.check_constraints()
    say("verifying every record against the history")
    read = Read(say=say)
    found = list(problems(read, files=True))
    return Restored(_recorded(backup, at, found), read, found)


def drill_record(*, backup: BackupReader, at: dt.datetime, found: list[str]) -> Backup:
    """That the backup was restored elsewhere and thrown away, and what was found."""
    return _recorded(backup, at, found)


def records_held() -> list[str]:
    """Tables with rows that a new database does not have."""
    return [
        model._meta.db_table
        for model in copied_models()
        if model is not HistoryHead and model._base_manager.exists()
    ]


def _check_columns(
    backup: BackupReader, by_table: dict[str, type[models.Model]]
) -> None:
    """Refuse what has no place here; a column added since begins empty."""
    for table in backup.tables:
        if table not in by_table:
            raise ValidationError(NO_TABLE.format(table=table))
        fields = {str(f.column): f for f in by_table[table]._meta.concrete_fields}
        columns = backup.columns(table)
        for column in columns:
            if column not in fields:
                raise ValidationError(NO_COLUMN.format(table=table, column=column))
        for column in fields.keys() - set(columns):
            if not (fields[column].null or fields[column].blank):
                words = MUST_BE_FILLED.format(table=table, column=column)
                raise ValidationError(words)


def _put_files(backup: BackupReader) -> None:
    for name in backup.manifest.files:
        if name.startswith(ATTACHMENTS):
            sha256 = name.removeprefix(ATTACHMENTS)
            path = attachment_path(sha256)
            if not path.is_file() or file_digest(path) != sha256:
                _put(backup, name, path)
        elif name.startswith(SEALS):
            path = Path(settings.SEALS) / name.removeprefix(SEALS)
            if not path.exists():
                _put(backup, name, path)


def _put(backup: BackupReader, name: str, path: Path) -> None:
    with written_whole(path) as file:
        for block in backup.blocks(name):
            file.write(block)


def _empty(tables: list[str], say: Callable[[str], None]) -> None:
    """Remove every row, with the triggers that refuse it out of the way meanwhile."""
    say("emptying the tables")
    connection.check_constraints()  # PostgreSQL alters no table with checks pending
    guarded = guarded_tables()
    triggers_remove(connection, guarded)
    with connection.cursor() as cursor:
        for table in (*tables, SIGNED_IN):
            cursor.execute(f"DELETE FROM {connection.ops.quote_name(table)}")
    connection.check_constraints()
    triggers_install(connection, guarded)


def _fill(model: type[models.Model], backup: BackupReader) -> None:
    table, quote = model._meta.db_table, connection.ops.quote_name
    fields = {str(field.column): field for field in model._meta.concrete_fields}
    columns = backup.columns(table)
    added = [column for column in fields if column not in columns]
    beginning = [None if fields[column].null else "" for column in added]
    ordered = [fields[column] for column in (*columns, *added)]
    listed = ", ".join(map(quote, (*columns, *added)))
    sql = (
        f"INSERT INTO {quote(table)} ({listed}) "
        f"VALUES ({', '.join(['%s'] * len(ordered))})"
    )
    rows = iter(backup.rows(table))
    with connection.cursor() as cursor:
        while batch := list(itertools.islice(rows, BATCH)):
            cursor.executemany(
                sql, [_stored(ordered, [*row, *beginning]) for row in batch]
            )


def _stored(fields: list[models.Field[Any, Any]], row: list[Any]) -> list[Any]:
    return [
        field.get_db_prep_save(field.to_python(value), connection)
        for field, value in zip(fields, row, strict=True)
    ]


def _count_on(tables: list[type[models.Model]]) -> None:
    """New rows get keys after those that were put back."""
    with connection.cursor() as cursor:
        for statement in connection.ops.sequence_reset_sql(no_style(), tables):
            cursor.execute(statement)


def _recorded(backup: BackupReader, at: dt.datetime, found: list[str]) -> Backup:
    with Writing(actor=None, action="backup_restore", at=at) as w:
        return w.create(
            Backup(
                kind="restored",
                made_at=at,
                place=str(backup.path),
                byte_count=backup.path.stat().st_size,
                digest=backup.manifest.digest,
                sequence=backup.manifest.sequence,
                problems="\n".join(found[:TOLD]),
            )
        )
