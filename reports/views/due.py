"""The due list."""

from __future__ import annotations

from django.http import HttpResponse
from django.shortcuts import render
from django.views.decorators.http import require_safe

from fleet.clock import now, today
from fleet.tables import csv_response
from fleet.views.requests import Request
from reports.due_list import FORECAST, due_list
from reports.due_rows import HEADER
from reports.exports.due import due_csv_rows
from reports.forms.due import DueFilter


@require_safe
def due_list_page(request: Request) -> HttpResponse:
    """What is due within the days asked for, overdue first; also as CSV."""
    form = DueFilter(request.GET.dict(), today=today())
    query = form.query()
    found = due_list(query, user=request.user)
    if request.GET.get("format") == "csv":
        rows = due_csv_rows(found, printed_at=now())
        return csv_response(f"due-{query.as_of}.csv", HEADER, rows)
    address = request.GET.copy()
    address["format"] = "csv"
    context = {
        "form": form,
        "found": found,
        "csv": address.urlencode(),
        "forecast_basis": FORECAST,
    }
    return render(request, "reports/due_list.html", context)
