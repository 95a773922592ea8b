"""The history of all records, for those who audit them."""

from __future__ import annotations

from django.core.paginator import Paginator
from django.http import HttpResponse
from django.shortcuts import render
from django.views.decorators.http import require_safe

from fleet.access import require_somewhere
from fleet.clock import now
from fleet.forms.history import HistoryFilter
from fleet.models import HistoryHead
from fleet.selectors.entries import actions_of, entries, names_kept
from fleet.selectors.keeping import seal_warning
from fleet.views.pages import query_without_page
from fleet.views.requests import Request

PER_PAGE = 50


@require_safe
def history(request: Request) -> HttpResponse:
    """Entries as filtered, with the digest of the last one of all."""
    require_somewhere(request.user, "history_read")
    form = HistoryFilter(request.GET, actions=actions_of(request.user))
    wanted = form.cleaned_data if form.is_valid() else {}
    pages = Paginator(entries(request.user, **wanted), PER_PAGE)
    page = pages.get_page(request.GET.get("page"))
    page.object_list = names_kept(request.user, page.object_list)
    context = {
        "form": form,
        "page": page,
        "query": query_without_page(request),
        "head": HistoryHead.objects.first(),
        "seal_warning": seal_warning(at=now()),
    }
    return render(request, "fleet/history.html", context)
