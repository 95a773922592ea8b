"""A repair as it was released, its layers and fasteners, and what it answers."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from django import forms

from fleet.due import Counters
from fleet.forms.fields import CounterField, DayField, HoursField
from fleet.forms.signing import SignatureForm
from fleet.models import Aircraft, Criticality, Document, Organisation, Person
from fleet.units import UnitError, length_read
from repairs.forms.fields import (
    UNIT_WORDS,
    CountersForm,
    LengthField,
    PhotoForm,
    Several,
    choose,
)
from repairs.forms.findings import FROM_LOCATION, not_in_future
from repairs.forms.groups import Group, group
from repairs.models import (
    ApprovalBasis,
    Disposition,
    Element,
    Finding,
    Repair,
    RepairCategory,
    RepairType,
    Surface,
)
from repairs.services.repair_entry import Answered, Data, Fastener, Layer

LAYERS_HELP = "One a line: material; thickness; batch. As: 2024-T3 clad; 0.063 in; B-1."
FASTENERS_HELP = (
    "One a line: fastener; diameter; pitch; edge distance; rows; count. "
    "A hyphen where it is not known."
)
BLANK = ("", "-")
NOT_WHOLE = "“{text}” is not a whole number."
STAGES = [
    ("not_applicable", "not applicable"),
    ("none", "none yet"),
    ("1", "stage 1"),
    ("2", "stage 2"),
    ("3", "stage 3"),
]
EVIDENCE = [
    ("not_applicable", "not applicable"),
    ("seen", "seen"),
    ("not_seen", "not seen"),
]
REMOVED = [
    ("unknown", "unknown"),
    ("yes", "yes"),
    ("partly", "partly"),
    ("no", "no"),
]


class RepairForm(SignatureForm, CountersForm, PhotoForm):
    """What was done, with which data, at which release."""

    aircraft = forms.ModelChoiceField(Aircraft.objects.none())
    place_entered = forms.CharField(
        label="location", help_text="As a range: STA 640 to 660, S-6R to S-8R."
    )
    kind = forms.ChoiceField(
        label="repair type", choices=[("", "choose"), *RepairType.choices]
    )
    description = forms.CharField(widget=forms.Textarea(attrs={"rows": 3}))
    length_mm = LengthField(label="length, along the section")
    width_mm = LengthField(label="width, across it")
    element = forms.ChoiceField(
        label="structural item", required=False,
        choices=[*FROM_LOCATION, *Element.choices],
    )  # fmt: skip
    element_label = forms.CharField(label="its label", required=False)
    surface = forms.ChoiceField(
        required=False, choices=[*FROM_LOCATION, *Surface.choices]
    )
    criticality = forms.ChoiceField(
        required=False, choices=[("", "as the panel says"), *Criticality.choices]
    )
    criticality_source = forms.CharField(label="who says so", required=False)
    ata = forms.CharField(label="ATA chapter-section", required=False)
    chart_number = forms.CharField(
        label="chart number",
        required=False,
        help_text="On the damage and repair chart.",
    )
    layers = forms.CharField(
        required=False, widget=forms.Textarea(attrs={"rows": 3}), help_text=LAYERS_HELP
    )
    fasteners = forms.CharField(
        required=False,
        widget=forms.Textarea(attrs={"rows": 3}),
        help_text=FASTENERS_HELP,
    )
    remaining_thickness_mm = LengthField(
        label="remaining thickness", help_text="Blend-out: the smallest measured."
    )
    blend_depth_mm = LengthField(label="blend depth")
    category = forms.ChoiceField(choices=RepairCategory.choices, initial="pending")
    category_reason = forms.CharField(
        label="why this category", required=False, help_text="Needed if none applies."
    )
    replacement_limit_cycles = CounterField(
        label="replacement limit, flight cycles", required=False
    )
    replacement_limit_minutes = HoursField(
        label="replacement limit, flight hours", required=False
    )
    replacement_limit_on = DayField(label="replacement limit, date", required=False)
    stage_reached = forms.ChoiceField(label="approval stage reached", choices=STAGES)
    temporary_limit_cycles = CounterField(
        label="limit approved at stage 1, flight cycles", required=False
    )
    approval_basis = forms.ChoiceField(choices=ApprovalBasis.choices)
    document_kind = forms.ChoiceField(
        label="approval data", choices=Document.Kind.choices, initial="repair_manual"
    )
    document_reference = forms.CharField(label="its reference", required=False)
    document_revision = forms.CharField(label="its revision", required=False)
    document_page = forms.CharField(label="page or figure", required=False)
    disposition = forms.ModelChoiceField(Disposition.objects.none(), required=False)
    released_on = DayField(label="released on")
    release_reference = forms.CharField(label="release reference", required=False)
    released_by = forms.ModelChoiceField(
        Person.objects.none(), label="released by", required=False,
        help_text="Yourself signs it here; another's release is recorded from its "
        "paper, by its reference.",
    )  # fmt: skip
    performed_by = forms.ModelChoiceField(
        Person.objects.none(), label="performed by", required=False
    )
    inspected_by = forms.ModelChoiceField(
        Person.objects.none(), label="inspected by", required=False,
        help_text="Someone other than who performed it.",
    )  # fmt: skip
    organisation = forms.ModelChoiceField(Organisation.objects.none(), required=False)
    legacy = forms.BooleanField(
        label="from before our records", required=False,
        help_text="Known from hand-over papers: what is missing stays unknown.",
    )  # fmt: skip
    evidence = forms.ChoiceField(choices=EVIDENCE, label="evidence of a legacy repair")
    supersedes = Several(Repair.objects.none(), required=False)
    weight_change_g = forms.IntegerField(
        label="weight change, g", required=False, min_value=-(10**7), max_value=10**7
    )

    GROUPS = (
        ("What and where", ("aircraft", "place_entered", "kind", "description",
                            "length_mm", "width_mm")),
        ("Structural item", ("element", "element_label", "surface", "criticality",
                             "criticality_source", "ata", "chart_number")),
        ("Materials", ("layers", "fasteners", "remaining_thickness_mm",
                       "blend_depth_mm", "weight_change_g")),
        ("Category", ("category", "category_reason", "replacement_limit_cycles",
                      "replacement_limit_minutes", "replacement_limit_on",
                      "stage_reached", "temporary_limit_cycles")),
        ("Approval data", ("approval_basis", "document_kind", "document_reference",
                           "document_revision", "document_page", "disposition")),
        ("Release", ("released_on", "release_reference", "released_by", "at_minutes",
                     "at_cycles", "at_landings", "performed_by", "inspected_by",
                     "organisation", "legacy", "evidence", "supersedes")),
        ("Photographs", ("photographs", "role", "caption")),
    )  # fmt: skip
    PASSED_ON = (
        "aircraft", "place_entered", "kind", "description", "length_mm", "width_mm",
        "element", "element_label", "surface", "criticality", "criticality_source",
        "ata", "chart_number", "remaining_thickness_mm", "blend_depth_mm", "category",
        "category_reason", "replacement_limit_on", "stage_reached",
        "temporary_limit_cycles", "approval_basis", "disposition", "released_on",
        "release_reference", "released_by", "performed_by", "inspected_by",
        "organisation", "legacy", "evidence", "supersedes", "weight_change_g", "layers",
        "fasteners",
    )  # fmt: skip

    def __init__(
        self, *args: Any, aircraft: Any, choices: dict[str, Any], unit: str,
        today: Any, **kwargs: Any,
    ) -> None:  # fmt: skip
        super().__init__(*args, **kwargs)
        choose(self, "aircraft", aircraft)
        for name, rows in choices.items():
            choose(self, name, rows)
            if name in ("supersedes", "disposition") and not rows.exists():
                del self.fields[name]
        for field in self.fields.values():
            if isinstance(field, LengthField):
                field.unit = unit
                said = f"{UNIT_WORDS[unit]} unless you write another unit."
                field.help_text = f"{field.help_text} {said}".strip()
        self.unit, self.today = unit, today

    def groups(self) -> list[Group]:
        """The fields in the order they are asked."""
        return [
            group(self, legend, names, legend == "Structural item")
            for legend, names in self.GROUPS
        ]

    def clean_released_on(self) -> Any:
        return not_in_future(self.cleaned_data["released_on"], self.today)

    def clean_layers(self) -> list[Layer]:
        return [_layer(cells, self.unit) for cells in _lines(self, "layers")]

    def clean_fasteners(self) -> list[Fastener]:
        return [_fastener(cells, self.unit) for cells in _lines(self, "fasteners")]

    def approval(self) -> Data | None:
        data = self.cleaned_data
        if not data["document_reference"]:
            return None
        return Data(
            data["document_kind"],
            data["document_reference"],
            data["document_revision"],
            data["document_page"],
        )

    def replacement_limit(self) -> Counters:
        data = self.cleaned_data
        return Counters(
            data["replacement_limit_minutes"], data["replacement_limit_cycles"]
        )


class AnsweredForm(forms.Form):
    """Whether the repair answers one finding, and what became of the damage."""

    answers = forms.BooleanField(label="answers it", required=False)
    covers = forms.BooleanField(label="covers it from sight", required=False)
    damage_removed = forms.ChoiceField(choices=REMOVED, label="damage removed")
    edge_margin_mm = LengthField(
        label="edge margin",
        signed=True,
        help_text="Empty: worked out from the two extents.",
    )

    def __init__(self, *args: Any, finding: Finding, unit: str, **kwargs: Any) -> None:
        kwargs["prefix"] = f"finding-{finding.pk}"
        super().__init__(*args, **kwargs)
        self.finding = finding
        self.fields["edge_margin_mm"].unit = unit  # type: ignore[attr-defined]

    def answered(self) -> Answered | None:
        data = self.cleaned_data
        if not data["answers"]:
            return None
        return Answered(
            self.finding, data["covers"], data["damage_removed"], data["edge_margin_mm"]
        )


class RemoveForm(forms.Form):
    """When and why a repair left the aircraft."""

    removed_on = DayField(label="removed on")
    reason = forms.CharField(help_text="Such as: panel replaced under R-0031.")

    def __init__(self, *args: Any, today: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.today = today

    def clean_removed_on(self) -> Any:
        return not_in_future(self.cleaned_data["removed_on"], self.today)


def _lines(form: RepairForm, name: str) -> list[list[str]]:
    text = form.cleaned_data[name]
    return [
        [cell.strip() for cell in line.split(";")]
        for line in text.splitlines()
        if line.strip()
    ]


def _layer(cells: Sequence[str], unit: str) -> Layer:
    material, thickness, batch = (*cells, "", "")[:3]
    return Layer(material, thickness, _known_size(thickness, unit), batch=batch)


def _fastener(cells: Sequence[str], unit: str) -> Fastener:
    name, *rest = (*cells, "", "", "", "", "")[:6]
    diameter, pitch, edge = (_known_size(text, unit) for text in rest[:3])
    rows, count = (_whole(text) if text not in BLANK else None for text in rest[3:])
    return Fastener(name, diameter, pitch, edge, rows, count)


def _known_size(text: str, unit: str) -> float | None:
    if text in BLANK:
        return None
    try:
        return length_read(text, unit=unit)
    except UnitError as error:
        raise forms.ValidationError(str(error)) from error


def _whole(text: str) -> int:
    if not text.isdecimal():
        raise forms.ValidationError(NOT_WHOLE.format(text=text))
    return int(text)
