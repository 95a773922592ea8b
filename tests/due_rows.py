"""Rows for tests of usage, parts and due items; one operator and type, made once."""

from __future__ import annotations

import datetime as dt
from itertools import count
from typing import Any

from fleet.models import (
    Aircraft,
    AircraftType,
    Configuration,
    Document,
    Operator,
    PartNumber,
    Person,
    Role,
    SafeLifePart,
    User,
    Variant,
)
from fleet.services.usage import usage_import
from fleet.usage_lines import UsageLine
from tests import factories

AT = factories.NOW
TODAY = factories.TODAY
FIRST = dt.date(2024, 10, 1)
SOURCE = "technical log 12"
_next = count(1)


def day(n: int) -> dt.date:
    """The nth day of the records; 0 is the first."""
    return FIRST + dt.timedelta(days=n)


def operator(code: str = "NRT") -> Operator:
    found = Operator.objects.filter(code=code).first()
    return found or factories.operator_make(code, f"{code} Air")


def user(role: str = Role.ENGINEER, of: Operator | None = None) -> User:
    return factories.user_make(of or operator(), role, f"{role}-{next(_next)}")


def outsider(role: str = Role.ENGINEER) -> User:
    """Somebody with the same role at another operator."""
    return user(role, operator("OTH"))


def person() -> Person:
    member = user().person
    assert member is not None
    return member


def variant() -> Variant:
    found = AircraftType.objects.filter(code="TST").first()
    return found.variants.get() if found else factories.type_bare()[1]


def configuration(code: str = "base") -> Configuration:
    found, _ = Configuration.objects.get_or_create(
        aircraft_type=variant().aircraft_type, code=code, defaults={"name": code}
    )
    return found


def aircraft(registration: str = "Q7-TSA", **columns: Any) -> Aircraft:
    """An aircraft that joined on 2024-10-01 with 20,000 FH and 25,000 FC."""
    made = factories.aircraft_make(
        columns.pop("of", None) or operator(),
        variant(),
        registration,
        minutes=20_000 * 60,
        cycles=25_000,
        data_from=FIRST,
    )
    if columns:
        Aircraft.objects.filter(pk=made.pk).update(**columns)
        made.refresh_from_db()
    return made


def fly(
    aircraft: Aircraft,
    days: int,
    *,
    cycles: int = 4,
    minutes: int | None = 200,
    start: int = 0,
) -> list[Any]:
    """The same flying every day."""
    untimed = cycles if minutes is None else 0
    lines = [
        UsageLine(day(n), cycles, minutes, cycles_without_minutes=untimed)
        for n in range(start, start + days)
    ]
    return usage_import(
        actor=None, at=AT, today=TODAY, aircraft=aircraft, lines=lines, source=SOURCE
    )


def document(reference: str = "ARD-DOC-1", of: Operator | None = None) -> Document:
    found, _ = Document.objects.get_or_create(
        operator=of or operator(),
        reference=reference,
        revision="A",
        defaults={"kind": "other", "entered_at": AT},
    )
    return found


def part_number(number: str = "ARD-FIT-1", of: Operator | None = None) -> PartNumber:
    found, _ = PartNumber.objects.get_or_create(
        operator=of or operator(),
        number=number,
        defaults={"title": "Main fitting", "entered_at": AT},
    )
    return found


def part(serial: str = "", **columns: Any) -> SafeLifePart:
    """A new part in store with a complete history and a release reference."""
    of = columns.pop("of", None) or operator()
    defaults = {
        "operator": of,
        "part_number": part_number(of=of),
        "serial": serial or f"S{next(_next):04d}",
        "manufactured_on": dt.date(2010, 1, 1),
        "state": "in_store",
        "chain": "complete",
        "release_reference": "release certificate 1",
        "entered_at": AT,
    }
    return SafeLifePart.objects.create(**defaults | columns)
