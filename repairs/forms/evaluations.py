"""What an engineer chooses when asking for an evaluation, and asks what if."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from typing import Any

from django import forms
from django.db.models import QuerySet

from fleet.models import DetectableSize
from repairs.models.evaluations import Use
from repairs.services.evaluation_prepare import NUMBER, WORD, InputLine
from repairs.services.evaluation_what_if import what_if_read

AS_RECORDED = "as recorded"
PREFIX = "if_"


class SizeField(forms.ModelChoiceField):
    """A detectable size by method, place and length."""

    def label_from_instance(self, obj: DetectableSize) -> str:
        hidden = f" + {obj.hidden_mm:g} hidden" if obj.hidden_mm else ""
        method = obj.method.replace("_", " ")
        return f"{method}, {obj.detail}: {obj.length_mm:g}{hidden} mm"


class EvaluationForm(forms.Form):
    """Use, inspection method and, for rework, why life already used is not counted."""

    use = forms.ChoiceField(
        label="use",
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


class WhatIfForm(forms.Form):
    """Numbers and words to calculate with in place of the recorded ones.

    A field left empty is as recorded. A bare number is in the unit beside it.
    """

    def __init__(
        self, *args: Any, lines: Iterable[InputLine], given: Mapping[str, Any]
    ) -> None:
        super().__init__(*args)
        self.given = given
        for line in lines:
            field = _field(line)
            if field is not None:
                self.fields[f"{PREFIX}{line.name}"] = field

    def clean(self) -> dict[str, Any]:
        """`instead` are the values read; what cannot be read stays as typed."""
        data: dict[str, Any] = super().clean() or {}
        texts = {key.removeprefix(PREFIX): text for key, text in data.items() if text}
        instead, wrong = what_if_read(texts, self.given)
        for name, why in wrong.items():
            self.add_error(f"{PREFIX}{name}", why)
        return {"instead": instead}

    def of(self, name: str) -> Any:
        """The field of an input, None where it cannot be changed."""
        key = f"{PREFIX}{name}"
        return self[key] if key in self.fields else None

    @property
    def set_aside(self) -> list[tuple[str, str, str]]:
        """What was typed for inputs that are none here: key, name and text, kept."""
        return [
            (key, key.removeprefix(PREFIX), text)
            for key, text in self.data.items()
            if key.startswith(PREFIX) and key not in self.fields and text.strip()
        ]

    @property
    def asks(self) -> bool:
        """Whether anything was typed."""
        return any(str(self.data.get(key, "")).strip() for key in self.fields)


def _field(line: InputLine) -> forms.Field | None:
    label = f"{line.title}, what if"
    if line.form == NUMBER:
        unit = f" {line.unit}" if line.unit else ""
        widget = forms.TextInput(
            attrs={
                "size": 9,
                "placeholder": " ",
                "aria-label": f"{label}{',' * bool(unit)}{unit}",
            }
        )
        return forms.CharField(required=False, label=label, widget=widget)
    if line.form == WORD:
        choices = [("", AS_RECORDED)]
        choices += [(word, word.replace("_", " ")) for word in line.words]
        choice = forms.Select(attrs={"aria-label": label})
        return forms.ChoiceField(
            required=False, label=label, choices=choices, widget=choice
        )
    return None
