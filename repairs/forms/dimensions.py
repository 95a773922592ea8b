"""The dimensions of one damage type as form fields."""

from __future__ import annotations

from typing import Any

from django import forms

from fleet.units import UnitError
from repairs.forms.fields import UNIT_WORDS
from repairs.measured import Hole, MeasuredError, Typed, holes_read, measured_read
from repairs.measurements import ASKED_RATIOS, DIMENSIONS, Dimension, Kind

RATIO = "worked_out"
HOLES = "holes"
RATIO_HELP = "As you worked it out on the spot, not from what you typed here."
HOLES_HELP = (
    "Only for cracks at a row of holes, one hole a line: number; crack forward; crack "
    "aft; diameter; pitch to the next."
)
OPEN = [("", "not stated")]
UNSURE = [("unknown", "unknown"), ("n/a", "not applicable")]


class DimensionsForm(forms.Form):
    """Lengths take a unit and an uncertainty; a bare one is in the type's unit."""

    def __init__(
        self, *args: Any, damage_type: str, entry_unit: str, **kwargs: Any
    ) -> None:
        kwargs.setdefault("prefix", "d")
        super().__init__(*args, **kwargs)
        self.damage_type, self.entry_unit = damage_type, entry_unit
        asked = ASKED_RATIOS.get(damage_type)
        for one in DIMENSIONS.get(damage_type, ()):
            self.fields[one.quantity] = _field(one, entry_unit)
            if asked is not None and one.quantity == asked.kept_with:
                self.fields[RATIO] = forms.FloatField(
                    label=asked.label,
                    required=False,
                    min_value=0,
                    help_text=RATIO_HELP,
                    widget=forms.TextInput(attrs={"inputmode": "decimal"}),
                )
        if damage_type == "crack":
            self.fields[HOLES] = forms.CharField(
                label="holes of a row",
                required=False,
                help_text=HOLES_HELP,
                widget=forms.Textarea(attrs={"rows": 2}),
            )

    @property
    def first_names(self) -> list[str]:
        """What is needed before the finding can be assessed, and the ratio."""
        rows = DIMENSIONS.get(self.damage_type, ())
        return [*(one.quantity for one in rows if one.needed), RATIO]

    def clean(self) -> dict[str, Any]:
        data = super().clean() or {}
        try:
            measured_read(self.damage_type, self.typed(), entry_unit=self.entry_unit)
        except MeasuredError as error:
            for quantity, problem in error.problems.items():
                self.add_error(quantity, problem)
        if HOLES in self.fields:
            try:
                self.holes()
            except (UnitError, ValueError) as problem:
                self.add_error(HOLES, str(problem))
        return data

    def typed(self) -> tuple[Typed, ...]:
        """What was stated, as typed."""
        data = self.cleaned_data
        asked = ASKED_RATIOS.get(self.damage_type)
        return tuple(
            Typed(
                one.quantity,
                data.get(one.quantity) or "",
                data.get(RATIO) if asked and one.quantity == asked.kept_with else None,
            )
            for one in DIMENSIONS.get(self.damage_type, ())
            if data.get(one.quantity)
        )

    def holes(self) -> list[Hole]:
        text = self.cleaned_data.get(HOLES) or ""
        return holes_read(text, entry_unit=self.entry_unit)


def _field(one: Dimension, entry_unit: str) -> forms.Field:
    label = f"{one.label} *" if one.needed else one.label
    if one.kind is Kind.WORD:
        choices = [*OPEN, *one.words, *UNSURE]
        return forms.ChoiceField(label=label, required=False, choices=choices)
    unit = {
        Kind.LENGTH: f"{UNIT_WORDS[entry_unit]} unless you write another unit",
        Kind.AREA: f"square {UNIT_WORDS[entry_unit]} unless you write another unit",
        Kind.COUNT: "a whole number",
    }.get(one.kind, one.unit)
    shown = f"{one.help}; {unit}" if one.help else unit
    return forms.CharField(label=label, required=False, help_text=shown)
