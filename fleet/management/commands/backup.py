"""`manage.py backup [--to FOLDER] [--keep N]`: all records in one file elsewhere."""

from __future__ import annotations

from pathlib import Path
from typing import Any

from django.conf import settings
from django.core.management.base import BaseCommand, CommandError

from fleet.clock import now
from fleet.services.backups import backup_make

MADE = (
    "Backup {path}: {rows:,} rows, {files:,} attachments, {megabytes:.1f} MB, up to "
    "history entry {sequence:,}.\nSHA-256 of its list of contents: {digest}\n"
    "Not in it: {left_out}."
)
NOT_WRITTEN = "The backup could not be written to {folder}: {error}."
KEEP_ONE = "--keep {keep}: keep at least one."
INCOMPLETE = "The backup is made, but {count:,} kept files are not whole in it:\n{lost}"


class Command(BaseCommand):
    help = (
        "Copy all records and kept files of one instant to a zip file, and record it. "
        "Others go on working meanwhile. Put the folder on another machine."
    )

    def add_arguments(self, parser: Any) -> None:
        parser.add_argument(
            "--to",
            type=Path,
            metavar="FOLDER",
            help="where to (default: FRAMEBAY_BACKUPS)",
        )
        parser.add_argument(
            "--keep", type=int, metavar="N", help="then remove all but the newest N"
        )
        parser.add_argument(
            "--progress", action="store_true", help="say what is being copied"
        )

    def handle(self, *args: Any, **options: Any) -> None:
        folder = (options["to"] or Path(settings.BACKUPS)).resolve()
        if options["keep"] is not None and options["keep"] < 1:
            raise CommandError(KEEP_ONE.format(keep=options["keep"]))
        say = self._say if options["progress"] else lambda _: None
        try:
            made = backup_make(folder=folder, at=now(), keep=options["keep"], say=say)
        except OSError as error:
            words = NOT_WRITTEN.format(folder=folder, error=error)
            raise CommandError(words) from error
        self.stdout.write(
            MADE.format(
                path=made.path,
                rows=made.manifest.rows,
                files=len(made.manifest.attachments),
                megabytes=made.row.byte_count / 1_048_576,
                sequence=made.manifest.sequence,
                digest=made.row.digest,
                left_out="; ".join(made.manifest.left_out),
            )
        )
        lost = made.manifest.lost
        if lost:
            raise CommandError(INCOMPLETE.format(count=len(lost), lost="\n".join(lost)))

    def _say(self, what: str) -> None:
        self.stderr.write(f"  {what}")
