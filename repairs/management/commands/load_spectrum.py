"""Record a load spectrum, or with --revise its next revision; --dry-run keeps nothing.

A table has columns: stress_mpa; max_mpa or range_mpa with ratio and count; or
level_mpa with exceedances or occurrences.
"""

from __future__ import annotations

from pathlib import Path
from typing import Any

from django.core.exceptions import ValidationError
from django.core.management.base import BaseCommand, CommandError, CommandParser

from fleet.clock import now
from repairs.services.spectra import (
    KEYS,
    KIND_WORDS,
    WORDS,
    spectrum_data,
    spectrum_named,
    spectrum_read,
    spectrum_record,
    spectrum_revise,
)
from repairs.services.spectrum_shown import spectrum_shown

WHOLE = ("seed", "flights")
TEXTS = ("ground", "ground_ratio_source")
NOT_READ = "{file} could not be read: {error}"
NOT_THIS_KIND = "--{options} say nothing of a spectrum of kind {kind}; leave them out."
UNKNOWN = "No spectrum is named {name}; record it without --revise."


class Command(BaseCommand):
    help = "Record a load spectrum from a table or its choices."

    def add_arguments(self, parser: CommandParser) -> None:
        parser.add_argument("name")
        parser.add_argument("file", type=Path, nargs="?", help="Table, as CSV.")
        parser.add_argument("--kind", choices=list(KIND_WORDS), required=True)
        parser.add_argument("--source", default="", help="Document, revision, page.")
        parser.add_argument("--revise", action="store_true", help="Next revision.")
        parser.add_argument("--dry-run", action="store_true", help="Read and keep not.")
        for key in dict.fromkeys(key for keys in KEYS.values() for key in keys):
            option = f"--{key.replace('_', '-')}"
            if key == "repeats":
                parser.add_argument(option, choices=["yes", "no"])
            elif key in WORDS:
                parser.add_argument(option, choices=WORDS[key])
            elif key in TEXTS:
                parser.add_argument(option)
            else:
                parser.add_argument(option, type=int if key in WHOLE else float)

    def handle(self, *args: Any, **options: Any) -> None:
        try:
            self.stdout.write(self._kept(options))
        except ValidationError as error:
            raise CommandError("\n".join(error.messages)) from error

    def _kept(self, options: dict[str, Any]) -> str:
        data, name = _data(options), options["name"]
        shown = spectrum_shown(spectrum_read(data, name))
        said = [f"{name}: {shown.kind}", *shown.cautions]
        if shown.per_flight is not None:
            said.append(
                f"{shown.per_flight:,.6g} cycles per flight, {shown.different} "
                f"different, {shown.smallest:.2f} to {shown.largest:.2f} MPa"
            )
        if options["dry_run"]:
            return "\n".join([*said, "Nothing was recorded."])
        told = {"data": data, "source": options["source"], "actor": None, "at": now()}
        if not options["revise"]:
            row = spectrum_record(name=name, **told)
        elif (before := spectrum_named(name)) is None:
            raise CommandError(UNKNOWN.format(name=name))
        else:
            row = spectrum_revise(row=before, **told)
        return "\n".join([*said, f"Recorded as {row}."])


def _data(options: dict[str, Any]) -> dict[str, Any]:
    kind = options["kind"]
    every = {key for keys in KEYS.values() for key in keys}
    foreign = sorted(
        key for key in every if options[key] is not None and key not in KEYS[kind]
    )
    if foreign:
        names = ", --".join(key.replace("_", "-") for key in foreign)
        raise CommandError(NOT_THIS_KIND.format(options=names, kind=kind))
    given = {key: options[key] for key in KEYS[kind]}
    if given.get("repeats") is not None:
        given["repeats"] = given["repeats"] == "yes"
    table = ""
    if options["file"] is not None:
        try:
            table = options["file"].read_text(encoding="utf-8-sig")
        except (OSError, UnicodeDecodeError) as error:
            raise CommandError(
                NOT_READ.format(file=options["file"], error=error)
            ) from error
    return spectrum_data(kind, given, table)
