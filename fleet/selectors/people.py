"""Authorisations and policies that hold on a day."""

from __future__ import annotations

import datetime as dt

from django.db.models import Q

from fleet.models import Authorisation, Operator, Person, Policy


def policy(operator: Operator, key: str, as_of: dt.date) -> Policy | None:
    """The policy row in force: the operator's own before the one for its regime."""
    rows = Policy.objects.filter(
        Q(operator=operator)
        | Q(operator__isnull=True, regime__in=("", operator.regime)),
        Q(effective_to__isnull=True) | Q(effective_to__gte=as_of),
        key=key,
        effective_from__lte=as_of,
    ).order_by("effective_from")
    found = list(rows)
    own = [row for row in found if row.operator_id is not None]
    candidates = own or found
    return candidates[-1] if candidates else None


def authorisation_on(
    person: Person, operator: Operator, scopes: tuple[str, ...], day: dt.date
) -> Authorisation | None:
    """The person's authorisation of one of the scopes that holds on that day."""
    held = [
        row
        for row in person.authorisations.all()
        if row.operator_id == operator.pk and row.scope in scopes and row.holds_on(day)
    ]
    return max(held, key=lambda row: (row.valid_from, row.pk), default=None)
