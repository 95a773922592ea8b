"""A repair's further steps: a part done, inspection, new category, its end."""

from __future__ import annotations

from typing import Any

from django import forms

from fleet.due import Counters
from fleet.forms.fields import CounterField, DayField, HoursField
from fleet.forms.signing import SignatureForm
from fleet.models import Person
from repairs.forms.fields import DataForm, choose
from repairs.forms.findings import not_in_future
from repairs.forms.repair_lines import step_words
from repairs.forms.repairs import STAGES
from repairs.models import Approval, RepairCategory, RepairStep

BOTH = "Give the day and who did it, or leave both empty for a step still to be done."
DONE_NEEDED = "Say on which day it was done, and by whom."


class RemoveForm(forms.Form):
    """When and why a repair left the aircraft."""

    removed_on = DayField(label="removed on")
    reason = forms.CharField(help_text="Such as: panel replaced under R-0031.")
    damage_gone = forms.BooleanField(
        label="the damage it covered left with the part",
        required=False,
        help_text="Otherwise damage not shown to be removed stands open again.",
    )

    def __init__(self, *args: Any, today: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.today = today

    def clean_removed_on(self) -> Any:
        return not_in_future(self.cleaned_data["removed_on"], self.today)


class CancelForm(forms.Form):
    """Why a planned repair will not be done."""

    reason = forms.CharField(help_text="Such as: part replaced instead, R-0031.")


class _Step(forms.ModelChoiceField):
    def label_from_instance(self, obj: Any) -> str:
        return step_words(obj)


class StepForm(forms.Form):
    """A step done, or one more that is to be done."""

    step = _Step(RepairStep.objects.none(), required=False, empty_label="a further one")
    title = forms.CharField(
        label="what it is", required=False, help_text="For a further step."
    )
    option = forms.CharField(
        required=False, help_text="Which of the data's options was chosen."
    )
    done_on = DayField(label="done on", required=False)
    done_by = forms.ModelChoiceField(
        Person.objects.none(), label="done by", required=False
    )

    def __init__(
        self, *args: Any, steps: Any, people: Any, today: Any, **kwargs: Any
    ) -> None:
        super().__init__(*args, **kwargs)
        choose(self, "step", steps)
        choose(self, "done_by", people)
        self.today = today

    def clean_done_on(self) -> Any:
        day = self.cleaned_data["done_on"]
        return not_in_future(day, self.today) if day else None

    def clean(self) -> dict[str, Any]:
        data = super().clean() or self.cleaned_data
        both = (data.get("done_on"), data.get("done_by"))
        if data.get("step") and None in both:
            self.add_error("done_on", DONE_NEEDED)
        elif (both[0] is None) != (both[1] is None):
            self.add_error("done_on", BOTH)
        return data


class _Rejection(forms.ModelChoiceField):
    def label_from_instance(self, obj: Any) -> str:
        return f"{obj.signed_at:%Y-%m-%d} {obj.signer_name}: {obj.statement}"


class InspectForm(SignatureForm):
    """What an inspector found; signed."""

    outcome = forms.ChoiceField(
        choices=[("accepted", "inspected and accepted"), ("rejected", "rejected")]
    )
    statement = forms.CharField(
        label="what was inspected", widget=forms.Textarea(attrs={"rows": 2})
    )
    answers = _Rejection(
        Approval.objects.none(),
        label="answers the rejection",
        required=False,
        empty_label="none",
        help_text="Found good after rework, or overruled; by inspectors only.",
    )
    on = DayField(label="inspected on")

    def __init__(self, *args: Any, rejections: Any, today: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        choose(self, "answers", rejections)
        if not rejections.exists():
            del self.fields["answers"]
        self.today = today

    def clean_on(self) -> Any:
        return not_in_future(self.cleaned_data["on"], self.today)


class ReclassifyForm(DataForm):
    """The category that a new approval gives."""

    category = forms.ChoiceField(choices=RepairCategory.choices)
    reason = forms.CharField(help_text="What the new approval rests on.")
    on = DayField(label="from")
    stage_reached = forms.ChoiceField(label="approval stage reached", choices=STAGES)
    replacement_limit_cycles = CounterField(
        label="replacement limit, flight cycles", required=False
    )
    replacement_limit_minutes = HoursField(
        label="replacement limit, flight hours", required=False
    )
    replacement_limit_on = DayField(label="replacement limit, date", required=False)

    def __init__(self, *args: Any, today: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.today = today

    def clean_on(self) -> Any:
        return not_in_future(self.cleaned_data["on"], self.today)

    def replacement_limit(self) -> Counters:
        data = self.cleaned_data
        return Counters(
            data["replacement_limit_minutes"], data["replacement_limit_cycles"]
        )
