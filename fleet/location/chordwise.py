"""Second stage, along the chord of an open surface: spars and shares of the chord."""

from __future__ import annotations

from fleet.location.along import Work
from fleet.location.parts import TINY_MM, Plane
from fleet.location.place import LocationRefused
from fleet.location.reach import NO_LINES, Reach, arc_reach, side_missing
from fleet.location.reading import Across, Offset

BEYOND_CHORD = (
    "{length} {way} of {line} is off this {section}, whose chord here is {chord}."
)
BOTH = "“{text}” gives both a spar and a share of the chord; keep one."
SHARE_RANGE = "{read} % of the chord is off the section (0 to 100 %)."
SPAR_UNKNOWN = "This {section} has no {name} spar; it has {offers}."

CHORD_MM = 0.06
"""So little past an edge is the edge: canonical text is rounded."""


def chordwise(work: Work, map_mm: float) -> Reach:
    """A place told from spars or shares of the chord, or the box beside a spar."""
    section, reading = work.section, work.reading
    if section.is_shell:
        words = "a stringer, the clock or butt and water lines"
        what = "A spar or a share of the chord"
        message = NO_LINES.format(what=what, section=work.name, words=words)
        raise LocationRefused("E_SECTION_MISMATCH", message)
    if reading.spars and reading.chords:
        message = BOTH.format(text=reading.text.strip())
        raise LocationRefused("E_TWO_POINTS", message)
    spars = [p for p in section.planes if p.kind == "spar" and p.s_mm is not None]
    if reading.spars and reading.spar_side:
        low, high = _beside(work, _spar_s(work, reading.spars[0], spars), spars)
    elif reading.spars:
        ends = [_from_spar(work, p, spars, map_mm) for p in reading.spars]
        low, high = min(ends), max(ends)
    else:
        ends = [_share(work, p) for p in reading.chords]
        low, high = min(ends), max(ends)
    if section.skins == ("left", "right"):
        if not reading.side:
            what = reading.text.strip()
            raise side_missing(f"“{what}”", f"LH {what}", f"RH {what}")
        if reading.side == "L":
            low, high = -high, -low
    return arc_reach(work, low, high)


def _spar_s(work: Work, point: Across, spars: list[Plane]) -> float:
    for plane in spars:
        if plane.label == f"{point.name.upper()} SPAR" and plane.s_mm is not None:
            return plane.s_mm
    listed = " and ".join(p.label.lower() for p in spars) or "none"
    message = SPAR_UNKNOWN.format(section=work.name, name=point.name, offers=listed)
    raise LocationRefused("E_SECTION_MISMATCH", message)


def _beside(work: Work, at: float, spars: list[Plane]) -> tuple[float, float]:
    """All the skin on one side of a spar, to the next spar."""
    lines = sorted([0.0, *(p.s_mm or 0.0 for p in spars), work.section.s2_mm])
    index = lines.index(at)
    aft = work.reading.spar_side == "aft"
    return (at, lines[index + 1]) if aft else (lines[index - 1], at)


def _from_spar(work: Work, point: Across, spars: list[Plane], map_mm: float) -> float:
    at = _spar_s(work, point, spars)
    return fore_or_aft(work, at, point.offset, f"the {point.name} spar", map_mm)


def fore_or_aft(
    work: Work, at: float, offset: Offset | None, line: str, map_mm: float
) -> float:
    """A line of the chord, or a true length ahead or aft of it."""
    section = work.section
    if offset is None:
        return at
    if offset.direction not in ("fwd", "aft"):
        what = f"“{offset.direction} of {line}”"
        message = NO_LINES.format(what=what, section=work.name, words="fwd or aft")
        raise LocationRefused("E_SECTION_MISMATCH", message)
    length = offset.length.mm(work.unit) / section.scale_at(map_mm)
    s_mm = at + length if offset.direction == "aft" else at - length
    if not -TINY_MM - CHORD_MM <= s_mm <= section.s2_mm + TINY_MM + CHORD_MM:
        message = BEYOND_CHORD.format(
            length=f"{offset.length.number:f} {offset.length.unit or work.unit}",
            way=offset.direction,
            line=line,
            section=work.name,
            chord=f"{work.show(section.size_at(map_mm))} {work.unit}",
        )
        raise LocationRefused("E_STR_RANGE", message)
    return min(max(s_mm, 0.0), section.s2_mm)


def _share(work: Work, point: Across) -> float:
    if point.number > 100:
        message = SHARE_RANGE.format(read=f"{point.number:f}")
        raise LocationRefused("E_STR_RANGE", message)
    return float(point.number) / 100.0 * work.section.s2_mm
