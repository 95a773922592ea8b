"""Findings on their way: decided on, deferred, repaired, closed; and report clocks."""

from __future__ import annotations

import datetime as dt
from typing import Any

from fleet.due import Counters
from fleet.models import Policy
from fleet.services.people import policy_set
from repairs.measured import Typed
from repairs.models import CorrosionLevel, Disposition, Finding, Repair
from repairs.services.assessing import finding_close
from repairs.services.corrosion import LevelEntry, corrosion_level_determine
from repairs.services.disposition_entry import DispositionEntry
from repairs.services.dispositions import disposition_decide
from repairs.services.repair_entry import Answered, Data, RepairEntry
from repairs.services.repairs import repair_record
from tests.factories import NOW, program
from tests.record_rows import FOUND, MANUAL, World, assessed

AT = Counters(604_000, 10_080, 10_080)
RELEASED = FOUND + dt.timedelta(days=5)
CORROSION = (Typed("length_mm", "1 in"), Typed("width_mm", "0.5 in"),
             Typed("depth_mm", "0.01 in"))  # fmt: skip


def decide(world: World, *findings: Finding, by: Any = None, **changes: Any) -> Any:
    entry: dict[str, Any] = {
        "aircraft": world.aircraft,
        "findings": findings or (assessed(world),),
        "kind": "accept",
        "basis": MANUAL,
        "reason": "Within the manual's limits.",
        "decided_on": FOUND,
        "at": AT,
    }
    return disposition_decide(
        entry=DispositionEntry(**(entry | changes)),
        proof=program(by or world.assessor),
        actor=world.engineer,
        at=NOW,
    )


def defer(world: World, *findings: Finding, **changes: Any) -> Disposition:
    """To 10,300 FC, on the day it was found, unless told otherwise."""
    said: dict[str, Any] = {"limit": Counters(cycles=10_300), "by": world.certifier}
    day = changes.get("decided_on", FOUND)
    said |= {"crew_informed_on": day, "reason": "To the next check."}
    made: Disposition = decide(world, *findings, kind="defer", **(said | changes))
    return made


def repaired(world: World, finding: Finding, **changes: Any) -> Repair:
    entry: dict[str, Any] = {
        "aircraft": world.aircraft,
        "place_entered": "STA 640 to 660, S-6R to S-8R",
        "kind": "external_doubler",
        "description": "external doubler",
        "category": "a",
        "approval_basis": "repair_manual",
        "approval": Data("repair_manual", "SRM 53-10-12", "14", "fig. 202"),
        "released_on": RELEASED,
        "release_reference": "CRS-77",
        "at": Counters(604_000, 10_080),
        "performed_by": world.assessor,
        "released_by": world.certifier,
        "findings": (Answered(finding, covers=True, damage_removed="yes"),),
    }
    return repair_record(
        entry=RepairEntry(**(entry | changes)),
        proof=program(world.certifier),
        actor=world.engineer,
        at=NOW,
    )


def rectified(world: World, **changes: Any) -> Finding:
    """Assessed, to rectify, and answered by a released repair."""
    finding = assessed(world, **changes)
    decide(world, finding, kind="rectify")
    repaired(world, finding)
    finding.refresh_from_db()
    return finding


def close(world: World, finding: Finding, **changes: Any) -> Finding:
    said: dict[str, Any] = {"proof": program(world.certifier), "on": RELEASED}
    said |= {"cause": "accidental", "actor": world.users["certifier"], "at": NOW}
    return finding_close(finding=finding, **(said | changes))


def levelled(world: World, finding: Finding, level: int, **more: Any) -> CorrosionLevel:
    entry: dict[str, Any] = {
        "level": level,
        "definitions": "Corrosion programme, paragraph 2.3",
        "task": "C-53-120",
        "determined_by": world.assessor,
        "determined_on": FOUND,
    }
    return corrosion_level_determine(
        finding=finding,
        entry=LevelEntry(**(entry | more)),
        actor=world.engineer,
        at=NOW,
    )


def clock(key: str, value: int, unit: str, **more: Any) -> Policy:
    """A rule's number offered to every operator of its regime."""
    row: dict[str, Any] = {"regime": "EASA", "source": "rule of the test"}
    row |= {"grade": "quoted", "effective_from": dt.date(2000, 1, 1), "at": NOW}
    return policy_set(key=key, value=value, unit=unit, **(row | more))
