"""Releases that were entered later than the rules allow: kept, marked and counted."""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterable, Iterator
from dataclasses import dataclass

from django.db.models import F, Min, Q, QuerySet
from django.db.models.functions import Coalesce

from fleet.models import Operator, User
from fleet.selectors.people import policy
from repairs.models import Accomplishment, Repair

DAYS = "late_entry_days"
LATE = (
    "Entered {days} days after the release of {released_on}; {source} allows {most} "
    "days. It is kept as it is; report the lateness."
)
NO_POLICY = (
    "Entered {days} days after the release of {released_on}; no number of days is "
    "recorded ({key})."
)


@dataclass(frozen=True)
class Late:
    """One release: of what, when, how many days until it was entered, how many may."""

    what: str
    aircraft: str
    page: tuple[str, int]
    released_on: dt.date
    days: int
    words: str


def late_words(
    operator: Operator, released_on: dt.date | None, entered_on: dt.date
) -> str:
    """The warning of a release that was entered late; empty for one in time."""
    if released_on is None:
        return ""
    days = (entered_on - released_on).days
    row = policy(operator, DAYS, entered_on)
    if row is None:
        said = NO_POLICY.format(days=days, released_on=released_on, key=DAYS)
        return said if days > 0 else ""
    if days <= row.value:
        return ""
    return LATE.format(
        days=days, released_on=released_on, source=row.source, most=row.value
    )


def repair_late_words(repair: Repair, *, as_of: dt.date) -> str:
    """A repair from before our records was released before it could be entered."""
    if repair.legacy:
        return ""
    signed = repair.approvals.filter(meaning="released").aggregate(at=Min("signed_at"))
    entered = signed["at"] or repair.entered_at
    return late_words(repair.operator, repair.released_on, min(entered.date(), as_of))


def accomplishments_late(
    operator: Operator, rows: Iterable[Accomplishment], *, as_of: dt.date
) -> set[int]:
    """Keys of the inspections that were entered late; two queries."""
    row = policy(operator, DAYS, as_of)
    if row is None:
        return set()
    late = [
        one.pk
        for one in rows
        if one.replaces_id is None
        and (min(one.entered_at.date(), as_of) - one.done_on).days > row.value
    ]
    return set(_in_our_time(Accomplishment.objects.filter(pk__in=late)))


def _in_our_time(rows: QuerySet[Accomplishment]) -> QuerySet[Accomplishment, int]:
    """Keys without those done before the aircraft's records here begin."""
    before = Q(done_on__lt=F("subject__aircraft__data_from"))
    return rows.exclude(before).values_list("pk", flat=True)


def late_entries(user: User, *, as_of: dt.date) -> list[Late]:
    """Releases entered late, the newest first, as the operator's policy has it today.

    Repairs count from their signed release, inspections from the day they were done.
    """
    operators = {row.operator_id: row.operator for row in user.open_memberships}
    allowed = {
        pk: row.value
        for pk, one in operators.items()
        if (row := policy(one, DAYS, as_of)) is not None
    }
    rows = [*_repairs(user), *_accomplishments(user)]
    late = [
        Late(what, aircraft, page, on, days, f"{days - allowed[pk]:,} d too late")
        for pk, what, aircraft, page, on, entered in rows
        if pk in allowed
        and (days := (min(entered.date(), as_of) - on).days) > allowed[pk]
    ]
    return sorted(late, key=lambda one: (one.released_on, one.what), reverse=True)


Row = tuple[int, str, str, tuple[str, int], dt.date, dt.datetime]


def _repairs(user: User) -> Iterator[Row]:
    mine = Repair.objects.visible_to(user).values("pk")
    rows = Repair.objects.filter(pk__in=mine, legacy=False, released_on__isnull=False)
    released = Min("approvals__signed_at", filter=Q(approvals__meaning="released"))
    columns = (
        "pk", "aircraft__operator", "number", "aircraft__registration", "released_on",
    )  # fmt: skip
    told = rows.annotate(told_at=Coalesce(released, "entered_at"))
    for pk, operator, number, mark, on, at in told.values_list(*columns, "told_at"):
        yield operator, number, mark, ("repair", pk), on, at


def _accomplishments(user: User) -> Iterator[Row]:
    mine = Accomplishment.objects.visible_to(user).values("pk")
    rows = Accomplishment.objects.filter(pk__in=mine, replaced_by__isnull=True)
    columns = (
        "subject__requirement__operator", "subject__requirement__number",
        "subject__aircraft__registration", "subject__requirement", "done_on",
        "entered_at",
    )  # fmt: skip
    first = rows.filter(replaces__isnull=True, pk__in=_in_our_time(rows))
    for operator, number, mark, key, on, at in first.values_list(*columns):
        yield operator, number, mark or "in store", ("requirement", key), on, at
