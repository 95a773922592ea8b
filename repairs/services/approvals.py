"""Signatures: a named person, an authorisation, and the exact text that was signed.

`repairs.selectors.signatures` makes that text, and makes it again to verify.
"""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass, replace

from django.core.exceptions import ValidationError
from django.core.files.uploadedfile import UploadedFile

from fleet.canonical import digest
from fleet.models import (
    Aircraft,
    Attachment,
    AuthorisationScope,
    Operator,
    Person,
    User,
)
from fleet.services.aircraft import stream_of
from fleet.services.documents import attachment_store
from fleet.services.history import Writing
from fleet.services.signing import Proof
from repairs.models import (
    APPROVING,
    Accomplishment,
    Approval,
    Disposition,
    Evaluation,
    Finding,
    Meaning,
    Substantiation,
)
from repairs.selectors.signatures import (
    SUBJECT_COLUMN,
    Subject,
    content_of,
    signed_text,
)
from repairs.services.authority import authorised, operator_on
from repairs.services.substantiation_signing import (
    substantiation_sign_check,
    substantiation_signed,
)

SCOPES: dict[str, tuple[AuthorisationScope, ...]] = {
    Meaning.PREPARED: (AuthorisationScope.ASSESS, AuthorisationScope.CHECK,
                       AuthorisationScope.APPROVE),
    Meaning.CHECKED: (AuthorisationScope.CHECK, AuthorisationScope.APPROVE),
    Meaning.APPROVED: (AuthorisationScope.APPROVE,),
    Meaning.STAGE_1: (AuthorisationScope.APPROVE,),
    Meaning.STAGE_2: (AuthorisationScope.APPROVE,),
    Meaning.STAGE_3: (AuthorisationScope.APPROVE,),
    Meaning.REJECTED: (AuthorisationScope.CHECK, AuthorisationScope.APPROVE),
    Meaning.PERFORMED: (AuthorisationScope.INSPECT, AuthorisationScope.NDT,
                        AuthorisationScope.CERTIFY),
    Meaning.INSPECTED: (AuthorisationScope.INSPECT, AuthorisationScope.NDT),
    Meaning.RELEASED: (AuthorisationScope.CERTIFY,),
    Meaning.DEFERRED: (AuthorisationScope.CERTIFY,),
}  # fmt: skip
JUDGING = (Meaning.CHECKED, *APPROVING)
JUDGED_ELSEWHERE = (Finding, Accomplishment, Substantiation)
"""Not judged by a second signature, or by rules of their own."""

CHANGED_SINCE_SHOWN = (
    "{subject} has changed since the page was shown; read it again before signing."
)
BARRED = "{number} cannot be approved: {reason}."
BARRED_UNSAID = "it rests on values from memory"
NOT_A_RESULT = (
    "{number} has no result to approve ({outcome}); an approval is for a computed "
    "evaluation."
)
SUPERSEDED = "{number} was superseded by {by}; sign that one."
CHECK_FIRST = "{number} is approved after another person has checked it."
SAME_PERSON = (
    "{person} prepared, checked or approved this already; {meaning} is by another "
    "person."
)
NOT_SIGNABLE = "“{meaning}” is not signed on this page."
OTHER_ACTOR = "A proof holds for the login that gave it, and for no other."


@dataclass(frozen=True, slots=True)
class Signed:
    """The document an approval was given by, when it is more than a signature here."""

    kind: str = ""
    number: str = ""
    issuer: str = ""
    revision: str = ""
    date: dt.date | None = None
    attachment: Attachment | None = None


def approval_sign(
    *,
    subject: Subject,
    meaning: str,
    proof: Proof,
    shown_digest: str,
    on: dt.date,
    actor: User | None,
    at: dt.datetime,
    statement: str = "",
    document: Signed | None = None,
    upload: UploadedFile | None = None,
) -> Approval:
    """Sign the text whose digest was shown; `upload` is the approval document's file.

    Refused when the record changed since, when the person lacks the authorisation that
    day, when the same person would judge own work, or when an evaluation is barred.
    """
    with Writing(
        actor=actor,
        action="approval_sign",
        at=at,
        operator=aircraft_of(subject).operator,
        stream=stream_of(aircraft_of(subject)),
        reason=statement,
        origin=proof.how,
    ) as w:
        rows = type(subject).objects.select_for_update(of=("self",))
        held: Subject = rows.get(pk=subject.pk)
        if digest(content_of(held)) != shown_digest:
            raise ValidationError(CHANGED_SINCE_SHOWN.format(subject=held))
        if upload is not None:
            document = _with_file(w, held, document or Signed(), upload)
        return approval_write(
            w,
            subject=held,
            meaning=meaning,
            proof=proof,
            on=on,
            statement=statement,
            document=document,
        )


def _with_file(
    w: Writing, subject: Subject, document: Signed, upload: UploadedFile
) -> Signed:
    """The approval document with its file, kept as it came."""
    kept = attachment_store(
        w,
        operator=aircraft_of(subject).operator,
        upload=upload,
        kind=Attachment.Kind.SCAN,
        title=document.number,
    )
    return replace(document, attachment=kept)


def approval_write(
    w: Writing,
    *,
    subject: Subject,
    meaning: str,
    proof: Proof,
    on: dt.date,
    statement: str = "",
    document: Signed | None = None,
    scopes: tuple[AuthorisationScope, ...] = (),
    overrules: Approval | None = None,
) -> Approval:
    """Inside a writing: the signature, after the same checks but that of the digest.

    `on` is the day of what is signed; whoever signs in person is authorised on the day
    of signing as well.
    """
    person, wanted = proof.person, scopes or SCOPES.get(meaning, ())
    if not wanted:
        raise ValidationError(NOT_SIGNABLE.format(meaning=meaning))
    if proof.reentered and proof.user != w.actor:
        raise RuntimeError(OTHER_ACTOR)
    operator = _operator_of(subject, on)
    if proof.day is not None:
        authorised(person=person, operator=operator, scopes=wanted, on=proof.day)
    authorisation = authorised(person=person, operator=operator, scopes=wanted, on=on)
    signed = document or Signed()
    if isinstance(subject, Substantiation):
        substantiation_sign_check(
            subject,
            meaning=meaning,
            person=person,
            on=on,
            statement=statement,
            document=signed,
        )
    _another_person(subject, meaning, person)
    if isinstance(subject, Evaluation) and meaning in APPROVING:
        _approvable(subject)
    row = Approval(
        operator=operator,
        meaning=meaning,
        statement=statement or f"{Meaning(meaning).label}: {subject}",
        signer=w.actor,
        signer_person=person,
        signer_name=person.name,
        authorisation=authorisation,
        authorisation_number=authorisation.number,
        second_factor=proof.second_factor,
        signed_at=w.at,
        document_kind=signed.kind,
        document_number=signed.number,
        document_issuer=signed.issuer,
        document_revision=signed.revision,
        document_date=signed.date,
        attachment=signed.attachment,
        overrules=overrules,
        **{SUBJECT_COLUMN[type(subject)]: subject},
    )
    row.content = signed_text(row, subject, identity=proof.how)
    row.content_digest = digest(row.content)
    w.create(row)
    if isinstance(subject, Substantiation):
        substantiation_signed(w, subject, meaning=meaning, on=on)
    return row


def _another_person(subject: Subject, meaning: str, person: Person) -> None:
    """Who judges did not make, and who approves did not check."""
    if meaning not in JUDGING or isinstance(subject, JUDGED_ELSEWHERE):
        return
    hands = set(
        subject.approvals.filter(
            meaning__in=(Meaning.PREPARED, Meaning.CHECKED)
        ).values_list("signer_person_id", flat=True)
    )
    maker = subject.entered_by
    if isinstance(subject, Disposition):
        hands.add(subject.decided_by_id)
    elif maker is not None and maker.person_id is not None:
        hands.add(maker.person_id)
    if person.pk in hands:
        raise ValidationError(
            SAME_PERSON.format(person=person, meaning=Meaning(meaning).label)
        )


def _approvable(evaluation: Evaluation) -> None:
    number = evaluation.number
    later = Evaluation.objects.filter(replaces=evaluation).first()
    if later is not None:
        raise ValidationError(SUPERSEDED.format(number=number, by=later))
    if evaluation.outcome != "computed":
        raise ValidationError(
            NOT_A_RESULT.format(number=number, outcome=evaluation.get_outcome_display())
        )
    if evaluation.source_from_memory or evaluation.barred_reason:
        reason = evaluation.barred_reason.rstrip(".") or BARRED_UNSAID
        raise ValidationError(BARRED.format(number=number, reason=reason))
    if not evaluation.approvals.filter(meaning=Meaning.CHECKED).exists():
        raise ValidationError(CHECK_FIRST.format(number=number))


def aircraft_of(subject: Subject) -> Aircraft:
    """The aircraft a record is of; what was done on a part off the wing has none."""
    if isinstance(subject, Evaluation):
        holder = subject.finding or subject.repair
        return holder.aircraft  # type: ignore[union-attr]  # it has exactly one
    if isinstance(subject, Accomplishment):
        return subject.subject.aircraft  # type: ignore[return-value]
    return subject.aircraft


def _operator_of(subject: Subject, on: dt.date) -> Operator:
    aircraft = aircraft_of(subject)
    if aircraft is None:
        return subject.subject.requirement.operator
    return operator_on(aircraft, on)
