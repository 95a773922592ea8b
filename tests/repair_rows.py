"""Repairs for tests: planned, released, and people who inspect."""

from __future__ import annotations

import datetime as dt
from dataclasses import replace
from typing import Any

from fleet.due import Counters
from fleet.models import Person
from fleet.services.people import person_create
from repairs.models import Repair
from repairs.services.repair_entry import Data, RepairEntry
from repairs.services.repairs import repair_embody, repair_plan, repair_record
from repairs.services.requirement_draft import LimitEntry, RequirementDraft
from tests.factories import NOW, authorise, program
from tests.record_rows import FOUND, World

RELEASED = FOUND + dt.timedelta(days=5)
MANUAL_PAGE = Data("repair_manual", "SRM 53-10-12", "14", "fig. 202")
LETTER = Data("letter", "ARD-L-0077", "A", "p. 2")
PLACE = "STA 640 to 660, S-6R to S-8R"


def entry_of(world: World, **changes: Any) -> RepairEntry:
    """A doubler on skin that is PSE, released, unless told otherwise."""
    entry: dict[str, Any] = {
        "aircraft": world.aircraft,
        "place_entered": PLACE,
        "kind": "external_doubler",
        "description": "external doubler over the dent",
        "category": "a",
        "approval_basis": "repair_manual",
        "approval": MANUAL_PAGE,
        "released_on": RELEASED,
        "at": Counters(604_000, 10_080),
        "released_by": world.certifier,
        "release_reference": "CRS-77",
        "performed_by": world.assessor,
    }
    return RepairEntry(**(entry | changes))


def record(world: World, **changes: Any) -> Repair:
    return repair_record(
        entry=entry_of(world, **changes),
        proof=program(world.certifier),
        actor=world.engineer,
        at=NOW,
    )


def plan(world: World, **changes: Any) -> Repair:
    unknown = {
        "released_on": None,
        "at": Counters(),
        "released_by": None,
        "release_reference": "",
        "performed_by": None,
    }
    return repair_plan(
        entry=replace(entry_of(world, **changes), **unknown),
        actor=world.engineer,
        at=NOW,
    )


def embody(world: World, repair: Repair, **changes: Any) -> Repair:
    return repair_embody(
        repair=repair,
        entry=entry_of(world, **changes),
        proof=program(world.certifier),
        actor=world.engineer,
        at=NOW + dt.timedelta(minutes=1),
    )


def person_of(world: World, name: str, *scopes: str) -> Person:
    """Somebody with these authorisations and no login."""
    person = person_create(organisation=world.operator.organisation, name=name, at=NOW)
    for scope in scopes:
        authorise(person, world.operator, scope)
    return person


def inspection(world: World, **changes: Any) -> RequirementDraft:
    """What a category B repair is followed by."""
    draft: dict[str, Any] = {
        "operator": world.operator,
        "title": "Inspect the doubler's edge",
        "requirement_class": "repair",
        "area": "doubler at STA 640-660",
        "criteria": "no crack",
        "method": "eddy_current_high",
        "effective_on": RELEASED,
        "limits": (
            LimitEntry("threshold", "15,000 FC", base="release"),
            LimitEntry("repeat", "5,000 FC"),
        ),
        "aircraft": (world.aircraft,),
    }
    return RequirementDraft(**(draft | changes))
