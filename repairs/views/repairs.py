"""Repairs: the list, one repair, a new one, and an aircraft's current status."""

from __future__ import annotations

from functools import partial
from typing import Any

from django.contrib import messages
from django.core.paginator import Paginator
from django.http import HttpResponse, QueryDict
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods, require_safe

from fleet.access import (
    may,
    may_somewhere,
    operators_for,
    require_somewhere,
    visible_or_404,
)
from fleet.clock import now, today
from fleet.due import Counters
from fleet.forms.signing import SIGNATURE
from fleet.selectors.aircraft import aircraft_visible
from fleet.selectors.history import history_of
from fleet.services.signing import Proof
from fleet.tables import csv_response
from fleet.views.pages import query_without_page
from fleet.views.requests import Request
from fleet.views.sending import sent_signed
from repairs.filters import RepairFilter
from repairs.forms.groups import group
from repairs.forms.raised import RaisedForm
from repairs.forms.repairs import AnsweredForm, RepairForm
from repairs.models import Repair
from repairs.selectors.choices import (
    aircraft_chosen,
    aircraft_of,
    findings_to_answer,
    repair_choices,
)
from repairs.selectors.evaluations import evaluations_current, state_of
from repairs.selectors.maps import item_map_svg
from repairs.selectors.neighbours import neighbours
from repairs.selectors.repair_status import HEADER, repair_status
from repairs.selectors.repairs import repair_around, repair_whole, repairs_listed
from repairs.selectors.signatures import approvals_verified
from repairs.services.findings import standing_on
from repairs.services.photographs import Photo
from repairs.services.repair_entry import RECTIFIABLE, RepairEntry
from repairs.services.repairs import repair_record

PER_PAGE = 50
RECORDED = "{number} is recorded."


@require_safe
def repair_list(request: Request) -> HttpResponse:
    """Repairs of the reader's operators, the newest release first."""
    rows = repairs_listed(request.user)
    chosen = RepairFilter(request.GET, queryset=rows, request=request)
    page = Paginator(chosen.qs, PER_PAGE).get_page(request.GET.get("page"))
    context = {
        "filter": chosen,
        "page": page,
        "query": query_without_page(request),
        "may_record": may_somewhere(request.user, "repair_record"),
    }
    return render(request, "repairs/repair_list.html", context)


@require_safe
def repair(request: Request, pk: int) -> HttpResponse:
    """What was done, with which data, what it covers, and what follows."""
    row = visible_or_404(repair_whole(), request.user, pk=pk)
    near = neighbours(row, user=request.user)
    context = {
        "repair": row,
        "around": repair_around(row),
        "map": item_map_svg(row, user=request.user),
        "near": near,
        "evaluations": [(one, state_of(one)) for one in evaluations_current(row)],
        "unit": row.aircraft.variant.aircraft_type.entry_unit,
        "approvals": approvals_verified(row),
        "may_sign": may(request.user, "approval_sign", row.aircraft.operator_id),
        "may_evaluate": may(request.user, "evaluation_make", row.aircraft.operator_id),
        "history": history_of(row),
    }
    return render(request, "repairs/repair.html", context)


@require_safe
def repair_status_page(request: Request, pk: int) -> HttpResponse:
    """The current repair status of an aircraft, on screen or as CSV."""
    aircraft = visible_or_404(aircraft_visible(request.user), request.user, pk=pk)
    found = repair_status(aircraft, as_of=today(), known_at=now(), user=request.user)
    if request.GET.get("format") == "csv":
        name = f"repairs-{aircraft.serial_number}-{found.as_of}.csv"
        return csv_response(name, HEADER, found.csv_rows())
    context = {"status": found, "header": HEADER}
    return render(request, "repairs/repair_status.html", context)


@require_http_methods(["GET", "HEAD", "POST"])
def repair_new(request: Request) -> HttpResponse:
    """A repair at its release; choosing the aircraft shows what it may answer."""
    require_somewhere(request.user, "repair_record")
    said = request.POST or request.GET
    saving = request.POST.get("step") == "save"
    form, answered, raised = _forms(request, said, bound=saving)
    refused = [one for one in (*answered, raised) if saving and not one.is_valid()]
    save = partial(_record, request, form, answered, raised)
    if saving and not refused and (made := sent_signed(request, form, save)):
        messages.success(request, RECORDED.format(number=made))
        return redirect("repair", made.pk)
    context = {
        "form": form,
        "answered": answered,
        "raised": raised,
        "groups": form.groups(),
        "inspection": group(raised, "New inspection requirement", raised.fields, True),
        "signature": group(form, "Your signature", SIGNATURE),
    }
    return render(request, "repairs/repair_new.html", context)


def _forms(
    request: Request, said: QueryDict, *, bound: bool
) -> tuple[RepairForm, list[AnsweredForm], RaisedForm]:
    """The three parts of the form, bound or filled with what was said before."""
    operators = operators_for(request.user, "repair_record")
    choices = aircraft_of(operators)
    aircraft = aircraft_chosen(choices, said.get("aircraft", ""))
    unit = aircraft.variant.aircraft_type.entry_unit if aircraft else "in"
    options: dict[str, Any] = {
        "aircraft": choices,
        "choices": repair_choices(aircraft, operators),
        "unit": unit,
        "today": today(),
    }
    asked = said.get("finding", "")
    also = int(asked) if asked.isdecimal() else None
    findings = findings_to_answer(aircraft, RECTIFIABLE, also)
    if bound:
        return (
            RepairForm(said, request.FILES, user=request.user, **options),
            [AnsweredForm(said, finding=one, unit=unit) for one in findings],
            RaisedForm(said),
        )
    at = standing_on(aircraft, today()).at if aircraft else Counters()
    first = {
        "released_on": today(),
        "at_minutes": at.minutes,
        "at_cycles": at.cycles,
        "at_landings": at.landings,
    }
    told = {name: said.get(name) for name in said if said.get(name)}
    for one in findings:
        if one.pk == also:
            told.setdefault("place_entered", one.place_entered)
    return (
        RepairForm(initial=first | told, user=request.user, **options),
        [
            AnsweredForm(finding=one, unit=unit, initial={"answers": one.pk == also})
            for one in findings
        ],
        RaisedForm(),
    )


def _record(
    request: Request,
    form: RepairForm,
    answered: list[AnsweredForm],
    raised: RaisedForm,
    proof: Proof,
) -> Repair:
    data = form.cleaned_data
    aircraft = data["aircraft"]
    photographs = [
        Photo(upload, data["role"], data["caption"]) for upload in data["photographs"]
    ]
    return repair_record(
        entry=RepairEntry(
            **{name: data[name] for name in form.PASSED_ON if name in data},
            at=form.counters(),
            approval=form.approval(),
            replacement_limit=form.replacement_limit(),
            findings=[a for a in (one.answered() for one in answered) if a],
            photographs=photographs,
            new_requirement=raised.draft(
                operator=aircraft.operator,
                aircraft=aircraft,
                on=data["released_on"],
                base="release",
            ),
        ),
        proof=proof,
        actor=request.user,
        at=now(),
    )
