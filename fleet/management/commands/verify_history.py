"""`manage.py verify_history`: does every record agree with its history?"""

from __future__ import annotations

import time
from collections.abc import Iterator
from pathlib import Path
from typing import Any

from django.core.management.base import BaseCommand, CommandError

from fleet.models import Aircraft, HistoryEntry
from fleet.sealing import NotASeal, Seal, seal_read
from fleet.selectors.verify import problems
from fleet.selectors.verify_rows import Read
from fleet.selectors.verify_stream import stream_problems
from fleet.services.aircraft import stream_of

AGREES = (
    "History agrees: {entries:,} entries, {rows:,} rows, {files:,} files in "
    "{seconds:.1f} s ({rate:,.0f} rows/s); every record accounted for."
)
STREAM_AGREES = (
    "{stream} agrees: {entries:,} entries of its own chain, {rows:,} rows that they "
    "tell of or that hang on it, in {seconds:.1f} s. Run it without a stream for all."
)
NO_STREAM = "No entry of the history belongs to the stream “{stream}”."
NO_AIRCRAFT = "No aircraft is or was registered “{registration}” here."
NO_FILE = "The seal file {path} could not be read: {error}."
STREAM_ALONE = "--seal speaks of the whole history; leave --stream or --aircraft out."


class Command(BaseCommand):
    help = (
        "Checks the chain of history entries, the seals, every record and every kept "
        "file against the history. Names the first entry or record that disagrees and "
        "exits with status 1."
    )

    def add_arguments(self, parser: Any) -> None:
        parser.add_argument(
            "--all", action="store_true", help="list every disagreement, not the first"
        )
        parser.add_argument(
            "--no-files", action="store_true", help="leave the kept files unread"
        )
        parser.add_argument(
            "--seal",
            action="append",
            type=Path,
            default=[],
            metavar="FILE",
            help="a seal kept elsewhere that the history must agree with",
        )
        alone = parser.add_mutually_exclusive_group()
        alone.add_argument("--stream", help="this chain alone, such as aircraft:17")
        alone.add_argument(
            "--aircraft", metavar="REG", help="the chain of this registration alone"
        )
        parser.add_argument(
            "--progress", action="store_true", help="say which table is being read"
        )

    def handle(self, *args: Any, **options: Any) -> None:
        stream = _stream(options)
        if stream and options["seal"]:
            raise CommandError(STREAM_ALONE)
        seals = [_seal(path) for path in options["seal"]]
        began, read = time.monotonic(), Read()
        if options["progress"]:
            read.say = self._say
        found: Iterator[str] = (
            stream_problems(stream, read)
            if stream
            else problems(read, files=not options["no_files"], outside=seals)
        )
        listed = list(found) if options["all"] else [*_first(found)]
        if listed:
            raise CommandError("\n".join(listed))
        seconds = time.monotonic() - began
        words = STREAM_AGREES if stream else AGREES
        self.stdout.write(
            words.format(
                stream=stream,
                entries=read.entries,
                rows=read.rows,
                files=read.files,
                seconds=seconds,
                rate=read.rows / max(seconds, 0.001),
            )
        )

    def _say(self, what: str) -> None:
        self.stderr.write(f"  {what}")


def _first(found: Iterator[str]) -> Iterator[str]:
    """The first only; the rest is not read, and the snapshot is let go."""
    first = next(found, None)
    if first is not None:
        yield first
    getattr(found, "close", lambda: None)()


def _stream(options: dict[str, Any]) -> str:
    stream, registration = options["stream"] or "", options["aircraft"]
    if registration:
        aircraft = Aircraft.objects.filter(periods__registration=registration).first()
        if aircraft is None:
            raise CommandError(NO_AIRCRAFT.format(registration=registration))
        stream = stream_of(aircraft)
    if stream and not HistoryEntry.objects.filter(stream=stream).exists():
        raise CommandError(NO_STREAM.format(stream=stream))
    return stream


def _seal(path: Path) -> Seal:
    try:
        return seal_read(path.read_text(encoding="utf-8"), str(path))
    except (OSError, UnicodeDecodeError) as error:
        raise CommandError(NO_FILE.format(path=path, error=error)) from error
    except NotASeal as error:
        raise CommandError(str(error)) from error
