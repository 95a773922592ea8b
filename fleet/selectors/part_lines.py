"""Safe-life parts in one line each: where, how much is left, until when."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass

from fleet.amounts import amount_write
from fleet.due import DueState, DueStatus
from fleet.models import SafeLifePart
from fleet.selectors.parts import PartLife


@dataclass(frozen=True)
class PartLine:
    """A part with its life status."""

    life: PartLife
    status: DueStatus

    @property
    def part(self) -> SafeLifePart:
        return self.life.part

    @property
    def where(self) -> str:
        stint = self.life.current
        if stint is None:
            return "not installed"
        return f"{stint.installation.aircraft}, {stint.installation.position}"

    @property
    def left(self) -> str:
        """What is left on the limiting counter, or why that is not known."""
        limiting = self.status.limiting
        if self.status.state is DueState.CANNOT_COMPUTE or limiting is None:
            return self.status.note
        return amount_write(limiting.counter, limiting.remaining)

    @property
    def forecast(self) -> dt.date | None:
        return self.status.forecast

    @property
    def overdue(self) -> bool:
        return self.status.state in (
            DueState.OVERDUE,
            DueState.PRESUMED_OVERDUE,
            DueState.CANNOT_COMPUTE,
            DueState.DUE,
        )


def nearest_first(lives: Sequence[PartLife]) -> list[PartLine]:
    """By forecast; what is due or cannot be computed leads."""
    lines = [PartLine(life, life.status()) for life in lives]
    return sorted(
        lines,
        key=lambda line: (not line.overdue, line.forecast or dt.date.max, line.where),
    )
