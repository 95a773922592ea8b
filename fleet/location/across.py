"""Second stage, across: stringers, butt and water lines, clock and spars to s."""

from __future__ import annotations

import math
from dataclasses import replace

from fleet.location.along import Work, did_you_mean
from fleet.location.chordwise import chordwise, fore_or_aft
from fleet.location.doors import door_cutout
from fleet.location.parts import Stringer
from fleet.location.place import LocationRefused
from fleet.location.reach import (
    NO_LINES,
    Reach,
    arc_reach,
    reach_between,
    side_missing,
)
from fleet.location.reading import Across, Offer
from fleet.location.words import INTERNAL

SIDE_CONFLICT = "“{what}” names a line on the {on}, but also says {said}; keep one."
STR_RANGE = "{what} is not on this {section} ({low} to {high}).{offers}"
BL_RANGE = "BL {read} is outside this {section} here (0 to {high})."
WL_RANGE = "WL {read} is outside this {section} here ({low} to {high})."
DISAGREE = "{one} and {other} are {apart} apart; correct one."
OUTSIDE = "BL {bl} and WL {wl} meet {apart} outside the skin; correct one."

OFF_SKIN_IN = 2.0
CLOCK_AGREES_DEG = 15.0
_SIDES = {"L": "left", "R": "right"}


def reach_of(work: Work, map_mm: float) -> Reach:
    """What the text says across, at this map position."""
    reading = work.reading
    cutout = door_cutout(work)
    if reading.stringers:
        reach = _stringers(work, map_mm)
        _clock_agrees(work, reach)
        _lines_agree(work, reach, map_mm)
    elif reading.clock_degrees:
        reach = _clock(work)
    elif reading.butt_lines or reading.water_lines:
        reach = _lines(work, map_mm)
    elif reading.spars or reading.chords:
        reach = chordwise(work, map_mm)
    elif cutout is not None:
        side = "L" if cutout.box.s2_mm <= 0.0 else "R"
        reach = Reach(cutout.box.s1_mm, cutout.box.s2_mm, side)
    elif work.section.skins == ("left", "right") and reading.side:
        section = work.section
        ends = (section.s1_mm, 0.0) if reading.side == "L" else (0.0, section.s2_mm)
        reach = Reach(*ends, reading.side)
    else:
        reach = Reach(side=reading.side)
    return _with_side(work, reach)


def _with_side(work: Work, reach: Reach) -> Reach:
    """The side that the text names must be the side of the lines it names."""
    section, said = work.section, work.reading.side
    if section.side:
        return replace(reach, side=section.side)
    if said and reach.side and said != reach.side:
        message = SIDE_CONFLICT.format(
            what=work.reading.text.strip(),
            on=_SIDES.get(reach.side, "left and right"),
            said=_SIDES[said],
        )
        raise LocationRefused("E_SIDE_CONFLICT", message)
    return reach


# -- stringers ----------------------------------------------------------------


def _stringers(work: Work, map_mm: float) -> Reach:
    points = _sided(work.reading.stringers)
    return reach_between(work, [_stringer_s(work, point, map_mm) for point in points])


def _sided(points: tuple[Across, ...]) -> list[Across]:
    """A side written at one end of a range holds for both."""
    sides = {p.side for p in points if p.side}
    if len(sides) != 1:
        return list(points)
    side = sides.pop()
    return [Across(p.kind, p.number, p.side or side, p.offset, p.name) for p in points]


def _stringer_s(work: Work, point: Across, map_mm: float) -> float:
    section = work.section
    line = _line(work, point)
    if point.offset is None:
        return line.s_mm
    if not section.is_shell:
        sign = -1.0 if line.s_mm < 0.0 else 1.0
        at = abs(line.s_mm)
        return sign * fore_or_aft(work, at, point.offset, line.label, map_mm)
    direction = point.offset.direction
    length = point.offset.length.mm(work.unit) / section.scale_at(map_mm)
    if direction not in ("above", "below"):
        what = f"“{direction} of {line.label}”"
        message = NO_LINES.format(what=what, section=work.name, words="above or below")
        raise LocationRefused("E_SECTION_MISMATCH", message)
    side = line.side or point.side or work.reading.side
    if not side:
        name = f"{direction} {line.label}"
        raise side_missing(f"“{name}”", f"{name} LH", f"{name} RH")
    down = 1.0 if side == "R" else -1.0
    turn = line.s_mm if line.side or line.s_mm == 0.0 else -down * line.s_mm
    return turn + (down if direction == "below" else -down) * length


def _line(work: Work, point: Across) -> Stringer:
    """The stringer a reading names, with the side the text gives elsewhere."""
    section = work.section
    side = point.side or work.reading.side or section.side * (not section.is_shell)
    numbered = [t for t in section.stringers if t.number == point.number]
    name = f"{section.stringer_prefix}{point.number:f}"
    if not numbered:
        if not section.stringers:
            words = "butt and water lines, the clock or a spar"
            message = NO_LINES.format(what=name, section=work.name, words=words)
            raise LocationRefused("E_SECTION_MISMATCH", message)
        numbers = [t.number for t in section.stringers]
        nearest = min(
            section.stringers,
            key=lambda t: (abs(t.number - point.number), t.side != side),
        )
        offers = (Offer("nearest", nearest.label),)
        message = STR_RANGE.format(
            what=name + point.side,
            section=work.name,
            low=f"{section.stringer_prefix}{min(numbers)}",
            high=f"{section.stringer_prefix}{max(numbers)}",
            offers=did_you_mean(offers),
        )
        raise LocationRefused("E_STR_RANGE", message, offers)
    if len(numbered) == 1:
        return numbered[0]
    for line in numbered:
        if line.side == side:
            return line
    raise side_missing(name, f"{name}L", f"{name}R")


# -- clock --------------------------------------------------------------------


def _clock(work: Work) -> Reach:
    section = work.section
    _shell_only(work, "o'clock")
    values = [
        section.wrapped(math.radians(d) * section.reference_mm)
        for d in work.reading.clock_degrees[:2]
    ]
    return reach_between(work, values)


def _clock_agrees(work: Work, reach: Reach) -> None:
    """Clock and stringer of one text must name one place."""
    section = work.section
    if not work.reading.clock_degrees or reach.s1_mm is None or reach.s2_mm is None:
        return
    clock = math.radians(work.reading.clock_degrees[0]) * section.reference_mm
    middle = (reach.s1_mm + reach.s2_mm) / 2.0
    apart = math.degrees(abs(section.wrapped(clock - middle)) / section.reference_mm)
    if apart > CLOCK_AGREES_DEG + 1e-9:
        message = DISAGREE.format(
            one="The clock", other="the stringer", apart=f"{apart:.0f}°"
        )
        raise LocationRefused("E_MISMATCH", message)


def _lines_agree(work: Work, reach: Reach, map_mm: float) -> None:
    """Butt and water lines beside a stringer must be those of the skin there."""
    section, reading = work.section, work.reading
    if reading.element in INTERNAL or reach.s1_mm is None:
        return
    skin_wl = section.wl_of(map_mm, reach.s1_mm)
    if skin_wl is None:
        return
    skin_bl = section.bl_of(map_mm, reach.s1_mm)
    apart = {
        "butt line": [
            _butt_line(work, p, map_mm) - skin_bl for p in _sided(reading.butt_lines)
        ],
        "water line": [
            _water_line(work, p, map_mm) - skin_wl for p in reading.water_lines
        ],
    }
    for name, values in apart.items():
        nearest = min((abs(value) for value in values), default=0.0)
        if nearest > work.mm_in(OFF_SKIN_IN):
            shown = f"{work.show(nearest)} {work.unit}"
            message = DISAGREE.format(
                one=f"The {name}", other="the stringer", apart=shown
            )
            raise LocationRefused("E_MISMATCH", message)


def _shell_only(work: Work, what: str) -> None:
    if not work.section.is_shell:
        words = "a stringer or a spar"
        message = NO_LINES.format(what=f"“{what}”", section=work.name, words=words)
        raise LocationRefused("E_SECTION_MISMATCH", message)


# -- butt and water lines -----------------------------------------------------


def _lines(work: Work, map_mm: float) -> Reach:
    """Butt and water lines: a point of the skin, or of internal structure."""
    _shell_only(work, "BL, WL")
    if work.section.axis_wl_mm is None:
        words = "a stringer or the clock"
        message = NO_LINES.format(what="“BL, WL”", section=work.name, words=words)
        raise LocationRefused("E_SECTION_MISMATCH", message)
    bls = [_butt_line(work, p, map_mm) for p in _sided(work.reading.butt_lines)]
    wls = [_water_line(work, p, map_mm) for p in work.reading.water_lines]
    side = _line_side(work, bls)
    bl = sum(bls) / len(bls) if bls else None
    wl = sum(wls) / len(wls) if wls else None
    if wl is None:
        return Reach(side=side, bl_mm=bl, bl_ends=tuple(bls))
    if bl is None:
        return _from_water_line(work, wls, map_mm, side)
    if len(bls) + len(wls) > 2:  # an extent: skin only where one line does for both
        off = [_off_skin(work, b, w, map_mm) for b in bls for w in wls]
        if min(off) < -work.mm_in(OFF_SKIN_IN):
            return Reach(None, None, side, bl, wl, True, tuple(bls), tuple(wls))
    return _on_skin(work, bl, wl, map_mm, side)


def _butt_line(work: Work, point: Across, map_mm: float) -> float:
    """Butt line in mm, right positive."""
    side = point.side or work.reading.side
    value = work.mm(point.number)
    if value and not side:
        name = f"BL {point.number:f}"
        raise side_missing(name, f"L{name}", f"R{name}")
    if point.offset is not None:
        outward = {"outbd": 1.0, "inbd": -1.0}.get(point.offset.direction)
        if outward is None:
            what = f"“{point.offset.direction} of BL”"
            words = "inbd or outbd"
            message = NO_LINES.format(what=what, section=work.name, words=words)
            raise LocationRefused("E_SECTION_MISMATCH", message)
        value += outward * point.offset.length.mm(work.unit)
    radius = work.section.size_at(map_mm)
    if abs(value) > radius + work.mm_in(OFF_SKIN_IN):
        message = BL_RANGE.format(
            read=work.show(value), section=work.name, high=work.show(radius)
        )
        raise LocationRefused("E_BL_RANGE", message)
    return -value if side == "L" else value


def _water_line(work: Work, point: Across, map_mm: float) -> float:
    section = work.section
    assert section.axis_wl_mm is not None
    value = work.mm(point.number)
    if point.offset is not None:
        up = {"above": 1.0, "below": -1.0}.get(point.offset.direction, 0.0)
        value += up * point.offset.length.mm(work.unit)
    radius = section.size_at(map_mm)
    if abs(value - section.axis_wl_mm) > radius + work.mm_in(OFF_SKIN_IN):
        message = WL_RANGE.format(
            read=work.show(value),
            section=work.name,
            low=work.show(section.axis_wl_mm - radius),
            high=work.show(section.axis_wl_mm + radius),
        )
        raise LocationRefused("E_WL_RANGE", message)
    return value


def _line_side(work: Work, bls: list[float]) -> str:
    sides = {"L" if bl < 0.0 else "R" for bl in bls if bl}
    if len(sides) == 2:
        return "LR"
    return sides.pop() if sides else work.reading.side


def _from_water_line(work: Work, wls: list[float], map_mm: float, side: str) -> Reach:
    """The skin at a water line, on the side that must be known."""
    section = work.section
    assert section.axis_wl_mm is not None
    if not side:
        name = f"WL {work.show(wls[0])}"
        raise side_missing(name, f"{name} LH", f"{name} RH")
    radius, sign = section.size_at(map_mm), 1.0 if side == "R" else -1.0
    angles = [
        math.acos(max(-1.0, min(1.0, (wl - section.axis_wl_mm) / radius))) for wl in wls
    ]
    values = sorted(sign * angle * section.reference_mm for angle in angles)
    return arc_reach(work, values[0], values[-1])


def _off_skin(work: Work, bl: float, wl: float, map_mm: float) -> float:
    """How far outside the skin the two lines meet; inside is negative."""
    up = wl - (work.section.axis_wl_mm or 0.0)
    return math.hypot(bl, up) - work.section.size_at(map_mm)


def _on_skin(work: Work, bl: float, wl: float, map_mm: float, side: str) -> Reach:
    section = work.section
    assert section.axis_wl_mm is not None
    up = wl - section.axis_wl_mm
    off = _off_skin(work, bl, wl, map_mm)
    if off > work.mm_in(OFF_SKIN_IN):
        message = OUTSIDE.format(
            bl=work.show(abs(bl)),
            wl=work.show(wl),
            apart=f"{work.show(off)} {work.unit}",
        )
        raise LocationRefused("E_MISMATCH", message)
    if off < -work.mm_in(OFF_SKIN_IN):
        return Reach(None, None, side, bl, wl, off_skin=True)
    s_mm = math.atan2(bl, up) * section.reference_mm
    return arc_reach(work, s_mm, s_mm)
