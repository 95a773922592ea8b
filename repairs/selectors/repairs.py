"""What the pages of repairs show."""

from __future__ import annotations

from dataclasses import dataclass, field

from django.db.models import Exists, OuterRef, Q, QuerySet

from fleet.models import User
from repairs.models import (
    DuePoint,
    InspectionRequirement,
    Photograph,
    Repair,
    RepairFastener,
    RepairFinding,
    RepairLayer,
    RepairState,
)


def repairs_listed(user: User) -> QuerySet[Repair]:
    """Repairs the user may see, with all that a line of the list shows."""
    return (
        with_hiding(Repair.objects.visible_to(user))
        .select_related(
            "aircraft__variant__aircraft_type", "section", "approval_document"
        )
        .order_by("-released_on", "-pk")
    )


def with_hiding(rows: QuerySet[Repair]) -> QuerySet[Repair]:
    """Rows that say whether they hide damage not shown to be removed."""
    return rows.annotate(hides_damage=_hides())


def hiding_damage(rows: QuerySet[Repair]) -> QuerySet[Repair]:
    """Repairs on the aircraft that cover damage not shown to be removed."""
    return rows.filter(_hides(), state=RepairState.EMBODIED)


def _hides() -> Exists:
    covered = RepairFinding.objects.filter(repair=OuterRef("pk"), covers=True)
    return Exists(covered.exclude(damage_removed="yes"))


def repair_whole() -> QuerySet[Repair]:
    """Repairs with what their own page shows at the top."""
    return with_hiding(Repair.objects.all()).select_related(
        "aircraft__variant__aircraft_type", "operator", "section", "geometry",
        "panel__material", "zone", "disposition", "approval_document",
        "release_document", "organisation", "performed_by", "inspected_by",
        "released_by", "superseded_by", "entered_by",
    )  # fmt: skip


@dataclass(frozen=True)
class RepairAround:
    """Everything that hangs on a repair."""

    findings: list[RepairFinding] = field(default_factory=list)
    layers: list[RepairLayer] = field(default_factory=list)
    fasteners: list[RepairFastener] = field(default_factory=list)
    requirements: list[InspectionRequirement] = field(default_factory=list)
    due_points: list[DuePoint] = field(default_factory=list)
    photographs: list[Photograph] = field(default_factory=list)
    supersedes: list[Repair] = field(default_factory=list)


def repair_around(repair: Repair) -> RepairAround:
    """The records that hang on a repair; a fixed number of queries."""
    points = DuePoint.objects.filter(
        Q(repair=repair) | Q(subject__requirement__repair=repair)
    )
    return RepairAround(
        findings=list(repair.finding_rows.select_related("finding")),
        layers=list(repair.layers.select_related("material")),
        fasteners=list(repair.fasteners.all()),
        requirements=list(repair.requirements.all()),
        due_points=list(points.order_by("pk")),
        photographs=list(repair.photographs.select_related("attachment")),
        supersedes=list(repair.supersedes.all()),
    )
