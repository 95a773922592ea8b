"""What an aircraft flew: its rows, a new one, a table of many, a correction."""

from __future__ import annotations

from typing import Any

from django.contrib import messages
from django.core.paginator import Paginator
from django.http import HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.urls import reverse
from django.views.decorators.http import require_http_methods

from fleet.access import may, require, visible_or_404
from fleet.clock import now, today
from fleet.models import Aircraft, UsageRecord
from fleet.selectors.aircraft import aircraft_own
from fleet.selectors.counters import WINDOWS, aircraft_standing
from fleet.services.usage import usage_correct, usage_import, usage_record
from fleet.views.pages import query_without_page
from fleet.views.requests import Request
from fleet.views.sending import sent
from reports.forms.usage import CorrectionForm, UsageForm, UsageTableForm
from reports.selectors.usage_page import (
    Consequences,
    consequences,
    due_words,
    moved,
    no_longer,
    rate_rows,
    usage_rows,
)

FORM_METHODS = ["GET", "HEAD", "POST"]
PER_PAGE = 62
RECORDED = "{count} recorded; data are current to {current_to}."


@require_http_methods(FORM_METHODS)
def usage(request: Request, pk: int) -> HttpResponse:
    """Counters, rates and rows; forms for one line and for a table."""
    aircraft = visible_or_404(aircraft_own(request.user), request.user, pk=pk)
    many = request.POST.get("step") == "table"
    one = UsageForm(None if many else request.POST or None, initial={"day": today()})
    table = UsageTableForm(request.POST if many else None, request.FILES or None)
    if request.method == "POST":
        require(request.user, "usage_record", aircraft.operator_id)
        if _save(request, aircraft, table if many else one):
            return redirect("usage", pk)
    standing = aircraft_standing(aircraft, as_of=today())
    pages = Paginator(usage_rows(aircraft), PER_PAGE)
    context = {
        "aircraft": aircraft,
        "flown": standing,
        "windows": sorted(WINDOWS),
        "rates": rate_rows(standing),
        "page": pages.get_page(request.GET.get("page")),
        "query": query_without_page(request),
        "one": one,
        "table": table,
        "may_record": may(request.user, "usage_record", aircraft.operator_id),
    }
    return render(request, "reports/usage.html", context)


def _save(request: Request, aircraft: Aircraft, form: Any) -> bool:
    service: dict[str, Any] = {
        "actor": request.user,
        "at": now(),
        "today": today(),
        "aircraft": aircraft,
    }

    def save() -> int:
        source = form.cleaned_data["source"]
        if isinstance(form, UsageForm):
            usage_record(**service, line=form.usage_line(), source=source)
            return 1
        lines = form.cleaned_data["lines"]
        return len(usage_import(**service, lines=lines, source=source))

    count = sent(form, save)
    if count:
        current_to = aircraft_standing(aircraft, as_of=today()).current_to
        said = "1 line" if count == 1 else f"{count} lines"
        messages.success(request, RECORDED.format(count=said, current_to=current_to))
    return bool(count)


@require_http_methods(FORM_METHODS)
def usage_correction(request: Request, pk: int, row_pk: int) -> HttpResponse:
    """Correct one row; the answer lists every due item that moved and every recorded
    event that no longer agrees."""
    aircraft = visible_or_404(aircraft_own(request.user), request.user, pk=pk)
    require(request.user, "usage_record", aircraft.operator_id)
    row = get_object_or_404(UsageRecord, pk=row_pk, aircraft=aircraft)
    names = (*CorrectionForm.base_fields,)
    initial = {x: getattr(row, x) for x in names if hasattr(row, x)}
    form = CorrectionForm(request.POST or None, initial=initial)
    seen: list[Consequences] = []

    def due_items() -> dict[str, str]:
        seen.append(consequences(request.user, aircraft, today()))
        return due_words(seen[-1])

    done = sent(
        form,
        lambda: usage_correct(
            actor=request.user,
            at=now(),
            record=row,
            line=form.line(day=row.day, flight=row.flight_number),
            source=form.cleaned_data["source"],
            reason=form.cleaned_data["reason"],
            due_items=due_items,
        ),
        about=[row],
    )
    context: dict[str, Any] = {"form": form, "row": row, "aircraft": aircraft}
    if done:
        context |= {"moved": moved(*seen), "no_longer": no_longer(*seen), "new": done}
        answer = render(request, "reports/usage_corrected.html", context)
        answer["Content-Location"] = reverse("usage", args=[pk])
        return answer
    return render(request, "reports/usage_correct.html", context)
