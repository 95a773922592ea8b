"""A position in canonical text, which reads back to the same place.

Offsets across are in words ("4 in below S-12R"); signs stand only after stations.
"""

from __future__ import annotations

from decimal import Decimal

from fleet.location.along import Work, station_label, station_word
from fleet.location.doors import door_text
from fleet.location.parts import Stringer
from fleet.location.place import Position
from fleet.location.sections import Section
from fleet.location.words import ELEMENT_PHRASES, KEEL_BEAM

_LATERAL = {"L": "LH", "R": "RH"}


def write(work: Work, position: Position) -> str:
    """Canonical text of a position on the section of `work`."""
    section = work.section
    parts = [_section_words(section), _element(position)]
    if position.door and position.s1_mm is not None and _along_unsaid(work):
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
        if position.door and abs(position.s2_mm - position.s1_mm) > 1.0:
            return door_text(position.door)
        return _stringers(work, position)
    return _chord(work, position)


def _lines(work: Work, position: Position) -> str:
    """Butt and water lines of what is not on the skin."""
    parts = []
    if position.bl_mm is not None:
        side = "L" if position.bl_mm < 0.0 else "R" if position.bl_mm else ""
        parts.append(f"{side}BL {work.show(abs(position.bl_mm))}")
    elif position.side in _LATERAL and not work.section.side:
        parts.append(_LATERAL[position.side])
    if position.wl_mm is not None:
        parts.append(f"WL {work.show(position.wl_mm)}")
    return " ".join(parts)


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
    nearest = min(lines, key=lambda t: abs(section.wrapped(turn - t.s_mm)))
    apart = section.wrapped(turn - nearest.s_mm) * scale
    if work.show(abs(apart)) == "0":
        return nearest.label
    side = "R" if turn >= 0.0 else "L"
    one = lines[section.bay_across(turn)]
    other = lines[(section.bay_across(turn) + 1) % len(lines)]
    upper, lower = sorted((one, other), key=lambda t: t.number)
    if upper.side:
        return _off(work, turn, upper, "below", scale)
    return _off(work, turn, lower, "above", scale) if lower.side else f"{side}H"


def _off(work: Work, turn: float, line: Stringer, direction: str, scale: float) -> str:
    length = work.show(abs(work.section.wrapped(turn - line.s_mm)) * scale)
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
    first, last = (_one_chord(work, s, map_mm, spars) for s in (low, high))
    return f"{side}{first}" if first == last else f"{side}{first} to {last}"


def _one_chord(
    work: Work, s_mm: float, map_mm: float, spars: dict[str, float | None]
) -> str:
    """A stringer, a spar, or how far aft or ahead of the front spar."""
    section = work.section
    scale = section.scale_at(map_mm)
    for line in section.stringers:
        if work.show(abs(abs(line.s_mm) - s_mm) * scale) == "0":
            return f"{section.stringer_prefix}{line.number}"
    name, at = next((n, s) for n, s in spars.items() if s is not None)
    length = work.show(abs(s_mm - at) * scale)
    if length == "0":
        return name
    return f"{length} {work.unit} {'aft' if s_mm > at else 'fwd'} of {name}"


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
