"""Intake of an aircraft with a past: what stands on it, held against its records.

Lines of the sheet are never refused for their location. Comparing gives every line and
every record of the area one of three outcomes; a thing found that is not recorded opens
an engineering item on the due list until somebody answers for it.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass

from django.core.exceptions import ValidationError
from django.db.models import Max

from fleet.due import Due
from fleet.models import Aircraft, Person, User
from fleet.selectors.people import policy
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from fleet.services.parts import counter_columns
from repairs.models import DueKind, Finding, Repair, Survey, SurveyItem
from repairs.models.columns import Place
from repairs.selectors.surveys import (
    Record,
    item_key,
    record_key,
    record_words,
    records_in_sight,
)
from repairs.services.authority import operator_on
from repairs.services.due_points import due_point_open, due_points_close
from repairs.services.places import place_columns_of, place_try
from repairs.services.survey_entry import SurveyEntry, entry_problems, sheet_keep
from repairs.sheet_lines import SheetLine

ANSWER_DAYS = "survey_answer_days"
PLACE_COLUMNS = tuple(one.name for one in Place._meta.get_fields())

CLOSED = "{survey} of {aircraft} was closed on {day} by {person}; it stays as it is."
NO_LINES = "No line has a location; write at least one."
NO_LOCATION = "Line {number} has no location; write where it is, in any words."
EMPTY_SHEET = (
    "No line of the sheet is entered yet, so every record of the area would count as "
    "not found. Enter the lines first."
)
ELSEWHERE = "{record} is not on {aircraft}."
ANSWERED = "Item {number} was answered on {day} by {person}; the answer stays."
NOT_ON_SHEET = "Item {number} is no line of the sheet; match the line that shows it."
COMPARE_FIRST = (
    "Compare the sheet with the records first; item {number} has no outcome."
)
MATCHED = "Item {number} is matched to {record}; there is no difference to answer."
WORDS_NEEDED = "Say how the difference was settled."
BEFORE_SURVEY = "{day} lies before the survey of {surveyed_on}."
UNSETTLED = "{words}: {numbers}"
NOT_COMPARED = "not compared yet: {records}"
STILL_OPEN = "A survey is closed when every item is matched or answered. Open: {open}."
NO_POLICY = "no policy {key} is recorded for {operator}; record it with its source"
BASIS = (
    "survey {number} of {day}: found, not recorded; answer within {days} days "
    "({source})"
)
BASIS_NOW = "survey {number} of {day}: found, not recorded"
MATCHED_TO = "matched to {record}"
ANSWERED_BY = "answered: {answer}"


@dataclass(frozen=True, slots=True)
class Compared:
    """How many differences comparing showed."""

    recorded_not_found: int
    found_not_recorded: int


def survey_open(
    *, entry: SurveyEntry, today: dt.date, actor: User | None, at: dt.datetime
) -> Survey:
    """A survey, open for its lines; its number follows the aircraft's last."""
    if problems := entry_problems(entry, today):
        raise ValidationError(problems)
    with _writing("survey_open", entry.aircraft, actor, at) as w:
        aircraft = w.locked(Aircraft.objects.all(), pk=entry.aircraft.pk)
        operator = operator_on(entry.aircraft, entry.surveyed_on)
        last = aircraft.surveys.aggregate(last=Max("number"))["last"] or 0
        return w.create(
            Survey(
                operator=operator,
                aircraft=entry.aircraft,
                number=last + 1,
                area=" ".join(entry.area.split()),
                surveyed_on=entry.surveyed_on,
                surveyed_by=entry.surveyed_by,
                document=sheet_keep(w, entry),
                **counter_columns("at", entry.at),
            )
        )


def survey_item_record(
    *, survey: Survey, lines: Sequence[SheetLine], actor: User | None, at: dt.datetime
) -> list[SurveyItem]:
    """Lines of the sheet, all or none; what cannot be placed is kept as written."""
    if not lines:
        raise ValidationError(NO_LINES)
    lacking = [n for n, line in enumerate(lines, 1) if not line.place_entered.strip()]
    if lacking:
        raise ValidationError([NO_LOCATION.format(number=n) for n in lacking])
    with _writing("survey_item_record", survey.aircraft, actor, at) as w:
        row = open_survey(w, survey)
        first = _last_number(row) + 1
        return [
            w.create(_item(row, number, line))
            for number, line in enumerate(lines, first)
        ]


def survey_compare(*, survey: Survey, actor: User | None, at: dt.datetime) -> Compared:
    """Give an outcome to each line nobody matched and to each record nobody saw.

    Lines become found, not recorded; records of the area become items of their own:
    recorded, not found. What has its outcome already keeps it.
    """
    with _writing("survey_compare", survey.aircraft, actor, at) as w:
        row = open_survey(w, survey)
        items = list(row.items.select_related("finding", "repair", "survey__aircraft"))
        if not items:
            raise ValidationError(EMPTY_SHEET)
        waiting = [item for item in items if item.outcome == "to_match"]
        for item in waiting:
            w.change(item, outcome="found_not_recorded")
            _engineering_open(w, item)
        unseen = _unseen(row, items)
        for number, record in enumerate(unseen, _last_number(row) + 1):
            w.create(_not_found(row, number, record))
    return Compared(len(unseen), len(waiting))


def survey_match(
    *, item: SurveyItem, record: Record | None, actor: User | None, at: dt.datetime
) -> SurveyItem:
    """The line is this record; without one, the match is taken back."""
    with _writing("survey_match", item.survey.aircraft, actor, at) as w:
        survey = open_survey(w, item.survey)
        row = w.locked(
            SurveyItem.objects.select_related("survey__aircraft"), pk=item.pk
        )
        if row.answer:
            raise ValidationError(_answered(row))
        if row.seen_as == "nothing":
            raise ValidationError(NOT_ON_SHEET.format(number=row.number))
        before = row.record
        if record is not None and record.aircraft_id != survey.aircraft_id:
            text = ELSEWHERE.format(record=record, aircraft=survey.aircraft)
            raise ValidationError(text)
        w.change(
            row,
            outcome="to_match" if record is None else "matched",
            finding_id=record.pk if isinstance(record, Finding) else None,
            repair_id=record.pk if isinstance(record, Repair) else None,
        )
        if record is not None:
            reason = MATCHED_TO.format(record=record)
            due_points_close(w, origin=row, on=w.at.date(), reason=reason)
            _counterpart(w, survey, record, "matched")
        if before is not None and before != record:
            _counterpart(w, survey, before, "recorded_not_found")
    return row


def survey_close(
    *, survey: Survey, person: Person, on: dt.date, actor: User | None, at: dt.datetime
) -> Survey:
    """Closed by a named person, once nothing is left without a match or an answer."""
    with _writing("survey_close", survey.aircraft, actor, at) as w:
        row = open_survey(w, survey)
        if on < row.surveyed_on:
            raise ValidationError(
                {"on": BEFORE_SURVEY.format(day=on, surveyed_on=row.surveyed_on)}
            )
        if problems := close_problems(row):
            raise ValidationError(STILL_OPEN.format(open="; ".join(problems)))
        w.change(row, state="closed", closed_on=on, closed_by_id=person.pk)
    return row


def close_problems(survey: Survey) -> list[str]:
    """What stands between an open survey and its closing; empty: nothing."""
    items = list(survey.items.select_related("finding", "repair"))
    problems = []
    for outcome, words in (
        ("to_match", "still to match"),
        ("found_not_recorded", "found, not recorded"),
        ("recorded_not_found", "recorded, not found"),
    ):
        left = [x.number for x in items if x.outcome == outcome and not x.settled]
        if left:
            numbers = ", ".join(map(str, left))
            problems.append(UNSETTLED.format(words=words, numbers=numbers))
    if unseen := _unseen(survey, items):
        records = ", ".join(map(str, unseen))
        problems.append(NOT_COMPARED.format(records=records))
    return problems


def answerable(item: SurveyItem, answer: str, on: dt.date) -> None:
    """ValidationError unless the item is a difference that waits for its answer."""
    survey = item.survey
    if item.answer:
        raise ValidationError(_answered(item))
    if item.outcome == "to_match":
        raise ValidationError(COMPARE_FIRST.format(number=item.number))
    if item.outcome == "matched":
        raise ValidationError(MATCHED.format(number=item.number, record=item.record))
    if not answer.strip():
        raise ValidationError({"answer": WORDS_NEEDED})
    if on < survey.surveyed_on:
        text = BEFORE_SURVEY.format(day=on, surveyed_on=survey.surveyed_on)
        raise ValidationError({"on": text})


def open_survey(w: Writing, survey: Survey) -> Survey:
    """The survey, held before any of its items; ValidationError once it is closed."""
    row = w.locked(Survey.objects.select_related("aircraft__operator"), pk=survey.pk)
    if row.state == "closed":
        raise ValidationError(
            CLOSED.format(
                survey=row,
                aircraft=row.aircraft,
                day=row.closed_on,
                person=row.closed_by,
            )
        )
    return row


def _writing(
    action: str, aircraft: Aircraft, actor: User | None, at: dt.datetime
) -> Writing:
    return Writing(
        actor=actor,
        action=action,
        at=at,
        operator=aircraft.operator,
        stream=stream_of(aircraft),
    )


def _item(survey: Survey, number: int, line: SheetLine) -> SurveyItem:
    placed = place_try(survey.aircraft, line.place_entered)
    return SurveyItem(
        survey=survey,
        number=number,
        seen_as=line.seen_as,
        description=line.description,
        length_mm=line.length_mm,
        width_mm=line.width_mm,
        **place_columns_of(placed),
    )


def _not_found(survey: Survey, number: int, record: Record) -> SurveyItem:
    """A record with nothing seen, at the record's own place."""
    return SurveyItem(
        survey=survey,
        number=number,
        outcome="recorded_not_found",
        seen_as="nothing",
        description=record_words(record),
        finding=record if isinstance(record, Finding) else None,
        repair=record if isinstance(record, Repair) else None,
        **{name: getattr(record, name) for name in PLACE_COLUMNS},
    )


def _unseen(survey: Survey, items: Sequence[SurveyItem]) -> list[Record]:
    """Records of the area that no item names yet."""
    named = {item_key(item) for item in items}
    inside, _ = records_in_sight(survey)
    return [row for row in inside if record_key(row) not in named]


def _counterpart(w: Writing, survey: Survey, record: Record, outcome: str) -> None:
    """The record's own item follows what the lines of the sheet now say of it."""
    column = "finding" if isinstance(record, Finding) else "repair"
    rows = survey.items.filter(**{column: record}, answer="")
    if outcome == "recorded_not_found" and rows.exclude(seen_as="nothing").exists():
        return
    for row in rows.filter(seen_as="nothing").exclude(outcome=outcome):
        w.change(row, outcome=outcome)


def _engineering_open(w: Writing, item: SurveyItem) -> None:
    """Due by the policy's days from the survey; with no policy recorded, at once."""
    survey = item.survey
    row = policy(survey.aircraft.operator, ANSWER_DAYS, survey.surveyed_on)
    facts = {"number": survey.number, "day": survey.surveyed_on}
    if row is None:
        missing = NO_POLICY.format(key=ANSWER_DAYS, operator=survey.aircraft.operator)
        due, basis = Due(cannot_compute=missing), BASIS_NOW.format(**facts)
    else:
        source = f"{row.source} {row.edition}".strip()
        due = Due(on=survey.surveyed_on + dt.timedelta(days=row.value))
        basis = BASIS.format(**facts, days=row.value, source=source)
    due_point_open(
        w,
        origin=item,
        kind=DueKind.ENGINEERING,
        due=due,
        opened_on=survey.surveyed_on,
        basis=basis,
    )


def _answered(item: SurveyItem) -> str:
    return ANSWERED.format(
        number=item.number, day=item.answered_on, person=item.answered_by
    )


def _last_number(survey: Survey) -> int:
    last: int | None = survey.items.aggregate(last=Max("number"))["last"]
    return last or 0
