"""One text for one content, so that a digest means the same on every machine."""

from __future__ import annotations

import datetime as dt
import hashlib
import json
from typing import Any


def plain(value: Any) -> Any:
    """A column's value as JSON can hold it without loss."""
    if value is None or isinstance(value, bool | int | str):
        return value
    if isinstance(value, float):
        return value.hex()
    if isinstance(value, dt.datetime):
        return value.astimezone(dt.UTC).isoformat(timespec="microseconds")
    if isinstance(value, dt.date):
        return value.isoformat()
    return str(value)


_encode = json.JSONEncoder(
    sort_keys=True, separators=(",", ":"), ensure_ascii=False, allow_nan=False
).encode


def canonical(content: Any) -> str:
    """JSON with sorted keys and no blanks; floats keep every digit."""
    return _encode(content)


def digest(text: str) -> str:
    """SHA-256 of the text in UTF-8, hexadecimal."""
    return hashlib.sha256(text.encode()).hexdigest()
