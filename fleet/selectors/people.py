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
    return (
        Authorisation.objects.filter(
            Q(valid_to__isnull=True) | Q(valid_to__gte=day),
            person=person,
            operator=operator,
            scope__in=scopes,
            valid_from__lte=day,
        )
        .order_by("-valid_from", "-pk")
        .first()
    )
