"""Deciding on findings, a decision's page, and signing records."""

from __future__ import annotations

from functools import partial
from typing import Any

from django.contrib import messages
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods, require_safe

from fleet.access import may, require, visible_or_404
from fleet.clock import now, today
from fleet.forms.signing import SIGNATURE
from fleet.selectors.applicability import applies_to
from fleet.selectors.history import history_of
from fleet.services.signing import Proof
from fleet.views.requests import Request
from fleet.views.sending import sent_signed
from repairs.forms.dispositions import DispositionForm
from repairs.forms.groups import group
from repairs.forms.raised import RaisedForm
from repairs.models import Disposition, Finding
from repairs.selectors.choices import decision_choices
from repairs.selectors.deferrals import answered_with, chain_of
from repairs.selectors.findings import disposition_whole, finding_whole
from repairs.selectors.neighbours import neighbours
from repairs.selectors.next_step import deferral_to_extend
from repairs.selectors.report_triggers import is_critical_crack
from repairs.selectors.signatures import approvals_verified
from repairs.services.disposition_entry import DispositionEntry
from repairs.services.dispositions import disposition_decide
from repairs.services.finding_guards import DECIDABLE
from repairs.services.findings import standing_on

METHODS = ["GET", "HEAD", "POST"]
DECIDED = "{number} is recorded; it cannot be altered, only replaced."
PASSED_ON = (
    "reason", "decided_on", "limit_on", "crew_informed_on", "scale", "scale_reason",
    "category", "evaluations", "limit_checks", "requirement", "replaces",
    "substantiation",
)  # fmt: skip


@require_http_methods(METHODS)
def disposition_new(request: Request, pk: int) -> HttpResponse:
    """A decision on a finding, and on others of its aircraft if it answers them."""
    row = visible_or_404(finding_whole(request.user), request.user, pk=pk)
    require(request.user, "disposition_decide", row.aircraft.operator_id)
    near = neighbours(row, user=request.user).here
    form = DispositionForm(
        request.POST or None,
        user=request.user,
        choices=decision_choices(row, DECIDABLE),
        today=today(),
        near=near,
        unit=row.aircraft.variant.aircraft_type.entry_unit,
        initial=_initial(request, row),
    )
    raised = RaisedForm(request.POST or None, initial={"area": row.place_text})
    also = form.answered_too() if form.is_valid() else ()
    save = partial(_decide, request, row, form, raised)
    if raised.is_valid() and (
        made := sent_signed(request, form, save, about=[row, *also])
    ):
        messages.success(request, DECIDED.format(number=made.revised))
        return redirect("disposition", made.pk)
    context = {
        "finding": row,
        "form": form,
        "raised": raised,
        "groups": [
            *form.groups(),
            group(raised, "New inspection requirement", raised.fields, True),
            group(form, "Your signature", SIGNATURE),
        ],
        "critical": is_critical_crack(row),
        "chain": chain_of([row]),
        "unit": row.aircraft.variant.aircraft_type.entry_unit,
    }
    return render(request, "repairs/disposition_new.html", context)


@require_safe
def disposition(request: Request, pk: int) -> HttpResponse:
    """The decision as signed: findings, basis, neighbours, limit, what follows."""
    row = visible_or_404(disposition_whole(), request.user, pk=pk)
    findings = list(row.finding_rows.select_related("finding"))
    context = {
        "disposition": row,
        "applies": applies_to(row.basis_document, row.aircraft),
        "findings": findings,
        "basis": row.basis_rows.select_related("evaluation", "limit_check__limit"),
        "neighbours": row.neighbour_reviews.select_related("finding", "repair"),
        "requirements": row.requirements.all(),
        "due_points": row.due_points.all(),
        "chain": chain_of([one.finding for one in findings]),
        "repairs": row.repairs.all(),
        "later": Disposition.objects.filter(replaces=row).first(),
        "approvals": approvals_verified(row),
        "extends": deferral_to_extend(row, request.user),
        "may_sign": may(request.user, "approval_sign", row.aircraft.operator_id),
        "unit": row.aircraft.variant.aircraft_type.entry_unit,
        "history": history_of(row),
    }
    return render(request, "repairs/disposition.html", context)


def _initial(request: Request, row: Finding) -> dict[str, Any]:
    """A crack in PSE or FCS starts as: rectify before further flight.

    An address may ask for another decision; extending takes all that was deferred.
    """
    flown = standing_on(row.aircraft, today()).at
    current = row.disposition_rows.order_by("-pk").first()
    kind = request.GET.get("kind") or ("rectify" if is_critical_crack(row) else "")
    return {
        "kind": kind,
        "also": answered_with(current, row) if kind == "defer" and current else [],
        "decided_on": today(),
        "at_minutes": flown.minutes,
        "at_cycles": flown.cycles,
        "at_landings": flown.landings,
        "replaces": current.disposition_id if current else None,
        "limit_checks": row.limit_checks.all(),
    }


def _decide(
    request: Request,
    row: Finding,
    form: DispositionForm,
    raised: RaisedForm,
    proof: Proof,
) -> Disposition:
    data = form.cleaned_data
    return disposition_decide(
        entry=DispositionEntry(
            aircraft=row.aircraft,
            findings=[row, *form.answered_too()],
            kind=data["kind"],
            basis=form.basis(),
            at=form.counters(),
            limit=form.limit(),
            neighbours=form.reviewed(),
            new_requirement=raised.draft(
                operator=row.aircraft.operator,
                aircraft=row.aircraft,
                on=data["decided_on"],
                base="effective",
            ),
            **{name: data[name] for name in PASSED_ON if name in data},
        ),
        proof=proof,
        actor=request.user,
        at=now(),
    )
