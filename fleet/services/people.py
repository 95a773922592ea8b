"""Operators, people, logins, roles and authorisations."""

from __future__ import annotations

import datetime as dt

from fleet.models import (
    Authorisation,
    Membership,
    Operator,
    Organisation,
    Person,
    Policy,
    User,
)
from fleet.services.history import Writing


def organisation_create(
    *, code: str, name: str, kind: str, at: dt.datetime, actor: User | None = None
) -> Organisation:
    with Writing(actor=actor, action="organisation_create", at=at) as w:
        return w.create(Organisation(code=code, name=name, kind=kind))


def operator_create(
    *,
    code: str,
    name: str,
    regime: str,
    at: dt.datetime,
    actor: User | None = None,
    time_zone: str = "UTC",
    programme_three_stages: bool = False,
) -> Operator:
    """An operator, with the organisation that it is."""
    with Writing(actor=actor, action="operator_create", at=at) as w:
        organisation = w.create(Organisation(code=code, name=name, kind="operator"))
        return w.create(
            Operator(
                organisation=organisation,
                code=code,
                name=name,
                regime=regime,
                time_zone=time_zone,
                programme_three_stages=programme_three_stages,
            )
        )


def person_create(
    *,
    organisation: Organisation,
    name: str,
    at: dt.datetime,
    staff_number: str = "",
    actor: User | None = None,
) -> Person:
    with Writing(actor=actor, action="person_create", at=at) as w:
        return w.create(
            Person(organisation=organisation, name=name, staff_number=staff_number)
        )


def user_create(
    *,
    username: str,
    password: str,
    at: dt.datetime,
    person: Person | None = None,
    actor: User | None = None,
) -> User:
    """A login; what it may do comes from `membership_grant`."""
    with Writing(actor=actor, action="user_create", at=at) as w:
        return w.create(_login(username, password, person, at))


def membership_grant(
    *,
    user: User,
    operator: Operator,
    role: str,
    began_on: dt.date,
    at: dt.datetime,
    actor: User | None = None,
) -> Membership:
    with Writing(actor=actor, action="membership_grant", at=at, operator=operator) as w:
        return w.create(
            Membership(user=user, operator=operator, role=role, began_on=began_on)
        )


def membership_end(
    *, membership: Membership, ended_on: dt.date, at: dt.datetime, actor: User | None
) -> None:
    with Writing(
        actor=actor, action="membership_end", at=at, operator=membership.operator
    ) as w:
        w.change(membership, ended_on=ended_on)


def authorisation_grant(
    *,
    person: Person,
    operator: Operator,
    number: str,
    scope: str,
    valid_from: dt.date,
    source: str,
    at: dt.datetime,
    valid_to: dt.date | None = None,
    actor: User | None = None,
) -> Authorisation:
    with Writing(
        actor=actor, action="authorisation_grant", at=at, operator=operator
    ) as w:
        return w.create(
            Authorisation(
                person=person,
                operator=operator,
                number=number,
                scope=scope,
                valid_from=valid_from,
                valid_to=valid_to,
                source=source,
            )
        )


def policy_set(
    *,
    key: str,
    value: int,
    unit: str,
    source: str,
    grade: str,
    effective_from: dt.date,
    at: dt.datetime,
    regime: str = "",
    edition: str = "",
    operator: Operator | None = None,
    replaces: Policy | None = None,
    actor: User | None = None,
) -> Policy:
    """A rule's number with its source; a new value is a new row, never an edit."""
    with Writing(actor=actor, action="policy_set", at=at, operator=operator) as w:
        return w.create(
            Policy(
                operator=operator,
                regime=regime,
                key=key,
                value=value,
                unit=unit,
                source=source,
                edition=edition,
                grade=grade,
                effective_from=effective_from,
                replaces=replaces,
            )
        )


def person_add(
    *,
    operator: Operator,
    organisation: Organisation,
    name: str,
    at: dt.datetime,
    staff_number: str = "",
    username: str = "",
    password: str = "",
    role: str = "",
    began_on: dt.date | None = None,
    actor: User | None = None,
) -> Person:
    """A new person; with a user name also the login and its first role, all or none."""
    with Writing(actor=actor, action="person_add", at=at, operator=operator) as w:
        person = w.create(
            Person(organisation=organisation, name=name, staff_number=staff_number)
        )
        if username:
            user = w.create(_login(username, password, person, at))
            w.create(
                Membership(
                    user=user,
                    operator=operator,
                    role=role,
                    began_on=began_on or at.date(),
                )
            )
    return person


def _login(
    username: str, password: str, person: Person | None, at: dt.datetime
) -> User:
    user = User(username=username, person=person, date_joined=at)
    if person is not None:
        first, _, last = person.name.rpartition(" ")
        user.first_name, user.last_name = first, last
    user.set_password(password)
    return user
