"""A survey: its head, the lines of its sheet, and the answers to its differences."""

from __future__ import annotations

from typing import Any

from django import forms

from fleet.forms.fields import DayField
from fleet.models import Person
from repairs.forms.fields import ACCEPTED_FILES, UNIT_WORDS, CountersForm, LengthField
from repairs.forms.fields import choose as choose_rows
from repairs.forms.findings import not_in_future
from repairs.models import DamageType, RepairType, SurveyItem
from repairs.selectors.surveys import WHOLE
from repairs.services.survey_answers import LegacyRepair, NewFinding
from repairs.sheet_lines import (
    SheetError,
    SheetLine,
    SheetRow,
    damage_type_of,
    sheet_read,
)

ROWS = 8
SEEN_AS = [("damage", "damage"), ("repair", "repair"), ("unclear", "unclear")]
NOT_TEXT = "The file is not text in UTF-8; save it as CSV UTF-8 and send it again."
NOTHING = "Write the lines, or choose a file."
IN_THE_WAY = "Line {number}: {problem}"
EXAMPLE = "location,what,length,width,remark\nSTA 640 S-7R,dent,2.4 in,1.8 in,old paint"
TYPE_NEEDED = "Choose the damage type; it says what must be measured."
KIND_NEEDED = "Choose the repair type; “other” if it is none of these."


class SurveyForm(CountersForm):
    """The head of the sheet."""

    area = forms.CharField(initial=WHOLE, label="area looked at")
    surveyed_on = DayField(label="surveyed on")
    surveyed_by = forms.ModelChoiceField(Person.objects.none(), label="surveyed by")
    document_reference = forms.CharField(
        required=False, label="sheet", help_text="Reference of the signed sheet."
    )
    document_revision = forms.CharField(required=False, label="its revision")
    upload = forms.FileField(
        required=False,
        label="its copy",
        widget=forms.ClearableFileInput(attrs={"accept": ACCEPTED_FILES}),
        help_text="Scan or photograph: JPEG, PNG, WebP, TIFF or PDF.",
    )
    field_order = ["area", "surveyed_on", "surveyed_by"]

    def __init__(
        self, *args: Any, people: Any, sections: list[str], **kwargs: Any
    ) -> None:
        super().__init__(*args, **kwargs)
        choose_rows(self, "surveyed_by", people)
        listed = ", ".join(sections)
        self.fields["area"].help_text = (
            f"“{WHOLE}”, a section ({listed}), or a range of locations such as "
            "STA 500 to 700, S-4L to S-8L."
        )


def short() -> forms.TextInput:
    return forms.TextInput(attrs={"size": 8})


class LineForm(forms.Form):
    """One line of the sheet."""

    place_entered = forms.CharField(label="location")
    seen_as = forms.ChoiceField(label="seen as", choices=SEEN_AS, initial="damage")
    description = forms.CharField(label="what", required=False)
    length_mm = LengthField(label="length", widget=short())
    width_mm = LengthField(label="width", widget=short())

    def __init__(self, *args: Any, unit: str, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        for name in ("length_mm", "width_mm"):
            self.fields[name].unit = unit  # type: ignore[attr-defined]

    def line(self) -> SheetLine | None:
        """None for a line left empty."""
        return SheetLine(**self.cleaned_data) if self.cleaned_data else None


LinesForm = forms.formset_factory(LineForm, extra=ROWS, max_num=400, validate_max=True)


def unit_words(unit: str) -> str:
    return UNIT_WORDS[unit]


class SheetForm(forms.Form):
    """The whole sheet as a table."""

    table = forms.CharField(
        required=False,
        widget=forms.Textarea(attrs={"rows": 12, "placeholder": EXAMPLE}),
        help_text="Columns: location, what; and length, width, remark if known.",
    )
    upload = forms.FileField(required=False, label="or a CSV file")

    def __init__(self, *args: Any, unit: str, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.unit = unit
        self.rows: list[SheetRow] = []

    def clean(self) -> dict[str, Any]:
        data = super().clean() or {}
        upload, text = data.get("upload"), data.get("table", "")
        if upload is not None:
            try:
                text = upload.read().decode("utf-8-sig")
            except UnicodeDecodeError:
                self.add_error("upload", NOT_TEXT)
                return data
        try:
            self.rows = sheet_read(text, unit=self.unit) if text.strip() else []
        except SheetError as error:
            self.add_error("table", str(error))
            return data
        if not self.rows:
            self.add_error("table", NOTHING)
        return data | {"table": text}

    def lines(self) -> list[SheetLine]:
        """Every line, once none is in the way; else the form says which."""
        for row in self.rows:
            for problem in row.in_the_way:
                text = IN_THE_WAY.format(number=row.number, problem=problem)
                self.add_error("table", text)
        return [row.line for row in self.rows]


class OnForm(forms.Form):
    """The day on which it is done."""

    on = DayField(label="on")

    def __init__(self, *args: Any, today: Any, **kwargs: Any) -> None:
        kwargs["initial"] = {"on": today} | kwargs.get("initial", {})
        super().__init__(*args, **kwargs)
        self.today = today

    def clean_on(self) -> Any:
        return not_in_future(self.cleaned_data["on"], self.today)


class AnswerForm(OnForm):
    """How a difference was settled, and what it opens."""

    answer = forms.CharField(
        label="answer",
        widget=forms.Textarea(attrs={"rows": 3}),
        help_text="How the difference was settled, with the documents looked at.",
    )
    opens = forms.ChoiceField(
        label="opens",
        choices=[
            ("", "nothing; the answer settles it"),
            ("finding", "a new finding, at this location"),
            ("repair", "a legacy repair, evidence not seen"),
        ],
        required=False,
    )
    damage_type = forms.ChoiceField(
        choices=[("", "choose"), *DamageType.choices],
        required=False,
        help_text="Of a new finding.",
    )
    kind = forms.ChoiceField(
        label="repair type",
        choices=[("", "choose"), *RepairType.choices],
        required=False,
        help_text="Of a legacy repair.",
    )
    released_on = DayField(
        label="released on", required=False, help_text="Empty: unknown."
    )
    field_order = ["answer", "on", "opens", "damage_type", "kind", "released_on"]

    def __init__(self, *args: Any, item: SurveyItem, **kwargs: Any) -> None:
        first = {"damage_type": damage_type_of(item.description)}
        super().__init__(*args, initial=first, **kwargs)
        if item.outcome != "found_not_recorded":
            for name in ("opens", "damage_type", "kind", "released_on"):
                del self.fields[name]

    def clean(self) -> dict[str, Any]:
        data = super().clean() or {}
        if data.get("opens") == "finding" and not data.get("damage_type"):
            self.add_error("damage_type", TYPE_NEEDED)
        if data.get("opens") == "repair" and not data.get("kind"):
            self.add_error("kind", KIND_NEEDED)
        return data

    def opened(self) -> NewFinding | LegacyRepair | None:
        data = self.cleaned_data
        if data.get("opens") == "finding":
            return NewFinding(data["damage_type"])
        if data.get("opens") == "repair":
            return LegacyRepair(data["kind"], data["released_on"])
        return None
