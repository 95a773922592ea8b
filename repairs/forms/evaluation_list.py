"""What the list of evaluations shows."""

from __future__ import annotations

from django import forms

from repairs.selectors.evaluation_list import STANDINGS


class EvaluationFilter(forms.Form):
    standing = forms.ChoiceField(
        required=False, choices=[("", "all that want a person"), *STANDINGS]
    )
