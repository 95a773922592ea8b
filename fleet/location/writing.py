"""A position in canonical text, which reads back to the same place.

Offsets across are in words ("4 in below S-12R"); signs stand only after stations.
"""

from __future__ import annotations

from decimal import Decimal

from fleet.location.along import Work, station_label, station_word
from fleet.location.doors import door_text
from fleet.location.place import Position
from fleet.location.reach import Reach, arc_reach
from fleet.location.reading import Reading
from fleet.location.sections import Section
from fleet.location.typegeometry import TypeGeometry
from fleet.location.words import ELEMENT_PHRASES, KEEL_BEAM
from fleet.units import number_write

SHARE_DIGITS = 4
NEAR = Decimal("0.0015")
"""Nearer to a line than this, in the type's unit, is on it: more is not written."""
_LATERAL = {"L": "LH", "R": "RH"}


def text_at(
    geometry: TypeGeometry,
    variant: str,
    code: str,
    *,
    along: tuple[float, float],
    across: tuple[float, float] | None = None,
    surface: str = "",
) -> str:
    """Canonical text of coordinates in mm on a section, as a map gives them.

    `along` are true distances, `across` s values less than half round a shell apart; a
    door's are those of the section that it lies in.
    """
    section = geometry.section(code)
    if section.parent:
        section = geometry.section(section.parent)
    work = Work(Reading(""), section, variant, geometry.unit)
    reach = Reach() if across is None else arc_reach(work, *across)
    lateral = section.is_shell or section.skins == ("left", "right")
    position = Position(
        section=section.code,
        variant=variant,
        x1_mm=along[0],
        x2_mm=along[1],
        s1_mm=reach.s1_mm,
        s2_mm=reach.s2_mm,
        surface=surface or "outer" * lateral,
        element="",
        element_label="",
        side=section.side or reach.side,
        bl_mm=None,
        wl_mm=None,
        door="",
    )
    return write(work, position)


def write(work: Work, position: Position) -> str:
    """Canonical text of a position on the section of `work`."""
    section = work.section
    parts = [_section_words(section), _element(position)]
    if position.door and _along_unsaid(work) and _across_unsaid(work):
        parts.append(_door(work, position))
    else:
        if not (position.element.startswith("frame_") and position.element_label):
            parts.append(_stations(work, position))
        parts.append(_surface(section, position))
        parts.append(_across(work, position))
    text = " ".join(part for part in parts if part)
    return text.replace(" ,", ",")


def _along_unsaid(work: Work) -> bool:
    reading = work.reading
    return not (reading.stations or reading.frames or reading.ribs)


def _across_unsaid(work: Work) -> bool:
    reading = work.reading
    lines = reading.stringers or reading.butt_lines or reading.water_lines
    return not (lines or reading.clock_degrees)


def _section_words(section: Section) -> str:
    if section.code == "FUS" or section.words[:1] == ("fuselage",):
        return ""
    if section.words[0] == "fin":
        return ""
    name = section.words[0]
    if name.startswith("nacelle"):
        return name
    return f"{_LATERAL[section.side]} {name}"


def _element(position: Position) -> str:
    if position.element == "keel_beam":
        return KEEL_BEAM
    if position.element.startswith("frame_") and position.element_label:
        part = position.element.removeprefix("frame_").upper()
        return f"{position.element_label} {part}"
    if position.element == "bulkhead":
        return position.element_label or "BULKHEAD"
    return ELEMENT_PHRASES.get(position.element, "")


def _stations(work: Work, position: Position) -> str:
    word = station_word(work.section)
    first = station_label(work, position.x1_mm)
    last = station_label(work, position.x2_mm)
    if first == last:
        return f"{word} {first}"
    plain = "+" not in first + last and _rises(first, last)
    joiner = "-" if plain else " to "
    return f"{word} {first}{joiner}{last}"


def _rises(first: str, last: str) -> bool:
    """Whether "first-last" reads as a range."""
    if not (first + last).replace(".", "").isdigit():
        return False
    return Decimal(first) < Decimal(last)


def _surface(section: Section, position: Position) -> str:
    if section.is_shell:
        return "inner surface" if position.surface == "inner" else ""
    if position.surface in ("upper", "lower"):
        return f"{position.surface} skin"
    return ""


def _across(work: Work, position: Position) -> str:
    section = work.section
    if position.s1_mm is None or position.s2_mm is None:
        return _lines(work, position)
    if section.is_shell:
        if position.door and _across_unsaid(work):
            return door_text(position.door)
        return _stringers(work, position)
    return _chord(work, position)


def _lines(work: Work, position: Position) -> str:
    """Butt and water lines of what is not on the skin."""
    parts = []
    if position.bl_mm is not None:
        bls = position.bl_ends or (position.bl_mm,)
        parts.append(" to ".join(dict.fromkeys(_butt_line(work, bl) for bl in bls)))
    elif position.side in _LATERAL and not work.section.side:
        parts.append(_LATERAL[position.side])
    if position.wl_mm is not None:
        wls = position.wl_ends or (position.wl_mm,)
        parts.append(" to ".join(dict.fromkeys(f"WL {work.show(wl)}" for wl in wls)))
    return " ".join(parts)


def _butt_line(work: Work, bl_mm: float) -> str:
    side = "L" if bl_mm < 0.0 else "R" if bl_mm else ""
    return f"{side}BL {work.show(abs(bl_mm))}"


# -- shells -------------------------------------------------------------------


def _stringers(work: Work, position: Position) -> str:
    section = work.section
    assert position.s1_mm is not None
    assert position.s2_mm is not None
    map_mm = section.map_of((position.x1_mm + position.x2_mm) / 2.0, work.variant)
    first = _one_stringer(work, position.s1_mm, map_mm)
    last = _one_stringer(work, position.s2_mm, map_mm)
    if first == last:
        return first
    if position.side == "L":
        first, last = last, first
    return f"{first} to {last.removeprefix(', ')}"


def _one_stringer(work: Work, s_mm: float, map_mm: float) -> str:
    """The stringer, or how far below or above the next one."""
    section = work.section
    lines, scale = section.stringers, section.scale_at(map_mm)
    turn = section.wrapped(s_mm)
    bay = section.bay_across(turn)
    beside = (lines[bay], lines[(bay + 1) % len(lines)])
    upper, lower = sorted(beside, key=lambda t: abs(section.wrapped(t.s_mm)))
    line, direction = (upper, "below") if upper.side else (lower, "above")
    length = work.show(abs(section.wrapped(turn - line.s_mm)) * scale)
    ahead = line is beside[0]
    at = line.s_mm + (work.mm(Decimal(length)) / scale) * (1.0 if ahead else -1.0)
    for near in beside:
        if abs(section.wrapped(at - near.s_mm)) * scale < work.mm(NEAR):
            return near.label
    return f", {length} {work.unit} {direction} {line.label}"


# -- open surfaces and doors --------------------------------------------------


def _chord(work: Work, position: Position) -> str:
    section = work.section
    assert position.s1_mm is not None
    assert position.s2_mm is not None
    side = ""
    low, high = sorted((abs(position.s1_mm), abs(position.s2_mm)))
    if section.skins == ("left", "right"):
        side = _LATERAL[position.side] + " "
        if low == 0.0 and high == section.s2_mm:
            return side.strip()
    spars = {p.label.lower(): p.s_mm for p in section.planes if p.kind == "spar"}
    edges = sorted([0.0, *(s for s in spars.values() if s), section.s2_mm])
    map_mm = section.map_of((position.x1_mm + position.x2_mm) / 2.0, work.variant)
    for name, at in spars.items():
        if at is not None and low < high:
            index = edges.index(at)
            if low == at and high == edges[index + 1]:
                return f"{side}aft of {name}"
            if high == at and low == edges[index - 1]:
                return f"{side}fwd of {name}"
    ends = [_one_chord(work, s, map_mm, spars) for s in (low, high)]
    first, last = (line for line, _ in ends)
    if not (first and last):
        first, last = (spar for _, spar in ends)
    return f"{side}{first}" if first == last else f"{side}{first} to {last}"


def _one_chord(
    work: Work, s_mm: float, map_mm: float, spars: dict[str, float | None]
) -> tuple[str, str]:
    """The stringer here or '', and the spar or how far aft or ahead of the first."""
    section = work.section
    scale = section.scale_at(map_mm)
    first = next(((n, s) for n, s in spars.items() if s is not None), None)
    if first is None:
        share = number_write(100.0 * s_mm / section.s2_mm, SHARE_DIGITS)
        return "", f"{share} % chord"
    name, front = first
    length = work.show(abs(s_mm - front) * scale)
    written = work.mm(Decimal(length)) / scale
    at = front + written if s_mm > front else front - written
    near = work.mm(NEAR) / scale
    line = next((t for t in section.stringers if abs(abs(t.s_mm) - at) < near), None)
    label = f"{section.stringer_prefix}{line.number}" if line else ""
    for spar, its in spars.items():
        if its is not None and abs(its - at) < near:
            return label, spar
    way = "aft" if s_mm > front else "fwd"
    return label, f"{length} {work.unit} {way} of {name}"


def _door(work: Work, position: Position) -> str:
    """ "12 in aft of door 2L fwd frame"."""
    section = work.section
    cutout = next(c for c in section.cutouts if c.label == position.door)
    fore = section.x_of(cutout.box.map1_mm, work.variant) or 0.0
    rear = section.x_of(cutout.box.map2_mm, work.variant) or 0.0
    door = door_text(position.door)
    if position.x1_mm != position.x2_mm:
        return door
    edge, at = ("fwd", fore)
    said = work.reading.door
    if said is not None and (said.edge or _direction(said.offset)) == "aft":
        edge, at = "aft", rear
    length = work.show(abs(position.x1_mm - at))
    if length == "0":
        return f"{door} {edge} frame"
    way = "aft" if position.x1_mm > at else "fwd"
    return f"{length} {work.unit} {way} of {door} {edge} frame"


def _direction(offset: object) -> str:
    return getattr(offset, "direction", "")
