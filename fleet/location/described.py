"""What the structure is at a position: panel, bay, zone, thickness, material."""

from __future__ import annotations

from bisect import bisect_right
from dataclasses import replace

from fleet.location.along import Work
from fleet.location.parts import TINY_MM, Panel
from fleet.location.place import Place, Position
from fleet.location.sections import Section
from fleet.location.typegeometry import TypeGeometry, Zone
from fleet.location.writing import write


def described(work: Work, geometry: TypeGeometry, position: Position) -> Place:
    """The place with everything looked up there."""
    section = work.section
    map_mm = section.map_of((position.x1_mm + position.x2_mm) / 2.0, work.variant)
    s_mm = None
    if position.s1_mm is not None and position.s2_mm is not None:
        s_mm = (position.s1_mm + position.s2_mm) / 2.0
    cutout = None
    if s_mm is not None and position.surface != "internal":
        cutout = section.cutout_at(map_mm, s_mm)
    if cutout is not None and cutout.filled_by:
        section = geometry.section(cutout.filled_by)
        position = replace(
            position,
            section=section.code,
            element="door_structure",
            element_label=section.title,
        )
    elif cutout is not None:
        position = replace(
            position, element="other", element_label=cutout.label.lower()
        )
    elif not position.element:
        position = replace(position, element="skin")
    panel = None
    if s_mm is not None and position.surface != "internal":
        panel = section.panel_at(map_mm, s_mm, position.surface)
    in_window = cutout is not None and not cutout.filled_by
    if in_window:
        panel = None
    zone = _zone(geometry, section, position, map_mm, s_mm)
    return Place(
        entered=work.reading.text,
        canonical=write(work, position),
        codes=tuple(dict.fromkeys(work.codes)),
        section=section.code,
        variant=position.variant,
        x1_mm=position.x1_mm,
        x2_mm=position.x2_mm,
        map_mm=map_mm,
        s1_mm=position.s1_mm,
        s2_mm=position.s2_mm,
        surface=position.surface,
        element=position.element,
        element_label=position.element_label,
        side=position.side,
        bl_mm=_bl(section, position, map_mm, s_mm),
        wl_mm=_wl(section, position, map_mm, s_mm),
        along_half=section.half_along(map_mm),
        around_half=None if s_mm is None else section.half_across(s_mm),
        bay=_bay(work, map_mm, s_mm),
        panel=panel.label if panel else None,
        zone=zone.code if zone else None,
        thickness_mm=_thickness(section, map_mm, s_mm, position, panel),
        material=_material(panel),
        criticality=panel.criticality if panel else "unknown",
    )


def _bl(
    section: Section, position: Position, map_mm: float, s_mm: float | None
) -> float | None:
    """The butt line as read, or that of the skin there."""
    if s_mm is None or not section.is_shell or section.axis_wl_mm is None:
        return position.bl_mm
    return section.bl_of(map_mm, s_mm)


def _wl(
    section: Section, position: Position, map_mm: float, s_mm: float | None
) -> float | None:
    """The water line as read, or that of the skin there."""
    if s_mm is None or not section.is_shell:
        return position.wl_mm
    return section.wl_of(map_mm, s_mm)


def _thickness(
    section: Section,
    map_mm: float,
    s_mm: float | None,
    position: Position,
    panel: Panel | None,
) -> float | None:
    if panel is None or s_mm is None:
        return None
    return section.thickness_at(map_mm, s_mm, position.surface)


def _material(panel: Panel | None) -> str | None:
    if panel is None:
        return None
    material = panel.material
    return " ".join(x for x in (material.name, material.temper, material.form) if x)


def _zone(
    geometry: TypeGeometry,
    section: Section,
    position: Position,
    map_mm: float,
    s_mm: float | None,
) -> Zone | None:
    if s_mm is not None and position.surface != "internal":
        return geometry.zone_of_skin(section, map_mm, s_mm)
    wl_mm = position.wl_mm
    if wl_mm is None:
        wl_mm = _plane_wl(section, position.element)
    if wl_mm is None and s_mm is not None and section.is_shell:
        wl_mm = section.wl_of(map_mm, s_mm)
    side = "R" if position.side == "LR" else position.side
    return geometry.zone_at(section, map_mm, side=side, wl_mm=wl_mm)


def _plane_wl(section: Section, element: str) -> float | None:
    """Water line of the plane that the element runs in."""
    kind = {"floor_beam": "floor"}.get(element, element)
    lines = (p.wl_mm for p in section.planes if p.kind == kind)
    return next(lines, None)


def _bay(work: Work, map_mm: float, s_mm: float | None) -> str:
    """ "FR 28–29, S-7R to S-8R": the frames and stringers about the place."""
    section = work.section
    here, _ = section.frames_on(work.variant)
    count = bisect_right(here, map_mm + TINY_MM, key=lambda f: f.map_mm)
    prefix = section.frame_prefix
    if 0 < count < len(here):
        text = f"{prefix} {here[count - 1].label}–{here[count].label}"
    elif count < len(here):
        text = f"ahead of {prefix} {here[0].label}"
    else:
        text = f"beyond {prefix} {here[-1].label}" if here else ""
    lines = section.stringers
    if s_mm is None or not lines:
        return text
    if section.is_shell:
        one = lines[section.bay_across(s_mm)]
        other = lines[(section.bay_across(s_mm) + 1) % len(lines)]
        upper, lower = sorted((one, other), key=lambda t: t.number)
        return f"{text}, {upper.label} to {lower.label}"
    number = section.bay_across(s_mm)
    if number == 0:
        return f"{text}, ahead of {lines[0].label}"
    if number == len(lines):
        return f"{text}, behind {lines[-1].label}"
    return f"{text}, {lines[number - 1].label} to {lines[number].label}"
