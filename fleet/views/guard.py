"""Around every page: how long a session lasts, and what a browser may keep of it."""

from __future__ import annotations

import datetime as dt
from collections.abc import Callable

from django.conf import settings
from django.contrib import messages
from django.contrib.auth import logout
from django.contrib.auth.views import redirect_to_login
from django.http import HttpRequest, HttpResponse

from fleet.clock import now

Answer = Callable[[HttpRequest], HttpResponse]
BEGAN, SEEN = "began", "seen"
SEEN_EVERY = dt.timedelta(minutes=1)
"""A page notes that somebody is there no more often: each note is a write."""

IDLE = "You were signed out: nothing was asked for {minutes} minutes."
OVER = "You were signed out: a sign-in lasts {hours} hours at most."
PERMISSIONS = "camera=(), geolocation=(), microphone=(), payment=(), usb=()"


def headers(get_response: Answer) -> Answer:
    """No copy of a signed-in page stays in a browser; no other site takes ours in."""

    def answer(request: HttpRequest) -> HttpResponse:
        response = get_response(request)
        response.setdefault("Cross-Origin-Resource-Policy", "same-origin")
        response.setdefault("Permissions-Policy", PERMISSIONS)
        user = getattr(request, "user", None)
        if user is not None and user.is_authenticated:
            response.setdefault("Cache-Control", "no-store, private")
        return response

    return answer


def session_age(get_response: Answer) -> Answer:
    """Sign out a session nobody uses, and one that has lasted long enough."""

    def answer(request: HttpRequest) -> HttpResponse:
        if request.user.is_authenticated and (why := _over(request)):
            logout(request)
            messages.info(request, why)
            return redirect_to_login(request.get_full_path())
        return get_response(request)

    return answer


def _over(request: HttpRequest) -> str:
    """Why the session ends now; empty: it goes on, and is noted as in use."""
    at, session = now(), request.session
    began = dt.datetime.fromisoformat(session.get(BEGAN) or at.isoformat())
    seen = dt.datetime.fromisoformat(session.get(SEEN) or at.isoformat())
    if at - seen >= settings.SESSION_IDLE:
        return IDLE.format(minutes=int(settings.SESSION_IDLE.total_seconds() // 60))
    if at - began >= settings.SESSION_LASTS:
        return OVER.format(hours=int(settings.SESSION_LASTS.total_seconds() // 3600))
    if SEEN not in session or at - seen >= SEEN_EVERY:
        session[BEGAN], session[SEEN] = began.isoformat(), at.isoformat()
    return ""
