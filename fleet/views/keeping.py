"""How the records are kept: backups, restores and seals."""

from __future__ import annotations

from django.core.paginator import Paginator
from django.http import HttpResponse
from django.shortcuts import render
from django.views.decorators.http import require_safe

from fleet.access import require_somewhere
from fleet.clock import now, today
from fleet.selectors.keeping import backups_listed, keeping, seals_listed
from fleet.selectors.seals import seal_lines, seal_of
from fleet.views.requests import Request

ACTION = "history_read"
PER_PAGE = 50


@require_safe
def kept(request: Request) -> HttpResponse:
    """Backups made and restored, and what is amiss."""
    require_somewhere(request.user, ACTION)
    rows = Paginator(backups_listed(), PER_PAGE).get_page(request.GET.get("page"))
    state = keeping(request.user, at=now(), on=today())
    return render(request, "fleet/keeping.html", {"state": state, "page": rows})


@require_safe
def seals(request: Request) -> HttpResponse:
    """Every seal with what the history says of it today; made to be printed."""
    require_somewhere(request.user, ACTION)
    page = Paginator(seals_listed(), PER_PAGE).get_page(request.GET.get("page"))
    state = keeping(request.user, at=now(), on=today())
    context = {
        "page": page,
        "lines": seal_lines(list(page)),
        "state": state,
        "last": seal_of(state.seal) if state.seal else None,
    }
    return render(request, "fleet/seals.html", context)
