"""A life limit is keyed twice, by two people, from its document."""

from __future__ import annotations

import pytest
from django.contrib.messages import get_messages

from fleet.services.part_records import life_limit_key
from repairs.models import BlindReentry
from tests import due_rows as make
from tests.due_rows import AT, FIRST

pytestmark = pytest.mark.django_db


@pytest.fixture
def keyed():
    one = make.user("planner")
    limit = life_limit_key(
        actor=one,
        at=AT,
        part_number=make.part_number(),
        entered="30,000 FC",
        base="birth",
        document=make.document(),
        page="table 4-1",
        effective_from=FIRST,
    )
    return one, limit


def again(client, limit, user, entered, base="birth"):
    client.force_login(user)
    data = {"entered": entered, "base": base}
    return client.post(f"/life-limits/{limit.pk}/again/", data)


def said(response) -> str:
    return " ".join(str(x) for x in get_messages(response.wsgi_request))


def test_keyed_alike_it_is_in_force(client, keyed):
    _, limit = keyed
    response = again(client, limit, make.user("engineer"), "30000 cycles")
    limit.refresh_from_db()
    assert "it is in force" in said(response)
    assert limit.state == "in_force"


def test_fifty_thousand_for_twenty_five_thousand_is_noticed(client, keyed):
    _, limit = keyed
    response = again(client, limit, make.user("engineer"), "50,000 FC")
    limit.refresh_from_db()
    assert "differs from the first" in said(response)
    assert limit.state == "keyed"
    assert not BlindReentry.objects.get().agrees


def test_the_first_person_does_not_key_it_again(client, keyed):
    one, limit = keyed
    response = again(client, limit, one, "30,000 FC")
    assert "another person" in response.content.decode()
    assert not BlindReentry.objects.exists()


def test_the_page_shows_nothing_of_the_first(client, keyed):
    _, limit = keyed
    client.force_login(make.user("engineer"))
    page = client.get(f"/life-limits/{limit.pk}/again/").content.decode()
    assert "table 4-1" in page
    assert "30,000" not in page


def test_only_the_operator_and_its_roles(client, keyed):
    _, limit = keyed
    assert again(client, limit, make.outsider(), "30,000 FC").status_code == 404
    assert again(client, limit, make.user("auditor"), "30,000 FC").status_code == 403
