"""Surveys of an aircraft with a past: sheet against records, until nothing is open."""

from __future__ import annotations

from collections.abc import Sequence
from functools import partial
from typing import Any

from django.contrib import messages
from django.core.exceptions import ValidationError
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import (
    require_http_methods,
    require_POST,
    require_safe,
)

from fleet.access import may, require, visible_or_404
from fleet.clock import now, today
from fleet.models import Person
from fleet.selectors.aircraft import aircraft_own
from fleet.selectors.history import history_of
from fleet.views.requests import Request
from fleet.views.sending import sent
from repairs.forms.surveys import (
    AnswerForm,
    LinesForm,
    OnForm,
    SheetForm,
    SurveyForm,
    unit_words,
)
from repairs.models import Survey, SurveyItem
from repairs.selectors.choices import people_at
from repairs.selectors.surveys import (
    WORDS,
    record_choices,
    record_of,
    survey_items,
    survey_page,
    surveys_of,
    surveys_shown,
)
from repairs.selectors.unknowns import legacy_counts, unknowns
from repairs.services.places import place_try
from repairs.services.survey_answers import survey_item_answer
from repairs.services.survey_entry import SurveyEntry
from repairs.services.surveys import (
    survey_close,
    survey_compare,
    survey_item_record,
    survey_match,
    survey_open,
)
from repairs.sheet_lines import SheetLine

METHODS = ["GET", "HEAD", "POST"]
OPENED = "Survey {number} is open; enter the lines of its sheet."
LINES_KEPT = "{count} of the sheet recorded."
MATCHED = "Item {number} is matched to {record}."
UNMATCHED = "Item {number} is not matched."
NO_RECORD = "Choose the record that item {number} is."
COMPARED = (
    "Compared: {recorded} recorded, not found; {found} found, not recorded, each with "
    "an engineering item on the due list."
)
SETTLED = "Item {number} is answered."
CLOSED = "Survey {number} is closed."
NO_PERSON = "Your login has no person behind it, so it cannot answer for anything."


@require_safe
def survey_list(request: Request, pk: int) -> HttpResponse:
    """The surveys of one aircraft, its legacy repairs, and what is not known of it."""
    aircraft = visible_or_404(aircraft_own(request.user), request.user, pk=pk)
    context = {
        "aircraft": aircraft,
        "surveys": surveys_of(aircraft, request.user),
        "outcomes": WORDS.values(),
        "unknowns": unknowns(aircraft),
        "legacy": legacy_counts(aircraft),
        "may_record": may(request.user, "survey_record", aircraft.operator_id),
    }
    return render(request, "repairs/survey_list.html", context)


@require_http_methods(METHODS)
def survey_new(request: Request, pk: int) -> HttpResponse:
    """Open a survey: what was looked at, when, by whom, at which counters."""
    aircraft = visible_or_404(aircraft_own(request.user), request.user, pk=pk)
    require(request.user, "survey_record", aircraft.operator_id)
    form = SurveyForm(
        request.POST or None,
        request.FILES or None,
        people=people_at([aircraft.operator]),
        sections=[row.name for row in aircraft.variant.aircraft_type.sections.all()],
        initial={"surveyed_on": today()},
    )
    made = sent(form, partial(_open, request, aircraft, form))
    if made:
        messages.success(request, OPENED.format(number=made.number))
        return redirect("survey_lines", made.pk)
    context = {"aircraft": aircraft, "form": form}
    return render(request, "repairs/survey_new.html", context)


def _open(request: Request, aircraft: Any, form: SurveyForm) -> Survey:
    data = form.cleaned_data
    names = ("area", "surveyed_on", "surveyed_by", "document_reference",
             "document_revision", "upload")  # fmt: skip
    entry = SurveyEntry(
        aircraft=aircraft, at=form.counters(), **{name: data[name] for name in names}
    )
    return survey_open(entry=entry, today=today(), actor=request.user, at=now())


@require_safe
def survey(request: Request, pk: int) -> HttpResponse:
    """Lines and records by outcome, what each may be, and what is still open."""
    row = visible_or_404(surveys_shown(request.user), request.user, pk=pk)
    operator = row.aircraft.operator_id
    is_open = row.state == "open"
    context = {
        "survey": row,
        "page": survey_page(row),
        "unit": row.aircraft.variant.aircraft_type.entry_unit,
        "unknowns": unknowns(row.aircraft),
        "may_record": is_open and may(request.user, "survey_record", operator),
        "may_answer": is_open and may(request.user, "survey_answer", operator),
        "history": history_of(row),
    }
    return render(request, "repairs/survey.html", context)


@require_http_methods(METHODS)
def survey_lines(request: Request, pk: int) -> HttpResponse:
    """Several lines of the sheet at once; reading them first is offered."""
    row = _survey(request, pk, "survey_record")
    unit = row.aircraft.variant.aircraft_type.entry_unit
    form = LinesForm(request.POST or None, form_kwargs={"unit": unit})
    step = request.POST.get("step", "")
    valid = form.is_bound and form.is_valid()
    lines = [x for x in (one.line() for one in form) if x] if valid else []
    problems = _lines_kept(request, row, lines) if valid and step == "save" else []
    if valid and step == "save" and not problems:
        return redirect("survey", pk)
    reading = lines if step == "read" else []
    context = {
        "survey": row,
        "form": form,
        "read": [place_try(row.aircraft, x.place_entered) for x in reading],
        "problems": problems,
        "unit": unit_words(unit),
    }
    return render(request, "repairs/survey_lines.html", context)


def _lines_kept(request: Request, row: Survey, lines: Sequence[SheetLine]) -> list[str]:
    """What is in the way; nothing, once they are recorded."""
    try:
        made = _record(request, row, lines)
    except ValidationError as error:
        return error.messages
    messages.success(request, LINES_KEPT.format(count=_count(made)))
    return []


def _count(made: Sequence[SurveyItem]) -> str:
    return f"{len(made)} line{'s' if len(made) != 1 else ''}"


@require_http_methods(METHODS)
def survey_import(request: Request, pk: int) -> HttpResponse:
    """The sheet as a table: read first, changing nothing; then recorded whole."""
    row = _survey(request, pk, "survey_record")
    unit = row.aircraft.variant.aircraft_type.entry_unit
    form = SheetForm(request.POST or None, request.FILES or None, unit=unit)
    if request.POST.get("step") == "save" and form.is_valid():
        lines = form.lines()
        if made := sent(form, partial(_record, request, row, lines)):
            messages.success(request, LINES_KEPT.format(count=_count(made)))
            return redirect("survey", pk)
    shown = form
    read = []
    if form.is_bound and form.is_valid():
        shown = SheetForm(initial={"table": form.cleaned_data["table"]}, unit=unit)
        read = [(x, place_try(row.aircraft, x.line.place_entered)) for x in form.rows]
    context = {"survey": row, "form": shown, "read": read, "unit": unit}
    return render(request, "repairs/survey_import.html", context)


def _record(
    request: Request, row: Survey, lines: Sequence[SheetLine]
) -> list[SurveyItem]:
    return survey_item_record(survey=row, lines=lines, actor=request.user, at=now())


@require_POST
def survey_compare_page(request: Request, pk: int) -> HttpResponse:
    """Give every line and every record of the area its outcome."""
    row = _survey(request, pk, "survey_record")
    try:
        found = survey_compare(survey=row, actor=request.user, at=now())
    except ValidationError as error:
        messages.error(request, " ".join(error.messages))
    else:
        counts = (found.recorded_not_found, found.found_not_recorded)
        text = COMPARED.format(recorded=counts[0], found=counts[1])
        messages.success(request, text)
    return redirect("survey", pk)


@require_POST
def survey_match_page(request: Request, pk: int) -> HttpResponse:
    """One click: the line is this record, or it is none after all."""
    item = _item(request, pk, "survey_record")
    key = request.POST.get("record", "")
    record = record_of(item.survey, key)
    try:
        if record is None and key != "none":
            raise ValidationError(NO_RECORD.format(number=item.number))
        survey_match(item=item, record=record, actor=request.user, at=now())
    except ValidationError as error:
        messages.error(request, " ".join(error.messages))
    else:
        text = MATCHED if record is not None else UNMATCHED
        messages.success(request, text.format(number=item.number, record=record))
    return redirect("survey", item.survey_id)


@require_http_methods(METHODS)
def survey_answer_page(request: Request, pk: int) -> HttpResponse:
    """Answer for a difference, or match the line to any record of the area."""
    item = _item(request, pk, "survey_answer")
    form = AnswerForm(request.POST or None, item=item, today=today())

    def save() -> SurveyItem:
        return survey_item_answer(
            item=item,
            answer=form.cleaned_data["answer"],
            person=_person(request),
            on=form.cleaned_data["on"],
            opens=form.opened(),
            actor=request.user,
            at=now(),
        )

    if sent(form, save, about=[item]):
        messages.success(request, SETTLED.format(number=item.number))
        return redirect("survey", item.survey_id)
    choices = record_choices(item.survey) if item.seen_as != "nothing" else []
    context = {"item": item, "survey": item.survey, "form": form, "choices": choices}
    return render(request, "repairs/survey_answer.html", context)


@require_http_methods(METHODS)
def survey_close_page(request: Request, pk: int) -> HttpResponse:
    """Close it by name, once nothing is left open."""
    row = _survey(request, pk, "survey_answer")
    form = OnForm(request.POST or None, today=today())

    def save() -> Survey:
        return survey_close(
            survey=row,
            person=_person(request),
            on=form.cleaned_data["on"],
            actor=request.user,
            at=now(),
        )

    if sent(form, save, about=[row]):
        messages.success(request, CLOSED.format(number=row.number))
        return redirect("survey", pk)
    context = {"survey": row, "form": form, "page": survey_page(row)}
    return render(request, "repairs/survey_close.html", context)


def _survey(request: Request, pk: int, action: str) -> Survey:
    row = visible_or_404(surveys_shown(request.user), request.user, pk=pk)
    require(request.user, action, row.aircraft.operator_id)
    return row


def _item(request: Request, pk: int, action: str) -> SurveyItem:
    item = visible_or_404(survey_items(request.user), request.user, pk=pk)
    require(request.user, action, item.survey.aircraft.operator_id)
    return item


def _person(request: Request) -> Person:
    if request.user.person is None:
        raise ValidationError(NO_PERSON)
    return request.user.person
