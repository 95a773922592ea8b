"""How complete the file of each repair is; a fixed number of queries for any number."""

from __future__ import annotations

from collections.abc import Sequence

from django.db.models import Model, QuerySet

from repairs.described import read_apart
from repairs.models import (
    Approval,
    InspectionRequirement,
    Meaning,
    Photograph,
    Repair,
    RepairCategory,
    RepairFastener,
    RepairLayer,
    SubstantiationCase,
    SubstantiationDocument,
)
from repairs.repair_file import FileFacts, RepairFile, repair_file

NO_LAYER_KINDS = ("blend", "stop_drill", "oversize_fastener")


def repair_files(repairs: Sequence[Repair]) -> dict[int, RepairFile]:
    """By the repair's key; seven queries. Repairs know their approval and release
    documents."""
    keys = [row.pk for row in repairs]
    folders = [row.substantiation_id for row in repairs if row.substantiation_id]
    layers = _having(RepairLayer.objects.filter(repair__in=keys))
    fasteners = _having(RepairFastener.objects.filter(repair__in=keys))
    inspected = _having(
        Approval.objects.filter(repair__in=keys, meaning=Meaning.INSPECTED)
    ) | _having(Photograph.objects.filter(repair__in=keys, role="evidence"))
    required = _having(InspectionRequirement.objects.filter(repair__in=keys))
    fatigue = _folders(
        SubstantiationCase.objects.filter(
            substantiation__in=folders, kind="fatigue", withdrawn=False
        )
    )
    reports = _folders(
        SubstantiationDocument.objects.filter(
            substantiation__in=folders, role="inspection_report", withdrawn=False
        )
    )
    return {
        row.pk: repair_file(
            FileFacts(
                chart_number=bool(row.chart_number),
                place=row.section_id is not None and row.s1_mm is not None,
                area=row.length_mm is not None and row.width_mm is not None,
                counters=None not in (row.released_on, row.at_minutes, row.at_cycles),
                approval=row.approval_document_id is not None,
                revision=bool(row.approval_document and row.approval_document.revision),
                category=row.category != RepairCategory.PENDING,
                fatigue=row.stage_reached in ("2", "3")
                or row.pk in required
                or row.substantiation_id in fatigue,
                inspection=row.inspected_by_id is not None
                or row.pk in inspected
                or row.substantiation_id in reports,
                work_cards=bool(read_apart(row.description).said.get("work_order")),
                release=row.release_document_id is not None
                and row.released_by_id is not None,
                materials=_materials(row, layers, fasteners),
            )
        )
        for row in repairs
    }


def _materials(row: Repair, layers: set[int], fasteners: set[int]) -> bool:
    """A blend-out has none; fasteners alone where only they were changed."""
    if row.kind == "blend":
        return row.remaining_thickness_mm is not None
    if row.kind in NO_LAYER_KINDS:
        return row.kind == "stop_drill" or row.pk in fasteners
    return row.pk in layers and row.pk in fasteners


def _having(rows: QuerySet[Model]) -> set[int]:
    return set(rows.values_list("repair", flat=True))


def _folders(rows: QuerySet[Model]) -> set[int]:
    return set(rows.values_list("substantiation", flat=True))
