"""Results and inputs as plain data: what is frozen need not be copied to be read."""

from __future__ import annotations

from dataclasses import fields, is_dataclass
from functools import cache
from typing import Any


def as_plain(value: object) -> Any:
    """Return dataclasses as dicts and tuples as lists, all the way down."""
    names = _names(type(value))  # type: ignore[arg-type]
    if names is not None:
        return {name: as_plain(getattr(value, name)) for name in names}
    if isinstance(value, tuple | list):
        return [as_plain(item) for item in value]
    return value


@cache
def _names(kind: type) -> tuple[str, ...] | None:
    """The names of a dataclass's fields; None for anything else."""
    return tuple(f.name for f in fields(kind)) if is_dataclass(kind) else None
