"""The demo type's drawing rules in inches, as a person at the aircraft knows them.

They are written here a second time on purpose: the hidden truth of a demo finding is
worked out from these, so it checks the type geometry file and the location reader.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

INCH_MM = 25.4
FRAME_PITCH_IN = 20
FRAMES = 48
STRINGERS = 21
STRINGER_STEP_DEG = 9
RADIUS_IN = 56.0
AXIS_WL_IN = 150.0
NOSE_STA, NOSE_ENDS, TAIL_BEGINS, TAIL_STA = 60.0, 240.0, 900.0, 1060.0
END_RADIUS_IN = 20.0
PLUG_STA, PLUG_IN = 560.0, 40.0
LAP_STRINGERS = (5, 12, 18)
WINDOW_STA, WINDOW_DEG, WINDOW_WIDTH_IN = (260, 880), (81.4, 89.6), 9.0
BUTT_STATIONS = (300, 500, 700, 900)
RIB_PITCH_IN = 20
BAYS_AROUND = 40
BAY_IN = RADIUS_IN * math.radians(STRINGER_STEP_DEG)


@dataclass(frozen=True, slots=True)
class Opening:
    """A cut-out of the fuselage shell; angles from the crown, + to the right."""

    name: str
    sta1: float
    sta2: float
    deg1: float
    deg2: float

    def holds(self, sta: float, deg: float, margin_in: float = 0.0) -> bool:
        margin_deg = math.degrees(margin_in / RADIUS_IN)
        return (
            self.sta1 - margin_in <= sta <= self.sta2 + margin_in
            and self.deg1 - margin_deg <= deg <= self.deg2 + margin_deg
        )


OPENINGS = (
    Opening("1L", 170, 230, -150, -70),
    Opening("1R", 170, 230, 70, 150),
    Opening("2L", 900, 940, -150, -70),
    Opening("2R", 900, 940, 70, 150),
    Opening("aft cargo", 760, 840, 105, 160),
)


def frame_station(frame: int) -> int:
    """Station label of FR n."""
    return 100 + FRAME_PITCH_IN * (frame - 1)


def frame_before(sta: float) -> int:
    """Number of the frame at or just forward of a station label."""
    return min(FRAMES, max(1, int((sta - 100) // FRAME_PITCH_IN) + 1))


def true_in(sta: float, variant: str) -> float:
    """Distance from the datum of a station label that is not inside the plug."""
    return sta + PLUG_IN if variant == "S" and sta > PLUG_STA else sta


def radius_at(sta: float) -> float:
    """Radius of the shell at a station label."""
    if sta < NOSE_ENDS:
        share = (sta - NOSE_STA) / (NOSE_ENDS - NOSE_STA)
    elif sta > TAIL_BEGINS:
        share = (TAIL_STA - sta) / (TAIL_STA - TAIL_BEGINS)
    else:
        return RADIUS_IN
    return END_RADIUS_IN + (RADIUS_IN - END_RADIUS_IN) * share


def across_in(deg: float) -> float:
    """Arc from the crown at the reference radius."""
    return RADIUS_IN * math.radians(deg)


def degrees_of(across: float) -> float:
    return math.degrees(across / RADIUS_IN)


def stringer_name(number: int, deg: float) -> str:
    """S-12R; the crown and the keel have no side."""
    if number in (1, STRINGERS):
        return f"S-{number}"
    return f"S-{number}{'R' if deg > 0 else 'L'}"


def in_opening(sta: float, deg: float, margin_in: float = 0.3) -> bool:
    """Inside a door or a window, or so near that rounding could put it inside."""
    return in_window(sta, deg, margin_in) or any(
        opening.holds(sta, deg, margin_in) for opening in OPENINGS
    )


def in_window(sta: float, deg: float, margin_in: float) -> bool:
    """The window belt: one window in the middle of each bay from FR 9 to FR 40."""
    margin_deg = math.degrees(margin_in / RADIUS_IN)
    low, high = WINDOW_DEG
    from_middle = abs((sta - 100) % FRAME_PITCH_IN - FRAME_PITCH_IN / 2)
    return (
        WINDOW_STA[0] <= sta <= WINDOW_STA[1]
        and low - margin_deg <= abs(deg) <= high + margin_deg
        and from_middle <= WINDOW_WIDTH_IN / 2 + margin_in
    )


def skin_thickness_mm(deg: float) -> float:
    """Nominal skin of crown, upper side, lower side and belly panels."""
    off_crown = abs(deg)
    for stringer, thickness_mm in ((5, 1.2), (12, 1.4), (18, 1.6)):
        if off_crown <= (stringer - 1) * STRINGER_STEP_DEG:
            return thickness_mm
    return 1.8
