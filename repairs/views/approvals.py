"""Signing a disposition, an evaluation or a repair: the exact text, then the name."""

from __future__ import annotations

from functools import partial
from typing import Any

from django.contrib import messages
from django.core.exceptions import ValidationError
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods

from fleet.access import require, visible_or_404
from fleet.canonical import digest
from fleet.clock import now, today
from fleet.models import Person, User
from fleet.views.requests import Request
from fleet.views.sending import sent
from repairs.forms.dispositions import SignForm
from repairs.models import Approval, Disposition, Evaluation, Meaning, Repair
from repairs.services.approvals import (
    Signed,
    Subject,
    aircraft_of,
    approval_sign,
    content_lines,
    content_of,
)

SUBJECTS: dict[str, type[Disposition] | type[Evaluation] | type[Repair]] = {
    "disposition": Disposition,
    "evaluation": Evaluation,
    "repair": Repair,
}
MEANINGS = {
    "disposition": (Meaning.CHECKED, Meaning.APPROVED, Meaning.REJECTED),
    "evaluation": (Meaning.CHECKED, Meaning.APPROVED, Meaning.REJECTED),
    "repair": (
        Meaning.CHECKED, Meaning.STAGE_1, Meaning.STAGE_2, Meaning.STAGE_3,
        Meaning.INSPECTED, Meaning.RELEASED, Meaning.REJECTED,
    ),
}  # fmt: skip
SIGNED = "Signed: {number} {meaning}."
NO_PERSON = (
    "Your login has no person behind it, so it cannot sign; ask an administrator."
)
METHODS = ["GET", "HEAD", "POST"]


@require_http_methods(METHODS)
def approval_new(request: Request, what: str, pk: int) -> HttpResponse:
    """The canonical text as it will be bound, and the form to sign it."""
    rows = SUBJECTS[what].objects.select_related("operator", "entered_by")
    subject: Any = visible_or_404(rows, request.user, pk=pk)
    require(request.user, "approval_sign", aircraft_of(subject).operator_id)
    content = content_of(subject)
    form = SignForm(
        request.POST or None,
        meanings=[(one.value, one.label) for one in MEANINGS[what]],
        user=request.user,
        initial={"shown_digest": digest(content)},
    )
    if made := sent(form, partial(_sign, request, subject, form)):
        meaning = made.get_meaning_display()
        messages.success(request, SIGNED.format(number=subject, meaning=meaning))
        return redirect(what, pk)
    context = {
        "subject": subject,
        "what": what,
        "form": form,
        "lines": content_lines(content),
        "digest": digest(content),
        "approvals": subject.approvals.all(),
    }
    return render(request, "repairs/approval_new.html", context)


def _sign(request: Request, subject: Subject, form: SignForm) -> Approval:
    data: dict[str, Any] = form.cleaned_data
    return approval_sign(
        subject=subject,
        meaning=data["meaning"],
        person=_person(request.user),
        shown_digest=data["shown_digest"],
        statement=data["statement"],
        document=Signed(
            data["document_kind"],
            data["document_number"],
            data["document_issuer"],
            data["document_revision"],
            data["document_date"],
        ),
        on=today(),
        actor=request.user,
        at=now(),
    )


def _person(user: User) -> Person:
    if user.person is None:
        raise ValidationError(NO_PERSON)
    return user.person
