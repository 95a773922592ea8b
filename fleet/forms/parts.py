"""Forms that put a safe-life part on an aircraft or take it off."""

from __future__ import annotations

from typing import Any

from django import forms

from fleet.due import Counters
from fleet.forms.fields import CounterField, DayField, HoursField
from fleet.models import (
    Aircraft,
    AircraftType,
    Configuration,
    Operator,
    PartState,
    Person,
)


class PartFilter(forms.Form):
    text = forms.CharField(
        required=False, label="part number, serial, title or registration"
    )


class _AtAircraft(forms.Form):
    """A day, and the aircraft's counters on it as its log has them."""

    on = DayField(label="on")
    at_minutes = HoursField(label="aircraft flight hours")
    at_cycles = CounterField(label="aircraft flight cycles")
    at_landings = CounterField(label="aircraft landings")
    at_pressurisations = CounterField(
        label="aircraft pressurisation cycles",
        required=False,
        help_text="Empty: not recorded.",
    )
    counter_fields = ("at_minutes", "at_cycles", "at_landings", "at_pressurisations")

    def service_columns(self) -> dict[str, Any]:
        """Keyword arguments of the service; the counters as one value."""
        data = dict(self.cleaned_data)
        counters = Counters(*(data.pop(name) for name in self.counter_fields))
        return data | {"counters": counters}


class InstallForm(_AtAircraft):
    aircraft = forms.ModelChoiceField(Aircraft.objects.none())
    position = forms.CharField(help_text="As the aircraft's records name it.")
    configuration = forms.ModelChoiceField(Configuration.objects.none())
    release_reference = forms.CharField(
        required=False, help_text="Empty: the one recorded with the part."
    )
    installed_by = forms.ModelChoiceField(Person.objects.none(), required=False)
    field_order = ["aircraft", "position", "configuration", "on"]

    def __init__(self, *args: Any, operator: Operator, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        aircraft = operator.aircraft.filter(data_to__isnull=True)
        types = AircraftType.objects.filter(variants__aircraft__in=aircraft)
        people = Person.objects.filter(organisation__operator=operator)
        for name, rows in (
            ("aircraft", aircraft),
            ("configuration", Configuration.objects.filter(aircraft_type__in=types)),
            ("installed_by", people),
        ):
            self.fields[name].queryset = rows  # type: ignore[attr-defined]


class RemoveForm(_AtAircraft):
    reason = forms.CharField()
    state = forms.ChoiceField(
        label="goes to",
        choices=[
            (PartState.IN_STORE, "store"),
            (PartState.UNSERVICEABLE, "unserviceable"),
            (PartState.QUARANTINED, "quarantine"),
            (PartState.EXPIRED, "life expired"),
        ],
    )
    release_reference = forms.CharField(
        required=False,
        help_text="Release certificate; without one it is not installed.",
    )
    field_order = ["on", "reason", "state", "release_reference"]
