"""Inputs that an engineer states for one finding or repair."""

from __future__ import annotations

from typing import Any

from django.contrib import messages
from django.core.exceptions import ValidationError
from django.http import Http404, HttpResponse
from django.shortcuts import redirect, render
from django.urls import reverse
from django.views.decorators.http import require_http_methods

from fleet.access import require, visible_or_404
from fleet.clock import now, today
from fleet.views.aircraft import FORM_METHODS
from fleet.views.requests import Request
from fleet.views.sending import sent
from repairs.forms.stated import StateForm, TakeBackForm
from repairs.models import Finding, Repair, StatedInput
from repairs.selectors.evaluations import subject_rows
from repairs.selectors.stated import stated_rows
from repairs.services.evaluation_place import Subject
from repairs.services.stated import (
    input_state,
    input_take_back,
    spec_of,
    stated_last,
    stated_lines,
)

ACTION = "evaluation_make"
STATED = "Stated: evaluations made from now on use it here."
TAKEN_BACK = "Taken back: it holds no longer, and stays on record."


@require_http_methods(FORM_METHODS)
def input_state_finding(request: Request, pk: int, name: str) -> HttpResponse:
    """State one input for a finding."""
    finding = visible_or_404(subject_rows(Finding), request.user, pk=pk)
    return _state(request, finding, name)


@require_http_methods(FORM_METHODS)
def input_state_repair(request: Request, pk: int, name: str) -> HttpResponse:
    """State one input for a repair."""
    repair = visible_or_404(subject_rows(Repair), request.user, pk=pk)
    return _state(request, repair, name)


def _state(request: Request, subject: Subject, name: str) -> HttpResponse:
    require(request.user, ACTION, subject.aircraft.operator_id)
    try:
        spec = spec_of(name)
    except ValidationError as unknown:
        raise Http404(" ".join(unknown.messages)) from unknown
    last = stated_last(subject, name)
    form = StateForm(request.POST or None, name=name, initial=_initial(last))

    def state() -> StatedInput:
        return input_state(
            subject=subject,
            name=name,
            entered=form.cleaned_data["entered"],
            document=form.document_read(),
            actor=request.user,
            at=now(),
            on=today(),
        )

    if sent(form, state, about=[subject, stated_rows(subject, name)]):
        messages.success(request, STATED)
        return redirect(evaluate_address(subject))
    context = {
        "subject": subject,
        "spec": spec,
        "form": form,
        "before": stated_lines(subject, name),
        "back": evaluate_address(subject),
    }
    return render(request, "repairs/evaluation_state.html", context)


@require_http_methods(FORM_METHODS)
def input_take_back_page(request: Request, pk: int) -> HttpResponse:
    """Withdraw what was stated; it stays on record."""
    rows = StatedInput.objects.select_related(
        "operator", "finding__aircraft", "repair__aircraft"
    )
    row = visible_or_404(rows, request.user, pk=pk)
    subject: Any = row.finding or row.repair
    require(request.user, ACTION, subject.aircraft.operator_id)
    form = TakeBackForm(request.POST or None)

    def take_back() -> StatedInput:
        return input_take_back(
            stated=row,
            reason=form.cleaned_data["reason"],
            actor=request.user,
            at=now(),
            on=today(),
        )

    if sent(form, take_back, about=[stated_rows(subject, row.name)]):
        messages.success(request, TAKEN_BACK)
        return redirect(evaluate_address(subject))
    context = {
        "subject": subject,
        "lines": stated_lines(subject, row.name),
        "row": row,
        "form": form,
        "back": evaluate_address(subject),
    }
    return render(request, "repairs/evaluation_take_back.html", context)


def evaluate_address(subject: Subject) -> str:
    """The page on which a finding or repair is evaluated."""
    what = "evaluation_new" if isinstance(subject, Finding) else "evaluation_new_repair"
    return reverse(what, args=[subject.pk])


def _initial(last: StatedInput | None) -> dict[str, Any]:
    """What holds is offered again, to be changed; nothing else is."""
    if last is None:
        return {}
    return {
        "entered": last.entered or last.word or last.spectrum_id,
        "document": last.document,
        "revision": last.revision,
        "page": last.page,
    }
