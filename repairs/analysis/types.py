"""Values of the calculation part.

All lengths mm, forces N, stresses and pressures MPa, stress-intensity factors
MPa*sqrt(mm), lives in cycles. Conventions that break comparison between sources are
types of their own: half or full crack length, length from the hole edge, gross or net
stress.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from enum import StrEnum
from typing import NewType

from repairs.analysis.errors import NOT_FINITE, WITHOUT_SOURCE, InputError

HalfLength = NewType("HalfLength", float)
"""Half of a crack with two tips, a [mm]."""
FullLength = NewType("FullLength", float)
"""Tip to tip, 2a [mm]."""
EdgeLength = NewType("EdgeLength", float)
"""Crack length from the edge it starts at, c [mm]; never from a hole's centre."""
GrossStress = NewType("GrossStress", float)
"""Load over the whole section, as if neither hole nor crack were there [MPa]."""
NetStress = NewType("NetStress", float)
"""Load over the section that is left [MPa]."""

ROOT_1000 = math.sqrt(1000.0)
"""MPa*sqrt(mm) in one MPa*sqrt(m)."""
KSI = 6.894757293168361
"""MPa in one ksi: 4.4482216152605 N / (25.4 mm)^2 x 1000, exact by definition."""
INCH = 25.4
"""mm in one inch, exact."""
KSI_ROOT_INCH = KSI * math.sqrt(INCH)
"""MPa*sqrt(mm) in one ksi*sqrt(in)."""


def half(length: FullLength) -> HalfLength:
    """Return half of a tip-to-tip length [mm]."""
    return HalfLength(length / 2.0)


def full(length: HalfLength) -> FullLength:
    """Return the tip-to-tip length of a half-length [mm]."""
    return FullLength(2.0 * length)


class Grade(StrEnum):
    """How well a number's origin is known.

    `DERIVED`: exact, derivable by hand, and proved by a second route in the tests.
    """

    PRINT = "print"
    DERIVED = "derived"
    QUOTED = "quoted"
    MEMORY = "memory"
    ADOPTED = "adopted"
    RECORDED = "recorded"


class Use(StrEnum):
    """What a result is for; the two are never mixed."""

    FOUND_DAMAGE = "found_damage"
    NO_KNOWN_CRACK = "no_known_crack"


class Outcome(StrEnum):
    """How an evaluation ends."""

    COMPUTED = "computed"
    NOT_COVERED = "not_covered"
    MISSING_INPUT = "missing_input"


class UltimateKept(StrEnum):
    """Whether static ultimate strength is kept; unchecked cases leave it not shown."""

    YES = "yes"
    NO = "no"
    NOT_SHOWN = "not_shown"


@dataclass(frozen=True, slots=True)
class Reference:
    """Where a formula or a table is published, and how it was read."""

    source: str
    grade: Grade

    def __post_init__(self) -> None:
        if not self.source.strip():
            raise InputError(WITHOUT_SOURCE.format(what="A reference"))


@dataclass(frozen=True, slots=True)
class Sourced:
    """A number with its unit, where it is from, and how well that is known."""

    value: float
    unit: str
    source: str
    grade: Grade

    def __post_init__(self) -> None:
        if not math.isfinite(self.value):
            raise InputError(NOT_FINITE.format(what="A number", value=self.value))
        if not self.source.strip():
            raise InputError(WITHOUT_SOURCE.format(what=f"{self.value} {self.unit}"))


@dataclass(frozen=True, slots=True)
class Stated:
    """A fact in words (yes, no, skin, longitudinal) with the record it is from."""

    value: str
    source: str
    grade: Grade = Grade.RECORDED

    def __post_init__(self) -> None:
        if not self.source.strip():
            raise InputError(WITHOUT_SOURCE.format(what=repr(self.value)))


@dataclass(frozen=True, slots=True)
class Applicability:
    """One test of whether a method may be used, with both numbers.

    `met` is None where the record does not say what the test needs.
    """

    test: str
    value: str
    limit: str
    met: bool | None


@dataclass(frozen=True, slots=True)
class MissingInput:
    """An input the method needs and the record lacks, and where to enter it."""

    name: str
    title: str
    where: str


@dataclass(frozen=True, slots=True)
class Life:
    """Cycles from a stated base to a stated end, always whole and rounded down."""

    title: str
    cycles: int | None
    base: str
    remark: str = ""


@dataclass(frozen=True, slots=True)
class Interval:
    """A proposed threshold or repeat interval with what it was cut down from."""

    cycles: int | None
    uncapped: int | None
    cap: str
    base: str


@dataclass(frozen=True, slots=True)
class Margin:
    """What one mechanism bears beside what one case asks [MPa]; None = not checked."""

    method: str
    mechanism: str
    case: str
    strength: float
    required: float | None

    @property
    def value(self) -> float | None:
        """Strength over required, minus one [-]."""
        return None if self.required is None else self.strength / self.required - 1


@dataclass(frozen=True, slots=True)
class Plan:
    """Chance that the proposed threshold and repeat find the crack [-]: mean over
    phase, worst phase, as scheduled; the target and the longest repeat that meets it.
    """

    mean: float
    worst: float
    scheduled: float
    target: float | None
    longest: int | None


@dataclass(frozen=True, slots=True)
class Mark:
    """A horizontal line or a named point on a curve."""

    label: str
    y: float
    x: float | None = None


@dataclass(frozen=True, slots=True)
class Curve:
    """A drawn relation: points, horizontal marks, named points, axes with units."""

    key: str
    title: str
    x_label: str
    x_unit: str
    y_label: str
    y_unit: str
    points: tuple[tuple[float, float], ...]
    marks: tuple[Mark, ...] = ()


@dataclass(frozen=True, slots=True)
class NoteLine:
    """One step of a calculation: symbol, formula, numbers, value, unit, source."""

    number: int
    symbol: str
    formula: str
    substitution: str
    value: float | None
    unit: str
    source: str
    grade: Grade | None


@dataclass(frozen=True)
class Result:
    """Everything one evaluation says. A number is None where none may be given."""

    method: str
    version: int
    title: str
    use: Use
    outcome: Outcome
    applicability: tuple[Applicability, ...] = ()
    missing: tuple[MissingInput, ...] = ()
    warnings: tuple[str, ...] = ()
    note: tuple[NoteLine, ...] = ()
    curves: tuple[Curve, ...] = ()
    governing: str = ""
    residual_strength_mpa: float | None = None
    required_residual_mpa: float | None = None
    residual_case: str = ""
    margin_residual: float | None = None
    ultimate_mpa: float | None = None
    ultimate_case: str = ""
    margin_ultimate: float | None = None
    ultimate_kept: UltimateKept = UltimateKept.NOT_SHOWN
    cases_not_checked: tuple[str, ...] = ()
    lives: tuple[Life, ...] = ()
    life_cycles: int | None = None
    life_base: str = ""
    life_after_factor_cycles: int | None = None
    scatter_factor: float | None = None
    threshold: Interval | None = None
    repeat: Interval | None = None
    plan: Plan | None = None
    margins: tuple[Margin, ...] = ()
    assumptions: tuple[str, ...] = ()
    source_from_memory: bool = False
    barred: tuple[str, ...] = field(default=())

    @property
    def threshold_cycles(self) -> int | None:
        """Proposed threshold after caps [cycles]."""
        return self.threshold.cycles if self.threshold else None

    @property
    def repeat_cycles(self) -> int | None:
        """Proposed repeat interval after caps [cycles]."""
        return self.repeat.cycles if self.repeat else None
