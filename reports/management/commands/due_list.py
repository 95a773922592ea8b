"""manage.py due_list: what is due and overdue, as a table, CSV or JSON."""

from __future__ import annotations

import json
from datetime import UTC, date, datetime
from typing import Any

from django.core.management.base import BaseCommand, CommandError, CommandParser

from fleet.clock import now, today
from fleet.models import Aircraft
from fleet.tables import rows_to_csv
from reports.due_list import DueQuery, due_list
from reports.due_rows import HEADER
from reports.exports.due import due_csv_rows, due_json, due_table
from reports.forms.due import FARTHEST, WITHIN

NO_AIRCRAFT = "No aircraft is registered “{read}”; registrations are: {known}."
BAD_DATE = "“{read}” is not a date; write it as 2025-01-31."
BAD_TIME = "“{read}” is not a time; write it as 2025-01-31T12:00 (UTC)."
BAD_DAYS = "--within-days {read} is not between 0 and {highest}."


class Command(BaseCommand):
    help = "List what is due within some days, overdue first."

    def add_arguments(self, parser: CommandParser) -> None:
        parser.add_argument("--aircraft", metavar="REG", default="")
        parser.add_argument("--within-days", type=int, default=WITHIN)
        parser.add_argument("--as-of", metavar="DATE", default="")
        parser.add_argument("--known-at", metavar="TIME", default="")
        parser.add_argument(
            "--format", choices=("table", "csv", "json"), default="table"
        )

    def handle(self, *args: Any, **options: Any) -> None:
        found = due_list(_query(options))
        printed_at = now()
        if options["format"] == "json":
            text = json.dumps(due_json(found, printed_at=printed_at), indent=2)
        elif options["format"] == "csv":
            text = rows_to_csv(HEADER, due_csv_rows(found, printed_at=printed_at))
        else:
            text = due_table(found, printed_at=printed_at)
        self.stdout.write(text)


def _query(options: dict[str, Any]) -> DueQuery:
    registration, within = options["aircraft"], options["within_days"]
    known = Aircraft.objects.filter(registration__iexact=registration)
    if registration and not known.exists():
        marks = Aircraft.objects.values_list("registration", flat=True)
        listed = ", ".join(marks) or "none yet"
        raise CommandError(NO_AIRCRAFT.format(read=registration, known=listed))
    if not 0 <= within <= FARTHEST:
        raise CommandError(BAD_DAYS.format(read=within, highest=FARTHEST))
    return DueQuery(
        as_of=_day(options["as_of"]),
        within_days=within,
        known_at=_instant(options["known_at"]),
        registration=registration,
    )


def _day(text: str) -> date:
    try:
        return date.fromisoformat(text) if text else today()
    except ValueError as error:
        raise CommandError(BAD_DATE.format(read=text)) from error


def _instant(text: str) -> datetime | None:
    """A time without a zone is taken as UTC."""
    try:
        instant = datetime.fromisoformat(text) if text else None
    except ValueError as error:
        raise CommandError(BAD_TIME.format(read=text)) from error
    if instant is not None and instant.tzinfo is None:
        instant = instant.replace(tzinfo=UTC)
    return instant
