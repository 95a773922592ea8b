"""What the page of release stops is asked, kept in its address."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import date

from django import forms

from fleet.forms.fields import DayField, HoursField
from reports.release_stops import WITHIN, StopsQuery

FARTHEST = 365
MOST_FLIGHTS = 99


class StopsFilter(forms.Form):
    as_of = DayField(required=False, label="as of")
    flights = forms.IntegerField(
        required=False, min_value=1, max_value=MOST_FLIGHTS, label="flights ahead"
    )
    leg = HoursField(required=False, label="hours ahead, h:mm", help_text="")
    within = forms.IntegerField(
        required=False, min_value=0, max_value=FARTHEST, label="due soon within days"
    )

    def __init__(self, asked: Mapping[str, str], *, today: date) -> None:
        """An empty address asks for today and one flight, and says so."""
        first = {"as_of": today, "flights": 1, "within": WITHIN}
        super().__init__(first | dict(asked))
        self.today = today

    def query(self) -> StopsQuery:
        """What is asked; a field that cannot be read falls back and says so."""
        self.is_valid()
        asked = self.cleaned_data
        within = asked.get("within")
        return StopsQuery(
            as_of=asked.get("as_of") or self.today,
            today=self.today,
            within_days=WITHIN if within is None else within,
            flights=asked.get("flights") or 1,
            leg_minutes=asked.get("leg"),
        )
