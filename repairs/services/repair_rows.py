"""The rows of a repair: layers, fasteners, findings, what is required, steps."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from fleet.services.history import Writing
from repairs.fitted import differences
from repairs.models import (
    Repair,
    RepairFastener,
    RepairFinding,
    RepairLayer,
    RepairRequired,
    RepairStep,
)
from repairs.selectors.edges import edge_margin_mm
from repairs.selectors.repair_fitted import thickness_percent
from repairs.services.repair_entry import Answered, Layer, RepairEntry, Required


@dataclass(frozen=True, slots=True)
class EnteredPly:
    """A layer as typed, numbered in its order."""

    number: int
    material_id: int | None
    material_entered: str
    thickness_mm: float | None
    thickness_entered: str


def plies(rows: Sequence[Layer | Required]) -> list[EnteredPly]:
    return [
        EnteredPly(
            number,
            row.material.pk if row.material else None,
            row.material_entered,
            row.thickness_mm,
            row.thickness_entered,
        )
        for number, row in enumerate(rows, 1)
    ]


def plan_rows_write(w: Writing, repair: Repair, entry: RepairEntry) -> None:
    """What is known of a repair before it is done."""
    _required_write(w, repair, entry)
    for answered in entry.findings:
        _finding_write(w, repair, answered)
    steps_write(w, repair, entry)


def rows_write(w: Writing, repair: Repair, entry: RepairEntry) -> None:
    """All rows at release; what the plan said of the same row is set right."""
    _layers_write(w, repair, entry)
    plan_rows_write(w, repair, entry)
    answered = {one.finding.pk for one in entry.findings}
    for row in repair.finding_rows.exclude(finding__in=answered):
        w.change(row, covers=False, damage_removed="no", edge_margin_mm=None)


def steps_write(w: Writing, repair: Repair, entry: RepairEntry) -> None:
    """Steps of the entry, numbered on from those there are."""
    start = repair.steps.count() + 1
    for number, step in enumerate(entry.steps, start):
        w.create(
            RepairStep(
                repair=repair,
                number=number,
                title=step.title,
                option=step.option,
                done_on=step.done_on,
                done_by=step.done_by,
            )
        )


def _layers_write(w: Writing, repair: Repair, entry: RepairEntry) -> None:
    for number, layer in enumerate(entry.layers, 1):
        w.create(
            RepairLayer(
                repair=repair,
                number=number,
                material=layer.material,
                material_entered=layer.material_entered,
                thickness_mm=layer.thickness_mm,
                thickness_entered=layer.thickness_entered,
                batch=layer.batch,
            )
        )
    for number, one in enumerate(entry.fasteners, 1):
        w.create(
            RepairFastener(
                repair=repair,
                number=number,
                fastener=one.fastener,
                diameter_mm=one.diameter_mm,
                pitch_mm=one.pitch_mm,
                edge_distance_mm=one.edge_distance_mm,
                rows=one.rows,
                count=one.count,
            )
        )


def _required_write(w: Writing, repair: Repair, entry: RepairEntry) -> None:
    """What the data ask for, with the difference and its answer once it is fitted."""
    percent = thickness_percent(repair.operator, entry.released_on)
    found = differences(plies(entry.required), plies(entry.layers), percent=percent)
    before = {row.number: row for row in repair.required.all()}
    for number, (asked, found_in) in enumerate(
        zip(entry.required, found, strict=True), 1
    ):
        words = found_in.words if entry.released_on else ""
        said = {
            "material_id": asked.material.pk if asked.material else None,
            "material_entered": asked.material_entered,
            "thickness_mm": asked.thickness_mm,
            "thickness_entered": asked.thickness_entered,
            "page": asked.page,
            "difference": words,
            "answer": asked.answer if words else "",
            "answered_by_id": _answerer(asked) if words else None,
        }
        if number in before:
            w.change(before[number], **said)
        else:
            w.create(RepairRequired(repair=repair, number=number, **said))


def _answerer(asked: Required) -> int | None:
    person = asked.answered_by if asked.is_answered else None
    return person.pk if person else None


def _finding_write(w: Writing, repair: Repair, answered: Answered) -> None:
    margin = answered.edge_margin_mm
    if margin is None:
        margin = edge_margin_mm(repair, answered.finding)
    said = {
        "covers": answered.covers,
        "damage_removed": answered.damage_removed,
        "edge_margin_mm": margin,
    }
    row = repair.finding_rows.filter(finding=answered.finding).first()
    if row is None:
        w.create(RepairFinding(repair=repair, finding=answered.finding, **said))
    else:
        w.change(row, **said)
