"""How far a folder has come: the state of a revision, the stage of its number."""

from __future__ import annotations

from typing import Any

from django.db.models import (
    Case,
    Exists,
    IntegerField,
    OuterRef,
    Q,
    QuerySet,
    Value,
    When,
)

from repairs.models import Approval, DueKind, DuePoint, Meaning, Substantiation

DRAFT, PREPARED, CHECKED, REJECTED = "draft", "prepared", "checked", "rejected"
APPROVED_WORDS = {1: "approved, stage 1", 2: "approved, stage 2", 3: "complete"}
REACHED_WORDS = {
    0: "no stage approved",
    1: "stage 1",
    2: "stage 2",
    3: "complete: stage 3",
}
BY_STAGE = {
    3: (Meaning.APPROVED, Meaning.STAGE_3),
    2: (Meaning.STAGE_2,),
    1: (Meaning.STAGE_1,),
}
STAGE_OF: dict[str, int] = {
    meaning: stage for stage, all_ in BY_STAGE.items() for meaning in all_
}


def revisions_of(row: Substantiation) -> QuerySet[Substantiation]:
    """All revisions of the number, the first one first."""
    rows = Substantiation.objects.filter(operator=row.operator_id, number=row.number)
    return rows.order_by("revision")


def approvals_of_number(row: Substantiation) -> QuerySet[Approval]:
    return Approval.objects.filter(
        substantiation__operator=row.operator_id, substantiation__number=row.number
    )


def stage_reached(row: Substantiation) -> int:
    """0 to 3, from the approvals of every revision of the number; one query."""
    meanings = approvals_of_number(row).values_list("meaning", flat=True)
    return max((STAGE_OF.get(one, 0) for one in meanings), default=0)


def stage_of_named(rows: QuerySet[Substantiation], key: object) -> str:
    """The stage of the folder a form names, as a repair states it; empty: none named.

    One that is not among the rows offered is not told of.
    """
    text = str(getattr(key, "pk", key) or "")
    row = rows.filter(pk=int(text)).first() if text.isdecimal() else None
    return str(stage_reached(row) or "none") if row is not None else ""


def approved_revision(row: Substantiation, stage: int) -> Substantiation | None:
    """The latest revision by which that very stage was approved; one query."""
    rows = revisions_of(row).filter(approvals__meaning__in=BY_STAGE[stage])
    return rows.distinct().order_by("-revision").first()


def with_standing(rows: QuerySet[Substantiation]) -> QuerySet[Substantiation]:
    """Revisions with what `revision_state` and `reached` read, for lists."""

    def own(*meanings: str) -> Exists:
        signed = Approval.objects.filter(substantiation=OuterRef("pk"))
        return Exists(signed.filter(meaning__in=meanings))

    def of_number(stage: int) -> Exists:
        signed = Approval.objects.filter(
            substantiation__operator=OuterRef("operator"),
            substantiation__number=OuterRef("number"),
            meaning__in=BY_STAGE[stage],
        )
        return Exists(signed)

    return rows.annotate(
        is_prepared=own(Meaning.PREPARED),
        is_checked=own(Meaning.CHECKED),
        is_rejected=own(Meaning.REJECTED),
        own_stage=_highest({stage: own(*BY_STAGE[stage]) for stage in (3, 2, 1)}),
        reached=_highest({stage: of_number(stage) for stage in (3, 2, 1)}),
        has_open_clock=Exists(
            clocks_of(OuterRef("operator"), OuterRef("number")).filter(
                closed_on__isnull=True
            )
        ),
    )


def clocks_of(operator: Any, number: Any) -> QuerySet[DuePoint]:
    """Stage clocks of a number, open and closed: on its repairs, or on itself."""
    return DuePoint.objects.filter(
        Q(
            repair__substantiation__operator=operator,
            repair__substantiation__number=number,
        )
        | Q(substantiation__operator=operator, substantiation__number=number),
        kind=DueKind.STAGE_CLOCK,
    )


def _highest(conditions: dict[int, Exists]) -> Case:
    return Case(
        *(
            When(condition, then=Value(stage))
            for stage, condition in conditions.items()
        ),
        default=Value(0),
        output_field=IntegerField(),
    )


def revision_state(row: Substantiation) -> str:
    """The state of a row that `with_standing` made, in words; no query."""
    if row.is_rejected:  # type: ignore[attr-defined]
        return REJECTED
    if row.own_stage:  # type: ignore[attr-defined]
        return APPROVED_WORDS[row.own_stage]  # type: ignore[attr-defined]
    if row.is_checked:  # type: ignore[attr-defined]
        return CHECKED
    return PREPARED if row.is_prepared else DRAFT  # type: ignore[attr-defined]
