"""The bridge between the record and the calculations; the only one there is.

An evaluation is frozen when it is made: inputs, outputs, note and the versions of the
libraries as canonical text under one digest. A later one replaces it; none is edited.
"""

from __future__ import annotations

import datetime as dt
import json
from collections.abc import Sequence
from typing import Any

from django.core.exceptions import ValidationError
from django.db import models

from fleet.canonical import canonical, digest
from fleet.digests import row_digest
from fleet.models import (
    AdoptedValue,
    DetectableSize,
    Material,
    Panel,
    PanelOnAircraft,
    Policy,
    Spectrum,
    User,
)
from fleet.models import FatiguePolicy as PolicyRow
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from fleet.services.numbers import numbers_next
from repairs.analysis.coverage import COVERAGE_KEY, COVERAGE_VERSION
from repairs.analysis.registry import METHODS
from repairs.analysis.types import Outcome, Result, Use
from repairs.models import (
    Evaluation,
    EvaluationInput,
    Finding,
    Measurement,
    StatedInput,
)
from repairs.selectors.evaluations import evaluation_current
from repairs.services.evaluation_gathered import Choice, UsedRow
from repairs.services.evaluation_inputs import used_rows
from repairs.services.evaluation_place import Subject
from repairs.services.evaluation_prepare import Prepared, evaluation_prepare

SCHEMA_VERSION = 2
SUPERSEDED = "{number} was superseded by {by}; evaluate again from that one."

_INPUT_COLUMN: dict[type[models.Model], str] = {
    Panel: "panel",
    PanelOnAircraft: "panel_on_aircraft",
    Material: "material",
    Spectrum: "spectrum",
    Measurement: "measurement",
    PolicyRow: "fatigue_policy",
    DetectableSize: "detectable_size",
    AdoptedValue: "adopted_value",
    Policy: "policy",
    StatedInput: "stated_input",
}


def method_versions() -> dict[str, int]:
    """Version of every method there is, and of which damage asks which, by id."""
    versions = {name: method.version for name, method in METHODS.items()}
    return {**versions, COVERAGE_KEY: COVERAGE_VERSION}


def evaluation_make(
    *,
    subject: Subject,
    choice: Choice,
    as_of: dt.date,
    actor: User | None,
    at: dt.datetime,
) -> Evaluation:
    """A new evaluation of a subject, in place of the current one of its use."""
    with Writing(
        actor=actor,
        action="evaluation_make",
        at=at,
        operator=subject.operator,
        stream=stream_of(subject.aircraft),
    ) as w:
        return evaluation_write(w, subject=subject, choice=choice, as_of=as_of)


def evaluation_write(
    w: Writing, *, subject: Subject, choice: Choice, as_of: dt.date
) -> Evaluation:
    """Inside a writing: the evaluation with a row for each record it was read from."""
    w.locked(type(subject).objects.all(), pk=subject.pk)
    prepared = evaluation_prepare(subject=subject, choice=choice, as_of=as_of)
    before = evaluation_current(subject, choice.use)
    return evaluations_keep(w, [(subject, before, prepared)])[0]


def evaluations_keep(
    w: Writing, made: Sequence[tuple[Subject, Evaluation | None, Prepared]]
) -> list[Evaluation]:
    """Inside a writing: calculations of one operator kept, each in place of another."""
    if not made:
        return []
    operator = made[0][0].operator
    numbers = numbers_next(w, operator=operator, kind="E", count=len(made))
    rows = w.create_many(
        [
            _row(subject, number, before, prepared)
            for number, (subject, before, prepared) in zip(numbers, made, strict=True)
        ]
    )
    w.create_many(
        [
            EvaluationInput(
                evaluation=row,
                number=position,
                used_digest=_digest_of(used),
                **{_INPUT_COLUMN[type(used)]: used},
            )
            for row, (_, _, prepared) in zip(rows, made, strict=True)
            for position, used in enumerate(used_rows(prepared.gathered), start=1)
        ]
    )
    return rows


def gives_the_same(evaluation: Evaluation, prepared: Prepared) -> bool:
    """Whether a calculation made again says, to the bit, what the kept one says."""
    again = prepared.texts
    same = all(getattr(evaluation, name) == text for name, text in again.items())
    used = [_digest_of(row) for row in used_rows(prepared.gathered)]
    return (
        same
        and evaluation.methods == prepared.assessment.versions
        and used == list(evaluation.input_rows.values_list("used_digest", flat=True))
    )


def evaluation_remake(
    *,
    evaluation: Evaluation,
    as_of: dt.date,
    actor: User | None,
    at: dt.datetime,
) -> Evaluation:
    """The same question to the record as it stands; the old answer is superseded."""
    later = Evaluation.objects.filter(replaces=evaluation).first()
    if later is not None:
        raise ValidationError(SUPERSEDED.format(number=evaluation, by=later))
    subject: Any = evaluation.finding or evaluation.repair
    return evaluation_make(
        subject=subject, choice=choice_of(evaluation), as_of=as_of, actor=actor, at=at
    )


def choice_of(evaluation: Evaluation) -> Choice:
    """What was chosen when an evaluation was made; its detectable size as it is now."""
    used = evaluation.input_rows.filter(detectable_size__isnull=False).first()
    size = used.detectable_size if used else None
    while size is not None and hasattr(size, "replaced_by"):
        size = size.replaced_by
    stated = evaluation_data(evaluation)["inputs"].get("life_used_reason")
    return Choice(Use(evaluation.use), size, stated["value"] if stated else "")


def evaluation_data(evaluation: Evaluation) -> dict[str, Any]:
    """The frozen texts of an evaluation as data."""
    return {
        name: json.loads(getattr(evaluation, name))
        for name in ("inputs", "outputs", "applicability", "note", "libraries")
    }


def _digest_of(row: UsedRow) -> str:
    """A panel is compared by its engineering columns, any other row by all of them."""
    return row.content_digest if isinstance(row, Panel) else row_digest(row)


def _row(
    subject: Subject, number: str, before: Evaluation | None, prepared: Prepared
) -> Evaluation:
    result, texts = prepared.result, prepared.texts
    held = "finding" if isinstance(subject, Finding) else "repair"
    return Evaluation(
        operator=subject.operator,
        number=number,
        use=result.use.value,
        outcome=result.outcome.value,
        method=result.method,
        method_version=result.version,
        methods=prepared.assessment.versions,
        schema_version=SCHEMA_VERSION,
        content_digest=digest(canonical({"number": number, **texts})),
        governing=result.governing,
        ultimate_kept=result.ultimate_kept.value,
        source_from_memory=result.source_from_memory,
        barred_reason=" ".join(result.barred),
        replaces=before,
        **{held: subject},
        **texts,
        **(_numbers(result) if result.outcome is Outcome.COMPUTED else {}),
    )


def _numbers(result: Result) -> dict[str, object]:
    """The columns that are queried; only a computed evaluation has them."""
    threshold, repeat = result.threshold, result.repeat
    capped = (part.cap for part in (threshold, repeat) if part is not None and part.cap)
    return {
        "residual_strength_mpa": result.residual_strength_mpa,
        "required_residual_mpa": result.required_residual_mpa,
        "residual_case": result.residual_case,
        "margin_residual": result.margin_residual,
        "ultimate_mpa": result.ultimate_mpa,
        "ultimate_case": result.ultimate_case,
        "margin_ultimate": result.margin_ultimate,
        "life_cycles": result.life_cycles,
        "life_base": result.life_base,
        "usable_life_cycles": result.life_after_factor_cycles,
        "scatter_factor": result.scatter_factor,
        "threshold_cycles": result.threshold_cycles,
        "threshold_base": threshold.base if threshold else "",
        "repeat_cycles": result.repeat_cycles,
        "uncapped_threshold_cycles": threshold.uncapped if threshold else None,
        "uncapped_repeat_cycles": repeat.uncapped if repeat else None,
        "cap": ", ".join(dict.fromkeys(capped)),
    }
