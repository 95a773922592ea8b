"""What the methods were checked against outside this program, from the file of checks.

The test run writes the file; it lies beside the other files that come with the program.
"""

from __future__ import annotations

import json
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from itertools import groupby
from pathlib import Path
from typing import Any

from django.conf import settings

from repairs.evaluation_text import number_text

FILE = "outside_checks.json"
MEMORY = "memory"
ROUTES = {
    "print": "printed in the source",
    "quoted": "printed in a public text that quotes the source",
    "library": "an independent library",
    "closed form": "exact solution",
    "another method": "another published method",
    MEMORY: "from memory of the source, unverified",
}
NO_FILE = (
    "The file of checks, {path}, is not there: what the methods were checked against "
    "cannot be shown. It comes with the program; a run of the tests writes it anew."
)
UNREADABLE = "The file of checks, {path}, cannot be read: {why}."


@dataclass(frozen=True, slots=True)
class CheckRow:
    """One published value beside the computed one."""

    method: str
    source: str
    given: str
    published: str
    computed: str
    unit: str
    difference: str
    tolerance: str
    route: str
    from_memory: bool


@dataclass(frozen=True, slots=True)
class CheckGroup:
    """All checks of one method."""

    method: str
    rows: tuple[CheckRow, ...]
    from_memory: int


@dataclass(frozen=True, slots=True)
class Checks:
    """The checks that fit a filter, or why there are none to show."""

    groups: tuple[CheckGroup, ...] = ()
    count: int = 0
    from_memory: int = 0
    problem: str = ""


def checks_shown(
    words: str = "", route: str = "", *, path: Path | None = None
) -> Checks:
    """Checks whose method, source or input holds the words; no query."""
    path = path or settings.FIXTURES / FILE
    try:
        rows = json.loads(path.read_text(encoding="utf-8"))
        found = [_row(row) for row in rows if _fits(row, words, route)]
    except FileNotFoundError:
        return Checks(problem=NO_FILE.format(path=path.name))
    except (OSError, ValueError, KeyError, TypeError) as error:
        return Checks(problem=UNREADABLE.format(path=path.name, why=error))
    return Checks(
        tuple(_groups(found)), len(found), sum(row.from_memory for row in found)
    )


def _fits(row: dict[str, Any], words: str, route: str) -> bool:
    text = " ".join((row["method"], row["source"], row["given"])).lower()
    return (not route or row["route"] == route) and all(
        word in text for word in words.lower().split()
    )


def _groups(rows: Iterable[CheckRow]) -> Iterator[CheckGroup]:
    ordered = sorted(rows, key=lambda row: (row.method, row.source, row.given))
    for method, some in groupby(ordered, key=lambda row: row.method):
        group = tuple(some)
        yield CheckGroup(method, group, sum(row.from_memory for row in group))


def _row(row: dict[str, Any]) -> CheckRow:
    return CheckRow(
        row["method"],
        row["source"],
        row["given"],
        _signed(row["published"]),
        _signed(row["computed"]),
        row["unit"].strip("-"),
        difference_text(row["published"], row["computed"]),
        allowed_text(row["tolerance"]),
        ROUTES.get(row["route"], row["route"]),
        row["route"] == MEMORY,
    )


def _signed(value: float) -> str:
    return number_text(value).replace("-", "−")


def allowed_text(tolerance: str) -> str:
    """How far a value may be off; less than any printed figure is rounding."""
    share = tolerance.endswith("%")
    try:
        size = float(tolerance.strip("± %"))
    except ValueError:
        return tolerance
    return "rounding" if size < (1e-3 if share else 1e-6) else tolerance


def difference_text(published: float, computed: float) -> str:
    """Computed over published, minus one, in per cent; of nought, the difference."""
    if published == 0:
        return number_text(computed).replace("-", "−")
    share = 100 * (computed - published) / abs(published)
    if abs(share) < 5e-3:
        return "0.00 %"
    return f"{share:+.2f} %".replace("-", "−")
