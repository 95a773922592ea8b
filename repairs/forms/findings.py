"""Forms of a finding: its entry, and each step after it."""

from __future__ import annotations

import uuid
from typing import Any

from django import forms

from fleet.forms.fields import CounterField, DayField
from fleet.forms.signing import SignatureForm
from fleet.models import Aircraft, Criticality, Person
from repairs.forms.fields import CountersForm, DataForm, PhotoForm, choose
from repairs.forms.told import EventChoice
from repairs.models import (
    Cause,
    DamageType,
    DetectionMethod,
    Element,
    Event,
    Finding,
    Occasion,
    Surface,
)

FROM_LOCATION = [("", "as the location says")]
FUTURE = "{day} lies after today, {today}; record it when it is found."
LINK_KINDS = [
    ("", "choose"),
    ("different", "different damage"),
    ("same_damage", "the same damage, measured again"),
    ("grew_from", "has grown from it"),
    ("duplicate_report", "the same report twice"),
]


class FindingForm(CountersForm, PhotoForm):
    """A new finding; only what is needed to report it is needed here."""

    aircraft = forms.ModelChoiceField(Aircraft.objects.none())
    place_entered = forms.CharField(
        label="location",
        help_text="As written, such as STA 640+10, 4 in below S-7R or FR 31 WEB S-16L.",
    )
    damage_type = forms.ChoiceField(choices=[("", "choose"), *DamageType.choices])
    found_on = DayField(label="found on")
    cluster_count = forms.IntegerField(
        label="how many", min_value=1, max_value=100_000, initial=1,
        help_text="Hail: one finding, so many dents.",
    )  # fmt: skip
    element = forms.ChoiceField(
        label="structural item", required=False,
        choices=[*FROM_LOCATION, *Element.choices],
    )  # fmt: skip
    element_label = forms.CharField(
        label="its label", required=False, help_text="Such as S-14L or FR 31."
    )
    surface = forms.ChoiceField(
        required=False, choices=[*FROM_LOCATION, *Surface.choices]
    )
    criticality = forms.ChoiceField(
        required=False, choices=[("", "as the panel says"), *Criticality.choices]
    )
    criticality_source = forms.CharField(label="who says so", required=False)
    ata = forms.CharField(
        label="ATA chapter-section", required=False, help_text="Such as 53-10."
    )
    occasion = forms.ChoiceField(
        label="found during", choices=Occasion.choices, initial=Occasion.OTHER
    )
    task_reference = forms.CharField(label="task card or work order", required=False)
    event = EventChoice(
        Event.objects.none(), required=False, help_text="When it follows an event."
    )
    detection_method = forms.ChoiceField(
        label="detection method", choices=DetectionMethod.choices, initial="unknown"
    )
    instrument = forms.CharField(label="instrument", required=False)
    light = forms.CharField(required=False, help_text="Daylight, torch and so on.")
    found_by = forms.ModelChoiceField(
        Person.objects.none(), label="found by", required=False
    )
    cause = forms.ChoiceField(choices=Cause.choices, initial="unknown")
    last_clean_on = DayField(
        label="last inspected without a finding", required=False,
        help_text="It bounds how fast this grew.",
    )  # fmt: skip
    last_clean_cycles = CounterField(label="flight cycles then", required=False)
    last_clean_method = forms.CharField(label="method then", required=False)
    description = forms.CharField(
        required=False, widget=forms.Textarea(attrs={"rows": 3})
    )
    unplaced = forms.BooleanField(
        label="save as to be placed", required=False,
        help_text="Keeps the location as written; somebody places it later.",
    )  # fmt: skip
    client_key = forms.UUIDField(widget=forms.HiddenInput, initial=uuid.uuid4)

    first_fields = ("aircraft", "place_entered", "found_on", "damage_type")
    item_fields = (
        "element", "element_label", "surface", "criticality", "criticality_source",
        "ata",
    )  # fmt: skip
    how_fields = (
        "occasion", "task_reference", "detection_method", "found_by", "cause",
        "cluster_count", "description",
    )  # fmt: skip
    more_fields = (
        "event", "instrument", "light", "last_clean_on", "last_clean_cycles",
        "last_clean_method",
    )  # fmt: skip
    counter_fields = ("at_minutes", "at_cycles", "at_landings")
    photo_fields = ("photographs", "role", "caption")

    def __init__(
        self, *args: Any, aircraft: Any, people: Any, events: Any, today: Any,
        **kwargs: Any,
    ) -> None:  # fmt: skip
        super().__init__(*args, **kwargs)
        choose(self, "aircraft", aircraft)
        choose(self, "found_by", people)
        choose(self, "event", events)
        self.today = today

    def clean_found_on(self) -> Any:
        return not_in_future(self.cleaned_data["found_on"], self.today)


class MeasureForm(CountersForm):
    """A further measuring; its dimensions are a form of their own."""

    measured_on = DayField(label="measured on")
    stage = forms.ChoiceField(
        choices=[
            ("repeat", "repeat"),
            ("after_rework", "after rework"),
            ("as_found", "as found"),
        ]
    )
    measured_by = forms.ModelChoiceField(
        Person.objects.none(), label="measured by", required=False
    )
    method = forms.CharField(required=False)
    instrument = forms.CharField(required=False)
    light = forms.CharField(required=False)

    def __init__(self, *args: Any, people: Any, today: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        choose(self, "measured_by", people)
        self.today = today

    def clean_measured_on(self) -> Any:
        return not_in_future(self.cleaned_data["measured_on"], self.today)


class PlaceForm(forms.Form):
    """A location read anew."""

    place_entered = forms.CharField(label="location")
    reason = forms.CharField(
        label="why", required=False, help_text="Kept in the history."
    )


class AnswerForm(forms.Form):
    answer = forms.CharField()


class OnDayForm(SignatureForm):
    """The day of a judgement, signed by who makes it."""

    on = DayField(label="on")

    def __init__(self, *args: Any, today: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.today = today

    def clean_on(self) -> Any:
        return not_in_future(self.cleaned_data["on"], self.today)


class AssessForm(OnDayForm, DataForm):
    """Assessed against cited data."""

    cause = forms.ChoiceField(choices=Cause.choices)
    criticality = forms.ChoiceField(choices=Criticality.choices)
    criticality_source = forms.CharField(label="who says so", required=False)


class CloseForm(OnDayForm):
    """Closed by certifying staff, with the cause and the answer on reporting.

    `undecided` names the rules that still want that answer; with none it is not asked.
    """

    release_reference = forms.CharField(
        label="certificate of release", required=False,
        help_text="Its reference, where the repair does not name it.",
    )  # fmt: skip
    cause = forms.ChoiceField(choices=Cause.choices)
    reason = forms.CharField(
        label="remark", required=False,
        help_text="Needed when the cause is unknown: what was looked into.",
    )  # fmt: skip
    reportable = forms.ChoiceField(
        required=False, choices=[("", "choose"), ("no", "no"), ("yes", "yes")]
    )
    report_reason = forms.CharField(label="why", required=False)

    def __init__(self, *args: Any, undecided: list[str], **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.fields["reportable"].label = f"reportable under {', '.join(undecided)}"
        if not undecided:
            del self.fields["reportable"], self.fields["report_reason"]


class LinkForm(forms.Form):
    """How the finding relates to an earlier one of the same aircraft."""

    earlier = forms.ModelChoiceField(Finding.objects.none(), label="earlier finding")
    kind = forms.ChoiceField(label="is it", choices=LINK_KINDS)

    def __init__(self, *args: Any, findings: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        choose(self, "earlier", findings)


class VoidForm(forms.Form):
    reason = forms.CharField(help_text="It stays visible with this reason.")


def not_in_future(day: Any, today: Any) -> Any:
    if day > today:
        raise forms.ValidationError(FUTURE.format(day=day, today=today))
    return day
