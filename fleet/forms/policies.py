"""A new revision of a rule's number."""

from __future__ import annotations

from typing import Any

from django import forms

from fleet.forms.fields import DayField
from fleet.models import Operator
from fleet.models.people import PolicyUnit

GRADES = (
    ("print", "read in print"),
    ("quoted", "read in a public quotation"),
    ("memory", "from memory, unverified"),
    ("practice", "company practice"),
    ("adopted", "adopted by an engineer"),
)


class PolicyForm(forms.Form):
    """The operator's own value; the row before it stays."""

    operator = forms.ModelChoiceField(Operator.objects.none())
    key = forms.SlugField(
        help_text="Name of the rule in small letters, such as stage_2_months."
    )
    value = forms.IntegerField(min_value=-1_000_000_000, max_value=1_000_000_000)
    unit = forms.ChoiceField(choices=[(row.value, row.value) for row in PolicyUnit])
    source = forms.CharField(help_text="Document, paragraph and page.")
    edition = forms.CharField(required=False, help_text="Edition or revision read.")
    grade = forms.ChoiceField(choices=GRADES, label="how the source was read")
    effective_from = DayField(label="in force from")

    def __init__(self, *args: Any, operators: list[Operator], **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.fields["operator"].queryset = Operator.objects.filter(  # type: ignore[attr-defined]
            pk__in=[operator.pk for operator in operators]
        )
        if len(operators) == 1:
            self.initial.setdefault("operator", operators[0])
