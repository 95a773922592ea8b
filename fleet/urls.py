"""Addresses of the fleet's pages."""

from __future__ import annotations

from django.contrib.auth.decorators import login_not_required
from django.urls import path

from fleet.views import sessions

urlpatterns = [
    path("sign-in/", login_not_required(sessions.sign_in), name="sign_in"),
    path("sign-out/", sessions.sign_out, name="sign_out"),
]
