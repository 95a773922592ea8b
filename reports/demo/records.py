"""The records of the demo, as plain values: what people wrote and what was true.

Every record has a key of its own (``F-1001-014``, ``R-1001-003``); records point at
each other by key. ``Truth`` is hidden from the loaded database; tests score with it.
"""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass, field

from reports.demo.usage import Counters, Logbook


@dataclass(frozen=True, slots=True)
class Truth:
    """Where the damage really is, in inches, and how far its text may be off."""

    section: str
    sta: float
    x_in: float
    across_in: float | None
    x_tolerance_in: float
    across_tolerance_in: float


@dataclass(frozen=True, slots=True)
class Dimension:
    """One measured number as written, and the ratio the technician worked out."""

    quantity: str
    entered: str
    worked_out: float | None = None


@dataclass(frozen=True, slots=True)
class DemoEvent:
    key: str
    msn: int
    kind: str
    happened_on: dt.date
    at: Counters
    description: str


@dataclass(frozen=True, slots=True)
class DemoFinding:
    """One finding with its measurements; ``state`` is where it stands today."""

    key: str
    msn: int
    found_on: dt.date
    at: Counters
    location: str
    truth: Truth
    damage_type: str
    element: str
    element_label: str
    surface: str
    cause: str
    occasion: str
    method: str
    reporter: str
    state: str
    description: str
    dimensions: tuple[Dimension, ...]
    reworked: tuple[Dimension, ...] = ()
    cluster_count: int = 1
    event: str = ""
    true_dimensions: tuple[Dimension, ...] = ()

    def entered(self, quantity: str) -> str:
        """The dimension as written; '' if it was not measured."""
        return next((d.entered for d in self.dimensions if d.quantity == quantity), "")


@dataclass(frozen=True, slots=True)
class DemoDocument:
    """What a decision rests on: kind, reference, revision and page."""

    kind: str
    reference: str
    revision: str
    page: str
    issuer: str
    held: bool = True


@dataclass(frozen=True, slots=True)
class DemoDisposition:
    key: str
    msn: int
    findings: tuple[str, ...]
    kind: str
    document: DemoDocument
    decided_by: str
    decided_on: dt.date
    at: Counters
    statement: str
    limits: tuple[DemoLimit, ...] = ()
    inspections: tuple[DemoLimit, ...] = ()


@dataclass(frozen=True, slots=True)
class DemoLimit:
    """A number with its counter: minutes, cycles, days or months; as it was written."""

    counter: str
    value: int
    entered: str
    base: str = ""


@dataclass(frozen=True, slots=True)
class DemoRepair:
    """An embodied repair: what it answers, what it is made of, who released it."""

    key: str
    msn: int
    kind: str
    location: str
    truth: Truth
    length_in: float
    width_in: float
    released_on: dt.date
    at: Counters
    category: str
    category_reason: str
    document: DemoDocument
    performed_by: str
    inspected_by: str
    released_by: str
    description: str
    findings: tuple[str, ...] = ()
    damage_removed: str = "yes"
    edge_margin_in: float | None = None
    layers: tuple[tuple[str, str], ...] = ()
    fasteners: tuple[DemoFastener, ...] = ()
    replace_by: tuple[DemoLimit, ...] = ()
    stage_due_on: dt.date | None = None
    temporary_limit_cycles: int | None = None
    legacy: bool = False

    @property
    def covers(self) -> bool:
        """Whether it hides what lies under it."""
        return self.kind in ("external_doubler", "flush", "splice", "bonded")


@dataclass(frozen=True, slots=True)
class DemoFastener:
    name: str
    diameter: str
    pitch: str
    edge_distance: str
    rows: int
    count: int


@dataclass(frozen=True, slots=True)
class DemoAccomplishment:
    done_on: dt.date
    at: Counters
    result: str
    performed_by: str
    note: str = ""


@dataclass(frozen=True, slots=True)
class DemoSubject:
    """One aircraft under a requirement: applicable or why not, and what was done."""

    msn: int
    applicable: bool = True
    reason: str = ""
    accomplishments: tuple[DemoAccomplishment, ...] = ()


@dataclass(frozen=True, slots=True)
class DemoRequirement:
    """An inspection requirement; its origin is a repair, a finding or a document."""

    key: str
    kind: str
    title: str
    document: DemoDocument
    task: str
    method: str
    area: str
    criteria: str
    effective_on: dt.date
    thresholds: tuple[DemoLimit, ...]
    repeats: tuple[DemoLimit, ...]
    subjects: tuple[DemoSubject, ...]
    repair: str = ""
    finding: str = ""


@dataclass(frozen=True, slots=True)
class DemoPartNumber:
    number: str
    title: str
    position: str


@dataclass(frozen=True, slots=True)
class DemoLifeLimit:
    """A life limit; ``configuration`` is a variant code or '' for every one."""

    part_number: str
    configuration: str
    counter: str
    value: int
    base: str


@dataclass(frozen=True, slots=True)
class DemoStint:
    """A part on an aircraft; ``removed_on`` is None while it is there."""

    msn: int
    position: str
    fitted_on: dt.date
    fitted_at: Counters
    removed_on: dt.date | None = None
    removed_at: Counters | None = None
    reason: str = ""


@dataclass(frozen=True, slots=True)
class DemoEarlierLife:
    """Life before our records, or a gap in them."""

    kind: str
    begin: dt.date
    until: dt.date
    run: Counters
    evidence: str


@dataclass(frozen=True, slots=True)
class DemoPart:
    key: str
    part_number: str
    serial: str
    manufactured_on: dt.date
    stints: tuple[DemoStint, ...]
    earlier: tuple[DemoEarlierLife, ...] = ()


@dataclass(frozen=True)
class Scenario:
    """Everything the demo loads, and which records were planted for which case."""

    seed: int
    today: dt.date
    logbooks: dict[int, Logbook]
    events: list[DemoEvent]
    findings: list[DemoFinding]
    dispositions: list[DemoDisposition]
    repairs: list[DemoRepair]
    requirements: list[DemoRequirement]
    part_numbers: list[DemoPartNumber]
    life_limits: list[DemoLifeLimit]
    parts: list[DemoPart]
    planted: dict[str, list[str]] = field(default_factory=dict)
