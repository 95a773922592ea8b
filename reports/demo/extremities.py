"""Places off the fuselage shell: wings, tail surfaces, nacelles and fairings."""

from __future__ import annotations

from reports.demo.places import Written, plain, rounded
from reports.demo.records import Truth
from reports.demo.stream import Stream

WING_TIP_WS, HS_TIP, FIN_TIP, NACELLE_END = 480, 170, 150, 140
LEADING_EDGE_KINDS = ("bird_strike", "dent")


def off_fuselage_place(stream: Stream, kind: str) -> tuple[Written, str, str]:
    """Location, element and surface on a wing, tail surface, nacelle or fairing."""
    if kind == "lightning":
        where = stream.weighted(((_wing, 4), (_fin, 3), (_tailplane, 3)))
    elif kind == "disbond":
        where = stream.weighted(((_wing, 4), (_fin, 3), (_tailplane, 5)))
    else:
        where = stream.weighted(((_wing, 6), (_tailplane, 2), (_fin, 1), (_nacelle, 3)))
    return where(stream, kind)


def _truth(section: str, sta: float, tolerance: float) -> Truth:
    return Truth(section, sta, sta, None, tolerance, 0.0)


def _outboard(stream: Stream, kind: str, tip: float) -> float:
    """Lightning attaches at the tips; everything else anywhere outboard of the root."""
    low = 0.9 if kind == "lightning" else 0.12
    return stream.between(low * tip, 0.985 * tip)


def _wing(stream: Stream, kind: str) -> tuple[Written, str, str]:
    side = stream.pick(("LH", "RH"))
    code = f"WING-{side[0]}"
    ws = _outboard(stream, kind, WING_TIP_WS)
    surface = "upper" if stream.chance(0.5) else "lower"
    label, tolerance = rounded(stream, ws)
    rib = min(24, max(1, round(ws / 20)))
    inboard_mm = 5 * round((rib * 20 - ws) * 25.4 / 5)
    style = stream.whole(0, 3)
    if style == 0 and inboard_mm > 0:
        text = f"{side} wing {surface} surface, {inboard_mm} mm inbd of rib {rib}"
        return Written(text, _truth(code, ws, 0.1)), "skin", surface
    if style == 1:
        text = f"{side} WING RIB {rib} {surface.upper()} SKIN"
        return Written(text, _truth(code, ws, 10.0)), "skin", surface
    if kind in LEADING_EDGE_KINDS and style == 2:
        text = f"fwd of front spar {side} wing WS {plain(label)} {surface} skin"
        return Written(text, _truth(code, ws, tolerance)), "skin", surface
    stringer = f" S-{1 + int(ws) % 8}" if kind == "scratch" else ""
    text = f"{side} wing WS {plain(label)}{stringer} {surface} skin"
    return Written(text, _truth(code, ws, tolerance)), "skin", surface


def _tailplane(stream: Stream, kind: str) -> tuple[Written, str, str]:
    side = stream.pick(("LH", "RH"))
    hs = _outboard(stream, kind, HS_TIP)
    surface = "upper" if stream.chance(0.5) else "lower"
    label, tolerance = rounded(stream, hs)
    text = f"HSTAB HS {plain(label)} {side} {surface} skin"
    return Written(text, _truth(f"HT-{side[0]}", hs, tolerance)), "skin", surface


def _fin(stream: Stream, kind: str) -> tuple[Written, str, str]:
    side = stream.pick(("LH", "RH"))
    up = _outboard(stream, kind, FIN_TIP)
    label, tolerance = rounded(stream, up)
    text = f"FIN STA {plain(label)} {side}"
    return Written(text, _truth("FIN", up, tolerance)), "skin", "outer"


def _nacelle(stream: Stream, kind: str) -> tuple[Written, str, str]:
    number = stream.pick((1, 2))
    ns = stream.between(4, NACELLE_END - 4)
    label, tolerance = rounded(stream, ns)
    hour, half = stream.whole(1, 12), stream.chance(0.5)
    text = f"nacelle {number} NS {plain(label)} {hour}{':30' if half else ''} o'clock"
    return Written(text, _truth(f"NAC-{number}", ns, tolerance)), "skin", "outer"
