"""The list of releases that were entered late."""

from __future__ import annotations

from django.core.paginator import Paginator
from django.http import HttpResponse
from django.shortcuts import render
from django.views.decorators.http import require_safe

from fleet.clock import today
from fleet.views.pages import query_without_page
from fleet.views.requests import Request
from repairs.selectors.late_entries import late_entries

PER_PAGE = 50


@require_safe
def late_list(request: Request) -> HttpResponse:
    pages = Paginator(late_entries(request.user, as_of=today()), PER_PAGE)
    context = {
        "page": pages.get_page(request.GET.get("page")),
        "query": query_without_page(request),
    }
    return render(request, "repairs/late_list.html", context)
