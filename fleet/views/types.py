"""The page of an aircraft type; types are shared, so every operator reads them."""

from __future__ import annotations

from django.http import HttpResponse
from django.shortcuts import get_object_or_404, render
from django.views.decorators.http import require_safe

from fleet.models import AircraftType
from fleet.selectors.type_page import type_page
from fleet.views.requests import Request


@require_safe
def aircraft_type(request: Request, code: str) -> HttpResponse:
    """What is recorded of the type, one section opened at a time."""
    row = get_object_or_404(AircraftType, code=code)
    page = type_page(row, section=request.GET.get("section", ""))
    return render(request, "fleet/type.html", {"page": page})
