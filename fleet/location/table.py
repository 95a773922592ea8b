"""Reading one table of a geometry file: each key checked, each problem named."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import Any

from fleet.units import FACTORS, canonical

MISSING = "{where}: “{key}” is missing; give {wanted}."
WRONG = "{where}: “{key}” is {value!r}; it must be {wanted}."
UNKNOWN = "{where}: “{key}” is not known here; remove it or use one of: {known}."
TWICE = "{where}: give only one of {keys}."


class Table:
    """A table that collects problems instead of stopping at the first.

    A reading that failed returns a value of the right type; the caller asks `ok`
    before it uses what it read.
    """

    def __init__(self, data: dict[str, Any], where: str, problems: list[str]) -> None:
        self.data = data
        self.where = where
        self.problems = problems
        self._before = len(problems)
        self._seen: set[str] = set()

    @property
    def ok(self) -> bool:
        """Whether nothing was found wrong since this table was opened."""
        return len(self.problems) == self._before

    def wrong(self, message: str) -> None:
        """Add a problem of this table's item."""
        self.problems.append(f"{self.where}: {message}")

    def _take(self, key: str, wanted: str, optional: bool) -> Any:
        self._seen.add(key)
        if key not in self.data:
            if not optional:
                self.problems.append(
                    MISSING.format(where=self.where, key=key, wanted=wanted)
                )
            return None
        return self.data[key]

    def _bad(self, key: str, value: Any, wanted: str) -> None:
        self.problems.append(
            WRONG.format(where=self.where, key=key, value=value, wanted=wanted)
        )

    def text(self, key: str, *, optional: bool = False) -> str:
        """A text; '' if optional and absent."""
        value = self._take(key, "a text", optional)
        if value is None:
            return ""
        if not isinstance(value, str) or not (value.strip() or optional):
            self._bad(key, value, "a text that is not empty")
            return ""
        return value

    def choice(self, key: str, among: tuple[str, ...], default: str = "") -> str:
        """One of the given words."""
        wanted = "one of " + ", ".join(among)
        value = self._take(key, wanted, bool(default))
        if value is None:
            return default or among[0]
        if value not in among:
            self._bad(key, value, wanted)
            return among[0]
        return str(value)

    def flag(self, key: str, default: bool | None = None) -> bool:
        """true or false."""
        value = self._take(key, "true or false", default is not None)
        if value is None:
            return bool(default)
        if not isinstance(value, bool):
            self._bad(key, value, "true or false")
        return bool(value)

    def whole(self, key: str, *, optional: bool = False, least: int = 0) -> int | None:
        """A whole number not below `least`."""
        wanted = f"a whole number of {least} or more"
        value = self._take(key, wanted, optional)
        if value is None:
            return None if optional else least
        if isinstance(value, bool) or not isinstance(value, int) or value < least:
            self._bad(key, value, wanted)
            return least
        return value

    def number(self, key: str, *, optional: bool = False) -> float | None:
        """A finite number without a unit."""
        value = self._take(key, "a number", optional)
        if value is None:
            return None if optional else 1.0
        if not is_number(value):
            self._bad(key, value, "a finite number")
            return 1.0
        return float(value)

    def unit_key(self, name: str, quantity: str, *, optional: bool = False) -> str:
        """The key `name_<unit>` that the table holds; '' if there is none."""
        keys = [f"{name}_{unit}" for unit in FACTORS[quantity]]
        found = [key for key in keys if key in self.data]
        self._seen.update(found)
        if len(found) == 1:
            return found[0]
        if found:
            self.problems.append(TWICE.format(where=self.where, keys=", ".join(found)))
        elif not optional:
            wanted = "it with its unit in the key, as " + " or ".join(keys[:4])
            self.problems.append(
                MISSING.format(where=self.where, key=name, wanted=wanted)
            )
        return ""

    def measure(
        self,
        name: str,
        quantity: str = "length",
        *,
        least: float | None = None,
        above: float | None = None,
    ) -> float:
        """A number with its unit in its key, in the canonical unit."""
        value = self.measure_or_none(name, quantity, least=least, above=above)
        if value is None:
            self.unit_key(name, quantity)
        return 1.0 if value is None else value

    def measure_or_none(
        self,
        name: str,
        quantity: str = "length",
        *,
        least: float | None = None,
        above: float | None = None,
    ) -> float | None:
        """As `measure`, None if the table says nothing of it."""
        key = self.unit_key(name, quantity, optional=True)
        if not key:
            return None
        value = self.data[key]
        if not is_number(value):
            self._bad(key, value, "a finite number")
        elif above is not None and value <= above:
            self._bad(key, value, f"more than {above:g}")
        elif least is not None and value < least:
            self._bad(key, value, f"{least:g} or more")
        else:
            return canonical(value, key[len(name) + 1 :])
        return 1.0

    def numbers(self, key: str, *, optional: bool = False) -> list[float]:
        """A list of finite numbers."""
        value = self._take(key, "a list of numbers", optional)
        if value is None:
            return []
        if not isinstance(value, list) or not all(is_number(v) for v in value):
            self._bad(key, value, "a list of finite numbers")
            return []
        return [float(v) for v in value]

    def texts(self, key: str, *, optional: bool = False) -> tuple[str, ...]:
        """A list of texts."""
        value = self._take(key, "a list of texts", optional)
        if value is None:
            return ()
        if not isinstance(value, list) or not all(isinstance(v, str) for v in value):
            self._bad(key, value, "a list of texts")
            return ()
        return tuple(value)

    def raw(self, key: str, wanted: str, *, optional: bool = False) -> Any:
        """The value as it stands, for a key of several forms."""
        return self._take(key, wanted, optional)

    def table(self, key: str, *, optional: bool = False) -> Table | None:
        """A table within this one."""
        value = self._take(key, "a table", optional)
        if value is None:
            return None
        if not isinstance(value, dict):
            self._bad(key, value, "a table")
            return None
        return Table(value, f"{self.where} {key}", self.problems)

    def tables(self, key: str, name: str = "label") -> Iterator[Table]:
        """The tables of a list, each called by its `name` in messages.

        Each is opened only when it is reached, so that its `ok` is its own.
        """
        value = self._take(key, "a list of tables", True)
        if value is None:
            return
        if not isinstance(value, list) or not all(isinstance(v, dict) for v in value):
            self._bad(key, value, f"a list of tables, each under [[{key}]]")
            return
        inside = "" if self.where == "file" else f"{self.where} "
        for number, row in enumerate(value, 1):
            yield Table(row, f"{inside}{key} {row.get(name) or number}", self.problems)

    def done(self) -> bool:
        """Name the keys nobody asked for; whether the table was read whole."""
        for key in self.data:
            if key not in self._seen:
                known = ", ".join(sorted(self._seen))
                self.problems.append(
                    UNKNOWN.format(where=self.where, key=key, known=known)
                )
        return self.ok


def is_number(value: Any) -> bool:
    """A finite int or float, not a bool."""
    return (
        isinstance(value, int | float)
        and not isinstance(value, bool)
        and math.isfinite(value)
    )
