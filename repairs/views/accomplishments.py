"""Recording an inspection, verifying its end, and the look on the sisters."""

from __future__ import annotations

from functools import partial
from typing import Any

from django.contrib import messages
from django.forms.models import model_to_dict
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods

from fleet.access import require, visible_or_404
from fleet.amounts import amount_write
from fleet.clock import now, today
from fleet.due import COUNTED
from fleet.selectors.counters import aircraft_standing
from fleet.selectors.parts import part_life
from fleet.services.signing import Proof
from fleet.views.requests import Request
from fleet.views.sending import sent, sent_signed
from repairs.forms.requirements import (
    AnswerForm,
    DoneAgainForm,
    DoneForm,
    SistersForm,
    VerifyForm,
)
from repairs.models import Accomplishment, Finding, RequirementSubject
from repairs.selectors.choices import people_at
from repairs.selectors.requirements import (
    coverage_of,
    findings_on,
    requirement_of,
    sisters_of,
    subject_lines,
)
from repairs.services.accomplishments import (
    Accomplished,
    accomplishment_record,
    subject_not_applicable,
    termination_verify,
)
from repairs.services.inspections import requirement_raise, subject_add
from repairs.services.requirement_draft import RequirementDraft

FORM_METHODS = ["GET", "HEAD", "POST"]
DONE = "Recorded. The next due point is open."
LATE = (
    "Recorded, {late} beyond its due without an approved tolerance: the next interval "
    "counts from the original due. Report the overrun."
)
ANSWERED = "Recorded: it does not apply here."
VERIFIED = "The terminating action is verified; the item leaves the due list."
ASKED = (
    "{number} asks {count} aircraft; each stays on the due list until it has answered."
)


@require_http_methods(FORM_METHODS)
def accomplishment_new(request: Request, pk: int, subject_pk: int) -> HttpResponse:
    """One doing of a requirement on one subject, with counters as flown filled in."""
    subject = _subject(request, pk, subject_pk)
    operator = subject.requirement.operator
    require(request.user, "accomplishment_record", operator.pk)
    form = DoneForm(
        request.POST or None,
        user=request.user,
        operator=operator,
        findings=findings_on(subject),
        people=people_at([operator]),
        initial=_initial(subject) | {"done_by": request.user.person_id},
    )
    save = partial(_record, request, subject, form)
    about: list[Any] = [subject, subject.accomplishments.all()]
    made = sent_signed(request, form, save, about=about)
    if made:
        _told(request, made)
        return redirect("requirement", pk)
    context = {"form": form, "subject": subject, "requirement": subject.requirement}
    return render(request, "repairs/accomplishment_new.html", context)


@require_http_methods(FORM_METHODS)
def accomplishment_correct(request: Request, pk: int) -> HttpResponse:
    """The same inspection as it should have been recorded; the first row stays."""
    rows = Accomplishment.objects.select_related(
        "subject__requirement__operator", "subject__aircraft", "subject__part"
    )
    row = visible_or_404(rows, request.user, pk=pk)
    subject = row.subject
    operator = subject.requirement.operator
    require(request.user, "accomplishment_record", operator.pk)
    form = DoneAgainForm(
        request.POST or None,
        user=request.user,
        operator=operator,
        findings=findings_on(subject),
        people=people_at([operator]),
        initial=model_to_dict(row),
    )
    save = partial(_record, request, subject, form, replaces=row)
    made = sent_signed(request, form, save, about=[row, subject])
    if made:
        _told(request, made)
        return redirect("requirement", subject.requirement_id)
    context = {"form": form, "subject": subject, "requirement": subject.requirement}
    return render(request, "repairs/accomplishment_new.html", context)


def _subject(request: Request, pk: int, subject_pk: int) -> RequirementSubject:
    rows = RequirementSubject.objects.select_related(
        "requirement__operator", "aircraft", "part__part_number"
    )
    return visible_or_404(rows, request.user, pk=subject_pk, requirement=pk)


def _initial(subject: RequirementSubject) -> dict[str, Any]:
    """Today, and the subject's counters as flown."""
    if subject.part is not None:
        flown = part_life(subject.part, as_of=today()).facts.total
    else:
        assert subject.aircraft is not None
        flown = aircraft_standing(subject.aircraft, as_of=today()).counters
    counters = {f"at_{counter.value}": flown[counter] for counter in COUNTED}
    return counters | {"done_on": today()}


def _record(
    request: Request,
    subject: RequirementSubject,
    form: DoneForm,
    proof: Proof,
    replaces: Accomplishment | None = None,
) -> Any:
    data = form.cleaned_data
    service: dict[str, Any] = {"actor": request.user, "at": now(), "subject": subject}
    if data["result"] == "not_applicable" and replaces is None:
        return subject_not_applicable(
            **service, on=data["done_on"], reason=data["evidence"]
        )
    names = ("done_on", "result", "finding", "done_by", "release_document")
    return accomplishment_record(
        **service,
        proof=proof,
        today=today(),
        counters=form.counters(),
        evidence=data["evidence"],
        late_approval=data["late_approval"],
        replaces=replaces,
        reason=data.get("reason", ""),
        **{name: data[name] for name in names},
    )


def _told(request: Request, made: Any) -> None:
    if not isinstance(made, Accomplished):
        messages.success(request, ANSWERED)
    elif made.overrun:
        late = " and ".join(amount_write(x.counter, -x.remaining) for x in made.overrun)
        messages.warning(request, LATE.format(late=late))
    else:
        messages.success(request, DONE)


@require_http_methods(FORM_METHODS)
def termination_check(request: Request, pk: int, subject_pk: int) -> HttpResponse:
    """A second person confirms that the terminating action is in place."""
    subject = _subject(request, pk, subject_pk)
    require(request.user, "accomplishment_record", subject.requirement.operator_id)
    form = VerifyForm(request.POST or None, user=request.user)
    done = sent_signed(
        request,
        form,
        lambda proof: termination_verify(
            proof=proof,
            actor=request.user,
            at=now(),
            subject=subject,
            on=today(),
            evidence=form.cleaned_data["evidence"],
        ),
        about=[subject],
    )
    if done:
        messages.success(request, VERIFIED)
        return redirect("requirement", pk)
    context = {"form": form, "subject": subject, "requirement": subject.requirement}
    return render(request, "repairs/termination_check.html", context)


@require_http_methods(FORM_METHODS)
def subject_new(request: Request, pk: int) -> HttpResponse:
    """Answer for an aircraft that the requirement does not name yet."""
    requirement = visible_or_404(requirement_of(request.user), request.user, pk=pk)
    require(request.user, "requirement_raise", requirement.operator_id)
    lines = subject_lines(requirement, as_of=today())
    form = AnswerForm(
        request.POST or None,
        unaccounted=coverage_of(requirement, lines).unaccounted,
        initial={"on": today()},
    )

    def save() -> Any:
        data = dict(form.cleaned_data)
        applies = data.pop("applies") == "yes"
        service: dict[str, Any] = {"actor": request.user, "at": now()}
        return subject_add(**service, **data, requirement=requirement, applies=applies)

    if sent(form, save, about=[requirement, requirement.subjects.all()]):
        return redirect("requirement", pk)
    context = {"form": form, "requirement": requirement}
    return render(request, "repairs/subject_new.html", context)


@require_http_methods(FORM_METHODS)
def sisters_new(request: Request, pk: int) -> HttpResponse:
    """Ask every sister aircraft to look at the location of a finding."""
    rows = Finding.objects.select_related("aircraft__variant", "operator")
    finding = visible_or_404(rows, request.user, pk=pk)
    require(request.user, "requirement_raise", finding.aircraft.operator_id)
    sisters = sisters_of(finding)
    place = finding.place_text or finding.place_entered
    initial = {
        "title": f"look on the sisters, {finding.get_damage_type_display()}",
        "area": place,
        "effective_on": today(),
        "aircraft": sisters,
    }
    form = SistersForm(
        request.POST or None,
        operator=finding.operator,
        sisters=sisters,
        initial=initial,
    )
    made = sent(form, lambda: _ask(request, finding, form), about=[finding])
    if made:
        text = ASKED.format(number=made.number, count=made.subjects.count())
        messages.success(request, text)
        return redirect("requirement", made.pk)
    context = {"form": form, "finding": finding}
    return render(request, "repairs/sisters_new.html", context)


def _ask(request: Request, finding: Finding, form: SistersForm) -> Any:
    data = dict(form.cleaned_data)
    data.pop("deadline")
    draft = RequirementDraft(
        operator=finding.operator,
        requirement_class="operator",
        finding=finding,
        sisters=True,
        limits=form.entries(),
        **data,
    )
    return requirement_raise(actor=request.user, at=now(), draft=draft)
