"""The rows of a draft: neighbours one by one, cases, effects, documents, findings."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial
from typing import Any

from django.contrib import messages
from django.core.exceptions import ValidationError
from django.forms import Form
from django.http import Http404, HttpResponse
from django.shortcuts import get_object_or_404, redirect
from django.views.decorators.http import require_http_methods, require_POST

from fleet.clock import now, today
from fleet.models import Person
from fleet.services.signing import NO_PERSON
from fleet.views.requests import Request
from fleet.views.sending import sent
from repairs.forms.substantiations import (
    CaseForm,
    CoverForm,
    EffectsForm,
    FolderDocumentForm,
    FolderRepairForm,
    NeighbourForm,
)
from repairs.models import Substantiation
from repairs.selectors.substantiation_choices import (
    evaluations_to_cite,
    findings_to_cover,
    repairs_without_folder,
)
from repairs.selectors.substantiation_content import neighbour_name
from repairs.selectors.substantiations import effects_said, neighbour_next
from repairs.services.substantiation_rows import (
    substantiation_case_add,
    substantiation_document_add,
    substantiation_effects_answer,
    substantiation_finding_add,
    substantiation_neighbour_review,
    substantiation_neighbours_find,
    substantiation_row_withdraw,
)
from repairs.services.substantiations import substantiation_repair_link
from repairs.views.substantiations import METHODS, SAVED, folder_page, folder_to_draft

FOUND = "{number}: {count} more within reach; review them."
NONE_FOUND = "{number}: nothing within reach that is not listed."
WITHDRAWN = "{number}: withdrawn; it stays in the record."
REVIEWED = "{name} is reviewed."
NO_SUCH_ROW = "A folder has no such rows."
ROWS = {"finding": "finding_rows", "case": "cases", "document": "documents"}


@require_http_methods(METHODS)
def substantiation_neighbour(request: Request, pk: int, row_pk: int) -> HttpResponse:
    """One neighbour: whether it interacts, and why; then the next one."""
    folder = folder_to_draft(request, pk)
    row = get_object_or_404(folder.neighbours.filter(withdrawn=False), pk=row_pk)
    first = {"answer": row.answer, "reason": row.reason, "on": today()}
    form = NeighbourForm(request.POST or None, today=today(), initial=first)

    def save() -> Any:
        return substantiation_neighbour_review(
            neighbour=row,
            **form.cleaned_data,
            person=_person(request),
            actor=request.user,
            at=now(),
        )

    if sent(form, save, about=[row]):
        messages.success(request, REVIEWED.format(name=neighbour_name(row)))
        following = neighbour_next(folder)
        if following is None:
            return redirect("substantiation", folder.pk)
        return redirect("substantiation_neighbour", folder.pk, following.pk)
    more = {"form": form, "neighbour": row, "name": neighbour_name(row)}
    return folder_page(request, folder, "Review", "Save the answer", **more)


@require_POST
def substantiation_neighbours(request: Request, pk: int) -> HttpResponse:
    """Look again for what is within reach."""
    folder = folder_to_draft(request, pk)
    by: dict[str, Any] = {"actor": request.user, "at": now()}
    find = partial(substantiation_neighbours_find, substantiation=folder, **by)
    if (found := _tried(request, find)) is not None:
        text = FOUND if found else NONE_FOUND
        messages.success(request, text.format(number=folder, count=len(found)))
    return redirect("substantiation", folder.pk)


@require_http_methods(METHODS)
def substantiation_finding(request: Request, pk: int) -> HttpResponse:
    """One more finding that the folder covers."""
    folder = folder_to_draft(request, pk)
    rows = findings_to_cover(folder.aircraft)
    form = CoverForm(request.POST or None, findings=rows)
    save = partial(substantiation_finding_add, substantiation=folder)
    return _added(request, folder, form, "Cover a finding", save)


@require_http_methods(METHODS)
def substantiation_repair(request: Request, pk: int) -> HttpResponse:
    """The repair that this is the folder of."""
    folder = folder_to_draft(request, pk)
    rows = repairs_without_folder(folder.aircraft)
    form = FolderRepairForm(request.POST or None, repairs=rows)
    save = partial(substantiation_repair_link, substantiation=folder)
    return _added(request, folder, form, "Folder of a repair", save)


@require_http_methods(METHODS)
def substantiation_case(request: Request, pk: int) -> HttpResponse:
    """A load case."""
    folder = folder_to_draft(request, pk)
    form = CaseForm(request.POST or None, evaluations=evaluations_to_cite(folder))

    def save(**by: Any) -> Any:
        return substantiation_case_add(substantiation=folder, case=form.entry(), **by)

    return _page(request, folder, form, save, "Add a load case")


@require_http_methods(METHODS)
def substantiation_effects(request: Request, pk: int) -> HttpResponse:
    """What else it touches."""
    folder = folder_to_draft(request, pk)
    form = EffectsForm(request.POST or None, initial=effects_said(folder))

    def save(**by: Any) -> Any:
        answers = form.answers()
        return substantiation_effects_answer(
            substantiation=folder, answers=answers, **by
        )

    about = [folder, folder.effects.all()]
    return _page(request, folder, form, save, "Effects", about=about)


@require_http_methods(METHODS)
def substantiation_document(request: Request, pk: int) -> HttpResponse:
    """A document of the folder, with its file."""
    folder = folder_to_draft(request, pk)
    form = FolderDocumentForm(request.POST or None, request.FILES or None)

    def save(**by: Any) -> Any:
        upload = form.cleaned_data["file"]
        return substantiation_document_add(
            substantiation=folder, entry=form.entry(), upload=upload, **by
        )

    return _page(request, folder, form, save, "Add a document")


@require_POST
def substantiation_withdraw(
    request: Request, pk: int, what: str, row_pk: int
) -> HttpResponse:
    """A finding, case or document that holds no more."""
    folder = folder_to_draft(request, pk)
    if what not in ROWS:
        raise Http404(NO_SUCH_ROW)
    row = get_object_or_404(getattr(folder, ROWS[what]), pk=row_pk)
    by: dict[str, Any] = {"actor": request.user, "at": now()}
    if _tried(request, partial(substantiation_row_withdraw, row=row, **by)) is not None:
        messages.success(request, WITHDRAWN.format(number=folder))
    return redirect("substantiation", folder.pk)


ADDED = {
    "neighbours": substantiation_neighbours,
    "finding": substantiation_finding,
    "repair": substantiation_repair,
    "case": substantiation_case,
    "effects": substantiation_effects,
    "document": substantiation_document,
}
"""What is written on a folder, by the last part of its address."""


def _added(
    request: Request,
    folder: Substantiation,
    form: Form,
    heading: str,
    save: Callable[..., object],
) -> HttpResponse:
    """What the form chose is handed to the service under the field's own name."""

    def chosen(**by: Any) -> object:
        return save(**form.cleaned_data, **by)

    return _page(request, folder, form, chosen, heading)


def _page(
    request: Request,
    folder: Substantiation,
    form: Form,
    save: Callable[..., object],
    heading: str,
    about: Any = (),
) -> HttpResponse:
    by: dict[str, Any] = {"actor": request.user, "at": now()}
    if sent(form, partial(save, **by), about=about or [folder]):
        messages.success(request, SAVED.format(number=folder))
        return redirect("substantiation", folder.pk)
    return folder_page(request, folder, heading, "Save", form=form)


def _tried(request: Request, act: Callable[[], Any]) -> Any:
    """What the act gave; None when it was refused, which is said on the next page."""
    try:
        return act()
    except ValidationError as error:
        messages.error(request, " ".join(error.messages))
        return None


def _person(request: Request) -> Person:
    if request.user.person is None:
        raise ValidationError(NO_PERSON)
    return request.user.person
