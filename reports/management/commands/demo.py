"""`manage.py demo [--serve] [--seed N]`: an invented fleet to try everything on."""

from __future__ import annotations

import time
from argparse import ArgumentParser
from typing import Any

from django.conf import settings
from django.core.management import call_command
from django.core.management.base import BaseCommand, CommandError
from django.db import connection, transaction

from reports.demo.fleet import DEMO_TODAY
from reports.demo.loader import demo_load
from reports.demo.people import PASSWORD, PEOPLE
from reports.demo.scenario import draw
from reports.demo.standing import Standing, standing_now
from reports.demo.summary import summary_lines

ADDRESS = "127.0.0.1:8000"
FOREIGN = (
    "This database holds records that are not the demo's: {what}. The demo is loaded "
    "into an empty database only. Set FRAMEBAY_DATA to a new folder (or DATABASE_URL "
    "to an empty database) and run it again."
)
OTHER_SEED = (
    "The demo in this database was drawn with seed {there}, not {asked}. Set "
    "FRAMEBAY_DATA to a new folder to draw another one, or leave --seed out."
)
ALREADY = "The demo (seed {seed}) is already here; nothing was changed."


class Command(BaseCommand):
    help = "Load the demonstration fleet into an empty database, and serve it."

    def add_arguments(self, parser: ArgumentParser) -> None:
        parser.add_argument(
            "--serve", action="store_true", help=f"then serve it on {ADDRESS}"
        )
        parser.add_argument(
            "--seed", type=int, help="draw another fleet history (default 1)"
        )

    def handle(self, *args: Any, serve: bool, seed: int | None, **options: Any) -> None:
        began = time.monotonic()
        self._say("preparing the database")
        call_command("migrate", verbosity=0)
        self._load(standing_now(), seed)
        keep_today()
        for line in summary_lines(DEMO_TODAY, time.monotonic() - began):
            self.stdout.write(line)
        for line in login_lines():
            self.stdout.write(line)
        if serve:
            self._serve()

    def _load(self, standing: Standing, seed: int | None) -> None:
        if standing.foreign:
            raise CommandError(FOREIGN.format(what=", ".join(standing.foreign)))
        if standing.seed is not None:
            if seed not in (None, standing.seed):
                raise CommandError(OTHER_SEED.format(there=standing.seed, asked=seed))
            self.stdout.write(ALREADY.format(seed=standing.seed))
            return
        scenario = draw(1 if seed is None else seed)
        with transaction.atomic():
            demo_load(scenario, say=self._say)
        if connection.vendor == "sqlite":
            with connection.cursor() as cursor:
                cursor.execute("ANALYZE")

    def _say(self, what: str) -> None:
        self.stdout.write(f"  {what}")
        self.stdout.flush()

    def _serve(self) -> None:
        self.stdout.write(f"Serving on http://{ADDRESS}/ (Ctrl-C stops)")
        self.stdout.flush()
        call_command("runserver", ADDRESS, use_reloader=False, skip_checks=True)


def keep_today() -> None:
    """Leave the demo's date for later runs on this folder, and take it at once."""
    (settings.DATA_DIR / settings.TODAY_FILE).write_text(DEMO_TODAY.isoformat())
    if not settings.FRAMEBAY_TODAY:
        settings.FRAMEBAY_TODAY = DEMO_TODAY.isoformat()


def login_lines() -> list[str]:
    """Where to go and as whom."""
    names = ", ".join(person.key for person in PEOPLE if person.role)
    return [
        f"Address    http://{ADDRESS}/",
        f"Logins     {names}",
        f"Password   {PASSWORD} (the same for all; outsider is at another operator)",
    ]
