"""First part of the demo load: people, the type, the aircraft and their usage."""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass, field
from typing import Any

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
from fleet.services.usage import usage_import
from fleet.usage_lines import UsageLine
from reports.demo.fleet import DATA_BEGIN, DEMO_TODAY, FLEET, DemoAircraft
from reports.demo.people import (
    AUTHORISATIONS,
    OPERATOR,
    ORGANISATIONS,
    PEOPLE,
    SECOND_OPERATOR,
)
from reports.demo.usage import Logbook, UsageDay

BEGAN = dt.datetime(2019, 1, 1, 6, 0, tzinfo=dt.UTC)
REGIME = "EASA"
OPERATOR_CODES = {OPERATOR: "BRF", SECOND_OPERATOR: "OAL"}
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


def entry_time(day: dt.date, joined_on: dt.date = DATA_BEGIN) -> dt.datetime:
    """When a record of that day was entered: with the month's papers, on the first of
    the next month; what is older than the aircraft's data, when it joined."""
    day = max(day, joined_on)
    first = (day.replace(day=1) + dt.timedelta(days=32)).replace(day=1)
    return dt.datetime.combine(min(first, DEMO_TODAY), dt.time(6), dt.UTC)


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
                regime=REGIME,
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
    return loaded


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


def aircraft_load(loaded: Loaded, plan: DemoAircraft, variant: Variant) -> None:
    """One aircraft as it joins, with counters keyed by two people."""
    first = plan.state_spans()[0]
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
        state=first.state,
        camo=loaded.operator.organisation,
        owner=loaded.organisations["Wexcombe Leasing"],
        actor=loaded.users["administrator"],
        rekeyed_by=loaded.users["planner"],
        at=dt.datetime.combine(plan.joined_on, dt.time(5), dt.UTC),
    )


def states_load(loaded: Loaded, plan: DemoAircraft) -> None:
    """Checks, storage and leaving, one after the other."""
    aircraft = loaded.aircraft[plan.msn]
    for span in plan.state_spans()[1:]:
        fleet_aircraft.aircraft_set_state(
            aircraft=aircraft,
            state=span.state,
            from_on=span.begin,
            at=entry_time(span.begin),
            actor=loaded.users["planner"],
        )
    if plan.left_on is not None:
        fleet_aircraft.aircraft_leave(
            aircraft=aircraft,
            left_on=plan.left_on - dt.timedelta(days=1),
            reason="handed back to its owner at the end of the lease",
            at=entry_time(plan.left_on),
            actor=loaded.users["administrator"],
        )


def usage_load(
    loaded: Loaded, book: Logbook, days: list[UsageDay], at: dt.datetime
) -> None:
    """One month of the technical log."""
    usage_import(
        actor=loaded.users["planner"],
        at=at,
        today=at.date(),
        aircraft=loaded.aircraft[book.aircraft.msn],
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


def plans_by_joining() -> list[DemoAircraft]:
    return sorted(FLEET, key=lambda plan: (plan.from_day, plan.msn))
