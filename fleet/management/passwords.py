"""A password for a command: never an argument, which others on the machine can read."""

from __future__ import annotations

import os
from getpass import getpass

from django.contrib.auth.password_validation import validate_password
from django.core.management.base import CommandError

from fleet.models import User

DIFFERENT = "The two passwords differ; nothing was recorded."


def typed_password(user: User) -> str:
    """From FRAMEBAY_PASSWORD, or asked for twice; long enough and not a common one."""
    password = os.environ.get("FRAMEBAY_PASSWORD")
    if password is None:
        password = getpass("Password: ")
        if getpass("The same again: ") != password:
            raise CommandError(DIFFERENT)
    validate_password(password, user)
    return password
