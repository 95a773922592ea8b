"""The form of a corrosion level."""

from __future__ import annotations

import datetime as dt
from typing import Any

from django import forms

from fleet.forms.fields import DayField
from fleet.models import Person
from repairs.forms.fields import choose
from repairs.forms.findings import not_in_future

SPREAD = [("local", "local"), ("widespread", "widespread"), ("unknown", "unknown")]
REWORK = [
    ("within", "within the allowable limits"),
    ("beyond", "beyond the allowable limits"),
    ("unknown", "unknown"),
]


class LevelForm(forms.Form):
    """A corrosion level and what it rests on."""

    level = forms.TypedChoiceField(
        coerce=int,
        choices=[("", "choose"), (1, "level 1"), (2, "level 2"), (3, "level 3")],
    )
    definitions = forms.CharField(
        label="levels as worded in",
        help_text="Document and paragraph: the sources word the levels differently.",
    )
    task = forms.CharField(label="task or area of the programme")
    first_inspection = forms.NullBooleanField(
        label="first inspection of the area", required=False
    )
    last_inspected_on = DayField(label="last inspected on", required=False)
    spread = forms.ChoiceField(choices=SPREAD)
    single_rework = forms.ChoiceField(choices=REWORK, label="after one rework")
    cumulative = forms.ChoiceField(choices=REWORK, label="with earlier reworks")
    programme_action = forms.CharField(
        label="change to the corrosion programme", required=False,
        widget=forms.Textarea(attrs={"rows": 2}),
        help_text="Levels 2 and 3 are closed only with it.",
    )  # fmt: skip
    fleet_action = forms.CharField(
        label="done on the other aircraft", required=False,
        widget=forms.Textarea(attrs={"rows": 2}),
        help_text="Level 3 is closed only with it.",
    )  # fmt: skip
    determined_by = forms.ModelChoiceField(Person.objects.none(), label="determined by")
    determined_on = DayField(label="determined on")

    def __init__(self, *args: Any, people: Any, today: dt.date, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.today = today
        choose(self, "determined_by", people)

    def clean_determined_on(self) -> Any:
        return not_in_future(self.cleaned_data["determined_on"], self.today)
