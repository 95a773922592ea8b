"""Which evaluation holds, in what state it is, and what has changed since."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import TypeVar

from django.db.models import Exists, OuterRef, Q, QuerySet

from fleet.digests import row_digest
from fleet.models import AircraftType, DetectableSize
from fleet.models.structure import Panel
from repairs.models import (
    APPROVING,
    Approval,
    Evaluation,
    EvaluationInput,
    Finding,
    Meaning,
    Measurement,
    Repair,
    StatedInput,
)

Row = TypeVar("Row", Finding, Repair)

UNCHECKED, CHECKED, APPROVED, SUPERSEDED = (
    "unchecked",
    "checked",
    "approved",
    "superseded",
)
UNAPPROVED_WORDS = "Unapproved calculation, {state}."
REPLACED_ROWS = (
    "material",
    "spectrum",
    "measurement",
    "fatigue_policy",
    "detectable_size",
    "adopted_value",
    "policy",
    "panel_on_aircraft",
    "stated_input",
)
METHOD_CHANGED = "{name} is now version {now}, this was version {then}"
PANEL_CHANGED = "panel {panel} is not the same in the geometry in force"
ROW_REPLACED = "{what} has been replaced by a later one"
ONE_METHOD = "it was made when only one method was asked"
MEASURED_SINCE = "the finding was measured again"
STATED_SINCE = "an input was stated since"


def evaluation_rows() -> QuerySet[Evaluation]:
    """Evaluations with what their page names."""
    return Evaluation.objects.select_related(
        "operator",
        "entered_by",
        "replaces",
        "finding__aircraft__variant__aircraft_type",
        "finding__panel__material",
        "repair__aircraft__variant__aircraft_type",
        "repair__panel__material",
    )


SUBJECT = (
    "operator",
    "aircraft__operator",
    "aircraft__variant__aircraft_type",
    "section",
    "geometry",
    "panel__section",
    "panel__material",
)
"""What a calculation reads of a finding or repair in the query that finds it."""


def subject_rows(model: type[Row]) -> QuerySet[Row]:
    """Findings or repairs with what a calculation reads of them."""
    return model._default_manager.select_related(*SUBJECT)


def evaluations_with_subjects() -> QuerySet[Evaluation]:
    """Evaluations with what calculating them again reads of their subjects."""
    held = [f"{of}__{name}" for of in ("finding", "repair") for name in SUBJECT]
    return Evaluation.objects.select_related("operator", *held)


def subjects_numbered(number: str, operator: str = "") -> list[Finding | Repair]:
    """Findings or repairs of a number, of one operator or of all; two queries."""
    mine = Q(number=number) & (Q(operator__code=operator) if operator else Q())
    return [*subject_rows(Finding).filter(mine), *subject_rows(Repair).filter(mine)]


def detectable_sizes(made: AircraftType) -> QuerySet[DetectableSize]:
    """Detectable sizes of a type that hold, by method and place."""
    rows = made.detectable_sizes.filter(replaced_by__isnull=True)
    return rows.order_by("method", "detail")


def evaluations_of(subject: Finding | Repair) -> QuerySet[Evaluation]:
    """All evaluations of a finding or repair, the newest first."""
    held = "finding" if isinstance(subject, Finding) else "repair"
    return Evaluation.objects.filter(**{held: subject})


def evaluation_current(subject: Finding | Repair, use: str) -> Evaluation | None:
    """The evaluation of a use that nothing replaces; one query."""
    rows = evaluations_of(subject).filter(use=use, replaced_by__isnull=True)
    return rows.order_by("-entered_at", "-pk").first()


def evaluations_current(subject: Finding | Repair) -> list[Evaluation]:
    """The current evaluation of each use; one query."""
    rows = evaluations_of(subject).filter(replaced_by__isnull=True)
    return list(with_state(rows).order_by("use", "-pk"))


def with_state(rows: QuerySet[Evaluation]) -> QuerySet[Evaluation]:
    """Rows with what the approvals say of each, for lists."""

    def signed(*meanings: str) -> Exists:
        return Exists(
            Approval.objects.filter(evaluation=OuterRef("pk"), meaning__in=meanings)
        )

    return rows.annotate(
        is_approved=signed(*APPROVING),
        is_checked=signed(Meaning.CHECKED),
        is_rejected=signed(Meaning.REJECTED),
        is_superseded=Exists(Evaluation.objects.filter(replaces=OuterRef("pk"))),
    )


def evaluation_state(evaluation: Evaluation) -> str:
    """Unchecked, checked, approved or superseded; one query."""
    row = with_state(Evaluation.objects.filter(pk=evaluation.pk)).get()
    return state_of(row)


def state_of(row: Evaluation) -> str:
    """The state of a row that `with_state` made; no query."""
    if row.is_superseded:  # type: ignore[attr-defined]
        return SUPERSEDED
    if row.is_rejected:  # type: ignore[attr-defined]
        return UNCHECKED
    if row.is_approved:  # type: ignore[attr-defined]
        return APPROVED
    return CHECKED if row.is_checked else UNCHECKED  # type: ignore[attr-defined]


def evaluations_stale(
    rows: QuerySet[Evaluation], versions: Mapping[str, int]
) -> QuerySet[Evaluation]:
    """Those whose methods or whose read rows have since changed."""
    newer_method = Q(methods="")  # made before every method was asked
    for method, version in versions.items():
        asked = Q(methods__contains=f"|{method}@")
        newer_method |= asked & ~Q(methods__contains=f"|{method}@{version}|")
    return rows.filter(
        newer_method
        | Exists(_changed_inputs().filter(evaluation=OuterRef("pk")))
        | Exists(_measured_again())
        | Exists(_stated_since())
    )


def _changed_inputs() -> QuerySet[EvaluationInput]:
    """Input rows that were replaced, and panels that the geometry in force alters."""
    replaced = Q()
    for name in REPLACED_ROWS:
        replaced |= Q(**{f"{name}__replaced_by__isnull": False})
    same = Panel.objects.filter(
        geometry__state="published",
        section=OuterRef("panel__section"),
        label=OuterRef("panel__label"),
        content_digest=OuterRef("used_digest"),
    )
    return EvaluationInput.objects.filter(
        replaced | Q(panel__isnull=False) & ~Exists(same)
    )


def _measured_again() -> QuerySet[Measurement]:
    """Measurements of the evaluated finding entered after the evaluation."""
    return Measurement.objects.filter(
        Q(finding=OuterRef("finding"))
        | Q(finding__repair_rows__repair=OuterRef("repair")),
        entered_at__gt=OuterRef("entered_at"),
    )


def _stated_since() -> QuerySet[StatedInput]:
    """Inputs stated for the evaluated subject after the evaluation."""
    return StatedInput.objects.filter(
        Q(finding=OuterRef("finding")) | Q(repair=OuterRef("repair")),
        entered_at__gt=OuterRef("entered_at"),
    )


def stale_reasons(evaluation: Evaluation, versions: Mapping[str, int]) -> list[str]:
    """Why an evaluation is stale, in words; empty when it is not."""
    reasons = [] if evaluation.methods else [ONE_METHOD]
    for method, then in methods_asked(evaluation):
        now = versions.get(method)
        if now is not None and now != then:
            reasons.append(METHOD_CHANGED.format(name=method, now=now, then=then))
    for row in _changed_inputs().filter(evaluation=evaluation):
        used = next(
            name for name in ("panel", *REPLACED_ROWS) if getattr(row, f"{name}_id")
        )
        value = getattr(row, used)
        reasons.append(
            PANEL_CHANGED.format(panel=value)
            if used == "panel"
            else ROW_REPLACED.format(what=f"{used.replace('_', ' ')} “{value}”")
        )
    again = Evaluation.objects.filter(Exists(_measured_again()), pk=evaluation.pk)
    if again.exists():
        reasons.append(MEASURED_SINCE)
    if Evaluation.objects.filter(Exists(_stated_since()), pk=evaluation.pk).exists():
        reasons.append(STATED_SINCE)
    return reasons


def methods_asked(evaluation: Evaluation) -> list[tuple[str, int]]:
    """Every method that was asked, with its version then."""
    pairs = (part.split("@") for part in evaluation.methods.split("|") if part)
    return [(name, int(version)) for name, version in pairs]


@dataclass(frozen=True, slots=True)
class InputRow:
    """A record an evaluation was read from, and whether it still reads the same."""

    what: str
    name: str
    agrees: bool


def input_rows(evaluation: Evaluation) -> list[InputRow]:
    """The records an evaluation rests on."""
    rows = evaluation.input_rows.select_related("panel", *REPLACED_ROWS)
    found = []
    for row in rows:
        used = next(
            name for name in ("panel", *REPLACED_ROWS) if getattr(row, f"{name}_id")
        )
        value = getattr(row, used)
        now = value.content_digest if used == "panel" else row_digest(value)
        found.append(
            InputRow(used.replace("_", " "), str(value), now == row.used_digest)
        )
    return found
