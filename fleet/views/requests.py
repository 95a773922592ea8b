"""The request of a page that needs a sign-in, as the type checker sees it."""

from __future__ import annotations

from django.http import HttpRequest

from fleet.models import User


class Request(HttpRequest):
    """Only an annotation: every page but the sign-in knows its user."""

    user: User
