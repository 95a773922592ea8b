"""The one place that reads the clock; only views and commands may call it."""

from __future__ import annotations

import datetime as dt

from django.conf import settings
from django.utils import timezone


def today() -> dt.date:
    """Today, or the date that FRAMEBAY_TODAY names for a demonstration."""
    if settings.FRAMEBAY_TODAY:
        return dt.date.fromisoformat(settings.FRAMEBAY_TODAY)
    return timezone.now().date()


def now() -> dt.datetime:
    """This instant in UTC; entries are always stamped with the true time."""
    return timezone.now()


def moment() -> dt.datetime:
    """The instant that countdowns are read at: now, on the day taken as today."""
    return dt.datetime.combine(today(), now().timetz())
