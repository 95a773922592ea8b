"""Two substantiations of the demo: one approved to stage 1, one still a draft."""

from __future__ import annotations

import datetime as dt
from collections.abc import Callable
from typing import Any

from fleet.canonical import digest
from fleet.services.signing import Proof
from repairs.models import Finding, FindingState, Meaning, Repair, Substantiation
from repairs.selectors.signatures import content_of
from repairs.selectors.substantiation_needs import TOUCHES
from repairs.services.approvals import Signed, approval_sign
from repairs.services.substantiation_entry import (
    CaseEntry,
    DocumentEntry,
    FolderEntry,
)
from repairs.services.substantiation_rows import (
    substantiation_case_add,
    substantiation_document_add,
    substantiation_effects_answer,
    substantiation_neighbour_review,
)
from repairs.services.substantiations import substantiation_draft
from reports.demo.fleet import DEMO_TODAY
from reports.demo.load_base import Loaded
from reports.demo.load_evaluations import EVALUATED_AT
from reports.demo.records import Scenario

APPROVED_ON = dt.date(2024, 1, 26)
SIGNED_BY = ((Meaning.PREPARED, "engineer"), (Meaning.CHECKED, "signatory"),
             (Meaning.STAGE_1, "signatory"))  # fmt: skip
"""A minor one: who checked it may approve it."""


def folders_load(
    loaded: Loaded, scenario: Scenario, say: Callable[[str], None]
) -> None:
    """The folder behind the clock at eleven months; a draft for a deferred finding."""
    repair = loaded.rows[scenario.planted["stage_clock_eleven_months"][0]]
    folder = _stage_1(loaded, repair)
    for meaning, key in SIGNED_BY:
        _sign(loaded, folder, meaning, key)
    deferred = Finding.objects.filter(
        operator=loaded.operator, state=FindingState.DEFERRED, section__isnull=False
    )
    _draft(loaded, deferred.earliest("pk"))
    say("two substantiations")


def _by(loaded: Loaded) -> dict[str, Any]:
    return {"actor": loaded.users["engineer"], "at": EVALUATED_AT}


def _stage_1(loaded: Loaded, repair: Repair) -> Substantiation:
    """Everything that stage 1 needs, as far as the repair's papers say it."""
    by = _by(loaded)
    data = repair.approval_document
    assert data is not None
    folder = substantiation_draft(
        entry=FolderEntry(
            title=f"External doubler at {repair.place_text}",
            answer="permanent",
            prepared_by=loaded.people["engineer"],
            scale="minor",
            scale_reason="longer than the published doubler, otherwise as published",
            category="pending",
            category_reason="damage-tolerance data awaited",
            data_due_on=dt.date(2025, 2, 1),
        ),
        aircraft=repair.aircraft,
        findings=[],
        repair=repair,
        **by,
    )
    for row in folder.neighbours.all():
        substantiation_neighbour_review(
            neighbour=row,
            answer="does_not_interact",
            reason="the doubler ends more than four fastener pitches from it",
            person=loaded.people["engineer"],
            on=APPROVED_ON,
            **by,
        )
    substantiation_case_add(
        substantiation=folder,
        case=CaseEntry(
            kind="static_ultimate",
            requirement="25.305(b), 25.365(d)",
            case="1.5 x 1.33 x relief-valve differential",
            method="the doubler restores the net section of the skin it replaces",
            allowable_source="material data 2024-T3 clad sheet",
            margin=0.08,
        ),
        **by,
    )
    effects = dict.fromkeys(TOUCHES, ("none", ""))
    effects["weight_and_balance"] = ("affected", "0.6 kg at the doubler")
    substantiation_effects_answer(substantiation=folder, answers=effects, **by)
    substantiation_document_add(
        substantiation=folder,
        entry=DocumentEntry(
            role="approval_data",
            kind=data.kind,
            reference=data.reference,
            revision=data.revision,
            page=repair.approval_page,
        ),
        **by,
    )
    return folder


def _draft(loaded: Loaded, finding: Finding) -> None:
    where = finding.place_text
    substantiation_draft(
        entry=FolderEntry(
            title=f"{finding.get_damage_type_display().capitalize()} at {where}",
            answer="accept",
            prepared_by=loaded.people["engineer"],
        ),
        aircraft=finding.aircraft,
        findings=[finding],
        **_by(loaded),
    )


def _sign(loaded: Loaded, folder: Substantiation, meaning: Meaning, key: str) -> None:
    """As the paper folder was signed; entered by the program, without re-entry."""
    row = Substantiation.objects.get(pk=folder.pk)
    letter = Signed(
        kind="design_approval",
        number=str(row.documents.get().document),
        issuer="Tarrant Structures",
        date=APPROVED_ON,
    )
    approval_sign(
        subject=row,
        meaning=meaning,
        proof=Proof.by_program(loaded.people[key]),
        shown_digest=digest(content_of(row)),
        on=DEMO_TODAY,
        actor=loaded.users[key],
        at=EVALUATED_AT,
        document=letter if meaning == Meaning.STAGE_1 else None,
    )
