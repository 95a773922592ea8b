"""Who gets what from every address of the site; `tests/site_pages.py` names them."""

from __future__ import annotations

import html
import re
import uuid
from collections.abc import Iterator
from pathlib import Path

import pytest
from django.db import transaction
from django.template.backends.django import Template
from django.test import Client, override_settings
from django.urls import get_resolver, reverse

from fleet.access import ROLES_FOR
from fleet.models import HistoryHead, Role, User
from fleet.services import people
from fleet.services.sending import CHANGED, KEY_FIELD, SHOWN_FIELD
from tests.factories import BEGAN, NOW, PASSWORD
from tests.forms import Forms, form_on
from tests.one_of_each import OneOfEach, one_of_each_make
from tests.site_pages import FORM, PAGES, PUBLIC, READ, SEND, names, nothing

pytestmark = pytest.mark.django_db

ONLY_ADD = frozenset(
    {
        "document_applicability",
        "finding_measure",
        "finding_photographs",
        "finding_report",
        "password_reset",
        "repair_photographs",
        "second_factor_reset",
        "spectrum_new",
        "sign_in_unlock",
        "survey_import",
        "survey_lines",
        "survey_new",
    }
)
"""Forms that add to a record, or let somebody sign in, whatever has happened to it."""
TOLD = CHANGED.split("}")[1].split(";")[0]
MARK = "Q7-AAA"
DISJOINT = (Role.AUDITOR, Role.RECORDER)
INLINE = re.compile(
    r"""<style|<script(?![^>]*\ssrc=)|<[^>]*\s(?:style|on[a-z]+)\s*=""", re.IGNORECASE
)


@pytest.fixture(scope="module")
def folder(tmp_path_factory) -> Path:
    return tmp_path_factory.mktemp("attachments")


@pytest.fixture(autouse=True)
def _attachments(settings, folder):
    settings.ATTACHMENTS = folder


@pytest.fixture(scope="module")
def each(django_db_setup, django_db_blocker, folder) -> Iterator[OneOfEach]:
    """The records, once for all addresses; nothing of them stays. Sessions lie beside
    the database, where the end of a test does not take back that they are in use."""
    contained = override_settings(
        PASSWORD_HASHERS=["django.contrib.auth.hashers.MD5PasswordHasher"],
        ATTACHMENTS=folder,
        SESSION_ENGINE="django.contrib.sessions.backends.cache",
    )
    with contained, django_db_blocker.unblock(), transaction.atomic():
        yield one_of_each_make()
        transaction.set_rollback(True)


@pytest.fixture(scope="module")
def clients(each) -> dict[int, Client]:
    """A signed-in browser for every user."""
    users = [*each.world.users.values(), each.former["engineer"]]
    signed_in = {}
    for user in users:
        signed_in[user.pk] = Client()
        signed_in[user.pk].force_login(user)
    return signed_in


@pytest.fixture
def ask(each, clients):
    """The answer to a user, or to nobody: status and text."""

    def asked(name: str, user: User | None, method: str = "get") -> tuple[int, str]:
        address = reverse(name, kwargs=PAGES[name].keys(each))
        client = Client() if user is None else clients[user.pk]
        answer = getattr(client, method)(address)
        text = "" if answer.streaming else answer.content.decode(errors="replace")
        return answer.status_code, text

    return asked


@pytest.fixture
def unshown(monkeypatch):
    """Access is decided before a page is drawn: answers only are asked for here."""
    monkeypatch.setattr(Template, "render", lambda *args, **kwargs: "")


@pytest.fixture(scope="module")
def strangers(each) -> dict[str, Client]:
    """Logins with every role at once: with no person behind it, at another operator, at
    the former one. And one with no role at all.

    A role only ever adds what one may do, so what all of them together do not get at
    another operator, none of them gets alone.
    """
    others, formers = each.outsiders["engineer"], each.former["engineer"]
    at = {
        "nobody": each.world.operator,
        "other": others.memberships.get().operator,
        "former": formers.memberships.get().operator,
        "roleless": None,
    }
    made = {}
    for name, operator in at.items():
        user = people.user_create(username=name, password=PASSWORD, at=NOW)
        for role in Role.values if operator else ():
            people.membership_grant(
                user=user, operator=operator, role=role, began_on=BEGAN, at=NOW
            )
        made[name] = Client()
        made[name].force_login(user)
    return made


CLOSED = [name for name, page in PAGES.items() if page.kind != PUBLIC]
KEYED = [name for name in CLOSED if PAGES[name].keys is not nothing]
OWN = [name for name in KEYED if not PAGES[name].shared]
ABOUT_A_RECORD = [
    name for name in KEYED if PAGES[name].kind == FORM and name not in ONLY_ADD
]
UNKEYED = [name for name in CLOSED if name not in KEYED and name != "sign_out"]


def test_every_address_is_explained():
    assert set(names(get_resolver().url_patterns)) == set(PAGES)


@pytest.mark.parametrize("name", CLOSED)
def test_nobody_gets_in_without_signing_in(name, each, ask):
    for method in PAGES[name].methods:
        status, _ = ask(name, None, method)
        assert status == 302, method


def test_two_roles_have_no_act_in_common():
    """So a page that both may read asks for no act, and is open to every role."""
    for action, roles in ROLES_FOR.items():
        assert not set(DISJOINT) <= roles, action


@pytest.mark.parametrize("name", [n for n in CLOSED if n != "sign_out"])
@pytest.mark.usefixtures("unshown")
def test_each_role_gets_what_its_acts_allow_and_writes_nothing(name, each, ask):
    """An empty form is answered with what is missing; only a bare button acts."""
    page, before = PAGES[name], HistoryHead.objects.get().sequence
    for role in DISJOINT if page.kind == READ and not page.action else Role.values:
        user = each.world.users[role]
        for method in PAGES[name].methods:
            status, _ = ask(name, user, method)
            if role in page.roles_for(method):
                assert status in ((200,) if method == "get" else (200, 302)), role
            else:
                assert status == 403, (role, method)
    assert page.kind == SEND or HistoryHead.objects.get().sequence == before


@pytest.mark.parametrize("name", CLOSED)
def test_an_address_answers_in_no_other_way(name, each, clients):
    """What is sent otherwise is refused before anything is looked up."""
    page = PAGES[name]
    address = reverse(name, kwargs=page.keys(each))
    client = clients[each.world.users[sorted(page.roles)[0]].pk]
    for method in {"get", "post", "put", "patch", "delete"} - set(page.methods):
        assert getattr(client, method)(address).status_code == 405, method


@pytest.mark.parametrize("name", [n for n in CLOSED if n != "sign_out"])
@pytest.mark.usefixtures("unshown")
def test_a_login_without_a_person_is_answered_like_any_other(name, each, strangers):
    page = PAGES[name]
    address = reverse(name, kwargs=page.keys(each))
    for method in page.methods:
        status = getattr(strangers["nobody"], method)(address).status_code
        assert status in ((200,) if method == "get" else (200, 302)), method


@pytest.mark.parametrize("name", [n for n in CLOSED if PAGES[n].methods[0] == "get"])
def test_a_login_without_a_role_learns_nothing(name, each, strangers):
    page = PAGES[name]
    answer = strangers["roleless"].get(reverse(name, kwargs=page.keys(each)))
    if page.keys is not nothing and not page.shared:
        assert answer.status_code == 404
    else:
        assert answer.status_code == (403 if page.action else 200)
        assert MARK not in answer.text


@pytest.mark.parametrize("name", [n for n in CLOSED if PAGES[n].methods[0] == "get"])
def test_a_page_has_no_script_or_style_and_every_form_its_key(name, each, clients):
    """The key, and the entry of the history that the page was read at."""
    page = PAGES[name]
    role = sorted(page.roles_for("post" if page.sends else "get"))[0]
    client = clients[each.world.users[role].pk]
    answer = client.get(reverse(name, kwargs=page.keys(each)))
    allowed = answer["Content-Security-Policy"]
    if page.looks:
        assert "script-src 'self'" in allowed
        assert "style-src 'self'" in allowed
    else:
        assert "default-src 'none'" in allowed
    assert "unsafe" not in allowed
    if answer.streaming:
        return
    if page.looks:
        assert not INLINE.findall(answer.content.decode())
    forms = Forms(answer.content.decode()).posted
    assert forms or answer.status_code != 200, "sign-out is on every page"
    for action, fields in forms:
        assert uuid.UUID(fields[KEY_FIELD]), action
        assert int(fields[SHOWN_FIELD]) == HistoryHead.objects.get().sequence
    assert len({fields[KEY_FIELD] for _, fields in forms}) == len(forms)


@pytest.mark.parametrize("name", ABOUT_A_RECORD)
def test_a_form_about_a_record_tells_what_happened_since_its_page(name, each, clients):
    """As of a page opened before anything was recorded: whatever the form is about has
    an entry since then, and the answer says so. What only adds to a record does not."""
    page = PAGES[name]
    client = clients[each.world.users[sorted(page.roles_for("post"))[0]].pk]
    address = reverse(name, kwargs=page.keys(each))
    form = form_on(client, address) | {"step": "save", SHOWN_FIELD: "0"}
    before = HistoryHead.objects.get().sequence
    answer = client.post(address, form)
    assert answer.status_code == 200
    assert TOLD in html.unescape(answer.content.decode())
    assert HistoryHead.objects.get().sequence == before


@pytest.mark.parametrize("name", OWN)
@pytest.mark.usefixtures("unshown")
def test_an_outsider_does_not_find_the_record(name, each, strangers):
    address = reverse(name, kwargs=PAGES[name].keys(each))
    for method in PAGES[name].methods:
        assert getattr(strangers["other"], method)(address).status_code == 404, method


@pytest.mark.parametrize("name", UNKEYED)
def test_an_outsiders_page_says_nothing_of_our_aircraft(name, each, strangers):
    answer = strangers["other"].get(reverse(name))
    assert (answer.status_code, MARK in answer.text) == (200, False)


@pytest.mark.parametrize("name", OWN)
def test_a_former_operator_reads_its_own_period_only(name, each, strangers):
    address = reverse(name, kwargs=PAGES[name].keys(each))
    answer = getattr(strangers["former"], PAGES[name].methods[0])(address)
    assert answer.status_code == PAGES[name].former
    assert answer.streaming or each.finding.number not in answer.text


def test_damage_of_an_earlier_period_is_the_present_operators_to_act_on(each, clients):
    address = reverse("finding", kwargs={"pk": each.former_finding.pk})
    step = reverse("finding_measure", kwargs={"pk": each.former_finding.pk})
    engineer, former = each.world.engineer, each.former["engineer"]
    assert [clients[u.pk].get(address).status_code for u in (engineer, former)] == [
        200,
        200,
    ]
    assert clients[engineer.pk].get(step).status_code == 200
    assert clients[former.pk].get(step).status_code == 403
