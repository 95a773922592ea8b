"""Forms of the people page: members, roles and authorisations."""

from __future__ import annotations

from typing import Any

from django import forms
from django.contrib.auth.password_validation import validate_password
from django.db.models import Q, QuerySet

from fleet.forms.fields import DayField
from fleet.models import (
    AuthorisationScope,
    Membership,
    Operator,
    Organisation,
    OrganisationKind,
    Person,
    Role,
    User,
)

USERNAME_TAKEN = "The user name “{name}” is taken; choose another."
NEEDED_FOR_LOGIN = "A login needs this; or leave the user name empty."
ENDS_EARLY = "{end} lies before {start}, the first day; give a later one."


class _AtOperator(forms.Form):
    """Something granted at one of the operators the user administers."""

    operator = forms.ModelChoiceField(Operator.objects.none())

    def __init__(self, *args: Any, operators: list[Operator], **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.operators = operators
        _choose(self, "operator", Operator.objects.filter(pk__in=_keys(operators)))
        if len(operators) == 1:
            self.initial.setdefault("operator", operators[0])


class OrganisationForm(forms.Form):
    """A company or authority that the records name; operators are set up apart."""

    code = forms.CharField(help_text="Short and unique, such as HAW.")
    name = forms.CharField()
    kind = forms.ChoiceField(
        choices=[row for row in OrganisationKind.choices if row[0] != "operator"]
    )


class PersonForm(_AtOperator):
    """A new person; with a user name also a login and its first role."""

    organisation = forms.ModelChoiceField(Organisation.objects.none())
    name = forms.CharField(help_text="First and last name, as they sign.")
    staff_number = forms.CharField(required=False)
    username = forms.CharField(
        label="user name",
        max_length=150,
        required=False,
        help_text="Empty: no login; such a person can perform, inspect and sign.",
    )
    password = forms.CharField(
        required=False,
        widget=forms.PasswordInput(attrs={"autocomplete": "new-password"}),
        help_text="Needed with a user name; hand it over in person.",
    )
    role = forms.ChoiceField(required=False, choices=[("", "none"), *Role.choices])
    began_on = DayField(label="role from", required=False)

    def __init__(self, *args: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        _choose(self, "organisation", _organisations(self.operators))

    def clean_username(self) -> str:
        name: str = self.cleaned_data["username"]
        if name and User.objects.filter(username__iexact=name).exists():
            raise forms.ValidationError(USERNAME_TAKEN.format(name=name))
        return name

    def clean(self) -> dict[str, Any]:
        data = super().clean() or {}
        if not data.get("username"):
            return data
        for name in ("password", "role", "began_on"):
            if not data.get(name) and name not in self.errors:
                self.add_error(name, NEEDED_FOR_LOGIN)
        if data.get("password"):
            try:
                validate_password(data["password"], User(username=data["username"]))
            except forms.ValidationError as error:
                self.add_error("password", error)
        return data


class RoleForm(_AtOperator):
    """One more role for somebody who has a login."""

    user = forms.ModelChoiceField(User.objects.none())
    role = forms.ChoiceField(choices=Role.choices)
    began_on = DayField(label="from")

    def __init__(self, *args: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        members = User.objects.filter(
            memberships__operator__in=_keys(self.operators)
        ).distinct()
        _choose(self, "user", members)


class RoleEndForm(forms.Form):
    """The last day of a role."""

    ended_on = DayField(label="last day")

    def __init__(self, *args: Any, membership: Membership, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.membership = membership

    def clean_ended_on(self) -> Any:
        end, start = self.cleaned_data["ended_on"], self.membership.began_on
        if end < start:
            raise forms.ValidationError(ENDS_EARLY.format(end=end, start=start))
        return end


class AuthorisationForm(_AtOperator):
    """What a person may sign, from and until when, and by which document."""

    person = forms.ModelChoiceField(Person.objects.none())
    number = forms.CharField(label="authorisation number")
    scope = forms.ChoiceField(choices=AuthorisationScope.choices)
    valid_from = DayField()
    valid_to = DayField(required=False, help_text="Last valid day; empty: open.")
    source = forms.CharField(help_text="Document that grants it, with its page.")

    def __init__(self, *args: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        organisations = _organisations(self.operators)
        _choose(
            self,
            "person",
            Person.objects.filter(organisation__in=organisations).select_related(
                "organisation"
            ),
        )


def _organisations(operators: list[Operator]) -> QuerySet[Organisation]:
    """The user's own operators, and all that are no operator; never another's."""
    return Organisation.objects.filter(
        Q(operator__in=_keys(operators)) | Q(operator__isnull=True)
    )


def _keys(operators: list[Operator]) -> list[int]:
    return [operator.pk for operator in operators]


def _choose(form: forms.Form, name: str, rows: Any) -> None:
    form.fields[name].queryset = rows  # type: ignore[attr-defined]
