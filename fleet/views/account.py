"""One's own login: password and second factor; and an administrator's help with it."""

from __future__ import annotations

from base64 import b32encode

import segno
from django.conf import settings
from django.contrib import messages
from django.contrib.auth import update_session_auth_hash
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.urls import reverse
from django.views.decorators.cache import never_cache
from django.views.decorators.debug import sensitive_post_parameters
from django.views.decorators.http import require_http_methods, require_safe

from fleet.access import require, visible_or_404
from fleet.clock import now, today
from fleet.forms.account import CodeForm, PasswordChangeForm, ResetForm
from fleet.forms.signing import IdentityForm
from fleet.models import Membership
from fleet.selectors.people import (
    enrolling_device,
    recovery_codes_left,
    signs_without_code,
)
from fleet.services.attempts import attempts_forget
from fleet.services.passwords import password_change, password_reset
from fleet.services.second_factor import (
    second_factor_begin,
    second_factor_confirm,
    second_factor_remove,
    second_factor_reset,
)
from fleet.views.requests import Request
from fleet.views.sending import sent, sent_identified

METHODS = ["GET", "HEAD", "POST"]
ADMINISTERS = "people_change"
CHANGED = "The password is changed; other sessions of yours are signed out."
REMOVED = "The second factor is removed; the password alone signs you in now."
RESET = "{user} signs in with the password alone until a new device is set up."
LET_IN = "{user} may sign in again."


@require_safe
def account(request: Request) -> HttpResponse:
    """Who one is here, what one may sign, and how one signs in."""
    user = request.user
    context = {
        "authorisations": user.person.authorisations.select_related("operator")
        if user.person
        else [],
        "codes_left": recovery_codes_left(user),
        "advised": signs_without_code(user, today()),
    }
    return render(request, "fleet/account.html", context)


@sensitive_post_parameters()
@require_http_methods(METHODS)
def password(request: Request) -> HttpResponse:
    """A new password; it ends every other session."""
    form = PasswordChangeForm(request.POST or None, user=request.user)

    def save() -> None:
        new = form.cleaned_data["new"]
        password_change(user=request.user, password=new, actor=request.user, at=now())

    if sent_identified(request, form, save):
        update_session_auth_hash(request, request.user)
        messages.success(request, CHANGED)
        return redirect("account")
    context = {"form": form, "title": "Change password", "action": "Change it"}
    return render(request, "fleet/account_form.html", context)


@sensitive_post_parameters()
@require_http_methods(METHODS)
def second_factor(request: Request) -> HttpResponse:
    """Set up a device: the key after the password, the first code; or remove it."""
    if request.user.second_factor_since is not None:
        return _off(request)
    if enrolling_device(request.user) is None:
        return _begin(request)
    codes: list[str] = []
    form = CodeForm(request.POST or None)

    def save() -> None:
        codes.extend(
            second_factor_confirm(
                user=request.user,
                code=form.cleaned_data["code"],
                actor=request.user,
                at=now(),
            )
        )

    if sent(form, save):
        return render(request, "fleet/recovery_codes.html", {"codes": codes})
    device = second_factor_begin(user=request.user)
    key = b32encode(device.bin_key).decode()
    groups = [key[start : start + 4] for start in range(0, len(key), 4)]
    picture = segno.make(device.config_url, error="m")
    context = {
        "form": form,
        "key": groups,
        "picture": picture.svg_inline(scale=5, light="#fff"),
    }
    return render(request, "fleet/second_factor.html", context)


def _begin(request: Request) -> HttpResponse:
    """The password first: who finds an open session sets up nothing."""
    form = IdentityForm(request.POST or None, user=request.user)
    if sent_identified(request, form, lambda: second_factor_begin(user=request.user)):
        return redirect("second_factor")
    context = {"form": form, "title": "Second factor", "action": "Show the key"}
    return render(request, "fleet/account_form.html", context)


def _off(request: Request) -> HttpResponse:
    """Off again: with the password and a code."""
    form = IdentityForm(request.POST or None, user=request.user)

    def save() -> None:
        second_factor_remove(user=request.user, actor=request.user, at=now())

    if sent_identified(request, form, save):
        messages.success(request, REMOVED)
        return redirect("account")
    context = {"form": form, "title": "Remove second factor", "action": "Remove it"}
    return render(request, "fleet/account_form.html", context)


@require_http_methods(METHODS)
def second_factor_lost(request: Request, pk: int) -> HttpResponse:
    """The administrator takes off the second factor of a lost device."""
    row = _member(request, pk)
    form = ResetForm(request.POST or None)

    def save() -> None:
        second_factor_reset(
            user=row.user,
            operator=row.operator,
            **form.cleaned_data,
            actor=request.user,
            at=now(),
        )

    if sent(form, save):
        messages.success(request, RESET.format(user=row.user))
        return redirect("people")
    title = f"Take off {row.user}'s second factor"
    context = {"form": form, "title": title, "action": "Take it off"}
    return render(request, "fleet/people_form.html", context)


@never_cache
@require_http_methods(METHODS)
def password_lost(request: Request, pk: int) -> HttpResponse:
    """The administrator hands over a link; whoever forgot the password chooses one."""
    row = _member(request, pk)
    user, form = row.user, ResetForm(request.POST or None)

    def save() -> str:
        return password_reset(
            user=user,
            operator=row.operator,
            **form.cleaned_data,
            actor=request.user,
            at=now(),
        )

    if token := sent(form, save):
        attempts_forget(user.get_username())
        link = request.build_absolute_uri(
            reverse("password_new", args=[user.pk, token])
        )
        context = {"link": link, "user_named": user, "hours": settings.LINK_HOURS}
        page = render(request, "fleet/password_link.html", context)
        page["Content-Location"] = reverse("people")
        return page
    title = f"A new password for {user}"
    context = {"form": form, "title": title, "action": "Make the link"}
    return render(request, "fleet/password_reset.html", context)


@require_http_methods(METHODS)
def sign_in_unlock(request: Request, pk: int) -> HttpResponse:
    """The administrator lets somebody in who gave too many wrong passwords."""
    row = _member(request, pk)
    if request.method == "POST":
        attempts_forget(row.user.get_username())
        messages.success(request, LET_IN.format(user=row.user))
        return redirect("people")
    title = f"Let {row.user} sign in again"
    context = {"form": [], "title": title, "action": "Forget the wrong passwords"}
    return render(request, "fleet/people_form.html", context)


def _member(request: Request, pk: int) -> Membership:
    rows = Membership.objects.select_related("user", "operator")
    row = visible_or_404(rows, request.user, pk=pk)
    require(request.user, ADMINISTERS, row.operator_id)
    return row
