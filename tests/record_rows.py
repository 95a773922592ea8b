"""A small operator with the demonstration type, an aircraft that flies, and signers."""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass

from fleet.models import Aircraft, Operator, Person, User, Variant
from fleet.services.materials import materials_load
from fleet.services.structure import geometry_load, geometry_publish
from fleet.services.usage import usage_import
from fleet.usage_lines import UsageLine
from repairs.measured import Typed
from repairs.models import Finding
from repairs.services.assessing import finding_assess
from repairs.services.disposition_entry import Basis
from repairs.services.finding_guards import DataCited
from repairs.services.findings import FindingEntry, finding_record
from tests.factories import (
    FIXTURES,
    NOW,
    TODAY,
    aircraft_make,
    authorise,
    operator_make,
    program,
    user_make,
    users_make,
)

FOUND = dt.date(2024, 12, 20)
FIRST = dt.date(2024, 12, 1)
DATA = DataCited("repair_manual", "SRM 53-10-12", "14", "p. 101")
MANUAL = Basis("repair_manual", "SRM 53-10-12", "p. 101", "14")
HOLDER = Basis("design_approval", "ARD-RDA-0077", "p. 2", "A")
DENT = (Typed("length_mm", "2.4 in"), Typed("width_mm", "1.8 in"),
        Typed("depth_mm", "0.040 in", 45.0))  # fmt: skip
CRACK = (Typed("length_mm", "0.94 in"), Typed("direction", "longitudinal"),
         Typed("origin", "skin"))  # fmt: skip


@dataclass(frozen=True)
class World:
    operator: Operator
    variant: Variant
    aircraft: Aircraft
    users: dict[str, User]
    outsider: User
    assessor: Person
    certifier: Person
    approver: Person

    @property
    def engineer(self) -> User:
        return self.users["engineer"]


def world_make() -> World:
    """Flown from 1 to 20 December 2024, four flights and 200 minutes a day."""
    materials_load(path=FIXTURES / "materials.toml", actor=None, at=NOW)
    content = (FIXTURES / "ard52.toml").read_text(encoding="utf-8")
    revision = geometry_load(content=content, actor=None, at=NOW)
    geometry_publish(revision=revision, actor=None, at=NOW, on=TODAY)
    operator = operator_make()
    users = users_make(operator)
    variant = revision.aircraft_type.variants.get(code="base")
    aircraft = aircraft_make(operator, variant, "Q7-AAA", data_from=FIRST)
    usage_import(
        actor=None,
        at=NOW,
        today=TODAY,
        aircraft=aircraft,
        lines=[UsageLine(FIRST + dt.timedelta(days=n), 4, 200) for n in range(20)],
        source="technical log 12",
    )
    scopes = {"engineer": "assess", "certifier": "certify", "signatory": "approve"}
    for role, scope in scopes.items():
        authorise(_person(users[role]), operator, scope)
    return World(
        operator,
        variant,
        aircraft,
        users,
        user_make(operator_make("OTH", "Other Air"), "engineer", "outsider"),
        *(_person(users[role]) for role in scopes),
    )


def _person(user: User) -> Person:
    assert user.person is not None
    return user.person


def found(world: World, **changes: object) -> Finding:
    """A dent in the upper side skin, unless told otherwise."""
    entry: dict[str, object] = {
        "aircraft": world.aircraft,
        "place_entered": "STA 640+10, 4 in below S-7R",
        "damage_type": "dent",
        "found_on": FOUND,
        "typed": DENT,
    }
    return finding_record(
        entry=FindingEntry(**(entry | changes)),  # type: ignore[arg-type]
        actor=world.users["recorder"],
        at=NOW,
    )


def assessed(
    world: World, finding: Finding | None = None, **changes: object
) -> Finding:
    return finding_assess(
        finding=finding or found(world, **changes),
        proof=program(world.assessor),
        on=FOUND,
        data=DATA,
        actor=world.engineer,
        at=NOW,
    )
