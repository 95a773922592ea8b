"""Passwords, written where the history sees that they changed, and not what to."""

from __future__ import annotations

import datetime as dt

from django.contrib.auth.hashers import get_hasher, identify_hasher, make_password
from django.contrib.auth.tokens import default_token_generator as links
from django.core.exceptions import ValidationError

from fleet.access import may
from fleet.models import Operator, User
from fleet.services.history import Writing

REASON_NEEDED = "Say why, and how you made sure that it is this person who asks."
OWN = "This is your own login; another administrator makes the link for you."
ELSEWHERE = (
    "{user} has a role at {operator} too, where you are no administrator; an "
    "administrator there, or the owner of the machine, sets a new password."
)
LINK_OVER = "This link was used, replaced by a newer one, or is too old."


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


def password_reset(
    *, user: User, reason: str, operator: Operator, actor: User, at: dt.datetime
) -> str:
    """No password holds from now on; returns what lets the user choose a new one, once.

    The administrator who asks never chooses it, and asks for nobody who has a role at
    an operator that is not the administrator's.
    """
    if not reason.strip():
        raise ValidationError({"reason": REASON_NEEDED})
    if user == actor:
        raise ValidationError(OWN)
    for held in user.open_memberships:
        if not may(actor, "people_change", held.operator_id):
            raise ValidationError(ELSEWHERE.format(user=user, operator=held.operator))
    with Writing(
        actor=actor,
        action="password_reset",
        at=at,
        operator=operator,
        reason=reason.strip(),
    ) as w:
        row = w.locked(User.objects.all(), pk=user.pk)
        w.change(row, password=make_password(None))
    return links.make_token(row)


def password_link_user(*, pk: int, token: str) -> User | None:
    """Whose new password the link is for; None when it holds no more."""
    user = User.objects.filter(pk=pk, is_active=True).first()
    return user if user and links.check_token(user, token) else None


def password_set(*, user: User, token: str, password: str, at: dt.datetime) -> None:
    """The password chosen by whoever was handed the link."""
    with Writing(actor=user, action="password_set", at=at) as w:
        row = w.locked(User.objects.all(), pk=user.pk)
        if not links.check_token(row, token):
            raise ValidationError(LINK_OVER)
        w.change(row, password=make_password(password))


def _write(
    user: User, password: str, actor: User | None, at: dt.datetime, action: str
) -> None:
    with Writing(actor=actor, action=action, at=at) as w:
        row = w.locked(User.objects.all(), pk=user.pk)
        w.change(row, password=make_password(password))
    user.password = row.password
