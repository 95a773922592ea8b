"""Signatures: a named person, an authorisation, and the exact text that was signed.

The text is made again from the record when it is verified; what was changed after
signing no longer matches the digest.
"""

from __future__ import annotations

import datetime as dt
import json
from collections.abc import Iterator
from dataclasses import dataclass

from django.core.exceptions import ValidationError

from fleet.canonical import canonical, digest, plain
from fleet.models import (
    Aircraft,
    Attachment,
    AuthorisationScope,
    Person,
    User,
)
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from repairs.models import Approval, Disposition, Evaluation, Finding, Meaning, Repair
from repairs.services.authority import authorised, operator_on

Subject = Disposition | Evaluation | Repair | Finding
SUBJECT_COLUMN: dict[type[Subject], str] = {
    Disposition: "disposition",
    Evaluation: "evaluation",
    Repair: "repair",
    Finding: "finding",
}
SCOPES: dict[str, tuple[AuthorisationScope, ...]] = {
    Meaning.PREPARED: (AuthorisationScope.ASSESS, AuthorisationScope.CHECK,
                       AuthorisationScope.APPROVE),
    Meaning.CHECKED: (AuthorisationScope.CHECK, AuthorisationScope.APPROVE),
    Meaning.APPROVED: (AuthorisationScope.APPROVE,),
    Meaning.STAGE_1: (AuthorisationScope.APPROVE,),
    Meaning.STAGE_2: (AuthorisationScope.APPROVE,),
    Meaning.STAGE_3: (AuthorisationScope.APPROVE,),
    Meaning.REJECTED: (AuthorisationScope.CHECK, AuthorisationScope.APPROVE),
    Meaning.INSPECTED: (AuthorisationScope.INSPECT, AuthorisationScope.NDT),
    Meaning.RELEASED: (AuthorisationScope.CERTIFY,),
    Meaning.DEFERRED: (AuthorisationScope.CERTIFY,),
}  # fmt: skip
APPROVING = (Meaning.APPROVED, Meaning.STAGE_1, Meaning.STAGE_2, Meaning.STAGE_3)
JUDGING = (Meaning.CHECKED, *APPROVING)
NOT_SIGNED_HERE = frozenset({"state", "stage_reached", "removed_on", "removal_reason"})

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
    person: Person,
    shown_digest: str,
    on: dt.date,
    actor: User | None,
    at: dt.datetime,
    statement: str = "",
    document: Signed | None = None,
    second_factor: bool = False,
) -> Approval:
    """Sign the text whose digest was shown.

    Refused when the record changed since, when the person lacks the authorisation that
    day, when the same person would judge own work, or when an evaluation is barred.
    """
    content = content_of(subject)
    if digest(content) != shown_digest:
        raise ValidationError(CHANGED_SINCE_SHOWN.format(subject=subject))
    with Writing(
        actor=actor,
        action="approval_sign",
        at=at,
        operator=aircraft_of(subject).operator,
        stream=stream_of(aircraft_of(subject)),
        reason=statement,
    ) as w:
        return approval_write(
            w,
            subject=subject,
            meaning=meaning,
            person=person,
            on=on,
            statement=statement,
            document=document,
            second_factor=second_factor,
        )


def approval_write(
    w: Writing,
    *,
    subject: Subject,
    meaning: str,
    person: Person,
    on: dt.date,
    statement: str = "",
    document: Signed | None = None,
    second_factor: bool = False,
    scopes: tuple[AuthorisationScope, ...] = (),
) -> Approval:
    """Inside a writing: the signature, after the same checks but that of the digest."""
    wanted = scopes or SCOPES.get(meaning, ())
    if not wanted:
        raise ValidationError(NOT_SIGNABLE.format(meaning=meaning))
    operator = operator_on(aircraft_of(subject), on)
    authorisation = authorised(person=person, operator=operator, scopes=wanted, on=on)
    _another_person(subject, meaning, person)
    if isinstance(subject, Evaluation) and meaning in APPROVING:
        _approvable(subject)
    content = content_of(subject)
    signed = document or Signed()
    return w.create(
        Approval(
            operator=operator,
            meaning=meaning,
            statement=statement or f"{Meaning(meaning).label}: {subject}",
            content=content,
            content_digest=digest(content),
            signer=w.actor,
            signer_person=person,
            signer_name=person.name,
            authorisation=authorisation,
            authorisation_number=authorisation.number,
            second_factor=second_factor,
            signed_at=w.at,
            document_kind=signed.kind,
            document_number=signed.number,
            document_issuer=signed.issuer,
            document_revision=signed.revision,
            document_date=signed.date,
            attachment=signed.attachment,
            **{SUBJECT_COLUMN[type(subject)]: subject},
        )
    )


def approval_agrees(approval: Approval) -> bool:
    """Whether the record still says what was signed, and the text is untouched."""
    subject = next(
        getattr(approval, column)
        for column in SUBJECT_COLUMN.values()
        if getattr(approval, f"{column}_id") is not None
    )
    upto = json.loads(approval.content).get("measurement")
    made_again = content_of(subject, measurement=upto)
    return digest(approval.content) == approval.content_digest == digest(made_again)


def approvals_verified(subject: Subject) -> list[tuple[Approval, bool]]:
    """Signatures with whether the record still says what was signed."""
    return [(row, approval_agrees(row)) for row in subject.approvals.all()]


def content_lines(content: str) -> list[tuple[str, str]]:
    """The canonical text for reading: names and values, in its own order."""
    return list(_flat("", json.loads(content)))


def _flat(name: str, value: object) -> Iterator[tuple[str, str]]:
    if isinstance(value, dict):
        for key, inner in value.items():
            yield from _flat(f"{name} {key}".strip(), inner)
    elif isinstance(value, list):
        for number, inner in enumerate(value, 1):
            yield from _flat(f"{name} {number}", inner)
    else:
        words = name.replace("_id", "").replace("_", " ").removeprefix("record ")
        yield words, "—" if value in (None, "") else _told(value)


def _told(value: object) -> str:
    """Floats are kept to the last digit as hexadecimal; a reader sees the number."""
    text = str(value)
    if text.startswith(("0x", "-0x")) and "p" in text:
        return f"{float.fromhex(text):g}"
    return text


def content_of(subject: Subject, *, measurement: int | None = None) -> str:
    """The canonical text of a record: its columns and the rows that belong to it."""
    content: dict[str, object] = {"record": _columns(subject)}
    if isinstance(subject, Disposition):
        content["findings"] = sorted(
            subject.finding_rows.values_list("finding__number", flat=True)
        )
        content["basis"] = _rows(subject.basis_rows.order_by("pk"))
        content["neighbours"] = _rows(subject.neighbour_reviews.order_by("pk"))
    elif isinstance(subject, Repair):
        content["findings"] = _rows(subject.finding_rows.order_by("pk"))
        content["layers"] = _rows(subject.layers.order_by("number"))
        content["fasteners"] = _rows(subject.fasteners.order_by("number"))
    elif isinstance(subject, Finding):
        content |= _measured(subject, measurement)
    return canonical(content)


def _measured(finding: Finding, upto: int | None) -> dict[str, object]:
    """Measurements up to the number that was shown; later ones are later."""
    rows = list(finding.measurements.order_by("number").prefetch_related("values"))
    last = upto if upto is not None else len(rows)
    kept = rows[:last]
    values = [_rows(row.values.all()) for row in kept]
    return {"measurement": last, "measurements": _rows(kept), "values": values}


def _columns(row: object) -> dict[str, object]:
    fields = row._meta.concrete_fields  # type: ignore[attr-defined]
    left_out = NOT_SIGNED_HERE | _still_open(row)
    return {
        field.attname: plain(getattr(row, field.attname))
        for field in fields
        if field.attname not in left_out
    }


def _still_open(row: object) -> frozenset[str]:
    """Of a finding only what was seen is signed: the cause may be found later."""
    return frozenset({"cause"}) if isinstance(row, Finding) else frozenset()


def _rows(rows: object) -> list[dict[str, object]]:
    return [_columns(row) for row in rows]  # type: ignore[attr-defined]


def _another_person(subject: Subject, meaning: str, person: Person) -> None:
    """Who judges did not make, and who approves did not check."""
    if meaning not in JUDGING or isinstance(subject, Finding):
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
    if isinstance(subject, Evaluation):
        holder = subject.finding or subject.repair
        return holder.aircraft  # type: ignore[union-attr]  # it has exactly one
    return subject.aircraft
