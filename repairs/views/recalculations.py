"""Evaluations that are stale, and runs that make many of them again."""

from __future__ import annotations

import datetime as dt

from django.core.paginator import Paginator
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import (
    require_http_methods,
    require_POST,
    require_safe,
)

from fleet.access import (
    may_somewhere,
    require,
    require_somewhere,
    visible_or_404,
)
from fleet.clock import now, today
from fleet.tables import csv_response
from fleet.views.aircraft import FORM_METHODS
from fleet.views.pages import query_without_page
from fleet.views.requests import Request
from fleet.views.sending import sent
from repairs.forms.recalculations import RecalculationForm, ReportFilter
from repairs.models import Evaluation, Recalculation
from repairs.selectors.evaluations import evaluations_stale
from repairs.selectors.recalculations import (
    REPORT_HEADER,
    moved_numbers,
    report_rows,
    run_items,
    run_progress,
    stale_rows,
)
from repairs.services.evaluations import method_versions
from repairs.services.recalculations import recalculation_start, recalculation_work

ACTION = "evaluation_make"
PER_PAGE = 50
HERE = dt.timedelta(seconds=5)
"""How long a click on the page works before it answers."""


@require_http_methods(FORM_METHODS)
def recalculation_list(request: Request) -> HttpResponse:
    """What is stale, the runs there were, and a form to start one."""
    if request.method == "POST":
        require_somewhere(request.user, ACTION)
    form = RecalculationForm(request.POST or None, user=request.user)

    def start() -> Recalculation:
        operator = form.cleaned_data["operator"]
        require(request.user, ACTION, operator.pk)
        return recalculation_start(
            operator=operator,
            stale_only=form.cleaned_data["which"] == "stale",
            as_of=today(),
            actor=request.user,
            at=now(),
        )

    if request.method == "POST" and (run := sent(form, start)):
        return redirect("recalculation", pk=run.pk)
    mine = Evaluation.objects.visible_to(request.user).values("pk")
    current = Evaluation.objects.filter(pk__in=mine, replaced_by__isnull=True)
    stale = Paginator(
        stale_rows(evaluations_stale(current, method_versions())), PER_PAGE
    )
    context = {
        "form": form,
        "page": stale.get_page(request.GET.get("page")),
        "query": query_without_page(request),
        "runs": Recalculation.objects.visible_to(request.user)[:20],
        "may_make": may_somewhere(request.user, ACTION),
    }
    return render(request, "repairs/recalculation_list.html", context)


@require_safe
def recalculation(request: Request, pk: int) -> HttpResponse:
    """How far a run is, and what moved by how much; as CSV too."""
    run = visible_or_404(Recalculation.objects.all(), request.user, pk=pk)
    form = ReportFilter(request.GET)
    which = form.cleaned_data["which"] if form.is_valid() else ""
    if request.GET.get("format") == "csv":
        name = f"recalculation-{run.pk}.csv"
        return csv_response(name, REPORT_HEADER, report_rows(run, which))
    pages = Paginator(run_items(run, which), PER_PAGE)
    page = pages.get_page(request.GET.get("page"))
    context = {
        "run": run,
        "progress": run_progress(run),
        "form": form,
        "which": which,
        "page": page,
        "items": [(item, moved_numbers(item)) for item in page],
        "query": query_without_page(request),
        "may_make": may_somewhere(request.user, ACTION),
    }
    return render(request, "repairs/recalculation.html", context)


@require_POST
def recalculation_go_on(request: Request, pk: int) -> HttpResponse:
    """Work on a run for a few seconds, for whoever has no worker running."""
    run = visible_or_404(Recalculation.objects.all(), request.user, pk=pk)
    require(request.user, ACTION, run.operator_id)
    recalculation_work(
        run,
        holder=f"page of {request.user}",
        actor=request.user,
        clock=now,
        until=now() + HERE,
    )
    return redirect("recalculation", pk=run.pk)
