"""History entries of the operators a reader belongs to, newest first."""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterable

from django.db.models import Count, QuerySet

from fleet.access import may
from fleet.models import HistoryEntry, User

# Who reported an occurrence is told to those only who handle such reports.
REPORTING = "report_"
CONFIDENTIAL = "confidential"


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
        if not _knows(user, user.operator_ids()):
            rows = rows.exclude(action__startswith=REPORTING)
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


def names_kept(user: User, rows: Iterable[HistoryEntry]) -> list[HistoryEntry]:
    """The entries as the reader may see them: without the name of who reported an
    occurrence, unless the reader may know it. They are for showing, not for writing."""
    shown = list(rows)
    for row in shown:
        own = [row.operator_id] if row.operator_id is not None else []
        if row.action.startswith(REPORTING) and not _knows(user, own):
            row.actor_name = CONFIDENTIAL
    return shown


def _knows(user: User, operators: Iterable[int]) -> bool:
    return all(may(user, "report_identity_read", pk) for pk in operators)
