"""The exact content of one revision: what a signature is bound to, and differences.

Records are named by the numbers that never change, so that the text reads the same to
the signer as to whoever verifies it in twenty years.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from django.db.models import QuerySet

from fleet.canonical import plain
from fleet.selectors.in_words import NOTHING, Table, name_words, value_words
from repairs.models import (
    Substantiation,
    SubstantiationCase,
    SubstantiationDocument,
    SubstantiationEffect,
    SubstantiationNeighbour,
)

SAID_IN_WORDS = frozenset(
    ("id", "operator_id", "aircraft_id", "prepared_by_id", "entered_by_id")
)
NOT_COMPARED = frozenset(
    ("revision", "revision_reason", "replaces_id", "entered_at", "entered_by")
)
ROW_KEYS = {
    "neighbours": ("neighbour",),
    "cases": ("kind", "number"),
    "effects": ("touches",),
    "documents": ("document", "page"),
}
"""What a row is about, by which two revisions are held side by side."""
TABLES: dict[str, Table] = {
    "neighbours": SubstantiationNeighbour,
    "cases": SubstantiationCase,
    "effects": SubstantiationEffect,
    "documents": SubstantiationDocument,
}


def substantiation_content(row: Substantiation) -> dict[str, Any]:
    """The columns and the rows that hold, as plain values for the canonical text."""
    return {
        "record": _record(row),
        "findings": _findings(row),
        "neighbours": [_neighbour(one) for one in neighbours_of(row)],
        "cases": [_case(one) for one in cases_of(row)],
        "effects": [
            {"touches": one.touches, "answer": one.answer, "note": one.note}
            for one in row.effects.order_by("touches")
        ],
        "documents": [_document(one) for one in documents_of(row)],
    }


def neighbours_of(row: Substantiation) -> QuerySet[SubstantiationNeighbour]:
    rows = row.neighbours.filter(withdrawn=False)
    return rows.select_related(
        "finding", "repair", "joint__section", "reviewed_by"
    ).order_by("gap_mm", "pk")


def cases_of(row: Substantiation) -> QuerySet[SubstantiationCase]:
    return row.cases.filter(withdrawn=False).select_related("evaluation")


def documents_of(row: Substantiation) -> QuerySet[SubstantiationDocument]:
    rows = row.documents.filter(withdrawn=False)
    return rows.select_related("document", "attachment").order_by("pk")


def neighbour_name(row: SubstantiationNeighbour) -> str:
    """F-0001, R-0001, or the joint's label with its section."""
    if row.joint is not None:
        kind, section = row.joint.get_kind_display(), row.joint.section.code
        return f"{kind} joint {section} {row.joint}"
    return str(row.finding or row.repair)


def _findings(row: Substantiation) -> list[str]:
    rows = row.finding_rows.filter(withdrawn=False)
    return sorted(rows.values_list("finding__number", flat=True))


def _record(row: Substantiation) -> dict[str, Any]:
    columns = {
        field.attname: plain(getattr(row, field.attname))
        for field in row._meta.concrete_fields
        if field.attname not in SAID_IN_WORDS
    }
    return columns | {
        "operator": row.operator.code,
        "aircraft": row.aircraft.serial_number,
        "prepared_by": str(row.prepared_by),
        "entered_by": str(row.entered_by or ""),
    }


def _neighbour(row: SubstantiationNeighbour) -> dict[str, Any]:
    return {
        "neighbour": neighbour_name(row),
        "gap_mm": plain(row.gap_mm),
        "answer": row.answer,
        "reason": row.reason,
        "reviewed_by": str(row.reviewed_by or ""),
        "reviewed_on": plain(row.reviewed_on),
    }


def _case(row: SubstantiationCase) -> dict[str, Any]:
    evaluation = row.evaluation
    return {
        "number": row.number,
        "kind": row.kind,
        "requirement": row.requirement,
        "case": row.case,
        "method": row.method,
        "allowable_source": row.allowable_source,
        "margin": plain(row.margin),
        "evaluation": evaluation.number if evaluation else "",
        "evaluation_digest": evaluation.content_digest if evaluation else "",
    }


def _document(row: SubstantiationDocument) -> dict[str, Any]:
    return {
        "role": row.role,
        "document": str(row.document),
        "page": row.page,
        "file_sha256": row.attachment.original_sha256 if row.attachment else "",
    }


@dataclass(frozen=True)
class Difference:
    """One thing that a revision says otherwise than the one before."""

    what: str
    before: str
    after: str


def differences(earlier: Substantiation, later: Substantiation) -> list[Difference]:
    """What the later revision changed, added and left out."""
    one, two = substantiation_content(earlier), substantiation_content(later)
    found = [
        Difference(
            name_words(name, Substantiation),
            value_words(Substantiation, name, value),
            value_words(Substantiation, name, two["record"][name]),
        )
        for name, value in one["record"].items()
        if name not in NOT_COMPARED and value != two["record"][name]
    ]
    for part in ("findings", "neighbours", "cases", "effects", "documents"):
        found += _rows_compared(part, one[part], two[part])
    return found


def _rows_compared(part: str, one: list[Any], two: list[Any]) -> list[Difference]:
    """Rows side by side, by what each is about; a changed one shows both readings."""
    before, after = _told(part, one), _told(part, two)
    return [
        Difference(f"{part}: {name}", before.get(name, ""), after.get(name, ""))
        for name in dict.fromkeys([*before, *after])
        if before.get(name) != after.get(name)
    ]


def _told(part: str, rows: list[Any]) -> dict[str, str]:
    if part == "findings":
        return dict.fromkeys(rows, "covered")
    keys, table = ROW_KEYS[part], TABLES[part]
    told = {}
    for row in rows:
        rest = [
            value_words(table, name, value)
            for name, value in row.items()
            if name not in keys and not name.endswith(("digest", "sha256"))
        ]
        name = " ".join(value_words(table, key, row[key]) for key in keys if row[key])
        told[name] = ", ".join(words for words in rest if words != NOTHING)
    return told
