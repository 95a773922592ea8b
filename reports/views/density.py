"""The density map with its filters in the address."""

from __future__ import annotations

from django.http import HttpResponse
from django.shortcuts import render
from django.views.decorators.http import require_safe

from fleet.clock import today
from fleet.views.requests import Request
from reports.forms.density import DensityForm
from reports.selectors.density_page import density_page

REPLICAS = 199
"""Random maps behind each p-value on the page; the command draws more."""


@require_safe
def density(request: Request) -> HttpResponse:
    """Damage per area and exposure over one section of a type's fleet."""
    form = DensityForm(request.GET, user=request.user)
    page = None
    if form.is_valid():
        page = density_page(
            form.asked(),
            user=request.user,
            as_of=today(),
            replicas=REPLICAS,
            smoothed=form.smoothed,
        )
    return render(request, "reports/density.html", {"form": form, "page": page})
