"""What the methods were checked against outside this program."""

from __future__ import annotations

from django.http import HttpResponse
from django.shortcuts import render
from django.views.decorators.http import require_safe

from fleet.access import require_somewhere
from fleet.views.requests import Request
from repairs.forms.checks import ChecksForm
from repairs.selectors.outside_checks import checks_shown


@require_safe
def checks(request: Request) -> HttpResponse:
    """Every check: method, source, input, published, computed, difference."""
    require_somewhere(request.user, "checks_read")
    form = ChecksForm(request.GET)
    asked = form.cleaned_data if form.is_valid() else {}
    context = {"form": form, "shown": checks_shown(**asked)}
    return render(request, "repairs/evaluation_checks.html", context)
