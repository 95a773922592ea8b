"""What a plan said of a repair, as the form of its release asks it."""

from __future__ import annotations

from collections.abc import Iterable
from typing import Any

from repairs.described import read_apart
from repairs.models import Repair, RepairFinding, RepairRequired

AS_PLANNED = (
    "place_entered", "kind", "length_mm", "width_mm", "element", "element_label",
    "surface", "criticality", "criticality_source", "ata", "chart_number", "category",
    "category_reason", "stage_reached", "approval_basis", "weight_change_g", "arm_mm",
)  # fmt: skip
RELATED = ("aircraft_id", "substantiation_id", "disposition_id")
YES_OR_NO = {True: "yes", False: "no", None: ""}


def plan_said(repair: Repair) -> dict[str, Any]:
    """Values of the release form; one query for the required layers."""
    said: dict[str, Any] = {name: getattr(repair, name) for name in AS_PLANNED}
    said |= {name.removesuffix("_id"): getattr(repair, name) for name in RELATED}
    apart = read_apart(repair.description)
    said |= {"description": apart.words, **apart.said}
    said["inspection_required"] = YES_OR_NO[repair.inspection_required]
    said["required"] = required_lines(repair.required.all())
    document = repair.approval_document
    if document is not None:
        said |= {
            "document_kind": document.kind,
            "document_reference": document.reference,
            "document_revision": document.revision,
            "document_page": repair.approval_page,
        }
    return said


def planned_answers(repair: Repair | None) -> dict[int, RepairFinding]:
    """The findings a plan names, by key."""
    if repair is None:
        return {}
    return {row.finding_id: row for row in repair.finding_rows.all()}


def required_lines(rows: Iterable[RepairRequired]) -> str:
    """Required layers as they are typed."""
    lines = [
        (row.material_entered, row.thickness_entered or "-", row.page) for row in rows
    ]
    return "\n".join("; ".join(cells).rstrip("; ") for cells in lines)
