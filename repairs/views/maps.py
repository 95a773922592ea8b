"""The structure map of a section, of the type or of one aircraft."""

from __future__ import annotations

from django.http import Http404, HttpResponse
from django.shortcuts import get_object_or_404, render
from django.views.decorators.http import require_safe

from fleet.access import visible_or_404
from fleet.models import Section
from fleet.selectors.aircraft import aircraft_visible
from fleet.views.requests import Request
from repairs.selectors.maps import map_page


@require_safe
def structure_map(request: Request, code: str, section: str) -> HttpResponse:
    """One section; with ?aircraft its findings and repairs, with ?skin one skin."""
    row = get_object_or_404(
        Section.objects.select_related("aircraft_type"),
        aircraft_type__code=code,
        code=section,
    )
    aircraft, asked = None, request.GET.get("aircraft", "")
    if asked:
        if not asked.isdecimal():
            raise Http404("The address names no aircraft.")
        aircraft = visible_or_404(
            aircraft_visible(request.user),
            request.user,
            pk=int(asked),
            variant__aircraft_type=row.aircraft_type,
        )
    page = map_page(
        row,
        user=request.user,
        aircraft=aircraft,
        skin=request.GET.get("skin", ""),
    )
    return render(request, "repairs/structure_map.html", {"page": page})
