"""Clocks, caps and distances with their sources, and their next revisions."""

from __future__ import annotations

from django.contrib import messages
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods, require_safe

from fleet.access import may_somewhere, operators_for, require_somewhere
from fleet.clock import now, today
from fleet.forms.policies import PolicyForm
from fleet.models import Policy
from fleet.selectors.members import operators_of
from fleet.selectors.policies import policy_lines, policy_to_replace
from fleet.services.people import policy_set
from fleet.views.aircraft import FORM_METHODS
from fleet.views.requests import Request
from fleet.views.sending import sent

ACTION = "policy_set"


@require_safe
def policies(request: Request) -> HttpResponse:
    """Every rule's number, the governing one of each first."""
    context = {
        "operators": [
            (operator, policy_lines(operator, day=today()))
            for operator in operators_of(request.user)
        ],
        "may_set": may_somewhere(request.user, ACTION),
    }
    return render(request, "fleet/policies.html", context)


@require_http_methods(FORM_METHODS)
def policy_new(request: Request) -> HttpResponse:
    """The next revision of one number; what it replaces stays on record."""
    require_somewhere(request.user, ACTION)
    operators = operators_for(request.user, ACTION)
    first = {"key": request.GET.get("key", ""), "effective_from": today()}
    form = PolicyForm(request.POST or None, operators=operators, initial=first)

    before = None
    if form.is_valid():
        given = form.cleaned_data
        before = policy_to_replace(given["operator"], given["key"])

    def save() -> Policy:
        return policy_set(**given, replaces=before, actor=request.user, at=now())

    if sent(form, save, about=[before] if before else []):
        messages.success(request, "The policy is recorded.")
        return redirect("policies")
    return render(request, "fleet/policy_new.html", {"form": form})
