"""Amounts on a counter as text: "250 FC", "6,000 FH", "18 months", and back. Pure.

An interval is never a bare number: 250 cycles keyed as 250 days is a known mistake.
"""

from __future__ import annotations

import re
from datetime import date

from fleet.due import COUNTED, COUNTER_WORDS, Counter, Counters
from fleet.units import UnitError, hours_read, hours_write

_UNITS = {
    word: counter
    for counter, words in {
        Counter.MINUTES: "fh|h|hour|hours|flight hour|flight hours",
        Counter.CYCLES: "fc|cycle|cycles|flight cycle|flight cycles|flight|flights",
        Counter.LANDINGS: "landing|landings",
        Counter.PRESSURISATIONS: "pc|pressurisation cycle|pressurisation cycles",
        Counter.DAYS: "d|day|days",
        Counter.MONTHS: "month|months|year|years",
    }.items()
    for word in words.split("|")
}

NO_UNIT = (
    "“{text}” is not an interval; write a whole number and its unit, as 250 FC, "
    "6,000 FH, 90 days or 18 months."
)
NOT_POSITIVE = "“{text}” is not above zero; an interval is at least 1."


class AmountError(ValueError):
    """An interval that cannot be read; the message says how to mend it."""


def amount_read(text: str) -> tuple[Counter, int]:
    """The counter and the number of "250 FC"; hours become minutes, years months."""
    found = re.fullmatch(r"([\d.,:]+)\s*([a-z ]+?)\.?", text.strip().lower())
    unit = found and _UNITS.get(found[2].strip())
    if not found or not unit:
        raise AmountError(NO_UNIT.format(text=text.strip()))
    try:
        if unit is Counter.MINUTES:
            value = hours_read(_thousands(found[1]))
        else:
            value = int(_thousands(found[1]))
    except (UnitError, ValueError) as error:
        raise AmountError(NO_UNIT.format(text=text.strip())) from error
    if value < 1:
        raise AmountError(NOT_POSITIVE.format(text=text.strip()))
    return unit, value * 12 if found[2].startswith("year") else value


def _thousands(number: str) -> str:
    """Commas between groups of three go; elsewhere they stay and are refused."""
    whole, colon, minutes = number.partition(":")
    if re.fullmatch(r"\d{1,3}(,\d{3})+", whole):
        whole = whole.replace(",", "")
    return whole + colon + minutes


def amount_write(counter: Counter, value: int) -> str:
    """ "28,631 FC", "549:24 FH", "−31 FC", "19 d"."""
    unit = COUNTER_WORDS[counter][1]
    if counter is Counter.MINUTES:
        return f"{hours_write(value)} {unit}"
    if value == 1 and unit.endswith("s"):
        unit = unit[:-1]
    return f"{value:,} {unit}".replace("-", "−")


def due_write(counter: Counter, value: int | date) -> str:
    """A due value: an amount on a counter, or a date."""
    return (
        value.isoformat() if isinstance(value, date) else amount_write(counter, value)
    )


def counters_write(counters: Counters) -> str:
    """The known counters in one line; empty when none is known."""
    known = ((counter, counters[counter]) for counter in COUNTED)
    return " · ".join(amount_write(c, value) for c, value in known if value is not None)
