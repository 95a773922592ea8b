"""Numbers adopted from documents: the list, a new one, its confirmation."""

from __future__ import annotations

from django.contrib import messages
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods, require_safe

from fleet.access import (
    may_somewhere,
    operators_for,
    require,
    require_somewhere,
    visible_or_404,
)
from fleet.clock import now, today
from fleet.models import AdoptedValue
from fleet.services.adopted import value_adopt, value_confirm
from fleet.views.requests import Request
from fleet.views.sending import sent
from repairs.forms.adopted import AdoptForm, ConfirmForm
from repairs.selectors.adopted import adopted_lines
from repairs.services.evaluation_inputs import ADOPTABLE_WORDS

FORM_METHODS = ["GET", "HEAD", "POST"]


@require_safe
def adopted_list(request: Request) -> HttpResponse:
    context = {
        "lines": [
            (line, ADOPTABLE_WORDS.get(line.row.quantity, (line.row.quantity, ""))[0])
            for line in adopted_lines(request.user)
        ],
        "may_adopt": may_somewhere(request.user, "value_adopt"),
        "may_confirm": may_somewhere(request.user, "value_confirm"),
    }
    return render(request, "repairs/adopted_list.html", context)


@require_http_methods(FORM_METHODS)
def adopted_new(request: Request) -> HttpResponse:
    """Take a number from a document; it counts once somebody else confirms it."""
    require_somewhere(request.user, "value_adopt")
    form = AdoptForm(
        request.POST or None, operators=operators_for(request.user, "value_adopt")
    )
    made = sent(
        form,
        lambda: value_adopt(
            **form.cleaned_data, actor=request.user, at=now(), on=today()
        ),
    )
    if made:
        messages.success(
            request, "Adopted. It counts once a second person confirms it."
        )
        return redirect("adopted_list")
    return render(request, "repairs/adopted_new.html", {"form": form})


@require_http_methods(FORM_METHODS)
def adopted_confirm(request: Request, pk: int) -> HttpResponse:
    """Somebody else reads the number from the document; the first is not shown."""
    rows = AdoptedValue.objects.select_related("operator", "material", "person")
    row = visible_or_404(rows, request.user, pk=pk)
    require(request.user, "value_confirm", row.operator_id)
    form = ConfirmForm(request.POST or None)
    made = sent(
        form,
        lambda: value_confirm(
            adopted=row, actor=request.user, at=now(), **form.cleaned_data
        ),
        about=[row],
        blind=True,
    )
    if made:
        messages.success(request, "Confirmed: evaluations made from now on use it.")
        return redirect("adopted_list")
    words = ADOPTABLE_WORDS.get(row.quantity, (row.quantity, ""))[0]
    context = {"form": form, "row": row, "words": words}
    return render(request, "repairs/adopted_confirm.html", context)
