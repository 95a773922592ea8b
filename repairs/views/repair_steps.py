"""A repair's further steps: begun, done, inspected, new category, its end."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial
from typing import Any

from django.contrib import messages
from django.core.exceptions import ValidationError
from django.forms import Form
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods, require_POST

from fleet.access import require, visible_or_404
from fleet.clock import now, today
from fleet.services.signing import Proof
from fleet.views.requests import Request
from fleet.views.sending import sent, sent_signed
from repairs.forms.fields import PhotoForm
from repairs.forms.raised import RaisedForm
from repairs.forms.repair_steps import (
    CancelForm,
    InspectForm,
    ReclassifyForm,
    RemoveForm,
    StepForm,
)
from repairs.models import Approval, Repair
from repairs.selectors.choices import people_at
from repairs.selectors.repair_inspections import open_rejections, steps_open
from repairs.selectors.repairs import repair_whole
from repairs.selectors.signatures import content_of
from repairs.selectors.signed_words import to_sign
from repairs.services.photographs import Photo, photographs_add
from repairs.services.repair_category import NewCategory, repair_reclassify
from repairs.services.repair_ends import repair_cancel, repair_remove
from repairs.services.repair_entry import Data, Step
from repairs.services.repair_inspection import repair_inspect
from repairs.services.repair_progress import (
    repair_start,
    repair_step_add,
    repair_step_do,
)

METHODS = ["GET", "HEAD", "POST"]
SAVED = "{number}: saved."
BEGUN = "{number} is in work."


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


@require_http_methods(METHODS)
def repair_cancel_page(request: Request, pk: int) -> HttpResponse:
    """A planned repair will not be done; its record stays."""
    row = _row(request, pk)
    form = CancelForm(request.POST or None)

    def save() -> Repair:
        return repair_cancel(
            repair=row, **form.cleaned_data, on=today(), actor=request.user, at=now()
        )

    return _page(request, row, form, save, "Cancel")


@require_POST
def repair_start_page(request: Request, pk: int) -> HttpResponse:
    """Work on a planned repair has begun."""
    row = _row(request, pk)
    try:
        repair_start(repair=row, actor=request.user, at=now())
        messages.success(request, BEGUN.format(number=row))
    except ValidationError as error:
        messages.error(request, " ".join(error.messages))
    return redirect("repair", row.pk)


@require_http_methods(METHODS)
def repair_step_page(request: Request, pk: int) -> HttpResponse:
    """A part of the repair done, or one more part to be done."""
    row = _row(request, pk)
    form = StepForm(
        request.POST or None,
        steps=steps_open(row),
        people=people_at([row.aircraft.operator]),
        today=today(),
    )
    return _page(request, row, form, partial(_step, request, row, form), "Step")


@require_http_methods(METHODS)
def repair_inspect_page(request: Request, pk: int) -> HttpResponse:
    """The required inspection: accepted or rejected, signed by the inspector."""
    row = _row(request, pk, "repair_inspect")
    form = InspectForm(
        request.POST or None,
        user=request.user,
        rejections=open_rejections(row),
        today=today(),
        initial={"on": today()},
    )

    def save(proof: Proof) -> Approval:
        data = form.cleaned_data
        return repair_inspect(
            repair=row,
            accepted=data["outcome"] == "accepted",
            statement=data["statement"],
            on=data["on"],
            answers=data.get("answers"),
            proof=proof,
            actor=request.user,
            at=now(),
        )

    if sent_signed(request, form, save, about=[row]):
        return _saved(request, row)
    read = to_sign(row, content_of(row))
    return _form(request, row, [form], "Inspection", read)


@require_http_methods(METHODS)
def repair_reclassify_page(request: Request, pk: int) -> HttpResponse:
    """Another category by a new approval; its clocks follow."""
    row = _row(request, pk, "repair_reclassify")
    form = ReclassifyForm(request.POST or None, today=today(), initial={"on": today()})
    raised = RaisedForm(request.POST or None)

    def save() -> Repair:
        return repair_reclassify(
            repair=row, change=_change(row, form, raised), actor=request.user, at=now()
        )

    if (not request.POST or raised.is_valid()) and sent(form, save, about=[row]):
        return _saved(request, row)
    return _form(request, row, [form, raised], "Reclassify")


def _change(row: Repair, form: ReclassifyForm, raised: RaisedForm) -> NewCategory:
    data = form.cleaned_data
    cited = ("kind", "reference", "revision", "page")
    return NewCategory(
        category=data["category"],
        approval=Data(*(data[f"document_{name}"] for name in cited)),
        reason=data["reason"],
        on=data["on"],
        stage_reached=data["stage_reached"],
        replacement_limit=form.replacement_limit(),
        replacement_limit_on=data["replacement_limit_on"],
        new_requirement=raised.draft(
            operator=row.aircraft.operator,
            aircraft=row.aircraft,
            on=data["on"],
            base="release",
        ),
    )


def _step(request: Request, row: Repair, form: StepForm) -> object:
    data = dict(form.cleaned_data)
    step, title = data.pop("step"), data.pop("title")
    if step is not None:
        step.repair = row
        return repair_step_do(step=step, **data, actor=request.user, at=now())
    return repair_step_add(
        repair=row, step=Step(title, **data), actor=request.user, at=now()
    )


def _add(request: Request, row: Repair, form: PhotoForm) -> object:
    data = form.cleaned_data
    photos = [
        Photo(upload, data["role"], data["caption"]) for upload in data["photographs"]
    ]
    return photographs_add(shown=row, photos=photos, actor=request.user, at=now())


def _row(request: Request, pk: int, action: str = "repair_record") -> Repair:
    row = visible_or_404(repair_whole(), request.user, pk=pk)
    require(request.user, action, row.aircraft.operator_id)
    return row


def _page(
    request: Request, row: Repair, form: Form, save: Callable[[], object], heading: str
) -> HttpResponse:
    if sent(form, save, about=[row]):
        return _saved(request, row)
    return _form(request, row, [form], heading)


def _saved(request: Request, row: Repair) -> HttpResponse:
    messages.success(request, SAVED.format(number=row))
    return redirect("repair", row.pk)


def _form(
    request: Request,
    row: Repair,
    forms: list[Form],
    heading: str,
    read: dict[str, Any] | None = None,
) -> HttpResponse:
    context = {"repair": row, "forms": forms, "heading": heading, **(read or {})}
    return render(request, "repairs/repair_form.html", context)
