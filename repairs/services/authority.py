"""Who may sign what on a day: a valid authorisation, or a refusal that says why."""

from __future__ import annotations

import datetime as dt

from django.core.exceptions import ValidationError

from fleet.models import (
    Aircraft,
    Authorisation,
    AuthorisationScope,
    Operator,
    Person,
)
from fleet.selectors.people import authorisation_on

ASSESSORS = (AuthorisationScope.ASSESS, AuthorisationScope.CERTIFY)
CERTIFIERS = (AuthorisationScope.CERTIFY,)

NO_AUTHORISATION = (
    "{person} held no authorisation ({scopes}) at {operator} on {day}{detail}. "
    "Choose an authorised person or the day of the decision."
)
EXPIRED = "; {number} was valid to {valid_to}"
NOT_YET = "; {number} is valid from {valid_from}"


def authorised(
    *,
    person: Person,
    operator: Operator,
    scopes: tuple[AuthorisationScope, ...],
    on: dt.date,
) -> Authorisation:
    """The authorisation the person signs under; ValidationError when there is none."""
    found = authorisation_on(person, operator, scopes, on)
    if found is not None:
        return found
    raise ValidationError(
        NO_AUTHORISATION.format(
            person=person,
            operator=operator,
            scopes=" or ".join(scope.label for scope in scopes),
            day=on,
            detail=_detail(person, operator, scopes, on),
        )
    )


def operator_on(aircraft: Aircraft, day: dt.date) -> Operator:
    """Who operated the aircraft that day; before its first period, who does now."""
    begun = [row for row in aircraft.periods.all() if row.from_on <= day]
    if not begun:
        return aircraft.operator
    period = max(begun, key=lambda row: row.from_on)
    if period.operator_id == aircraft.operator_id:
        return aircraft.operator
    return period.operator


def _detail(
    person: Person,
    operator: Operator,
    scopes: tuple[AuthorisationScope, ...],
    on: dt.date,
) -> str:
    held = person.authorisations.filter(operator=operator, scope__in=scopes).last()
    if held is None:
        return ""
    text = NOT_YET if held.valid_from > on else EXPIRED
    return text.format(
        number=held.number, valid_to=held.valid_to, valid_from=held.valid_from
    )
