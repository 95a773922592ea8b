"""Addresses of the fleet's pages."""

from __future__ import annotations

from django.contrib.auth.decorators import login_not_required
from django.urls import path

from fleet.views import (
    account,
    aircraft,
    documents,
    history,
    keeping,
    parts,
    people,
    policies,
    sessions,
    types,
)

urlpatterns = [
    path("sign-in/", login_not_required(sessions.sign_in), name="sign_in"),
    path(
        "sign-in/code/", login_not_required(sessions.sign_in_code), name="sign_in_code"
    ),
    path(
        "sign-in/new-password/<int:pk>/<str:token>/",
        login_not_required(sessions.password_new),
        name="password_new",
    ),
    path("sign-out/", sessions.sign_out, name="sign_out"),
    path("account/", account.account, name="account"),
    path("account/password/", account.password, name="password"),
    path("account/second-factor/", account.second_factor, name="second_factor"),
    path(
        "people/roles/<int:pk>/second-factor/",
        account.second_factor_lost,
        name="second_factor_reset",
    ),
    path(
        "people/roles/<int:pk>/password/", account.password_lost, name="password_reset"
    ),
    path(
        "people/roles/<int:pk>/let-in/", account.sign_in_unlock, name="sign_in_unlock"
    ),
    path("aircraft/new/", aircraft.aircraft_new, name="aircraft_new"),
    path("aircraft/<int:pk>/period/", aircraft.aircraft_period, name="aircraft_period"),
    path("aircraft/<int:pk>/state/", aircraft.aircraft_state, name="aircraft_state"),
    path(
        "aircraft/<int:pk>/opening/", aircraft.aircraft_opening, name="aircraft_opening"
    ),
    path("types/<str:code>/", types.aircraft_type, name="type"),
    path("people/", people.people, name="people"),
    path("people/new/", people.person_new, name="person_new"),
    path("people/organisations/new/", people.organisation_new, name="organisation_new"),
    path("people/roles/new/", people.membership_new, name="membership_new"),
    path("people/roles/<int:pk>/end/", people.role_end, name="membership_end"),
    path(
        "people/authorisations/new/", people.authorisation_new, name="authorisation_new"
    ),
    path("documents/", documents.documents, name="documents"),
    path(
        "documents/<int:pk>/applicability/",
        documents.document_applicability,
        name="document_applicability",
    ),
    path("policies/", policies.policies, name="policies"),
    path("policies/new/", policies.policy_new, name="policy_new"),
    path("history/", history.history, name="history"),
    path("history/seals/", keeping.seals, name="seals"),
    path("keeping/", keeping.kept, name="keeping"),
    path("safe-life/", parts.part_list, name="part_list"),
    path("safe-life/new/", parts.part_new, name="part_new"),
    path("safe-life/limits/new/", parts.life_limit_new, name="life_limit_new"),
    path("safe-life/<int:pk>/", parts.part, name="part"),
    path("safe-life/<int:pk>/install/", parts.part_on, name="part_install"),
    path("safe-life/<int:pk>/remove/", parts.part_off, name="part_remove"),
]
