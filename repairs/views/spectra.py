"""Load spectra: the list, one of them, a new one, its next revision."""

from __future__ import annotations

from functools import partial
from typing import Any

from django.contrib import messages
from django.http import Http404, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.views.decorators.http import require_http_methods, require_safe

from fleet.access import may_somewhere, require_somewhere
from fleet.clock import now
from fleet.models import Spectrum
from fleet.views.aircraft import FORM_METHODS
from fleet.views.requests import Request
from fleet.views.sending import sent
from repairs.forms.spectra import SpectrumForm
from repairs.selectors.spectra import (
    spectra_listed,
    spectrum_revisions,
    spectrum_uses,
)
from repairs.services.evaluation_spectrum import row_kind
from repairs.services.spectra import KIND_WORDS, spectrum_record, spectrum_revise
from repairs.services.spectrum_shown import (
    spectrum_initial,
    spectrum_of_row,
    spectrum_shown,
)

ACTION = "value_adopt"
RECORDED = "Recorded: panels of a geometry file and stated inputs may name it."
REVISED = "Revised: evaluations that were read from it are now stale."


@require_safe
def spectrum_list(request: Request) -> HttpResponse:
    """The newest revision of every spectrum."""
    context = {
        "lines": [(row, KIND_WORDS[row_kind(row)]) for row in spectra_listed()],
        "may_record": may_somewhere(request.user, ACTION),
        "kinds": KIND_WORDS.items(),
    }
    return render(request, "repairs/spectrum_list.html", context)


@require_safe
def spectrum(request: Request, pk: int) -> HttpResponse:
    """One spectrum: its choices, its cycles, its picture, where it is used."""
    row = get_object_or_404(Spectrum.objects.select_related("replaced_by"), pk=pk)
    revisions = list(spectrum_revisions(row))
    context = {
        "row": row,
        "shown": spectrum_shown(spectrum_of_row(row)),
        "uses": spectrum_uses(row, request.user),
        "revisions": revisions,
        "in_force": revisions[0].pk == row.pk,
        "may_record": may_somewhere(request.user, ACTION),
    }
    return render(request, "repairs/spectrum.html", context)


@require_http_methods(FORM_METHODS)
def spectrum_new(request: Request, kind: str) -> HttpResponse:
    """A spectrum of a kind: read first, changing nothing; then recorded."""
    require_somewhere(request.user, ACTION)
    if kind not in KIND_WORDS:
        raise Http404(f"There is no kind of spectrum “{kind}”.")
    form = SpectrumForm(request.POST or None, request.FILES or None, kind=kind)

    def record() -> Spectrum:
        data = form.cleaned_data
        return spectrum_record(
            name=data["name"],
            data=form.plain,
            source=data["source"],
            actor=request.user,
            at=now(),
        )

    return _form_page(request, form, record, None)


@require_http_methods(FORM_METHODS)
def spectrum_revise_page(request: Request, pk: int) -> HttpResponse:
    """The next revision of a spectrum, of the same kind."""
    require_somewhere(request.user, ACTION)
    row = get_object_or_404(Spectrum, pk=pk)
    form = SpectrumForm(
        request.POST or None,
        request.FILES or None,
        kind=row_kind(row),
        named=True,
        initial=spectrum_initial(row),
    )

    def revise() -> Spectrum:
        return spectrum_revise(
            row=row,
            data=form.plain,
            source=form.cleaned_data["source"],
            actor=request.user,
            at=now(),
        )

    return _form_page(request, form, revise, row)


def _form_page(
    request: Request, form: SpectrumForm, save: Any, row: Spectrum | None
) -> HttpResponse:
    if request.POST.get("step") == "save":
        made = sent(form, partial(save), about=[row] if row else [])
        if made:
            messages.success(request, REVISED if row else RECORDED)
            return redirect("spectrum", made.pk)
    shown, read = form, None
    if form.is_bound and form.is_valid():
        shown, read = form.again(), spectrum_shown(form.read)
    context = {
        "row": row,
        "kind": KIND_WORDS[form.kind],
        "form": shown,
        "shown": read,
    }
    return render(request, "repairs/spectrum_new.html", context)
