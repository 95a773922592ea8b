"""Answers to the differences of a survey, and the records that an answer opens."""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass

from django.core.exceptions import ValidationError

from fleet.due import Counters
from fleet.models import Person, User
from fleet.selectors.life_limits import columns
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from fleet.services.signing import Proof
from fleet.units import measure_write
from repairs.measured import Typed
from repairs.measurements import DIMENSIONS
from repairs.models import Finding, Occasion, Repair, RepairCategory, SurveyItem
from repairs.services.due_points import due_points_close
from repairs.services.findings import FindingEntry, finding_write
from repairs.services.repair_entry import RepairEntry
from repairs.services.repairs import repair_write
from repairs.services.surveys import ANSWERED_BY, answerable, open_survey

NOTHING_TO_OPEN = (
    "Item {number} is recorded, not found: there is nothing seen that a new record "
    "could be of."
)
RELEASED_AFTER = "{day} lies after the survey of {surveyed_on} that saw it."
FROM_SURVEY = "{survey} of {day}, item {number}"
RELEASE_UNKNOWN = (
    "Release date unknown: {day} is taken, the earliest day known of the aircraft, so "
    "that nothing counted from it falls due too late."
)


@dataclass(frozen=True, slots=True)
class NewFinding:
    """Damage that the answer records, at the item's own location."""

    damage_type: str


@dataclass(frozen=True, slots=True)
class LegacyRepair:
    """A repair from before our records, whose evidence nobody has seen."""

    kind: str
    released_on: dt.date | None = None


def survey_item_answer(
    *,
    item: SurveyItem,
    answer: str,
    person: Person,
    on: dt.date,
    actor: User | None,
    at: dt.datetime,
    opens: NewFinding | LegacyRepair | None = None,
) -> SurveyItem:
    """Settle a difference in words; what was found may become a record at once."""
    aircraft = item.survey.aircraft
    with Writing(
        actor=actor,
        action="survey_item_answer",
        at=at,
        operator=aircraft.operator,
        stream=stream_of(aircraft),
        reason=answer.strip(),
    ) as w:
        open_survey(w, item.survey)
        row = w.locked(
            SurveyItem.objects.select_related("survey__aircraft__variant"), pk=item.pk
        )
        answerable(row, answer, on)
        made = _opened(w, row, opens, person)
        w.change(
            row,
            answer=answer.strip(),
            answered_by_id=person.pk,
            answered_on=on,
            finding_id=made.pk if isinstance(made, Finding) else row.finding_id,
            repair_id=made.pk if isinstance(made, Repair) else row.repair_id,
        )
        reason = ANSWERED_BY.format(answer=answer.strip())
        due_points_close(w, origin=row, on=on, reason=reason)
    return row


def _opened(
    w: Writing,
    item: SurveyItem,
    opens: NewFinding | LegacyRepair | None,
    person: Person,
) -> Finding | Repair | None:
    if opens is None:
        return None
    if item.outcome != "found_not_recorded":
        raise ValidationError(NOTHING_TO_OPEN.format(number=item.number))
    if isinstance(opens, NewFinding):
        return finding_write(w, _finding_entry(item, opens))
    return repair_write(w, _repair_entry(item, opens), proof=Proof.by_program(person))


def _finding_entry(item: SurveyItem, opens: NewFinding) -> FindingEntry:
    survey, at = item.survey, columns(item.survey, "at")
    measured = {dimension.quantity for dimension in DIMENSIONS[opens.damage_type]}
    sizes = {"length_mm": item.length_mm, "width_mm": item.width_mm}
    return FindingEntry(
        aircraft=survey.aircraft,
        place_entered=item.place_entered,
        damage_type=opens.damage_type,
        found_on=survey.surveyed_on,
        found_by=survey.surveyed_by,
        typed=[
            Typed(quantity, measure_write(value, "mm"))
            for quantity, value in sizes.items()
            if value is not None and quantity in measured
        ],
        at=None if at == Counters() else at,
        counters_source=str(survey.document or ""),
        occasion=Occasion.OTHER,
        task_reference=_from(item),
        description=item.description,
    )


def _repair_entry(item: SurveyItem, opens: LegacyRepair) -> RepairEntry:
    """Category pending and counters unknown: what follows from them counts as due."""
    survey = item.survey
    day = opens.released_on
    if day is not None and day > survey.surveyed_on:
        text = RELEASED_AFTER.format(day=day, surveyed_on=survey.surveyed_on)
        raise ValidationError({"released_on": text})
    earliest = survey.aircraft.manufactured_on or survey.aircraft.data_from
    told = [item.description, _from(item)]
    if day is None:
        told.append(RELEASE_UNKNOWN.format(day=earliest))
    return RepairEntry(
        aircraft=survey.aircraft,
        place_entered=item.place_entered,
        kind=opens.kind,
        description=". ".join(filter(None, told)),
        category=RepairCategory.PENDING,
        approval_basis="unknown",
        released_on=day or earliest,
        length_mm=item.length_mm,
        width_mm=item.width_mm,
        legacy=True,
        evidence="not_seen",
    )


def _from(item: SurveyItem) -> str:
    return FROM_SURVEY.format(
        survey=item.survey, day=item.survey.surveyed_on, number=item.number
    )
