"""What belongs to the fleet, read once for many calculations.

Inside `fleet_rows_kept` a function marked `of_the_fleet` answers from memory, as long
as the history of the fleet ends where it did; outside it always reads. A run over a
hundred thousand evaluations reads a material once and not a hundred thousand times.
"""

from __future__ import annotations

from collections.abc import Callable, Hashable, Iterator
from contextlib import contextmanager
from functools import wraps
from threading import local
from typing import Any, TypeVar

Answer = TypeVar("Answer")


class _Kept(local):
    """What one thread has read, and the end of the history it was read at."""

    def __init__(self) -> None:
        self.read_at: Hashable = None
        self.rows: dict[tuple[Hashable, ...], Any] = {}
        self.on = False


_kept = _Kept()


@contextmanager
def fleet_rows_kept(read_at: Hashable) -> Iterator[None]:
    """Answer from memory inside; forget everything once the fleet has moved on."""
    if read_at != _kept.read_at:
        _kept.read_at, _kept.rows = read_at, {}
    before, _kept.on = _kept.on, True
    try:
        yield
    finally:
        _kept.on = before


def of_the_fleet(function: Callable[..., Answer]) -> Callable[..., Answer]:
    """Mark a function of fleet-wide rows; its arguments must be hashable."""

    @wraps(function)
    def answered(*args: Hashable) -> Answer:
        if not _kept.on:
            return function(*args)
        key = (function.__module__, function.__qualname__, *args)
        if key not in _kept.rows:
            _kept.rows[key] = function(*args)
        answer: Answer = _kept.rows[key]
        return answer

    return answered
