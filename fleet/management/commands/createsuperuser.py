"""Django's own command would write a login past the history; this one says so."""

from __future__ import annotations

from typing import Any

from django.core.management.base import BaseCommand, CommandError

REFUSED = (
    "createsuperuser would write a login that no history entry explains, and Framebay "
    "has no superusers: what a login may do comes from its roles. Use\n"
    "  manage.py operator_add CODE NAME --regime R\n"
    "  manage.py user_add USERNAME --operator CODE --role administrator --person NAME"
)


class Command(BaseCommand):
    help = "Refused: add logins with user_add, which the history records."

    def add_arguments(self, parser: Any) -> None:
        parser.add_argument("--noinput", "--no-input", action="store_true")
        parser.add_argument("--username")
        parser.add_argument("--email")

    def handle(self, *args: Any, **options: Any) -> None:
        raise CommandError(REFUSED)
