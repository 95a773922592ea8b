"""Planning a repair, recording one as released, and releasing a planned one."""

from __future__ import annotations

from functools import partial
from typing import Any

from django.contrib import messages
from django.http import HttpResponse, QueryDict
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods

from fleet.access import operators_for, require, require_somewhere, visible_or_404
from fleet.clock import now, today
from fleet.forms.signing import SIGNATURE
from fleet.models import Aircraft
from fleet.services.signing import Proof
from fleet.views.requests import Request
from fleet.views.sending import sent, sent_signed
from repairs.forms.groups import group
from repairs.forms.raised import RaisedForm
from repairs.forms.repair_answers import AnsweredForm, LiesForm
from repairs.forms.repair_sheet import RepairSheet
from repairs.forms.repairs import PlanForm, RepairForm
from repairs.models import OPEN_STATES, Finding, Repair
from repairs.selectors.choices import (
    aircraft_chosen,
    aircraft_of,
    covered_keys,
    findings_to_answer,
    repair_choices,
)
from repairs.selectors.repair_overlaps import repairs_met
from repairs.selectors.repair_planned import plan_said, planned_answers
from repairs.selectors.repairs import repair_whole
from repairs.services.findings import standing_on
from repairs.services.places import place_columns_of, place_try
from repairs.services.repair_entry import RECTIFIABLE
from repairs.services.repairs import repair_embody, repair_plan, repair_record

ACTION = "repair_record"
METHODS = ["GET", "HEAD", "POST"]
RECORDED = "{number} is recorded."
PLANNED = "{number} is planned; it answers no finding before its release."
RELEASED = "{number} is released."


@require_http_methods(METHODS)
def repair_new(request: Request) -> HttpResponse:
    """A repair at its release; choosing the aircraft shows what it may answer."""
    require_somewhere(request.user, ACTION)
    saving = request.POST.get("step") == "save"
    sheet = _release_sheet(request, bound=saving)

    def save(proof: Proof) -> Repair:
        return repair_record(
            entry=sheet.entry(), proof=proof, actor=request.user, at=now()
        )

    if saving and sheet.is_valid() and (made := sent_signed(request, sheet.form, save)):
        messages.success(request, RECORDED.format(number=made))
        return redirect("repair", made.pk)
    return _page(request, sheet, "New repair", "Record the repair")


@require_http_methods(METHODS)
def repair_release(request: Request, pk: int) -> HttpResponse:
    """A planned repair as it was done; what the plan said is filled in."""
    row = visible_or_404(repair_whole(), request.user, pk=pk)
    require(request.user, ACTION, row.aircraft.operator_id)
    saving = request.method == "POST"
    sheet = _release_sheet(request, bound=saving, repair=row)
    save = partial(_embody, request, sheet, row)
    about = [row]
    if (
        saving
        and sheet.is_valid()
        and (made := sent_signed(request, sheet.form, save, about=about))
    ):
        messages.success(request, RELEASED.format(number=made))
        return redirect("repair", made.pk)
    return _page(request, sheet, "Release", "Release the repair", repair=row)


@require_http_methods(METHODS)
def repair_plan_page(request: Request) -> HttpResponse:
    """What is known of a repair that is to be done."""
    require_somewhere(request.user, ACTION)
    saving = request.POST.get("step") == "save"
    sheet = _plan_sheet(request, bound=saving)

    def save() -> Repair:
        return repair_plan(entry=sheet.entry(), actor=request.user, at=now())

    if saving and sheet.is_valid() and (made := sent(sheet.form, save)):
        messages.success(request, PLANNED.format(number=made))
        return redirect("repair", made.pk)
    return _page(request, sheet, "Plan a repair", "Plan the repair")


def _embody(request: Request, sheet: RepairSheet, row: Repair, proof: Proof) -> Repair:
    return repair_embody(
        repair=row,
        entry=sheet.entry(),
        proof=proof,
        actor=request.user,
        at=now(),
    )


def _page(
    request: Request,
    sheet: RepairSheet,
    heading: str,
    button: str,
    repair: Repair | None = None,
) -> HttpResponse:
    form, raised = sheet.form, sheet.raised
    signature = group(form, "Your signature", SIGNATURE)
    context = {
        "sheet": sheet,
        "form": form,
        "answered": sheet.answered,
        "raised": raised,
        "heading": heading,
        "button": button,
        "repair": repair,
        "groups": form.groups(),
        "signature": signature if signature.fields else None,
    }
    if raised is not None:
        words = "New inspection requirement"
        context["inspection"] = group(raised, words, raised.fields, True)
    return render(request, "repairs/repair_new.html", context)


def _options(
    request: Request, said: QueryDict, repair: Repair | None
) -> tuple[Aircraft | None, dict[str, Any]]:
    """The aircraft, and what a form on it may name."""
    operators = operators_for(request.user, ACTION)
    choices = aircraft_of(operators)
    key = str(repair.aircraft_id) if repair else said.get("aircraft", "")
    aircraft = aircraft_chosen(choices, key)
    if repair is not None:
        choices = choices.filter(pk=repair.aircraft_id)
    return aircraft, {
        "aircraft": choices,
        "choices": repair_choices(aircraft, operators),
        "unit": aircraft.variant.aircraft_type.entry_unit if aircraft else "in",
        "today": today(),
    }


def _release_sheet(
    request: Request, *, bound: bool, repair: Repair | None = None
) -> RepairSheet:
    said = request.POST or request.GET
    aircraft, options = _options(request, said, repair)
    unit, planned = options["unit"], planned_answers(repair)
    asked = _key(said, "finding")
    keys = [asked] if asked else [row.finding_id for row in planned.values()]
    findings = findings_to_answer(aircraft, RECTIFIABLE, keys)
    if bound:
        form = RepairForm(said, request.FILES, user=request.user, **options)
        met = _met(form, aircraft, repair)
        return RepairSheet(
            form,
            [AnsweredForm(said, finding=one, unit=unit) for one in findings],
            [LiesForm(said, repair=one) for one in met],
            RaisedForm(said),
        )
    first = _first(aircraft, repair) | _told(said, findings)
    return RepairSheet(
        RepairForm(initial=first, user=request.user, **options),
        [
            AnsweredForm(
                finding=one, unit=unit, initial=_answer(one, asked, planned.get(one.pk))
            )
            for one in findings
        ],
        [],
        RaisedForm(),
    )


def _plan_sheet(request: Request, *, bound: bool) -> RepairSheet:
    said = request.POST or request.GET
    aircraft, options = _options(request, said, None)
    unit = options["unit"]
    asked = covered_keys(_key(said, "finding"), _key(said, "substantiation"))
    findings = findings_to_answer(aircraft, OPEN_STATES, asked)
    if bound:
        form = PlanForm(said, **options)
        rows = [AnsweredForm(said, finding=one, unit=unit) for one in findings]
        return RepairSheet(form, rows, [])
    form = PlanForm(initial=_told(said, findings), **options)
    rows = [
        AnsweredForm(finding=one, unit=unit, initial={"answers": one.pk in asked})
        for one in findings
    ]
    return RepairSheet(form, rows, [])


def _first(aircraft: Aircraft | None, repair: Repair | None) -> dict[str, Any]:
    """Counters of today, and what a plan said."""
    first: dict[str, Any] = {"released_on": today()}
    if aircraft is not None:
        at = standing_on(aircraft, today()).at
        first |= {
            "at_minutes": at.minutes,
            "at_cycles": at.cycles,
            "at_landings": at.landings,
        }
    return first | (plan_said(repair) if repair else {})


def _told(said: QueryDict, findings: list[Finding]) -> dict[str, Any]:
    """What the address said, and the location of the finding it names."""
    told: dict[str, Any] = {name: said.get(name) for name in said if said.get(name)}
    for one in findings:
        if str(one.pk) == said.get("finding"):
            told.setdefault("place_entered", one.place_entered)
    return told


def _answer(finding: Finding, asked: int | None, row: Any) -> dict[str, Any]:
    if row is None:
        return {"answers": finding.pk == asked}
    return {"answers": True, "covers": row.covers, "damage_removed": row.damage_removed}


def _key(said: QueryDict, name: str) -> int | None:
    text = said.get(name, "")
    return int(text) if text.isdecimal() else None


def _met(
    form: RepairForm, aircraft: Aircraft | None, repair: Repair | None
) -> list[Repair]:
    """Embodied repairs that the one on the form meets, unless it supersedes them."""
    if aircraft is None or not form.is_valid():
        return []
    data = form.cleaned_data
    columns = place_columns_of(place_try(aircraft, data["place_entered"]))
    drawn = Repair(
        aircraft=aircraft,
        length_mm=data["length_mm"],
        width_mm=data["width_mm"],
        **columns,
    )
    but = [*data.get("supersedes", ()), *([repair] if repair else [])]
    return repairs_met(aircraft, drawn, but=but)
