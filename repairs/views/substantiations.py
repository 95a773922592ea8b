"""Substantiations: the list, a new folder, the folder, its columns, a new revision."""

from __future__ import annotations

from functools import partial
from typing import Any

from django.contrib import messages
from django.core.paginator import Paginator
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods, require_safe

from fleet.access import (
    may,
    may_somewhere,
    operators_for,
    require,
    require_somewhere,
    visible_or_404,
)
from fleet.clock import now, today
from fleet.models import Aircraft
from fleet.selectors.history import history_of
from fleet.views.pages import query_without_page
from fleet.views.requests import Request
from fleet.views.sending import sent
from repairs.folder_filter import FolderFilter
from repairs.forms.substantiations import (
    FolderForm,
    NewFolderForm,
    ReviseForm,
    initial_of,
)
from repairs.models import Substantiation
from repairs.selectors.choices import aircraft_chosen, aircraft_of
from repairs.selectors.signatures import approvals_verified
from repairs.selectors.substantiation_choices import (
    NewFolder,
    findings_nearby,
    findings_to_cover,
    new_folder_of,
    preparers_at,
    repairs_without_folder,
)
from repairs.selectors.substantiations import (
    FolderLine,
    folder_shown,
    folders_listed,
    substantiation_whole,
)
from repairs.services.substantiations import (
    substantiation_draft,
    substantiation_edit,
    substantiation_revise,
)

METHODS = ["GET", "HEAD", "POST"]
PER_PAGE = 50
DRAFTED = "{number} is drafted; review its neighbours and add what is missing."
SAVED = "{number}: saved."
REVISED = "{number} is a draft; the revision before it stands as it was signed."


@require_safe
def substantiation_list(request: Request) -> HttpResponse:
    """The latest revision of each folder, the newest folder first."""
    rows = folders_listed(request.user)
    chosen = FolderFilter(request.GET, queryset=rows, request=request)
    page = Paginator(chosen.qs, PER_PAGE).get_page(request.GET.get("page"))
    context = {
        "filter": chosen,
        "page": page,
        "lines": [FolderLine(row) for row in page],
        "query": query_without_page(request),
        "may_draft": may_somewhere(request.user, "substantiation_draft"),
    }
    return render(request, "repairs/substantiation_list.html", context)


@require_safe
def substantiation(request: Request, pk: int) -> HttpResponse:
    """One revision: what it covers, what was looked at, how far it has come."""
    row = visible_or_404(substantiation_whole(), request.user, pk=pk)
    operator = row.aircraft.operator_id
    context = {
        "folder": row,
        "shown": folder_shown(row, day=today()),
        "approvals": approvals_verified(row),
        "may_draft": may(request.user, "substantiation_draft", operator),
        "may_sign": may(request.user, "approval_sign", operator),
        "history": history_of(row),
    }
    return render(request, "repairs/substantiation.html", context)


@require_http_methods(METHODS)
def substantiation_new(request: Request) -> HttpResponse:
    """A new folder, from a finding, from a repair, or from its aircraft."""
    require_somewhere(request.user, "substantiation_draft")
    operators = operators_for(request.user, "substantiation_draft")
    choices = aircraft_of(operators)
    start = new_folder_of(request.GET, choices)
    aircraft = aircraft_chosen(choices, start.aircraft)
    if aircraft is None:
        context: dict[str, Any] = {"choices": choices}
        return render(request, "repairs/substantiation_new.html", context)
    form = _new_form(request, aircraft, start)
    if made := sent(form, partial(_draft, request, aircraft, form)):
        messages.success(request, DRAFTED.format(number=made))
        return redirect("substantiation", made.pk)
    context = {"form": form, "aircraft": aircraft, "groups": form.groups()}
    return render(request, "repairs/substantiation_new.html", context)


def _new_form(request: Request, aircraft: Aircraft, start: NewFolder) -> NewFolderForm:
    findings = findings_to_cover(aircraft)
    return NewFolderForm(
        request.POST or None,
        people=preparers_at(aircraft),
        findings=findings,
        first=findings_nearby(findings, start.initial.get("findings", ()), today()),
        repairs=repairs_without_folder(aircraft),
        initial=start.initial | {"prepared_by": request.user.person_id},
    )


def _draft(request: Request, aircraft: Aircraft, form: NewFolderForm) -> Substantiation:
    return substantiation_draft(
        entry=form.entry(),
        aircraft=aircraft,
        findings=form.covered(),
        repair=form.cleaned_data["repair"],
        actor=request.user,
        at=now(),
    )


@require_http_methods(METHODS)
def substantiation_edit_page(request: Request, pk: int) -> HttpResponse:
    """Other columns, while nobody has signed."""
    row = folder_to_draft(request, pk)
    form = FolderForm(
        request.POST or None,
        people=preparers_at(row.aircraft),
        initial=initial_of(row),
    )

    def save() -> Substantiation:
        return substantiation_edit(
            substantiation=row, entry=form.entry(), actor=request.user, at=now()
        )

    if made := sent(form, save, about=[row]):
        messages.success(request, SAVED.format(number=made))
        return redirect("substantiation", made.pk)
    return folder_page(request, row, "Edit", "Save", groups=form.groups(), form=form)


@require_http_methods(METHODS)
def substantiation_revise_page(request: Request, pk: int) -> HttpResponse:
    """A new revision with the rows of the last one."""
    row = folder_to_draft(request, pk)
    form = ReviseForm(
        request.POST or None,
        people=preparers_at(row.aircraft),
        initial={"prepared_by": request.user.person_id},
    )

    def save() -> Substantiation:
        return substantiation_revise(
            substantiation=row,
            reason=form.cleaned_data["revision_reason"],
            prepared_by=form.cleaned_data["prepared_by"],
            actor=request.user,
            at=now(),
        )

    if made := sent(form, save, about=[row]):
        messages.success(request, REVISED.format(number=made))
        return redirect("substantiation", made.pk)
    return folder_page(request, row, "Revise", "Make the revision", form=form)


def folder_to_draft(request: Request, pk: int) -> Substantiation:
    """The revision, if it is the reader's to change."""
    row = visible_or_404(substantiation_whole(), request.user, pk=pk)
    require(request.user, "substantiation_draft", row.aircraft.operator_id)
    return row


def folder_page(
    request: Request, row: Substantiation, heading: str, action: str, **more: Any
) -> HttpResponse:
    """A form about a folder."""
    context = {"folder": row, "heading": heading, "action": action, **more}
    return render(request, "repairs/substantiation_form.html", context)
