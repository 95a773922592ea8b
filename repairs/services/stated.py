"""Inputs an engineer states for one finding or repair, with the document they are from.

A stated input goes before what the type says, for that place alone. A later statement
replaces an earlier one, or takes it back; both stay on record.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterator
from dataclasses import dataclass

from django.core.exceptions import ValidationError

from fleet.models import Person, Spectrum, User
from fleet.refusals import Refused
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from fleet.units import UnitError
from repairs.analysis.input_specs import InputSpec
from repairs.analysis.inputs import SPECS
from repairs.analysis.scatter.factors import FatiguePolicy
from repairs.analysis.spectra.plain import Kind
from repairs.analysis.types import Sourced, Stated
from repairs.input_text import Bounds, Read, input_read, input_write
from repairs.models import Finding, StatedInput
from repairs.selectors.neighbours import section_geometry
from repairs.selectors.spectra import spectra_in_force
from repairs.selectors.stated import stated_inputs, stated_rows, stated_source
from repairs.services.evaluation_place import Subject
from repairs.services.evaluation_spectrum import SPECTRUM, row_kind

NO_PERSON = (
    "Your login has no person behind it; an administrator links one before you state "
    "an input."
)
NOT_STATED = "“{name}” is no input that may be stated; state one of: {names}."
NOT_OFFERED = "“{word}” is no answer here; state one of: {words}."
NO_SPECTRUM = "No spectrum in force is chosen; choose one of the list."
NOT_HERE = (
    "{row} is the standard wing sequence, which holds for the lower surface of a "
    "transport's wing only; choose a spectrum of this place."
)
NOTHING = "Nothing was stated; to withdraw what holds, take it back."
GONE = "This no longer holds: it was replaced or taken back before."
NO_REASON = "Say why it is taken back."

POSITIVE, NOT_BELOW_ZERO = Bounds(0, strict=True), Bounds(0)
FACTOR = Bounds(1, 100)
SIGNED_UNITS = frozenset({"MPa", "N", "N*mm"})
MAY_BE_NOUGHT = ("uncertainty", "_depth", "_distance")
BOUNDS: dict[str, Bounds] = {
    "load_transfer": Bounds(0, 1),
    "cycle_ratio": Bounds(-10, 1),
    "flight_smallest_share": Bounds(-10, 1),
    "clad_thickness": NOT_BELOW_ZERO,
    "member_lost_area": NOT_BELOW_ZERO,
    "wheeler_exponent": NOT_BELOW_ZERO,
    "shut_off_ratio": Bounds(1),
    "bearing_strength": POSITIVE,
    "fastener_strength": POSITIVE,
    "stiffener_strength": POSITIVE,
    "stiffener_modulus": POSITIVE,
    "member_crippling": POSITIVE,
    "member_yield": POSITIVE,
    "member_ultimate": POSITIVE,
    "member_compression_yield": POSITIVE,
    "member_shear_strength": POSITIVE,
    "member_modulus": POSITIVE,
    "neighbour_count": Bounds(1, 2),
    "neighbour_strength": POSITIVE,
    "dynamic_factor": Bounds(1, 2),
}
"""What differs from the rule: stresses, forces and moments have a sign, sizes none."""


@dataclass(frozen=True, slots=True)
class Document:
    """What an input was read from."""

    reference: str
    page: str
    revision: str = ""


def statable() -> Iterator[InputSpec]:
    """Inputs that may be stated: numbers, a spectrum, and words with their answers."""
    for spec in SPECS.values():
        number = spec.kind is Sourced or spec.name == SPECTRUM
        if spec.may_be_stated and (number or spec.words):
            yield spec


def spec_of(name: str) -> InputSpec:
    """The input of a name, if it may be stated."""
    known = {spec.name: spec for spec in statable()}
    if name not in known:
        raise Refused([NOT_STATED.format(name=name, names=", ".join(known))])
    return known[name]


def bounds_of(spec: InputSpec) -> Bounds:
    """What a number may be."""
    if spec.kind is FatiguePolicy:
        return FACTOR
    if spec.name in BOUNDS:
        return BOUNDS[spec.name]
    if spec.unit in SIGNED_UNITS:
        return Bounds()
    may_be_none = spec.unit == "cycles" or spec.name.endswith(MAY_BE_NOUGHT)
    return NOT_BELOW_ZERO if may_be_none else POSITIVE


def stated_read(spec: InputSpec, text: str) -> Read:
    """A number as typed, with its unit; refused with what was read and expected."""
    try:
        read = input_read(text, spec.unit)
        bounds_of(spec).check(read.value, text.strip(), spec.title)
    except UnitError as error:
        raise ValidationError({"entered": str(error)}) from error
    return read


def input_state(
    *,
    subject: Subject,
    name: str,
    entered: str,
    document: Document,
    actor: User,
    at: dt.datetime,
    on: dt.date,
) -> StatedInput:
    """State a number with its unit, one of the words, or a spectrum by its key; in
    place of what holds."""
    spec, text = spec_of(name), entered.strip()
    if not text:
        raise ValidationError({"entered": NOTHING})
    value, spread, word, spectrum = None, None, "", None
    if spec.name == SPECTRUM:
        spectrum = _spectrum(text, subject)
    elif spec.kind is Stated:
        word = _word(spec, text)
    else:
        read = stated_read(spec, text)
        value, spread = read.value, read.uncertainty
    with _writing(subject, "input_state", actor, at) as w:
        w.locked(type(subject).objects.all(), pk=subject.pk)
        return w.create(
            StatedInput(
                **_about(subject, name),
                value=value,
                uncertainty=spread,
                word=word,
                spectrum=spectrum,
                entered="" if word or spectrum else text,
                document=document.reference,
                page=document.page,
                revision=document.revision,
                person=_person(actor),
                stated_on=on,
                replaces=stated_last(subject, name),
            )
        )


def input_take_back(
    *, stated: StatedInput, reason: str, actor: User, at: dt.datetime, on: dt.date
) -> StatedInput:
    """What was stated holds no longer; the type's own value, if any, holds again."""
    subject = stated.finding or stated.repair
    assert subject is not None, "a constraint requires one"
    if not reason.strip():
        raise ValidationError({"reason": NO_REASON})
    with _writing(subject, "input_withdraw", actor, at, reason.strip()) as w:
        w.locked(type(subject).objects.all(), pk=subject.pk)
        if not stated_inputs(subject).filter(pk=stated.pk).exists():
            raise Refused([GONE])
        return w.create(
            StatedInput(
                **_about(subject, stated.name),
                document=stated.document,
                page=stated.page,
                revision=stated.revision,
                person=_person(actor),
                stated_on=on,
                replaces=stated,
            )
        )


def stated_last(subject: Subject, name: str) -> StatedInput | None:
    """The last statement of a name, also one that took back; one query."""
    return stated_rows(subject, name).filter(replaced_by__isnull=True).first()


def _held(subject: Subject) -> dict[str, object]:
    return {"finding" if isinstance(subject, Finding) else "repair": subject}


def _about(subject: Subject, name: str) -> dict[str, object]:
    return {"operator": subject.operator, "name": name, **_held(subject)}


def _writing(
    subject: Subject, action: str, actor: User, at: dt.datetime, reason: str = ""
) -> Writing:
    return Writing(
        actor=actor,
        action=action,
        at=at,
        operator=subject.operator,
        stream=stream_of(subject.aircraft),
        reason=reason,
    )


def _word(spec: InputSpec, text: str) -> str:
    word = text.lower().replace(" ", "_")
    if word not in spec.words:
        words = ", ".join(one.replace("_", " ") for one in spec.words)
        raise ValidationError({"entered": NOT_OFFERED.format(word=text, words=words)})
    return word


def _spectrum(text: str, subject: Subject) -> Spectrum:
    row = spectra_in_force().filter(pk=int(text) if text.isdigit() else 0).first()
    if row is None:
        raise ValidationError({"entered": NO_SPECTRUM})
    if row_kind(row) == Kind.WING_SEQUENCE and not _wing_lower(subject):
        raise ValidationError({"entered": NOT_HERE.format(row=row)})
    return row


def _wing_lower(subject: Subject) -> bool:
    section = section_geometry(subject)
    wing = section is not None and "wing" in section.words
    return wing and subject.surface == "lower"


def _person(actor: User) -> Person:
    if actor.person is None:
        raise Refused([NO_PERSON])
    return actor.person


@dataclass(frozen=True, slots=True)
class StatedLine:
    """One statement as it is listed: what, the value as typed, from where, by whom."""

    row: StatedInput
    title: str
    value: str
    source: str
    holds: bool
    takes_back: bool


def stated_lines(subject: Subject, name: str = "") -> list[StatedLine]:
    """All that was stated of a subject, or of one input, the newest first; one query.

    Without a name: only what holds.
    """
    rows = (
        stated_rows(subject, name)
        if name
        else StatedInput.objects.filter(**_held(subject))
    )
    found = [
        _line(row)
        for row in rows.select_related("person", "replaced_by", "spectrum").order_by(
            "-pk"
        )
    ]
    return found if name else [line for line in found if line.holds]


def _line(row: StatedInput) -> StatedLine:
    takes_back = row.value is None and not row.word and row.spectrum_id is None
    spec = SPECS.get(row.name)
    return StatedLine(
        row,
        spec.title if spec else row.name.replace("_", " "),
        "taken back" if takes_back else _value(row, spec),
        stated_source(row),
        holds=not takes_back and not hasattr(row, "replaced_by"),
        takes_back=takes_back,
    )


def _value(row: StatedInput, spec: InputSpec | None) -> str:
    """As typed, and in the calculation's unit where that is another."""
    if row.spectrum is not None:
        return str(row.spectrum)
    if row.value is None or spec is None:
        return row.word.replace("_", " ") or row.entered
    again = input_write(row.value, spec.unit)
    return row.entered if row.entered == again else f"{row.entered} ({again})"
