"""Setting up without the demonstration: operator, login, materials; no superuser."""

from __future__ import annotations

import pytest
from django.core.management import CommandError, call_command

from fleet.management.commands.createsuperuser import REFUSED
from fleet.models import HistoryEntry, Material, Operator, User
from fleet.selectors.verify import problems
from tests.factories import FIXTURES, PASSWORD

pytestmark = pytest.mark.django_db


@pytest.fixture
def operator():
    call_command("operator_add", "NRT", "Northmere Air", "--regime", "EASA")
    return Operator.objects.get()


@pytest.fixture(autouse=True)
def _password(monkeypatch):
    monkeypatch.setenv("FRAMEBAY_PASSWORD", PASSWORD)


def add(username="ada", role="administrator", code="NRT"):
    call_command("user_add", username, "--operator", code, "--role", role)


def test_the_first_administrator_signs_in_and_the_history_agrees(operator, client):
    add()
    assert (
        client.post("/sign-in/", {"username": "ada", "password": PASSWORD}).status_code
        == 302
    )
    user = User.objects.get()
    assert user.roles_at(operator.pk) == {"administrator"}
    assert not user.is_superuser
    assert {e.action for e in HistoryEntry.objects.all()} == {
        "operator_create",
        "person_add",
    }
    assert list(problems()) == []


def test_a_second_operator_of_the_same_code_is_refused(operator):
    with pytest.raises(CommandError, match="There is one already"):
        call_command("operator_add", "NRT", "Another", "--regime", "EASA")


def test_a_time_zone_that_does_not_exist_is_refused():
    with pytest.raises(CommandError, match="not a time zone"):
        call_command(
            "operator_add", "X", "X", "--regime", "EASA", "--time-zone", "Mars/Base"
        )
    assert not Operator.objects.exists()


def test_an_unknown_operator_is_named_with_those_known(operator):
    with pytest.raises(CommandError, match="no operator “XXX”; known: NRT"):
        add(code="XXX")


def test_a_user_name_is_taken_whatever_its_case(operator):
    add()
    with pytest.raises(CommandError, match="“ADA” is taken"):
        add("ADA")


def test_a_weak_password_is_refused_wherever_it_comes_from(operator, monkeypatch):
    monkeypatch.setenv("FRAMEBAY_PASSWORD", "12345")
    with pytest.raises(CommandError, match="too short"):
        add()
    assert not User.objects.exists()


def test_no_superuser_is_made_past_the_history():
    with pytest.raises(CommandError) as refused:
        call_command("createsuperuser", "--noinput", "--username", "root")
    assert str(refused.value) == REFUSED
    assert not User.objects.exists()


def test_materials_load_once(capsys):
    path = str(FIXTURES / "materials.toml")
    call_command("load_materials", path)
    held = Material.objects.count()
    assert held > 0
    call_command("load_materials", path)
    assert Material.objects.count() == held
    assert capsys.readouterr().out.endswith("0 materials were new or changed.\n")


def test_a_materials_file_that_is_not_there_is_named(tmp_path):
    with pytest.raises(CommandError, match=r"no materials file at gone\.toml"):
        call_command("load_materials", str(tmp_path / "gone.toml"))
