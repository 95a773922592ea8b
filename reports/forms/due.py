"""The filters of the due list, kept in its address."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import date

from django import forms

from fleet.forms.fields import DayField
from repairs.models import DueKind
from reports.due_list import DueQuery

WITHIN = 90
FARTHEST = 3_650


class DueFilter(forms.Form):
    aircraft = forms.CharField(required=False)
    within = forms.IntegerField(
        required=False, min_value=0, max_value=FARTHEST, label="within days"
    )
    kind = forms.ChoiceField(required=False, choices=[("", "all"), *DueKind.choices])
    zone = forms.CharField(required=False)
    as_of = DayField(required=False, label="as of")

    def __init__(self, asked: Mapping[str, str], *, today: date) -> None:
        """An empty address asks for the next 90 days from today, and says so."""
        super().__init__({"within": WITHIN, "as_of": today} | dict(asked))
        self.today = today

    def query(self) -> DueQuery:
        """What is asked; a filter that cannot be read falls back and says so."""
        self.is_valid()
        asked = self.cleaned_data
        within = asked.get("within")
        return DueQuery(
            as_of=asked.get("as_of") or self.today,
            within_days=WITHIN if within is None else within,
            registration=asked.get("aircraft", "").strip(),
            kind=asked.get("kind", ""),
            zone=asked.get("zone", "").strip(),
        )
