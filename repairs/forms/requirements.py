"""Forms of inspection requirements: raised, keyed again, done, looked at on sisters."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from django import forms

from fleet.due import Counters
from fleet.forms.fields import AmountField, CounterField, DayField
from fleet.forms.signing import SignatureForm
from fleet.models import Aircraft, Document, Operator, Person, SafeLifePart
from repairs.forms.fields import CountersForm, choose
from repairs.models import DetectionMethod, Finding, RequirementClass
from repairs.services.requirement_draft import LimitEntry

BASES = [
    ("new", "new"),
    ("release", "release of the repair"),
    ("effective", "the effective date"),
    ("installed", "installation of the part"),
    ("overhaul", "last overhaul"),
]
COMBINE = [("first", "whichever first"), ("last", "whichever last")]
RESULTS = [
    ("no_finding", "nothing found"),
    ("finding", "with a finding"),
    ("terminated", "terminating action done"),
    ("not_applicable", "does not apply here"),
]
WIDE = {"size": 60}
SHORT = {"rows": 3}
INTERVAL = "With its unit: 250 FC, 6,000 FH, 90 days or 18 months."
LINES = {"threshold": 3, "repeat": 3, "replace": 1}


class LimitsForm(forms.Form):
    """Threshold, repeat and replace-by limits, one line each, as in the document."""

    def __init__(self, *args: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        for phase, count in LINES.items():
            for n in range(1, count + 1):
                label = phase if count == 1 else f"{phase} {n}"
                help_text = INTERVAL if n == 1 else ""
                self.fields[f"{phase}_{n}"] = AmountField(
                    required=False, label=label, help_text=help_text
                )
                if phase != "repeat":
                    self.fields[f"{phase}_{n}_base"] = forms.ChoiceField(
                        label="counted from", choices=BASES
                    )
            if count > 1:
                self.fields[f"{phase}_combine"] = forms.ChoiceField(
                    label=f"{phase} limits combine", choices=COMBINE
                )

    def limit_groups(self) -> list[tuple[str, list[Any]]]:
        """The limit fields by phase, for the page."""
        return [
            (phase, [self[name] for name in self.fields if name.startswith(phase)])
            for phase in LINES
        ]

    def entries(self, tolerance: str = "", source: str = "") -> list[LimitEntry]:
        """What was typed; the tolerance holds for the repeats."""
        data = self.cleaned_data
        return [
            LimitEntry(
                phase,
                text,
                base=data.get(f"{phase}_{n}_base", "last_done"),
                combine=data.get(f"{phase}_combine", "first"),
                tolerance=tolerance if phase == "repeat" else "",
                tolerance_source=source if phase == "repeat" else "",
            )
            for phase, count in LINES.items()
            for n in range(1, count + 1)
            if (text := data.get(f"{phase}_{n}", ""))
        ]


class RequirementForm(LimitsForm):
    """A requirement from a record or a document."""

    title = forms.CharField(
        widget=forms.TextInput(WIDE), help_text="What it is called on the due list."
    )
    requirement_class = forms.ChoiceField(
        label="class", choices=RequirementClass.choices
    )
    source_document = forms.ModelChoiceField(
        Document.objects.none(), required=False, label="source document"
    )
    source_page = forms.CharField(required=False, label="page or paragraph")
    area = forms.CharField(
        widget=forms.TextInput(WIDE), help_text="Where to look, as in the source."
    )
    method = forms.ChoiceField(choices=DetectionMethod.choices)
    procedure = forms.CharField(required=False)
    task = forms.CharField(required=False, help_text="Task card or task number.")
    access = forms.CharField(required=False)
    criteria = forms.CharField(label="accept or reject", widget=forms.Textarea(SHORT))
    aircraft = forms.ModelMultipleChoiceField(
        Aircraft.objects.none(), required=False, label="applies to aircraft"
    )
    parts = forms.ModelMultipleChoiceField(
        SafeLifePart.objects.none(), required=False, label="applies to serials"
    )
    applicability = forms.CharField(required=False, help_text="As the source words it.")
    effective_on = DayField(label="effective on")
    tolerance = AmountField(required=False, help_text="Of the repeats; empty: none.")
    tolerance_source = forms.CharField(required=False, label="programme that grants it")
    anchor = forms.ChoiceField(
        label="next interval counts from",
        choices=[
            ("scheduled_if_late", "the work, or its due when it was late"),
            ("actual", "the work"),
            ("window", "its due inside a window, else the work"),
        ],
    )
    window_percent = forms.IntegerField(
        required=False, min_value=0, max_value=100, label="window in %"
    )
    calendar = forms.ChoiceField(
        label="months run to",
        choices=[("date", "the same day"), ("month_end", "the end of the month")],
    )
    policy_source = forms.CharField(required=False, label="where that is laid down")
    none_needed = forms.BooleanField(
        required=False,
        label="no supplemental inspection is necessary",
        help_text="A statement of the source document; give no limits then.",
    )

    def __init__(self, *args: Any, operator: Operator, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        present = operator.aircraft.filter(data_to__isnull=True)
        choose(self, "aircraft", present)
        choose(self, "source_document", operator.documents.all())
        parts = operator.safe_life_parts.select_related("part_number")
        choose(self, "parts", parts)

    def what(self) -> list[Any]:
        """The fields beside the limits, in the order they are asked."""
        limits = {field.name for _, fields in self.limit_groups() for field in fields}
        return [self[name] for name in self.fields if name not in limits]

    def draft_columns(self) -> dict[str, Any]:
        """Keyword arguments of a requirement draft."""
        limits = {field.name for _, fields in self.limit_groups() for field in fields}
        data = {k: v for k, v in self.cleaned_data.items() if k not in limits}
        entries = self.entries(data.pop("tolerance"), data.pop("tolerance_source"))
        return data | {"limits": entries}


class AgainForm(LimitsForm):
    """The limits keyed a second time, from the document, without seeing the first."""

    applies_to = forms.CharField(
        label="applies to", help_text="Registrations or serials, separated by commas."
    )

    def subjects(self) -> list[str]:
        return str(self.cleaned_data["applies_to"]).split(",")


class DoneForm(SignatureForm, CountersForm):
    """One doing of a requirement; counters are those at release of the work."""

    at_pressurisations = CounterField(label="pressurisation cycles", required=False)
    done_on = DayField(label="released on")
    result = forms.ChoiceField(choices=RESULTS)
    finding = forms.ModelChoiceField(Finding.objects.none(), required=False)
    done_by = forms.ModelChoiceField(
        Person.objects.none(), required=False, label="done by",
        help_text="Yourself signs it here; another's work is recorded from paper.",
    )  # fmt: skip
    release_document = forms.ModelChoiceField(
        Document.objects.none(), required=False, label="release document"
    )
    evidence = forms.CharField(
        required=False,
        widget=forms.Textarea(SHORT),
        help_text="For a terminating action what was seen, and by whom; why, when it "
        "does not apply.",
    )
    late_approval = forms.CharField(
        required=False,
        label="approval of lateness",
        help_text="Who approved it and in which paper; empty: none.",
    )
    field_order = ["done_on", "result", "finding"]

    def __init__(
        self, *args: Any, operator: Operator, findings: Any, people: Any, **kwargs: Any
    ) -> None:
        super().__init__(*args, **kwargs)
        choose(self, "finding", findings)
        choose(self, "done_by", people)
        choose(self, "release_document", operator.documents.all())

    def counters(self) -> Counters:
        data = self.cleaned_data
        return Counters(
            data["at_minutes"],
            data["at_cycles"],
            data["at_landings"],
            data["at_pressurisations"],
        )


class DoneAgainForm(DoneForm):
    """The accomplishment as it should have been recorded."""

    reason = forms.CharField(label="why it is corrected", widget=forms.TextInput(WIDE))


class SistersForm(forms.Form):
    """A look at the same location of other aircraft of the type."""

    title = forms.CharField(widget=forms.TextInput(WIDE))
    area = forms.CharField(widget=forms.TextInput(WIDE), help_text="Where to look.")
    method = forms.ChoiceField(choices=DetectionMethod.choices)
    criteria = forms.CharField(label="accept or reject", widget=forms.Textarea(SHORT))
    deadline = AmountField(help_text=f"From the effective date. {INTERVAL}")
    effective_on = DayField(label="effective on")
    source_document = forms.ModelChoiceField(
        Document.objects.none(), required=False, label="source document"
    )
    applicability = forms.CharField(
        required=False, help_text="Why these and not others."
    )
    aircraft = forms.ModelMultipleChoiceField(
        Aircraft.objects.none(), widget=forms.CheckboxSelectMultiple
    )

    def __init__(
        self, *args: Any, operator: Operator, sisters: Any, **kwargs: Any
    ) -> None:
        super().__init__(*args, **kwargs)
        choose(self, "aircraft", sisters)
        choose(self, "source_document", operator.documents.all())

    def entries(self) -> Sequence[LimitEntry]:
        return [
            LimitEntry("threshold", self.cleaned_data["deadline"], base="effective")
        ]


class RequirementFilter(forms.Form):
    """What the list of requirements shows."""

    text = forms.CharField(required=False, label="number, title, area or registration")
    state = forms.ChoiceField(
        required=False,
        choices=[
            ("", "all"),
            ("effective", "effective"),
            ("draft", "draft"),
            ("terminated", "terminated"),
        ],
    )


class AnswerForm(forms.Form):
    """The answer for an aircraft that the requirement did not name."""

    aircraft = forms.ModelChoiceField(Aircraft.objects.none())
    applies = forms.ChoiceField(
        label="does it apply", choices=[("yes", "yes"), ("no", "no, because")]
    )
    reason = forms.CharField(required=False, widget=forms.TextInput(WIDE))
    on = DayField(label="from", help_text="The day of the answer.")

    def __init__(
        self, *args: Any, unaccounted: Sequence[Aircraft], **kwargs: Any
    ) -> None:
        super().__init__(*args, **kwargs)
        keys = [item.pk for item in unaccounted]
        choose(self, "aircraft", Aircraft.objects.filter(pk__in=keys))


class VerifyForm(SignatureForm):
    """A second person's confirmation of a terminating action."""

    evidence = forms.CharField(label="what shows it, and who saw it")
