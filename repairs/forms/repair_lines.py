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

LAYERS_HELP = "One a line: material; thickness; batch. As: 2024-T3 clad; 0.063 in; B-1."
REQUIRED_HELP = (
    "What the approved data ask for, one a line in the order of the layers: material "
    "with its temper; thickness; page."
)
FASTENERS_HELP = (
    "One a line: fastener; diameter; pitch; edge distance; rows; count. "
    "A hyphen where it is not known."
)
STEPS_HELP = "If it is done in several parts, one a line: part; option of the data."
ANSWERS_HELP = (
    "Where fitted and required differ, one a line: layer number; reason; document with "
    "its page."
)
BLANK = ("", "-")
NOT_WHOLE = "“{text}” is not a whole number."
NO_LAYER = "“{text}” is not the number of a required layer; there are {count}."


class LinesField(forms.CharField):
    """Several rows of cells; its value is a list of lists."""

    def __init__(self, **kwargs: Any) -> None:
        kwargs.setdefault("required", False)
        super().__init__(widget=forms.Textarea(attrs={"rows": 3}), **kwargs)

    def to_python(self, value: Any) -> Any:
        text = super().to_python(value) or ""
        return [
            [cell.strip() for cell in line.split(";")]
            for line in text.splitlines()
            if line.strip()
        ]


def layer_of(cells: Sequence[str], unit: str) -> Layer:
    material, thickness, batch = (*cells, "", "")[:3]
    size = known_size(thickness, unit)
    return Layer(material, thickness, size, material_named(material), batch)


def required_of(cells: Sequence[str], unit: str) -> Required:
    material, thickness, page = (*cells, "", "")[:3]
    size = known_size(thickness, unit)
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


def _whole(text: str) -> int:
    if not text.isdecimal():
        raise forms.ValidationError(NOT_WHOLE.format(text=text))
    return int(text)
