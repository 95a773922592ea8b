"""A spectrum as plain data: its kinds, and reading one key by key."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from enum import StrEnum
from typing import Any, TypeVar

from repairs.analysis.errors import InputError

NO_KEY = "A spectrum of kind {kind} lacks {key!r}. Enter it; blank is not zero."
WRONG_KEY = "A spectrum of kind {kind} reads {key} = {read!r}; {expected} is expected."
EXTRA_KEY = "A spectrum of kind {kind} knows no {keys}. Remove or rename them."
Word = TypeVar("Word", bound=StrEnum)


class Kind(StrEnum):
    """What a spectrum is made of."""

    CYCLE = "cycle"
    PRESSURE = "pressure"
    WING_SEQUENCE = "wing_sequence"
    SEQUENCE = "sequence"
    EXCEEDANCE = "exceedance"


class Content:
    """Reads plain data of one kind key by key, and refuses what is left over."""

    def __init__(self, kind: Kind, data: Mapping[str, Any]) -> None:
        self._kind, self._left = kind, dict(data)
        self._left.pop("kind", None)

    def take(self, key: str) -> Any:
        """Return a value that must be there; it may be None."""
        if key not in self._left:
            raise InputError(NO_KEY.format(kind=self._kind, key=key))
        return self._left.pop(key)

    def refuse(self, key: str, read: object, expected: str) -> InputError:
        """Return the refusal of a value."""
        return InputError(
            WRONG_KEY.format(kind=self._kind, key=key, read=read, expected=expected)
        )

    def _checked(self, key: str, read: Any) -> float:
        good = isinstance(read, int | float) and not isinstance(read, bool)
        if not good or not math.isfinite(read):
            raise self.refuse(key, read, "a finite number")
        return float(read)

    def number(self, key: str) -> float:
        """Return a finite number."""
        return self._checked(key, self.take(key))

    def number_or_none(self, key: str) -> float | None:
        """Return a finite number, or None where it says so."""
        read = self.take(key)
        return None if read is None else self._checked(key, read)

    def numbers(self, key: str) -> tuple[float, ...]:
        """Return a list of finite numbers."""
        read = self.take(key)
        if isinstance(read, str) or not isinstance(read, Sequence):
            raise self.refuse(key, read, "a list of numbers")
        return tuple(self._checked(key, value) for value in read)

    def whole(self, key: str) -> int:
        """Return a whole number."""
        read = self.take(key)
        if not isinstance(read, int) or isinstance(read, bool):
            raise self.refuse(key, read, "a whole number")
        return read

    def flag(self, key: str) -> bool:
        """Return true or false."""
        read = self.take(key)
        if not isinstance(read, bool):
            raise self.refuse(key, read, "true or false")
        return read

    def text(self, key: str) -> str:
        """Return a text that is not blank."""
        read = self.take(key)
        if not isinstance(read, str) or not read.strip():
            raise self.refuse(key, read, "a text")
        return read

    def word(self, key: str, words: type[Word]) -> Word:
        """Return one of the words there are."""
        read = self.take(key)
        if read not in list(words):
            raise self.refuse(key, read, f"one of {', '.join(words)}")
        return words(read)

    def done(self) -> None:
        """Refuse keys nobody asked for."""
        if self._left:
            raise InputError(
                EXTRA_KEY.format(kind=self._kind, keys=", ".join(sorted(self._left)))
            )
