"""Rows for tests, made through the services where there is one.

`world` is one invented operator with a person and a login for each role; `outsider`
belongs to another operator.
"""

from __future__ import annotations

import datetime as dt
import itertools
from pathlib import Path
from typing import Any

from fleet.models import (
    Aircraft,
    AircraftType,
    Authorisation,
    Operator,
    Person,
    Role,
    User,
    Variant,
)
from fleet.services import people
from fleet.services.aircraft import aircraft_add
from fleet.services.signing import Proof

NOW = dt.datetime(2025, 1, 1, 9, 0, tzinfo=dt.UTC)
TODAY = dt.date(2025, 1, 1)
BEGAN = dt.date(2019, 1, 1)
PASSWORD = "a-long-enough-word-7"
FIXTURES = Path(__file__).parents[1] / "fixtures"
_serial = itertools.count(9001)


def operator_make(code: str = "NRT", name: str = "Northmere Air") -> Operator:
    return people.operator_create(code=code, name=name, regime="EASA", at=NOW)


def user_make(operator: Operator, role: str, username: str | None = None) -> User:
    """A login with one role at the operator, and the person behind it."""
    person = people.person_create(
        organisation=operator.organisation, name=f"Robin {role.title()}", at=NOW
    )
    user = people.user_create(
        username=username or role, password=PASSWORD, person=person, at=NOW
    )
    people.membership_grant(
        user=user, operator=operator, role=role, began_on=BEGAN, at=NOW
    )
    return user


def users_make(operator: Operator) -> dict[str, User]:
    """One login for each role, named after it."""
    return {role: user_make(operator, role) for role in Role.values}


def authorise(person: Person, operator: Operator, scope: str) -> Authorisation:
    return people.authorisation_grant(
        person=person,
        operator=operator,
        number=f"A-{person.pk}",
        scope=scope,
        valid_from=BEGAN,
        source="company authorisation register",
        at=NOW,
    )


def signed(said: dict[str, Any]) -> dict[str, Any]:
    """A form that signs, with the password every login here has."""
    return {**said, "password": PASSWORD}


def program(person: Person | None = None) -> Proof:
    """What a service that signs is given where there is no browser."""
    return Proof.by_program(person or Person(name="Robin Clerk"))


def type_bare() -> tuple[AircraftType, Variant]:
    """A type without geometry, for tests that need an aircraft only."""
    from fleet.services.history import Writing

    with Writing(actor=None, action="type_create", at=NOW) as w:
        made = w.create(AircraftType(code="TST", name="Test type", entry_unit="in"))
        variant = w.create(Variant(aircraft_type=made, code="base", name="TST base"))
    return made, variant


def aircraft_make(
    operator: Operator,
    variant: Variant,
    registration: str = "Q7-TSA",
    *,
    minutes: int = 600_000,
    cycles: int = 10_000,
    data_from: dt.date = BEGAN,
    actor: User | None = None,
) -> Aircraft:
    return aircraft_add(
        operator=operator,
        variant=variant,
        serial_number=str(next(_serial)),
        registration=registration,
        data_from=data_from,
        opening_minutes=minutes,
        opening_cycles=cycles,
        opening_landings=cycles,
        opening_source="hand-over record",
        at=NOW,
        actor=actor,
    )
