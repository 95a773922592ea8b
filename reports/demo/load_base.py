"""First part of the demo load: people, the type, the aircraft and their usage."""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterator
from dataclasses import asdict, dataclass, field
from functools import partial
from itertools import groupby
from typing import Any

from django.conf import settings
from django.db.models import prefetch_related_objects

from fleet.models import (
    Aircraft,
    Authorisation,
    Configuration,
    Operator,
    Organisation,
    Person,
    User,
    Variant,
)
from fleet.services import aircraft as fleet_aircraft
from fleet.services import people as fleet_people
from fleet.services.materials import demo_values_load, materials_load
from fleet.services.structure import geometry_load, geometry_publish
from fleet.services.usage import usage_import
from fleet.usage_lines import UsageLine
from reports.demo.fleet import DATA_BEGIN, FLEET, DemoAircraft, StateSpan
from reports.demo.people import (
    AUTHORISATIONS,
    LESSOR,
    OPERATOR,
    ORGANISATIONS,
    PEOPLE,
    SECOND_OPERATOR,
)
from reports.demo.policies import EUROPE, POLICIES
from reports.demo.timeline import Rank, Step, month_after
from reports.demo.usage import Logbook, UsageDay

BEGAN = dt.datetime(2019, 1, 1, 5, 0, tzinfo=dt.UTC)
POLICIES_SINCE = dt.date(2000, 1, 1)
OPERATOR_CODES = {OPERATOR: "BRF", SECOND_OPERATOR: "OAL"}
GEOMETRY_FILE, MATERIALS_FILE = "ard52.toml", "materials.toml"
AUTHORISED_BY = "company authorisation register"


@dataclass
class Loaded:
    """What has been loaded so far, by the keys of the scenario."""

    operator: Operator
    organisations: dict[str, Organisation] = field(default_factory=dict)
    people: dict[str, Person] = field(default_factory=dict)
    authorisations: dict[str, Authorisation] = field(default_factory=dict)
    users: dict[str, User] = field(default_factory=dict)
    aircraft: dict[int, Aircraft] = field(default_factory=dict)
    configurations: dict[str, Configuration] = field(default_factory=dict)
    rows: dict[str, Any] = field(default_factory=dict)


def people_load(password: str) -> Loaded:
    """Organisations, both operators, everyone in them, and a login for each role."""
    loaded: Loaded | None = None
    organisations: dict[str, Organisation] = {}
    operators: dict[str, Operator] = {}
    for kind, name in ORGANISATIONS:
        code = OPERATOR_CODES.get(name) or name.split()[0].upper()
        if kind == "operator":
            operators[name] = fleet_people.operator_create(
                code=code,
                name=name,
                regime=EUROPE,
                programme_three_stages=True,
                at=BEGAN,
            )
            organisations[name] = operators[name].organisation
        else:
            organisations[name] = fleet_people.organisation_create(
                code=code, name=name, kind=kind, at=BEGAN
            )
    loaded = Loaded(operators[OPERATOR], organisations)
    for person in PEOPLE:
        row = fleet_people.person_create(
            organisation=organisations[person.organisation], name=person.name, at=BEGAN
        )
        loaded.people[person.key] = row
        if person.role:
            operator = operators.get(person.organisation, loaded.operator)
            loaded.users[person.key] = _login(
                row, person.key, person.role, operator, password
            )
    for authorisation in AUTHORISATIONS:
        loaded.authorisations[authorisation.person] = fleet_people.authorisation_grant(
            person=loaded.people[authorisation.person],
            operator=loaded.operator,
            number=authorisation.number,
            scope=authorisation.scope,
            valid_from=authorisation.valid_from,
            valid_to=authorisation.valid_to,
            source=AUTHORISED_BY,
            at=BEGAN,
        )
    prefetch_related_objects(list(loaded.people.values()), "authorisations")
    return loaded


def policies_load(loaded: Loaded) -> None:
    """Clocks of the demo operator's regime and of others, each with its source."""
    for row in POLICIES:
        fleet_people.policy_set(
            **asdict(row),
            effective_from=POLICIES_SINCE,
            actor=loaded.users["administrator"],
            at=BEGAN,
        )


def _login(
    person: Person, username: str, role: str, operator: Operator, password: str
) -> User:
    user = fleet_people.user_create(
        username=username, password=password, person=person, at=BEGAN
    )
    fleet_people.membership_grant(
        user=user, operator=operator, role=role, began_on=DATA_BEGIN, at=BEGAN
    )
    return user


def type_load(loaded: Loaded) -> dict[str, Variant]:
    """The materials, the type's geometry in force, and a configuration a variant."""
    administrator = loaded.users["administrator"]
    materials = settings.FIXTURES / MATERIALS_FILE
    materials_load(path=materials, actor=administrator, at=BEGAN)
    demo_values_load(
        path=materials,
        operator=loaded.operator,
        person=loaded.people["engineer"],
        second_person=loaded.people["signatory"],
        on=DATA_BEGIN,
        actor=loaded.users["engineer"],
        at=BEGAN,
    )
    revision = geometry_load(
        content=(settings.FIXTURES / GEOMETRY_FILE).read_text(),
        actor=administrator,
        at=BEGAN,
    )
    geometry_publish(revision=revision, actor=administrator, at=BEGAN, on=DATA_BEGIN)
    variants = {row.code: row for row in revision.aircraft_type.variants.all()}
    for variant in variants.values():
        loaded.configurations[variant.code] = fleet_aircraft.configuration_add(
            aircraft_type=revision.aircraft_type,
            code=variant.code,
            name=variant.name,
            at=BEGAN,
        )
    return variants


def fleet_steps(
    loaded: Loaded, variants: dict[str, Variant], books: dict[int, Logbook]
) -> Iterator[Step]:
    """Aircraft joining, their states and leaving, and the log month by month."""
    for plan in FLEET:
        mark, joined = plan.registration, plan.joined_on
        add = partial(_aircraft_add, loaded, plan, variants[plan.variant])
        before = joined - dt.timedelta(days=1)
        yield Step(before, Rank.AIRCRAFT, mark, add, joined)
        for span in plan.state_spans()[1:]:
            change = partial(_state_set, loaded, plan, span)
            yield Step(span.begin, Rank.STATE, mark, change)
        days = books[plan.msn].days
        for _, month in groupby(days, key=lambda day: month_after(day.day)):
            lines = list(month)
            log = partial(_usage_import, loaded, plan, lines)
            yield Step(lines[-1].day, Rank.USAGE, mark, log)
        if plan.left_on is not None:
            leave = partial(_aircraft_leave, loaded, plan, plan.left_on)
            yield Step(plan.left_on, Rank.CLOSING, mark, leave)


def _aircraft_add(
    loaded: Loaded, plan: DemoAircraft, variant: Variant, at: dt.datetime
) -> None:
    """Counters are keyed by two people."""
    loaded.aircraft[plan.msn] = fleet_aircraft.aircraft_add(
        operator=loaded.operator,
        variant=variant,
        serial_number=str(plan.msn),
        registration=plan.registration,
        manufactured_on=plan.manufactured_on,
        data_from=plan.joined_on,
        opening_minutes=plan.opening_hours * 60,
        opening_cycles=plan.opening_cycles,
        opening_landings=plan.opening_cycles,
        opening_source="counters of the joining record, signed by both parties",
        configuration=loaded.configurations[plan.variant],
        state=plan.state_spans()[0].state,
        camo=loaded.operator.organisation,
        owner=loaded.organisations[LESSOR],
        actor=loaded.users["administrator"],
        rekeyed_by=loaded.users["planner"],
        at=at,
    )
    prefetch_related_objects([loaded.aircraft[plan.msn]], "periods")


def _state_set(
    loaded: Loaded, plan: DemoAircraft, span: StateSpan, at: dt.datetime
) -> None:
    fleet_aircraft.aircraft_set_state(
        aircraft=loaded.aircraft[plan.msn],
        state=span.state,
        from_on=span.begin,
        at=at,
        actor=loaded.users["planner"],
    )


def _aircraft_leave(
    loaded: Loaded, plan: DemoAircraft, left_on: dt.date, at: dt.datetime
) -> None:
    fleet_aircraft.aircraft_leave(
        aircraft=loaded.aircraft[plan.msn],
        left_on=left_on - dt.timedelta(days=1),
        reason="handed back to its owner at the end of the lease",
        at=at,
        actor=loaded.users["administrator"],
    )


def _usage_import(
    loaded: Loaded, plan: DemoAircraft, days: list[UsageDay], at: dt.datetime
) -> None:
    usage_import(
        actor=loaded.users["planner"],
        at=at,
        today=at.date(),
        aircraft=loaded.aircraft[plan.msn],
        lines=[
            UsageLine(
                day.day,
                day.cycles,
                day.minutes,
                cycles_without_minutes=day.cycles_without_minutes,
            )
            for day in days
        ],
        source="technical log",
    )
