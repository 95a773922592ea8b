"""Checks against the outside: what was published, what the program computes.

`outside` asserts one value and keeps it; a run of all of `tests/repairs/analysis`
compares what was kept with `fixtures/outside_checks.json`, which the program shows to
engineers. `--record-outside` writes that file anew.
"""

from __future__ import annotations

import json
import math
from dataclasses import asdict, dataclass
from pathlib import Path

import pytest

FILE = Path(__file__).parents[1] / "fixtures" / "outside_checks.json"
ROUTES = {
    "print": "value printed in the source",
    "quoted": "value printed in a public text that quotes the source",
    "library": "value of an independent library",
    "closed form": "exact solution",
    "another method": "another published method",
    "memory": "value from memory of the source, unverified",
}
SAME = 1e-4
"""Share by which a machine's arithmetic may differ from what the file holds."""


@dataclass(frozen=True, slots=True)
class OutsideCheck:
    """One value from outside beside ours; `tolerance` is a share of it or absolute."""

    method: str
    source: str
    given: str
    published: float
    computed: float
    unit: str
    tolerance: str
    route: str

    @property
    def key(self) -> tuple[str, str, str]:
        return self.method, self.source, self.given


KEPT: dict[tuple[str, str, str], OutsideCheck] = {}


def outside(
    method: str,
    *,
    source: str,
    given: str,
    published: float,
    computed: float,
    unit: str = "-",
    rel: float | None = None,
    absolute: float | None = None,
    route: str = "print",
) -> None:
    """Assert that `computed` is the published value, and keep both for the page."""
    assert route in ROUTES, f"{route!r} is none of {', '.join(ROUTES)}"
    assert (rel is None) != (absolute is None), "give either rel or absolute"
    assert math.isfinite(computed), f"{method}, {given}: computed {computed}"
    allowed = f"{100 * rel:g} %" if rel is not None else f"±{absolute:g}"
    check = OutsideCheck(
        method, source, given, published, float(computed), unit, allowed, route
    )
    assert computed == pytest.approx(published, rel=rel, abs=absolute), asdict(check)
    KEPT[check.key] = check


def kept_text() -> str:
    """What this run kept, as the file holds it."""
    rows = [
        {**asdict(check), "computed": float(f"{check.computed:.5g}")}
        for _, check in sorted(KEPT.items())
    ]
    return json.dumps(rows, indent=1, ensure_ascii=False) + "\n"


def difference() -> str:
    """In what the file differs from this run; empty when in nothing."""
    if not FILE.exists():
        return "there is no file"
    filed = {
        (row["method"], row["source"], row["given"]): row
        for row in json.loads(FILE.read_text())
    }
    for key in filed.keys() ^ KEPT.keys():
        where = "the file" if key in filed else "the run"
        return f"{' / '.join(key)} is only in {where}"
    for key, check in KEPT.items():
        row = filed[key]
        same = row | {"computed": 0} == asdict(check) | {"computed": 0}
        near = math.isclose(
            row["computed"], check.computed, rel_tol=SAME, abs_tol=1e-12
        )
        if not (same and near):
            return f"{' / '.join(key)} reads otherwise"
    return ""
