"""What an engineer chooses, and what was gathered from the record for it."""

from __future__ import annotations

from dataclasses import dataclass, field

from django.db import models

from fleet.models import (
    AdoptedValue,
    DetectableSize,
    FatiguePolicy,
    Material,
    Panel,
    PanelOnAircraft,
    Policy,
    Spectrum,
)
from repairs.analysis.inputs import SPECS, Value
from repairs.analysis.types import Grade, Sourced, Stated, Use
from repairs.models import Measurement, StatedInput

UsedRow = (
    Panel
    | PanelOnAircraft
    | Material
    | Spectrum
    | Measurement
    | FatiguePolicy
    | DetectableSize
    | AdoptedValue
    | Policy
    | StatedInput
)


@dataclass(frozen=True, slots=True)
class Choice:
    """What the engineer chooses when asking for an evaluation."""

    use: Use
    detectable: DetectableSize | None = None
    life_used_reason: str = ""


@dataclass(slots=True)
class Gathered:
    """Inputs found in the record, and every row that was read for them."""

    values: dict[str, Value] = field(default_factory=dict)
    rows: dict[tuple[type[models.Model], int], UsedRow] = field(default_factory=dict)

    def put(self, name: str, value: Value, *rows: UsedRow) -> None:
        """Keep an input and the rows behind it."""
        self.values[name] = value
        for row in rows:
            self.rows[type(row), row.pk] = row

    def number(
        self,
        name: str,
        value: float | None,
        source: str,
        *rows: UsedRow,
        grade: Grade = Grade.RECORDED,
    ) -> None:
        """Keep a number, unless the record does not have it."""
        if value is not None:
            where = source or "recorded without a source"
            self.put(name, Sourced(value, SPECS[name].unit, where, grade), *rows)

    def word(self, name: str, value: str, source: str, *rows: UsedRow) -> None:
        """Keep a stated word, unless it is blank."""
        if value:
            self.put(name, Stated(value, source), *rows)
