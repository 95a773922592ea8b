"""A load spectrum by its kind: the choices it stores, and its table."""

from __future__ import annotations

from typing import Any

from django import forms
from django.core.exceptions import ValidationError

from repairs.services.spectra import (
    FROM_TEXT,
    KEYS,
    NOT_MADE,
    WORDS,
    spectrum_data,
    spectrum_read,
)

NOT_TEXT = "The file is not text in UTF-8; save the table as CSV."
CHOOSE, NONE = "choose one", "none"
LABELS = {
    "cycle_max_mpa": ("largest stress, MPa", "Or the range; one of the two."),
    "cycle_range_mpa": ("stress range, MPa", "Or the largest stress."),
    "cycle_ratio": ("stress ratio R", "Smallest over largest stress."),
    "share_of_normal": (
        "share of the normal differential",
        "What a flight really reaches, over the normal differential: 0 to 1.",
    ),
    "ground_share_of_normal": ("share of it on the ground", "0 with the doors open."),
    "ground": ("on the ground, in words", "As: doors open."),
    "mean_flight_stress_mpa": ("mean stress in flight, MPa", "The 1 g stress."),
    "ground_ratio": ("ground over mean stress", "-0.5 in the standard, from memory."),
    "ground_ratio_source": ("source of that ratio", "Document and page."),
    "ground_ratio_grade": ("how it is known", ""),
    "seed": ("seed of the drawn order", "A whole number; kept with the result."),
    "halves": ("lower halves of the gusts", ""),
    "truncate_above": ("gusts flown no higher than level", ""),
    "omit_below": ("gusts left out below level", ""),
    "flights": ("flights of the table", "How many flights it stands for."),
    "repeats": ("the history comes again", "No: it happened once."),
    "residue": ("residue of counting", ""),
    "clip_above_mpa": ("clip above, MPa", "Empty: not clipped."),
    "clip_below_mpa": ("clip below, MPa", "Empty: not clipped."),
    "omit_below_range_mpa": ("leave out ranges below, MPa", "Empty: none left out."),
    "counted_at": ("exceedances between two levels count at", ""),
    "mean_mpa": ("mean stress in flight, MPa", ""),
    "ground_mpa": ("stress on the ground, MPa", ""),
}
COLUMNS = {
    "sequence": "First line: stress_mpa; or max_mpa or range_mpa, ratio, count.",
    "exceedance": "First line: level_mpa, and exceedances or occurrences.",
}
WHOLE = ("seed", "flights")
TEXTS = ("ground", "ground_ratio_source")


class SpectrumForm(forms.Form):
    """Name, source and the choices of one kind; typed text comes back as it was."""

    name = forms.CharField(help_text="As panels of a geometry file name it.")
    source = forms.CharField(
        help_text="Document, revision and page; who measured or calculated it.",
        widget=forms.Textarea(attrs={"rows": 2}),
    )

    def __init__(
        self, *args: Any, kind: str, named: bool = False, **kwargs: Any
    ) -> None:
        super().__init__(*args, **kwargs)
        self.kind = kind
        self.read: Any = None
        if named:
            del self.fields["name"]
        for key in KEYS[kind]:
            self.fields[key] = _field(key)
        if kind in FROM_TEXT:
            self.fields["table"] = forms.CharField(
                required=False,
                widget=forms.Textarea(attrs={"rows": 10}),
                help_text=COLUMNS[kind],
            )
            self.fields["upload"] = forms.FileField(
                required=False, label="or a CSV file"
            )

    def clean(self) -> dict[str, Any]:
        data = super().clean() or {}
        if upload := data.get("upload"):
            try:
                data["table"] = upload.read().decode("utf-8-sig")
            except UnicodeDecodeError:
                self.add_error("upload", NOT_TEXT)
        if self.errors:
            return data
        given = {key: data.get(key) for key in KEYS[self.kind]}
        if "repeats" in given:
            given["repeats"] = given["repeats"] == "yes"
        try:
            self.plain = spectrum_data(self.kind, given, data.get("table", ""))
            self.read = spectrum_read(
                self.plain, data.get("name", ""), data.get("source", "")
            )
        except ValidationError as error:
            self.add_error(None, error)
        return data

    def again(self) -> SpectrumForm:
        """The same, not bound, with what the file held as text."""
        data = {k: v for k, v in self.cleaned_data.items() if k != "upload"}
        named = "name" not in self.fields
        return SpectrumForm(initial=data, kind=self.kind, named=named)


def _field(key: str) -> forms.Field:
    label, help_text = LABELS[key]
    told: dict[str, Any] = {"label": label, "help_text": help_text}
    if key == "repeats":
        answers = [("", CHOOSE), ("yes", "yes"), ("no", "no")]
        return forms.ChoiceField(choices=answers, **told)
    if key in WORDS:
        first = NONE if key in NOT_MADE else CHOOSE
        answers = [("", first)] + [(w, w.replace("_", " ")) for w in WORDS[key]]
        return forms.ChoiceField(choices=answers, required=key not in NOT_MADE, **told)
    if key in TEXTS:
        return forms.CharField(**told)
    if key in WHOLE:
        return forms.IntegerField(min_value=0, **told)
    either = key in ("cycle_max_mpa", "cycle_range_mpa")
    return forms.FloatField(required=not (either or key in NOT_MADE), **told)
