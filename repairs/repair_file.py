"""The twelve papers and facts that a repair's file is asked for at hand-over.

Trade practice: what guidance on lease returns asks of a structural repair file; list,
map and documents agree by number, and each paper is there or missing.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

ITEMS = (
    "damage and repair chart number",
    "station and stringer",
    "area covered",
    "date, FH and FC at release",
    "approval or design correspondence",
    "revision of the data used",
    "category",
    "fatigue and damage-tolerance data",
    "inspection or NDT report",
    "work cards",
    "release certificate and who signed it",
    "materials and fasteners",
)


@dataclass(frozen=True, slots=True)
class FileFacts:
    """What the record holds of one repair, in the order of the items."""

    chart_number: bool
    place: bool
    area: bool
    counters: bool
    approval: bool
    revision: bool
    category: bool
    fatigue: bool
    inspection: bool
    work_cards: bool
    release: bool
    materials: bool


@dataclass(frozen=True)
class RepairFile:
    """The items, each recorded or not, and how many are."""

    items: Sequence[tuple[str, bool]]

    @property
    def count(self) -> int:
        return sum(recorded for _, recorded in self.items)

    @property
    def words(self) -> str:
        return f"{self.count} of {len(self.items)}"

    @property
    def missing(self) -> list[str]:
        return [name for name, recorded in self.items if not recorded]


def repair_file(facts: FileFacts) -> RepairFile:
    recorded = [getattr(facts, name) for name in FileFacts.__slots__]
    return RepairFile(list(zip(ITEMS, recorded, strict=True)))
