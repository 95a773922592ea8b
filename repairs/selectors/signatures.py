"""What was signed, as one text, and whether the record still says it.

The text holds the record, and of the signature its meaning, statement, name,
authorisation, time and how identity was shown. It is made again from the rows when it
is verified: whatever was changed after signing no longer agrees, and is named.
"""

from __future__ import annotations

import datetime as dt
import json
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any
from zoneinfo import ZoneInfo

from fleet.canonical import canonical, digest, plain
from repairs.models import (
    Accomplishment,
    Approval,
    Disposition,
    Evaluation,
    Finding,
    Repair,
    Substantiation,
)
from repairs.selectors.substantiation_content import substantiation_content

Subject = Disposition | Evaluation | Repair | Finding | Substantiation | Accomplishment
SUBJECT_COLUMN: dict[type[Subject], str] = {
    Disposition: "disposition",
    Evaluation: "evaluation",
    Repair: "repair",
    Finding: "finding",
    Substantiation: "substantiation",
    Accomplishment: "accomplishment",
}
NOT_SIGNED_HERE = frozenset(
    {"state", "stage_reached", "removed_on", "removal_reason", "superseded_by_id"}
)
ROWS_OF: dict[type[Subject], tuple[tuple[str, str, str], ...]] = {
    Disposition: (
        ("basis", "basis_rows", "pk"),
        ("neighbours", "neighbour_reviews", "pk"),
    ),
    Repair: (
        ("findings", "finding_rows", "pk"),
        ("layers", "layers", "number"),
        ("fasteners", "fasteners", "number"),
        ("required", "required", "number"),
        ("steps", "steps", "number"),
    ),
}
"""Rows that belong to a record: their name in the text, where they are, their order."""

SIGNATURE = "signature"
TEXT_CHANGED = "the signed text"
RECORD_CHANGED = "the record"
BEFORE = "not recorded"
"""How identity was shown, for signatures from before the text held it."""


@dataclass(frozen=True, slots=True)
class Signature:
    """One signature as its block shows it; `changed` names what no longer agrees."""

    row: Approval
    changed: tuple[str, ...]
    identity: str
    local: dt.datetime

    @property
    def agrees(self) -> bool:
        return not self.changed

    @property
    def changed_words(self) -> str:
        return ", ".join(self.changed)

    @property
    def local_words(self) -> str:
        """The operator's own time, with the name of its zone."""
        return f"{self.local:%Y-%m-%d %H:%M %Z}"


def approvals_verified(subject: Subject) -> list[Signature]:
    """The signatures under a record, each held against it."""
    rows = subject.approvals.select_related("authorisation", "operator", "attachment")
    made: dict[int | None, str] = {}
    return [_verified(row, subject, made) for row in rows]


def signatures_broken() -> Iterator[Signature]:
    """Every signature of every operator that no longer agrees; reads all of them."""
    rows = Approval.objects.select_related(
        "authorisation", "operator", "attachment", *SUBJECT_COLUMN.values()
    )
    for row in rows.order_by("pk").iterator(chunk_size=500):
        found = _verified(row, subject_of(row), {})
        if not found.agrees:
            yield found


def subject_of(approval: Approval) -> Subject:
    """The record under which it stands; it has exactly one."""
    return next(s for c in SUBJECT_COLUMN.values() if (s := getattr(approval, c)))


def approval_agrees(approval: Approval) -> bool:
    """Whether the record, the name, the authorisation and the time are as signed."""
    return _verified(approval, subject_of(approval), {}).agrees


def content_of(subject: Subject, *, measurement: int | None = None) -> str:
    """The canonical text of a record: its columns and the rows that belong to it."""
    return canonical(_content(subject, measurement))


def signed_text(approval: Approval, subject: Subject, *, identity: str) -> str:
    """The text a signature is bound to: the record, and the signature's own words."""
    signature = _signature(approval, identity)
    return canonical(_content(subject, None) | {SIGNATURE: signature})


def _verified(
    row: Approval, subject: Subject, made: dict[int | None, str]
) -> Signature:
    text: dict[str, Any] = json.loads(row.content)
    signature = text.pop(SIGNATURE, None)
    upto = text.get("measurement")
    if upto not in made:
        made[upto] = content_of(subject, measurement=upto)
    changed = [] if digest(row.content) == row.content_digest else [TEXT_CHANGED]
    if canonical(text) != made[upto]:
        changed.append(RECORD_CHANGED)
    identity = BEFORE
    if signature is not None:
        identity = signature["identity"]
        now = json.loads(canonical(_signature(row, identity)))
        differs = (key for key, value in now.items() if value != signature.get(key))
        changed += [f"the {key.replace('_', ' ')}" for key in differs]
    zone = ZoneInfo(row.operator.time_zone)
    return Signature(row, tuple(changed), identity, row.signed_at.astimezone(zone))


def _signature(row: Approval, identity: str) -> dict[str, object]:
    """What a signature says of itself; the authorisation is read where it is kept, but
    for the day it ends: a lapsed one leaves what was signed under it as it was."""
    under = row.authorisation
    return {
        "meaning": row.meaning,
        "statement": row.statement,
        "name": row.signer_name,
        "person": row.signer_person_id,
        "login": row.signer_id,
        "authorisation_number": row.authorisation_number,
        "authorisation": {
            "operator": under.operator_id,
            "person": under.person_id,
            "number": under.number,
            "scope": under.scope,
            "valid_from": plain(under.valid_from),
            "source": under.source,
        },
        "signing_time": plain(row.signed_at),
        "second_factor": row.second_factor,
        "identity": identity,
        "overruled_rejection": row.overrules_id,
        "document": {
            "kind": row.document_kind,
            "number": row.document_number,
            "issuer": row.document_issuer,
            "revision": row.document_revision,
            "date": plain(row.document_date),
            "file": row.attachment.original_sha256 if row.attachment else "",
        },
    }


def _content(subject: Subject, measurement: int | None) -> dict[str, object]:
    if isinstance(subject, Substantiation):
        return substantiation_content(subject)
    content: dict[str, object] = {"record": _columns(subject)}
    for name, rows, order in ROWS_OF.get(type(subject), ()):
        content[name] = _rows(getattr(subject, rows).order_by(order))
    if isinstance(subject, Disposition):
        content["findings"] = sorted(
            subject.finding_rows.values_list("finding__number", flat=True)
        )
    elif isinstance(subject, Finding):
        content |= _measured(subject, measurement)
    return content


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
    """Of a finding only what was seen is signed: the cause may be found later; and a
    repair's folder may be made after its release."""
    if isinstance(row, Repair):
        return frozenset({"substantiation_id"})
    return frozenset({"cause"}) if isinstance(row, Finding) else frozenset()


def _rows(rows: object) -> list[dict[str, object]]:
    return [_columns(row) for row in rows]  # type: ignore[attr-defined]
