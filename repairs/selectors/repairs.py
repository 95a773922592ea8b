"""What the pages of repairs show."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass, field

from django.db.models import Q, QuerySet

from fleet.models import User
from fleet.selectors.applicability import Applies, applies_to
from repairs.models import (
    Approval,
    DuePoint,
    InspectionRequirement,
    Photograph,
    Repair,
    RepairFastener,
    RepairFinding,
    RepairState,
    RepairStep,
)
from repairs.selectors.findings import size_words
from repairs.selectors.hidden import with_hiding
from repairs.selectors.repair_fitted import LayerLine, layer_lines
from repairs.selectors.repair_inspections import inspections_of
from repairs.selectors.repair_overlaps import Overlap, chain_of, overlaps_of

BEFORE_COVERING = "before_covering"


def repairs_listed(user: User) -> QuerySet[Repair]:
    """Repairs the user may see, with all that a line of the list shows."""
    return (
        with_hiding(Repair.objects.visible_to(user))
        .select_related(
            "aircraft__variant__aircraft_type", "section", "approval_document"
        )
        .order_by("-released_on", "-pk")
    )


def repair_whole() -> QuerySet[Repair]:
    """Repairs with what their own page shows at the top."""
    return with_hiding(Repair.objects.all()).select_related(
        "aircraft__variant__aircraft_type", "operator", "section", "geometry",
        "panel__material", "zone", "disposition", "substantiation",
        "approval_document",
        "release_document", "organisation", "performed_by", "inspected_by",
        "released_by", "superseded_by", "entered_by",
    )  # fmt: skip


@dataclass(frozen=True)
class Answered:
    """A finding of a repair: as found first, covered or not, photographed before."""

    row: RepairFinding
    extent: str
    photographed: bool
    embodied: bool

    @property
    def is_hidden(self) -> bool:
        """On the aircraft, out of sight, and not shown to be removed."""
        return self.embodied and self.row.covers and self.row.damage_removed != "yes"


@dataclass(frozen=True)
class RepairAround:
    """Everything that hangs on a repair."""

    findings: list[Answered] = field(default_factory=list)
    layers: list[LayerLine] = field(default_factory=list)
    fasteners: list[RepairFastener] = field(default_factory=list)
    requirements: list[InspectionRequirement] = field(default_factory=list)
    due_points: list[DuePoint] = field(default_factory=list)
    photographs: list[Photograph] = field(default_factory=list)
    chain: Sequence[Repair] = ()
    overlaps: list[Overlap] = field(default_factory=list)
    steps: list[RepairStep] = field(default_factory=list)
    inspections: list[Approval] = field(default_factory=list)

    @property
    def required_known(self) -> bool:
        """Whether the approved data's materials are recorded at all."""
        return any(line.required for line in self.layers)

    @property
    def hidden(self) -> list[Answered]:
        """What lies under the repair and is not shown to be removed."""
        return [one for one in self.findings if one.is_hidden]


def repair_around(repair: Repair, today: dt.date) -> RepairAround:
    """The records that hang on a repair; a fixed number of queries."""
    points = DuePoint.objects.filter(
        Q(repair=repair) | Q(subject__requirement__repair=repair)
    )
    return RepairAround(
        findings=answered_of(repair),
        layers=layer_lines(
            repair,
            list(repair.layers.select_related("material")),
            list(repair.required.select_related("answered_by")),
            today,
        ),
        fasteners=list(repair.fasteners.all()),
        requirements=list(repair.requirements.all()),
        due_points=list(points.order_by("pk")),
        photographs=list(repair.photographs.select_related("attachment")),
        chain=chain_of(repair),
        overlaps=overlaps_of(repair),
        steps=list(repair.steps.select_related("done_by")),
        inspections=list(inspections_of(repair).select_related("overruled_by")),
    )


def answered_of(repair: Repair) -> list[Answered]:
    """The findings of a repair with their original extent; three queries."""
    rows = repair.finding_rows.select_related("finding").prefetch_related(
        "finding__measurements__values", "finding__photographs"
    )
    return [
        Answered(
            row,
            size_words(list(row.finding.measurements.all())[:1]),
            any(p.role == BEFORE_COVERING for p in row.finding.photographs.all()),
            repair.state == RepairState.EMBODIED,
        )
        for row in rows
    ]


def approval_applies(repair: Repair) -> Applies | None:
    """Whether the repair's approval holds for the serial it is on; one query."""
    document = repair.approval_document
    return applies_to(document, repair.aircraft) if document else None
