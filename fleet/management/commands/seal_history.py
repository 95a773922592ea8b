"""`manage.py seal_history`: a signed word on where the history ends, once a day."""

from __future__ import annotations

from typing import Any

from django.conf import settings
from django.core.exceptions import ValidationError
from django.core.management.base import BaseCommand, CommandError

from fleet.clock import now
from fleet.sealing import Seal
from fleet.services.seals import history_seal, seal_key_change

ALREADY = "The end of the history is sealed already; --again seals it once more."


class Command(BaseCommand):
    help = (
        "Sign the last entry of the history (Ed25519), keep the seal and print it. "
        "Print, mail or sign it by hand: while a copy kept elsewhere still verifies, "
        "nothing before it was altered. Does nothing when nothing was recorded since."
    )

    def add_arguments(self, parser: Any) -> None:
        parser.add_argument(
            "--again", action="store_true", help="although this end is sealed already"
        )
        parser.add_argument(
            "--new-key",
            action="store_true",
            help="seal with the key and with a new one that replaces it",
        )

    def handle(self, *args: Any, **options: Any) -> None:
        try:
            if options["new_key"]:
                seals = seal_key_change(at=now())
            else:
                seal = history_seal(at=now(), again=options["again"])
                seals = [seal] if seal else []
        except ValidationError as error:
            raise CommandError(" ".join(error.messages)) from error
        if not seals:
            self.stdout.write(ALREADY)
        for seal in seals:
            self._print(seal)

    def _print(self, seal: Seal) -> None:
        self.stdout.write(seal.text)
        self.stdout.write(f"Kept as {settings.SEALS / seal.where_published}")
