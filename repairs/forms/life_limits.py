"""The second keying of a life limit, from the document."""

from __future__ import annotations

from django import forms

from repairs.forms.requirements import INTERVAL, AmountField


class LifeLimitForm(forms.Form):
    entered = AmountField(required=True, label="life limit", help_text=INTERVAL)
    base = forms.ChoiceField(
        label="counted from",
        choices=[
            ("birth", "manufacture"),
            ("first_fitted", "first installation"),
            ("overhaul", "last overhaul"),
        ],
    )
