"""A repair's further steps: photographs, and its removal."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial

from django.contrib import messages
from django.forms import Form
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods

from fleet.access import require, visible_or_404
from fleet.clock import now, today
from fleet.views.requests import Request
from fleet.views.sending import sent
from repairs.forms.fields import PhotoForm
from repairs.forms.repairs import RemoveForm
from repairs.models import Repair
from repairs.selectors.repairs import repair_whole
from repairs.services.photographs import Photo, photographs_add
from repairs.services.repair_ends import repair_remove

METHODS = ["GET", "HEAD", "POST"]
SAVED = "{number}: saved."


@require_http_methods(METHODS)
def repair_photographs(request: Request, pk: int) -> HttpResponse:
    """Further photographs of a repair."""
    row = _row(request, pk)
    form = PhotoForm(request.POST or None, request.FILES or None)
    form.fields["photographs"].required = True
    return _page(request, row, form, partial(_add, request, row, form), "Photographs")


@require_http_methods(METHODS)
def repair_remove_page(request: Request, pk: int) -> HttpResponse:
    """The repair is off the aircraft; its record stays, its clocks end."""
    row = _row(request, pk)
    form = RemoveForm(request.POST or None, today=today())

    def save() -> Repair:
        return repair_remove(
            repair=row, **form.cleaned_data, actor=request.user, at=now()
        )

    return _page(request, row, form, save, "Removed")


def _add(request: Request, row: Repair, form: PhotoForm) -> object:
    data = form.cleaned_data
    photos = [
        Photo(upload, data["role"], data["caption"]) for upload in data["photographs"]
    ]
    return photographs_add(shown=row, photos=photos, actor=request.user, at=now())


def _row(request: Request, pk: int) -> Repair:
    row = visible_or_404(repair_whole(), request.user, pk=pk)
    require(request.user, "repair_record", row.aircraft.operator_id)
    return row


def _page(
    request: Request, row: Repair, form: Form, save: Callable[[], object], heading: str
) -> HttpResponse:
    if sent(form, save):
        messages.success(request, SAVED.format(number=row))
        return redirect("repair", row.pk)
    context = {"repair": row, "form": form, "heading": heading}
    return render(request, "repairs/repair_form.html", context)
