"""Are the records kept safe: the last backup, the last good restore, the last seal."""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass

from django.conf import settings
from django.db.models import QuerySet

from fleet.models import Backup, HistoryHead, HistorySeal, Policy, User
from fleet.selectors.people import policy
from fleet.selectors.seals import last_seal

BACKUP_HOURS = "backup_hours"
NO_BACKUP = "No backup of these records has been made here."
BACKUP_OLD = (
    "The last backup is {age} old; it must not be older than {limit} h ({source})."
)
BACKUP_NOT_WHOLE = "The last backup is not whole: kept files were lost or altered."
NO_POLICY = (
    "The last backup is {age} old; no policy “{key}” says how old it may be. "
    "Record it under Policies with its source."
)
NO_SEAL = "The end of the history has not been sealed yet."
SEAL_OLD = (
    "The last seal is {age} old, and {count:,} entries have been added since; "
    "it should not be older than {limit} h."
)


@dataclass(frozen=True)
class Keeping:
    """How the records are kept, at one instant."""

    made: Backup | None
    restored: Backup | None
    seal: HistorySeal | None
    backup_warning: str
    seal_warning: str


def keeping(user: User, *, at: dt.datetime, on: dt.date) -> Keeping:
    """`restored` is the last restore after which everything agreed."""
    return Keeping(
        made=_last_made(),
        restored=Backup.objects.filter(kind="restored", problems="").last(),
        seal=last_seal(),
        backup_warning=backup_warning(user, at=at, on=on),
        seal_warning=seal_warning(at=at),
    )


def backup_warning(user: User, *, at: dt.datetime, on: dt.date) -> str:
    """What is wrong with the last backup, or ''. Of several operators' policies the
    strictest counts."""
    made = _last_made()
    if made is None:
        return NO_BACKUP
    if made.problems:
        return BACKUP_NOT_WHOLE
    age, row = at - made.made_at, _strictest(user, on)
    if row is None:
        return NO_POLICY.format(age=age_words(age), key=BACKUP_HOURS)
    if age <= dt.timedelta(hours=row.value):
        return ""
    return BACKUP_OLD.format(age=age_words(age), limit=row.value, source=row.source)


def seal_warning(*, at: dt.datetime) -> str:
    """Entries that no seal vouches for although one was due, or ''."""
    seal, head = last_seal(), HistoryHead.objects.get(pk=1)
    if seal is None:
        return NO_SEAL if head.sequence else ""
    age, count = at - seal.sealed_at, head.sequence - seal.sequence
    if not count or age <= dt.timedelta(hours=settings.SEAL_HOURS):
        return ""
    return SEAL_OLD.format(age=age_words(age), count=count, limit=settings.SEAL_HOURS)


def backups_listed() -> QuerySet[Backup]:
    """Made and restored, the newest first."""
    return Backup.objects.order_by("-made_at", "-pk")


def seals_listed() -> QuerySet[HistorySeal]:
    return HistorySeal.objects.order_by("-sequence", "-pk")


def age_words(age: dt.timedelta) -> str:
    """Hours up to two days, then days."""
    hours = int(age.total_seconds() // 3600)
    return f"{hours} h" if hours < 48 else f"{hours // 24:,} days"


def _last_made() -> Backup | None:
    return Backup.objects.filter(kind="made").last()


def _strictest(user: User, on: dt.date) -> Policy | None:
    operators = {row.operator_id: row.operator for row in user.open_memberships}
    rows = [policy(operator, BACKUP_HOURS, on) for operator in operators.values()]
    return min((row for row in rows if row), key=lambda row: row.value, default=None)
