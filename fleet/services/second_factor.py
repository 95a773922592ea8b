"""The second factor of a login: one-time codes of RFC 6238, and recovery codes.

The keys are django-otp's own tables, outside the history like sessions; that a user
has a second factor, and since when, is a column of the user, inside it.
"""

from __future__ import annotations

import datetime as dt

from django.core.exceptions import ValidationError
from django.db import transaction
from django_otp import devices_for_user
from django_otp.models import Device
from django_otp.plugins.otp_static.models import StaticDevice, StaticToken
from django_otp.plugins.otp_totp.models import TOTPDevice

from fleet.models import Operator, User
from fleet.services.history import Writing

NAME = "second factor"
RECOVERY_CODES = 10

WRONG_CODE = (
    "“{code}” is not the code that is valid now. Each code is valid once and for "
    "about a minute: wait for the next one, and check the clock of your device."
)
NO_CODE = "Give the six digits your device shows, or one of your recovery codes."
WAIT = "Too many wrong codes; the next one is read after {until:%H:%M:%S} UTC."
HAS_ONE = "You have a second factor already; remove it before you set up another."
HAS_NONE = "{user} has no second factor."
REASON_NEEDED = "Say why, and how you made sure that it is this person who asks."


def code_accept(*, user: User, code: str) -> None:
    """Take a one-time or recovery code, once; ValidationError when it is none now."""
    given = code.replace(" ", "").replace("-", "").lower()
    if not given:
        raise ValidationError({"code": NO_CODE})
    kind = TOTPDevice if given.isdecimal() else StaticDevice
    with transaction.atomic():
        devices = [
            one
            for one in devices_for_user(user, for_verify=True)
            if isinstance(one, kind)
        ]
        waits = [until for one in devices if (until := _waits_until(one))]
        accepted = any(one.verify_token(given) for one in devices)
    if waits and not accepted:
        raise ValidationError({"code": WAIT.format(until=max(waits))})
    if not accepted:
        raise ValidationError({"code": WRONG_CODE.format(code=code.strip())})


def second_factor_begin(*, user: User) -> TOTPDevice:
    """A key to enrol with; the same one until it is confirmed."""
    if user.second_factor_since is not None:
        raise ValidationError(HAS_ONE)
    device, _ = TOTPDevice.objects.get_or_create(
        user=user, confirmed=False, defaults={"name": NAME}
    )
    return device


def second_factor_confirm(
    *, user: User, code: str, actor: User, at: dt.datetime
) -> list[str]:
    """In force from now on; returns the recovery codes, which are shown once."""
    device = second_factor_begin(user=user)
    given = code.replace(" ", "")
    if until := _waits_until(device):
        raise ValidationError({"code": WAIT.format(until=until)})
    if not device.verify_token(given):
        raise ValidationError({"code": WRONG_CODE.format(code=given)})
    with Writing(actor=actor, action="second_factor_add", at=at) as w:
        locked = w.locked(User.objects.all(), pk=user.pk)
        if locked.second_factor_since is not None:
            raise ValidationError(HAS_ONE)
        w.change(locked, second_factor_since=at)
        device.confirmed = True
        device.save(update_fields=["confirmed"])
        return _recovery_codes(user)


def second_factor_remove(*, user: User, actor: User, at: dt.datetime) -> None:
    """The owner takes it off, after proving the password and a code."""
    _remove(user, actor, at, "second_factor_remove", reason="", operator=None)


def second_factor_reset(
    *, user: User, reason: str, operator: Operator, actor: User, at: dt.datetime
) -> None:
    """An administrator takes off the second factor of a device that is lost."""
    if not reason.strip():
        raise ValidationError({"reason": REASON_NEEDED})
    action = "second_factor_reset"
    _remove(user, actor, at, action, reason=reason.strip(), operator=operator)


def _remove(
    user: User,
    actor: User,
    at: dt.datetime,
    action: str,
    *,
    reason: str,
    operator: Operator | None,
) -> None:
    with Writing(
        actor=actor, action=action, at=at, operator=operator, reason=reason
    ) as w:
        locked = w.locked(User.objects.all(), pk=user.pk)
        if locked.second_factor_since is None:
            raise ValidationError(HAS_NONE.format(user=user))
        w.change(locked, second_factor_since=None)
        for device in devices_for_user(user, confirmed=None):
            device.delete()


def _recovery_codes(user: User) -> list[str]:
    device = StaticDevice.objects.create(user=user, name=NAME)
    codes = [StaticToken.random_token() for _ in range(RECOVERY_CODES)]
    StaticToken.objects.bulk_create(
        [StaticToken(device=device, token=code) for code in codes]
    )
    return codes


def _waits_until(device: Device) -> dt.datetime | None:
    allowed, why = device.verify_is_allowed()
    return None if allowed else why["locked_until"]
