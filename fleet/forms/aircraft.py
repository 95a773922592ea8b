"""Forms of the aircraft list and of an aircraft's own record."""

from __future__ import annotations

from typing import Any

from django import forms

from fleet.forms.fields import CounterField, DayField, HoursField
from fleet.models import (
    AircraftState,
    Configuration,
    Operator,
    Organisation,
    OrganisationKind,
    Variant,
)

OTHER_TYPE = "{configuration} is not a configuration of {variant}; choose one of its."


def _camo() -> forms.ModelChoiceField[Organisation]:
    return forms.ModelChoiceField(
        Organisation.objects.filter(
            kind__in=(OrganisationKind.CAMO, OrganisationKind.OPERATOR)
        ),
        required=False,
        label="continuing-airworthiness organisation",
    )


def _owner() -> forms.ModelChoiceField[Organisation]:
    return forms.ModelChoiceField(
        Organisation.objects.filter(
            kind__in=(OrganisationKind.OWNER, OrganisationKind.OPERATOR)
        ),
        required=False,
    )


def _offer(form: forms.Form, operators: list[Operator]) -> None:
    """The operators whose fleet the user may change; the only one is chosen."""
    keys = [operator.pk for operator in operators]
    form.fields["operator"].queryset = Operator.objects.filter(pk__in=keys)  # type: ignore[attr-defined]
    if len(operators) == 1:
        form.initial.setdefault("operator", operators[0])


class AircraftFilter(forms.Form):
    """What the aircraft list shows."""

    text = forms.CharField(required=False, label="registration, serial or variant")
    state = forms.ChoiceField(
        required=False, choices=[("", "every state"), *AircraftState.choices]
    )


class OpeningForm(forms.Form):
    """The counters an aircraft joins with, keyed from its joining record."""

    opening_minutes = HoursField(label="flight hours")
    opening_cycles = CounterField(label="flight cycles")
    opening_landings = CounterField(label="landings")
    opening_pressurisations = CounterField(
        label="pressurisation cycles", required=False, help_text="Empty: not tracked."
    )


class OpeningCorrectionForm(OpeningForm):
    """The first keying again, by the same person, before it was agreed."""

    reason = forms.CharField(
        label="why it is corrected", help_text="Kept in the history."
    )


class AircraftForm(OpeningForm):
    """A new aircraft: identity, first period, evidence of its counters."""

    operator = forms.ModelChoiceField(Operator.objects.none())
    variant = forms.ModelChoiceField(Variant.objects.select_related("aircraft_type"))
    configuration = forms.ModelChoiceField(
        Configuration.objects.all(), required=False, help_text="Empty: not stated."
    )
    serial_number = forms.CharField(
        label="manufacturer's serial number",
        help_text="The key of the aircraft; it never changes.",
    )
    registration = forms.CharField(help_text="Registration on the first day here.")
    manufactured_on = DayField(
        label="manufactured on", required=False, help_text="Empty: unknown."
    )
    data_from = DayField(
        label="first day with records here",
        help_text="The opening counters are those at the start of this day.",
    )
    state = forms.ChoiceField(choices=AircraftState.choices)
    camo = _camo()
    owner = _owner()
    opening_source = forms.CharField(
        label="evidence of the counters",
        help_text="Document, page and date, such as: joining record, page 3.",
    )
    field_order = [
        "operator",
        "variant",
        "configuration",
        "serial_number",
        "registration",
        "manufactured_on",
        "data_from",
        "state",
        "camo",
        "owner",
        "opening_minutes",
        "opening_cycles",
        "opening_landings",
        "opening_pressurisations",
        "opening_source",
    ]

    def __init__(self, *args: Any, operators: list[Operator], **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        _offer(self, operators)

    def clean(self) -> dict[str, Any]:
        data = super().clean() or {}
        variant, configuration = data.get("variant"), data.get("configuration")
        if (
            variant
            and configuration
            and configuration.aircraft_type_id != variant.aircraft_type_id
        ):
            self.add_error(
                "configuration",
                OTHER_TYPE.format(configuration=configuration, variant=variant),
            )
        return data


class PeriodForm(forms.Form):
    """The aircraft's next period: its mark, operator, rules and who looks after it."""

    operator = forms.ModelChoiceField(Operator.objects.none())
    registration = forms.CharField()
    regime = forms.CharField(help_text="Rules it works under, such as EASA or FAA.")
    from_on = DayField(label="from")
    camo = _camo()
    owner = _owner()
    at_minutes = HoursField(required=False, label="flight hours then")
    at_cycles = CounterField(required=False, label="flight cycles then")
    at_landings = CounterField(required=False, label="landings then")
    at_pressurisations = CounterField(
        required=False, label="pressurisation cycles then"
    )
    reason = forms.CharField(
        label="why", help_text="Such as: sold, lease ended, re-registered."
    )

    def __init__(self, *args: Any, operators: list[Operator], **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        _offer(self, operators)


class StateForm(forms.Form):
    """The aircraft's next state, from a day on."""

    state = forms.ChoiceField(choices=AircraftState.choices)
    configuration = forms.ModelChoiceField(
        Configuration.objects.none(),
        required=False,
        help_text="Empty: unchanged.",
    )
    from_on = DayField(label="from")
    reason = forms.CharField(label="why")

    def __init__(self, *args: Any, type_id: int, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.fields["configuration"].queryset = Configuration.objects.filter(  # type: ignore[attr-defined]
            aircraft_type_id=type_id
        )
