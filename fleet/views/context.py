"""What every page knows."""

from __future__ import annotations

from typing import Any

from django.http import HttpRequest


def page(request: HttpRequest) -> dict[str, Any]:
    return {}
