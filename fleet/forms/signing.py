"""The part of a form that shows who signs: the password, and the code, given again."""

from __future__ import annotations

from typing import Any

from django import forms

from fleet.models import User
from fleet.services.signing import NO_PERSON

SIGNATURE = ("password", "code")
SIGNS_AS = "You sign as {person}, under {under}."
UNDER = "{number} ({scope}, {until})"
UNTIL = "until {day}"
NO_END = "no end stated"


class CodeInput(forms.TextInput):
    """A one-time code; like a password it is never sent back to the page."""

    def __init__(self) -> None:
        super().__init__(
            {"autocomplete": "one-time-code", "autocapitalize": "none", "size": 12}
        )

    def get_context(self, name: str, value: Any, attrs: Any) -> dict[str, Any]:
        return super().get_context(name, None, attrs)


def password_field(label: str = "your password") -> forms.CharField:
    """A password that is there already; its blanks count."""
    return forms.CharField(
        label=label,
        strip=False,
        widget=forms.PasswordInput(attrs={"autocomplete": "current-password"}),
    )


def code_field() -> forms.CharField:
    return forms.CharField(
        label="one-time code",
        max_length=16,
        widget=CodeInput(),
        help_text="Six digits from your device, or a recovery code.",
    )


class IdentityForm(forms.Form):
    """Fields at the end of a form that shows who is there; the view proves them."""

    def __init__(self, *args: Any, user: User, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.fields["password"] = password_field()
        if user.second_factor_since is not None:
            self.fields["code"] = code_field()


class SignatureForm(IdentityForm):
    """The same where a record is signed, saying as whom and under what."""

    def __init__(self, *args: Any, user: User, **kwargs: Any) -> None:
        super().__init__(*args, user=user, **kwargs)
        self.fields["password"].help_text = signs_as(user)


def signs_as(user: User) -> str:
    """Name and authorisations, as a signature of this login will carry them."""
    if user.person is None:
        return NO_PERSON
    held = [
        UNDER.format(
            number=row.number,
            scope=row.get_scope_display(),
            until=UNTIL.format(day=row.valid_to) if row.valid_to else NO_END,
        )
        for row in user.person.authorisations.all()
    ]
    under = "; ".join(held) or "no authorisation"
    return SIGNS_AS.format(person=user.person, under=under)
