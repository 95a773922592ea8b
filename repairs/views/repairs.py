"""Repairs: the list, one repair, and an aircraft's current status."""

from __future__ import annotations

from typing import Any

from django.core.paginator import Paginator
from django.http import HttpResponse
from django.shortcuts import render
from django.views.decorators.http import require_safe

from fleet.access import may, may_somewhere, visible_or_404
from fleet.clock import now, today
from fleet.selectors.aircraft import aircraft_visible
from fleet.selectors.history import history_of
from fleet.tables import csv_response
from fleet.views.pages import query_without_page
from fleet.views.requests import Request
from repairs.described import read_apart
from repairs.filters import RepairFilter
from repairs.models import Repair
from repairs.selectors.evaluations import evaluations_current, state_of
from repairs.selectors.late_entries import repair_late_words
from repairs.selectors.maps import item_map_svg
from repairs.selectors.neighbours import neighbours
from repairs.selectors.repair_files import repair_files
from repairs.selectors.repair_status import repair_status
from repairs.selectors.repair_status_cells import HEADER
from repairs.selectors.repairs import (
    approval_applies,
    repair_around,
    repair_whole,
    repairs_listed,
)
from repairs.selectors.signatures import approvals_verified
from repairs.services.repair_ends import UNDER_WAY

PER_PAGE = 50
MAY = (
    "approval_sign", "evaluation_make", "repair_record", "repair_inspect",
    "substantiation_draft", "repair_reclassify", "document_applicability_record",
)  # fmt: skip


@require_safe
def repair_list(request: Request) -> HttpResponse:
    """Repairs of the reader's operators, the newest release first."""
    rows = repairs_listed(request.user)
    chosen = RepairFilter(request.GET, queryset=rows, request=request)
    page = Paginator(chosen.qs, PER_PAGE).get_page(request.GET.get("page"))
    context = {
        "filter": chosen,
        "page": page,
        "query": query_without_page(request),
        "may_record": may_somewhere(request.user, "repair_record"),
    }
    return render(request, "repairs/repair_list.html", context)


@require_safe
def repair(request: Request, pk: int) -> HttpResponse:
    """What was done, with which data, what it covers, and what follows."""
    row = visible_or_404(repair_whole(), request.user, pk=pk)
    context = {"repair": row, **_around(request, row)}
    return render(request, "repairs/repair.html", context)


def _around(request: Request, row: Repair) -> dict[str, Any]:
    """What stands around a repair on its page."""
    operator = row.aircraft.operator_id
    return {
        "around": repair_around(row, today()),
        "said": read_apart(row.description),
        "applies": approval_applies(row),
        "file": repair_files([row])[row.pk],
        "under_way": row.state in UNDER_WAY,
        "late": repair_late_words(row, as_of=today()),
        "map": item_map_svg(row, user=request.user),
        "near": neighbours(row, user=request.user),
        "evaluations": [(one, state_of(one)) for one in evaluations_current(row)],
        "unit": row.aircraft.variant.aircraft_type.entry_unit,
        "approvals": approvals_verified(row),
        "history": history_of(row),
        **{f"may_{name}": may(request.user, name, operator) for name in MAY},
    }


@require_safe
def repair_status_page(request: Request, pk: int) -> HttpResponse:
    """The current repair status of an aircraft, on screen or as CSV."""
    aircraft = visible_or_404(aircraft_visible(request.user), request.user, pk=pk)
    found = repair_status(aircraft, as_of=today(), known_at=now(), user=request.user)
    if request.GET.get("format") == "csv":
        name = f"repairs-{aircraft.serial_number}-{found.as_of}.csv"
        return csv_response(name, HEADER, found.csv_rows())
    context = {"status": found}
    return render(request, "repairs/repair_status.html", context)
