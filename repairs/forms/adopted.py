"""A number adopted from a document, and its confirmation by a second person."""

from __future__ import annotations

from typing import Any

from django import forms

from fleet.models import Material, Operator
from repairs.services.evaluation_inputs import ADOPTABLE_WORDS, OF_MATERIAL

NEEDS_MATERIAL = "Name the material that this is a property of."
NO_MATERIAL = "This is no material's property; leave the material empty."


class AdoptForm(forms.Form):
    """The value in the unit that stands beside its name."""

    operator = forms.ModelChoiceField(Operator.objects.none())
    quantity = forms.ChoiceField(
        choices=[
            (name, f"{words} [{unit}]")
            for name, (words, unit) in ADOPTABLE_WORDS.items()
        ],
        label="what",
        help_text="The unit stands behind it.",
    )
    material = forms.ModelChoiceField(
        Material.objects.all(), required=False, empty_label="not a material's property"
    )
    value = forms.FloatField()
    document = forms.CharField(help_text="Reference of the document you read it in.")
    revision = forms.CharField(required=False)
    page = forms.CharField(help_text="Page, table or figure.")

    def __init__(self, *args: Any, operators: list[Operator], **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.fields["operator"].queryset = Operator.objects.filter(  # type: ignore[attr-defined]
            pk__in=[operator.pk for operator in operators]
        )
        if len(operators) == 1:
            self.initial.setdefault("operator", operators[0])

    def clean(self) -> dict[str, Any]:
        given: dict[str, Any] = super().clean() or {}
        if (quantity := given.get("quantity")) is None:
            return given
        needed = quantity in OF_MATERIAL
        if needed != (given.get("material") is not None):
            self.add_error("material", NEEDS_MATERIAL if needed else NO_MATERIAL)
        given["unit"] = ADOPTABLE_WORDS[quantity][1]
        return given


class ConfirmForm(forms.Form):
    """The number once more, from the document; the first is not shown."""

    again = forms.FloatField(
        label="value you read", help_text="From the document itself."
    )
