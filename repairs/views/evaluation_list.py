"""The list of evaluations that want a person."""

from __future__ import annotations

from django.core.paginator import Paginator
from django.http import HttpResponse
from django.shortcuts import render
from django.views.decorators.http import require_safe

from fleet.views.pages import query_without_page
from fleet.views.requests import Request
from repairs.forms.evaluation_list import EvaluationFilter
from repairs.selectors.evaluation_list import evaluations_open

PER_PAGE = 50


@require_safe
def evaluation_list(request: Request) -> HttpResponse:
    """Unchecked, checked but not approved, and those no method covers."""
    form = EvaluationFilter(request.GET)
    standing = form.cleaned_data["standing"] if form.is_valid() else ""
    pages = Paginator(evaluations_open(request.user, standing), PER_PAGE)
    context = {
        "form": form,
        "page": pages.get_page(request.GET.get("page")),
        "query": query_without_page(request),
    }
    return render(request, "repairs/evaluation_list.html", context)
