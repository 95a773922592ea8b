"""One line of the repair status: its cells as they are exported."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from fleet.amounts import counters_write
from fleet.due import Counters
from fleet.location.along import Work, station_label
from fleet.location.geometry import Section, geometry_from_toml
from fleet.location.reading import Reading
from fleet.models import Aircraft
from fleet.selectors.applicability import applies_to
from fleet.units import canonical as canonical_mm
from fleet.units import hours_write, in_unit, measure_write
from repairs.described import read_apart
from repairs.models import DueKind, DuePoint, Repair
from repairs.repair_file import RepairFile
from repairs.selectors.due_items import due_of
from repairs.selectors.edges import stated_extent

HEADER = (
    "repair no.", "chart no.", "description", "ATA", "zone", "from station",
    "to station", "stringer / WL / BL", "dimensions", "remaining material",
    "release date", "release reference", "FH", "FC", "data", "data revision",
    "approval document", "holds for this serial", "category", "linked requirements",
    "next due", "limit", "beneath", "supersedes", "file", "not in the file",
)  # fmt: skip
UNKNOWN = "unknown"
TO_BE_PLACED = "to be placed: {text}"
INSPECTED = (DueKind.THRESHOLD, DueKind.REPEAT)
BENEATH = "damage not shown to be removed"


@dataclass(frozen=True)
class RepairCells:
    """A repair with what its line is made of."""

    repair: Repair
    points: Sequence[DuePoint]
    file: RepairFile
    variant: str
    unit: str


def cells_of(line: RepairCells, aircraft: Aircraft) -> Mapping[str, Any]:
    """The cells by the names of the header."""
    repair, unit = line.repair, line.unit
    first, last, across = place_cells(repair, line.variant, unit)
    approval, release = repair.approval_document, repair.release_document
    inspected = [_due(point) for point in line.points if point.kind in INSPECTED]
    limits = [_due(point) for point in line.points if point.kind not in INSPECTED]
    minutes = repair.at_minutes
    values = (
        repair.number,
        repair.chart_number,
        _description(repair),
        repair.ata,
        repair.zone.code if repair.zone else "",
        first,
        last,
        across,
        dimensions(repair, unit),
        _thickness(repair, unit),
        repair.released_on.isoformat() if repair.released_on else "",
        release.reference if release else UNKNOWN,
        UNKNOWN if minutes is None else hours_write(minutes),
        UNKNOWN if repair.at_cycles is None else repair.at_cycles,
        approval.reference if approval else UNKNOWN,
        approval.revision if approval else "",
        f"{repair.get_approval_basis_display()} {repair.approval_page}".strip(),
        applies_to(approval, aircraft).answer if approval else UNKNOWN,
        repair.get_category_display(),
        ", ".join(str(one) for one in repair.requirements.all()),
        "; ".join(inspected),
        "; ".join(limits),
        BENEATH if repair.hides_damage else "",  # type: ignore[attr-defined]
        ", ".join(str(one) for one in repair.supersedes.all()),
        line.file.words,
        ", ".join(line.file.missing),
    )
    return dict(zip(HEADER, values, strict=True))


def _description(repair: Repair) -> str:
    """The repair type in front, unless the words begin with it."""
    kind, words = repair.get_kind_display(), read_apart(repair.description).words
    if words.lower().startswith(kind.lower()):
        return words
    return f"{kind.capitalize()}: {words}"


def place_cells(repair: Repair, variant: str, unit: str) -> tuple[str, str, str]:
    """From station, to station, and stringers or lines; as written if unplaced."""
    if repair.section is None or repair.geometry is None:
        return TO_BE_PLACED.format(text=repair.place_entered), "", ""
    section = geometry_from_toml(repair.geometry.content).section(repair.section.code)
    work = Work(Reading(""), section, variant, unit)
    word = section.station_words[0]
    along = stated_extent(repair.x1_mm, repair.x2_mm, repair.length_mm)
    assert along is not None
    ends = [f"{word} {station_label(work, _near(x, unit))}" for x in along]
    return ends[0], ends[1], _across(repair, section, work)


def _near(x_mm: float, unit: str) -> float:
    """To a tenth of an inch or a whole mm: nobody lays a doubler out closer."""
    return canonical_mm(round(in_unit(x_mm, unit), 1 if unit == "in" else 0), unit)


def dimensions(repair: Repair, unit: str) -> str:
    """Length by width, in the type's unit."""
    sizes = [repair.length_mm, repair.width_mm]
    if sizes == [None, None]:
        return UNKNOWN
    return " × ".join(
        UNKNOWN if size is None else measure_write(size, unit) for size in sizes
    )


def _across(repair: Repair, section: Section, work: Work) -> str:
    parts = []
    across = stated_extent(repair.s1_mm, repair.s2_mm, repair.width_mm)
    if across is not None:
        if section.is_shell and section.stringers:
            outward = sorted(across, key=abs) if across[1] <= 0 else across
            names = [_nearest(section, s) for s in outward]
            parts.append(" to ".join(dict.fromkeys(names)))
        else:
            chord = " to ".join(work.show(_near(s, work.unit)) for s in across)
            parts.append(f"{chord} {work.unit} aft of the front reference")
    if parts:
        return parts[0]
    if repair.wl_mm is not None:
        parts.append(f"WL {work.show(repair.wl_mm)}")
    if repair.bl_mm is not None:
        side = "L" if repair.bl_mm < 0 else "R" if repair.bl_mm else ""
        parts.append(f"{side}BL {work.show(abs(repair.bl_mm))}")
    return ", ".join(parts)


def _nearest(section: Section, s_mm: float) -> str:
    near = min(section.stringers, key=lambda t: abs(section.wrapped(s_mm - t.s_mm)))
    return near.label


def _thickness(repair: Repair, unit: str) -> str:
    if repair.kind != "blend":
        return "not applicable"
    value = repair.remaining_thickness_mm
    return UNKNOWN if value is None else measure_write(value, unit)


def _due(point: DuePoint) -> str:
    """The due value, or why it cannot be computed."""
    due = due_of(point)
    if due.cannot_compute:
        return f"due: {due.cannot_compute}"
    at = counters_write(due.at) if due.at != Counters() else ""
    when = f"{at} · {due.on}" if at and due.on else at or str(due.on)
    return f"{point.get_kind_display()} {when}"
