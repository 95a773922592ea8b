"""Records a form offers to choose from."""

from __future__ import annotations

from collections.abc import Sequence

from django.db.models import Q, QuerySet

from fleet.models import Aircraft, AuthorisationScope, Operator, Person, User
from repairs.models import Event


def aircraft_of(operators: Sequence[Operator]) -> QuerySet[Aircraft]:
    """Aircraft these operators have today."""
    return Aircraft.objects.filter(
        operator__in=operators, data_to__isnull=True
    ).select_related("variant__aircraft_type", "operator")


def people_at(operators: Sequence[Operator]) -> QuerySet[Person]:
    """Own people, and those of organisations that are no operator."""
    return Person.objects.filter(
        Q(organisation__operator__in=operators) | Q(organisation__operator__isnull=True)
    )


def signers_at(
    operator: Operator, scopes: Sequence[AuthorisationScope]
) -> QuerySet[Person]:
    """Who holds or held such an authorisation; the day is checked when it is signed."""
    return Person.objects.filter(
        authorisations__operator=operator, authorisations__scope__in=scopes
    ).distinct()


def events_of(user: User) -> QuerySet[Event]:
    """Events a finding may follow."""
    return Event.objects.visible_to(user).distinct().select_related("aircraft")
