"""What was fitted in a repair beside what its approved data require."""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass

from fleet.models import Material, Operator
from fleet.selectors.people import policy
from repairs.fitted import differences, folded
from repairs.models import Repair, RepairLayer, RepairRequired

THICKNESS_PERCENT = "fitted_thickness_percent"
"""Policy: by how much of the required thickness a fitted layer may differ."""


@dataclass(frozen=True)
class LayerLine:
    """One layer: as fitted, as required, what differs, and the answer given."""

    number: int
    fitted: RepairLayer | None
    required: RepairRequired | None
    difference: str = ""


def thickness_percent(operator: Operator, day: dt.date | None) -> int:
    """The tolerance in force, in percent; without a policy row it is exact: 0."""
    row = policy(operator, THICKNESS_PERCENT, day) if day is not None else None
    return row.value if row else 0


def layer_lines(
    repair: Repair,
    fitted: list[RepairLayer],
    required: list[RepairRequired],
    today: dt.date,
) -> list[LayerLine]:
    """Layer by layer; before release what is not fitted yet is no difference."""
    percent = thickness_percent(repair.operator, repair.released_on or today)
    found = {}
    if repair.released_on is not None:
        found = {
            d.number: d.words for d in differences(required, fitted, percent=percent)
        }
    have = {row.number: row for row in fitted}
    want = {row.number: row for row in required}
    return [
        LayerLine(n, have.get(n), want.get(n), found.get(n, ""))
        for n in sorted(have | want)
    ]


def material_named(words: str) -> Material | None:
    """The material row that is called so, folding case and spacing; newest revision."""
    wanted = folded(words)
    rows = Material.objects.filter(replaced_by__isnull=True)
    return next((row for row in rows if folded(str(row)) == wanted), None)
