"""The page after signing in."""

from __future__ import annotations

from django.http import HttpResponse
from django.shortcuts import render
from django.views.decorators.http import require_safe

from fleet.access import may_somewhere
from fleet.clock import moment, today
from fleet.views.requests import Request
from repairs.selectors.reports import open_counts
from reports.selectors import overview as selected


@require_safe
def overview(request: Request) -> HttpResponse:
    """What stands open today; a constant number of queries."""
    user, day = request.user, today()
    roles = {row.role for row in user.open_memberships}
    names = selected.panels_for(roles)
    context = {
        "panels": [f"reports/overview/_{name}.html" for name in names],
        "may_report": may_somewhere(user, "finding_record"),
        "may_audit": may_somewhere(user, "history_read"),
        "due": selected.due_today(user, as_of=day),
        "findings": selected.finding_tally(user),
        "reports": open_counts(user, moment=moment()),
        "evaluations": selected.evaluation_tally(user),
        "parts": selected.parts_nearest(user, as_of=day),
        "fleet": selected.aircraft_standing_today(user, as_of=day),
        "entries": selected.entries_newest(user),
    }
    return render(request, "reports/overview.html", context)
