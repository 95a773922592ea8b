"""Measurements of a finding: each measuring is a new row, never an overwrite."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass, field

from django.core.exceptions import ValidationError

from fleet.due import Counters
from fleet.models import Person, User
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from repairs.measured import Hole, Measured, MeasuredError, Typed, measured_read
from repairs.models import (
    Accomplishment,
    Finding,
    FindingQuestion,
    HoleCrack,
    MeasuredValue,
    Measurement,
)
from repairs.plausibility import Question, size_questions

NOTHING_MEASURED = "Give at least one dimension, or say that it is unknown."


@dataclass(frozen=True, slots=True)
class Measuring:
    """One measuring as typed: when, by whom, with what, and the dimensions."""

    typed: Sequence[Typed]
    measured_on: dt.date
    stage: str = "as_found"
    measured_by: Person | None = None
    at: Counters = field(default_factory=Counters)
    method: str = ""
    instrument: str = ""
    light: str = ""
    holes: Sequence[Hole] = ()
    accomplishment: Accomplishment | None = None


def measurement_record(
    *, finding: Finding, measuring: Measuring, actor: User | None, at: dt.datetime
) -> Measurement:
    """A further measuring of a finding, with the questions its sizes raise.

    ValidationError, by quantity, when a dimension cannot be read; a doubtful one is
    saved and asked about.
    """
    with Writing(
        actor=actor,
        action="measurement_record",
        at=at,
        operator=finding.aircraft.operator,
        stream=stream_of(finding.aircraft),
    ) as w:
        w.locked(Finding.objects.all(), pk=finding.pk)
        measurement = measurement_write(w, finding=finding, measuring=measuring)
        if measurement is None:
            raise ValidationError(NOTHING_MEASURED)
        return measurement


def measurement_write(
    w: Writing, *, finding: Finding, measuring: Measuring
) -> Measurement | None:
    """Inside a writing: the measurement, or None when no dimension was stated."""
    measured = typed_read(finding, measuring.typed)
    if not measured and not measuring.holes:
        return None
    measurement = w.create(
        Measurement(
            finding=finding,
            number=finding.measurements.count() + 1,
            stage=measuring.stage,
            measured_on=measuring.measured_on,
            measured_by=measuring.measured_by,
            at_minutes=measuring.at.minutes,
            at_cycles=measuring.at.cycles,
            at_landings=measuring.at.landings,
            at_pressurisations=measuring.at.pressurisations,
            method=measuring.method,
            instrument=measuring.instrument,
            light=measuring.light,
            accomplishment=measuring.accomplishment,
        )
    )
    w.create_many([_value(measurement, one) for one in measured])
    w.create_many([_hole(measurement, one) for one in measuring.holes])
    panel = finding.panel
    asked = size_questions(
        finding.damage_type,
        measured,
        thickness_mm=panel.thickness_mm if panel else None,
        panel=f"panel {panel.label}" if panel else "",
    )
    questions_ask(w, finding, asked, suffix=f"-{measurement.number}")
    return measurement


def typed_read(finding: Finding, typed: Sequence[Typed]) -> list[Measured]:
    """The dimensions as values; ValidationError by quantity."""
    unit = finding.aircraft.variant.aircraft_type.entry_unit
    try:
        return measured_read(finding.damage_type, typed, entry_unit=unit)
    except MeasuredError as error:
        raise ValidationError(error.problems) from error


def questions_ask(
    w: Writing, finding: Finding, questions: Sequence[Question], *, suffix: str = ""
) -> None:
    """Store doubts; they stay open until answered."""
    for question in questions:
        w.create(
            FindingQuestion(
                finding=finding, code=question.code + suffix, asked=question.asked
            )
        )


def _value(measurement: Measurement, one: Measured) -> MeasuredValue:
    return MeasuredValue(
        measurement=measurement,
        quantity=one.quantity,
        status=one.status,
        value=one.value,
        word=one.word,
        entered=one.entered,
        uncertainty=one.uncertainty,
        worked_out=one.worked_out,
    )


def _hole(measurement: Measurement, one: Hole) -> HoleCrack:
    return HoleCrack(
        measurement=measurement,
        hole_number=one.number,
        fore_length_mm=one.fore_length_mm,
        aft_length_mm=one.aft_length_mm,
        hole_diameter_mm=one.diameter_mm,
        pitch_to_next_mm=one.pitch_to_next_mm,
    )
