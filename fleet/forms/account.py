"""Forms of one's own login: the password, and the second factor."""

from __future__ import annotations

from typing import Any

from django import forms
from django.contrib.auth.password_validation import (
    password_validators_help_texts,
    validate_password,
)

from fleet.forms.signing import IdentityForm, code_field, password_field
from fleet.models import User

DIFFERENT = "The two new passwords differ; type both again."
AS_BEFORE = "This is the password you have; choose another."


class CodeForm(forms.Form):
    """A one-time code, at sign-in and when a device is set up."""

    code = code_field()


class NewPasswordForm(forms.Form):
    """A new password, typed twice."""

    new = forms.CharField(
        label="new password",
        strip=False,
        widget=forms.PasswordInput(attrs={"autocomplete": "new-password"}),
        help_text=" ".join(password_validators_help_texts()),
    )
    again = forms.CharField(
        label="the new one again",
        strip=False,
        widget=forms.PasswordInput(attrs={"autocomplete": "new-password"}),
    )

    def __init__(self, *args: Any, user: User, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.user = user

    def clean_new(self) -> str:
        new: str = self.cleaned_data["new"]
        validate_password(new, self.user)
        return new

    def clean_again(self) -> str:
        again: str = self.cleaned_data["again"]
        if again != self.cleaned_data.get("new", again):
            raise forms.ValidationError(DIFFERENT)
        return again


class PasswordChangeForm(NewPasswordForm, IdentityForm):
    """The same for one's own login; the password that one has comes first."""

    field_order = ("password", "code", "new", "again")

    def __init__(self, *args: Any, user: User, **kwargs: Any) -> None:
        IdentityForm.__init__(self, *args, user=user, **kwargs)
        self.user = user
        self.order_fields(self.field_order)

    def clean_new(self) -> str:
        new = super().clean_new()
        if new == self.cleaned_data.get("password"):
            raise forms.ValidationError(AS_BEFORE)
        return new


class BeginForm(forms.Form):
    """One's password, before a key is shown."""

    password = password_field()


class ResetForm(forms.Form):
    """Why a second factor or a password is taken off for somebody."""

    reason = forms.CharField(
        widget=forms.Textarea(attrs={"rows": 3}),
        help_text="Why, and how you made sure that it is this person who asks.",
    )
