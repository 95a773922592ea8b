"""Layers, fasteners and steps of a repair: one a line, cells between semicolons."""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterable, Sequence
from typing import Any

from django import forms

from fleet.models import Person
from fleet.units import UnitError, length_read
from repairs.models import RepairStep
from repairs.selectors.repair_fitted import material_named
from repairs.services.repair_entry import Fastener, Layer, Required, Step

LAYER_CELLS = "material; thickness; batch"
LAYER_EXAMPLE = "2024-T3 clad; 0.063 in; B-1"
REQUIRED_CELLS = "material; thickness; page"
REQUIRED_EXAMPLE = "2024-T3 clad; 0.063 in; fig. 202"
FASTENER_CELLS = "fastener; diameter; pitch; edge distance; rows; count"
FASTENER_EXAMPLE = "solid rivet; 5/32 in; 0.8 in; -; 3; 48"
LAYERS_HELP = f"One a line: {LAYER_CELLS}. As: {LAYER_EXAMPLE}."
REQUIRED_HELP = (
    "What the approved data ask for, one a line in the order of the layers: material "
    "with its temper; thickness; page."
)
FASTENERS_HELP = f"One a line: {FASTENER_CELLS}. A hyphen where it is not known."
STEPS_HELP = "If it is done in several parts, one a line: part; option of the data."
ANSWERS_HELP = (
    "Where fitted and required differ, one a line: layer number; reason; document with "
    "its page."
)
BLANK = ("", "-")
NO_SEMICOLON = (
    "“{line}” has no semicolon. Expected: {cells}, with semicolons between and a "
    "hyphen where it is not known; as: {example}."
)
NOT_WHOLE = "“{text}” is not a whole number."
NO_LAYER = "“{text}” is not the number of a required layer; there are {count}."


class LinesField(forms.CharField):
    """Several rows of cells; its value is a list of lists.

    With `cells`, the words for them, a row of one cell is refused: another separator
    was typed.
    """

    def __init__(self, *, cells: str = "", example: str = "", **kwargs: Any) -> None:
        kwargs.setdefault("required", False)
        self.cells, self.example = cells, example
        super().__init__(widget=forms.Textarea(attrs={"rows": 3}), **kwargs)

    def to_python(self, value: Any) -> Any:
        text = super().to_python(value) or ""
        lines = [line.strip() for line in text.splitlines() if line.strip()]
        wrong = [
            NO_SEMICOLON.format(line=line, cells=self.cells, example=self.example)
            for line in lines
            if self.cells and ";" not in line
        ]
        if wrong:
            raise forms.ValidationError(wrong)
        return [[cell.strip() for cell in line.split(";")] for line in lines]


def layer_of(cells: Sequence[str], unit: str) -> Layer:
    material, thickness, batch = (*cells, "", "")[:3]
    size, thickness = known_size(thickness, unit), _stated(thickness)
    return Layer(material, thickness, size, material_named(material), batch)


def required_of(cells: Sequence[str], unit: str) -> Required:
    material, thickness, page = (*cells, "", "")[:3]
    size, thickness = known_size(thickness, unit), _stated(thickness)
    return Required(material, thickness, size, material_named(material), page)


def fastener_of(cells: Sequence[str], unit: str) -> Fastener:
    name, *rest = (*cells, "", "", "", "", "")[:6]
    diameter, pitch, edge = (known_size(text, unit) for text in rest[:3])
    rows, count = (_whole(text) if text not in BLANK else None for text in rest[3:])
    return Fastener(name, diameter, pitch, edge, rows, count)


def step_of(cells: Sequence[str], on: dt.date | None, by: Person | None) -> Step:
    """A step; done on that day if the repair as a whole was."""
    title, option = (*cells, "")[:2]
    done = on is not None and by is not None
    return Step(title, option, on if done else None, by if done else None)


def answers_of(
    required: Sequence[Required],
    lines: Iterable[Sequence[str]],
    answered_by: Person | None,
) -> list[Required]:
    """The required layers with the answers given to their differences."""
    told = {}
    for cells in lines:
        number, reason, document = (*cells, "", "")[:3]
        if not number.isdecimal() or not 1 <= int(number) <= len(required):
            raise forms.ValidationError(
                NO_LAYER.format(text=number, count=len(required))
            )
        told[int(number)] = (reason, document)
    return [
        _answered(one, told[n], answered_by) if n in told else one
        for n, one in enumerate(required, 1)
    ]


def _answered(
    one: Required, told: tuple[str, str], answered_by: Person | None
) -> Required:
    return Required(
        one.material_entered,
        one.thickness_entered,
        one.thickness_mm,
        one.material,
        one.page,
        *told,
        answered_by,
    )


def step_words(row: RepairStep) -> str:
    return f"{row.number}. {row.title}"


def known_size(text: str, unit: str) -> float | None:
    if text in BLANK:
        return None
    try:
        return length_read(text, unit=unit)
    except UnitError as error:
        raise forms.ValidationError(str(error)) from error


def _stated(text: str) -> str:
    return "" if text in BLANK else text


def _whole(text: str) -> int:
    if not text.isdecimal():
        raise forms.ValidationError(NOT_WHOLE.format(text=text))
    return int(text)
