"""Serial numbers in order: "12" and "0012" are one, and "A-9" comes before "A-101"."""

from __future__ import annotations

import re

PIECES = re.compile(r"\d+|[A-Z]+")


def serial_pieces(serial: str) -> tuple[str | int, ...]:
    """Letters and whole numbers in turn; case, spaces and hyphens do not count."""
    found = PIECES.findall(serial.upper())
    return tuple(int(one) if one.isdigit() else one for one in found)


def in_range(serial: str, first: str, last: str) -> bool:
    """Whether the serial lies from `first` to `last`, both included; an empty end is
    open. A serial of another series (A-12 against 1 to 40) lies in no range."""
    asked = serial_pieces(serial)
    low, high = serial_pieces(first), serial_pieces(last)
    if any(end and not _alike(asked, end) for end in (low, high)):
        return False
    return (not low or _numbers(low) <= _numbers(asked)) and (
        not high or _numbers(asked) <= _numbers(high)
    )


def _alike(one: tuple[str | int, ...], two: tuple[str | int, ...]) -> bool:
    """The same letters in the same places, so that only numbers differ."""
    return _letters(one) == _letters(two)


def _letters(pieces: tuple[str | int, ...]) -> list[str]:
    return ["#" if isinstance(one, int) else one for one in pieces]


def _numbers(pieces: tuple[str | int, ...]) -> list[int]:
    return [one for one in pieces if isinstance(one, int)]
