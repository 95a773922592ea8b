"""Sequences and exceedance tables from a user's text with named columns.

Columns are separated by commas, semicolons or tabs, and decimals by a point. The first
line names them; blank lines are passed over. A sequence has either `stress_mpa`, its
turning points, or cycles in the order flown by `max_mpa` or `range_mpa` with `ratio`
and `count`. A table of levels has `level_mpa` and either `exceedances` or
`occurrences`, which says what its numbers are.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from repairs.analysis.errors import InputError
from repairs.analysis.spectra.exceedance import Counts

NOTHING_READ = "The text holds no {what}. Its first line names the columns: {columns}."
COLUMNS = "Line {line} names the columns {read}; {columns} are expected."
CELLS = "Line {line} has {read} values; {expected} are expected: {columns}."
NOT_A_NUMBER = (
    "Line {line}, column {column} reads {read!r}; a number with a decimal point is "
    "expected."
)
RATIO = "Line {line}, column ratio reads {read:g}; R below 1 is expected."
TENSION = "Line {line}, column {column} reads {read:g}; a stress above 0 is expected."
COUNT = "Line {line}, column count reads {read:g}; a whole number >= 1 is expected."
MOST_CYCLES = 5_000_000
TOO_MANY = "Line {line} brings the text to {read:,} cycles; at most {most:,} are read."

TURNING_POINTS = ("stress_mpa",)
BY_MAXIMUM = ("max_mpa", "ratio", "count")
BY_RANGE = ("range_mpa", "ratio", "count")
SEQUENCE_FORMS = (TURNING_POINTS, BY_MAXIMUM, BY_RANGE)
LEVEL_FORMS = tuple(("level_mpa", str(counts)) for counts in Counts)


@dataclass(frozen=True, slots=True)
class Row:
    """A line's number in the text and its values by column."""

    line: int
    values: dict[str, float]


def _in_words(forms: tuple[tuple[str, ...], ...]) -> str:
    return " or ".join(", ".join(form) for form in forms)


def _cells(line: str) -> list[str]:
    mark = next((m for m in (";", "\t", ",") if m in line), ",")
    return [cell.strip().strip('"').strip() for cell in line.split(mark)]


def _number(line: int, column: str, text: str) -> float:
    try:
        value = float(text)
    except ValueError:
        value = math.nan
    if not math.isfinite(value):
        raise InputError(NOT_A_NUMBER.format(line=line, column=column, read=text))
    return value


def _rows(
    text: str, forms: tuple[tuple[str, ...], ...], what: str
) -> tuple[tuple[str, ...], list[Row]]:
    """Return the columns that the text names and its rows."""
    lines = [
        (number, line)
        for number, line in enumerate(text.removeprefix("\ufeff").splitlines(), 1)
        if line.strip()
    ]
    if len(lines) < 2:
        raise InputError(NOTHING_READ.format(what=what, columns=_in_words(forms)))
    head, named = lines[0]
    columns = tuple(cell.lower() for cell in _cells(named))
    if sorted(columns) not in [sorted(form) for form in forms]:
        raise InputError(
            COLUMNS.format(line=head, read=", ".join(columns), columns=_in_words(forms))
        )
    rows = []
    for number, line in lines[1:]:
        cells = _cells(line) if len(columns) > 1 else [line.strip()]
        if len(cells) != len(columns):
            raise InputError(
                CELLS.format(
                    line=number,
                    read=len(cells),
                    expected=len(columns),
                    columns=", ".join(columns),
                )
            )
        pairs = zip(columns, cells, strict=True)
        rows.append(Row(number, {c: _number(number, c, cell) for c, cell in pairs}))
    return columns, rows


def _cycle(row: Row, stress: str) -> tuple[float, float, int]:
    """Return smallest and largest stress of a line's cycles and how many there are."""
    read, ratio, count = row.values[stress], row.values["ratio"], row.values["count"]
    if not ratio < 1:
        raise InputError(RATIO.format(line=row.line, read=ratio))
    if not read > 0:
        raise InputError(TENSION.format(line=row.line, column=stress, read=read))
    if count < 1 or count != int(count):
        raise InputError(COUNT.format(line=row.line, read=count))
    top = read if stress == "max_mpa" else read / (1 - ratio)
    return top * ratio, top, int(count)


def points_from_text(text: str) -> tuple[float, ...]:
    """Return the turning points that a text states [MPa].

    Raises
    ------
    InputError
        A column or a value is not as expected; the line is named.
    """
    columns, rows = _rows(text, SEQUENCE_FORMS, "sequence")
    if columns == TURNING_POINTS:
        return tuple(row.values["stress_mpa"] for row in rows)
    stress = next(column for column in columns if column in ("max_mpa", "range_mpa"))
    points: list[float] = []
    for row in rows:
        low, high, count = _cycle(row, stress)
        cycles = len(points) // 2 + count
        if cycles > MOST_CYCLES:
            raise InputError(
                TOO_MANY.format(line=row.line, read=cycles, most=MOST_CYCLES)
            )
        points += [low, high] * count
    return tuple(points)


def levels_from_text(text: str) -> tuple[tuple[float, ...], tuple[float, ...], Counts]:
    """Return levels [MPa], their numbers, and what the numbers are.

    Raises
    ------
    InputError
        A column or a value is not as expected; the line is named.
    """
    columns, rows = _rows(text, LEVEL_FORMS, "table of levels")
    counts = next(word for word in Counts if word in columns)
    rows.sort(key=lambda row: row.values["level_mpa"])
    levels = tuple(row.values["level_mpa"] for row in rows)
    return levels, tuple(row.values[counts] for row in rows), counts
