"""Safe-life parts of the demo: numbers, life limits, serials, installations, swaps."""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterator
from functools import partial

from fleet.due import Counters as Amounts
from fleet.models import PartNumber
from fleet.services import part_records
from fleet.services import parts as fleet_parts
from fleet.services.documents import document_get_or_create
from fleet.services.history import Writing
from repairs.services.reentry import life_limit_rekey
from reports.demo.fleet import BY_MSN, DATA_BEGIN
from reports.demo.load_base import BEGAN, Loaded
from reports.demo.records import (
    DemoEarlierLife,
    DemoLifeLimit,
    DemoPart,
    DemoStint,
    Scenario,
)
from reports.demo.timeline import Rank, Step
from reports.demo.usage import Counters

LIMITS_SECTION = "ARD-52 airworthiness limitations 4"
LIMITS_SINCE = dt.date(2005, 1, 1)
GAP_FOUND_ON = dt.date(2024, 11, 18)
UNIT_WORDS = {"cycles": "FC", "minutes": "FH", "months": "months"}

ONCE_KEYED = "months"
"""The life limits in months still wait for a second person to key them."""


def amounts(at: Counters) -> Amounts:
    """Counters as the services take them; each flight is one landing."""
    return Amounts(minutes=at.minutes, cycles=at.cycles, landings=at.cycles)


def part_numbers_load(loaded: Loaded, scenario: Scenario) -> None:
    """Part numbers, and their limits keyed by one person and again by another."""
    planner = loaded.users["planner"]
    numbers: dict[str, PartNumber] = {}
    for plan in scenario.part_numbers:
        numbers[plan.number] = part_records.part_number_record(
            actor=planner,
            at=BEGAN,
            operator=loaded.operator,
            number=plan.number,
            title=plan.title,
            ata="32-10",
        )
    with Writing(
        actor=planner, action="document_record", at=BEGAN, operator=loaded.operator
    ) as w:
        document = document_get_or_create(
            w,
            operator=loaded.operator,
            kind="limitations",
            reference=LIMITS_SECTION,
            revision="9",
            title="Airworthiness limitations, safe-life parts",
        )
    for limit in scenario.life_limits:
        keyed = part_records.life_limit_key(
            actor=planner,
            at=BEGAN,
            part_number=numbers[limit.part_number],
            entered=limit_text(limit),
            base=limit.base,
            document=document,
            page="table 4-1",
            effective_from=LIMITS_SINCE,
            configuration=loaded.configurations.get(limit.configuration),
        )
        if limit.counter == ONCE_KEYED:
            continue
        life_limit_rekey(
            actor=loaded.users["engineer"],
            at=BEGAN,
            limit=keyed,
            entered=limit_text(limit),
            base=limit.base,
        )
    loaded.rows |= numbers


def limit_text(limit: DemoLifeLimit) -> str:
    """As printed: 60,000 FC, 20,000 FH, 120 months."""
    value = limit.value // 60 if limit.counter == "minutes" else limit.value
    return f"{value:,} {UNIT_WORDS[limit.counter]}"


def part_steps(loaded: Loaded, scenario: Scenario) -> Iterator[Step]:
    """Each serial recorded, installed, removed and installed again, on its days."""
    for part in scenario.parts:
        born = part.stints[0].fitted_on if part.stints else part.manufactured_on
        recorded = BY_MSN[part.stints[0].msn].joined_on if part.stints else DATA_BEGIN
        record = partial(_record, loaded, part)
        yield Step(born, Rank.PART, part.key, record, recorded)
        for stint in part.stints:
            joined = BY_MSN[stint.msn].joined_on
            key = f"{part.key} {stint.fitted_on}"
            install = partial(_install, loaded, part, stint)
            yield Step(stint.fitted_on, Rank.INSTALL, key, install, joined)
            if stint.removed_on is not None:
                remove = partial(_remove, loaded, part, stint)
                yield Step(stint.removed_on, Rank.REMOVE, key, remove, joined)
        for life in part.earlier:
            if life.kind == "gap":
                note = partial(_earlier_life, loaded, part, life)
                yield Step(GAP_FOUND_ON, Rank.GAP, part.key, note)


def _record(loaded: Loaded, part: DemoPart, at: dt.datetime) -> None:
    loaded.rows[part.key] = part_records.part_record(
        actor=loaded.users["planner"],
        at=at,
        part_number=loaded.rows[part.part_number],
        serial=part.serial,
        manufactured_on=part.manufactured_on,
        release_reference=f"birth certificate {part.serial}",
    )
    for life in part.earlier:
        if life.kind != "gap":
            _earlier_life(loaded, part, life, at)


def _earlier_life(
    loaded: Loaded, part: DemoPart, life: DemoEarlierLife, at: dt.datetime
) -> None:
    part_records.part_earlier_life(
        actor=loaded.users["planner"],
        at=at,
        part=loaded.rows[part.key],
        kind=life.kind,
        treatment="blocked" if life.kind == "gap" else "counted",
        counters=amounts(life.run),
        evidence=life.evidence,
        configuration=loaded.configurations["base"],
        from_on=life.begin,
        to_on=life.until,
    )


def _install(loaded: Loaded, part: DemoPart, stint: DemoStint, at: dt.datetime) -> None:
    fleet_parts.part_install(
        actor=loaded.users["planner"],
        at=at,
        part=loaded.rows[part.key],
        aircraft=loaded.aircraft[stint.msn],
        position=stint.position,
        configuration=loaded.configurations[BY_MSN[stint.msn].variant],
        on=stint.fitted_on,
        counters=amounts(stint.fitted_at),
        installed_by=loaded.people["hangar_1"],
    )


def _remove(loaded: Loaded, part: DemoPart, stint: DemoStint, at: dt.datetime) -> None:
    assert stint.removed_on is not None
    assert stint.removed_at is not None
    fleet_parts.part_remove(
        actor=loaded.users["planner"],
        at=at,
        part=loaded.rows[part.key],
        on=stint.removed_on,
        counters=amounts(stint.removed_at),
        reason=stint.reason,
        release_reference=f"release {part.serial} {stint.removed_on:%Y-%m}",
    )
