"""Load a materials file; a changed material becomes its next revision."""

from __future__ import annotations

from pathlib import Path
from typing import Any

from django.core.exceptions import ValidationError
from django.core.management.base import BaseCommand, CommandError, CommandParser

from fleet.clock import now
from fleet.services.materials import materials_load


class Command(BaseCommand):
    help = "Load materials with their sources; every problem of the file is named."

    def add_arguments(self, parser: CommandParser) -> None:
        parser.add_argument("file", type=Path)

    def handle(self, *args: Any, **options: Any) -> None:
        try:
            changed = materials_load(path=options["file"], actor=None, at=now())
        except ValidationError as error:
            raise CommandError("\n".join(error.messages)) from error
        self.stdout.write(f"{changed} materials were new or changed.")
