"""Repairs, inspection requirements and what was accomplished on them."""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterator
from dataclasses import replace
from functools import partial

from fleet.due import CalendarRule, months_later
from fleet.due import Counters as Amounts
from fleet.services.documents import document_get_or_create
from fleet.services.history import Writing
from fleet.services.signing import Proof
from fleet.units import measure_read
from repairs.models import HOLDER_DOCUMENTS
from repairs.services.accomplishments import (
    accomplishment_record,
    subject_not_applicable,
)
from repairs.services.inspections import requirement_raise
from repairs.services.reentry import requirement_rekey
from repairs.services.repair_entry import (
    Answered,
    Data,
    Fastener,
    Layer,
    RepairEntry,
)
from repairs.services.repairs import repair_record
from repairs.services.requirement_draft import LimitEntry, RequirementDraft
from reports.demo.airframe import INCH_MM
from reports.demo.fleet import BY_MSN, DATA_BEGIN, DEMO_TODAY
from reports.demo.load_base import Loaded
from reports.demo.load_decisions import limit_entries
from reports.demo.load_findings import ata_of
from reports.demo.load_parts import amounts
from reports.demo.people import MAINTENANCE
from reports.demo.places import FUSELAGE
from reports.demo.records import (
    DemoAccomplishment,
    DemoFastener,
    DemoFinding,
    DemoRepair,
    DemoRequirement,
    Scenario,
)
from reports.demo.timeline import Rank, Step

UNVERIFIED_DAYS = 120
"""Requirements younger than this still wait for their second keying."""


def repair_steps(loaded: Loaded, scenario: Scenario) -> Iterator[Step]:
    """Repairs with what follows from them, then every inspection done."""
    findings = {finding.key: finding for finding in scenario.findings}
    raised_with = {r.repair: r for r in scenario.requirements if r.repair}
    for repair in scenario.repairs:
        joined = BY_MSN[repair.msn].joined_on
        record = partial(_repair, loaded, repair, findings, raised_with.get(repair.key))
        yield Step(repair.released_on, Rank.REPAIR, repair.key, record, joined)
    for requirement in scenario.requirements:
        yield from _requirement_steps(loaded, requirement)


def _requirement_steps(loaded: Loaded, requirement: DemoRequirement) -> Iterator[Step]:
    effective, key = requirement.effective_on, requirement.key
    if requirement.repair:
        joined = BY_MSN[requirement.subjects[0].msn].joined_on
    else:
        joined = DATA_BEGIN
        raise_it = partial(_raise, loaded, requirement)
        yield Step(effective, Rank.REQUIREMENT, key, raise_it, joined)
    if (DEMO_TODAY - effective).days > UNVERIFIED_DAYS:
        again = partial(_key_again, loaded, requirement)
        yield Step(effective, Rank.REKEYING, key, again, joined)
    for subject in requirement.subjects:
        if not subject.applicable:
            no = partial(
                _not_applicable, loaded, requirement, subject.msn, subject.reason
            )
            yield Step(effective, Rank.ACCOMPLISHMENT, key, no, joined)
        for done in subject.accomplishments:
            do = partial(_accomplish, loaded, requirement, subject.msn, done)
            day = max(done.done_on, effective)
            yield Step(day, Rank.ACCOMPLISHMENT, f"{key} {done.done_on}", do, joined)


def _repair(
    loaded: Loaded,
    repair: DemoRepair,
    findings: dict[str, DemoFinding],
    requirement: DemoRequirement | None,
    at: dt.datetime,
) -> None:
    entry = _answering(loaded, repair, _embodied(loaded, repair, findings))
    if requirement is not None:
        entry = replace(entry, new_requirement=_draft(loaded, requirement))
    row = repair_record(
        entry=entry,
        proof=Proof.by_program(loaded.people["engineer"]),
        actor=loaded.users["engineer"],
        at=at,
    )
    loaded.rows[repair.key] = row
    if requirement is not None:
        loaded.rows[requirement.key] = row.requirements.get()


def _embodied(
    loaded: Loaded, repair: DemoRepair, findings: dict[str, DemoFinding]
) -> RepairEntry:
    """What was done, by whom and with which data."""
    left_mm, removed_mm = _blend(repair, findings)
    return RepairEntry(
        aircraft=loaded.aircraft[repair.msn],
        place_entered=repair.location,
        kind=repair.kind,
        description=repair.description,
        category=repair.category,
        category_reason=repair.category_reason,
        approval_basis="unknown",
        released_on=repair.released_on,
        at=amounts(repair.at),
        release_reference="" if repair.legacy else f"HA-{repair.key[2:]}",
        length_mm=repair.length_in * INCH_MM,
        width_mm=repair.width_in * INCH_MM,
        layers=[
            Layer(material, thickness, measure_read(thickness, "length", unit="mm"))
            for material, thickness in repair.layers
        ],
        fasteners=[_fastener(one) for one in repair.fasteners],
        surface="outer" if repair.truth.section == FUSELAGE else "",
        ata=ata_of(repair.truth),
        remaining_thickness_mm=left_mm,
        blend_depth_mm=removed_mm,
        performed_by=loaded.people[repair.performed_by],
        inspected_by=loaded.people[repair.inspected_by],
        released_by=loaded.people[repair.released_by],
        organisation=loaded.organisations[MAINTENANCE],
        legacy=repair.legacy,
        evidence=_evidence(repair),
    )


def _answering(loaded: Loaded, repair: DemoRepair, entry: RepairEntry) -> RepairEntry:
    """The findings it answers, its approval and the limits that follow from it."""
    document = repair.document
    limits = {limit.counter: limit.value for limit in repair.replace_by}
    months, key = limits.get("months"), next(iter(repair.findings), "")
    if document.kind != "other":
        data = Data(document.kind, document.reference, document.revision, document.page)
        entry = replace(entry, approval_basis=document.kind, approval=data)
    if months:
        last = months_later(repair.released_on, months, CalendarRule.DATE)
        entry = replace(entry, replacement_limit_on=last)
    return replace(
        entry,
        findings=[
            Answered(loaded.rows[key], repair.covers, repair.damage_removed)
            for key in repair.findings
        ],
        disposition=loaded.rows.get(f"S{key[1:]}"),
        replacement_limit=Amounts(cycles=limits.get("cycles")),
        temporary_limit_cycles=_from_release(repair),
        stage_reached=_stage(repair),
    )


def _from_release(repair: DemoRepair) -> int | None:
    """The scenario names what the aircraft may show; a limit counts from release."""
    shown = repair.temporary_limit_cycles
    return None if shown is None else shown - repair.at.cycles


def _stage(repair: DemoRepair) -> str:
    """Data by letter or design approval came complete, unless a stage is awaited."""
    if repair.stage_due_on:
        return "1"
    return "3" if repair.document.kind in HOLDER_DOCUMENTS else "not_applicable"


def _evidence(repair: DemoRepair) -> str:
    if not repair.document.held:
        return "not_seen"
    return "seen" if repair.legacy else "not_applicable"


def _blend(
    repair: DemoRepair, findings: dict[str, DemoFinding]
) -> tuple[float | None, float | None]:
    """Thickness left by a blend-out and the depth taken off, in mm."""
    if repair.kind != "blend" or not repair.findings:
        return None, None
    measured = {d.quantity: d.entered for d in findings[repair.findings[0]].reworked}
    left = float(measured["remaining_thickness_mm"].split()[0])
    before = float(measured["original_thickness_mm"].split()[0])
    return left, round(before - left, 3)


def _fastener(one: DemoFastener) -> Fastener:
    return Fastener(
        one.name,
        measure_read(one.diameter, "length", unit="mm"),
        measure_read(one.pitch, "length", unit="mm") if one.pitch else None,
        measure_read(one.edge_distance, "length", unit="mm")
        if one.edge_distance
        else None,
        one.rows,
        one.count,
    )


def _draft(loaded: Loaded, requirement: DemoRequirement) -> RequirementDraft:
    sisters = bool(requirement.finding)
    return RequirementDraft(
        operator=loaded.operator,
        title=requirement.title,
        requirement_class=requirement.kind,
        area=requirement.area,
        criteria=requirement.criteria,
        method=requirement.method,
        task=requirement.task,
        source_page=requirement.document.page,
        finding=loaded.rows[requirement.finding] if sisters else None,
        sisters=sisters,
        effective_on=requirement.effective_on,
        limits=_limits(requirement),
        aircraft=[loaded.aircraft[s.msn] for s in requirement.subjects],
    )


def _limits(requirement: DemoRequirement) -> list[LimitEntry]:
    return [
        *limit_entries("threshold", requirement.thresholds),
        *limit_entries("repeat", requirement.repeats),
    ]


def _raise(loaded: Loaded, requirement: DemoRequirement, at: dt.datetime) -> None:
    document = requirement.document
    actor = loaded.users["engineer"]
    with Writing(
        actor=actor, action="document_record", at=at, operator=loaded.operator
    ) as w:
        source = document_get_or_create(
            w,
            operator=loaded.operator,
            kind=document.kind,
            reference=document.reference,
            revision=document.revision,
        )
    draft = replace(_draft(loaded, requirement), source_document=source)
    loaded.rows[requirement.key] = requirement_raise(actor=actor, at=at, draft=draft)


def _key_again(loaded: Loaded, requirement: DemoRequirement, at: dt.datetime) -> None:
    requirement_rekey(
        actor=loaded.users["planner"],
        at=at,
        requirement=loaded.rows[requirement.key],
        limits=_limits(requirement),
        applicability=[BY_MSN[s.msn].registration for s in requirement.subjects],
    )


def _not_applicable(
    loaded: Loaded,
    requirement: DemoRequirement,
    msn: int,
    reason: str,
    at: dt.datetime,
) -> None:
    row = loaded.rows[requirement.key]
    subject_not_applicable(
        actor=loaded.users["engineer"],
        at=at,
        subject=row.subjects.get(aircraft=loaded.aircraft[msn]),
        on=requirement.effective_on,
        reason=reason,
    )


def _accomplish(
    loaded: Loaded,
    requirement: DemoRequirement,
    msn: int,
    done: DemoAccomplishment,
    at: dt.datetime,
) -> None:
    row = loaded.rows[requirement.key]
    subject = row.subjects.select_related("aircraft", "requirement__operator").get(
        aircraft=loaded.aircraft[msn]
    )
    accomplishment_record(
        actor=loaded.users["certifier"],
        at=at,
        today=DEMO_TODAY,
        subject=subject,
        done_on=done.done_on,
        counters=amounts(done.at),
        result=done.result,
        proof=Proof.by_program(loaded.people[done.performed_by]),
        done_by=loaded.people[done.performed_by],
        evidence=done.note,
    )
