"""`manage.py operator_add CODE NAME --regime R`: an operator, the first step."""

from __future__ import annotations

import zoneinfo
from typing import Any

from django.core.exceptions import ValidationError
from django.core.management.base import BaseCommand, CommandError

from fleet.clock import now
from fleet.services.people import operator_create

NO_ZONE = "“{zone}” is not a time zone of the tz database; write such as Europe/Oslo."


class Command(BaseCommand):
    help = "Add an operator. The history records it."

    def add_arguments(self, parser: Any) -> None:
        parser.add_argument("code", help="short and unique, such as NRT")
        parser.add_argument("name")
        parser.add_argument(
            "--regime", required=True, help="rules it works under, such as EASA or FAA"
        )
        parser.add_argument(
            "--time-zone", default="UTC", help="such as Europe/Oslo (default UTC)"
        )
        parser.add_argument(
            "--three-stages",
            action="store_true",
            help="its programme adopts the three-stage approval of repairs",
        )

    def handle(self, *args: Any, **options: Any) -> None:
        zone = options["time_zone"]
        if zone not in zoneinfo.available_timezones():
            raise CommandError(NO_ZONE.format(zone=zone))
        try:
            operator = operator_create(
                code=options["code"],
                name=options["name"],
                regime=options["regime"],
                time_zone=zone,
                programme_three_stages=options["three_stages"],
                at=now(),
            )
        except ValidationError as error:
            raise CommandError(" ".join(error.messages)) from error
        self.stdout.write(f"{operator.code}: {operator.name} is recorded.")
