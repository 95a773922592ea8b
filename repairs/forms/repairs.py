"""A repair as planned, and as it was released; what it answers and lies over."""

from __future__ import annotations

from typing import Any

from django import forms

from fleet.due import Counters
from fleet.forms.fields import CounterField, DayField, HoursField
from fleet.forms.signing import SignatureForm
from fleet.models import Aircraft, Criticality, Document, Organisation, Person
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
from repairs.forms.repair_lines import (
    ANSWERS_HELP,
    FASTENER_CELLS,
    FASTENER_EXAMPLE,
    FASTENERS_HELP,
    LAYER_CELLS,
    LAYER_EXAMPLE,
    LAYERS_HELP,
    REQUIRED_CELLS,
    REQUIRED_EXAMPLE,
    REQUIRED_HELP,
    STEPS_HELP,
    LinesField,
    answers_of,
    fastener_of,
    layer_of,
    required_of,
    step_of,
)
from repairs.forms.told import DecisionChoice, HolderChoice
from repairs.models import (
    ApprovalBasis,
    Disposition,
    Element,
    Repair,
    RepairCategory,
    RepairType,
    Substantiation,
    Surface,
)
from repairs.selectors.substantiation_stages import stage_of_named
from repairs.services.repair_entry import (
    Data,
    Fastener,
    Layer,
    Required,
    Step,
)

STAGES = [
    ("not_applicable", "not applicable"),
    ("none", "none yet"),
    ("1", "stage 1"),
    ("2", "stage 2"),
    ("3", "stage 3"),
]
NO_STAGE = {"not_applicable": "none"}
STAGE_DIFFERS = (
    "{folder} has reached: {reached}; here it says: {said}. Choose {reached}, or name "
    "another substantiation."
)
EVIDENCE = [
    ("not_applicable", "not applicable"),
    ("seen", "seen"),
    ("not_seen", "not seen"),
]
REQUIRED_OR_NOT = [("", "not said"), ("yes", "required"), ("no", "not required")]
OFFERED_IF_ANY = ("supersedes", "disposition", "substantiation")


class PlanForm(forms.Form):
    """What is known of a repair before it is done."""

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
        help_text="On the damage and repair chart, and where it is marked outside.",
    )
    required = LinesField(
        label="layers required", help_text=REQUIRED_HELP,
        cells=REQUIRED_CELLS, example=REQUIRED_EXAMPLE,
    )  # fmt: skip
    steps = LinesField(help_text=STEPS_HELP)
    category = forms.ChoiceField(choices=RepairCategory.choices, initial="pending")
    category_reason = forms.CharField(
        label="why this category", required=False, help_text="Needed if none applies."
    )
    stage_reached = forms.ChoiceField(label="approval stage reached", choices=STAGES)
    approval_basis = forms.ChoiceField(choices=ApprovalBasis.choices)
    document_kind = forms.ChoiceField(
        label="approval data", choices=Document.Kind.choices, initial="repair_manual"
    )
    document_reference = forms.CharField(label="its reference", required=False)
    document_revision = forms.CharField(label="its revision", required=False)
    document_page = forms.CharField(label="page or figure", required=False)
    substantiation = forms.ModelChoiceField(
        Substantiation.objects.none(), required=False
    )
    disposition = DecisionChoice(Disposition.objects.none(), required=False)
    inspection_required = forms.ChoiceField(
        label="independent inspection", choices=REQUIRED_OR_NOT, required=False
    )

    GROUPS: tuple[tuple[str, tuple[str, ...]], ...] = (
        ("What and where", ("aircraft", "place_entered", "kind", "description",
                            "length_mm", "width_mm")),
        ("Structural item", ("element", "element_label", "surface", "criticality",
                             "criticality_source", "ata", "chart_number")),
        ("Approval data", ("approval_basis", "document_kind", "document_reference",
                           "document_revision", "document_page", "substantiation",
                           "disposition", "required")),
        ("Category", ("category", "category_reason", "stage_reached")),
        ("Work", ("steps", "inspection_required")),
    )  # fmt: skip
    PASSED_ON: tuple[str, ...] = (
        "aircraft", "place_entered", "kind", "description", "length_mm", "width_mm",
        "element", "element_label", "surface", "criticality", "criticality_source",
        "ata", "chart_number", "category", "category_reason", "stage_reached",
        "approval_basis", "disposition", "substantiation", "inspection_required",
    )  # fmt: skip

    def __init__(
        self, *args: Any, aircraft: Any, choices: dict[str, Any], unit: str,
        today: Any, **kwargs: Any,
    ) -> None:  # fmt: skip
        super().__init__(*args, **kwargs)
        choose(self, "aircraft", aircraft)
        for name, rows in choices.items():
            if name not in self.fields:
                continue
            choose(self, name, rows)
            if name in OFFERED_IF_ANY and not rows.exists():
                del self.fields[name]
        for field in self.fields.values():
            if isinstance(field, LengthField):
                field.unit = unit
                said = f"{UNIT_WORDS[unit]} unless you write another unit."
                field.help_text = f"{field.help_text} {said}".strip()
        self.unit, self.today = unit, today
        self.folders = choices["substantiation"]
        named = self.initial.get("substantiation")
        if stage := stage_of_named(self.folders, named):
            self.initial["stage_reached"] = stage

    def groups(self) -> list[Group]:
        """The fields in the order they are asked."""
        return [
            group(self, legend, names, legend == "Structural item")
            for legend, names in self.GROUPS
        ]

    def clean_required(self) -> list[Required]:
        return [required_of(row, self.unit) for row in self.cleaned_data["required"]]

    def clean_inspection_required(self) -> bool | None:
        return {"yes": True, "no": False}.get(self.cleaned_data["inspection_required"])

    def clean(self) -> dict[str, Any]:
        """The stage stated is the one that the folder has reached."""
        data = super().clean() or self.cleaned_data
        folder, said = data.get("substantiation"), data.get("stage_reached")
        reached = stage_of_named(self.folders, folder)
        if folder and said and NO_STAGE.get(said, said) != reached:
            words = dict(STAGES)
            text = STAGE_DIFFERS.format(
                folder=folder, reached=words[reached], said=words[said]
            )
            self.add_error("stage_reached", text)
        return data

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

    def said(self) -> dict[str, Any]:
        """What a repair's entry is told by this form."""
        data = self.cleaned_data
        return {
            **{name: data[name] for name in self.PASSED_ON if name in data},
            "approval": self.approval(),
            "required": data["required"],
            "steps": self.steps_said(),
        }

    def steps_said(self) -> list[Step]:
        return [step_of(cells, None, None) for cells in self.cleaned_data["steps"]]


class RepairForm(SignatureForm, CountersForm, PhotoForm, PlanForm):
    """What was done, with which data, at which release."""

    layers = LinesField(
        label="layers fitted", help_text=LAYERS_HELP,
        cells=LAYER_CELLS, example=LAYER_EXAMPLE,
    )  # fmt: skip
    answers = LinesField(label="differences answered", help_text=ANSWERS_HELP)
    answered_by = forms.ModelChoiceField(
        Person.objects.none(), label="who answers them", required=False
    )
    fasteners = LinesField(
        help_text=FASTENERS_HELP, cells=FASTENER_CELLS, example=FASTENER_EXAMPLE
    )
    sealant = forms.CharField(required=False)
    protection = forms.CharField(
        required=False, help_text="Primer, paint, corrosion inhibitor."
    )
    remaining_thickness_mm = LengthField(
        label="remaining thickness", help_text="Blend-out: the smallest measured."
    )
    blend_depth_mm = LengthField(label="blend depth")
    replacement_limit_cycles = CounterField(
        label="replacement limit, flight cycles", required=False
    )
    replacement_limit_minutes = HoursField(
        label="replacement limit, flight hours", required=False
    )
    replacement_limit_on = DayField(label="replacement limit, date", required=False)
    temporary_limit_cycles = CounterField(
        label="limit approved at stage 1, flight cycles", required=False,
        help_text="Counted from the release.",
    )  # fmt: skip
    released_on = DayField(label="released on")
    release_reference = forms.CharField(label="release reference", required=False)
    work_order = forms.CharField(
        label="work order",
        required=False,
        help_text="Or the form on which a major repair was reported.",
    )
    released_by = HolderChoice(
        Person.objects.none(), label="released by", required=False,
        help_text="Among those who hold or held a certifying authorisation. Yourself "
        "signs it here; another's release is recorded from its paper, by its "
        "reference.",
    )  # fmt: skip
    performed_by = forms.ModelChoiceField(
        Person.objects.none(), label="performed by", required=False
    )
    inspected_by = HolderChoice(
        Person.objects.none(), label="inspected by", required=False,
        help_text="Someone other than who performed it, among those who hold or held "
        "an inspection authorisation.",
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
    arm_mm = LengthField(
        label="moment arm", signed=True, help_text="Of the weight change, from datum."
    )

    GROUPS = (
        *PlanForm.GROUPS[:3],
        ("Materials", ("layers", "answers", "answered_by", "fasteners", "sealant",
                       "protection", "remaining_thickness_mm", "blend_depth_mm",
                       "weight_change_g", "arm_mm")),
        ("Category", ("category", "category_reason", "replacement_limit_cycles",
                      "replacement_limit_minutes", "replacement_limit_on",
                      "stage_reached", "temporary_limit_cycles")),
        ("Release", ("released_on", "release_reference", "work_order", "released_by",
                     "at_minutes", "at_cycles", "at_landings", "performed_by", "steps",
                     "inspection_required", "inspected_by", "organisation", "legacy",
                     "evidence", "supersedes")),
        ("Photographs", ("photographs", "role", "caption")),
    )  # fmt: skip
    PASSED_ON = (
        *PlanForm.PASSED_ON, "layers", "fasteners", "sealant", "protection",
        "work_order", "remaining_thickness_mm", "blend_depth_mm",
        "replacement_limit_on", "temporary_limit_cycles", "released_on",
        "release_reference", "released_by", "performed_by", "inspected_by",
        "organisation", "legacy", "evidence", "weight_change_g", "arm_mm",
    )  # fmt: skip

    def clean_released_on(self) -> Any:
        return not_in_future(self.cleaned_data["released_on"], self.today)

    def clean_layers(self) -> list[Layer]:
        return [layer_of(row, self.unit) for row in self.cleaned_data["layers"]]

    def clean_fasteners(self) -> list[Fastener]:
        return [fastener_of(row, self.unit) for row in self.cleaned_data["fasteners"]]

    def clean(self) -> dict[str, Any]:
        data = super().clean() or self.cleaned_data
        if "required" in data and "answers" in data:
            try:
                data["required"] = answers_of(
                    data["required"], data["answers"], data.get("answered_by")
                )
            except forms.ValidationError as error:
                self.add_error("answers", error)
        return data

    def said(self) -> dict[str, Any]:
        data = self.cleaned_data
        return {
            **super().said(),
            "at": self.counters(),
            "replacement_limit": Counters(
                data["replacement_limit_minutes"], data["replacement_limit_cycles"]
            ),
            "supersedes": list(data.get("supersedes", ())),
        }

    def steps_said(self) -> list[Step]:
        """Of a repair done in one go, its parts were done then."""
        data = self.cleaned_data
        on, by = data["released_on"], data["performed_by"]
        return [step_of(cells, on, by) for cells in data.get("steps", ())]
