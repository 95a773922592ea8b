"""Pages of inspection requirements: the list, one, a new one, its second keying."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from django.contrib import messages
from django.core.paginator import Paginator
from django.http import Http404, HttpResponse
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
from fleet.models import Operator
from fleet.selectors.history import history_of
from fleet.views.pages import query_without_page
from fleet.views.requests import Request
from fleet.views.sending import sent
from repairs.forms.requirements import AgainForm, RequirementFilter, RequirementForm
from repairs.models import (
    Disposition,
    Evaluation,
    Finding,
    InspectionRequirement,
    Repair,
)
from repairs.selectors.late_entries import accomplishments_late
from repairs.selectors.requirements import (
    coverage_of,
    limits_of,
    marks_of,
    origin_of,
    requirement_of,
    requirements_shown,
    rework_counted_from,
    subject_lines,
)
from repairs.services.inspections import requirement_raise
from repairs.services.reentry import requirement_rekey
from repairs.services.requirement_draft import RequirementDraft

FORM_METHODS = ["GET", "HEAD", "POST"]
PER_PAGE = 50
RAISED = "{number} is in force and on the due list; another person keys it again."
AGREED = "Both keyings of {number} agree: it is verified."
DIFFERS = (
    "The second keying of {number} differs from the first. It stays in force, "
    "unverified; compare both with the document."
)


@require_safe
def requirement_list(request: Request) -> HttpResponse:
    """Requirements as filtered, newest first."""
    form = RequirementFilter(request.GET)
    wanted = form.cleaned_data if form.is_valid() else {}
    pages = Paginator(requirements_shown(request.user, **wanted), PER_PAGE)
    page = pages.get_page(request.GET.get("page"))
    context = {
        "form": form,
        "page": page,
        "rows": [(row, limits_of(row), marks_of(row)) for row in page],
        "query": query_without_page(request),
        "may_raise": may_somewhere(request.user, "requirement_raise"),
    }
    return render(request, "repairs/requirement_list.html", context)


@require_safe
def requirement(request: Request, pk: int) -> HttpResponse:
    """One requirement: limits, where it applies, what is due and what was done."""
    row = visible_or_404(requirement_of(request.user), request.user, pk=pk)
    lines = subject_lines(row, as_of=today())
    user, operator = request.user, row.operator_id
    context = {
        "requirement": row,
        "origin": origin_of(row),
        "limits": limits_of(row),
        "lines": lines,
        "coverage": coverage_of(row, lines),
        "marks": marks_of(row),
        "late": accomplishments_late(
            row.operator, (done for line in lines for done in line.done), as_of=today()
        ),
        "reentries": row.reentries.select_related("keyed_by"),
        "history": history_of(row),
        "may_answer": may(user, "requirement_raise", operator),
        "may_record": may(user, "accomplishment_record", operator),
        "may_key_again": not row.verified
        and row.keyed_by_id != user.pk
        and may(user, "requirement_rekey", operator),
    }
    return render(request, "repairs/requirement.html", context)


@dataclass(frozen=True)
class Origin:
    """The record a new requirement comes from, and what follows from it."""

    operator: Operator
    columns: dict[str, Any]
    initial: dict[str, Any]
    words: str


@require_http_methods(FORM_METHODS)
def requirement_new(request: Request) -> HttpResponse:
    """A new requirement from a repair, finding, decision, calculation or document."""
    require_somewhere(request.user, "requirement_raise")
    origin = _origin(request)
    require(request.user, "requirement_raise", origin.operator.pk)
    form = RequirementForm(
        request.POST or None, operator=origin.operator, initial=origin.initial
    )

    def save() -> InspectionRequirement:
        columns = form.draft_columns() | origin.columns
        draft = RequirementDraft(operator=origin.operator, **columns)
        return requirement_raise(actor=request.user, at=now(), draft=draft)

    made = sent(form, save)
    if made:
        messages.success(request, RAISED.format(number=made.number))
        return redirect("requirement", made.pk)
    context = {"form": form, "origin": origin}
    return render(request, "repairs/requirement_new.html", context)


def _origin(request: Request) -> Origin:
    """What the address names, as ?repair=17; nothing is a document alone."""
    initial: dict[str, Any] = {"effective_on": today(), "requirement_class": "operator"}
    for name, model in (
        ("evaluation", Evaluation),
        ("repair", Repair),
        ("finding", Finding),
        ("disposition", Disposition),
    ):
        key = request.GET.get(name, "")
        if not key:
            continue
        if not key.isdecimal():
            raise Http404("No such record.")
        row = visible_or_404(model.objects.all(), request.user, pk=int(key))
        if isinstance(row, Evaluation):
            return _from_evaluation(row, initial)
        return _from_record(name, row, initial)
    operator = operators_for(request.user, "requirement_raise")[0]
    return Origin(operator, {}, initial, "")


def _from_record(name: str, row: Any, initial: dict[str, Any]) -> Origin:
    initial |= {"aircraft": [row.aircraft_id], "area": _place(row)}
    if name == "repair":
        initial |= {"requirement_class": "repair", "threshold_1_base": "release"}
    return Origin(row.operator, {name: row}, initial, f"{name} {row.number}")


def _from_evaluation(row: Evaluation, initial: dict[str, Any]) -> Origin:
    """Its intervals fill the form; they may be shortened, not lengthened."""
    record = row.repair or row.finding
    name = "repair" if row.repair else "finding"
    origin = _from_record(name, record, initial)
    for phase in ("threshold", "repeat"):
        cycles = getattr(row, f"{phase}_cycles")
        if cycles is not None:
            initial[f"{phase}_1"] = f"{cycles:,} FC"
    if reworked := rework_counted_from(row):
        initial |= {"threshold_1_base": "effective", "effective_on": reworked}
    columns = origin.columns | {"evaluation": row}
    return Origin(row.operator, columns, initial, f"evaluation {row.number}")


def _place(row: Any) -> str:
    return getattr(row, "place_text", "") or getattr(row, "place_entered", "")


@require_http_methods(FORM_METHODS)
def requirement_again(request: Request, pk: int) -> HttpResponse:
    """The blind second keying; nothing of the first is shown."""
    row = visible_or_404(requirement_of(request.user), request.user, pk=pk)
    require(request.user, "requirement_rekey", row.operator_id)
    form = AgainForm(request.POST or None)
    made = sent(
        form,
        lambda: requirement_rekey(
            actor=request.user,
            at=now(),
            requirement=row,
            limits=form.entries(),
            applicability=form.subjects(),
        ),
        about=[row],
        blind=True,
    )
    if made:
        text = AGREED if made.agrees else DIFFERS
        say = messages.success if made.agrees else messages.warning
        say(request, text.format(number=row.number))
        return redirect("requirement", pk)
    context = {"form": form, "requirement": row}
    return render(request, "repairs/requirement_again.html", context)
