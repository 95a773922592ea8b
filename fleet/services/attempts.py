"""Wrong passwords are counted by user name and address; too many lock both for a while.

django-axes keeps the count, in tables outside the history like sessions. Signing and
signing in share it, so that a password cannot be guessed at either.
"""

from __future__ import annotations

import datetime as dt
from ipaddress import ip_address

from axes.handlers.proxy import AxesProxyHandler
from axes.helpers import get_cool_off
from axes.models import AccessAttempt
from axes.utils import reset
from django.conf import settings
from django.db.models import Max
from django.http import HttpRequest


def is_locked(request: HttpRequest, username: str) -> bool:
    """Whether too many wrong passwords came for this name from this address."""
    return not AxesProxyHandler.is_allowed(request, {"username": username})


def attempt_failed(request: HttpRequest, username: str) -> None:
    """Count a wrong password or code."""
    AxesProxyHandler.user_login_failed(
        sender=__name__, credentials={"username": username}, request=request
    )


def locked_until(request: HttpRequest, username: str) -> dt.datetime | None:
    """When the lock opens by itself; None: an administrator opens it."""
    wait = get_cool_off(request)
    last = AccessAttempt.objects.filter(
        username=username,
        ip_address=request.axes_ip_address,  # type: ignore[attr-defined]
    ).aggregate(last=Max("attempt_time"))["last"]
    return last + wait if last and wait else None


def attempts_forget(username: str) -> int:
    """An administrator lets somebody in again; how many counts were forgotten."""
    return reset(username=username)


def address_of(request: HttpRequest) -> str:
    """Who asks: the other end, or what the outermost of our own proxies saw.

    What stands further left in X-Forwarded-For was written by the client, who may
    write anything, so it is read only as far as there are proxies of ours.
    """
    nearest: str = request.META.get("REMOTE_ADDR", "")
    passed = request.META.get("HTTP_X_FORWARDED_FOR", "").split(",")
    if settings.PROXIES == 0 or len(passed) < settings.PROXIES:
        return nearest
    try:
        return str(ip_address(passed[-settings.PROXIES].strip()))
    except ValueError:
        return nearest
