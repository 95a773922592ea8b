"""`manage.py user_password USERNAME`: a new password for a login that is there.

For the owner of the machine, when no administrator can sign in. The password comes
from FRAMEBAY_PASSWORD, or is asked for twice.
"""

from __future__ import annotations

from typing import Any

from django.core.exceptions import ValidationError
from django.core.management.base import BaseCommand, CommandError

from fleet.clock import now
from fleet.management.passwords import typed_password
from fleet.models import User
from fleet.services.attempts import attempts_forget
from fleet.services.passwords import password_change

NOBODY = "There is no login “{name}”; known: {known}."


class Command(BaseCommand):
    help = "Set a new password for a login; its sessions end. The history records it."

    def add_arguments(self, parser: Any) -> None:
        parser.add_argument("username")

    def handle(self, *args: Any, **options: Any) -> None:
        name = options["username"]
        user = User.objects.filter(username=name).first()
        if user is None:
            known = ", ".join(User.objects.values_list("username", flat=True))
            raise CommandError(NOBODY.format(name=name, known=known or "none"))
        try:
            password = typed_password(user)
        except ValidationError as error:
            raise CommandError(" ".join(error.messages)) from error
        password_change(user=user, password=password, actor=None, at=now())
        attempts_forget(name)
        self.stdout.write(f"{name} signs in with the new password.")
