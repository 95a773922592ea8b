"""Form fields that read what people write, in the units they write it."""

from __future__ import annotations

from typing import Any

from django import forms
from django.core.exceptions import ValidationError

from fleet.amounts import AmountError, amount_read
from fleet.fields import COUNTER_HIGH
from fleet.units import UnitError, hours_read, hours_write


class HoursField(forms.CharField):
    """Flight time as h:mm; its value is whole minutes."""

    def __init__(self, **kwargs: Any) -> None:
        kwargs.setdefault("help_text", "Flight time as h:mm, such as 18,400:00.")
        super().__init__(**kwargs)

    def prepare_value(self, value: Any) -> Any:
        return hours_write(value) if isinstance(value, int) else value

    def to_python(self, value: Any) -> Any:
        text = super().to_python(value)
        if not text:
            return None
        try:
            minutes = hours_read(text)
        except UnitError as error:
            raise ValidationError(str(error)) from error
        if minutes > COUNTER_HIGH:
            raise ValidationError(f"“{text}” is more than a counter can hold.")
        return minutes


class CounterField(forms.IntegerField):
    """A counter in whole numbers; thousands may be set off by a comma."""

    def __init__(self, **kwargs: Any) -> None:
        super().__init__(min_value=0, max_value=COUNTER_HIGH, **kwargs)
        self.widget = forms.TextInput(attrs={"inputmode": "numeric"})

    def to_python(self, value: Any) -> Any:
        return super().to_python(
            value.replace(",", "") if isinstance(value, str) else value
        )


class DayField(forms.DateField):
    """A calendar day, picked or typed as 2025-01-31."""

    widget = forms.DateInput(format="%Y-%m-%d", attrs={"type": "date"})

    def __init__(self, **kwargs: Any) -> None:
        kwargs.setdefault("input_formats", ["%Y-%m-%d"])
        super().__init__(**kwargs)


class AmountField(forms.CharField):
    """An interval with its unit; its value is the text, checked."""

    def clean(self, value: Any) -> str:
        text: str = super().clean(value)
        if text:
            try:
                amount_read(text)
            except AmountError as error:
                raise ValidationError(str(error)) from error
        return text
