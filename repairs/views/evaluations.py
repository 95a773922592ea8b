"""Asking for an evaluation, and its page."""

from __future__ import annotations

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
from fleet.selectors.history import history_of
from fleet.views.aircraft import FORM_METHODS
from fleet.views.requests import Request
from fleet.views.sending import sent
from repairs.forms.evaluations import EvaluationForm
from repairs.models import Evaluation, Finding, Repair
from repairs.selectors.evaluation_shown import evaluation_shown
from repairs.selectors.evaluations import (
    detectable_sizes,
    evaluation_rows,
    subject_rows,
)
from repairs.selectors.signatures import approvals_verified
from repairs.selectors.substantiations import folders_citing
from repairs.services.evaluation_place import Subject
from repairs.services.evaluation_prepare import choice_from, input_titles
from repairs.services.evaluations import (
    evaluation_make,
    evaluation_remake,
    method_versions,
)
from repairs.views.evaluate import evaluate_context, kept_choice

ACTION = "evaluation_make"
ON_PAPER = ("prepared", "checked", "approved")


@require_http_methods(FORM_METHODS)
def evaluation_new(request: Request, pk: int) -> HttpResponse:
    """Evaluate a finding: what will be used is shown before it is made."""
    finding = visible_or_404(subject_rows(Finding), request.user, pk=pk)
    return _new(request, finding)


@require_http_methods(FORM_METHODS)
def evaluation_new_repair(request: Request, pk: int) -> HttpResponse:
    """Evaluate the structure under a repair."""
    repair = visible_or_404(subject_rows(Repair), request.user, pk=pk)
    return _new(request, repair)


def _new(request: Request, subject: Subject) -> HttpResponse:
    require(request.user, ACTION, subject.aircraft.operator_id)
    sizes = detectable_sizes(subject.aircraft.variant.aircraft_type)
    form = EvaluationForm(
        request.POST or None, sizes=sizes, initial=kept_choice(request, subject)
    )

    def make() -> Evaluation:
        choice = choice_from(subject, **form.cleaned_data)
        return evaluation_make(
            subject=subject, choice=choice, as_of=today(), actor=request.user, at=now()
        )

    if made := sent(form, make, about=[subject]):
        return redirect("evaluation", pk=made.pk)
    context = evaluate_context(request, subject) | {"form": form}
    return render(request, "repairs/evaluation_new.html", context)


@require_safe
def evaluation(request: Request, pk: int) -> HttpResponse:
    """Results, tests, curves and the calculation note of one evaluation."""
    row = visible_or_404(evaluation_rows(), request.user, pk=pk)
    context = {
        "shown": evaluation_shown(row, method_versions(), input_titles()),
        "approvals": approvals_verified(row),
        "folders": folders_citing(row),
        "history": history_of(row),
        "may_make": may(request.user, ACTION, row.operator_id),
        "may_sign": may(request.user, "approval_sign", row.operator_id),
        "may_raise": may(request.user, "requirement_raise", row.operator_id),
    }
    return render(request, "repairs/evaluation.html", context)


@require_safe
def evaluation_note(request: Request, pk: int) -> HttpResponse:
    """The calculation note as a document to print, sign and file."""
    row = visible_or_404(evaluation_rows(), request.user, pk=pk)
    context = {
        "shown": evaluation_shown(row, method_versions(), input_titles()),
        "approvals": approvals_verified(row),
        "paper": ON_PAPER,
    }
    return render(request, "repairs/evaluation_note.html", context)


@require_POST
def evaluation_again(request: Request, pk: int) -> HttpResponse:
    """The same question to the record as it stands now."""
    row = visible_or_404(evaluation_rows(), request.user, pk=pk)
    require(request.user, ACTION, row.operator_id)
    try:
        made = evaluation_remake(
            evaluation=row, as_of=today(), actor=request.user, at=now()
        )
    except ValidationError as error:
        messages.error(request, " ".join(error.messages))
        return redirect("evaluation", pk=row.pk)
    return redirect("evaluation", pk=made.pk)
