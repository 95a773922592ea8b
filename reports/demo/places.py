"""Where demo damage lies, and how different people write the same location."""

from __future__ import annotations

import math
from bisect import bisect_right
from collections.abc import Callable
from dataclasses import dataclass

from reports.demo.airframe import (
    AXIS_WL_IN,
    BAY_IN,
    BAYS_AROUND,
    FRAME_PITCH_IN,
    FRAMES,
    OPENINGS,
    PLUG_STA,
    RADIUS_IN,
    STRINGER_STEP_DEG,
    STRINGERS,
    across_in,
    frame_before,
    frame_station,
    in_opening,
    radius_at,
    stringer_name,
    true_in,
)
from reports.demo.records import Truth
from reports.demo.stream import Stream

FUSELAGE = "FUS"
SPOT_STATIONS, SPOT_BAYS = range(740, 860, 20), range(11, 18)
SPOT_WEIGHT = 14.0
DOOR_1L_STATIONS, DOOR_1L_BAYS, DOOR_1R_BAYS = (
    range(160, 240, 20),
    range(24, 32),
    range(8, 16),
)


@dataclass(frozen=True, slots=True)
class Written:
    """A location as written and the truth behind it."""

    text: str
    truth: Truth


def cell_weight(sta: int, bay: int) -> float:
    """Relative damage rate of one bay: sides and belly more than the crown."""
    deg = abs(((bay + 0.5) * STRINGER_STEP_DEG + 180) % 360 - 180)
    weight = 0.45 + (0.9 if 75 <= deg < 150 else 0.5 if deg >= 150 else 0.0)
    if sta in DOOR_1L_STATIONS:
        weight *= 3 if bay in DOOR_1L_BAYS else 1.6 if bay in DOOR_1R_BAYS else 1
    if sta in SPOT_STATIONS and bay in SPOT_BAYS:
        weight *= SPOT_WEIGHT
    return weight


_CELLS = [
    ((sta, bay), cell_weight(sta, bay))
    for sta in range(100, 1040, FRAME_PITCH_IN)
    for bay in range(BAYS_AROUND)
]
_CELL_ENDS: list[float] = []
for _, _weight in _CELLS:
    _CELL_ENDS.append((_CELL_ENDS[-1] if _CELL_ENDS else 0.0) + _weight)


def ramp_place(stream: Stream, variant: str) -> tuple[float, float]:
    """Station and angle of everyday ramp damage, outside every cut-out."""
    while True:
        cell = bisect_right(_CELL_ENDS, stream.uniform() * _CELL_ENDS[-1])
        (sta, bay), _ = _CELLS[min(cell, len(_CELLS) - 1)]
        here = sta + FRAME_PITCH_IN * stream.uniform()
        deg = ((bay + stream.uniform()) * STRINGER_STEP_DEG + 180) % 360 - 180
        if clear_of_plug(here, variant) and not in_opening(here, deg, 1.5):
            return here, deg


def clear_of_plug(sta: float, variant: str) -> bool:
    """A stretched aircraft's plug has labels of its own; plain numbers avoid it."""
    return variant != "S" or not PLUG_STA - 1 < sta < PLUG_STA + FRAME_PITCH_IN + 1


def rounded(stream: Stream, inches: float) -> tuple[float, float]:
    """As people read a tape: whole, half or tenth of an inch; with half the step."""
    step = stream.weighted(((1.0, 60), (0.5, 25), (0.1, 15)))
    return round(round(inches / step) * step, 1), step / 2


def plain(number: float) -> str:
    return f"{number:g}"


def fuselage_text(stream: Stream, sta: float, deg: float, variant: str) -> Written:
    """One of the notations that people use for a place on the fuselage skin."""
    near_end = sta < 101 or sta > 1039
    style = _station_stringer if near_end else stream.weighted(_STYLES)
    flat = abs(deg) < STRINGER_STEP_DEG or abs(deg) > 180 - STRINGER_STEP_DEG
    if style in _NEEDS_SIDE and flat:
        style = _station_stringer
    if style is _butt_water and not 240 <= sta <= 900:
        style = _station_offset
    written = style(stream, sta, deg, variant)
    if any(door.holds(*_centre(style, sta, deg)) for door in OPENINGS):
        return precise_text(stream, sta, deg, variant)
    return written


def _centre(style: _Style, sta: float, deg: float) -> tuple[float, float]:
    """Station and angle that a coarse notation would be read as."""
    side = 1 if deg > 0 else -1
    steps = abs(deg) / STRINGER_STEP_DEG
    at_stringer = round(steps) * STRINGER_STEP_DEG * side
    mid_bay = frame_station(min(frame_before(sta), FRAMES - 1)) + FRAME_PITCH_IN / 2
    if style is _bay_words:
        return mid_bay, (int(steps) + 0.5) * STRINGER_STEP_DEG * side
    if style is _stations_range:
        return mid_bay, at_stringer
    if style is _clock:
        nearest = frame_station(frame_before(sta + FRAME_PITCH_IN / 2))
        return nearest, round(abs(deg) / 15) * 15 * side
    exact = style in (_butt_water, _below_stringer)
    return sta, deg if exact else at_stringer


def precise_text(stream: Stream, sta: float, deg: float, variant: str) -> Written:
    """As an inspector writes after measuring: from a frame and from a stringer."""
    return _below_stringer(stream, sta, deg, variant)


def fuselage_truth(
    sta: float, deg: float, variant: str, x_tol: float, s_tol: float
) -> Truth:
    return Truth(
        FUSELAGE, sta, true_in(sta, variant), across_in(deg), x_tol, s_tol + 0.01
    )


def nearest_stringer(deg: float) -> str:
    return stringer_name(round(abs(deg) / STRINGER_STEP_DEG) + 1, deg)


def _side(deg: float) -> str:
    return "RH" if deg > 0 else "LH"


def _offset(stream: Stream, sta: float) -> tuple[int, float, float]:
    """Frame number, inches aft of it (whole or half) and the tolerance."""
    frame = frame_before(sta)
    aft, tolerance = rounded(stream, sta - frame_station(frame))
    if aft >= FRAME_PITCH_IN and frame < FRAMES:
        return frame + 1, 0.0, tolerance
    return frame, aft, tolerance


def _station_stringer(s: Stream, sta: float, deg: float, variant: str) -> Written:
    label, tolerance = rounded(s, sta)
    text = f"{s.pick(('STA', 'sta', 'BS', 'STN'))} {plain(label)} "
    text += nearest_stringer(deg)
    return Written(text, fuselage_truth(sta, deg, variant, tolerance, BAY_IN / 2))


def _station_offset(s: Stream, sta: float, deg: float, variant: str) -> Written:
    frame, aft, tolerance = _offset(s, sta)
    text = f"STA {frame_station(frame)}"
    text += f"+{plain(aft)}" if aft else ""
    text += f" {nearest_stringer(deg)}"
    return Written(text, fuselage_truth(sta, deg, variant, tolerance, BAY_IN / 2))


def _frame_offset(s: Stream, sta: float, deg: float, variant: str) -> Written:
    frame, aft, tolerance = _offset(s, sta)
    text = f"{s.pick(('FR', 'Frame'))} {frame}"
    text += f"+{plain(aft)} in" if aft else ""
    text += f" {nearest_stringer(deg)}"
    return Written(text, fuselage_truth(sta, deg, variant, tolerance, BAY_IN / 2))


def _frame_metric(s: Stream, sta: float, deg: float, variant: str) -> Written:
    frame = frame_before(sta)
    aft_mm = 5 * round((sta - frame_station(frame)) * 25.4 / 5)
    text = f"FR {frame}" + (f"+{aft_mm}mm" if aft_mm else "")
    text += f" {nearest_stringer(deg).replace('S-', 'STR ')}"
    return Written(text, fuselage_truth(sta, deg, variant, 0.1, BAY_IN / 2))


def _bay_words(s: Stream, sta: float, deg: float, variant: str) -> Written:
    frame = min(frame_before(sta), FRAMES - 1)
    lower = int(abs(deg) // STRINGER_STEP_DEG) + 1
    text = f"FR {frame}-{frame + 1} between STR {lower} & {lower + 1} {_side(deg)}"
    return Written(text, fuselage_truth(sta, deg, variant, 0.1, 0.1))


def _butt_water(s: Stream, sta: float, deg: float, variant: str) -> Written:
    label, tolerance = rounded(s, sta)
    radius = radius_at(sta)
    butt = round(2 * radius * math.sin(math.radians(abs(deg)))) / 2
    water = round(2 * (AXIS_WL_IN + radius * math.cos(math.radians(deg)))) / 2
    side = "R" if deg > 0 else "L"
    text = f"BS {plain(label)} {side}BL {plain(butt)} WL {plain(water)}"
    return Written(text, fuselage_truth(sta, deg, variant, tolerance, 1.0))


def _clock(s: Stream, sta: float, deg: float, variant: str) -> Written:
    frame = frame_before(sta + FRAME_PITCH_IN / 2)
    half_hours = round((deg % 360) / 15) or 24
    hour, half = divmod(half_hours, 2)
    text = f"FR {frame} {hour or 12}{':30' if half else ''} o'clock"
    tolerance = across_in(7.5)
    return Written(text, fuselage_truth(sta, deg, variant, 10.0, tolerance))


def _aft_of_frame(s: Stream, sta: float, deg: float, variant: str) -> Written:
    frame, aft, tolerance = _offset(s, sta)
    if not aft:
        return _frame_offset(s, sta, deg, variant)
    text = f"{plain(aft)} in aft of FR {frame}, {nearest_stringer(deg)}"
    return Written(text, fuselage_truth(sta, deg, variant, tolerance, BAY_IN / 2))


def _below_stringer(s: Stream, sta: float, deg: float, variant: str) -> Written:
    label, tolerance = rounded(s, sta)
    upper = int(abs(deg) // STRINGER_STEP_DEG) + 1
    below_deg = abs(deg) - (upper - 1) * STRINGER_STEP_DEG
    radius = radius_at(sta)  # a tape on the skin measures at the local radius
    below = round(2 * math.radians(below_deg) * radius) / 2
    if not below:
        return _station_stringer(s, sta, deg, variant)
    text = f"STA {plain(label)}, {plain(below)} in below {stringer_name(upper, deg)}"
    at_reference = 0.3 * RADIUS_IN / radius
    return Written(text, fuselage_truth(sta, deg, variant, tolerance, at_reference))


def _stations_range(s: Stream, sta: float, deg: float, variant: str) -> Written:
    frame = min(frame_before(sta), FRAMES - 1)
    begin = frame_station(frame)
    number = min(STRINGERS - 1, max(2, round(abs(deg) / STRINGER_STEP_DEG) + 1))
    text = f"Stations {begin}-{begin + FRAME_PITCH_IN} stringer {number}"
    text += "R" if deg > 0 else "L"
    return Written(text, fuselage_truth(sta, deg, variant, 0.1, BAY_IN))


_Style = Callable[[Stream, float, float, str], Written]
_STYLES: tuple[tuple[_Style, float], ...] = (
    (_station_stringer, 24),
    (_station_offset, 22),
    (_frame_offset, 11),
    (_frame_metric, 5),
    (_bay_words, 8),
    (_butt_water, 8),
    (_clock, 2),
    (_aft_of_frame, 7),
    (_below_stringer, 10),
    (_stations_range, 3),
)
_NEEDS_SIDE = (_bay_words, _butt_water, _below_stringer, _stations_range)
