"""Forms of the usage page: one day or flight, a table of many, a correction."""

from __future__ import annotations

from typing import Any

from django import forms

from fleet.forms.fields import CounterField, DayField, HoursField
from fleet.usage_lines import COLUMNS, OPTIONAL, UsageFileError, UsageLine, lines_read

EXAMPLE = "date,cycles,hours\n2024-12-30,5,4:31\n2024-12-31,0,0:00"
HELP = f"Columns: {', '.join(COLUMNS)}; may be added: {', '.join(OPTIONAL)}."
NOTHING = "Paste a table or choose a file."
NOT_TEXT = "The file is not text in UTF-8; save it as CSV UTF-8."


class AmountsForm(forms.Form):
    """What was flown; hours left empty are unknown, not zero."""

    cycles = CounterField(label="flights", help_text="0 when it did not fly.")
    minutes = HoursField(
        label="flight hours",
        required=False,
        help_text="Wheels off to wheels on, as h:mm. Empty: unknown.",
    )
    cycles_without_minutes = CounterField(
        label="flights without hours",
        required=False,
        help_text="Of these flights. Empty: none, or all when the hours are empty.",
    )
    landings = CounterField(
        required=False, help_text="Empty: one for each flight; touch-and-go on top."
    )
    pressurisations = CounterField(
        label="pressurisation cycles", required=False, help_text="Empty: not recorded."
    )
    source = forms.CharField(help_text="Technical log and page.")

    def line(self, **key: Any) -> UsageLine:
        data = self.cleaned_data
        without = data["cycles_without_minutes"]
        if without is None:
            without = data["cycles"] if data["minutes"] is None else 0
        names = ("cycles", "minutes", "landings", "pressurisations")
        return UsageLine(
            cycles_without_minutes=without,
            **{name: data[name] for name in names},
            **key,
        )


class UsageForm(AmountsForm):
    """One day, or one flight of it."""

    day = DayField(label="day")
    flight = forms.IntegerField(
        required=False,
        min_value=1,
        max_value=99,
        label="flight of the day",
        help_text="Empty: the whole day.",
    )
    field_order = ["day", "flight"]

    def usage_line(self) -> UsageLine:
        data = self.cleaned_data
        return self.line(day=data["day"], flight=data["flight"] or 0)


class UsageTableForm(forms.Form):
    """Many days or flights at once, all or none."""

    table = forms.CharField(
        required=False,
        widget=forms.Textarea(attrs={"placeholder": EXAMPLE}),
        help_text=HELP,
    )
    upload = forms.FileField(required=False, label="or a CSV file")
    source = forms.CharField(help_text="Technical log and pages, or the feed.")

    def clean(self) -> dict[str, Any]:
        data = super().clean() or {}
        text = data.get("table", "")
        upload = data.get("upload")
        try:
            if upload is not None:
                text = upload.read().decode("utf-8-sig")
            data["lines"] = lines_read(text) if text.strip() else []
        except UnicodeDecodeError:
            self.add_error("upload", NOT_TEXT)
        except UsageFileError as error:
            for problem in error.problems:
                self.add_error("upload" if upload else "table", problem)
        if not text.strip() and not self.errors:
            self.add_error("table", NOTHING)
        return data


class CorrectionForm(AmountsForm):
    """The row as it should have been; zeros void it."""

    reason = forms.CharField(label="why it is corrected")
