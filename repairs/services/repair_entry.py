"""A repair as handed over, when it is planned and when it is released."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass, field

from fleet.due import Counters
from fleet.models import Aircraft, Material, Organisation, Person, SafeLifePart
from repairs.models import Disposition, Finding, Repair, Substantiation
from repairs.services.finding_guards import RECTIFIABLE as RECTIFIABLE
from repairs.services.photographs import Photo
from repairs.services.requirement_draft import RequirementDraft


@dataclass(frozen=True, slots=True)
class Answered:
    """A finding the repair answers: covered from sight, removed, margin if measured."""

    finding: Finding
    covers: bool
    damage_removed: str = "unknown"
    edge_margin_mm: float | None = None

    @property
    def answers(self) -> bool:
        """Whether the damage is gone or lies under the repair."""
        return self.covers or self.damage_removed == "yes"


@dataclass(frozen=True, slots=True)
class Layer:
    """One doubler, filler or insert, as written."""

    material_entered: str
    thickness_entered: str = ""
    thickness_mm: float | None = None
    material: Material | None = None
    batch: str = ""


@dataclass(frozen=True, slots=True)
class Required:
    """What the approved data ask for in one layer; and why another was fitted.

    An answer to a difference has its reason, its document and who gives it.
    """

    material_entered: str
    thickness_entered: str = ""
    thickness_mm: float | None = None
    material: Material | None = None
    page: str = ""
    reason: str = ""
    document: str = ""
    answered_by: Person | None = None

    @property
    def is_answered(self) -> bool:
        words = self.reason.strip() and self.document.strip()
        return bool(words) and self.answered_by is not None

    @property
    def answer(self) -> str:
        if not self.is_answered:
            return ""
        return f"{self.reason.strip()} ({self.document.strip()})"


@dataclass(frozen=True, slots=True)
class Fastener:
    """One kind of fastener used."""

    fastener: str
    diameter_mm: float | None = None
    pitch_mm: float | None = None
    edge_distance_mm: float | None = None
    rows: int | None = None
    count: int | None = None


@dataclass(frozen=True, slots=True)
class Step:
    """One part of a repair that is done in several, and the option of the data."""

    title: str
    option: str = ""
    done_on: dt.date | None = None
    done_by: Person | None = None


@dataclass(frozen=True, slots=True)
class Lies:
    """How the repair lies to an earlier one whose extent it meets: over it, apart."""

    repair: Repair
    how: str


@dataclass(frozen=True, slots=True)
class Data:
    """Approval data of a repair: a document and where in it."""

    kind: str
    reference: str
    revision: str = ""
    page: str = ""
    title: str = ""


@dataclass(frozen=True, slots=True)
class RepairEntry:
    """A repair as planned (no release date) or as released.

    A legacy one is from before our records: what is missing stays unknown.
    """

    aircraft: Aircraft
    place_entered: str
    kind: str
    description: str
    category: str
    approval_basis: str
    released_on: dt.date | None
    at: Counters = field(default_factory=Counters)
    category_reason: str = ""
    approval: Data | None = None
    release_reference: str = ""
    length_mm: float | None = None
    width_mm: float | None = None
    layers: Sequence[Layer] = ()
    required: Sequence[Required] = ()
    fasteners: Sequence[Fastener] = ()
    findings: Sequence[Answered] = ()
    steps: Sequence[Step] = ()
    lies: Sequence[Lies] = ()
    sealant: str = ""
    protection: str = ""
    work_order: str = ""
    disposition: Disposition | None = None
    substantiation: Substantiation | None = None
    inspection_required: bool | None = None
    element: str = ""
    element_label: str = ""
    surface: str = ""
    criticality: str = ""
    criticality_source: str = ""
    ata: str = ""
    chart_number: str = ""
    remaining_thickness_mm: float | None = None
    blend_depth_mm: float | None = None
    replacement_limit: Counters = field(default_factory=Counters)
    replacement_limit_on: dt.date | None = None
    stage_reached: str = "not_applicable"
    temporary_limit_cycles: int | None = None
    performed_by: Person | None = None
    inspected_by: Person | None = None
    released_by: Person | None = None
    organisation: Organisation | None = None
    legacy: bool = False
    evidence: str = "not_applicable"
    weight_change_g: int | None = None
    arm_mm: float | None = None
    supersedes: Sequence[Repair] = ()
    safe_life_part: SafeLifePart | None = None
    new_requirement: RequirementDraft | None = None
    photographs: Sequence[Photo] = ()

    @property
    def is_major(self) -> bool:
        """As the substantiation or the disposition behind it says."""
        return "major" in (
            self.substantiation.scale if self.substantiation else "",
            self.disposition.scale if self.disposition else "",
        )
