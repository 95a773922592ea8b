"""What the pages of findings show: one line in a list, or everything about one."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from functools import cached_property

from django.db.models import QuerySet

from fleet.amounts import counters_write
from fleet.due import Counters
from fleet.models import User
from fleet.units import measure_write
from repairs.measurements import DIMENSIONS, SIZE_ORDER, Dimension, Kind, ratios
from repairs.models import (
    ASIDE_STATES,
    Disposition,
    Finding,
    InspectionRequirement,
    LimitCheck,
    MeasuredValue,
    Measurement,
    Photograph,
    Repair,
    RepairFinding,
)
from repairs.selectors.edges import earlier_blends
from repairs.selectors.signatures import Signature, approvals_verified

UNSTATED = "—"
CHECK_WORDS = {
    "within": "within recorded limit",
    "beyond": "beyond recorded limit",
    "not_covered": "no recorded limit applies",
    "missing_input": "cannot be compared: a dimension is not known",
}


def findings_listed(user: User) -> QuerySet[Finding]:
    """Findings the user may see, with all that a line of the list shows."""
    return (
        Finding.objects.visible_to(user)
        .select_related("aircraft__variant__aircraft_type", "section", "panel")
        .prefetch_related("measurements__values")
    )


def earlier_findings(finding: Finding, user: User) -> QuerySet[Finding]:
    """Findings of the same aircraft that were recorded before this one."""
    rows = Finding.objects.visible_to(user).filter(aircraft=finding.aircraft_id)
    return rows.filter(pk__lt=finding.pk).order_by("-pk")


def to_place_count(user: User) -> int:
    """Findings on no map: their location could not be read."""
    rows = Finding.objects.visible_to(user).exclude(state__in=ASIDE_STATES)
    return rows.filter(section__isnull=True).count()


def finding_whole(user: User) -> QuerySet[Finding]:
    """Findings with what their own page shows at the top."""
    return Finding.objects.visible_to(user).select_related(
        "aircraft__variant__aircraft_type",
        "aircraft__operator",
        "operator",
        "section",
        "geometry",
        "panel__material",
        "zone",
        "event",
        "found_by",
        "safe_life_part",
        "entered_by",
    )


@dataclass(frozen=True)
class Line:
    """A finding in a list, with its size in words."""

    finding: Finding

    @cached_property
    def size(self) -> str:
        return size_words(list(self.finding.measurements.all()))

    @property
    def location(self) -> str:
        return self.finding.place_text or self.finding.place_entered


@dataclass(frozen=True)
class Row:
    """One dimension over all measurings, as typed; and by how much it grew."""

    dimension: Dimension
    values: Sequence[str]
    grown: str = ""


@dataclass(frozen=True)
class Sizes:
    """All measurings of a finding, side by side."""

    measurements: Sequence[Measurement]
    rows: Sequence[Row]
    ratios: Sequence[tuple[str, str]]

    @property
    def columns(self) -> int:
        """Columns after the first of the table."""
        return len(self.measurements) + 1


@dataclass(frozen=True)
class Decided:
    """A disposition with its later revision, if there is one."""

    disposition: Disposition
    current: bool


@dataclass(frozen=True)
class Around:
    """Everything that hangs on a finding but the neighbours."""

    sizes: Sizes
    dispositions: list[Decided] = field(default_factory=list)
    requirements: list[InspectionRequirement] = field(default_factory=list)
    repairs: list[RepairFinding] = field(default_factory=list)
    checks: list[tuple[LimitCheck, str]] = field(default_factory=list)
    photographs: list[Photograph] = field(default_factory=list)
    approvals: list[Signature] = field(default_factory=list)
    blends: list[Repair] = field(default_factory=list)

    @property
    def limit(self) -> str:
        """The limit of the decision that holds, in words; empty without one."""
        holds = [one.disposition for one in self.dispositions if one.current]
        if not holds:
            return ""
        row = holds[0]
        at = Counters(row.limit_minutes, row.limit_cycles, row.limit_landings)
        parts = [counters_write(at), str(row.limit_on or "")]
        return " · ".join(part for part in parts if part)


def finding_around(finding: Finding) -> Around:
    """The records that hang on a finding; a fixed number of queries."""
    measurements = list(
        finding.measurements.select_related("measured_by").prefetch_related(
            "values", "holes"
        )
    )
    decided = Disposition.objects.filter(finding_rows__finding=finding)
    dispositions = list(
        decided.select_related(
            "basis_document", "decided_by", "authorisation", "replaced_by"
        ).order_by("-decided_on", "-pk")
    )
    raised = InspectionRequirement.objects.filter(
        finding=finding
    ) | InspectionRequirement.objects.filter(disposition__finding_rows__finding=finding)
    return Around(
        sizes=sizes_of(finding, measurements),
        dispositions=[
            Decided(row, not hasattr(row, "replaced_by")) for row in dispositions
        ],
        requirements=list(raised.distinct()),
        repairs=list(finding.repair_rows.select_related("repair__approval_document")),
        checks=[
            (row, CHECK_WORDS[row.outcome])
            for row in finding.limit_checks.select_related("limit__document")
        ],
        photographs=list(finding.photographs.select_related("attachment")),
        approvals=approvals_verified(finding),
        blends=list(earlier_blends(finding)),
    )


def disposition_whole() -> QuerySet[Disposition]:
    """Dispositions with what their page shows at the top."""
    return Disposition.objects.select_related(
        "aircraft",
        "basis_document",
        "decided_by",
        "authorisation",
        "replaces",
        "entered_by",
    )


def sizes_of(finding: Finding, measurements: Sequence[Measurement]) -> Sizes:
    """A table of dimensions by measuring, and the ratios of the last."""
    by_number = [
        {value.quantity: value for value in one.values.all()} for one in measurements
    ]
    rows = [
        _row(dimension, [one.get(dimension.quantity) for one in by_number])
        for dimension in DIMENSIONS[finding.damage_type]
        if any(dimension.quantity in one for one in by_number)
    ]
    last: dict[str, float] = {}
    for one in by_number:
        last |= {q: v.value for q, v in one.items() if v.value is not None}
    found = ratios(finding.damage_type, last)
    told = [(r.name.replace("_", " "), f"{value:.3g}") for r, value in found]
    return Sizes(measurements, rows, told)


def size_words(measurements: Sequence[Measurement]) -> str:
    """The size in a few words, as typed: "2.4 in × 1.8 in × 0.040 in"."""
    last: dict[str, str] = {}
    for one in sorted(measurements, key=lambda row: row.number):
        last |= {v.quantity: v.entered for v in one.values.all() if v.value is not None}
    box = [last[q] for q in ("length_mm", "width_mm", "depth_mm") if q in last]
    if box:
        return " × ".join(box)
    return next((last[q] for q in SIZE_ORDER if q in last), UNSTATED)


def value_words(value: MeasuredValue | None, dimension: Dimension) -> str:
    """As typed, with the canonical value where the unit differs."""
    if value is None:
        return UNSTATED
    if value.status != "known":
        return value.get_status_display().replace("_", " ")
    if value.word:
        return dict(dimension.words).get(value.word, value.word)
    if dimension.kind is not Kind.LENGTH or value.value is None:
        return value.entered
    metric = measure_write(value.value, "mm")
    return value.entered if value.entered == metric else f"{value.entered} ({metric})"


def _row(dimension: Dimension, values: Sequence[MeasuredValue | None]) -> Row:
    shown = [value_words(value, dimension) for value in values]
    known = [v for v in values if v is not None and v.value is not None]
    return Row(dimension, shown, _grown(dimension, known))


def _grown(dimension: Dimension, known: Sequence[MeasuredValue]) -> str:
    """By how much the last exceeds the first, beyond what the gauge may be off."""
    if dimension.kind is not Kind.LENGTH or len(known) < 2:
        return ""
    first, last = known[0], known[-1]
    if first.value is None or last.value is None:
        return ""
    spread = (first.uncertainty or 0.0) + (last.uncertainty or 0.0)
    more = last.value - first.value
    return f"+{measure_write(more, 'mm')}" if more > spread + 1e-9 else ""
