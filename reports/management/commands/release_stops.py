"""manage.py release_stops REG: what stands before release; exits with 1 if any does."""

from __future__ import annotations

import json
import sys
from datetime import date
from typing import Any

from django.core.management.base import BaseCommand, CommandError, CommandParser

from fleet.clock import now, today
from fleet.models import Aircraft
from fleet.tables import rows_to_csv
from fleet.units import UnitError, hours_read
from reports.exports.release import release_csv_rows, release_json, release_table
from reports.release_stops import HEADER, WITHIN, StopsQuery, release_stops

NO_AIRCRAFT = "No aircraft is registered “{read}”; registrations are: {known}."
BAD_DATE = "“{read}” is not a date; write it as 2025-01-31."
BAD_FLIGHTS = "--flights {read}: give at least 1."
STANDS, WRONG = 1, 2


class Command(BaseCommand):
    help = (
        "List the release stops of an aircraft. The exit status is 0 when none is "
        "recorded, 1 when any stands, 2 when it was asked wrongly. None listed is not "
        "a release."
    )

    def add_arguments(self, parser: CommandParser) -> None:
        parser.add_argument("registration", metavar="REG")
        parser.add_argument("--as-of", metavar="DATE", default="")
        parser.add_argument("--flights", type=int, default=1)
        parser.add_argument("--hours", metavar="H:MM", default="")
        parser.add_argument("--within-days", type=int, default=WITHIN)
        parser.add_argument(
            "--format", choices=("table", "csv", "json"), default="table"
        )

    def handle(self, *args: Any, **options: Any) -> None:
        found = release_stops(_aircraft(options["registration"]), _query(options))
        printed_at = now()
        if options["format"] == "json":
            text = json.dumps(release_json(found, printed_at=printed_at), indent=2)
        elif options["format"] == "csv":
            text = rows_to_csv(HEADER, release_csv_rows(found, printed_at=printed_at))
        else:
            text = release_table(found, printed_at=printed_at)
        self.stdout.write(text)
        if found.stops:
            sys.exit(STANDS)


def _aircraft(read: str) -> Aircraft:
    """The one that bears the registration now, else the last that did."""
    rows = Aircraft.objects.filter(registration__iexact=read)
    found = rows.select_related("operator", "variant").order_by("-data_from")
    row = found.filter(data_to__isnull=True).first() or found.first()
    if row is None:
        marks = Aircraft.objects.values_list("registration", flat=True)
        known = ", ".join(marks) or "none yet"
        raise CommandError(NO_AIRCRAFT.format(read=read, known=known), returncode=WRONG)
    return row


def _query(options: dict[str, Any]) -> StopsQuery:
    if options["flights"] < 1:
        text = BAD_FLIGHTS.format(read=options["flights"])
        raise CommandError(text, returncode=WRONG)
    try:
        minutes = hours_read(options["hours"]) if options["hours"] else None
    except UnitError as error:
        raise CommandError(str(error), returncode=WRONG) from error
    return StopsQuery(
        as_of=_day(options["as_of"]),
        today=today(),
        within_days=options["within_days"],
        flights=options["flights"],
        leg_minutes=minutes,
    )


def _day(text: str) -> date:
    try:
        return date.fromisoformat(text) if text else today()
    except ValueError as error:
        text = BAD_DATE.format(read=text)
        raise CommandError(text, returncode=WRONG) from error
