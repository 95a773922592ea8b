"""A calculation made from the record as it stands, and not kept."""

from __future__ import annotations

import datetime as dt
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property

from django.core.exceptions import ValidationError

from fleet.models import DetectableSize
from fleet.selectors.kept import fleet_rows_kept
from fleet.services.chain import stream_end
from repairs.analysis.assessment import Assessment, Part, assess
from repairs.analysis.coverage import groups_for
from repairs.analysis.input_specs import Where
from repairs.analysis.inputs import SPECS, Inputs, Value
from repairs.analysis.inspection.known import Detection
from repairs.analysis.registry import METHODS
from repairs.analysis.scatter.factors import FatiguePolicy
from repairs.analysis.spectra.recorded import RecordedSpectrum
from repairs.analysis.stress_life.curves import StressLifeFamily
from repairs.analysis.surroundings import Surroundings
from repairs.analysis.types import Result, Sourced, Stated, Use
from repairs.input_text import input_number, unit_shown
from repairs.models import Finding
from repairs.selectors.latest import Latest, measured_of
from repairs.services.evaluation_gathered import Choice, Gathered
from repairs.services.evaluation_inputs import gather
from repairs.services.evaluation_measured import subject_words
from repairs.services.evaluation_place import Subject
from repairs.services.evaluation_spectrum import LARGEST, SPECTRUM
from repairs.services.evaluation_texts import texts_of

OTHER_TYPE = (
    "{size} is a detectable size of another aircraft type; choose one of {type}."
)
KNOWN_BY_REWORK = "damage_removed"


@dataclass(frozen=True)
class Prepared:
    """A calculation made and not yet kept."""

    assessment: Assessment
    inputs: Inputs
    gathered: Gathered

    @property
    def result(self) -> Result:
        """What follows from all methods asked."""
        return self.assessment.result

    @cached_property
    def texts(self) -> dict[str, str]:
        """What an evaluation would keep, made once."""
        return texts_of(self.assessment, self.inputs)


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


def evaluation_prepare(
    *,
    subject: Subject,
    choice: Choice,
    as_of: dt.date,
    instead: Mapping[str, Value] | None = None,
) -> Prepared:
    """Calculate from the record as it stands, and keep nothing.

    `instead` puts values in the place of recorded ones: what if.
    """
    size = choice.detectable
    made = subject.aircraft.variant.aircraft_type
    if size is not None and size.aircraft_type_id != made.pk:
        raise ValidationError(OTHER_TYPE.format(size=size, type=made))
    measured = measured_of(subject)
    found = Gathered()
    if _asks(subject, measured):
        with fleet_rows_kept(stream_end("fleet")):
            found = gather(subject, measured, choice, as_of=as_of)
    inputs = Inputs(found.values | dict(instead or {}))
    return Prepared(assess(choice.use, inputs), inputs, found)


def _asks(subject: Subject, measured: Latest) -> bool:
    """Whether any method is for this damage or repair."""
    if measured.finding is None:
        return False
    return bool(groups_for(Inputs(subject_words(subject, measured))))


MISSING, NEEDED, ALSO = (
    "missing",
    "needed by the methods",
    "also on record, used where a method asks",
)
NUMBER, WORD, OTHER = "number", "word", "other"


@dataclass(frozen=True, slots=True)
class InputLine:
    """One input that a calculation would use, or would need and does not find.

    `form` says how a what-if may change it: a number, one of `words`, or not at all.
    """

    name: str
    title: str
    value: str
    unit: str
    source: str
    grade: str
    where: Where
    form: str
    words: tuple[str, ...]
    may_be_stated: bool
    missing: bool = False
    needed: bool = True

    @property
    def group(self) -> str:
        """Which part of the list it stands in."""
        return MISSING if self.missing else NEEDED if self.needed else ALSO


def input_titles() -> dict[str, str]:
    """What every input is called, by its name."""
    return {name: spec.title for name, spec in SPECS.items()}


def input_lines(prepared: Prepared) -> list[InputLine]:
    """What is missing, then what the methods that apply need, then what else they may
    use, each in its order."""
    names: dict[str, None] = {}
    use = prepared.result.use
    for answer in prepared.assessment.answers:
        if answer.part is not Part.NOT_APPLICABLE:
            module = METHODS[answer.result.method].module
            names |= dict.fromkeys(module.required(prepared.inputs, use))
            names |= dict.fromkeys(item.name for item in answer.result.missing)
    if not names:
        return []
    needed, found = set(names), prepared.inputs.values
    if LARGEST in needed and LARGEST not in found:
        names[SPECTRUM] = None
    names |= {
        name: None
        for name, spec in SPECS.items()
        if name in found and spec.kind is not Stated
    }
    lines = [
        _input_line(name, found.get(name, SPECS[name].default), needed=name in needed)
        for name in names
    ]
    return sorted(lines, key=lambda line: not line.missing)


def _input_line(name: str, value: Value | None, *, needed: bool) -> InputLine:
    spec = SPECS[name]
    form = WORD if spec.kind is Stated and spec.words else OTHER
    if spec.kind in (Sourced, FatiguePolicy):
        form = NUMBER
    shown, source, grade = ("", "", "") if value is None else said(value)
    return InputLine(
        name,
        spec.title,
        shown,
        unit_shown(spec.unit),
        source,
        grade,
        spec.where,
        form,
        spec.words,
        spec.may_be_stated and (form != OTHER or name == SPECTRUM),
        missing=value is None,
        needed=needed,
    )


def said(value: Value) -> tuple[str, str, str]:
    """A value without its unit, its source and its grade as text."""
    if isinstance(value, Sourced):
        return input_number(value.value, value.unit), value.source, value.grade.value
    if isinstance(value, Stated):
        return value.value.replace("_", " "), value.source, ""
    if isinstance(value, FatiguePolicy):
        factor = value.factor
        return f"{factor.value:g}", factor.source, factor.grade.value
    if isinstance(value, StressLifeFamily):
        factors = ", ".join(f"{curve.kt:g}" for curve in value.curves)
        first = value.curves[0]
        return f"Kt {factors}", first.source, first.grade.value
    if isinstance(value, Surroundings):
        return value.bay_label, value.source, ""
    if isinstance(value, Detection):
        study = value.curve.study
        return f"half found at {value.curve.a50:.3g} mm", study.source, study.grade
    if isinstance(value, RecordedSpectrum):
        return value.name, value.source, value.grade.value
    law = value.reference
    return type(value).__name__.removesuffix("Law"), law.source, law.grade.value
