"""A form that is sent twice is written once: the middleware around every page."""

from __future__ import annotations

import hashlib
import uuid
from collections.abc import Callable

from django.contrib import messages
from django.http import HttpRequest, HttpResponse, HttpResponseRedirect
from django.utils.crypto import salted_hmac

from fleet.canonical import canonical
from fleet.forms.signing import SIGNATURE
from fleet.models import SentForm
from fleet.services.sending import (
    KEY_FIELD,
    SHOWN_FIELD,
    Sending,
    current,
    sending_answered,
    sending_first,
    sending_of_form,
    sending_open,
)

NOT_TYPED = frozenset({KEY_FIELD, SHOWN_FIELD, "csrfmiddlewaretoken", *SIGNATURE})
TWICE = "This was already sent at {at:%H:%M:%S} UTC; nothing was written twice."


def once(
    get_response: Callable[[HttpRequest], HttpResponse],
) -> Callable[[HttpRequest], HttpResponse]:
    """Lead the second sending of a form to where the first one led."""

    def answer(request: HttpRequest) -> HttpResponse:
        if not request.user.is_authenticated:
            return get_response(request)
        sending = sending_open(request.user, request.path)
        if _sent_before(request, sending) and (first := sending_first(sending)):
            return _led(request, first)
        token = current.set(sending)
        try:
            response = get_response(request)
        finally:
            current.reset(token)
        if sending.claimed is not None:
            sending_answered(sending, _address(request, response))
        elif sending.first is None and (first := sending_first(sending)):
            return _led(request, first)
        return response

    return answer


def _sent_before(request: HttpRequest, sending: Sending) -> bool:
    if request.method != "POST":
        return False
    try:
        key = uuid.UUID(request.POST.get(KEY_FIELD, ""))
    except ValueError:
        return False
    shown = request.POST.get(SHOWN_FIELD, "")
    return sending_of_form(
        sending,
        key=key,
        content=_content(request),
        shown=int(shown) if shown.isdecimal() and len(shown) < 19 else None,
    )


def _content(request: HttpRequest) -> str:
    """A digest of what was typed and chosen, keyed so that it tells nothing else."""
    typed = [
        [name, values]
        for name, values in sorted(request.POST.lists())
        if name not in NOT_TYPED
    ]
    files = []
    for name, uploads in sorted(request.FILES.lists()):
        for upload in uploads:
            found = hashlib.sha256()
            for chunk in upload.chunks():
                found.update(chunk)
            upload.seek(0)
            files.append([name, upload.name, found.hexdigest()])
    text = canonical([request.get_full_path(), typed, files])
    return salted_hmac("fleet.sent_form", text, algorithm="sha256").hexdigest()


def _address(request: HttpRequest, response: HttpResponse) -> str:
    """Where the sending led; a page made from what was sent names where it belongs."""
    for header in ("Location", "Content-Location"):
        if header in response:
            return response[header]
    return request.get_full_path()


def _led(request: HttpRequest, first: SentForm) -> HttpResponse:
    messages.info(request, TWICE.format(at=first.sent_at))
    return HttpResponseRedirect(first.answer or "/")
