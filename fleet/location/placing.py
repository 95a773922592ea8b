"""Second stage: a reading on the structure of one variant, or a refusal."""

from __future__ import annotations

from dataclasses import replace

from fleet.location.across import reach_of
from fleet.location.along import (
    Work,
    did_you_mean,
    door_cutout,
    door_x,
    station_word,
    x_range,
)
from fleet.location.parts import TINY_MM, Panel, Plane
from fleet.location.place import LocationRefused, Place, Position
from fleet.location.reach import Reach
from fleet.location.reading import Offer, Problem, Reading
from fleet.location.sections import Section
from fleet.location.typegeometry import TypeGeometry, Zone
from fleet.location.words import INTERNAL
from fleet.location.writing import write

SECTION_UNKNOWN = "This type has no section “{name}”. It has {offers}."
SECTION_SIDE = "“{text}” does not say which side. Did you mean {offers}?"
NOT_HERE = "{what} is not a notation of the {section}; use {words}."
OFF_PLANE = "No {what} runs at {at} on this {section}.{offers}"
NO_BULKHEAD = "This {section} has no such bulkhead; it has {offers}."

TRACK_IN = 1.0
"""How near to its butt line a seat track may be written."""


def place(reading: Reading, geometry: TypeGeometry, variant: str) -> Place:
    """Where the reading lies on this variant; LocationRefused if nowhere."""
    geometry.variant(variant)
    section = _section(reading, geometry)
    work = Work(reading, section, variant, geometry.unit, list(reading.codes))
    if reading.problems:
        raise _refused(work, reading.problems[0])
    _notation(work)
    position = _position(work)
    return _described(work, geometry, position)


def _refused(work: Work, problem: Problem) -> LocationRefused:
    """The reading's question; an offset offered must be shorter than the pitch."""
    offers = problem.offers
    if problem.code == "E_AMBIG_MINUS" and len(offers) > 1:
        pitch = work.section.frame_pitch_mm
        first, other = offers[0], offers[1]
        taken_off = work.mm_in(other.numbers[0] - first.numbers[0])
        if pitch and taken_off >= pitch - TINY_MM:
            offers = (other,)
    return LocationRefused(problem.code, problem.message, offers)


# -- which section ------------------------------------------------------------


def _section(reading: Reading, geometry: TypeGeometry) -> Section:
    """The section that the words of the reading name."""
    name = reading.section or "fuselage"
    own = [s for s in geometry.sections if not s.parent]
    named = [s for s in own if name in s.words]
    if not named:
        listed = tuple(Offer("section", s.title) for s in own)
        shown = ", ".join(offer.text for offer in listed)
        message = SECTION_UNKNOWN.format(name=name, offers=shown)
        raise LocationRefused("E_SECTION_MISMATCH", message, listed)
    if len(named) == 1:
        return named[0]
    for section in named:
        if section.side == reading.side:
            return section
    if reading.problems:
        return named[0]
    offers = tuple(Offer("side", f"{s.side}H {reading.text.strip()}") for s in named)
    text = reading.text.strip()
    shown = " or ".join(offer.text for offer in offers)
    message = SECTION_SIDE.format(text=text, offers=shown)
    raise LocationRefused("E_SIDE_MISSING", message, offers)


def _notation(work: Work) -> None:
    """Stations, frames and ribs must be those of the section."""
    reading, section = work.reading, work.section
    words = " or ".join((*section.station_words[:1], section.frame_prefix))
    key = reading.stations[0].key if reading.stations else ""
    wrong = ""
    if key and not section.words[0].startswith(key):
        wrong = "that station"
    elif reading.frames and section.frame_prefix != "FR":
        wrong = f"FR {reading.frames[0].label.upper()}"
    elif reading.ribs and section.frame_prefix != "RIB":
        wrong = f"RIB {reading.ribs[0].label}"
    elif reading.door and not section.cutouts:
        wrong = f"door {reading.door.name}"
    if wrong:
        message = NOT_HERE.format(what=wrong, section=work.name, words=words)
        raise LocationRefused("E_SECTION_MISMATCH", message)


# -- where on it --------------------------------------------------------------


def _position(work: Work) -> Position:
    reading, section = work.reading, work.section
    bulkhead = _bulkhead(work)
    ends = x_range(work)
    cutout = door_cutout(work)
    if ends is None and cutout is not None:
        ends = door_x(work, cutout)
    if ends is None and bulkhead is not None:
        x_mm = section.x_of(bulkhead.map1_mm, work.variant)
        ends = None if x_mm is None else (x_mm, x_mm)
    if ends is None:
        message = "The text does not say where along the section. Add a station."
        raise LocationRefused("E_NO_LONGITUDINAL", message)
    map_mm = section.map_of(sum(ends) / 2.0, work.variant)
    reach = reach_of(work, map_mm)
    element, label = reading.element, reading.element_label
    if bulkhead is not None:
        label = bulkhead.label
    _plane_agrees(work, reach)
    given = reach.s1_mm is not None or reach.off_skin
    if section.is_shell and not given and not element_internal(element):
        work.codes.append("W_NO_CIRCUMFERENTIAL")
    if reach.off_skin and not element_internal(element):
        work.codes.append("W_OFF_SKIN")
    return Position(
        section=section.code,
        variant=work.variant,
        x1_mm=ends[0],
        x2_mm=ends[1],
        s1_mm=reach.s1_mm,
        s2_mm=reach.s2_mm,
        surface=_surface(work, reach, element),
        element=element,
        element_label=label or _label(work, element, ends),
        side=reach.side,
        bl_mm=reach.bl_mm,
        wl_mm=reach.wl_mm,
        door=cutout.label if cutout else "",
    )


def element_internal(element: str) -> bool:
    """Whether the structural item is no part of the outer surface."""
    return element in INTERNAL


def _surface(work: Work, reach: Reach, element: str) -> str:
    if element_internal(element) or reach.off_skin:
        return "internal"
    if work.reading.surface and (
        work.section.is_shell == (work.reading.surface in ("outer", "inner"))
    ):
        return work.reading.surface
    outer = work.section.is_shell or work.section.skins == ("left", "right")
    return "outer" if outer else ""


def _label(work: Work, element: str, ends: tuple[float, float]) -> str:
    """Which frame the web or cap is of; an extent along the section names none."""
    if work.show(ends[1] - ends[0]) != "0":
        return ""
    near = work.section.nearest_frame(sum(ends) / 2.0, work.variant)
    if element.startswith("frame_") and near and work.show(near[1]) == "0":
        return f"{work.section.frame_prefix} {near[0].label}"
    return ""


def _bulkhead(work: Work) -> Plane | None:
    """The bulkhead the text names, where it is the only word for the station."""
    reading = work.reading
    if reading.element != "bulkhead":
        return None
    planes = [p for p in work.section.planes if p.kind == "bulkhead"]
    found = [p for p in planes if p.label.startswith(reading.element_label)]
    if len(found) == 1:
        return found[0]
    if reading.stations or reading.frames:
        return None
    offers = tuple(Offer("bulkhead", p.label) for p in planes)
    shown = " and ".join(o.text for o in offers) or "none"
    message = NO_BULKHEAD.format(section=work.name, offers=shown)
    raise LocationRefused("E_NO_LONGITUDINAL", message, offers)


def _plane_agrees(work: Work, reach: Reach) -> None:
    """A seat track is named by its butt line, which must be one the type has."""
    if work.reading.element != "seat_track" or reach.bl_mm is None:
        return
    lines = sorted(
        p.bl_mm
        for p in work.section.planes
        if p.kind == "seat_track" and p.bl_mm is not None
    )
    near = work.mm_in(TRACK_IN) + TINY_MM
    if not lines or any(abs(abs(reach.bl_mm) - bl) <= near for bl in lines):
        return
    side = "L" if reach.bl_mm < 0 else "R"
    offers = tuple(Offer("track", f"{side}BL {work.show(bl)}") for bl in lines)
    message = OFF_PLANE.format(
        what="seat track",
        at=f"BL {work.show(abs(reach.bl_mm))}",
        section=work.name,
        offers=did_you_mean(offers),
    )
    raise LocationRefused("E_BL_RANGE", message, offers)


# -- what is there ------------------------------------------------------------


def _described(work: Work, geometry: TypeGeometry, position: Position) -> Place:
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
    here = [f for f in section.frames if f.x_mm(work.variant) is not None]
    ahead = [f for f in here if f.map_mm <= map_mm + TINY_MM]
    behind = [f for f in here if f.map_mm > map_mm + TINY_MM]
    prefix = section.frame_prefix
    if ahead and behind:
        text = f"{prefix} {ahead[-1].label}–{behind[0].label}"
    elif behind:
        text = f"ahead of {prefix} {behind[0].label}"
    else:
        text = f"beyond {prefix} {ahead[-1].label}" if ahead else ""
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


__all__ = ["place", "station_word"]
