"""Signing in, with the code of a second factor where there is one, and out."""

from __future__ import annotations

import datetime as dt

from django.conf import settings
from django.contrib import messages
from django.contrib.auth import login
from django.contrib.auth.forms import AuthenticationForm
from django.contrib.auth.views import LogoutView
from django.core.exceptions import ValidationError
from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect, render, resolve_url
from django.utils.crypto import constant_time_compare
from django.utils.http import url_has_allowed_host_and_scheme, urlencode
from django.views.decorators.cache import never_cache
from django.views.decorators.debug import sensitive_post_parameters
from django.views.decorators.http import require_http_methods

from fleet.clock import now, today
from fleet.forms.account import CodeForm, NewPasswordForm
from fleet.models import User
from fleet.selectors.people import signs_without_code
from fleet.services.attempts import attempt_failed, is_locked, locked_until
from fleet.services.passwords import (
    LINK_OVER,
    password_link_user,
    password_renew,
    password_set,
)
from fleet.services.second_factor import code_accept
from fleet.views.sending import sent

BACKEND = "django.contrib.auth.backends.ModelBackend"
PENDING = "pending"
PENDING_LASTS = dt.timedelta(minutes=5)
METHODS = ["GET", "HEAD", "POST"]
TOO_LATE = "Sign in again: the code was not given within five minutes."
SIGN_OUT_FIRST = (
    "You are signed in as {user}. The link is for whoever forgot a password: sign out "
    "first."
)
CHOSEN = "The new password holds; sign in with it."
ADVICE = (
    "You sign records with the password alone. Set up a second factor on your account: "
    "the link with your roles above."
)

sign_out = LogoutView.as_view()


@sensitive_post_parameters("password")
@never_cache
@require_http_methods(METHODS)
def sign_in(request: HttpRequest) -> HttpResponse:
    """User name and password; then the code, or straight to what was asked for."""
    if request.user.is_authenticated:
        return redirect(asked_for(request))
    form = AuthenticationForm(request, data=request.POST or None)
    if form.is_valid():
        user, password = form.get_user(), form.cleaned_data["password"]
        password_renew(user=user, password=password, at=now())
        if user.second_factor_since is None:
            return _enter(request, user)
        request.session[PENDING] = [
            user.pk,
            user.get_session_auth_hash(),
            now().isoformat(),
        ]
        query = urlencode({"next": asked_for(request)})
        return redirect(f"{resolve_url('sign_in_code')}?{query}")
    if getattr(request, "axes_locked_out", False):
        return _locked(request, form.data["username"])
    return render(request, "fleet/sign_in.html", {"form": form, "next": _next(request)})


@never_cache
@require_http_methods(METHODS)
def sign_in_code(request: HttpRequest) -> HttpResponse:
    """The second step: the code that the device shows."""
    user = _pending(request)
    if user is None:
        messages.info(request, TOO_LATE)
        return redirect("sign_in")
    name = user.get_username()
    if is_locked(request, name):
        return _locked(request, name)
    form = CodeForm(request.POST or None)
    if form.is_valid():
        try:
            code_accept(user=user, code=form.cleaned_data["code"])
            return _enter(request, user)
        except ValidationError as error:
            attempt_failed(request, name)
            form.add_error(None, error)
    context = {"form": form, "next": _next(request)}
    return render(request, "fleet/sign_in_code.html", context)


@sensitive_post_parameters()
@never_cache
@require_http_methods(METHODS)
def password_new(request: HttpRequest, pk: int, token: str) -> HttpResponse:
    """Whoever was handed the link chooses a password, once, and signs in with it."""
    user = password_link_user(pk=pk, token=token)
    if request.user.is_authenticated or user is None:
        why = LINK_OVER if user is None else SIGN_OUT_FIRST.format(user=request.user)
        context = {"why": why}
        return render(request, "fleet/password_link_over.html", context, status=410)
    form = NewPasswordForm(request.POST or None, user=user)

    def save() -> None:
        new = form.cleaned_data["new"]
        password_set(user=user, token=token, password=new, at=now())

    if sent(form, save):
        messages.success(request, CHOSEN)
        return redirect("sign_in")
    return render(request, "fleet/password_new.html", {"form": form, "named": user})


def asked_for(request: HttpRequest) -> str:
    """Where to go after signing in: a page of this site, or the first one."""
    asked = _next(request)
    own = url_has_allowed_host_and_scheme(
        asked, allowed_hosts={request.get_host()}, require_https=request.is_secure()
    )
    return asked if own else resolve_url(settings.LOGIN_REDIRECT_URL)


def _next(request: HttpRequest) -> str:
    return request.POST.get("next", request.GET.get("next", ""))


def _enter(request: HttpRequest, user: User) -> HttpResponse:
    """Signed in: under a new session key, with nothing of the session before."""
    request.session.pop(PENDING, None)
    login(request, user, backend=BACKEND)
    if signs_without_code(user, today()):
        messages.warning(request, ADVICE)
    return redirect(asked_for(request))


def _pending(request: HttpRequest) -> User | None:
    """Who gave the right password a moment ago."""
    pk, known, at = request.session.get(PENDING) or (0, "", now().isoformat())
    user = User.objects.filter(pk=pk, is_active=True).first()
    if user is None or now() - dt.datetime.fromisoformat(at) > PENDING_LASTS:
        return None
    same = constant_time_compare(known, user.get_session_auth_hash())
    return user if same else None


def _locked(request: HttpRequest, username: str) -> HttpResponse:
    """Too many wrong passwords: until when, and who opens it before."""
    until = locked_until(request, username)
    response = render(request, "fleet/locked.html", {"until": until}, status=429)
    if until is not None:
        wait = (until - now()).total_seconds()
        response["Retry-After"] = str(max(1, round(wait)))
    return response
