"""`manage.py user_add USERNAME --operator CODE --role R [--person NAME]`: a login.

The password comes from FRAMEBAY_PASSWORD, or is asked for twice.
"""

from __future__ import annotations

from typing import Any

from django.core.exceptions import ValidationError
from django.core.management.base import BaseCommand, CommandError

from fleet.clock import now, today
from fleet.management.passwords import typed_password
from fleet.models import Operator, Role, User
from fleet.services.people import person_add

NO_OPERATOR = "There is no operator “{code}”; known: {known}. Add it by operator_add."
TAKEN = "The user name “{name}” is taken; choose another."


class Command(BaseCommand):
    help = "Add a person with a login and one role. The history records it."

    def add_arguments(self, parser: Any) -> None:
        parser.add_argument("username")
        parser.add_argument("--operator", required=True, metavar="CODE")
        parser.add_argument("--role", required=True, choices=Role.values)
        parser.add_argument(
            "--person", metavar="NAME", help="as they sign (default: the user name)"
        )

    def handle(self, *args: Any, **options: Any) -> None:
        username, code = options["username"], options["operator"]
        operator = Operator.objects.filter(code=code).first()
        if operator is None:
            known = ", ".join(Operator.objects.values_list("code", flat=True))
            raise CommandError(NO_OPERATOR.format(code=code, known=known or "none"))
        if User.objects.filter(username__iexact=username).exists():
            raise CommandError(TAKEN.format(name=username))
        try:
            person_add(
                operator=operator,
                organisation=operator.organisation,
                name=options["person"] or username,
                username=username,
                password=typed_password(User(username=username)),
                role=options["role"],
                began_on=today(),
                at=now(),
            )
        except ValidationError as error:
            raise CommandError(" ".join(error.messages)) from error
        self.stdout.write(f"{username} may sign in to {operator} as {options['role']}.")
