"""Signing in: who, how often, for how long, and what is kept of it.

Rules named V<n> are paragraphs of the OWASP Application Security Verification Standard
4.0.3 (open standard).
"""

from __future__ import annotations

import datetime as dt

import pytest
from django.contrib.auth.hashers import Argon2PasswordHasher, get_hasher, make_password
from django.contrib.sessions.models import Session
from django.test import Client, override_settings
from django.urls import reverse

from fleet.models import HistoryEntry, User
from fleet.selectors.verify import problems
from fleet.services.attempts import address_of
from fleet.views import guard
from tests.factories import NOW, PASSWORD, operator_make, signed, user_make

pytestmark = pytest.mark.django_db
NEW = "another-long-word-8"
ARGON = ["django.contrib.auth.hashers.Argon2PasswordHasher"]


class Weaker(Argon2PasswordHasher):
    """The same algorithm with the parameters of an earlier year."""

    time_cost, memory_cost, parallelism = 1, 1024, 1


@pytest.fixture
def operator():
    return operator_make()


@pytest.fixture
def engineer(operator) -> User:
    return user_make(operator, "engineer", "ada")


def sign_in(client, password=PASSWORD, username="ada", **more):
    data = {"username": username, "password": password} | more
    return client.post("/sign-in/", data)


def is_in(client) -> bool:
    return client.get("/account/").status_code == 200


class TestThrottling:
    """V2.2.1: guessing is slowed down, by name and address."""

    def test_the_fifth_wrong_password_locks_and_says_until_when(self, client, engineer):
        for _ in range(4):
            assert sign_in(client, "wrong").status_code == 200
        locked = sign_in(client, "wrong")
        assert locked.status_code == 429
        assert 0 < int(locked["Retry-After"]) <= 15 * 60
        assert "It opens by itself at" in locked.content.decode()
        assert sign_in(client).status_code == 429
        assert not is_in(client)

    def test_another_name_and_another_address_are_not_locked(
        self, client, operator, engineer
    ):
        user_make(operator, "planner", "ben")
        for _ in range(5):
            sign_in(client, "wrong")
        assert sign_in(Client(REMOTE_ADDR="192.0.2.7")).status_code == 302
        assert sign_in(client, username="ben").status_code == 302

    def test_the_lock_opens_after_its_time(self, client, engineer, settings):
        for _ in range(5):
            sign_in(client, "wrong")
        settings.AXES_COOLOFF_TIME = dt.timedelta(0)
        assert sign_in(client).status_code == 302

    def test_a_good_sign_in_forgets_the_wrong_ones(self, client, engineer):
        for _ in range(4):
            sign_in(client, "wrong")
        assert sign_in(client).status_code == 302
        client.post("/sign-out/")
        for _ in range(4):
            assert sign_in(client, "wrong").status_code == 200

    def test_an_administrator_lets_somebody_in_again(self, client, operator, engineer):
        for _ in range(5):
            sign_in(client, "wrong")
        admin = Client()
        admin.force_login(user_make(operator, "administrator"))
        row = engineer.memberships.get()
        admin.post(reverse("sign_in_unlock", args=[row.pk]))
        assert sign_in(client).status_code == 302

    def test_a_name_nobody_has_is_refused_in_the_same_words(self, client, engineer):
        """V2.2.1, V7.4.1: the answer does not tell which names there are."""
        known = sign_in(client, "wrong").context["form"].errors
        assert sign_in(client, "wrong", "nobody").context["form"].errors == known

    def test_what_was_typed_is_not_kept_with_the_count(self, client, engineer):
        from axes.models import AccessAttempt

        sign_in(client, "wrong-secret-word")
        kept = AccessAttempt.objects.get()
        assert "wrong-secret-word" not in f"{kept.post_data}{kept.get_data}"

    @pytest.mark.parametrize(
        ("proxies", "passed", "address"),
        [
            (0, "198.51.100.1", "192.0.2.1"),
            (1, "203.0.113.9, 198.51.100.1", "198.51.100.1"),
            (2, "203.0.113.9, 198.51.100.1", "203.0.113.9"),
            (1, "not an address", "192.0.2.1"),
            (1, "", "192.0.2.1"),
        ],
    )
    def test_a_forwarded_address_counts_only_from_our_own_proxies(
        self, rf, settings, proxies, passed, address
    ):
        """RFC 7239, section 8.1: what the client sent itself is not to be trusted."""
        settings.PROXIES = proxies
        request = rf.get("/", REMOTE_ADDR="192.0.2.1", HTTP_X_FORWARDED_FOR=passed)
        assert address_of(request) == address


class TestSessions:
    def test_signing_in_gives_a_new_session_key(self, client, engineer):
        """V3.2.1."""
        client.cookies["sessionid"] = "a" * 32
        sign_in(client)
        assert client.cookies["sessionid"].value not in ("", "a" * 32)

    def test_signing_out_ends_the_session_on_the_server(self, client, engineer):
        """V3.3.1."""
        sign_in(client)
        kept = client.cookies["sessionid"].value
        client.post("/sign-out/")
        assert not Session.objects.filter(session_key=kept).exists()
        assert not is_in(client)

    def test_an_idle_session_ends_and_leads_back(self, client, engineer, monkeypatch):
        """V3.3.2, level 2: thirty minutes without a request."""
        sign_in(client)
        self._at(monkeypatch, minutes=0)
        assert is_in(client)
        self._at(monkeypatch, minutes=29)
        assert is_in(client)
        self._at(monkeypatch, minutes=29 + 30)
        gone = client.get("/findings/?state=open")
        assert gone.url == "/sign-in/?next=/findings/%3Fstate%3Dopen"
        assert "nothing was asked for 30 minutes" in client.get(gone.url).text
        assert not is_in(client)

    def test_a_session_in_use_ends_after_twelve_hours(
        self, client, engineer, monkeypatch
    ):
        """V3.3.2, level 2: twelve hours, in use or not."""
        sign_in(client)
        for minutes in range(0, 12 * 60, 20):
            self._at(monkeypatch, minutes=minutes)
            assert is_in(client), minutes
        self._at(monkeypatch, minutes=12 * 60)
        assert not is_in(client)

    @staticmethod
    def _at(monkeypatch, *, minutes: int) -> None:
        at = NOW + dt.timedelta(minutes=minutes)
        monkeypatch.setattr(guard, "now", lambda: at)

    def test_cookies_are_kept_from_script_and_from_other_sites(self, client, engineer):
        """V3.4.2, V3.4.3."""
        sign_in(client)
        for name in ("sessionid", "csrftoken"):
            cookie = client.cookies[name]
            assert cookie["httponly"], name
            assert cookie["samesite"] == "Lax", name

    def test_over_tls_cookies_are_secure(self, engineer, settings):
        """V3.4.1."""
        settings.SESSION_COOKIE_SECURE = settings.CSRF_COOKIE_SECURE = True
        client = Client()
        sign_in(client)
        assert client.cookies["sessionid"]["secure"]
        assert client.cookies["csrftoken"]["secure"]

    def test_no_signed_in_page_stays_in_the_browser(self, client, engineer):
        """V8.2.1."""
        sign_in(client)
        assert "no-store" in client.get("/account/")["Cache-Control"]
        assert "no-store" in client.get("/findings/")["Cache-Control"]


class TestWhereTo:
    """V5.1.5: signing in leads nowhere else."""

    @pytest.mark.parametrize(
        "asked",
        [
            "//evil.example/", "https://evil.example/", "http://evil.example/",
            "\\\\evil.example/", "/\\evil.example/", "///evil.example",
            "%2F%2Fevil.example", "https:evil.example", "javascript:alert(1)",
            "https://testserver@evil.example/", "http://testserver.evil.example/",
            " //evil.example", "\t//evil.example", "/\t/evil.example",
            "https:///evil.example",
        ],
    )  # fmt: skip
    def test_never_to_another_site(self, client, engineer, asked):
        gone = sign_in(client, next=asked)
        assert gone.status_code == 302
        assert "evil" not in gone.url or gone.url.startswith("%2F")
        assert not gone.url.startswith(("//", "\\", "/\\", "http", "javascript"))

    def test_to_the_page_that_was_asked_for(self, client, engineer):
        assert sign_in(client, next="/findings/?q=1").url == "/findings/?q=1"

    def test_whoever_is_in_already_is_led_nowhere_else_either(self, client, engineer):
        sign_in(client)
        assert client.get("/sign-in/?next=//evil.example/").url == "/"


class TestPasswords:
    def test_the_old_one_comes_first_and_the_new_one_is_judged(self, client, engineer):
        """V2.1.6, V2.1.7."""
        client.force_login(engineer)
        changed = {"new": NEW, "again": NEW}
        wrong = client.post("/account/password/", {**changed, "password": "wrong"})
        assert "not your password" in wrong.text
        weak = {"new": "password1234", "again": "password1234"}
        assert "too common" in client.post("/account/password/", signed(weak)).text
        apart = client.post("/account/password/", signed({"new": NEW, "again": "x"}))
        assert "differ" in apart.text
        same = client.post(
            "/account/password/", signed({"new": PASSWORD, "again": PASSWORD})
        )
        assert "This is the password you have" in same.text
        engineer.refresh_from_db()
        assert engineer.check_password(PASSWORD)

    def test_a_change_ends_every_other_session(self, engineer):
        """V3.3.3."""
        here, elsewhere = Client(), Client()
        sign_in(here), sign_in(elsewhere)
        here.post("/account/password/", signed({"new": NEW, "again": NEW}))
        assert is_in(here)
        assert not is_in(elsewhere)
        assert sign_in(elsewhere).status_code == 200
        assert sign_in(elsewhere, NEW).status_code == 302

    def test_a_change_is_in_the_history_and_the_password_is_not(self, client, engineer):
        client.force_login(engineer)
        client.post("/account/password/", signed({"new": NEW, "again": NEW}))
        entry = HistoryEntry.objects.get(action="password_change")
        assert entry.actor == engineer
        assert "argon" not in entry.items.get().changes
        assert engineer.password not in entry.items.get().changes
        assert list(problems()) == []

    def test_wrong_ones_count_towards_the_lock(self, client, engineer):
        client.force_login(engineer)
        for _ in range(5):
            client.post(
                "/account/password/", {"password": "w", "new": NEW, "again": NEW}
            )
        said = client.post("/account/password/", signed({"new": NEW, "again": NEW}))
        assert "Too many wrong passwords" in said.text
        assert sign_in(Client()).status_code == 429

    def test_they_are_hashed_by_argon2id_with_memory_to_spare(self, settings):
        """OWASP Password Storage Cheat Sheet: argon2id, at least 19 MiB and two
        passes."""
        settings.PASSWORD_HASHERS = ARGON
        kind, name = get_hasher(), make_password(PASSWORD)
        assert name.startswith("argon2$argon2id$")
        assert kind.memory_cost >= 19 * 1024
        assert kind.time_cost >= 2

    def test_an_older_hash_is_renewed_at_sign_in_and_the_history_agrees(
        self, client, engineer
    ):
        """V2.4.4 as parameters grow; nothing is written past the services."""
        weaker = f"{__name__}.{Weaker.__name__}"
        with override_settings(PASSWORD_HASHERS=[weaker]):
            from fleet.services.passwords import password_change

            password_change(user=engineer, password=PASSWORD, actor=None, at=NOW)
        assert "m=1024,t=1" in engineer.password
        with override_settings(PASSWORD_HASHERS=ARGON):
            assert sign_in(client).status_code == 302
            engineer.refresh_from_db()
            assert f"m={Argon2PasswordHasher.memory_cost},t=" in engineer.password
            assert engineer.check_password(PASSWORD)
        assert HistoryEntry.objects.filter(action="password_renew").count() == 1
        assert list(problems()) == []
