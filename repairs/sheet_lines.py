"""The sheet of a survey as people hand it over: a line for each thing seen.

Every row is read by itself and says what was read and what is wrong with it; where a
location lies is for the services to say, and a location is never refused.
"""

from __future__ import annotations

import csv
from collections.abc import Mapping
from dataclasses import dataclass
from io import StringIO

from fleet.units import UnitError, length_read
from repairs.models.findings import DamageType
from repairs.models.repairs import RepairType

COLUMNS = {
    "location": "where, as written on the sheet",
    "what": "what was seen, as: dent, repair",
}
OPTIONAL = {
    "length": "along, with its unit",
    "width": "across, with its unit",
    "remark": "anything else",
}
MOST_ROWS = 2_000

NO_HEADER = (
    "The first line names the columns. Read: {read}. Expected at least: {expected}."
)
UNKNOWN_COLUMN = "Column “{name}” is not known; the columns are: {known}."
NO_LINES = "No line was read below the names of the columns."
TOO_MANY = "{count} lines were read; send at most {most} at once."
NO_LOCATION = "no location; write where it is, in any words"
BAD_SIZE = "{column}: {problem}"
NOT_ABOVE_ZERO = "{column}: “{text}” is not above zero"
UNCLEAR = "“{what}” names no damage type and no repair type: kept as unclear"


class SheetError(ValueError):
    """A table that cannot be read at all."""


@dataclass(frozen=True, slots=True)
class SheetLine:
    """One thing seen: where, as what, how big; empty is not measured."""

    place_entered: str
    seen_as: str
    description: str = ""
    length_mm: float | None = None
    width_mm: float | None = None


@dataclass(frozen=True, slots=True)
class SheetRow:
    """One row as read. What is in the way bars the row; what is doubtful does not."""

    number: int
    line: SheetLine
    in_the_way: tuple[str, ...] = ()
    doubtful: tuple[str, ...] = ()


def sheet_read(text: str, *, unit: str) -> list[SheetRow]:
    """Every row of a table; a bare size is in `unit`. SheetError if it is no table."""
    rows = list(csv.reader(StringIO(text.lstrip("\ufeff"))))
    while rows and not any(cell.strip() for cell in rows[0]):
        rows.pop(0)
    header = [cell.strip().lower() for cell in rows[0]] if rows else []
    if not set(COLUMNS) <= set(header):
        read, expected = ", ".join(header) or "nothing", ", ".join(COLUMNS)
        raise SheetError(NO_HEADER.format(read=read, expected=expected))
    known = {**COLUMNS, **OPTIONAL}
    for name in header:
        if name and name not in known:
            listed = ", ".join(known)
            raise SheetError(UNKNOWN_COLUMN.format(name=name, known=listed))
    lines = [
        (number, dict(zip(header, cells, strict=False)))
        for number, cells in enumerate(rows[1:], 2)
        if any(cell.strip() for cell in cells)
    ]
    if not lines:
        raise SheetError(NO_LINES)
    if len(lines) > MOST_ROWS:
        raise SheetError(TOO_MANY.format(count=len(lines), most=MOST_ROWS))
    return [_row(number, cells, unit) for number, cells in lines]


def _row(number: int, cells: Mapping[str, str], unit: str) -> SheetRow:
    said = {name: cell.strip() for name, cell in cells.items()}
    in_the_way = [] if said.get("location") else [NO_LOCATION]
    sizes: dict[str, float | None] = {}
    for column in ("length", "width"):
        try:
            sizes[column] = _size(column, said.get(column, ""), unit)
        except UnitError as error:
            in_the_way.append(BAD_SIZE.format(column=column, problem=error))
        except ValueError as error:
            in_the_way.append(str(error))
    what = said.get("what", "")
    seen_as = seen_as_of(what)
    doubtful = (UNCLEAR.format(what=what),) if seen_as == "unclear" else ()
    line = SheetLine(
        said.get("location", ""),
        seen_as,
        ": ".join(filter(None, (what, said.get("remark", "")))),
        sizes.get("length"),
        sizes.get("width"),
    )
    return SheetRow(number, line, tuple(in_the_way), doubtful)


def _size(column: str, text: str, unit: str) -> float | None:
    if not text:
        return None
    size = length_read(text, unit=unit)
    if size <= 0:
        raise ValueError(NOT_ABOVE_ZERO.format(column=column, text=text))
    return size


def seen_as_of(what: str) -> str:
    """dent -> damage; external doubler -> repair; anything else is unclear."""
    return WORDS.get(what.strip().lower(), "unclear")


def damage_type_of(description: str) -> str:
    """The damage type a description begins with; empty when it names none."""
    what = description.partition(":")[0].strip().lower()
    return DAMAGE_WORDS.get(what, "")


def _parts(value: str, label: str) -> set[str]:
    """A type by its word, its label, and each part of the label."""
    parts = label.lower().replace(" or ", ", ").split(", ")
    return {value, value.replace("_", " "), label.lower(), *parts}


DAMAGE_WORDS = {
    word: value for value, label in DamageType.choices for word in _parts(value, label)
}
WORDS = {
    **dict.fromkeys(DAMAGE_WORDS, "damage"),
    "damage": "damage",
    "repair": "repair",
    "doubler": "repair",
    "patch": "repair",
    **{
        word: "repair"
        for value, label in RepairType.choices
        if value != RepairType.OTHER
        for word in _parts(value, label)
    },
}
