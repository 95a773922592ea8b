"""The aircraft list and an aircraft's page: they gather from every app."""

from __future__ import annotations

from django.http import HttpResponse
from django.shortcuts import render
from django.views.decorators.http import require_safe

from fleet.access import may, may_somewhere, visible_or_404
from fleet.clock import today
from fleet.forms.aircraft import AircraftFilter
from fleet.selectors.aircraft import aircraft_visible
from fleet.views.requests import Request
from reports.selectors.aircraft import aircraft_page, aircraft_rows


@require_safe
def aircraft_list(request: Request) -> HttpResponse:
    """The fleet as of today, with what ended before."""
    form = AircraftFilter(request.GET)
    wanted = form.cleaned_data if form.is_valid() else {}
    rows, ended = aircraft_rows(request.user, as_of=today(), **wanted)
    return render(
        request,
        "reports/aircraft_list.html",
        {
            "form": form,
            "rows": rows,
            "ended": ended,
            "may_add": may_somewhere(request.user, "fleet_change"),
        },
    )


@require_safe
def aircraft(request: Request, pk: int) -> HttpResponse:
    """One aircraft: what it is, what it has flown, what is wrong, what is due."""
    row = visible_or_404(aircraft_visible(request.user), request.user, pk=pk)
    page = aircraft_page(request.user, row, as_of=today())
    return render(
        request,
        "reports/aircraft.html",
        {
            "page": page,
            "aircraft": row,
            "may_report": may(request.user, "finding_record", row.operator_id),
            "may_change": may(request.user, "fleet_change", row.operator_id),
            "may_rekey": page.counters_unagreed
            and may(request.user, "opening_rekey", row.operator_id),
        },
    )
