"""Signing a disposition, an evaluation or a repair: the exact text, then the name."""

from __future__ import annotations

from functools import partial
from typing import Any

from django.contrib import messages
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods

from fleet.access import require, visible_or_404
from fleet.canonical import digest
from fleet.clock import now, today
from fleet.services.signing import Proof
from fleet.views.requests import Request
from fleet.views.sending import sent_signed
from repairs.forms.dispositions import SignForm
from repairs.models import (
    Approval,
    Disposition,
    Evaluation,
    Meaning,
    Repair,
    Substantiation,
)
from repairs.selectors.evaluation_shown import evaluation_shown
from repairs.selectors.next_meaning import meaning_next
from repairs.selectors.signatures import Subject, approvals_verified, content_of
from repairs.selectors.signed_words import to_sign
from repairs.selectors.substantiation_stages import STAGE_OF
from repairs.services.approvals import Signed, aircraft_of, approval_sign
from repairs.services.evaluation_prepare import input_titles
from repairs.services.evaluations import method_versions
from repairs.services.substantiation_signing import MEANINGS as SUBSTANTIATION_MEANINGS

SUBJECTS: dict[str, type[Any]] = {
    "disposition": Disposition,
    "evaluation": Evaluation,
    "repair": Repair,
    "substantiation": Substantiation,
}
MEANINGS = {
    "disposition": (Meaning.CHECKED, Meaning.APPROVED, Meaning.REJECTED),
    "evaluation": (Meaning.CHECKED, Meaning.APPROVED, Meaning.REJECTED),
    "repair": (
        Meaning.CHECKED, Meaning.STAGE_1, Meaning.STAGE_2, Meaning.STAGE_3,
        Meaning.INSPECTED, Meaning.RELEASED, Meaning.REJECTED,
    ),
    "substantiation": SUBSTANTIATION_MEANINGS,
}  # fmt: skip
SIGNED = "Signed: {number} {meaning}."
METHODS = ["GET", "HEAD", "POST"]


@require_http_methods(METHODS)
def approval_new(request: Request, what: str, pk: int) -> HttpResponse:
    """What is signed in words and as the exact text bound, and the form to sign it."""
    rows = SUBJECTS[what].objects.select_related("operator", "entered_by")
    subject: Any = visible_or_404(rows, request.user, pk=pk)
    require(request.user, "approval_sign", aircraft_of(subject).operator_id)
    content = content_of(subject)
    form = _form(request, what, subject, digest(content))
    about = [subject, subject.approvals.all()]
    save = partial(_sign, request, subject, form)
    if made := sent_signed(request, form, save, about=about):
        meaning = made.get_meaning_display()
        messages.success(request, SIGNED.format(number=subject, meaning=meaning))
        return redirect(what, pk)
    context = {"what": what, "form": form, **_to_read(subject, content)}
    return render(request, "repairs/approval_new.html", context)


def _form(request: Request, what: str, subject: Any, shown: str) -> SignForm:
    """It starts at the meaning that comes next; a folder's stage asks its document."""
    following = meaning_next(subject, MEANINGS[what])
    return SignForm(
        request.POST or None,
        request.FILES or None,
        meanings=[(one.value, one.label) for one in MEANINGS[what]],
        by_document=isinstance(subject, Substantiation) and following in STAGE_OF,
        user=request.user,
        initial={"shown_digest": shown, "meaning": following},
    )


def _to_read(subject: Any, content: str) -> dict[str, Any]:
    """What is signed: in words, an evaluation by its results and note; then exactly."""
    read: dict[str, Any] = {
        "subject": subject,
        "aircraft": aircraft_of(subject),
        "approvals": approvals_verified(subject),
    }
    if isinstance(subject, Evaluation):
        shown = evaluation_shown(subject, method_versions(), input_titles())
        return read | {"content": content, "digest": digest(content), "shown": shown}
    return read | to_sign(subject, content)


def _sign(request: Request, subject: Subject, form: SignForm, proof: Proof) -> Approval:
    data: dict[str, Any] = form.cleaned_data
    return approval_sign(
        subject=subject,
        meaning=data["meaning"],
        proof=proof,
        shown_digest=data["shown_digest"],
        statement=data["statement"],
        document=Signed(
            data["document_kind"],
            data["document_number"],
            data["document_issuer"],
            data["document_revision"],
            data["document_date"],
        ),
        upload=data["document_file"],
        on=today(),
        actor=request.user,
        at=now(),
    )
