"""What the history page shows."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from django import forms

from fleet.forms.fields import DayField
from fleet.models.history import action_words


class HistoryFilter(forms.Form):
    """All empty shows everything."""

    action = forms.ChoiceField(required=False, label="what")
    who = forms.CharField(required=False, label="who")
    since = DayField(required=False, label="from")
    until = DayField(required=False, label="to")
    stream = forms.CharField(
        required=False, label="stream", help_text="Such as aircraft:17, or fleet."
    )

    def __init__(self, *args: Any, actions: Sequence[str], **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        known = [(action, action_words(action)) for action in actions]
        self.fields["action"].choices = [("", "everything"), *known]  # type: ignore[attr-defined]
