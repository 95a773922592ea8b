"""Filters of the density map, kept in the address."""

from __future__ import annotations

from typing import Any

from django import forms
from django.http import QueryDict

from fleet.forms.fields import DayField
from fleet.models import Aircraft, AircraftType, GeometryRevision, Section, User
from fleet.selectors.aircraft import aircraft_visible
from repairs.models import Cause, DamageType
from reports.density import CYCLES, DENOMINATORS
from reports.selectors.exposure import DensityFilter

RATES = [
    (
        one.key,
        f"per m² · {one.per:,.0f} {one.unit}" if one.per != 1 else "per m² · year",
    )
    for one in DENOMINATORS.values()
]
COLOURS = [("smoothed", "smoothed rate"), ("plain", "plain rate")]
SKINS = [("", "first"), ("upper", "upper"), ("lower", "lower")]
PERIOD_REVERSED = "The period ends on {to}, before it begins on {start}."


class DensityForm(forms.Form):
    """What to map; a field left out of the address has its usual value."""

    type = forms.ModelChoiceField(
        AircraftType.objects.none(), to_field_name="code", label="aircraft type"
    )
    section = forms.ModelChoiceField(
        Section.objects.none(), to_field_name="code", label="section"
    )
    skin = forms.ChoiceField(choices=SKINS, required=False, label="skin")
    variant = forms.ChoiceField(required=False, label="variant")
    aircraft = forms.ModelMultipleChoiceField(
        Aircraft.objects.none(),
        to_field_name="registration",
        required=False,
        label="aircraft",
        widget=forms.CheckboxSelectMultiple,
    )
    damage = forms.MultipleChoiceField(
        choices=DamageType.choices,
        required=False,
        label="damage type",
        widget=forms.CheckboxSelectMultiple,
    )
    cause = forms.ChoiceField(
        choices=[("", "all"), *Cause.choices], required=False, label="cause"
    )
    start = DayField(required=False, label="from")
    end = DayField(required=False, label="to")
    rate = forms.ChoiceField(choices=RATES, label="rate")
    colour = forms.ChoiceField(choices=COLOURS, label="colour by")

    def __init__(self, given: QueryDict, *, user: User) -> None:
        types = AircraftType.objects.filter(
            geometries__state=GeometryRevision.State.PUBLISHED
        )
        chosen = types.filter(code=given.get("type", "")).first() or types.first()
        sections = Section.objects.filter(aircraft_type=chosen)
        section = sections.filter(code=given.get("section", "")).first()
        section = section or sections.first()
        data = given.copy()
        data["type"] = chosen.code if chosen else ""
        data["section"] = section.code if section else ""
        data["rate"] = given.get("rate") or CYCLES.key
        data["colour"] = given.get("colour") or COLOURS[0][0]
        super().__init__(data)
        own = aircraft_visible(user).filter(variant__aircraft_type=chosen)
        self.fields["type"].queryset = types  # type: ignore[attr-defined]
        self.fields["section"].queryset = sections  # type: ignore[attr-defined]
        self.fields["aircraft"].queryset = own  # type: ignore[attr-defined]
        self.fields["variant"].choices = [  # type: ignore[attr-defined]
            ("", "all"),
            *(
                (one.code, one.name)
                for one in (chosen.variants.all() if chosen else ())
            ),
        ]

    @property
    def nothing_to_map(self) -> bool:
        """Whether no type has a geometry in force."""
        return not self.data["type"]

    def clean(self) -> dict[str, Any]:
        cleaned = super().clean() or {}
        start, end = cleaned.get("start"), cleaned.get("end")
        if start and end and end < start:
            self.add_error("end", PERIOD_REVERSED.format(to=end, start=start))
        return cleaned

    def asked(self) -> DensityFilter:
        """The filter of a valid form."""
        given = self.cleaned_data
        return DensityFilter(
            aircraft_type=given["type"],
            section=given["section"],
            skin=given["skin"],
            variant=given["variant"],
            aircraft=list(given["aircraft"]),
            damage_types=given["damage"],
            cause=given["cause"],
            from_on=given["start"],
            to_on=given["end"],
            denominator=DENOMINATORS[given["rate"]],
        )

    @property
    def smoothed(self) -> bool:
        return bool(self.cleaned_data["colour"] == COLOURS[0][0])
