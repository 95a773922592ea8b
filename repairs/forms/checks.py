"""Filter of the page of checks against the outside."""

from __future__ import annotations

from django import forms

from repairs.selectors.outside_checks import ROUTES


class ChecksForm(forms.Form):
    """Words of method, source or input, and the route a value came by."""

    words = forms.CharField(required=False, label="method, source or input has")
    route = forms.ChoiceField(
        required=False, label="compared with", choices=[("", "any"), *ROUTES.items()]
    )
