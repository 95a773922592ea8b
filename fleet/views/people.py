"""Members, their roles and authorisations: the administrator's page."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from django.contrib import messages
from django.forms import Form
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods, require_safe

from fleet.access import operators_for, require, require_somewhere, visible_or_404
from fleet.clock import now, today
from fleet.forms.people import (
    AuthorisationForm,
    OrganisationForm,
    PersonForm,
    RoleEndForm,
    RoleForm,
)
from fleet.models import Membership
from fleet.selectors.members import authorisations_of, memberships_of
from fleet.services.people import (
    authorisation_grant,
    membership_end,
    membership_grant,
    organisation_create,
    person_add,
)
from fleet.services.sending import About
from fleet.views.aircraft import FORM_METHODS
from fleet.views.requests import Request
from fleet.views.sending import sent

ACTION = "people_change"


@require_safe
def people(request: Request) -> HttpResponse:
    """Members with their roles; authorisations, expired ones too."""
    require_somewhere(request.user, ACTION)
    operators = operators_for(request.user, ACTION)
    context = {
        "memberships": memberships_of(operators),
        "authorisations": authorisations_of(operators, day=today()),
    }
    return render(request, "fleet/people.html", context)


@require_http_methods(FORM_METHODS)
def person_new(request: Request) -> HttpResponse:
    return _grant(request, PersonForm, person_add, "New person", "Record person")


@require_http_methods(FORM_METHODS)
def membership_new(request: Request) -> HttpResponse:
    return _grant(request, RoleForm, membership_grant, "New role", "Grant role")


@require_http_methods(FORM_METHODS)
def authorisation_new(request: Request) -> HttpResponse:
    return _grant(
        request,
        AuthorisationForm,
        authorisation_grant,
        "New authorisation",
        "Grant authorisation",
    )


@require_http_methods(FORM_METHODS)
def organisation_new(request: Request) -> HttpResponse:
    require_somewhere(request.user, ACTION)
    form = OrganisationForm(request.POST or None)
    return _send(
        request, form, organisation_create, "New organisation", "Record organisation"
    )


@require_http_methods(FORM_METHODS)
def role_end(request: Request, pk: int) -> HttpResponse:
    """The last day of somebody's role; the row stays."""
    row = visible_or_404(
        Membership.objects.select_related("user", "operator"), request.user, pk=pk
    )
    require(request.user, ACTION, row.operator_id)
    form = RoleEndForm(
        request.POST or None, membership=row, initial={"ended_on": today()}
    )

    def end(**given: Any) -> None:
        membership_end(membership=row, **given)

    title = f"End of {row.user}'s role, {row.get_role_display()}"
    return _send(request, form, end, title, "End role", about=[row])


def _grant(
    request: Request, form_class: Any, service: Any, title: str, action: str
) -> HttpResponse:
    require_somewhere(request.user, ACTION)
    form = form_class(
        request.POST or None,
        operators=operators_for(request.user, ACTION),
        initial={"began_on": today(), "valid_from": today()},
    )
    return _send(request, form, service, title, action)


def _send(
    request: Request,
    form: Form,
    service: Any,
    title: str,
    action: str,
    about: Sequence[About] = (),
) -> HttpResponse:
    def save() -> object:
        return service(**form.cleaned_data, actor=request.user, at=now())

    if sent(form, save, about=about):
        messages.success(request, "Recorded.")
        return redirect("people")
    context = {"form": form, "title": title, "action": action}
    return render(request, "fleet/people_form.html", context)
