"""The second factor: set up, asked for, lost, taken off.

RFC 6238: TOTP, Time-Based One-Time Password Algorithm. V<n>: OWASP Application Security
Verification Standard 4.0.3.
"""

from __future__ import annotations

import datetime as dt

import pytest
from django.test import Client
from django.urls import reverse
from django_otp import oath
from django_otp.oath import TOTP
from django_otp.plugins.otp_totp.models import TOTPDevice

from fleet.models import HistoryEntry, User
from fleet.selectors.verify import problems
from fleet.services import second_factor
from fleet.services.people import policy_set
from tests.factories import NOW, PASSWORD, TODAY, operator_make, signed, user_make

pytestmark = pytest.mark.django_db
RFC_KEY = b"12345678901234567890"


@pytest.fixture
def operator():
    return operator_make()


@pytest.fixture
def certifier(operator) -> User:
    return user_make(operator, "certifier", "ada")


@pytest.fixture
def clock(monkeypatch) -> list[float]:
    """The second that the codes are made for; a test moves it on."""
    at = [NOW.timestamp()]
    monkeypatch.setattr(oath, "time", lambda: at[0])
    monkeypatch.setattr("django_otp.plugins.otp_totp.models.time.time", lambda: at[0])
    return at


def code_at(user: User, seconds: float) -> str:
    """What the user's device shows."""
    device = TOTPDevice.objects.get(user=user)
    totp = TOTP(device.bin_key)
    totp.time = seconds
    return f"{totp.token():06d}"


@pytest.fixture
def enrolled(certifier, clock) -> list[str]:
    """A device set up; gives the recovery codes."""
    second_factor.second_factor_begin(user=certifier)
    codes = second_factor.second_factor_confirm(
        user=certifier, code=code_at(certifier, clock[0]), actor=certifier, at=NOW
    )
    certifier.refresh_from_db()
    clock[0] += 30
    return codes


def first_step(client: Client, password: str = PASSWORD):
    return client.post(
        "/sign-in/?next=/findings/", {"username": "ada", "password": password}
    )


def is_in(client: Client) -> bool:
    return client.get("/account/").status_code == 200


@pytest.mark.parametrize(
    ("seconds", "code"),
    [
        (59, 94287082),
        (1111111109, 7081804),
        (1111111111, 14050471),
        (1234567890, 89005924),
        (2000000000, 69279037),
        (20000000000, 65353130),
    ],
)
def test_codes_are_those_of_the_standard(seconds, code):
    """RFC 6238, Appendix B, the rows of SHA1 with eight digits."""
    totp = TOTP(RFC_KEY, step=30, digits=8)
    totp.time = seconds
    assert totp.token() == code


class TestSettingUp:
    def test_the_key_is_shown_after_the_password_until_a_code_is_right(
        self, client, certifier, clock
    ):
        client.force_login(certifier)
        page = "/account/second-factor/"
        assert "<svg" not in client.get(page).text
        assert "not your password" in client.post(page, {"password": "wrong"}).text
        client.post(page, signed({}))
        shown = client.get(page).text
        assert "<svg" in shown
        wrong = client.post(page, {"code": "000000"}).text
        assert "is not the code" in wrong
        clock[0] += 60
        TOTPDevice.objects.update(throttling_failure_timestamp=None)
        said = client.post(page, {"code": code_at(certifier, clock[0])})
        assert said.text.count("<li><code>") == second_factor.RECOVERY_CODES
        assert "no-store" in said["Cache-Control"]
        certifier.refresh_from_db()
        assert certifier.second_factor_since is not None
        assert "<svg" not in client.get(page).text
        assert HistoryEntry.objects.filter(action="second_factor_add").exists()
        assert list(problems()) == []

    def test_the_key_is_160_bits_long(self, certifier):
        """RFC 4226, section 4, R6: at least 128, 160 recommended."""
        device = second_factor.second_factor_begin(user=certifier)
        assert len(device.bin_key) == 20

    def test_who_signs_without_one_is_told(self, client, certifier):
        first_step(client)
        assert "Set up a second factor" in client.get("/findings/").text
        assert (
            "You sign records with the password alone" in client.get("/account/").text
        )

    def test_who_signs_nothing_is_not_told(self, client, operator):
        user_make(operator, "planner", "ben")
        client.post("/sign-in/", {"username": "ben", "password": PASSWORD})
        assert "second factor before" not in client.get("/").text
        assert "with the password alone" not in client.get("/account/").text


class TestSigningIn:
    def test_the_password_alone_does_not_sign_in(self, client, certifier, enrolled):
        assert first_step(client).url.startswith("/sign-in/code/?next=")
        assert not is_in(client)

    def test_the_code_signs_in_and_leads_on(self, client, certifier, enrolled, clock):
        step = first_step(client).url
        said = client.post(
            step, {"code": code_at(certifier, clock[0]), "next": "/findings/"}
        )
        assert said.url == "/findings/"
        assert is_in(client)

    def test_a_code_is_good_once(self, client, certifier, enrolled, clock):
        """RFC 6238, section 5.2; V2.8.4."""
        code = code_at(certifier, clock[0])
        client.post(first_step(client).url, {"code": code})
        again = Client()
        said = again.post(first_step(again).url, {"code": code})
        assert "is not the code" in said.text
        assert not is_in(again)

    def test_a_code_of_two_minutes_ago_is_none(
        self, client, certifier, enrolled, clock
    ):
        """RFC 6238, section 5.2: one step of tolerance."""
        code = code_at(certifier, clock[0])
        clock[0] += 120
        assert (
            "is not the code"
            in client.post(first_step(client).url, {"code": code}).text
        )

    def test_guessing_waits_and_then_locks(self, client, certifier, enrolled, clock):
        """V2.2.1; RFC 4226, section 7.3: throttling."""
        step = first_step(client).url
        assert "is not the code" in client.post(step, {"code": "000000"}).text
        good = code_at(certifier, clock[0])
        assert "Too many wrong codes" in client.post(step, {"code": good}).text
        for _ in range(3):
            last = client.post(step, {"code": "000001"})
        assert last.status_code in (200, 429)
        assert client.post(step, {"code": good}).status_code == 429
        assert not is_in(client)

    def test_a_recovery_code_is_good_once(self, client, certifier, enrolled):
        client.post(first_step(client).url, {"code": enrolled[0].upper()})
        assert is_in(client)
        assert "9 recovery codes left" in client.get("/account/").text
        again = Client()
        said = again.post(first_step(again).url, {"code": enrolled[0]})
        assert "is not the code" in said.text

    def test_the_second_step_lasts_five_minutes(
        self, client, certifier, enrolled, clock, monkeypatch
    ):
        step = first_step(client).url
        from fleet.views import sessions

        late = sessions.now() + dt.timedelta(minutes=6)
        monkeypatch.setattr(sessions, "now", lambda: late)
        assert client.get(step).url == "/sign-in/"

    def test_nobody_starts_at_the_second_step(self, client, certifier, enrolled, clock):
        said = client.post("/sign-in/code/", {"code": code_at(certifier, clock[0])})
        assert said.url == "/sign-in/"
        assert not is_in(client)


class TestTakingOff:
    def test_the_owner_needs_password_and_code(
        self, client, certifier, enrolled, clock
    ):
        client.force_login(certifier)
        page = "/account/second-factor/"
        client.post(page, signed({"code": ""}))
        certifier.refresh_from_db()
        assert certifier.second_factor_since is not None
        client.post(page, signed({"code": code_at(certifier, clock[0])}))
        certifier.refresh_from_db()
        assert certifier.second_factor_since is None
        assert not TOTPDevice.objects.exists()
        assert HistoryEntry.objects.filter(action="second_factor_remove").exists()
        assert first_step(Client()).url == "/findings/"

    def test_an_administrator_does_it_for_a_lost_device_and_says_why(
        self, client, operator, certifier, enrolled
    ):
        client.force_login(user_make(operator, "administrator"))
        page = reverse("second_factor_reset", args=[certifier.memberships.get().pk])
        client.post(page, {"reason": " "})
        certifier.refresh_from_db()
        assert certifier.second_factor_since is not None
        client.post(page, {"reason": "telephone lost; known by sight"})
        entry = HistoryEntry.objects.get(action="second_factor_reset")
        assert entry.reason == "telephone lost; known by sight"
        assert entry.actor != certifier
        assert first_step(Client()).url == "/findings/"
        assert list(problems()) == []

    def test_a_key_that_vanished_from_its_table_lets_nobody_in(
        self, client, certifier, enrolled, clock
    ):
        code = code_at(certifier, clock[0])
        TOTPDevice.objects.all().delete()
        client.post(first_step(client).url, {"code": code})
        assert not is_in(client)


def test_an_operator_may_ask_for_it_before_anybody_signs(operator, certifier):
    from django.core.exceptions import ValidationError

    from fleet.services.signing import identity_prove

    policy_set(
        key="second_factor_required",
        value=1,
        unit="count",
        source="company security manual 4.2",
        grade="practice",
        effective_from=TODAY,
        operator=operator,
        at=NOW,
    )
    with pytest.raises(ValidationError, match="asks for a second factor"):
        identity_prove(user=certifier, password=PASSWORD, code="", day=TODAY)
    before = TODAY - dt.timedelta(days=1)
    assert identity_prove(user=certifier, password=PASSWORD, code="", day=before)
