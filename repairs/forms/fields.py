"""Form fields that findings and repairs share."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from django import forms
from django.core.exceptions import ValidationError

from fleet.due import Counters
from fleet.forms.fields import CounterField, HoursField
from fleet.models import Document
from fleet.units import UnitError, length_read, measure_write
from repairs.models import Evaluation, Finding, Repair
from repairs.selectors.findings import CHECK_WORDS

UNIT_WORDS = {"in": "inches", "mm": "mm"}
NOT_POSITIVE = "“{text}” is not above zero."
PHOTO_ROLES = [
    ("close", "close"),
    ("wide", "wide"),
    ("scale", "with a scale"),
    ("before_covering", "before it is covered"),
    ("sketch", "sketch"),
    ("evidence", "evidence"),
]
FURTHER = "Further findings of the aircraft: {count}"
ACCEPTED_FILES = "image/jpeg,image/png,image/webp,image/tiff,application/pdf"


class LengthField(forms.CharField):
    """A length with its unit; its value is mm. A bare number is in the type's unit.

    A margin may be negative: `signed`.
    """

    def __init__(self, *, unit: str = "", signed: bool = False, **kwargs: Any) -> None:
        self.unit, self.signed = unit, signed
        kwargs.setdefault("required", False)
        super().__init__(**kwargs)

    def prepare_value(self, value: Any) -> Any:
        return measure_write(value, "mm") if isinstance(value, float) else value

    def to_python(self, value: Any) -> Any:
        text = super().to_python(value)
        if not text:
            return None
        try:
            length = length_read(text, unit=self.unit or None)
        except UnitError as error:
            raise ValidationError(str(error)) from error
        if length <= 0 and not self.signed:
            raise ValidationError(NOT_POSITIVE.format(text=text))
        return length


class FilesInput(forms.ClearableFileInput):
    """Several files at once."""

    allow_multiple_selected = True


class FilesField(forms.FileField):
    """Files to keep; none is an empty list."""

    def __init__(self, **kwargs: Any) -> None:
        widget = FilesInput(attrs={"accept": ACCEPTED_FILES})
        super().__init__(widget=widget, required=False, **kwargs)

    def clean(self, data: Any, initial: Any = None) -> Any:
        given = data if isinstance(data, list | tuple) else [data]
        return [super(FilesField, self).clean(one) for one in given if one]


class Several(forms.ModelMultipleChoiceField):
    """Records to tick, each told in a few words."""

    widget = forms.CheckboxSelectMultiple

    def label_from_instance(self, obj: Any) -> str:
        if isinstance(obj, Finding):
            what = obj.get_damage_type_display()
            place = obj.place_text or obj.place_entered
            return f"{obj} {what}, {place}, {obj.get_state_display()}"
        if isinstance(obj, Repair):
            return f"{obj} {obj.get_kind_display()}, {obj.place_text}"
        if isinstance(obj, Evaluation):
            return f"{obj} {obj.get_use_display()}, {obj.get_outcome_display()}"
        return f"{obj.checked_at:%Y-%m-%d} {CHECK_WORDS[obj.outcome]}"


class CountersForm(forms.Form):
    """Counters of the aircraft at an event; empty is not stated."""

    at_minutes = HoursField(label="flight hours", required=False)
    at_cycles = CounterField(label="flight cycles", required=False)
    at_landings = CounterField(label="landings", required=False)

    def counters(self) -> Counters:
        data = self.cleaned_data
        return Counters(data["at_minutes"], data["at_cycles"], data["at_landings"])


class DataForm(forms.Form):
    """The data a judgement rests on: document, revision, page."""

    document_kind = forms.ChoiceField(
        label="kind of document",
        choices=Document.Kind.choices,
        initial=Document.Kind.REPAIR_MANUAL,
    )
    document_reference = forms.CharField(label="document", help_text="Its reference.")
    document_revision = forms.CharField(label="revision", required=False)
    document_page = forms.CharField(label="page or paragraph")


class PhotoForm(forms.Form):
    """Photographs of a record: what they show, and in words."""

    photographs = FilesField(help_text="JPEG, PNG, WebP, TIFF or PDF.")
    role = forms.ChoiceField(label="what they show", choices=PHOTO_ROLES)
    caption = forms.CharField(required=False)


def part(form: forms.Form, near: str, further: str, first: Sequence[int]) -> None:
    """Two lists of the same rows: those to show first, in their order, and the rest.

    Either takes any of the rows; a rest of none is left out.
    """
    shown: Any = form.fields[near]
    rest: Any = form.fields[further]
    told = {value.value: (value, label) for value, label in shown.choices}
    shown.widget.choices = [told.pop(key) for key in first if key in told]
    rest.widget.choices = list(told.values())
    if not rest.widget.choices:
        del form.fields[further]


def choose(form: forms.Form, name: str, rows: Any) -> None:
    """Give a choice of records its rows."""
    form.fields[name].queryset = rows  # type: ignore[attr-defined]
