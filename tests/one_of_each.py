"""A small operator with one of each record, and readers who may not see them."""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass
from io import BytesIO
from typing import Any

from django.core.files.uploadedfile import SimpleUploadedFile
from PIL import Image

from fleet.due import Counters
from fleet.models import (
    AdoptedValue,
    AircraftPeriod,
    Attachment,
    Document,
    LifeLimit,
    Membership,
    Operator,
    Role,
    SafeLifePart,
    Spectrum,
    User,
)
from fleet.services.adopted import value_adopt
from fleet.services.documents import attachment_store, document_get_or_create
from fleet.services.history import Writing
from fleet.services.materials import demo_values_load
from fleet.services.part_records import (
    life_limit_key,
    part_number_record,
    part_record,
)
from repairs.models import (
    Accomplishment,
    Disposition,
    Evaluation,
    Finding,
    FindingQuestion,
    InspectionRequirement,
    OccurrenceReport,
    Photograph,
    Recalculation,
    Repair,
    RequirementSubject,
    StatedInput,
    Substantiation,
    Survey,
    SurveyItem,
)
from repairs.services.accomplishments import accomplishment_record
from repairs.services.disposition_entry import DispositionEntry
from repairs.services.dispositions import disposition_decide
from repairs.services.evaluation_gathered import Choice
from repairs.services.evaluation_prepare import default_use
from repairs.services.evaluations import evaluation_make
from repairs.services.inspections import requirement_raise
from repairs.services.recalculations import recalculation_start
from repairs.services.repair_entry import Data, RepairEntry, Step
from repairs.services.repairs import repair_plan, repair_record
from repairs.services.requirement_draft import LimitEntry, RequirementDraft
from repairs.services.spectra import spectrum_record
from repairs.services.stated import Document as FromPage
from repairs.services.stated import input_state
from repairs.services.survey_entry import SurveyEntry
from repairs.services.surveys import survey_item_record, survey_open
from repairs.sheet_lines import SheetLine
from tests.factories import (
    BEGAN,
    FIXTURES,
    NOW,
    TODAY,
    operator_make,
    program,
    user_make,
)
from tests.folder_rows import folders_make
from tests.record_rows import (
    CRACK,
    FIRST,
    FOUND,
    MANUAL,
    World,
    assessed,
    found,
    world_make,
)

AT = Counters(604_000, 10_080, 10_080)
RELEASED = FOUND + dt.timedelta(days=5)


@dataclass(frozen=True)
class OneOfEach:
    """Keys of the records, by the name of what they are."""

    world: World
    outsiders: dict[str, User]
    former: dict[str, User]
    former_finding: Finding
    finding: Finding
    question: FindingQuestion
    crack: Finding
    evaluation: Evaluation
    recalculation: Recalculation
    corroded: Finding
    report: OccurrenceReport
    disposition: Disposition
    repair: Repair
    planned: Repair
    document: Document
    requirement: InspectionRequirement
    subject: RequirementSubject
    accomplishment: Accomplishment
    survey: Survey
    survey_item: SurveyItem
    part: SafeLifePart
    life_limit: LifeLimit
    attachment: Attachment
    membership: Membership
    adopted: AdoptedValue
    spectrum: Spectrum
    folder: Substantiation
    stated: StatedInput


def one_of_each_make() -> OneOfEach:
    world = world_make()
    former = operator_make("FRM", "Formerly Air")
    finding, decided = found(world), assessed(world, place_entered="STA 500, S-3L")
    crack = found(
        world,
        damage_type="crack",
        typed=CRACK,
        element="skin",
        place_entered="STA 630, 5 in below S-8R",
    )
    requirement, part = _requirement(world), _part(world)
    return OneOfEach(
        world=world,
        outsiders=_members(world.outsider.memberships.get().operator, "outsider"),
        former=_members(former, "former"),
        former_finding=_earlier(world, former),
        finding=finding,
        question=_question(finding),
        crack=crack,
        corroded=found(world, damage_type="corrosion", typed=()),
        report=crack.reports.get(),
        evaluation=_evaluation(world, crack),
        recalculation=_recalculation(world),
        disposition=_disposition(world, decided),
        repair=_repair(world),
        planned=_planned(world),
        document=_document(world, "letter", "ARD-L-0088"),
        requirement=requirement,
        subject=requirement.subjects.get(),
        accomplishment=_accomplishment(requirement),
        **_survey(world),
        part=part,
        life_limit=part.part_number.life_limits.get(),
        attachment=_photograph(world, finding),
        membership=world.users["recorder"].memberships.get(),
        adopted=_adopted(world),
        spectrum=_spectrum(world),
        folder=_folder(world, finding),
        stated=_stated(world, crack),
    )


def _members(operator: Operator, prefix: str) -> dict[str, User]:
    return {role: user_make(operator, role, f"{prefix}-{role}") for role in Role.values}


def _earlier(world: World, former: Operator) -> Finding:
    """The aircraft was another operator's before, and was damaged there."""
    columns: dict[str, Any] = {
        "aircraft": world.aircraft,
        "operator": former,
    }
    with Writing(actor=None, action="period_record", at=NOW) as w:
        w.create(
            AircraftPeriod(
                **columns,
                registration="Q7-OLD",
                regime="EASA",
                from_on=BEGAN,
                to_on=FIRST - dt.timedelta(days=1),
            )
        )
        return w.create(
            Finding(
                **columns,
                number="F-9001",
                damage_type="dent",
                state="reported",
                found_on=BEGAN,
                place_entered="behind the wing",
            )
        )


def _question(finding: Finding) -> FindingQuestion:
    with Writing(actor=None, action="question_ask", at=NOW) as w:
        return w.create(
            FindingQuestion(finding=finding, code="tested", asked="Is it a dent?")
        )


def _evaluation(world: World, crack: Finding) -> Evaluation:
    demo_values_load(
        path=FIXTURES / "materials.toml",
        operator=world.operator,
        person=world.assessor,
        second_person=world.approver,
        on=TODAY,
        actor=world.engineer,
        at=NOW,
    )
    return evaluation_make(
        subject=crack,
        choice=Choice(default_use(crack)),
        as_of=TODAY,
        actor=world.engineer,
        at=NOW,
    )


def _recalculation(world: World) -> Recalculation:
    return recalculation_start(
        operator=world.operator,
        stale_only=False,
        as_of=TODAY,
        actor=world.engineer,
        at=NOW,
    )


def _disposition(world: World, finding: Finding) -> Disposition:
    return disposition_decide(
        entry=DispositionEntry(
            aircraft=world.aircraft,
            findings=(finding,),
            kind="accept",
            basis=MANUAL,
            reason="Within the manual's limits.",
            decided_on=FOUND,
            at=AT,
        ),
        proof=program(world.assessor),
        actor=world.engineer,
        at=NOW,
    )


def _repair(world: World) -> Repair:
    return repair_record(
        entry=RepairEntry(
            aircraft=world.aircraft,
            place_entered="STA 640 to 660, S-6R to S-8R",
            kind="external_doubler",
            description="external doubler over the dent",
            category="a",
            approval_basis="repair_manual",
            approval=Data("repair_manual", "SRM 53-10-12", "14", "fig. 202"),
            released_on=RELEASED,
            at=AT,
            performed_by=world.assessor,
            released_by=world.certifier,
            release_reference="CRS-77",
        ),
        proof=program(world.certifier),
        actor=world.engineer,
        at=NOW,
    )


def _planned(world: World) -> Repair:
    return repair_plan(
        entry=RepairEntry(
            aircraft=world.aircraft,
            place_entered="STA 500 to 520, S-3L to S-4L",
            kind="external_doubler",
            description="external doubler, to be done",
            category="pending",
            approval_basis="unknown",
            released_on=None,
            steps=(Step("drill and fit"), Step("seal")),
        ),
        actor=world.engineer,
        at=NOW,
    )


def _document(world: World, kind: str, reference: str) -> Document:
    with Writing(actor=None, action="document_record", at=NOW) as w:
        return document_get_or_create(
            w, operator=world.operator, kind=kind, reference=reference
        )


def _requirement(world: World) -> InspectionRequirement:
    return requirement_raise(
        draft=RequirementDraft(
            operator=world.operator,
            title="Look at the keel",
            requirement_class="programme",
            area="keel, FR 20 to 30",
            criteria="no crack",
            method="detailed_visual",
            effective_on=FIRST,
            limits=(LimitEntry("threshold", "10,100 FC", base="new"),),
            aircraft=(world.aircraft,),
            source_document=_document(world, "programme", "AMP-1"),
        ),
        actor=world.engineer,
        at=NOW,
    )


def _accomplishment(requirement: InspectionRequirement) -> Accomplishment:
    return accomplishment_record(
        actor=None,
        at=NOW,
        today=TODAY,
        subject=requirement.subjects.get(),
        done_on=FOUND,
        counters=AT,
        result="no_finding",
        proof=program(),
    ).row


def _survey(world: World) -> dict[str, Any]:
    survey = survey_open(
        entry=SurveyEntry(world.aircraft, "whole aircraft", FOUND, world.assessor),
        today=TODAY,
        actor=world.engineer,
        at=NOW,
    )
    line = SheetLine("STA 641, 4 in below S-7R", "damage", "dent")
    (item,) = survey_item_record(
        survey=survey, lines=[line], actor=world.engineer, at=NOW
    )
    return {"survey": survey, "survey_item": item}


def _part(world: World) -> SafeLifePart:
    kind = part_number_record(
        actor=None,
        at=NOW,
        operator=world.operator,
        number="ARD-FIT-1",
        title="Main fitting",
    )
    life_limit_key(
        actor=world.engineer,
        at=NOW,
        part_number=kind,
        entered="30,000 FC",
        base="birth",
        document=_document(world, "limitations", "ALS-4"),
        page="4-1",
        effective_from=BEGAN,
    )
    return part_record(
        actor=None,
        at=NOW,
        part_number=kind,
        serial="S0001",
        manufactured_on=BEGAN,
        release_reference="release certificate 1",
    )


def _stated(world: World, crack: Finding) -> StatedInput:
    return input_state(
        subject=crack,
        name="hole_pitch",
        entered="0.8 in ± 0.02 in",
        document=FromPage("ARD-STR-53-17", "sheet 2"),
        actor=world.engineer,
        at=NOW,
        on=TODAY,
    )


def _spectrum(world: World) -> Spectrum:
    data = {"kind": "cycle", "cycle_max_mpa": 90.0, "cycle_ratio": -0.2}
    return spectrum_record(
        name="floor beam", data=data, source="report 12", actor=world.engineer, at=NOW
    )


def _adopted(world: World) -> AdoptedValue:
    return value_adopt(
        operator=world.operator,
        quantity="residual_pressure_factor",
        value=1.15,
        unit="-",
        document="14 CFR 25.571(b)",
        page="(b)(5)(ii)",
        revision="",
        actor=world.engineer,
        at=NOW,
        on=TODAY,
    )


def _folder(world: World, finding: Finding) -> Substantiation:
    folders = folders_make(world)
    folder = folders.draft(findings=[finding])
    folders.case(folder)
    return folder


def _photograph(world: World, finding: Finding) -> Attachment:
    drawn = BytesIO()
    Image.new("RGB", (32, 24), "white").save(drawn, "PNG")
    upload = SimpleUploadedFile("dent.png", drawn.getvalue())
    with Writing(
        actor=world.engineer, action="photograph_add", at=NOW, operator=world.operator
    ) as w:
        row = attachment_store(w, operator=world.operator, upload=upload)
        w.create(
            Photograph(attachment=row, finding=finding, role="close", caption="dent")
        )
    return row
