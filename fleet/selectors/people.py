"""Authorisations and policies that hold on a day, and who signs with what."""

from __future__ import annotations

import datetime as dt

from django.db.models import Q
from django_otp.plugins.otp_static.models import StaticToken
from django_otp.plugins.otp_totp.models import TOTPDevice

from fleet.models import Authorisation, Operator, Person, Policy, Role, User
from fleet.selectors.kept import of_the_fleet

SECOND_FACTOR = "second_factor_required"
"""Policy: above zero, signatories and certifying staff sign with a second factor."""
SIGNING_ROLES = (Role.SIGNATORY, Role.CERTIFIER)


@of_the_fleet
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


def second_factor_required(user: User, day: dt.date) -> bool:
    """Whether an operator for which the user signs asks for a second factor."""
    return any(
        (row := policy(operator, SECOND_FACTOR, day)) is not None and row.value > 0
        for operator in _signs_for(user)
    )


def signs_without_code(user: User, day: dt.date) -> bool:
    """Whether the user signs records, and with the password alone."""
    return user.second_factor_since is None and bool(_signs_for(user))


def enrolling_device(user: User) -> TOTPDevice | None:
    """The device that is being set up and has not shown a code yet."""
    return TOTPDevice.objects.filter(user=user, confirmed=False).first()


def recovery_codes_left(user: User) -> int:
    return StaticToken.objects.filter(device__user=user).count()


def _signs_for(user: User) -> list[Operator]:
    rows = {
        row.operator_id: row.operator
        for row in user.open_memberships
        if row.role in SIGNING_ROLES
    }
    return list(rows.values())
