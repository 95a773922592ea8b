"""Documents that records cite, and for which serials they say they hold."""

from __future__ import annotations

from django.contrib import messages
from django.core.paginator import Paginator
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods, require_safe

from fleet.access import may_somewhere, require, visible_or_404
from fleet.clock import now
from fleet.forms.documents import ApplicabilityForm
from fleet.models import DocumentApplicability
from fleet.selectors.applicability import documents_listed, range_words
from fleet.services.applicability import document_applicability_record
from fleet.views.aircraft import FORM_METHODS
from fleet.views.pages import query_without_page
from fleet.views.requests import Request
from fleet.views.sending import sent

ACTION = "document_applicability_record"
PER_PAGE = 50
RECORDED = "{document}: {ranges} is recorded."


@require_safe
def documents(request: Request) -> HttpResponse:
    """Every document cited, with the serials it holds for or that none is recorded."""
    rows = documents_listed(request.user)
    page = Paginator(rows, PER_PAGE).get_page(request.GET.get("page"))
    context = {
        "page": page,
        "lines": [
            (row, [range_words(one) for one in row.applicability.all()]) for row in page
        ],
        "query": query_without_page(request),
        "may_record": may_somewhere(request.user, ACTION),
    }
    return render(request, "fleet/documents.html", context)


@require_http_methods(FORM_METHODS)
def document_applicability(request: Request, pk: int) -> HttpResponse:
    """One more range of a document; what is there already stays."""
    row = visible_or_404(documents_listed(request.user), request.user, pk=pk)
    require(request.user, ACTION, row.operator_id)
    form = ApplicabilityForm(request.POST or None)

    def save() -> DocumentApplicability:
        return document_applicability_record(
            document=row, **form.cleaned_data, actor=request.user, at=now()
        )

    if made := sent(form, save, about=[row]):
        said = RECORDED.format(document=row, ranges=range_words(made))
        messages.success(request, said)
        return redirect("documents")
    ranges = [range_words(one) for one in row.applicability.all()]
    context = {"document": row, "ranges": ranges, "form": form}
    return render(request, "fleet/document_applicability.html", context)
