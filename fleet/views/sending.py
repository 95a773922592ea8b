"""Sending a form: the service's refusal is shown where the form's own would be."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from functools import partial
from typing import Any, TypeVar

from django.core.exceptions import NON_FIELD_ERRORS, ValidationError
from django.forms import Form

from fleet.clock import today
from fleet.services.attempts import attempt_failed, is_locked, locked_until
from fleet.services.sending import About, Changed, changed_meanwhile, form_about
from fleet.services.signing import Proof, identity_check, identity_prove
from fleet.views.requests import Request

Known = TypeVar("Known")

LOCKED = (
    "Too many wrong passwords; nothing is signed until {until:%H:%M} UTC, unless an "
    "administrator lets you go on."
)
LOCKED_FOR_GOOD = "Too many wrong passwords; an administrator lets you go on."


def sent(
    form: Form,
    save: Callable[[], object],
    *,
    about: Sequence[About] = (),
    blind: bool = False,
) -> Any:
    """What `save` made (True if nothing), or None: then the form says why not.

    `about` are the records that the form edits or decides on: when one of them changed
    after its page was read, nothing is written and the form says who changed what; a
    `blind` second entry is not told the first one's values.
    """
    form_about(about, blind=blind)
    if not form.is_valid():
        if form.is_bound and (told := changed_meanwhile()):
            form.add_error(None, told)
        return None
    try:
        made = save()
    except ValidationError as error:
        if not isinstance(error, Changed) and (told := changed_meanwhile()):
            form.add_error(None, told)
        for field, errors in error.update_error_dict({}).items():
            known = field in form.fields and field != NON_FIELD_ERRORS
            form.add_error(field if known else None, errors)
        return None
    return True if made is None else made


def sent_signed(
    request: Request,
    form: Form,
    save: Callable[[Proof], object],
    *,
    about: Sequence[About] = (),
) -> Any:
    """The same for a form that signs: `save` takes the proof of who is there.

    The proof is asked for last, so a code is not used up by a form that has another
    fault; a wrong password or code counts, and keeps what was typed.
    """

    def proved() -> object:
        return save(_counted(request, form, partial(identity_prove, day=today())))

    return sent(form, proved, about=about)


def sent_identified(request: Request, form: Form, save: Callable[[], object]) -> Any:
    """The same for a form of one's own login, which signs nothing."""

    def identified() -> object:
        _counted(request, form, identity_check)
        return save()

    return sent(form, identified)


def _counted(request: Request, form: Form, identity: Callable[..., Known]) -> Known:
    user, data = request.user, form.cleaned_data
    name = user.get_username()
    if is_locked(request, name):
        raise ValidationError({"password": locked_words(request, name)})
    try:
        return identity(user=user, password=data["password"], code=data.get("code", ""))
    except ValidationError as refused:
        if hasattr(refused, "error_dict"):
            attempt_failed(request, name)
        raise


def locked_words(request: Request, username: str) -> str:
    until = locked_until(request, username)
    return LOCKED.format(until=until) if until else LOCKED_FOR_GOOD
