"""The proof that a person signs: password again, and the code of a second factor.

FAA AC 120-78B (from memory): a signature is unique to its signer and under the
signer's sole control. RFC 6238 for the codes.
"""

from __future__ import annotations

import pytest
from django.core.exceptions import ValidationError
from django.test import RequestFactory
from django_otp.oath import TOTP
from django_otp.plugins.otp_totp.models import TOTPDevice

from fleet.forms.signing import SignatureForm
from fleet.models import User
from fleet.services.second_factor import second_factor_begin, second_factor_confirm
from fleet.services.signing import (
    PASSWORD as BY_PASSWORD,
)
from fleet.services.signing import (
    PASSWORD_AND_CODE,
    PROGRAM,
    Proof,
    identity_prove,
)
from fleet.views.sending import sent_signed
from tests.factories import NOW, PASSWORD, TODAY, authorise, operator_make, user_make

pytestmark = pytest.mark.django_db


@pytest.fixture
def engineer() -> User:
    return user_make(operator_make(), "engineer", "ada")


@pytest.fixture
def with_device(engineer) -> User:
    """A second factor set up with the code before the one that is shown now."""
    second_factor_begin(user=engineer)
    second_factor_confirm(
        user=engineer, code=code_of(engineer, steps=-1), actor=engineer, at=NOW
    )
    engineer.refresh_from_db()
    return engineer


def code_of(user: User, steps: int = 0) -> str:
    """What the user's device shows, so many steps of 30 s from now."""
    device = TOTPDevice.objects.get(user=user)
    return f"{TOTP(device.bin_key, drift=steps + device.drift).token():06d}"


def prove(user: User, **said: str) -> Proof:
    given = {"password": PASSWORD, "code": ""} | said
    return identity_prove(user=user, day=TODAY, **given)


def test_the_password_proves_the_logins_own_person(engineer):
    proof = prove(engineer)
    assert (proof.person, proof.user) == (engineer.person, engineer)
    assert (proof.how, proof.second_factor) == (BY_PASSWORD, False)


def test_a_wrong_password_is_said_on_its_field(engineer):
    with pytest.raises(ValidationError) as refused:
        prove(engineer, password=PASSWORD.upper())
    assert list(refused.value.message_dict) == ["password"]


def test_with_a_second_factor_the_code_is_needed_as_well(with_device):
    for code in ("", "000000"):
        with pytest.raises(ValidationError) as refused:
            prove(with_device, code=code)
        assert list(refused.value.message_dict) == ["code"]
        TOTPDevice.objects.update(throttling_failure_timestamp=None)
    proof = prove(with_device, code=code_of(with_device, steps=1))
    assert (proof.how, proof.second_factor) == (PASSWORD_AND_CODE, True)


def test_a_code_signs_once(with_device):
    """RFC 6238, section 5.2: the verifier does not accept the second attempt."""
    code = code_of(with_device, steps=1)
    prove(with_device, code=code)
    with pytest.raises(ValidationError, match="Each code is valid once"):
        prove(with_device, code=code)


def test_a_wrong_password_uses_up_no_code(with_device):
    code = code_of(with_device, steps=1)
    with pytest.raises(ValidationError):
        prove(with_device, password="wrong", code=code)
    assert prove(with_device, code=code).second_factor


def test_a_login_without_a_person_proves_nobody(engineer):
    engineer.person = None
    with pytest.raises(ValidationError, match="no person behind it"):
        prove(engineer)


def test_the_program_signs_as_itself_and_says_so(engineer):
    proof = Proof.by_program(engineer.person)
    assert (proof.user, proof.reentered, proof.how) == (None, False, PROGRAM)


class TestForm:
    def test_the_code_is_asked_of_whoever_has_a_device(self, with_device):
        other = user_make(with_device.memberships.get().operator, "planner")
        assert list(SignatureForm(user=with_device).fields) == ["password", "code"]
        assert list(SignatureForm(user=other).fields) == ["password"]

    def test_it_says_as_whom_and_under_what_one_signs(self, engineer):
        operator = engineer.memberships.get().operator
        said = SignatureForm(user=engineer)["password"].help_text
        assert said == "You sign as Robin Engineer, under no authorisation."
        granted = authorise(engineer.person, operator, "assess")
        said = SignatureForm(user=engineer)["password"].help_text
        assert f"{granted.number} (assess structural damage, no end stated)" in said

    def test_neither_password_nor_code_is_sent_back(self, with_device):
        form = SignatureForm(
            {"password": "my-own-word", "code": "123456"}, user=with_device
        )
        form.add_error(None, "something else is wrong")
        page = form.as_p()
        assert "my-own-word" not in page
        assert "123456" not in page

    def test_a_form_with_another_fault_uses_up_no_code(self, with_device):
        code = code_of(with_device, steps=1)
        request = RequestFactory().post("/")
        request.user = with_device
        form = SignatureForm({"password": "", "code": code}, user=with_device)
        assert sent_signed(request, form, lambda proof: proof) is None
        form = SignatureForm({"password": PASSWORD, "code": code}, user=with_device)
        assert sent_signed(request, form, lambda proof: proof).second_factor
