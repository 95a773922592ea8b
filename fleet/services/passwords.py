"""Passwords, written where the history sees that they changed, and not what to."""

from __future__ import annotations

import datetime as dt

from django.contrib.auth.hashers import get_hasher, identify_hasher, make_password

from fleet.models import User
from fleet.services.history import Writing


def password_change(
    *, user: User, password: str, actor: User | None, at: dt.datetime
) -> None:
    """A new password; every session of the old one ends."""
    _write(user, password, actor, at, "password_change")


def password_renew(*, user: User, password: str, at: dt.datetime) -> bool:
    """The same password hashed with today's parameters, if its hash is older."""
    hasher = identify_hasher(user.password)
    preferred = get_hasher()
    if hasher.algorithm == preferred.algorithm and not preferred.must_update(
        user.password
    ):
        return False
    _write(user, password, None, at, "password_renew")
    return True


def _write(
    user: User, password: str, actor: User | None, at: dt.datetime, action: str
) -> None:
    with Writing(actor=actor, action=action, at=at) as w:
        row = w.locked(User.objects.all(), pk=user.pk)
        w.change(row, password=make_password(password))
    user.password = row.password
