"""A decision on findings, and a signature under a record."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from django import forms

from fleet.due import Counters
from fleet.forms.fields import CounterField, DayField, HoursField
from fleet.forms.signing import SignatureForm
from fleet.models import Document
from fleet.units import measure_write
from repairs.forms.fields import (
    ACCEPTED_FILES,
    FURTHER,
    CountersForm,
    DataForm,
    Several,
    choose,
    part,
)
from repairs.forms.findings import not_in_future
from repairs.forms.groups import Group, group
from repairs.forms.told import DecisionChoice
from repairs.models import (
    Disposition,
    DispositionKind,
    Evaluation,
    Finding,
    InspectionRequirement,
    LimitCheck,
    RepairCategory,
    Substantiation,
)
from repairs.selectors.neighbours import Near
from repairs.services.disposition_entry import Basis, Reviewed
from repairs.services.finding_guards import KEEPS_DAMAGE

REVIEW_FIRST = "Say whether {item} interacts; small damages can act together."
WHY = "Say why, in a few words."
NO_DOCUMENT = "none: this signature"
NAME_DOCUMENT = "choose: a stage names its document"
REVIEW = [("", "not reviewed"), ("no", "does not interact"), ("yes", "interacts")]
DATA = (
    "document_kind", "document_reference", "document_revision", "document_page",
    "substantiation", "evaluations", "limit_checks", "requirement", "replaces",
)  # fmt: skip
LIMITS = (
    "limit_cycles", "limit_minutes", "limit_landings", "limit_on", "crew_informed_on",
)  # fmt: skip
COUNTERS = ("at_minutes", "at_cycles", "at_landings")
SCALE = ("scale", "scale_reason", "category")
SCALES = [("undecided", "undecided"), ("minor", "minor"), ("major", "major")]


class DispositionForm(SignatureForm, CountersForm, DataForm):
    """What is decided, on which data, and until when, by who signs it."""

    kind = forms.ChoiceField(
        label="decision", choices=[("", "choose"), *DispositionKind.choices]
    )
    also = Several(
        Finding.objects.none(), label="also for", required=False,
        help_text="Other findings of this aircraft the same decision answers.",
    )  # fmt: skip
    further = Several(Finding.objects.none(), label="and for", required=False)
    reason = forms.CharField(widget=forms.Textarea(attrs={"rows": 3}))
    decided_on = DayField(label="decided on")
    limit_minutes = HoursField(label="deferral limit, flight hours", required=False)
    limit_cycles = CounterField(
        label="deferral limit, flight cycles", required=False,
        help_text="What the aircraft then shows, not what is left.",
    )  # fmt: skip
    limit_landings = CounterField(label="deferral limit, landings", required=False)
    limit_on = DayField(label="deferral limit, date", required=False)
    crew_informed_on = DayField(
        label="crew informed on", required=False, help_text="Needed for a deferral."
    )
    scale = forms.ChoiceField(choices=SCALES, label="minor or major")
    scale_reason = forms.CharField(label="why minor or major", required=False)
    category = forms.ChoiceField(
        label="repair category", required=False,
        choices=[("", "none yet"), *RepairCategory.choices],
    )  # fmt: skip
    evaluations = Several(
        Evaluation.objects.none(), label="evaluations relied on", required=False
    )
    limit_checks = Several(
        LimitCheck.objects.none(), label="limits checks relied on", required=False
    )
    requirement = forms.ModelChoiceField(
        InspectionRequirement.objects.none(), required=False,
        label="inspection requirement in force",
    )  # fmt: skip
    substantiation = forms.ModelChoiceField(
        Substantiation.objects.none(), required=False,
        help_text="The folder that covers the finding; its stage clock starts here.",
    )  # fmt: skip
    replaces = DecisionChoice(
        Disposition.objects.none(), required=False, label="replaces",
        help_text="An earlier decision, such as the deferral this one extends.",
    )  # fmt: skip

    def __init__(
        self, *args: Any, choices: dict[str, Any], today: Any, near: Sequence[Near],
        unit: str, **kwargs: Any,
    ) -> None:  # fmt: skip
        super().__init__(*args, **kwargs)
        for name, rows in choices.items():
            choose(self, name, rows)
            if not rows.exists():
                del self.fields[name]
        self._part_also(near)
        self.today, self.near = today, near
        for number, one in enumerate(near):
            self.fields[f"near_{number}"] = forms.ChoiceField(
                label=_near_label(one, unit), choices=REVIEW, required=False
            )
            self.fields[f"why_{number}"] = forms.CharField(label="why", required=False)

    def _part_also(self, near: Sequence[Near]) -> None:
        """First those deferred with it and those near; either list may be missing."""
        if "also" not in self.fields:
            return
        given = [one.pk for one in self.initial.get("also", ())]
        keys = [one.item.pk for one in near if not one.is_repair]
        part(self, "also", "further", list(dict.fromkeys([*given, *keys])))
        if not self.fields["also"].widget.choices:
            del self.fields["also"]

    def answered_too(self) -> list[Finding]:
        """The other findings ticked, in either list."""
        data = self.cleaned_data
        ticked = [*data.get("also", ()), *data.get("further", ())]
        return list(dict.fromkeys(ticked))

    def groups(self) -> list[Group]:
        """The fields in the order they are asked."""
        rest: Any = self.fields.get("further")
        further = FURTHER.format(count=len(rest.widget.choices) if rest else 0)
        others = (
            group(self, "Other findings it answers", ("also",)),
            group(self, further, ("further",), True),
        )
        near = [n for n in self.fields if n.startswith(("near_", "why_"))]
        return [
            group(self, "Decision", ("kind", "reason", "decided_on")),
            group(self, "Data it rests on", DATA),
            group(self, "Deferral limit", LIMITS),
            *([group(self, "Neighbours reviewed", near)] if near else []),
            *(one for one in others if one.fields),
            group(self, "Counters that day", COUNTERS, True),
            group(self, "Minor or major, repair category", SCALE, True),
        ]

    def clean_decided_on(self) -> Any:
        return not_in_future(self.cleaned_data["decided_on"], self.today)

    def clean(self) -> dict[str, Any]:
        data = super().clean() or {}
        for number, one in enumerate(self.near):
            answer = data.get(f"near_{number}")
            if not answer and data.get("kind") in KEEPS_DAMAGE:
                text = REVIEW_FIRST.format(item=one.item)
                self.add_error(f"near_{number}", text)
            if answer and not data.get(f"why_{number}"):
                self.add_error(f"why_{number}", WHY)
        return data

    def basis(self) -> Basis:
        data = self.cleaned_data
        return Basis(
            kind=data["document_kind"],
            reference=data["document_reference"],
            page=data["document_page"],
            revision=data["document_revision"],
        )

    def limit(self) -> Counters:
        data = self.cleaned_data
        return Counters(
            data["limit_minutes"], data["limit_cycles"], data["limit_landings"]
        )

    def reviewed(self) -> list[Reviewed]:
        data = self.cleaned_data
        answers = [
            (one, data.get(f"near_{number}"), data.get(f"why_{number}") or "")
            for number, one in enumerate(self.near)
        ]
        return [
            Reviewed(one.item, one.distance_mm, answer == "yes", why)
            for one, answer, why in answers
            if answer
        ]


class SignForm(SignatureForm):
    """A signature under the text shown."""

    meaning = forms.ChoiceField(label="signed as")
    statement = forms.CharField(required=False)
    document_kind = forms.ChoiceField(
        label="approval document", required=False,
        choices=[("", NO_DOCUMENT), *Document.Kind.choices],
    )  # fmt: skip
    document_number = forms.CharField(required=False, label="its number")
    document_issuer = forms.CharField(required=False, label="its issuer")
    document_revision = forms.CharField(required=False, label="its revision")
    document_date = DayField(required=False, label="its date")
    document_file = forms.FileField(
        required=False, label="its file", help_text="PDF, JPEG, PNG, WebP or TIFF.",
        widget=forms.FileInput(attrs={"accept": ACCEPTED_FILES}),
    )  # fmt: skip
    shown_digest = forms.CharField(widget=forms.HiddenInput)

    def __init__(
        self, *args: Any, meanings: list[tuple[str, str]], by_document: bool,
        **kwargs: Any,
    ) -> None:  # fmt: skip
        super().__init__(*args, **kwargs)
        self.fields["meaning"].choices = meanings  # type: ignore[attr-defined]
        if by_document:
            kinds = [("", NAME_DOCUMENT), *Document.Kind.choices]
            self.fields["document_kind"].choices = kinds  # type: ignore[attr-defined]


def _near_label(one: Near, unit: str) -> str:
    gap = measure_write(one.distance_mm, unit, digits=1 if unit == "in" else 0)
    return f"{one.item} {one.item.place_text}, {gap} away"
