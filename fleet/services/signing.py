"""Proof that the person who signs is there: the password, and the code, given again.

A service that signs takes a `Proof`, and signs for the person in it and nobody else.
What somebody else did or decided on paper is recorded with its document, unsigned.
"""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass

from django.core.exceptions import ValidationError

from fleet.models import Person, User
from fleet.selectors.people import second_factor_required
from fleet.services.second_factor import code_accept

PASSWORD = "password given again"
PASSWORD_AND_CODE = "password and one-time code given again"
PROGRAM = "entered by the program, without re-entry"

NO_PERSON = (
    "Your login has no person behind it, so it cannot sign; ask an administrator."
)
SET_UP_FIRST = (
    "Your operator asks for a second factor before you sign: set one up on your "
    "account, the link with your roles above."
)
WRONG_PASSWORD = "This is not your password; nothing was signed."


@dataclass(frozen=True, slots=True)
class Proof:
    """Who signs, and how it was shown that it is this person.

    `day` is the day of signing, on which an authorisation must hold too; the program,
    which enters what was signed elsewhere, has none.
    """

    person: Person
    how: str
    user: User | None = None
    day: dt.date | None = None

    @classmethod
    def by_program(cls, person: Person) -> Proof:
        """For commands and the demonstration; every record made so says it."""
        return cls(person=person, how=PROGRAM)

    @property
    def reentered(self) -> bool:
        return self.user is not None

    @property
    def second_factor(self) -> bool:
        return self.how == PASSWORD_AND_CODE


def identity_prove(*, user: User, password: str, code: str, day: dt.date) -> Proof:
    """The proof that the user's own person signs; ValidationError on the wrong field.

    The caller counts refusals, so that a password cannot be guessed here either.
    """
    if user.person is None:
        raise ValidationError(NO_PERSON)
    how = identity_check(user=user, password=password, code=code)
    if user.second_factor_since is None and second_factor_required(user, day):
        raise ValidationError(SET_UP_FIRST)
    return Proof(person=user.person, how=how, user=user, day=day)


def identity_check(*, user: User, password: str, code: str) -> str:
    """How it was shown that it is this user; ValidationError on the wrong field."""
    if not user.check_password(password):
        raise ValidationError({"password": WRONG_PASSWORD})
    if user.second_factor_since is None:
        return PASSWORD
    code_accept(user=user, code=code)
    return PASSWORD_AND_CODE
