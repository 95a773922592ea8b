"""A folder's columns, its rows, and a new revision of it."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from typing import Any

from django import forms

from fleet.due import Counters
from fleet.forms.fields import CounterField, DayField, HoursField
from fleet.models import Person
from repairs.forms.fields import (
    ACCEPTED_FILES,
    FURTHER,
    DataForm,
    Several,
    choose,
    part,
)
from repairs.forms.findings import not_in_future
from repairs.forms.groups import Group, group
from repairs.inspections_text import NONE, PARTS, inspections_said, inspections_text
from repairs.models import (
    Answer,
    Evaluation,
    Finding,
    Repair,
    RepairCategory,
    Substantiation,
    SubstantiationDocument,
    SubstantiationEffect,
    SubstantiationNeighbour,
)
from repairs.selectors.substantiation_needs import TOUCHES
from repairs.services.substantiation_entry import (
    CaseEntry,
    DocumentEntry,
    FolderEntry,
)

SCALES = [("undecided", "undecided"), ("minor", "minor"), ("major", "major")]
KINDS = [
    ("static_ultimate", "static ultimate strength"),
    ("residual", "residual strength"),
    ("fatigue", "fatigue and damage tolerance"),
]
NOTHING_ANSWERED = "Answer at least one of the effects."
FROM_RELEASE = "Counted from the release."
LONG = forms.Textarea(attrs={"rows": 2})


def _words(model: Any, column: str) -> list[tuple[str, str]]:
    choices = model._meta.get_field(column).choices
    return [(value, value.replace("_", " ")) for value, _ in choices]


class FolderForm(forms.Form):
    """The columns of one revision; what is left empty is said to be missing later."""

    title = forms.CharField(help_text="What is substantiated, and where.")
    answer = forms.ChoiceField(label="what it substantiates", choices=Answer.choices)
    limitation = forms.CharField(
        required=False, help_text="What the aircraft may not do."
    )
    prepared_by = forms.ModelChoiceField(Person.objects.none(), label="prepared by")
    scale = forms.ChoiceField(label="minor or major", choices=SCALES)
    scale_reason = forms.CharField(
        label="why minor or major", required=False, widget=LONG
    )
    category = forms.ChoiceField(
        label="repair category", required=False,
        choices=[("", "none yet"), *RepairCategory.choices],
    )  # fmt: skip
    category_reason = forms.CharField(label="why that category", required=False)
    data_due_on = DayField(
        label="damage-tolerance data by", required=False,
        help_text="The schedule that stage 1 is approved with.",
    )  # fmt: skip
    temporary_limit_cycles = CounterField(
        label="temporary limit, flight cycles", required=False, help_text=FROM_RELEASE
    )
    temporary_limit_minutes = HoursField(
        label="temporary limit, flight hours", required=False
    )
    temporary_limit_on = DayField(label="temporary limit, date", required=False)
    temporary_limit_source = forms.CharField(
        label="temporary limit, source", required=False, help_text="Document and page."
    )
    threshold_cycles = CounterField(
        label="threshold, flight cycles", required=False, help_text=FROM_RELEASE
    )
    threshold_minutes = HoursField(label="threshold, flight hours", required=False)
    threshold_on = DayField(label="threshold, date", required=False)
    threshold_source = forms.CharField(
        label="threshold, source", required=False, help_text="Document and page."
    )
    method = forms.CharField(label="inspection method", required=False)
    procedure = forms.CharField(required=False)
    criteria = forms.CharField(label="accept and reject criteria", required=False)
    repeat = forms.CharField(label="repeat interval", required=False)
    none_necessary = forms.CharField(
        label="none necessary, says", required=False,
        help_text="The document by which no supplemental inspection is needed.",
    )  # fmt: skip

    def __init__(self, *args: Any, people: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        choose(self, "prepared_by", people)

    def groups(self) -> list[Group]:
        """The fields in the order they are asked."""
        stage_1 = [n for n in self.fields if n.startswith("temporary_limit")]
        stage_2 = [n for n in self.fields if n.startswith("threshold")]
        stage_3 = (*PARTS, "none_necessary")
        told = ("title", "answer", "limitation", "prepared_by")
        scale = ("scale", "scale_reason", "category", "category_reason")
        return [
            group(self, "What it is for", ("findings", "repair", *told)),
            group(self, "Classification and category", scale),
            group(self, "Stage 1: schedule and temporary limit",
                  ("data_due_on", *stage_1)),
            group(self, "Stage 2: threshold", stage_2),
            group(self, "Stage 3: inspections", stage_3),
        ]  # fmt: skip

    def entry(self) -> FolderEntry:
        data = self.cleaned_data
        said = {**data, NONE: data["none_necessary"]}
        own = {name for name in FolderEntry.__slots__ if name in data}
        return FolderEntry(
            **{name: data[name] for name in own},
            temporary_limit=Counters(
                data["temporary_limit_minutes"], data["temporary_limit_cycles"]
            ),
            threshold=Counters(data["threshold_minutes"], data["threshold_cycles"]),
            inspections=inspections_text(said),
        )


def initial_of(row: Substantiation) -> dict[str, Any]:
    """A revision as the form shows it."""
    said = inspections_said(row.inspections)
    told = {name: getattr(row, name, None) for name in FolderForm.base_fields}
    return told | said | {"none_necessary": said.get(NONE, "")}


class NewFolderForm(FolderForm):
    """A new folder: also the findings it covers, and the repair it is of."""

    findings = Several(Finding.objects.none(), label="findings covered", required=False)
    further = Several(Finding.objects.none(), label="covered too", required=False)
    repair = forms.ModelChoiceField(
        Repair.objects.none(), required=False, empty_label="none yet",
        label="is the folder of",
    )  # fmt: skip

    def __init__(
        self, *args: Any, findings: Any, first: Sequence[int], repairs: Any,
        **kwargs: Any,
    ) -> None:  # fmt: skip
        super().__init__(*args, **kwargs)
        for name in ("findings", "further"):
            choose(self, name, findings)
        choose(self, "repair", repairs)
        part(self, "findings", "further", first)

    def groups(self) -> list[Group]:
        """The findings further off are folded away."""
        one, *others = super().groups()
        further: Any = self.fields.get("further")
        if further is None:
            return [one, *others]
        legend = FURTHER.format(count=len(further.widget.choices))
        return [one, group(self, legend, ("further",), True), *others]

    def covered(self) -> list[Finding]:
        """The findings ticked in either list."""
        data = self.cleaned_data
        return list(dict.fromkeys([*data["findings"], *data.get("further", ())]))


class ReviseForm(forms.Form):
    """Why a new revision, and who prepares it."""

    revision_reason = forms.CharField(label="why it is revised", widget=LONG)
    prepared_by = forms.ModelChoiceField(Person.objects.none(), label="prepared by")

    def __init__(self, *args: Any, people: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        choose(self, "prepared_by", people)


class CoverForm(forms.Form):
    """One more finding that the folder covers."""

    finding = forms.ModelChoiceField(Finding.objects.none())

    def __init__(self, *args: Any, findings: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        choose(self, "finding", findings)


class FolderRepairForm(forms.Form):
    """The repair that this is the folder of."""

    repair = forms.ModelChoiceField(Repair.objects.none())

    def __init__(self, *args: Any, repairs: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        choose(self, "repair", repairs)


class CaseForm(forms.Form):
    """A load case and its margin, or how else it was shown."""

    kind = forms.ChoiceField(label="strength or life", choices=KINDS)
    requirement = forms.CharField(help_text="Rule and paragraph, as 25.305(b).")
    case = forms.CharField(label="critical load case")
    evaluation = forms.ModelChoiceField(
        Evaluation.objects.none(), required=False, empty_label="calculated elsewhere",
        help_text="Not approved yet, it shows as unapproved and bars the stages.",
    )  # fmt: skip
    method = forms.CharField(required=False)
    allowable_source = forms.CharField(label="source of the allowable", required=False)
    margin = forms.FloatField(
        required=False, min_value=-1, max_value=1e6,
        help_text="Allowable over applied, minus one. Empty: as the evaluation has it, "
        "or not shown as a number.",
    )  # fmt: skip

    def __init__(self, *args: Any, evaluations: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        choose(self, "evaluation", evaluations)

    def entry(self) -> CaseEntry:
        return CaseEntry(**self.cleaned_data)


class EffectsForm(forms.Form):
    """All seven effects; one that is not answered stays open."""

    ANSWERS = [("", "not answered"), *_words(SubstantiationEffect, "answer")]

    def __init__(self, *args: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        for touches in TOUCHES:
            words = touches.replace("_", " ")
            said = bool(self.initial.get(touches))
            self.fields[touches] = forms.ChoiceField(
                label=words, choices=self.ANSWERS[said:], required=said
            )
            self.fields[f"{touches}_note"] = forms.CharField(
                label=f"{words}: what, and how", required=False
            )

    def clean(self) -> dict[str, Any]:
        data = super().clean() or {}
        if not any(data.get(touches) for touches in TOUCHES):
            raise forms.ValidationError(NOTHING_ANSWERED)
        return data

    def answers(self) -> dict[str, tuple[str, str]]:
        data = self.cleaned_data
        return {
            touches: (data[touches], data[f"{touches}_note"])
            for touches in TOUCHES
            if data[touches]
        }


class FolderDocumentForm(DataForm):
    """A document of the folder, with its file if it is at hand."""

    role = forms.ChoiceField(
        label="what it is", choices=_words(SubstantiationDocument, "role")
    )
    file = forms.FileField(
        required=False, widget=forms.FileInput(attrs={"accept": ACCEPTED_FILES}),
        help_text="PDF, JPEG, PNG, WebP or TIFF.",
    )  # fmt: skip
    field_order = ("role",)

    def entry(self) -> DocumentEntry:
        data = self.cleaned_data
        return DocumentEntry(
            role=data["role"],
            kind=data["document_kind"],
            reference=data["document_reference"],
            revision=data["document_revision"],
            page=data["document_page"],
        )


class NeighbourForm(forms.Form):
    """The answer for one neighbour: small damages can act together."""

    answer = forms.ChoiceField(
        choices=[("", "choose"), *_words(SubstantiationNeighbour, "answer")]
    )
    reason = forms.CharField(label="why", widget=LONG)
    on = DayField(label="looked at on")

    def __init__(self, *args: Any, today: dt.date, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.today = today

    def clean_on(self) -> Any:
        return not_in_future(self.cleaned_data["on"], self.today)
