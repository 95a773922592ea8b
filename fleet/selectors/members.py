"""Who belongs to the user's operators, in which role, and what they may sign."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass

from fleet.models import Authorisation, Membership, Operator, User


@dataclass(frozen=True)
class AuthorisationLine:
    """An authorisation, and whether it holds on the day of the page."""

    row: Authorisation
    day: dt.date

    @property
    def holds(self) -> bool:
        return self.row.holds_on(self.day)

    @property
    def standing(self) -> str:
        if self.holds:
            return "valid"
        return "not yet valid" if self.row.valid_from > self.day else "expired"


def memberships_of(operators: Sequence[Operator]) -> list[Membership]:
    """Roles held and once held, the present ones first."""
    rows = Membership.objects.filter(operator__in=operators).select_related(
        "user__person__organisation", "operator"
    )
    return sorted(rows, key=lambda row: (row.ended_on is not None, str(row.user)))


def authorisations_of(
    operators: Sequence[Operator], *, day: dt.date
) -> list[AuthorisationLine]:
    """Every authorisation granted, expired ones too."""
    rows = (
        Authorisation.objects.filter(operator__in=operators)
        .select_related("person__organisation", "operator")
        .order_by("person__name", "scope", "valid_from", "pk")
    )
    return [AuthorisationLine(row, day) for row in rows]


def operators_of(user: User) -> list[Operator]:
    """Operators whose records the user reads, by name."""
    return list(Operator.objects.visible_to(user))
