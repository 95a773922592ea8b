"""People, policies and history on their pages."""

from __future__ import annotations

import datetime as dt

import pytest

from fleet.models import Authorisation, HistoryEntry, Membership, Person, Policy, User
from fleet.selectors.people import policy
from fleet.selectors.verify import problems
from fleet.services.people import policy_set
from tests import factories
from tests.queries import assert_same_queries

pytestmark = pytest.mark.django_db
TODAY = factories.TODAY


@pytest.fixture(autouse=True)
def _day(settings):
    settings.FRAMEBAY_TODAY = TODAY.isoformat()


@pytest.fixture
def operator():
    return factories.operator_make()


@pytest.fixture
def admin(client, operator):
    client.force_login(factories.user_make(operator, "administrator"))
    return client


def said(response) -> str:
    assert response.status_code == 200
    return " ".join(response.content.decode().split())


def new_person(admin, operator, **changes):
    data = {
        "operator": operator.pk,
        "organisation": operator.organisation_id,
        "name": "Ada Fell",
        "username": "ada",
        "password": factories.PASSWORD,
        "role": "planner",
        "began_on": "2025-01-01",
    }
    return said(admin.post("/people/new/", data | changes, follow=True))


def test_a_new_person_signs_in_with_the_role_given(admin, operator, client):
    assert "ada" in new_person(admin, operator)
    user = User.objects.get(username="ada")
    assert user.person.name == "Ada Fell"
    assert user.roles_at(operator.pk) == {"planner"}
    assert (
        client.post(
            "/sign-in/", {"username": "ada", "password": factories.PASSWORD}
        ).status_code
        == 302
    )
    assert list(problems()) == []


def test_a_person_may_have_no_login(admin, operator):
    new_person(admin, operator, username="", password="", role="", began_on="")
    assert Person.objects.filter(name="Ada Fell", user__isnull=True).exists()


def test_a_login_without_a_role_is_refused(admin, operator):
    text = new_person(admin, operator, role="")
    assert "A login needs this" in text
    assert not Person.objects.filter(name="Ada Fell").exists()


def test_a_weak_password_is_refused(admin, operator):
    assert "too common" in new_person(admin, operator, password="password1234")


def test_people_of_another_operator_are_not_offered(admin):
    other = factories.operator_make("OTH", "Other Air")
    stranger = factories.user_make(other, "engineer", "stranger")
    for address in ("roles", "authorisations"):
        text = said(admin.get(f"/people/{address}/new/"))
        assert str(stranger) not in text or f'value="{stranger.pk}"' not in text
        assert other.name not in text
    data = {"operator": other.pk, "user": stranger.pk, "role": "manager"}
    said(admin.post("/people/roles/new/", data | {"began_on": "2025-01-01"}))
    assert stranger.memberships.count() == 1


def test_a_role_ends_on_its_last_day_and_stays_on_record(admin, operator):
    engineer = factories.user_make(operator, "engineer")
    membership = engineer.memberships.get()
    address = f"/people/roles/{membership.pk}/end/"
    text = said(admin.post(address, {"ended_on": "2018-12-31"}))
    assert "2018-12-31 lies before 2019-01-01" in text
    said(admin.post(address, {"ended_on": "2025-01-01"}, follow=True))
    assert Membership.objects.get(pk=membership.pk).ended_on == TODAY
    assert User.objects.get(pk=engineer.pk).roles_at(operator.pk) == set()


def test_an_expired_authorisation_is_shown_as_such(admin, operator):
    person = factories.user_make(operator, "certifier").person
    data = {
        "operator": operator.pk,
        "person": person.pk,
        "number": "C-7",
        "scope": "certify",
        "valid_from": "2020-01-01",
        "valid_to": "2024-12-31",
        "source": "register, page 2",
    }
    text = said(admin.post("/people/authorisations/new/", data, follow=True))
    assert '<td class="bad">expired</td>' in text
    row = Authorisation.objects.get()
    assert not row.holds_on(TODAY)
    assert row.holds_on(dt.date(2024, 12, 31))


def test_the_people_page_costs_the_same_for_more_people(admin, operator):
    def grow():
        for n in range(5):
            user = factories.user_make(operator, "engineer", f"e{n}")
            factories.authorise(user.person, operator, "assess")

    assert_same_queries(admin, "/people/", grow, ceiling=9)


def offered(to, **changes) -> Policy:
    columns = {
        "key": "stage_2_months",
        "value": 12,
        "unit": "months",
        "source": "AMC 20-20A, from memory",
        "grade": "memory",
        "effective_from": dt.date(2020, 1, 1),
        "regime": to.regime,
        "at": factories.NOW,
    }
    return policy_set(**columns | changes)


def test_the_operators_own_policy_governs_and_the_offered_one_stays(admin, operator):
    offered(operator)
    data = {
        "operator": operator.pk,
        "key": "stage_2_months",
        "value": "9",
        "unit": "months",
        "source": "programme 4.2",
        "grade": "print",
        "effective_from": "2025-01-01",
    }
    text = said(admin.post("/policies/new/", data, follow=True))
    assert text.index("programme 4.2") < text.index("AMC 20-20A")
    assert text.count("<b>governs</b>") == 1
    assert policy(operator, "stage_2_months", TODAY).value == 9
    assert policy(operator, "stage_2_months", dt.date(2024, 12, 31)).value == 12
    data |= {"value": "8", "effective_from": "2025-02-01"}
    said(admin.post("/policies/new/", data, follow=True))
    newest = Policy.objects.get(value=8)
    assert newest.replaces == Policy.objects.get(value=9)


def test_the_policies_page_costs_the_same_for_more_rows(admin, operator):
    offered(operator)

    def grow():
        for n in range(10):
            offered(operator, key=f"key_{n}", operator=operator)

    assert_same_queries(admin, "/policies/", grow, ceiling=9)


def test_a_number_from_memory_is_marked_unverified(admin, operator):
    offered(operator)
    assert "memory, unverified" in said(admin.get("/policies/"))


def test_the_history_page_is_filtered_and_paged(client, operator):
    auditor = factories.user_make(operator, "auditor")
    for n in range(60):
        offered(operator, key=f"key_{n}", operator=operator)
    client.force_login(auditor)
    first = said(client.get("/history/?action=policy_set"))
    assert "60 entries" in first
    assert "page 1 of 2" in first
    assert 'href="?action=policy_set&amp;page=2"' in first
    assert "membership grant</td>" not in first
    last = HistoryEntry.objects.last()
    assert last.digest in first
    assert "Nothing" not in first
    assert "No entry answers" in said(client.get("/history/?who=nobody"))


def test_the_history_page_costs_the_same_for_more_entries(client, operator):
    client.force_login(factories.user_make(operator, "auditor"))

    def grow():
        for n in range(20):
            offered(operator, key=f"key_{n}", operator=operator)

    assert_same_queries(client, "/history/", grow, ceiling=10)


def test_the_history_of_another_operator_is_not_shown(client, operator):
    offered(operator, operator=operator)
    other = factories.operator_make("OTH", "Other Air")
    client.force_login(factories.user_make(other, "auditor"))
    assert "policy set" not in said(client.get("/history/"))
