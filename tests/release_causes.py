"""One way into each release stop, and the way out of it, through the services.

What no service lets through (it would refuse the release) is written as a row, as an
import or an older record may have it.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Callable
from dataclasses import replace
from typing import Any

from fleet.due import Counters
from fleet.models import Configuration, Document, PartState
from fleet.services.applicability import document_applicability_record
from fleet.services.documents import document_get_or_create
from fleet.services.history import Writing
from fleet.services.part_records import (
    life_limit_key,
    part_number_record,
    part_record,
)
from fleet.services.parts import part_install, part_remove
from fleet.services.usage import usage_import
from fleet.usage_lines import UsageLine
from repairs.models import EventPhase, RepairRequired
from repairs.services.accomplishments import accomplishment_record
from repairs.services.events import event_close, event_record
from repairs.services.findings import finding_question_answer, finding_relocate
from repairs.services.inspections import requirement_raise, subject_add
from repairs.services.repair_category import NewCategory, repair_reclassify
from repairs.services.repair_ends import repair_cancel, repair_remove
from repairs.services.repair_entry import Data, RepairEntry
from repairs.services.repair_inspection import repair_inspect
from repairs.services.repair_progress import repair_start
from repairs.services.repairs import repair_plan, repair_record
from repairs.services.requirement_draft import LimitEntry, RequirementDraft
from repairs.services.survey_answers import survey_item_answer
from repairs.services.survey_entry import SurveyEntry
from repairs.services.surveys import survey_compare, survey_item_record, survey_open
from repairs.sheet_lines import SheetLine
from tests.factories import BEGAN, NOW, TODAY, aircraft_make, authorise, program
from tests.finding_rows import close, decide, defer, rectified, repaired
from tests.record_rows import CRACK, FOUND, HOLDER, World, assessed, found

JUDGED_ON = FOUND + dt.timedelta(days=1)
"""The day after the last day of usage: 604,000 minutes and 10,080 FC by then."""
AT = Counters(604_000, 10_080, 10_080)
NEW_DATA = Data("design_approval", "ARD-RDA-0101", "A", "p. 2")
HERE = "STA 640 to 660, S-6R to S-8R"
Lift = Callable[[], object]


def change(row: Any, **columns: Any) -> None:
    """Behind the services' back, as an import may have left it."""
    with Writing(actor=None, action="row_import", at=NOW) as w:
        w.change(w.locked(type(row).objects.all(), pk=row.pk), **columns)


def create(row: Any) -> Any:
    with Writing(actor=None, action="row_import", at=NOW) as w:
        return w.create(row)


def fly(world: World, day: dt.date = JUDGED_ON) -> None:
    """Four flights more: 10,084 FC."""
    usage_import(
        actor=None,
        at=NOW,
        today=TODAY,
        aircraft=world.aircraft,
        lines=[UsageLine(day, 4, 200)],
        source="technical log 13",
    )


# --- findings -----------------------------------------------------------------


def to_be_placed(world: World) -> Lift:
    lost = found(world, place_entered="near the galley")
    return lambda: finding_relocate(
        finding=lost, place_entered="STA 640 S-7R", actor=world.engineer, at=NOW
    )


def not_assessed(world: World) -> Lift:
    finding = found(world)
    return lambda: assessed(world, finding)


def not_decided(world: World) -> Lift:
    finding = assessed(world)
    return lambda: decide(world, finding)


def questions(world: World) -> Lift:
    """A typed counter far ahead of usage is asked about."""
    finding = found(world, at=Counters(700_000, 20_000, 20_000))
    asked = list(finding.questions.all())
    assert asked

    def lift() -> None:
        for one in asked:
            finding_question_answer(
                question=one, answer="read again", actor=world.engineer, at=NOW
            )

    return lift


def to_rectify(world: World) -> Lift:
    finding = assessed(world)
    decide(world, finding, kind="rectify")
    return lambda: repaired(world, finding)


def rectified_open(world: World) -> Lift:
    finding = rectified(world)
    return lambda: close(world, finding)


def crack(world: World) -> Lift:
    """Accepted as secondary, then the panel turned out to be PSE."""
    finding = assessed(
        world,
        damage_type="crack",
        typed=CRACK,
        criticality="secondary",
        criticality_source="structure manual 53-00",
    )
    before = decide(world, finding)
    change(finding, criticality="principal")
    return lambda: decide(
        world,
        finding,
        kind="accept_with_inspection",
        basis=HOLDER,
        limit=Counters(cycles=10_300),
        new_requirement=inspected(world, "50 FC", "repeat"),
        replaces=before,
    )


def deferral(world: World) -> Lift:
    """To 10,081 FC; 10,084 are flown."""
    finding = assessed(world)
    defer(world, finding, limit=Counters(cycles=10_081))
    fly(world)
    return lambda: repaired(world, finding, released_on=FOUND)


def deferral_unlimited(world: World) -> Lift:
    finding = assessed(world)
    change(finding, state="deferred")
    return lambda: defer(world, finding)


# --- repairs ------------------------------------------------------------------


def legacy(world: World, **changes: Any) -> Any:
    entry = {
        "aircraft": world.aircraft,
        "place_entered": HERE,
        "kind": "external_doubler",
        "description": "doubler from before our records",
        "category": "a",
        "approval_basis": "unknown",
        "released_on": BEGAN,
        "legacy": True,
        "evidence": "not_seen",
    }
    return repair_record(
        entry=RepairEntry(**(entry | changes)),
        proof=program(world.certifier),
        actor=world.engineer,
        at=NOW,
    )


def reclassified(world: World, repair: Any, category: str = "a", **more: Any) -> Any:
    return repair_reclassify(
        repair=repair,
        change=NewCategory(category, NEW_DATA, "looked at anew", FOUND, **more),
        actor=world.engineer,
        at=NOW,
    )


def removed(world: World, repair: Any) -> Any:
    return repair_remove(
        repair=repair,
        removed_on=JUDGED_ON,
        reason="panel replaced",
        actor=world.engineer,
        at=NOW,
    )


def planned(world: World) -> Any:
    entry = RepairEntry(
        aircraft=world.aircraft,
        place_entered=HERE,
        kind="external_doubler",
        description="external doubler",
        category="pending",
        approval_basis="repair_manual",
        approval=Data("repair_manual", "SRM 53-10-12", "14", "fig. 202"),
        released_on=None,
    )
    return repair_plan(entry=entry, actor=world.engineer, at=NOW)


def in_work(world: World) -> Lift:
    row = repair_start(repair=planned(world), actor=world.engineer, at=NOW)
    return lambda: repair_cancel(
        repair=row, reason="panel is replaced", on=FOUND, actor=world.engineer, at=NOW
    )


def no_data(world: World) -> Lift:
    row = legacy(world)
    return lambda: reclassified(world, row, stage_reached="3")


def other_serial(world: World) -> Lift:
    row = repaired(world, assessed(world))
    document = row.approval_document
    applicable(world, document, "1", "2")
    own = world.aircraft.serial_number
    return lambda: applicable(world, document, own, own)


def applicable(world: World, document: Any, first: str, last: str) -> None:
    document_applicability_record(
        document=document,
        page="p. i",
        first_serial=first,
        last_serial=last,
        actor=world.engineer,
        at=NOW,
    )


def stage_1(world: World) -> Lift:
    row = legacy(
        world,
        category="pending",
        stage_reached="none",
        criticality="fatigue_critical",
    )
    return lambda: reclassified(world, row, "b", stage_reached="1")


def differs(world: World) -> Lift:
    row = repaired(world, assessed(world))
    wanted = create(
        RepairRequired(
            repair=row,
            number=1,
            material_entered="2024-T3 clad",
            thickness_mm=1.6,
            difference="0.050 in fitted, 0.063 in required",
        )
    )
    return lambda: change(
        wanted, answer="ARD-RDA-0102 allows it", answered_by_id=world.approver.pk
    )


def inspection_missing(world: World) -> Lift:
    row = repaired(world, assessed(world))
    change(row, inspection_required=True)
    return lambda: change(row, inspected_by_id=world.approver.pk)


def inspection_rejected(world: World) -> Lift:
    row = repair_start(repair=planned(world), actor=world.engineer, at=NOW)
    authorise(world.approver, world.operator, "inspect")
    judge = {"repair": row, "on": FOUND, "proof": program(world.approver),
             "actor": world.engineer, "at": NOW}  # fmt: skip
    no = repair_inspect(accepted=False, statement="edge distance too small", **judge)
    return lambda: repair_inspect(
        accepted=True, statement="reworked, measured again", answers=no, **judge
    )


def category_c(world: World) -> Lift:
    """To be replaced by 10,081 FC; 10,084 are flown."""
    row = repaired(
        world,
        assessed(world),
        category="c",
        released_on=FOUND,
        replacement_limit=Counters(cycles=10_081),
    )
    fly(world)
    return lambda: removed(world, row)


def stage(world: World) -> Lift:
    """No policy says how long stage 2 may take: it cannot be computed, so it is due."""
    row = repaired(
        world,
        assessed(world),
        category="pending",
        released_on=FOUND,
        approval_basis="design_approval",
        approval=Data("design_approval", "ARD-RDA-0077", "A", "p. 2"),
        stage_reached="1",
    )
    return lambda: removed(world, row)


# --- requirements, parts, the aircraft ----------------------------------------


def document(world: World, kind: str, reference: str) -> Document:
    with Writing(actor=None, action="document_record", at=NOW) as w:
        return document_get_or_create(
            w, operator=world.operator, kind=kind, reference=reference
        )


def inspected(world: World, entered: str, phase: str = "threshold") -> Any:
    base = {"base": "new"} if phase == "threshold" else {}
    first = LimitEntry("threshold", "20,000 FC", base="new")
    limits = (LimitEntry(phase, entered, **base),)
    return RequirementDraft(
        operator=world.operator,
        title="Look at the lug",
        requirement_class="programme",
        area="FR 31",
        criteria="no crack",
        method="detailed_visual",
        effective_on=BEGAN,
        limits=limits if phase == "threshold" else (first, *limits),
        aircraft=(world.aircraft,),
    )


def raised(world: World, entered: str, **more: Any) -> Any:
    columns = {"source_document": document(world, "programme", "AMP-1")} | more
    draft = replace(inspected(world, entered), **columns)
    return requirement_raise(draft=draft, actor=world.engineer, at=NOW)


def overdue(world: World) -> Lift:
    """Due at 10,080 FC, which are flown: no further flight fits."""
    subject = raised(world, "10,080 FC").subjects.get()
    return lambda: accomplishment_record(
        actor=None,
        at=NOW,
        today=TODAY,
        subject=subject,
        done_on=FOUND,
        counters=AT,
        result="no_finding",
        proof=program(world.certifier),
    )


def unaccounted(world: World) -> Lift:
    """A requirement of the whole fleet that names the sister aircraft only."""
    other = aircraft_make(world.operator, world.variant, "Q7-AAB")
    row = raised(world, "30,000 FC", aircraft=(other,))
    return lambda: subject_add(
        actor=world.engineer,
        at=NOW,
        requirement=row,
        aircraft=world.aircraft,
        on=FOUND,
        applies=False,
        reason="modification 12 embodied at build",
    )


def validity(world: World) -> Lift:
    change(world.aircraft, validity_cycles=10_080, validity_source="ALS 9-10")
    return lambda: change(world.aircraft, validity_cycles=60_000)


def life(world: World) -> Lift:
    """A life of 80 FC, installed new 80 FC ago: used up."""
    kind = part_number_record(
        actor=None, at=NOW, operator=world.operator, number="ARD-FIT-9", title="Lug"
    )
    life_limit_key(
        actor=world.engineer,
        at=NOW,
        part_number=kind,
        entered="80 FC",
        base="birth",
        document=document(world, "limitations", "ALS-4"),
        page="4-1",
        effective_from=BEGAN,
    )
    part = part_record(
        actor=None,
        at=NOW,
        part_number=kind,
        serial="S1",
        manufactured_on=BEGAN,
        release_reference="certificate 1",
    )
    model = world.variant.aircraft_type
    base, _ = Configuration.objects.get_or_create(
        aircraft_type=model, code="base", defaults={"name": "base"}
    )
    part_install(
        actor=None,
        at=NOW,
        part=part,
        aircraft=world.aircraft,
        position="left main gear",
        configuration=base,
        on=dt.date(2024, 12, 1),
        counters=Counters(600_000, 10_000, 10_000),
    )
    return lambda: part_remove(
        actor=None,
        at=NOW,
        part=part,
        on=JUDGED_ON,
        counters=AT,
        reason="life used up",
        state=PartState.EXPIRED,
    )


def phase(world: World) -> Lift:
    event = struck(world)
    step = create(EventPhase(event=event, number=1, title="entry and exit points"))
    return lambda: change(step, done_on=FOUND, done_by_id=world.certifier.pk)


def event(world: World) -> Lift:
    row = struck(world)
    return lambda: event_close(
        event=row, reason="inspected, nothing found", actor=world.engineer, at=NOW
    )


def struck(world: World) -> Any:
    return event_record(
        aircraft=world.aircraft,
        kind="lightning",
        happened_on=FOUND,
        counters=AT,
        description="at the radome",
        actor=world.engineer,
        at=NOW,
    )


def engineering(world: World) -> Lift:
    """Found, not recorded; no policy says how long the answer may take: due now."""
    survey = survey_open(
        entry=SurveyEntry(world.aircraft, "whole aircraft", FOUND, world.assessor),
        today=TODAY,
        actor=world.engineer,
        at=NOW,
    )
    (item,) = survey_item_record(
        survey=survey,
        lines=[SheetLine("STA 500, S-4R", "damage", "dent")],
        actor=world.engineer,
        at=NOW,
    )
    survey_compare(survey=survey, actor=world.engineer, at=NOW)
    return lambda: survey_item_answer(
        item=item,
        answer="paint only",
        person=world.assessor,
        on=JUDGED_ON,
        actor=world.engineer,
        at=NOW,
    )


CAUSES: dict[str, Callable[[World], Lift]] = {
    "validity": validity,
    "to_rectify": to_rectify,
    "crack": crack,
    "to_be_placed": to_be_placed,
    "not_assessed": not_assessed,
    "not_decided": not_decided,
    "questions": questions,
    "deferral": deferral,
    "deferral_unlimited": deferral_unlimited,
    "rectified": rectified_open,
    "in_work": in_work,
    "no_data": no_data,
    "other_serial": other_serial,
    "stage_1": stage_1,
    "differs": differs,
    "inspection_missing": inspection_missing,
    "inspection_rejected": inspection_rejected,
    "category_c": category_c,
    "stage": stage,
    "overdue": overdue,
    "unaccounted": unaccounted,
    "life": life,
    "phase": phase,
    "event": event,
    "engineering": engineering,
}
