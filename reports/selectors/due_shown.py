"""The head of a due list, for pages that show more than what is due."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Self

from fleet.due import Bucket
from reports.due_list import DueList
from reports.due_rows import DueRow


@dataclass(frozen=True)
class DueShown:
    """The first rows, and how many lie in each group."""

    rows: Sequence[DueRow]
    count: int
    overdue: int
    to_30: int
    to_60: int
    to_90: int

    @classmethod
    def of(cls, listed: DueList, rows: int) -> Self:
        tally = listed.tally
        return cls(
            listed.rows[:rows],
            len(listed.rows),
            tally[Bucket.OVERDUE],
            tally[Bucket.TO_30],
            tally[Bucket.TO_60],
            tally[Bucket.TO_90],
        )

    @property
    def more(self) -> int:
        return self.count - len(self.rows)
