"""Text with a unit to a canonical value and back: "0.25 in", '12"', "1234:30".

Canonical units are mm, mm2, mm4, N, N mm, N/mm, MPa, mm/N, MPa root mm and whole
minutes. Factors are exact, but for the root of a length, which has 28 figures: they
follow from 1 in = 25.4 mm, 1 lb = 0.45359237 kg and standard gravity 9.80665 m/s2
(international yard and pound agreement, 1959; 3rd CGPM, 1901).
"""

from __future__ import annotations

import re
from decimal import Decimal, InvalidOperation

_INCH_MM = Decimal("25.4")
_POUND_FORCE_N = Decimal("0.45359237") * Decimal("9.80665")
_PSI_MPA = _POUND_FORCE_N / (_INCH_MM * _INCH_MM)

FACTORS: dict[str, dict[str, Decimal]] = {
    "length": {
        "mm": Decimal(1),
        "cm": Decimal(10),
        "m": Decimal(1000),
        "in": _INCH_MM,
        "ft": _INCH_MM * 12,
    },
    "area": {"mm2": Decimal(1), "in2": _INCH_MM * _INCH_MM},
    "stress": {
        "mpa": Decimal(1),
        "kpa": Decimal("0.001"),
        "psi": _PSI_MPA,
        "ksi": _PSI_MPA * 1000,
    },
    "running_load": {
        "n_per_mm": Decimal(1),
        "lbf_per_in": _POUND_FORCE_N / _INCH_MM,
    },
    "force": {
        "n": Decimal(1),
        "kn": Decimal(1000),
        "lbf": _POUND_FORCE_N,
        "kip": _POUND_FORCE_N * 1000,
    },
    "moment": {
        "n_mm": Decimal(1),
        "n_m": Decimal(1000),
        "lbf_in": _POUND_FORCE_N * _INCH_MM,
    },
    "inertia": {"mm4": Decimal(1), "in4": _INCH_MM**4},
    "flexibility": {"mm_per_n": Decimal(1), "in_per_lbf": _INCH_MM / _POUND_FORCE_N},
    "toughness": {
        "mpa_root_mm": Decimal(1),
        "mpa_root_m": Decimal(1000).sqrt(),
        "ksi_root_in": _PSI_MPA * 1000 * _INCH_MM.sqrt(),
    },
}
"""Canonical units of one of each unit, by quantity; the only table of factors."""

_WORDS = {
    '"': "in", "''": "in", "″": "in", "”": "in", "inch": "in", "inches": "in",
    "ins": "in", "'": "ft", "′": "ft", "’": "ft", "foot": "ft", "feet": "ft",
    "millimetre": "mm", "millimetres": "mm", "millimeter": "mm", "millimeters": "mm",
    "mms": "mm", "centimetre": "cm", "centimetres": "cm", "metre": "m",
    "metres": "m", "n/mm2": "mpa", "lb/in2": "psi", "lbf/in2": "psi",
    "n/mm": "n_per_mm", "lbf/in": "lbf_per_in", "lb/in": "lbf_per_in",
    "mm²": "mm2", "in²": "in2", "sqin": "in2", "mm⁴": "mm4", "in⁴": "in4",
    "newton": "n", "newtons": "n", "lb": "lbf", "lbs": "lbf", "kips": "kip",
    "nmm": "n_mm", "n·mm": "n_mm", "n*mm": "n_mm", "nm": "n_m", "n·m": "n_m",
    "n*m": "n_m", "lbfin": "lbf_in", "lbf·in": "lbf_in", "lbf*in": "lbf_in",
    "lbin": "lbf_in", "inlb": "lbf_in", "in-lb": "lbf_in", "in·lb": "lbf_in",
    "in-lbf": "lbf_in", "mm/n": "mm_per_n", "in/lbf": "in_per_lbf",
    "in/lb": "in_per_lbf", "mpa√mm": "mpa_root_mm", "mpa*sqrt(mm)": "mpa_root_mm",
    "mpa√m": "mpa_root_m", "mpa*sqrt(m)": "mpa_root_m", "ksi√in": "ksi_root_in",
    "ksi*sqrt(in)": "ksi_root_in",
}  # fmt: skip

_SIGNS = {"n_per_mm": "N/mm", "lbf_per_in": "lbf/in", "mpa": "MPa", "kpa": "kPa",
          "mm2": "mm²", "in2": "in²", "mm4": "mm⁴", "in4": "in⁴", "n": "N", "kn": "kN",
          "n_mm": "N·mm", "n_m": "N·m", "lbf_in": "lbf·in", "mm_per_n": "mm/N",
          "in_per_lbf": "in/lbf", "mpa_root_mm": "MPa√mm", "mpa_root_m": "MPa√m",
          "ksi_root_in": "ksi√in"}  # fmt: skip

_DIGITS = {
    "mm": 2, "cm": 3, "m": 4, "in": 3, "ft": 4, "mm2": 1, "in2": 4, "mpa": 1,
    "kpa": 1, "psi": 2, "ksi": 2, "n_per_mm": 1, "lbf_per_in": 0, "n": 0, "kn": 2,
    "lbf": 0, "kip": 2, "n_mm": 0, "n_m": 1, "lbf_in": 0, "mm4": 0, "in4": 4,
    "mm_per_n": 8, "in_per_lbf": 10, "mpa_root_mm": 0, "mpa_root_m": 1,
    "ksi_root_in": 1,
}  # fmt: skip

_THOUSANDS = re.compile(r"[1-9]\d{0,2}(,\d{3})+(\.\d+)?")
_MIXED = re.compile(r"(?:(\d+)[ -]+)?(\d+)\s*/\s*(\d+)")
_SPLIT = re.compile(r"([-+]?[\d.,/ -]*[\d.])\s*(.*)", re.DOTALL)

NOTHING_GIVEN = "Nothing was given where a {quantity} is expected, such as {example}."
NOT_A_NUMBER = "“{text}” is not a number; write it as 12.5, 1 1/2 or .050."
COMMA_UNCLEAR = "“{text}” may be {whole} or {part}; write it without the comma."
UNIT_MISSING = "“{text}” has no unit; write {offers}."
UNIT_UNKNOWN = "“{unit}” in “{text}” is not a unit of {quantity}; use {offers}."
NOT_HOURS = "“{text}” is not a time in hours; write 1234:30 (hours:minutes) or 1234.5."
NOT_WHOLE_MINUTES = (
    "“{text}” is {minutes} minutes, not a whole number of them; write hours:minutes."
)

_EXAMPLES = {
    "length": "0.25 in or 6.35 mm",
    "area": "0.35 in2 or 225.8 mm2",
    "stress": "8.2 psi or 345 MPa",
    "running_load": "1200 lbf/in or 210 N/mm",
    "force": "1250 lbf or 5560 N",
    "moment": "900 lbf in or 101.7 N m",
    "inertia": "0.12 in4 or 50000 mm4",
    "flexibility": "0.00002 mm/N",
    "toughness": "110 MPa√m or 100 ksi√in",
}


class UnitError(ValueError):
    """A measured text that cannot be read; the message says how to mend it."""


def number_read(text: str) -> Decimal:
    """The exact value of "12.5", "12,5", ".050", "3/4" or "1 1/2".

    "1,016" is refused: it may be a thousand and sixteen or a little over one.
    """
    bare = text.strip().replace("\u00a0", " ")
    mixed = _MIXED.fullmatch(bare)
    if mixed and int(mixed[3]):
        whole = Decimal(mixed[1] or 0)
        return whole + Decimal(mixed[2]) / Decimal(mixed[3])
    if _THOUSANDS.fullmatch(bare):
        if bare.count(",") == 1 and "." not in bare:
            raise UnitError(
                COMMA_UNCLEAR.format(
                    text=bare,
                    whole=bare.replace(",", ""),
                    part=bare.replace(",", "."),
                )
            )
        bare = bare.replace(",", "")
    elif bare.count(",") == 1 and "." not in bare:
        bare = bare.replace(",", ".")
    if not re.fullmatch(r"[-+]?(\d+\.?\d*|\.\d+)", bare):
        raise UnitError(NOT_A_NUMBER.format(text=text.strip()))
    try:
        return Decimal(bare)
    except InvalidOperation as error:
        raise UnitError(NOT_A_NUMBER.format(text=text.strip())) from error


def unit_known(word: str, quantity: str = "length") -> str | None:
    """The unit a word stands for ("inches" is "in"), or None."""
    bare = word.strip().rstrip(".").lower().replace(" ", "")
    unit = _WORDS.get(bare, bare)
    return unit if unit in FACTORS[quantity] else None


def measure_read(
    text: str, quantity: str = "length", *, unit: str | None = None
) -> float:
    """The canonical value of a measured text.

    A bare number is refused unless the caller names the `unit` it is in.
    """
    if not text.strip():
        example = _EXAMPLES[quantity]
        name = quantity.replace("_", " ")
        raise UnitError(NOTHING_GIVEN.format(quantity=name, example=example))
    parts = _SPLIT.fullmatch(text.strip())
    if parts is None:
        raise UnitError(NOT_A_NUMBER.format(text=text.strip()))
    number, word = number_read(parts[1]), parts[2]
    offers = " or ".join(unit_sign(name) for name in FACTORS[quantity])
    found = unit_known(word, quantity) if word else unit
    if found is None:
        if word:
            raise UnitError(
                UNIT_UNKNOWN.format(
                    unit=word,
                    text=text.strip(),
                    quantity=quantity.replace("_", " "),
                    offers=offers,
                )
            )
        offers = " or ".join(
            f"{parts[1]} {unit_sign(name)}" for name in FACTORS[quantity]
        )
        raise UnitError(UNIT_MISSING.format(text=text.strip(), offers=offers))
    return float(number * FACTORS[quantity][found])


def length_read(text: str, *, unit: str | None = None) -> float:
    """A length in mm."""
    return measure_read(text, "length", unit=unit)


def canonical(value: float | str, unit: str) -> float:
    """A number in `unit` as canonical units, by the exact factor."""
    for factors in FACTORS.values():
        if unit in factors:
            return float(Decimal(str(value)) * factors[unit])
    raise UnitError(f"“{unit}” is not a unit this program knows.")


def in_unit(value: float, unit: str) -> float:
    """A canonical value as a number of `unit`."""
    for factors in FACTORS.values():
        if unit in factors:
            return float(Decimal(repr(value)) / factors[unit])
    raise UnitError(f"“{unit}” is not a unit this program knows.")


def number_write(value: float, digits: int) -> str:
    """A number with at most `digits` decimals, no trailing noughts, no "-0"."""
    text = f"{value:.{digits}f}"
    if "." in text:
        text = text.rstrip("0").rstrip(".")
    return "0" if text == "-0" else text


def measure_write(value: float, unit: str, *, digits: int | None = None) -> str:
    """A canonical value for a reader: "0.25 in", "6.35 mm", "8.2 psi"."""
    places = _DIGITS[unit] if digits is None else digits
    return f"{number_write(in_unit(value, unit), places)} {unit_sign(unit)}"


def hours_read(text: str) -> int:
    """Whole minutes of "1234:30", "1,234:30", "1234.5" or "1234" hours."""
    bare = text.strip().replace("\u00a0", " ")
    clock = re.fullmatch(r"(\d+|\d{1,3}(?:,\d{3})+):([0-5]\d)", bare)
    if clock:
        return int(clock[1].replace(",", "")) * 60 + int(clock[2])
    try:
        minutes = number_read(bare) * 60
    except UnitError as error:
        raise UnitError(NOT_HOURS.format(text=bare)) from error
    if minutes < 0 or ":" in bare:
        raise UnitError(NOT_HOURS.format(text=bare))
    if minutes != minutes.to_integral_value():
        shown = number_write(float(minutes), 2)
        raise UnitError(NOT_WHOLE_MINUTES.format(text=bare, minutes=shown))
    return int(minutes)


def hours_write(minutes: int) -> str:
    """Minutes as h:mm with thousands: "15,850:36"; minus only for what is past."""
    hours, rest = divmod(abs(minutes), 60)
    sign = "−" if minutes < 0 else ""
    return f"{sign}{hours:,}:{rest:02d}"


def unit_sign(unit: str) -> str:
    """The unit as it is printed: "n_per_mm" is "N/mm"."""
    return _SIGNS.get(unit, unit)
