"""`manage.py restore FILE`: a backup put back, and every record of it verified."""

from __future__ import annotations

import os
import subprocess
import sys
import tempfile
from pathlib import Path
from typing import Any

from django.core.exceptions import ValidationError
from django.core.management import call_command
from django.core.management.base import BaseCommand, CommandError

from fleet.backup_file import BackupReader, NotABackup
from fleet.clock import now
from fleet.services.restoring import backup_restore, drill_record, records_held

ASKED = (
    "This gives up every record of this database for those of the backup made "
    "{made_at} (history entry {sequence:,}). Type replace to go on: "
)
GIVEN_UP = "Nothing was changed."
DRILLED = (
    "This was a drill: that database is gone, the outcome is recorded in this one."
)
GOOD = (
    "Restored {path}, made {made_at}: {rows:,} rows and {files:,} files put back and "
    "verified, {entries:,} history entries. Everything agrees.\n"
    "SHA-256 of its list of contents: {digest}"
)
BAD = (
    "Restored {path}, but {count:,} things do not agree: records were altered or files "
    "lost before the backup was made.\n{problems}"
)


class Command(BaseCommand):
    help = (
        "Put a backup back into an empty database, SQLite or PostgreSQL whichever it "
        "was made from, and verify every record and file. Exits with status 1 if "
        "anything disagrees."
    )

    def add_arguments(self, parser: Any) -> None:
        parser.add_argument("file", type=Path)
        parser.add_argument(
            "--replace",
            action="store_true",
            help="give up what this database holds; asks first",
        )
        parser.add_argument(
            "--no-input", action="store_true", help="with --replace: do not ask"
        )
        parser.add_argument(
            "--drill",
            action="store_true",
            help="into a database thrown away afterwards; the outcome is recorded here",
        )
        parser.add_argument(
            "--progress", action="store_true", help="say what is being done"
        )

    def handle(self, *args: Any, **options: Any) -> None:
        say = self._say if options["progress"] else lambda _: None
        try:
            backup = BackupReader(options["file"], say)
            if options["drill"]:
                self._drill(backup)
                return
            call_command("migrate", verbosity=0)
            if options["replace"] and records_held() and not options["no_input"]:
                self._ask(backup)
            done = backup_restore(
                backup=backup, at=now(), replace=options["replace"], say=say
            )
        except NotABackup as error:
            raise CommandError(str(error)) from error
        except ValidationError as error:
            raise CommandError(" ".join(error.messages)) from error
        if done.problems:
            raise CommandError(
                BAD.format(
                    path=backup.path,
                    count=len(done.problems),
                    problems="\n".join(done.problems),
                )
            )
        self.stdout.write(
            GOOD.format(
                path=backup.path,
                made_at=backup.manifest.made_at,
                rows=done.read.rows,
                files=done.read.files,
                entries=done.read.entries,
                digest=backup.manifest.digest,
            )
        )

    def _drill(self, backup: BackupReader) -> None:
        """Restore it as on a new machine: in a process and a folder of its own."""
        with tempfile.TemporaryDirectory() as folder:
            environment = os.environ | {"FRAMEBAY_DATA": folder, "DATABASE_URL": ""}
            done = subprocess.run(
                [sys.executable, sys.argv[0], "restore", str(backup.path.resolve())],
                env=environment,
                capture_output=True,
                text=True,
                check=False,
            )
        found = done.stderr.strip().splitlines() if done.returncode else []
        drill_record(backup=backup, at=now(), found=found)
        if found:
            raise CommandError("\n".join(found))
        self.stdout.write(done.stdout + DRILLED)

    def _ask(self, backup: BackupReader) -> None:
        question = ASKED.format(
            made_at=backup.manifest.made_at, sequence=backup.manifest.sequence
        )
        if input(question).strip() != "replace":
            raise CommandError(GIVEN_UP)

    def _say(self, what: str) -> None:
        self.stderr.write(f"  {what}")
