"""Dimensions as they were typed, read to values in canonical units. Pure.

A dimension is known, unknown or not applicable; what was left blank is not stated at
all, and none of these is ever a nought.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass

from fleet.units import UnitError, measure_read, number_read, unit_known
from repairs.measurements import DIMENSIONS, Dimension, Kind

KNOWN, UNKNOWN, NOT_APPLICABLE = "known", "unknown", "not_applicable"
UNKNOWN_WORDS = frozenset({"unknown", "?", "not known"})
NOT_APPLICABLE_WORDS = frozenset({"n/a", "na", "not applicable", "not_applicable"})
_CANONICAL_UNIT = {Kind.LENGTH: "mm", Kind.AREA: "mm2", Kind.ANGLE: "°"}

NOT_A_COUNT = "“{text}” is not a whole number; write it as 1, 2, 12."
NOT_A_WORD = "“{text}” is not one of: {words}."
NEGATIVE = "“{text}” is below zero; a size is not."
HOLE_LINE = (
    "“{line}” is not a hole; write its number and, between semicolons, the crack "
    "forward, the crack aft, the diameter and the pitch to the next, as: "
    "12; 1.2 mm; -; 4.8 mm; 20 mm."
)
NO_DIMENSION = "{damage_type} has no dimension “{quantity}”; it has: {known}."


class MeasuredError(ValueError):
    """Dimensions that cannot be read: quantity to what is wrong with it."""

    def __init__(self, problems: Mapping[str, str]) -> None:
        super().__init__("; ".join(problems.values()))
        self.problems = dict(problems)


@dataclass(frozen=True, slots=True)
class Typed:
    """One dimension as typed; lengths may end in their uncertainty: "12 ± 0.5 mm"."""

    quantity: str
    entered: str
    worked_out: float | None = None


@dataclass(frozen=True, slots=True)
class Measured:
    """One dimension as read; exactly a known one has a value or a word."""

    quantity: str
    status: str = KNOWN
    value: float | None = None
    word: str = ""
    entered: str = ""
    uncertainty: float | None = None
    worked_out: float | None = None
    unit: str = ""


def measured_read(
    damage_type: str, typed: Iterable[Typed], *, entry_unit: str
) -> list[Measured]:
    """Every dimension that was stated; MeasuredError names all that cannot be read.

    A bare length is in `entry_unit`, the unit the aircraft type is written in.
    """
    dimensions = {one.quantity: one for one in DIMENSIONS[damage_type]}
    found: list[Measured] = []
    problems: dict[str, str] = {}
    for one in typed:
        if not one.entered.strip():
            continue
        dimension = dimensions.get(one.quantity)
        if dimension is None:
            problems[one.quantity] = NO_DIMENSION.format(
                damage_type=damage_type,
                quantity=one.quantity,
                known=", ".join(dimensions),
            )
            continue
        try:
            found.append(_read(dimension, one, entry_unit))
        except (UnitError, ValueError) as error:
            problems[one.quantity] = str(error)
    if problems:
        raise MeasuredError(problems)
    return found


@dataclass(frozen=True, slots=True)
class Hole:
    """One hole of a row, as measured; None means no crack or not measured."""

    number: int
    fore_length_mm: float | None = None
    aft_length_mm: float | None = None
    diameter_mm: float | None = None
    pitch_to_next_mm: float | None = None


def holes_read(text: str, *, entry_unit: str) -> list[Hole]:
    """One hole a line: number; crack forward; crack aft; diameter; pitch to next."""
    return [
        _hole(line.strip(), entry_unit) for line in text.splitlines() if line.strip()
    ]


def _hole(line: str, entry_unit: str) -> Hole:
    number, *sizes = (part.strip() for part in line.split(";"))
    if not number.isdecimal() or len(sizes) > 4:
        raise ValueError(HOLE_LINE.format(line=line))
    read = [
        None if size in ("", "-") else measure_read(size, unit=entry_unit)
        for size in sizes
    ]
    return Hole(int(number), *read)


def sizes_of(measured: Iterable[Measured]) -> dict[str, float]:
    """The known numbers by quantity."""
    return {one.quantity: one.value for one in measured if one.value is not None}


def _read(dimension: Dimension, one: Typed, entry_unit: str) -> Measured:
    text = one.entered.strip()
    if text.lower() in UNKNOWN_WORDS:
        return Measured(dimension.quantity, UNKNOWN, entered=text)
    if text.lower() in NOT_APPLICABLE_WORDS:
        return Measured(dimension.quantity, NOT_APPLICABLE, entered=text)
    if dimension.kind is Kind.WORD:
        return Measured(dimension.quantity, word=_word(dimension, text), entered=text)
    if dimension.kind is Kind.COUNT:
        if not text.isdecimal():
            raise ValueError(NOT_A_COUNT.format(text=text))
        return Measured(dimension.quantity, value=float(int(text)), entered=text)
    number, _, rest = _plus_minus(text)
    if dimension.kind in (Kind.LENGTH, Kind.AREA):
        return _size(dimension, one, number, rest, entry_unit)
    value = float(number_read(number.removesuffix(dimension.unit)))
    spread = float(number_read(rest.removesuffix(dimension.unit))) if rest else None
    entered = text if text.endswith(dimension.unit) else f"{text} {dimension.unit}"
    return Measured(
        dimension.quantity, value=value, entered=entered, uncertainty=spread
    )


def _size(
    dimension: Dimension, one: Typed, number: str, rest: str, entry_unit: str
) -> Measured:
    quantity = "length" if dimension.kind is Kind.LENGTH else "area"
    bare = entry_unit if quantity == "length" else f"{entry_unit}2"
    unit = _unit_of(number, quantity) or _unit_of(rest, quantity) or bare
    value = measure_read(number, quantity, unit=unit)
    if value < 0:
        raise ValueError(NEGATIVE.format(text=one.entered))
    spread = measure_read(rest, quantity, unit=unit) if rest else None
    said = _unit_of(number, quantity) or _unit_of(rest, quantity)
    entered = one.entered.strip()
    return Measured(
        dimension.quantity,
        value=value,
        entered=entered if said else f"{entered} {unit}",
        uncertainty=spread,
        worked_out=one.worked_out,
        unit=unit,
    )


def _word(dimension: Dimension, text: str) -> str:
    for stored, shown in dimension.words:
        if (
            text.lower().replace("-", " ")
            in (
                stored.replace("_", " "),
                shown.replace("-", " "),
            )
            or text == stored
        ):
            return stored
    shown_words = ", ".join(shown for _, shown in dimension.words)
    raise ValueError(NOT_A_WORD.format(text=text, words=shown_words))


def _plus_minus(text: str) -> tuple[str, str, str]:
    number, sign, rest = text.replace("+/-", "±").replace("+-", "±").partition("±")
    return number.strip(), sign, rest.strip()


def _unit_of(text: str, quantity: str) -> str | None:
    """The unit a text ends in; None when it ends in a number."""
    found = re.search(r"[\d.]\s*([^\d\s.,/].*)$", text)
    return unit_known(found[1], quantity) if found else None
