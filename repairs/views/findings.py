"""The list of findings, and one finding with all that hangs on it."""

from __future__ import annotations

from typing import Any

from django.core.paginator import Paginator
from django.http import HttpResponse
from django.shortcuts import render
from django.views.decorators.http import require_safe

from fleet.access import may, may_somewhere, visible_or_404
from fleet.clock import moment, today
from fleet.due import Counters
from fleet.selectors.counters import aircraft_standing
from fleet.selectors.history import history_of
from fleet.views.pages import query_without_page
from fleet.views.requests import Request
from repairs.filters import FindingFilter
from repairs.models import Finding, FindingState, Repair
from repairs.selectors.deferrals import chain_of, passed_words
from repairs.selectors.evaluations import evaluations_current, state_of
from repairs.selectors.findings import (
    Line,
    finding_around,
    finding_whole,
    findings_listed,
    to_place_count,
)
from repairs.selectors.maps import finding_map_svg
from repairs.selectors.neighbours import neighbours
from repairs.selectors.next_step import further_steps, next_step
from repairs.selectors.report_triggers import crack_words, level_now
from repairs.selectors.reports import finding_reports
from repairs.selectors.substantiations import folders_of_finding
from repairs.services.assessing import assess_problems

PER_PAGE = 50


@require_safe
def finding_list(request: Request) -> HttpResponse:
    """Findings of the reader's operators, newest first; those to be placed too."""
    rows = findings_listed(request.user)
    chosen = FindingFilter(request.GET, queryset=rows, request=request)
    page = Paginator(chosen.qs, PER_PAGE).get_page(request.GET.get("page"))
    context = {
        "filter": chosen,
        "page": page,
        "lines": [Line(finding) for finding in page],
        "to_place": to_place_count(request.user),
        "query": query_without_page(request),
        "may_record": may_somewhere(request.user, "finding_record"),
    }
    return render(request, "repairs/finding_list.html", context)


@require_safe
def finding(request: Request, pk: int) -> HttpResponse:
    """What it is, where it is, how big, what was decided, and what lies near it."""
    row = visible_or_404(finding_whole(request.user), request.user, pk=pk)
    problems = assess_problems(row) if row.state == "reported" else []
    evaluations = evaluations_current(row)
    around = finding_around(row)
    near = neighbours(row, user=request.user, opposite=True)
    flown = aircraft_standing(row.aircraft, as_of=today())
    context = {
        "finding": row,
        "around": around,
        "limit": around.limit,
        "flown": flown,
        "problems": problems,
        "folders": folders_of_finding(row),
        "questions": row.questions.select_related("answered_by"),
        "links": row.links.select_related("earlier", "decided_by"),
        "later": row.later_links.select_related("finding"),
        "evaluations": [(one, state_of(one)) for one in evaluations],
        "map": finding_map_svg(row, user=request.user),
        "near": near,
        "sisters": [(one, isinstance(one, Repair)) for one in near.sisters],
        "critical": crack_words(row),
        **_asked(request, row, flown.counters),
        "unit": row.aircraft.variant.aircraft_type.entry_unit,
        "history": history_of(row),
        "next": next_step(row, problems, request.user),
        "further": further_steps(row, request.user),
        "may_answer": may(request.user, "finding_assess", row.aircraft.operator_id),
    }
    return render(request, "repairs/finding.html", context)


def _asked(request: Request, row: Finding, flown: Counters) -> dict[str, Any]:
    """Its deferrals, its corrosion level, and the reports the rules want."""
    operator = row.aircraft.operator_id
    chain = chain_of([row])
    running = chain.rows[-1].disposition if chain.rows else None
    deferred = running is not None and row.state == FindingState.DEFERRED
    return {
        "chain": chain,
        "passed": passed_words(running, flown, today()) if deferred else "",  # type: ignore[arg-type]
        "level": level_now(row) if row.damage_type == "corrosion" else None,
        "reports": finding_reports(row, moment=moment()),
        "may_level": may(request.user, "level_determine", operator),
        "may_report": may(request.user, "report_decide", operator),
        "may_sisters": may(request.user, "requirement_raise", operator),
    }
