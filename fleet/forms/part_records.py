"""Forms that enter a serial and key a life limit from its document."""

from __future__ import annotations

from typing import Any

from django import forms

from fleet.forms.fields import AmountField, DayField
from fleet.models import Configuration, Document, Operator, PartNumber

CHAINS = [
    ("complete", "complete to birth"),
    ("reconstructed", "reconstructed and accepted"),
    ("broken", "broken"),
]
BASES = [
    ("birth", "manufacture"),
    ("first_fitted", "first installation"),
    ("overhaul", "last overhaul"),
]
CARRY_OVER = [
    ("most_restrictive", "most restrictive limit met"),
    ("linear", "linear fraction, as the source says"),
]
NUMBER_NEEDED = "Choose a part number, or give a new one with its title."


class PartForm(forms.Form):
    """A serial of a part number that is there, or of a new one."""

    part_number = forms.ModelChoiceField(PartNumber.objects.none(), required=False)
    new_number = forms.CharField(required=False, label="or a new part number")
    new_title = forms.CharField(required=False, label="its title")
    serial = forms.CharField(label="serial number")
    manufactured_on = DayField(
        required=False, label="manufactured on", help_text="Empty: unknown."
    )
    release_reference = forms.CharField(
        required=False,
        label="release certificate",
        help_text="Birth certificate or release; without one it is not installed.",
    )
    chain = forms.ChoiceField(label="back-to-birth record", choices=CHAINS)

    def __init__(self, *args: Any, operator: Operator, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.fields["part_number"].queryset = operator.part_numbers.all()  # type: ignore[attr-defined]

    def clean(self) -> dict[str, Any]:
        data = super().clean() or {}
        new = data.get("new_number"), data.get("new_title")
        if bool(data.get("part_number")) == all(new) or any(new) != all(new):
            self.add_error("part_number", NUMBER_NEEDED)
        return data


class LifeLimitForm(forms.Form):
    """A life limit as its document has it; another person keys it again."""

    part_number = forms.ModelChoiceField(PartNumber.objects.none())
    entered = AmountField(
        label="life limit", help_text="With its unit: 30,000 FC, 20,000 FH or 10 years."
    )
    base = forms.ChoiceField(label="counted from", choices=BASES)
    configuration = forms.ModelChoiceField(
        Configuration.objects.select_related("aircraft_type"),
        required=False,
        help_text="Empty: every configuration.",
    )
    carry_over = forms.ChoiceField(
        label="life flown in another configuration", choices=CARRY_OVER
    )
    document = forms.ModelChoiceField(Document.objects.none())
    page = forms.CharField(required=False, label="page or table")
    effective_from = DayField(label="effective from")

    def __init__(self, *args: Any, operator: Operator, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        for name, rows in (
            ("part_number", operator.part_numbers.all()),
            ("document", operator.documents.all()),
        ):
            self.fields[name].queryset = rows  # type: ignore[attr-defined]
