"""The rows of a draft: findings, neighbours, load cases, effects, documents.

A row that no longer holds is withdrawn and stays in the record; a corrected one is
withdrawn and written anew.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Mapping
from typing import Any

from django.core.exceptions import ValidationError
from django.core.files.uploadedfile import UploadedFile
from django.db.models import Max, QuerySet

from fleet.models import Attachment, Person, User
from fleet.services.documents import attachment_store, document_get_or_create
from repairs.models import (
    Evaluation,
    Finding,
    Substantiation,
    SubstantiationCase,
    SubstantiationDocument,
    SubstantiationEffect,
    SubstantiationFinding,
    SubstantiationNeighbour,
)
from repairs.selectors.review_reach import Within
from repairs.services.substantiation_draft import draft_of, neighbours_write
from repairs.services.substantiation_entry import (
    CaseEntry,
    DocumentEntry,
    finding_problems,
)
from repairs.services.substantiations import writing_on

Withdrawable = SubstantiationFinding | SubstantiationCase | SubstantiationDocument

WITHDRAWN_ALREADY = "It is withdrawn already."
WHY = "Say why, in a few words."
SAY_WHAT = "Say what is affected, and how."
OTHER_EVALUATION = (
    "{number} is of {subject}, which this folder neither covers nor is used by."
)
COVERED_ALREADY = "{finding} is covered already."


def substantiation_finding_add(
    *,
    substantiation: Substantiation,
    finding: Finding,
    actor: User | None,
    at: dt.datetime,
) -> SubstantiationFinding:
    """One more finding that the folder covers, and its neighbours to be reviewed."""
    action = "substantiation_finding_add"
    with writing_on(substantiation, action, actor, at) as w:
        row = draft_of(substantiation)
        if problems := finding_problems(row.aircraft, finding):
            raise ValidationError({"finding": problems})
        held = row.finding_rows.filter(finding=finding).first()
        if held is not None and not held.withdrawn:
            raise ValidationError({"finding": COVERED_ALREADY.format(finding=finding)})
        if held is None:
            held = w.create(SubstantiationFinding(substantiation=row, finding=finding))
        else:
            w.change(held, withdrawn=False)
        neighbours_write(w, row)
    return held


def substantiation_case_add(
    *,
    substantiation: Substantiation,
    case: CaseEntry,
    actor: User | None,
    at: dt.datetime,
) -> SubstantiationCase:
    """A load case, with the margin or how else it was shown."""
    action = "substantiation_case_add"
    with writing_on(substantiation, action, actor, at) as w:
        row = draft_of(substantiation)
        if case.evaluation is not None:
            _evaluation_fits(row, case.evaluation)
        last = row.cases.aggregate(last=Max("number"))["last"]
        return w.create(
            SubstantiationCase(
                substantiation=row,
                number=(last or 0) + 1,
                kind=case.kind,
                requirement=case.requirement,
                case=case.case,
                method=case.method,
                allowable_source=case.allowable_source,
                margin=case.margin,
                evaluation=case.evaluation,
            )
        )


def _evaluation_fits(row: Substantiation, evaluation: Evaluation) -> None:
    subject = evaluation.finding or evaluation.repair
    ours = row.finding_rows.filter(finding=evaluation.finding_id, withdrawn=False)
    used = evaluation.repair is not None and (
        evaluation.repair.substantiation is not None
        and evaluation.repair.substantiation.number == row.number
    )
    if not (used or ours.exists()):
        problem = OTHER_EVALUATION.format(number=evaluation, subject=subject)
        raise ValidationError({"evaluation": problem})


def substantiation_effects_answer(
    *,
    substantiation: Substantiation,
    answers: Mapping[str, tuple[str, str]],
    actor: User | None,
    at: dt.datetime,
) -> list[SubstantiationEffect]:
    """What else it touches, each answered; what was said before is altered."""
    action = "substantiation_effects_answer"
    unsaid = {
        f"{touches}_note": SAY_WHAT
        for touches, (answer, note) in answers.items()
        if answer == "affected" and not note.strip()
    }
    if unsaid:
        raise ValidationError(unsaid)
    with writing_on(substantiation, action, actor, at) as w:
        row = draft_of(substantiation)
        held = {one.touches: one for one in row.effects.all()}
        for touches, (answer, note) in answers.items():
            if touches in held:
                w.change(held[touches], answer=answer, note=note.strip())
            else:
                held[touches] = w.create(
                    SubstantiationEffect(
                        substantiation=row,
                        touches=touches,
                        answer=answer,
                        note=note.strip(),
                    )
                )
    return list(held.values())


def substantiation_document_add(
    *,
    substantiation: Substantiation,
    entry: DocumentEntry,
    actor: User | None,
    at: dt.datetime,
    upload: UploadedFile | None = None,
) -> SubstantiationDocument:
    """A document that belongs to the folder, with its file if there is one."""
    action = "substantiation_document_add"
    with writing_on(substantiation, action, actor, at) as w:
        row = draft_of(substantiation)
        document = document_get_or_create(
            w,
            operator=row.operator,
            kind=entry.kind,
            reference=entry.reference,
            revision=entry.revision,
            title=entry.title,
        )
        attachment = None
        if upload is not None:
            attachment = attachment_store(
                w,
                operator=row.operator,
                upload=upload,
                kind=Attachment.Kind.REPORT,
                title=entry.title or entry.reference,
                page=entry.page,
                document=document,
            )
        return w.create(
            SubstantiationDocument(
                substantiation=row,
                role=entry.role,
                document=document,
                page=entry.page.strip(),
                attachment=attachment,
            )
        )


def substantiation_neighbours_find(
    *, substantiation: Substantiation, actor: User | None, at: dt.datetime
) -> list[Within]:
    """Look again for what is within reach; what is new is listed, and returned."""
    action = "substantiation_neighbours_find"
    with writing_on(substantiation, action, actor, at) as w:
        return neighbours_write(w, draft_of(substantiation))


def substantiation_neighbour_review(
    *,
    neighbour: SubstantiationNeighbour,
    answer: str,
    reason: str,
    person: Person,
    on: dt.date,
    actor: User | None,
    at: dt.datetime,
) -> SubstantiationNeighbour:
    """The answer for one neighbour: whether it interacts, why, who looked and when."""
    if not reason.strip():
        raise ValidationError({"reason": WHY})
    folder = neighbour.substantiation
    with writing_on(folder, "substantiation_neighbour_review", actor, at) as w:
        draft_of(folder)
        row = w.locked(folder.neighbours.all(), pk=neighbour.pk)
        if row.withdrawn:
            raise ValidationError(WITHDRAWN_ALREADY)
        w.change(
            row,
            answer=answer,
            reason=reason.strip(),
            reviewed_by_id=person.pk,
            reviewed_on=on,
        )
    return row


def substantiation_row_withdraw(
    *, row: Withdrawable, actor: User | None, at: dt.datetime
) -> Withdrawable:
    """The row holds no more; without a finding its neighbours are looked for anew."""
    folder = row.substantiation
    with writing_on(folder, "substantiation_row_withdraw", actor, at) as w:
        draft = draft_of(folder)
        rows: QuerySet[Any] = type(row).objects.all()
        held: Withdrawable = w.locked(rows, pk=row.pk)
        if held.withdrawn:
            raise ValidationError(WITHDRAWN_ALREADY)
        w.change(held, withdrawn=True)
        if isinstance(held, SubstantiationFinding):
            neighbours_write(w, draft)
    return held
