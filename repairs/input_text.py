"""Inputs of a calculation as they are typed and printed, in units of their kind. Pure.

A calculation holds its numbers in one unit each; people write and read others. What is
typed without a unit is refused, unless the page says which unit stands for it.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from decimal import Decimal

from fleet.units import (
    FACTORS,
    UnitError,
    in_unit,
    measure_read,
    number_read,
    unit_known,
    unit_sign,
)
from repairs.evaluation_text import number_text

PER_CENT = Decimal("0.01")
KINDS: dict[str, tuple[str, str, str]] = {
    "mm": ("length", "mm", "mm"),
    "mm2": ("area", "mm2", "mm2"),
    "mm4": ("inertia", "mm4", "mm4"),
    "N": ("force", "n", "n"),
    "N*mm": ("moment", "n_mm", "n_mm"),
    "N/mm": ("running_load", "n_per_mm", "n_per_mm"),
    "MPa": ("stress", "mpa", "mpa"),
    "mm/N": ("flexibility", "mm_per_n", "mm_per_n"),
    "MPa*sqrt(mm)": ("toughness", "mpa_root_mm", "mpa_root_m"),
    "ft": ("length", "ft", "ft"),
}
"""Unit of a calculation: its quantity, its name in `fleet.units`, the unit shown."""

NO_UNIT_HERE = "“{unit}” in “{text}” is not a unit of this; write a bare number{more}."
BELOW = "{text} is below {low}, the least that {title} may be."
ABOVE = "{text} is above {high}, the most that {title} may be."
NOT_POSITIVE = "{title} is above zero; “{text}” is not."
_POWER = re.compile(r"(\d[\d.]*)[eE]([-+]?\d{1,2})(?!\d)")
_BARE = re.compile(r"\s*([-+]?[\d.,/ -]*[\d.])\s*(.*)", re.DOTALL)


@dataclass(frozen=True, slots=True)
class Read:
    """A number in the calculation's unit, with its uncertainty if one was written."""

    value: float
    uncertainty: float | None = None


@dataclass(frozen=True, slots=True)
class Bounds:
    """The least and the most an input may be; `strict` leaves the least itself out."""

    low: float | None = None
    high: float | None = None
    strict: bool = False

    def check(self, value: float, text: str, title: str) -> None:
        """Refuse a value outside, saying what was read and what is expected."""
        if self.low is not None and self.strict and value <= self.low:
            raise UnitError(NOT_POSITIVE.format(title=title.capitalize(), text=text))
        if self.low is not None and value < self.low:
            raise UnitError(BELOW.format(text=text, low=f"{self.low:g}", title=title))
        if self.high is not None and value > self.high:
            raise UnitError(ABOVE.format(text=text, high=f"{self.high:g}", title=title))


def unit_shown(unit: str) -> str:
    """A calculation's unit as it is printed: "N*mm" is "N·mm", "-" is nothing."""
    if unit in KINDS:
        return unit_sign(KINDS[unit][2])
    return "" if unit == "-" else unit


def input_write(value: float, unit: str) -> str:
    """A value with its unit for a reader: "1.6 mm", "104.6 MPa√m"."""
    return f"{input_number(value, unit)} {unit_shown(unit)}".strip()


def input_number(value: float, unit: str) -> str:
    """The number alone, in the unit that is shown."""
    _, kept, shown = KINDS.get(unit, ("", "", ""))
    if shown and shown != kept:
        value = in_unit(value, shown)
    return number_text(value)


def input_read(text: str, unit: str, *, bare: bool = False) -> Read:
    """What was typed, such as "350 N/mm", "12 ksi ± 1 ksi" or "0.05 in ± 0.005".

    `bare`: a number without unit is in the unit shown. Raises UnitError.
    """
    plain = _POWER.sub(_expanded, text.replace("+/-", "±").replace("−", "-"))
    number, _, spread = (part.strip() for part in plain.partition("±"))
    if unit not in KINDS:
        return Read(_count(number, unit), _count(spread, unit) if spread else None)
    quantity, kept, shown = KINDS[unit]
    said = _unit_of(number, quantity) or _unit_of(spread, quantity)
    default = said or (shown if bare else None)

    def measured(part: str) -> float:
        return in_unit(measure_read(part, quantity, unit=default), kept)

    return Read(measured(number), abs(measured(spread)) if spread else None)


def units_offered(unit: str) -> str:
    """The units an input may be written in, for the help beside its field."""
    if unit in KINDS:
        return ", ".join(unit_sign(name) for name in FACTORS[KINDS[unit][0]])
    return "a number or per cent" if unit == "-" else f"a whole number of {unit}"


def _expanded(found: re.Match[str]) -> str:
    return format(Decimal(found[1]).scaleb(int(found[2])), "f")


def _unit_of(text: str, quantity: str) -> str | None:
    parts = _BARE.fullmatch(text)
    return unit_known(parts[2], quantity) if parts and parts[2] else None


def _count(text: str, unit: str) -> float:
    """A ratio, in per cent if it says so, or a count of cycles."""
    parts = _BARE.fullmatch(text)
    number, word = (parts[1], parts[2].strip()) if parts else (text, "")
    if unit == "-" and word == "%":
        return float(number_read(number) * PER_CENT)
    if word and not (unit == "cycles" and word.lower() in ("cycles", "fc")):
        more = " or per cent" if unit == "-" else f" of {unit}"
        raise UnitError(NO_UNIT_HERE.format(unit=word, text=text, more=more))
    return float(number_read(number.replace(",", "") if unit == "cycles" else number))
