"""What an engineer chooses when asking for an evaluation."""

from __future__ import annotations

from typing import Any

from django import forms
from django.db.models import QuerySet

from fleet.models import DetectableSize
from repairs.models.evaluations import Use


class SizeField(forms.ModelChoiceField):
    """A detectable size by method, place and length."""

    def label_from_instance(self, obj: DetectableSize) -> str:
        hidden = f" + {obj.hidden_mm:g} hidden" if obj.hidden_mm else ""
        method = obj.method.replace("_", " ")
        return f"{method}, {obj.detail}: {obj.length_mm:g}{hidden} mm"


class EvaluationForm(forms.Form):
    """Use, inspection method and, for rework, why life already used is not counted."""

    use = forms.ChoiceField(
        choices=Use.choices,
        help_text="Known damage gets a life, never an inspection interval.",
    )
    detectable = SizeField(
        queryset=DetectableSize.objects.none(),
        required=False,
        label="inspection method",
        empty_label="none chosen: no repeat interval",
        help_text="Its detectable size, with the part that stays hidden.",
    )
    life_used_reason = forms.CharField(
        required=False,
        label="why life already used is not counted",
        help_text="Leave empty to count it. Printed with the result.",
    )

    def __init__(
        self, *args: Any, sizes: QuerySet[DetectableSize], **kwargs: Any
    ) -> None:
        super().__init__(*args, **kwargs)
        self.fields["detectable"].queryset = sizes  # type: ignore[attr-defined]
