"""What lies round a finding or repair, and the panel under it, for a calculation."""

from __future__ import annotations

from dataclasses import dataclass

from fleet.location.geometry import Box
from fleet.location.geometry import Section as SectionGeometry
from fleet.models import AircraftType, GeometryRevision, Panel, PanelOnAircraft
from fleet.selectors.kept import of_the_fleet
from fleet.selectors.structure import geometry_in_force
from repairs.analysis.surroundings import Obstacle, ObstacleKind, Surroundings
from repairs.models import Finding, Repair
from repairs.selectors.neighbours import repairs_shown, section_geometry, true_x

Subject = Finding | Repair
PLACE = ("number", "x1_mm", "x2_mm", "s1_mm", "s2_mm", "length_mm", "width_mm")
"""Of a repair, what says where its edges are."""


@dataclass(frozen=True, slots=True)
class Skin:
    """The panel under a location as it is on this aircraft.

    `fitted` is the row that says how this tail differs; thickness is the surround's
    inside one. A width across is a shell's.
    """

    panel: Panel
    fitted: PanelOnAircraft | None
    thickness_mm: float | None
    thickness_source: str
    length_across_crack_mm: float | None
    width_mm: float | None


def skin_under(subject: Subject) -> Skin | None:
    """The panel of the geometry in force, or None if there is none here."""
    panel, section = _panel(subject), section_geometry(subject)
    if panel is None or section is None or subject.map_mm is None:
        return None
    fitted = _fitted(subject, panel)
    thickness, source = _thickness(subject, section, panel, fitted)
    length, width = _sizes(subject, section, panel)
    return Skin(panel, fitted, thickness, source, length, width)


def _panel(subject: Subject) -> Panel | None:
    """The panel read with the place, as the geometry in force has it now."""
    if subject.panel is None:
        return None
    revision = _in_force(subject.aircraft.variant.aircraft_type)
    if revision is None or revision.pk == subject.panel.geometry_id:
        return subject.panel
    return Panel.objects.filter(
        geometry=revision, section=subject.section, label=subject.panel.label
    ).first()


@of_the_fleet
def _in_force(made: AircraftType) -> GeometryRevision | None:
    return geometry_in_force(made)


def _fitted(subject: Subject, panel: Panel) -> PanelOnAircraft | None:
    """The newest row of this tail for the panel whose extent holds the location."""
    rows = subject.aircraft.panels.filter(
        panel__section=panel.section, panel__label=panel.label, replaced_by__isnull=True
    ).order_by("-from_on", "-pk")
    return next((row for row in rows if _holds(row, subject)), None)


def _holds(row: PanelOnAircraft, subject: Subject) -> bool:
    along = _inside(row.map1_mm, subject.map_mm, row.map2_mm)
    return along and _inside(row.s1_mm, subject.s1_mm, row.s2_mm)


def _inside(low: float | None, value: float | None, high: float | None) -> bool:
    """Whether a stated extent holds a value; no extent is the whole panel."""
    if low is None or high is None:
        return True
    return value is not None and low <= value <= high


def _thickness(
    subject: Subject,
    section: SectionGeometry,
    panel: Panel,
    fitted: PanelOnAircraft | None,
) -> tuple[float | None, str]:
    if fitted is not None and fitted.thickness_mm is not None:
        return fitted.thickness_mm, f"panel on this aircraft: {fitted.source}"
    if subject.map_mm is not None and subject.s1_mm is not None:
        around = section.surround_at(subject.map_mm, middle_s(subject))
        if around is not None:
            return around.surround_thickness_mm, f"surround of {around.label}"
    return panel.thickness_mm, f"panel {panel.label}: {panel.source}"


def _sizes(
    subject: Subject, section: SectionGeometry, panel: Panel
) -> tuple[float, float | None]:
    """Panel length along the crack and width: along and across a shell, else across."""
    variant = subject.aircraft.variant.code
    scale = section.scale_at(subject.map_mm or panel.map1_mm)
    across = (panel.s2_mm - panel.s1_mm) * scale
    if not section.is_shell:
        return across, None
    ends = [true_x(section, at, variant) for at in (panel.map1_mm, panel.map2_mm)]
    return ends[1] - ends[0], across


def middle_s(subject: Subject) -> float:
    """The middle of a stated extent across [mm]."""
    return ((subject.s1_mm or 0.0) + (subject.s2_mm or 0.0)) / 2


def surroundings_of(
    subject: Subject, half_along_mm: float, *, as_found: bool
) -> Surroundings | None:
    """Bay, cut-outs, joint rows and repairs round a location; None if unplaced.

    A location without a statement across has unknown surroundings. Blend-outs are not
    repair edges: their depths are summed instead. Damage as found was there before the
    repair that answers it.
    """
    section = section_geometry(subject)
    if section is None or subject.s1_mm is None or subject.x1_mm is None:
        return None
    middle = (subject.x1_mm + (subject.x2_mm or subject.x1_mm)) / 2
    stated = ((subject.x2_mm or subject.x1_mm) - subject.x1_mm) / 2
    frames = _bay(section, middle, subject.aircraft.variant.code)
    return Surroundings(
        x=middle,
        s=0.0,
        half_along=max(half_along_mm, stated),
        bay=frames[0],
        bay_label=frames[1],
        obstacles=(
            *_from_geometry(subject, section),
            *_from_repairs(subject, section, as_found),
        ),
        source=f"geometry {subject.geometry}",
    )


def _bay(
    section: SectionGeometry, x: float, variant: str
) -> tuple[tuple[float, float] | None, str]:
    lines = sorted(
        (at, frame.label)
        for frame in section.frames
        if (at := frame.x_mm(variant)) is not None
    )
    before = [line for line in lines if line[0] <= x]
    after = [line for line in lines if line[0] > x]
    if not before or not after:
        return None, ""
    (low, first), (high, second) = before[-1], after[0]
    name = section.frame_prefix
    return (low, high), f"{name} {first} to {name} {second}"


def _from_geometry(subject: Subject, section: SectionGeometry) -> list[Obstacle]:
    boxes = [(ObstacleKind.CUTOUT, c.label, c.box) for c in section.cutouts]
    boxes += [(ObstacleKind.JOINT, j.label, j.box) for j in section.joints]
    variant = subject.aircraft.variant.code

    def ends(box: Box) -> tuple[float, float]:
        low, high = box.map1_mm, box.map2_mm
        return true_x(section, low, variant), true_x(section, high, variant)

    return [
        _obstacle(subject, section, kind, label, ends(box), box)
        for kind, label, box in boxes
    ]


def _from_repairs(
    subject: Subject, section: SectionGeometry, as_found: bool
) -> list[Obstacle]:
    rows = repairs_shown(
        Repair.objects.filter(
            aircraft=subject.aircraft_id,
            section=subject.section_id,
            s1_mm__isnull=False,
        )
    ).exclude(kind="blend")
    if isinstance(subject, Repair):
        rows = rows.exclude(pk=subject.pk)
    elif as_found:
        rows = rows.exclude(finding_rows__finding=subject)
    return [_repair(subject, section, row) for row in rows.only(*PLACE)]


def _repair(subject: Subject, section: SectionGeometry, row: Repair) -> Obstacle:
    x = _grown(row.x1_mm or 0.0, row.x2_mm or 0.0, row.length_mm)
    s = _grown(row.s1_mm or 0.0, row.s2_mm or 0.0, row.width_mm)
    box = Box(0.0, 0.0, *s)
    return _obstacle(subject, section, ObstacleKind.REPAIR, row.number, x, box)


def _grown(low: float, high: float, size: float | None) -> tuple[float, float]:
    """The stated extent, or the recorded size about its middle if that is larger."""
    middle, half = (low + high) / 2, (size or 0.0) / 2
    return min(low, middle - half), max(high, middle + half)


def _obstacle(
    subject: Subject,
    section: SectionGeometry,
    kind: ObstacleKind,
    label: str,
    x: tuple[float, float],
    box: Box,
) -> Obstacle:
    """A rectangle with true distances across from the location, the shorter way."""
    scale = section.scale_at(subject.map_mm or 0.0)
    low, high = box.s1_mm - middle_s(subject), box.s2_mm - middle_s(subject)
    turns = (-1, 0, 1) if section.wrap_mm else (0,)
    shifts = [turn * (section.wrap_mm or 0.0) for turn in turns]
    shift = min(shifts, key=lambda k: max(low + k, -(high + k), 0.0))
    return Obstacle(
        kind, label, x[0], x[1], (low + shift) * scale, (high + shift) * scale
    )
