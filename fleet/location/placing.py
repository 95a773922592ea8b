"""Second stage: a reading on the structure of one variant, or a refusal."""

from __future__ import annotations

from fleet.location.across import reach_of
from fleet.location.along import Work, did_you_mean, x_range
from fleet.location.described import described
from fleet.location.doors import door_agrees, door_cutout, door_x
from fleet.location.parts import TINY_MM, Plane
from fleet.location.place import LocationRefused, Place, Position
from fleet.location.reach import Reach
from fleet.location.reading import Offer, Problem, Reading
from fleet.location.sections import Section
from fleet.location.typegeometry import TypeGeometry
from fleet.location.words import INTERNAL, RIB_WORDS

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
    return described(work, geometry, position)


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
    named = [s for s in own if any(_is_named(name, w) for w in s.words)]
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


def _is_named(name: str, word: str) -> bool:
    """Whether "nacelle" names section word "nacelle 2"."""
    return word == name or word.rstrip("0123456789 ") == name


def _notation(work: Work) -> None:
    """Stations, frames and ribs must be those of the section."""
    reading, section = work.reading, work.section
    words = " or ".join((*section.station_words[:1], section.frame_prefix))
    key = reading.stations[0].key if reading.stations else ""
    ribbed = any(word.lower() in RIB_WORDS for word in section.frame_words)
    wrong = ""
    if key and not section.words[0].startswith(key):
        wrong = "that station"
    elif reading.frames and ribbed:
        wrong = f"FR {reading.frames[0].label.upper()}"
    elif reading.ribs and not ribbed:
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
    if ends is not None and cutout is not None:
        door_agrees(work, cutout, ends)
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
        bl_ends=reach.bl_ends,
        wl_ends=reach.wl_ends,
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
