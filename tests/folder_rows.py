"""A substantiation, ready to be signed by three people; each test alters what it needs.

Reach 20 in and twelve months are the operator's policies here, with their sources.
"""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass, replace
from typing import Any

from fleet.canonical import digest
from fleet.due import Counters
from fleet.models import Person
from fleet.services.people import policy_set
from repairs.models import Approval, Evaluation, Finding, Repair, Substantiation
from repairs.selectors.signatures import content_of
from repairs.selectors.substantiation_needs import TOUCHES
from repairs.services.approvals import Signed, approval_sign
from repairs.services.evaluation_gathered import Choice
from repairs.services.evaluation_prepare import default_use
from repairs.services.evaluations import evaluation_make
from repairs.services.substantiation_entry import (
    CaseEntry,
    DocumentEntry,
    FolderEntry,
    entry_of,
)
from repairs.services.substantiation_rows import (
    substantiation_case_add,
    substantiation_document_add,
    substantiation_effects_answer,
    substantiation_neighbour_review,
)
from repairs.services.substantiations import (
    substantiation_draft,
    substantiation_edit,
    substantiation_revise,
)
from tests.factories import NOW, TODAY, authorise, program, user_make
from tests.record_rows import World, assessed

INSPECTIONS = (
    "method: high-frequency eddy current\nprocedure: NDT 53-10-01\n"
    "criteria: no crack\nrepeat: 5,000 FC"
)
LETTER = Signed(
    "design_approval", "ARD-RDA-0077", "Ardent Structures", "A", dt.date(2024, 12, 22)
)


@dataclass(frozen=True)
class Folders:
    """The world with a checker beside its assessor and its approver."""

    world: World
    checker: Person

    def draft(
        self,
        *,
        findings: list[Finding] | None = None,
        repair: Repair | None = None,
        **changes: Any,
    ) -> Substantiation:
        """A bare draft: columns and the neighbours found, nothing reviewed."""
        said: dict[str, Any] = {
            "title": "External doubler at STA 650, S-7R",
            "answer": "permanent",
            "prepared_by": self.world.assessor,
            "scale": "major",
            "scale_reason": "alters a principal structural element",
            "category": "b",
            "data_due_on": dt.date(2026, 1, 31),
        }
        return substantiation_draft(
            entry=FolderEntry(**(said | changes)),
            aircraft=self.world.aircraft,
            findings=[assessed(self.world)] if findings is None else findings,
            repair=repair,
            actor=self.world.users["recorder"],
            at=NOW,
        )

    def ready(self, **changes: Any) -> Substantiation:
        """A draft with everything that stage 1 needs."""
        return self.fill(self.draft(**changes))

    def revise(self, folder: Substantiation, **changes: Any) -> Substantiation:
        """A new revision with other columns, its neighbours reviewed."""
        by: dict[str, Any] = {"actor": self.world.users["recorder"], "at": NOW}
        later = substantiation_revise(
            substantiation=folder,
            reason="the next stage",
            prepared_by=self.world.assessor,
            **by,
        )
        entry = replace(entry_of(later), **changes)
        substantiation_edit(substantiation=later, entry=entry, **by)
        self.review(later)
        return later

    def fill(self, folder: Substantiation) -> Substantiation:
        self.review(folder)
        self.case(folder)
        self.effects(folder)
        self.document(folder)
        return folder

    def review(self, folder: Substantiation) -> None:
        for row in folder.neighbours.filter(answer="", withdrawn=False):
            substantiation_neighbour_review(
                neighbour=row,
                answer="does_not_interact",
                reason="two bays of sound skin between",
                person=self.world.assessor,
                on=TODAY,
                actor=self.world.engineer,
                at=NOW,
            )

    def case(self, folder: Substantiation, **changes: Any) -> None:
        said: dict[str, Any] = {
            "kind": "static_ultimate",
            "requirement": "25.305(b)",
            "case": "1.33 x relief-valve differential x 1.5",
            "method": "net section of the doubler against the skin replaced",
            "allowable_source": "material data 2024-T3 clad sheet, A basis",
            "margin": 0.21,
        }
        substantiation_case_add(
            substantiation=folder,
            case=CaseEntry(**(said | changes)),
            actor=self.world.engineer,
            at=NOW,
        )

    def fatigue(self, folder: Substantiation, **changes: Any) -> None:
        """A fatigue case shown in a document."""
        self.case(
            folder,
            **{
                "kind": "fatigue",
                "requirement": "25.571(a)(3)",
                "case": "pressure once a flight",
                "margin": None,
                **changes,
            },
        )
        self.document(folder, role="calculation", reference="ARD-DT-0077")

    def evaluation(self, finding: Finding) -> Evaluation:
        """A calculation of the finding; unchecked, as it is made."""
        return evaluation_make(
            subject=finding,
            choice=Choice(default_use(finding)),
            as_of=TODAY,
            actor=self.world.engineer,
            at=NOW,
        )

    def effects(self, folder: Substantiation) -> None:
        substantiation_effects_answer(
            substantiation=folder,
            answers=dict.fromkeys(TOUCHES, ("none", "")),
            actor=self.world.engineer,
            at=NOW,
        )

    def document(self, folder: Substantiation, **changes: Any) -> None:
        said = {
            "role": "approval_data",
            "kind": "design_approval",
            "reference": "ARD-RDA-0077",
            "revision": "A",
            "page": "p. 2",
        }
        substantiation_document_add(
            substantiation=folder,
            entry=DocumentEntry(**(said | changes)),
            actor=self.world.engineer,
            at=NOW,
        )

    def sign(
        self,
        folder: Substantiation,
        meaning: str,
        person: Person | None = None,
        *,
        on: dt.date = TODAY,
        statement: str = "as shown",
        document: Signed | None = LETTER,
    ) -> Approval:
        """Signed by whoever usually does."""
        usual = {"prepared": self.world.assessor, "checked": self.checker}
        folder = Substantiation.objects.get(pk=folder.pk)
        return approval_sign(
            subject=folder,
            meaning=meaning,
            proof=program(person or usual.get(meaning, self.world.approver)),
            shown_digest=digest(content_of(folder)),
            on=on,
            actor=self.world.users["signatory"],
            at=NOW,
            statement=statement,
            document=document,
        )

    def approve(
        self, folder: Substantiation, *meanings: str, on: dt.date = TODAY
    ) -> Substantiation:
        """Prepared, checked, and signed as the meanings named."""
        for meaning in ("prepared", "checked", *meanings):
            self.sign(folder, meaning, on=on)
        return folder


def folders_make(world: World) -> Folders:
    """Policies of reach and months, and a person who may check."""
    for key, value, unit, source in (
        ("review_reach_mm", 508, "mm", "engineering procedure EP-07"),
        ("stage_2_months", 12, "months", "AMC 20-20A appendix 3 annex 1"),
    ):
        policy_set(
            key=key,
            value=value,
            unit=unit,
            source=source,
            grade="quoted",
            operator=world.operator,
            effective_from=dt.date(2020, 1, 1),
            at=NOW,
        )
    checker = user_make(world.operator, "engineer", "checker").person
    assert checker is not None
    authorise(checker, world.operator, "check")
    return Folders(world, checker)


AT = Counters(604_000, 10_080, 10_080)
