"""History entries of the operators a reader belongs to, newest first."""

from __future__ import annotations

import datetime as dt

from django.db.models import Count, QuerySet

from fleet.models import HistoryEntry, User


def entries(
    user: User,
    *,
    action: str = "",
    who: str = "",
    since: dt.date | None = None,
    until: dt.date | None = None,
    stream: str = "",
) -> QuerySet[HistoryEntry]:
    """Entries with the number of their items; dates are days in UTC."""
    rows = HistoryEntry.objects.visible_to(user).annotate(written=Count("items"))
    if action:
        rows = rows.filter(action=action)
    if who:
        rows = rows.filter(actor_name__icontains=who)
    if since:
        rows = rows.filter(at__date__gte=since)
    if until:
        rows = rows.filter(at__date__lte=until)
    if stream:
        rows = rows.filter(stream=stream)
    return rows.order_by("-sequence")


def actions_of(user: User) -> list[str]:
    """What has been done at all, for the filter."""
    rows = HistoryEntry.objects.visible_to(user).order_by("action")
    return list(rows.values_list("action", flat=True).distinct())
