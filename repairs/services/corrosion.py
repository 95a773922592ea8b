"""The corrosion level of a finding: by a person, under stated definitions."""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass, fields

from django.core.exceptions import ValidationError

from fleet.models import Person, User
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from repairs.models import ASIDE_STATES, CorrosionLevel, Finding
from repairs.selectors.report_triggers import level_now
from repairs.services.authority import ASSESSORS, authorised, operator_on
from repairs.services.reports import finding_questions_write

NOT_CORROSION = "{number} is a {damage_type}; only corrosion has a corrosion level."
SET_ASIDE = "{number} is {state}; its level is that of the finding that counts."
DEFINITIONS_NEEDED = (
    "Name the document and paragraph whose wording of the levels was used: the "
    "sources differ."
)
TASK_NEEDED = "Name the task or area of the corrosion programme."
BEFORE_FOUND = "Determined on {day}, before {number} was found on {found_on}."
INSPECTED_AFTER = "The last inspection, {day}, is not before the find on {found_on}."


@dataclass(frozen=True, slots=True)
class LevelEntry:
    """A level as determined; what is left out is unknown, not "no"."""

    level: int
    definitions: str
    task: str
    determined_by: Person
    determined_on: dt.date
    first_inspection: bool | None = None
    last_inspected_on: dt.date | None = None
    spread: str = "unknown"
    single_rework: str = "unknown"
    cumulative: str = "unknown"
    programme_action: str = ""
    fleet_action: str = ""


def corrosion_level_determine(
    *, finding: Finding, entry: LevelEntry, actor: User | None, at: dt.datetime
) -> CorrosionLevel:
    """The level, or its correction: a new row that replaces the one before.

    From level 2 on it asks whether the finding is reportable.
    """
    with Writing(
        actor=actor,
        action="corrosion_level_determine",
        at=at,
        operator=finding.aircraft.operator,
        stream=stream_of(finding.aircraft),
    ) as w:
        row = w.locked(Finding.objects.select_related("aircraft"), pk=finding.pk)
        return corrosion_level_write(w, finding=row, entry=entry)


def corrosion_level_write(
    w: Writing, *, finding: Finding, entry: LevelEntry
) -> CorrosionLevel:
    """Inside a writing: guards, the row, and the question on reporting."""
    if wrong := _wrong(finding, entry):
        raise ValidationError(wrong)
    authorised(
        person=entry.determined_by,
        operator=operator_on(finding.aircraft, entry.determined_on),
        scopes=ASSESSORS,
        on=entry.determined_on,
    )
    names = [one.name for one in fields(LevelEntry)]
    columns = {name: getattr(entry, name) for name in names}
    level = w.create(
        CorrosionLevel(finding=finding, replaces=level_now(finding), **columns)
    )
    finding_questions_write(w, finding)
    return level


def _wrong(finding: Finding, entry: LevelEntry) -> dict[str, list[str]]:
    wrong: dict[str, list[str]] = {}
    if finding.damage_type != "corrosion":
        words = finding.get_damage_type_display()
        text = NOT_CORROSION.format(number=finding, damage_type=words)
        wrong["level"] = [text]
    if finding.state in ASIDE_STATES:
        text = SET_ASIDE.format(number=finding, state=finding.get_state_display())
        wrong["level"] = [text]
    if not entry.definitions.strip():
        wrong["definitions"] = [DEFINITIONS_NEEDED]
    if not entry.task.strip():
        wrong["task"] = [TASK_NEEDED]
    if entry.determined_on < finding.found_on:
        text = BEFORE_FOUND.format(
            day=entry.determined_on, number=finding, found_on=finding.found_on
        )
        wrong["determined_on"] = [text]
    last = entry.last_inspected_on
    if last is not None and last >= finding.found_on:
        text = INSPECTED_AFTER.format(day=last, found_on=finding.found_on)
        wrong["last_inspected_on"] = [text]
    return wrong
