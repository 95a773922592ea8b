"""The rules' numbers as an operator reads them: its own and those offered to it."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass

from django.db.models import Q

from fleet.models import Operator, Policy


@dataclass(frozen=True)
class PolicyLine:
    """One row, and whether it is the one that counts on the day of the page."""

    row: Policy
    governs: bool

    @property
    def words(self) -> str:
        return self.row.key.replace("_", " ")

    @property
    def unread(self) -> bool:
        return self.row.grade == "memory"


def policy_lines(operator: Operator, *, day: dt.date) -> list[PolicyLine]:
    """Every revision of every key, the governing one of each first; one query."""
    rows = Policy.objects.filter(
        Q(operator=operator)
        | Q(operator__isnull=True, regime__in=("", operator.regime))
    ).select_related("operator")
    by_key: dict[str, list[Policy]] = {}
    for row in rows:
        by_key.setdefault(row.key, []).append(row)
    lines: list[PolicyLine] = []
    for key in sorted(by_key):
        governing = _governing(by_key[key], day)
        ordered = sorted(
            by_key[key], key=lambda row: (row is governing, row.effective_from)
        )
        lines += [PolicyLine(row, row is governing) for row in reversed(ordered)]
    return lines


def _governing(rows: Sequence[Policy], day: dt.date) -> Policy | None:
    """The operator's own before the one offered; the newest that is in force."""
    in_force = [
        row
        for row in rows
        if row.effective_from <= day
        and (row.effective_to is None or day <= row.effective_to)
    ]
    return max(
        in_force,
        key=lambda row: (row.operator_id is not None, row.effective_from),
        default=None,
    )


def policy_to_replace(operator: Operator, key: str) -> Policy | None:
    """The operator's own newest row of the key, which the next revision replaces."""
    own = Policy.objects.filter(operator=operator, key=key, replaced_by__isnull=True)
    return own.order_by("effective_from", "pk").last()
