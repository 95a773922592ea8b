"""Load a type's geometry file as a draft, and with --publish put it in force."""

from __future__ import annotations

from pathlib import Path
from typing import Any

from django.core.exceptions import ValidationError
from django.core.management.base import BaseCommand, CommandError, CommandParser

from fleet.clock import now, today
from fleet.models import GeometryRevision
from fleet.services.structure import geometry_load, geometry_publish


class Command(BaseCommand):
    help = "Load a type's geometry from its file; every problem of the file is named."

    def add_arguments(self, parser: CommandParser) -> None:
        parser.add_argument("file", type=Path)
        parser.add_argument("--publish", action="store_true", help="Put it in force.")

    def handle(self, *args: Any, **options: Any) -> None:
        try:
            content = options["file"].read_text(encoding="utf-8")
        except (OSError, UnicodeDecodeError) as error:
            raise CommandError(
                f"{options['file']} could not be read: {error}"
            ) from error
        try:
            revision = geometry_load(content=content, actor=None, at=now())
            draft = revision.state == GeometryRevision.State.DRAFT
            if options["publish"] and draft:
                geometry_publish(revision=revision, actor=None, at=now(), on=today())
        except ValidationError as error:
            raise CommandError("\n".join(error.messages)) from error
        self.stdout.write(f"{revision.aircraft_type}: {revision}, {revision.state}")
