"""Going through a long list without losing its filters."""

from __future__ import annotations

from django.http import HttpRequest


def query_without_page(request: HttpRequest) -> str:
    """The filters of the address, ready for `page=` to follow."""
    query = request.GET.copy()
    query.pop("page", None)
    return f"{query.urlencode()}&" if query else ""
