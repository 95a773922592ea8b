"""A finding's further steps: placed, measured, asked, assessed, linked, closed."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from functools import partial
from typing import Any

from django.contrib import messages
from django.forms import Form
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods, require_POST

from fleet.access import require, visible_or_404
from fleet.clock import now, today
from fleet.location.place import LocationRefused
from fleet.services.signing import Proof
from fleet.views.requests import Request
from fleet.views.sending import sent, sent_signed
from repairs.forms.dimensions import DimensionsForm
from repairs.forms.fields import PhotoForm
from repairs.forms.findings import (
    AnswerForm,
    AssessForm,
    CloseForm,
    LinkForm,
    MeasureForm,
    PlaceForm,
    VoidForm,
)
from repairs.models import Finding, FindingQuestion
from repairs.selectors.choices import people_at
from repairs.selectors.findings import earlier_findings, finding_whole
from repairs.selectors.report_triggers import reports_undecided
from repairs.selectors.signatures import content_of
from repairs.selectors.signed_words import to_sign
from repairs.services.assessing import (
    finding_assess,
    finding_close,
    finding_link,
    finding_void,
)
from repairs.services.finding_guards import DataCited
from repairs.services.findings import (
    finding_question_answer,
    finding_relocate,
    standing_on,
)
from repairs.services.measuring import Measuring, measurement_record
from repairs.services.photographs import Photo, photographs_add
from repairs.services.places import Placed, place_try
from repairs.services.reports import Reportability

METHODS = ["GET", "HEAD", "POST"]
CITED = ("kind", "reference", "revision", "page")
MEASURING = ("measured_on", "stage", "measured_by", "method", "instrument", "light")
SAVED = "{number}: saved."
ANSWERED = "Answered; the question and its answer are kept."


@require_http_methods(METHODS)
def finding_place(request: Request, pk: int) -> HttpResponse:
    """Read the location again; a refusal shows its offers and changes nothing."""
    row = _row(request, pk, "finding_record")
    offer = request.POST.get("offer")
    text = offer or row.place_entered
    form = PlaceForm(
        None if offer or not request.POST else request.POST,
        initial={"place_entered": text},
    )
    placed = place_try(row.aircraft, form.data.get("place_entered", text))

    def save() -> Finding | None:
        return _relocate(request, row, form)

    return _page(
        request, row, [form], save, "Place", "Save the location", placed=placed
    )


@require_http_methods(METHODS)
def finding_measure(request: Request, pk: int) -> HttpResponse:
    """A further measuring; the ones before it stay."""
    row = _row(request, pk, "finding_measure")
    flown = standing_on(row.aircraft, today()).at
    form = MeasureForm(
        request.POST or None,
        people=people_at([row.aircraft.operator]),
        today=today(),
        initial={
            "stage": "repeat" if row.measurements.exists() else "as_found",
            "measured_on": today(),
            "measured_by": request.user.person_id,
            "at_minutes": flown.minutes,
            "at_cycles": flown.cycles,
            "at_landings": flown.landings,
        },
    )
    dimensions = DimensionsForm(
        request.POST or None,
        damage_type=row.damage_type,
        entry_unit=row.aircraft.variant.aircraft_type.entry_unit,
    )
    save = partial(_measure, request, row, form, dimensions)
    both = [form, dimensions]
    return _page(
        request, row, both, save, "Measure", "Record the measurement", adds=True
    )


@require_http_methods(METHODS)
def finding_assess_page(request: Request, pk: int) -> HttpResponse:
    """Assessed against cited data, by an authorised person."""
    row = _row(request, pk, "finding_assess")
    form = AssessForm(
        request.POST or None,
        user=request.user,
        today=today(),
        initial={
            "on": today(),
            "cause": row.cause,
            "criticality": row.criticality,
            "criticality_source": row.criticality_source,
        },
    )

    def save(proof: Proof) -> Finding:
        data = form.cleaned_data
        return finding_assess(
            finding=row,
            proof=proof,
            on=data["on"],
            data=DataCited(*(data[f"document_{name}"] for name in CITED)),
            cause=data["cause"],
            criticality=data["criticality"],
            criticality_source=data["criticality_source"],
            actor=request.user,
            at=now(),
        )

    send = partial(sent_signed, request)
    read = to_sign(row, content_of(row))
    return _page(request, row, [form], save, "Assess", "Assess", send=send, read=read)


@require_http_methods(METHODS)
def finding_close_page(request: Request, pk: int) -> HttpResponse:
    """Closed by certifying staff, once no damage remains or a repair covers it."""
    row = _row(request, pk, "finding_assess")
    waiting = reports_undecided(row)
    form = CloseForm(
        request.POST or None,
        user=request.user,
        today=today(),
        undecided=[regime for subject, regime in waiting if subject == row],
        initial={"on": today(), "cause": row.cause},
    )

    def save(proof: Proof) -> Finding:
        data = form.cleaned_data
        answer = data.get("reportable")
        report = Reportability(answer == "yes", data.get("report_reason", ""))
        return finding_close(
            finding=row,
            proof=proof,
            on=data["on"],
            cause=data["cause"],
            reason=data["reason"],
            release_reference=data["release_reference"],
            report=report if answer else None,
            actor=request.user,
            at=now(),
        )

    send = partial(sent_signed, request)
    read = to_sign(row, content_of(row))
    return _page(request, row, [form], save, "Close", "Close", send=send, read=read)


@require_http_methods(METHODS)
def finding_link_page(request: Request, pk: int) -> HttpResponse:
    """The same damage, grown from it, a duplicate report, or different damage."""
    row = _row(request, pk, "finding_assess")
    form = LinkForm(request.POST or None, findings=earlier_findings(row, request.user))

    def save() -> object:
        return finding_link(
            finding=row,
            **form.cleaned_data,
            decided_by=request.user.person,
            on=today(),
            actor=request.user,
            at=now(),
        )

    return _page(request, row, [form], save, "Link", "Save the answer")


@require_http_methods(METHODS)
def finding_void_page(request: Request, pk: int) -> HttpResponse:
    """Entered by mistake; it stays visible."""
    row = _row(request, pk, "finding_assess")
    form = VoidForm(request.POST or None)

    def save() -> Finding:
        return finding_void(
            finding=row, **form.cleaned_data, actor=request.user, at=now()
        )

    return _page(request, row, [form], save, "Void", "Void the finding")


@require_http_methods(METHODS)
def finding_photographs(request: Request, pk: int) -> HttpResponse:
    """Further photographs of a finding."""
    row = _row(request, pk, "finding_measure")
    form = PhotoForm(request.POST or None, request.FILES or None)
    form.fields["photographs"].required = True

    def save() -> object:
        return photographs_add(
            shown=row, photos=photos_of(form), actor=request.user, at=now()
        )

    return _page(request, row, [form], save, "Photographs", "Add them", adds=True)


@require_POST
def finding_answer(request: Request, pk: int) -> HttpResponse:
    """The answer to one question, sent from the finding's page."""
    rows = FindingQuestion.objects.select_related("finding__aircraft")
    question = visible_or_404(rows, request.user, pk=pk)
    require(request.user, "finding_assess", question.finding.aircraft.operator_id)
    form = AnswerForm(request.POST)

    def save() -> object:
        return finding_question_answer(
            question=question, **form.cleaned_data, actor=request.user, at=now()
        )

    if sent(form, save):
        messages.success(request, ANSWERED)
    else:
        messages.error(request, form.errors.as_text())
    return redirect("finding", question.finding_id)


def photos_of(form: Form) -> list[Photo]:
    data = form.cleaned_data
    return [
        Photo(upload, data["role"], data["caption"]) for upload in data["photographs"]
    ]


def _row(request: Request, pk: int, action: str) -> Finding:
    row = visible_or_404(finding_whole(request.user), request.user, pk=pk)
    require(request.user, action, row.aircraft.operator_id)
    return row


def _relocate(request: Request, row: Finding, form: PlaceForm) -> Finding | None:
    data = form.cleaned_data
    try:
        return finding_relocate(finding=row, **data, actor=request.user, at=now())
    except LocationRefused as refused:
        form.add_error("place_entered", f"{refused.message} ({refused.code})")
        return None


def _measure(
    request: Request, row: Finding, form: MeasureForm, dimensions: DimensionsForm
) -> object:
    data = form.cleaned_data
    return measurement_record(
        finding=row,
        measuring=Measuring(
            typed=dimensions.typed(),
            holes=dimensions.holes(),
            at=form.counters(),
            **{name: data[name] for name in MEASURING},
        ),
        actor=request.user,
        at=now(),
    )


def _page(
    request: Request,
    row: Finding,
    forms: Sequence[Form],
    save: Callable[..., object],
    heading: str,
    action: str,
    *,
    send: Callable[..., Any] = sent,
    placed: Placed | None = None,
    read: dict[str, Any] | None = None,
    adds: bool = False,
) -> HttpResponse:
    """Save and go back to the finding, or the page with what is in the way."""
    first, *others = forms
    about = [] if adds else [row]
    whole = all(form.is_valid() for form in others)
    if whole and send(first, save, about=about) and not first.errors:
        messages.success(request, SAVED.format(number=row))
        return redirect("finding", row.pk)
    context: dict[str, Any] = {
        "finding": row,
        "forms": forms,
        "heading": heading,
        "action": action,
        "placed": placed,
        **(read or {}),
    }
    return render(request, "repairs/finding_form.html", context)
