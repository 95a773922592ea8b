"""Signing a folder: who may, in which order, and what follows on the due list.

Two people at least: whoever prepared it neither checks nor approves it. Of a major one
the checker does not approve it either; of a minor one the checker may.
"""

from __future__ import annotations

import datetime as dt
from typing import TYPE_CHECKING

from django.core.exceptions import ValidationError

from fleet.models import Person
from fleet.services.history import Writing
from repairs.models import Approval, Meaning, Substantiation
from repairs.selectors.signatures import approvals_verified
from repairs.selectors.substantiation_needs import needs
from repairs.selectors.substantiation_stages import STAGE_OF, approvals_of_number
from repairs.services.reports import finding_questions_write
from repairs.services.stage_clocks import stage_clocks_follow
from repairs.services.substantiation_draft import held, latest_of

if TYPE_CHECKING:
    from repairs.services.approvals import Signed

MEANINGS = (
    Meaning.PREPARED,
    Meaning.CHECKED,
    Meaning.STAGE_1,
    Meaning.STAGE_2,
    Meaning.STAGE_3,
    Meaning.APPROVED,
    Meaning.REJECTED,
)
"""How a folder is signed, in order; approved is all stages at once."""

NOT_ITS_PREPARER = (
    "{folder} names {preparer} as the one who prepared it; {person} cannot sign for "
    "that. Edit the folder, or let {preparer} sign."
)
SIGNED_ALREADY = "{folder} is signed as {meaning} already, by {name}."
FIRST = "{folder} has not been signed as {before}; that comes before {meaning}."
WAS_REJECTED = "{folder} was rejected by {name}; revise it and sign the new revision."
NO_LONGER_AGREES = (
    "{folder} is not what {name} signed as {meaning}: {changed} changed after signing. "
    "Revise it, and let the new revision be signed."
)
OWN_WORK = "{person} prepared {folder}; {meaning} is by another person."
OWN_CHECK = (
    "{person} checked {folder}; a major one is approved by a third person. (Of a minor "
    "one the checker may approve.)"
)
APPROVED_STANDS = "{folder} is approved already; it is not rejected but revised."
SAY_WHY = "Say in the statement why it is rejected."
NAME_THE_APPROVAL = (
    "Name the approval document: its kind, number, issuer and date; missing: {missing}."
)


def substantiation_sign_check(
    substantiation: Substantiation,
    *,
    meaning: str,
    person: Person,
    on: dt.date,
    statement: str,
    document: Signed,
) -> None:
    """Hold the revision and refuse the signature with everything against it."""
    row = latest_of(substantiation)
    signed = {one.row.meaning: one.row for one in approvals_verified(row)}
    problems = _order_problems(row, meaning, signed)
    problems += [
        NO_LONGER_AGREES.format(
            folder=row,
            name=one.row.signer_name,
            meaning=one.row.get_meaning_display(),
            changed=one.changed_words,
        )
        for one in approvals_verified(row)
        if not one.agrees
    ]
    problems += _people_problems(row, meaning, person)
    if meaning == Meaning.REJECTED:
        problems += [] if statement.strip() else [SAY_WHY]
    else:
        problems += needs(row, meaning, day=on)
    if meaning in STAGE_OF:
        names = ("kind", "number", "issuer", "date")
        if missing := [name for name in names if not getattr(document, name)]:
            problems.append(NAME_THE_APPROVAL.format(missing=", ".join(missing)))
    if problems:
        raise ValidationError(problems)


def substantiation_signed(
    w: Writing, substantiation: Substantiation, *, meaning: str, on: dt.date
) -> None:
    """After the signature: an approved stage moves the clocks of the folder; a major
    one asks whether its findings are reportable."""
    if meaning in STAGE_OF:
        stage_clocks_follow(w, held(substantiation), on=on)
    if meaning == Meaning.PREPARED and substantiation.scale == "major":
        covered = substantiation.finding_rows.filter(withdrawn=False)
        for row in covered.select_related("finding__aircraft__operator"):
            finding_questions_write(w, row.finding)


def _order_problems(
    row: Substantiation, meaning: str, signed: dict[str, Approval]
) -> list[str]:
    words = Meaning(meaning).label
    if (by := signed.get(Meaning.REJECTED)) is not None:
        return [WAS_REJECTED.format(folder=row, name=by.signer_name)]
    if (by := signed.get(meaning)) is not None:
        name = by.signer_name
        return [SIGNED_ALREADY.format(folder=row, meaning=words, name=name)]
    if meaning == Meaning.REJECTED and not STAGE_OF.keys().isdisjoint(signed):
        return [APPROVED_STANDS.format(folder=row)]
    before = _before(meaning)
    if before is not None and before not in signed:
        told = {"before": before.label, "meaning": words}
        return [FIRST.format(folder=row, **told)]
    return []


def _before(meaning: str) -> Meaning | None:
    if meaning == Meaning.PREPARED:
        return None
    judged = (Meaning.CHECKED, Meaning.REJECTED)
    return Meaning.PREPARED if meaning in judged else Meaning.CHECKED


def _people_problems(row: Substantiation, meaning: str, person: Person) -> list[str]:
    told = {"folder": row, "person": person, "meaning": Meaning(meaning).label}
    if meaning == Meaning.PREPARED:
        if person.pk == row.prepared_by_id:
            return []
        return [NOT_ITS_PREPARER.format(preparer=row.prepared_by, **told)]
    if person.pk in _preparers(row, every_revision=meaning in STAGE_OF):
        return [OWN_WORK.format(**told)]
    checked = row.approvals.filter(meaning=Meaning.CHECKED, signer_person=person)
    if meaning in STAGE_OF and row.scale == "major" and checked.exists():
        return [OWN_CHECK.format(**told)]
    return []


def _preparers(row: Substantiation, *, every_revision: bool) -> set[int | None]:
    """Who prepared it; an approver judges what earlier revisions left in it too."""
    prepared = approvals_of_number(row).filter(meaning=Meaning.PREPARED)
    if not every_revision:
        prepared = prepared.filter(substantiation=row)
    typed = row.entered_by.person_id if row.entered_by else None
    signers = prepared.values_list("signer_person", flat=True)
    return {row.prepared_by_id, typed, *signers} - {None}
