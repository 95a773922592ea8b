"""What stands between an aircraft and its release."""

from __future__ import annotations

from django.http import HttpResponse
from django.shortcuts import render
from django.views.decorators.http import require_safe

from fleet.access import visible_or_404
from fleet.clock import now, today
from fleet.selectors.aircraft import aircraft_own
from fleet.tables import csv_response
from fleet.views.requests import Request
from reports.exports.release import judged_on, release_csv_rows
from reports.forms.release import StopsFilter
from reports.release_rules import OPEN_ITEMS, STOPS
from reports.release_stops import CAUTIONS, EMPTY, HEADER, release_stops


@require_safe
def before_release(request: Request, pk: int) -> HttpResponse:
    """Every stop with its record, rule and what would lift it; open items below."""
    aircraft = visible_or_404(aircraft_own(request.user), request.user, pk=pk)
    form = StopsFilter(request.GET.dict(), today=today())
    found = release_stops(aircraft, form.query(), user=request.user)
    if request.GET.get("format") == "csv":
        name = f"before-release-{aircraft.serial_number}-{found.query.as_of}.csv"
        return csv_response(name, HEADER, release_csv_rows(found, printed_at=now()))
    address = request.GET.copy()
    address["format"] = "csv"
    context = {
        "aircraft": aircraft,
        "form": form,
        "found": found,
        "stops": [(one, STOPS[one.cause]) for one in found.stops],
        "open_items": [(one, OPEN_ITEMS[one.cause]) for one in found.open_items],
        "judged_on": judged_on(found),
        "empty": EMPTY,
        "cautions": CAUTIONS,
        "printed_at": now(),
        "csv": address.urlencode(),
    }
    return render(request, "reports/before_release.html", context)
