"""The bridge between the record and the calculations; the only one there is.

An evaluation is frozen when it is made: inputs, outputs, note and the versions of the
libraries as canonical text under one digest. A later one replaces it; none is edited.
"""

from __future__ import annotations

import datetime as dt
import json
import platform
from dataclasses import asdict, dataclass
from typing import Any

import numpy
import scipy
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
from fleet.services.numbers import number_next
from repairs.analysis.growth.laws import WalkerLaw
from repairs.analysis.inputs import SPECS, Inputs
from repairs.analysis.registry import METHODS, NO_METHOD, Method, evaluate, methods_for
from repairs.analysis.scatter.factors import FatiguePolicy
from repairs.analysis.stress_life.curves import StressLifeFamily
from repairs.analysis.types import Outcome, Result, Sourced, Stated, Use
from repairs.evaluation_text import number_text
from repairs.models import (
    Evaluation,
    EvaluationInput,
    Finding,
    Measurement,
    Repair,
)
from repairs.selectors.evaluations import evaluation_current
from repairs.selectors.latest import Latest, measured_of
from repairs.services.evaluation_inputs import (
    Choice,
    Gathered,
    UsedRow,
    gather,
    used_rows,
)
from repairs.services.evaluation_place import Subject

SCHEMA_VERSION = 1
OPTIONAL = (
    "limit_flight_stress",
    "ultimate_running_load",
    "second_growth_law",
    "clad_thickness",
    "clad_life_factor",
    "assumed_flaw",
    "blend_depth",
    "stress_life_policy",
    "growth_policy",
    "repeat_policy",
    "detectable_length",
    "validity_cycles",
    "class_maximum",
    "residual_pressure_factor",
    "ultimate_factor",
    "proof_factor",
    "clearance_multiple",
)
"""Inputs a method uses where they are recorded, in the order they are shown."""
OTHER_TYPE = (
    "{size} is a detectable size of another aircraft type; choose one of {type}."
)
SUPERSEDED = "{number} was superseded by {by}; evaluate again from that one."
AT_A_HOLE = frozenset({"fastener_hole"})
HOLE = "open-or-trimmed-hole"
KNOWN_BY_REWORK = "damage_removed"
REPAIR_METHODS = {"blend": "corrosion-blend-out"}
"""Repairs a method covers; what a doubler does to the skin is not one of them."""

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
}


@dataclass(frozen=True, slots=True)
class Prepared:
    """A calculation made and not yet kept."""

    method: Method | None
    result: Result
    inputs: dict[str, object]
    gathered: Gathered


def method_versions() -> dict[str, int]:
    """Version of every method there is, by id: a stored one that differs is stale."""
    return {name: method.version for name, method in METHODS.items()}


def default_use(subject: Subject) -> Use:
    """What a subject is evaluated for unless someone chooses otherwise.

    Damage that is still there is found damage; a repair, or damage all removed, is
    structure without known crack.
    """
    if not isinstance(subject, Finding):
        return Use.NO_KNOWN_CRACK
    gone = measured_of(subject).word(KNOWN_BY_REWORK) == "yes"
    return Use.NO_KNOWN_CRACK if gone else Use.FOUND_DAMAGE


def choice_from(
    subject: Subject,
    *,
    use: str | None = None,
    detectable: DetectableSize | None = None,
    life_used_reason: str = "",
) -> Choice:
    """A choice as a form or a command gives it; the use follows from the subject."""
    wanted = Use(use) if use else default_use(subject)
    return Choice(wanted, detectable, life_used_reason)


def evaluation_prepare(*, subject: Subject, choice: Choice, as_of: dt.date) -> Prepared:
    """Calculate from the record as it stands, and keep nothing."""
    size = choice.detectable
    made = subject.aircraft.variant.aircraft_type
    if size is not None and size.aircraft_type_id != made.pk:
        raise ValidationError(OTHER_TYPE.format(size=size, type=made))
    measured = measured_of(subject)
    method, cracked = _method(subject, measured)
    if method is None:
        nothing = Result(
            "", 0, "", choice.use, Outcome.NOT_COVERED, warnings=(NO_METHOD,)
        )
        return Prepared(None, nothing, {}, Gathered())
    found = gather(subject, measured, choice, as_of=as_of, cracked_hole=cracked)
    inputs = Inputs(found.values)
    result = evaluate(method.id, choice.use, inputs)
    return Prepared(method, result, inputs.as_data(), found)


@dataclass(frozen=True, slots=True)
class InputLine:
    """One input that a calculation would use, or would need and does not find."""

    title: str
    value: str
    source: str
    grade: str


def input_lines(prepared: Prepared) -> list[InputLine]:
    """The inputs the method would use, in the order of its needs."""
    method = prepared.method
    if method is None:
        return []
    inputs = Inputs(prepared.gathered.values)
    needed = method.required(inputs, prepared.result.use)
    found = prepared.gathered.values
    optional = [name for name in OPTIONAL if name in found and name not in needed]
    return [_input_line(name, prepared.gathered) for name in (*needed, *optional)]


def _input_line(name: str, found: Gathered) -> InputLine:
    spec, value = SPECS[name], found.values.get(name, SPECS[name].default)
    if value is None:
        return InputLine(spec.title, "missing", f"enter it {spec.where}", "")
    if isinstance(value, Sourced):
        number = f"{number_text(value.value)} {value.unit}".strip(" -")
        return InputLine(spec.title, number, value.source, value.grade.value)
    if isinstance(value, Stated):
        return InputLine(spec.title, value.value.replace("_", " "), value.source, "")
    if isinstance(value, WalkerLaw):
        made = value.reference
        return InputLine(spec.title, "Walker", made.source, made.grade.value)
    if isinstance(value, FatiguePolicy):
        factor = value.factor
        return InputLine(
            spec.title, f"{factor.value:g}", factor.source, factor.grade.value
        )
    if isinstance(value, StressLifeFamily):
        factors = ", ".join(f"{curve.kt:g}" for curve in value.curves)
        first = value.curves[0]
        return InputLine(spec.title, f"Kt {factors}", first.source, first.grade.value)
    return InputLine(spec.title, value.bay_label, value.source, "")


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
    number = number_next(w, operator=subject.operator, kind="E")
    before = evaluation_current(subject, choice.use)
    row = w.create(_row(subject, number, before, prepared))
    w.create_many(
        [
            EvaluationInput(
                evaluation=row,
                number=position,
                used_digest=_digest_of(used),
                **{_INPUT_COLUMN[type(used)]: used},
            )
            for position, used in enumerate(used_rows(prepared.gathered), start=1)
        ]
    )
    return row


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


def _method(subject: Subject, measured: Latest) -> tuple[Method | None, bool]:
    """The method for the damage or repair, and whether a crack starts at a hole."""
    if measured.finding is None:
        return None, False
    if isinstance(subject, Repair):
        return METHODS.get(REPAIR_METHODS.get(subject.kind, "")), False
    damage = measured.finding.damage_type
    methods = methods_for(damage)
    if damage == "crack" and measured.word("origin") in AT_A_HOLE:
        return METHODS[HOLE], True
    cracked = damage == "hole" and measured.word("radiating_cracks") == "yes"
    return (methods[0] if methods else None), cracked


def _digest_of(row: UsedRow) -> str:
    """A panel is compared by its engineering columns, any other row by all of them."""
    return row.content_digest if isinstance(row, Panel) else row_digest(row)


def _row(
    subject: Subject, number: str, before: Evaluation | None, prepared: Prepared
) -> Evaluation:
    result = prepared.result
    texts = {
        "inputs": canonical(prepared.inputs),
        "outputs": canonical(_outputs(result)),
        "applicability": canonical([asdict(test) for test in result.applicability]),
        "note": canonical([asdict(line) for line in result.note]),
        "libraries": canonical(_libraries()),
    }
    held = "finding" if isinstance(subject, Finding) else "repair"
    return Evaluation(
        operator=subject.operator,
        number=number,
        use=result.use.value,
        outcome=result.outcome.value,
        method=result.method,
        method_version=result.version,
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


def _outputs(result: Result) -> dict[str, object]:
    """All a result says but note and tests, which have texts of their own."""
    said = asdict(result)
    for name in ("applicability", "note"):
        del said[name]
    return said | {
        "threshold_cycles": result.threshold_cycles,
        "repeat_cycles": result.repeat_cycles,
    }


def _libraries() -> dict[str, str]:
    return {
        "python": platform.python_version(),
        "numpy": numpy.__version__,
        "scipy": scipy.__version__,
    }
