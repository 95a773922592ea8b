"""The words of location texts and what they stand for."""

from __future__ import annotations

import re

STATION_WORDS = {
    "sta": "fuselage", "stn": "fuselage", "station": "fuselage",
    "stations": "fuselage", "stas": "fuselage", "bs": "fuselage", "fs": "fuselage",
    "ws": "wing", "wbl": "wing", "hs": "horizontal tail", "ns": "nacelle",
}  # fmt: skip
"""Section that a station word belongs to; "FIN STA" is read as two words."""

FRAME_WORDS = {"fr", "frame", "frames", "frs"}
RIB_WORDS = {"rib", "ribs"}
STRINGER_WORDS = {
    "s", "str", "strs", "strg", "stgr", "stgrs", "stringer", "stringers",
}  # fmt: skip
BUTT_WORDS = {
    "bl": "", "rbl": "R", "lbl": "L", "blr": "R", "bll": "L", "rhbl": "R", "lhbl": "L",
}  # fmt: skip
WATER_WORDS = {"wl", "waterline"}

SIDE_WORDS = {
    "lh": "L", "l/h": "L", "left": "L", "port": "L", "lt": "L", "lhs": "L",
    "rh": "R", "r/h": "R", "right": "R", "stbd": "R", "starboard": "R", "rt": "R",
    "rhs": "R",
}  # fmt: skip

DIRECTIONS = {
    "fwd": "fwd", "forward": "fwd", "ahead": "fwd",
    "aft": "aft", "behind": "aft",
    "above": "above", "below": "below", "under": "below",
    "inbd": "inbd", "inboard": "inbd", "outbd": "outbd", "outboard": "outbd",
}  # fmt: skip

SPARS = {
    "front": "front", "fwd": "front", "forward": "front", "rear": "rear", "aft": "rear",
    "mid": "mid", "middle": "mid", "centre": "mid", "center": "mid",
}  # fmt: skip

SURFACES = {
    "upper": "upper", "top": "upper", "lower": "lower", "bottom": "lower",
    "outer": "outer", "external": "outer", "outside": "outer",
    "inner": "inner", "inside": "inner",
}  # fmt: skip
SURFACE_NOUNS = {"skin", "skins", "surface", "surfaces", "panel"}

RANGE_WORDS = {"to", "thru", "through", "and", "until", "&", "/", "-"}

OTHER_UNITS = {
    "yard", "yards", "yd", "yds", "mil", "mils", "mile", "miles", "micron", "microns",
    "point", "points", "pitch", "pitches", "hand", "hands",
}  # fmt: skip

SECTION_WORDS = re.compile(
    r"\b(?:(?P<nacelle>nac(?:elle)?\s*(?:no\.?|nr\.?|\#)?\s*(?P<number>\d)\b)"
    r"|(?P<tail>h\.?\s?stab(?:ili[sz]er)?\b|tailplane\b"
    r"|horiz(?:ontal)?\.?\s+(?:stab(?:ili[sz]er)?|tail)\b)"
    r"|(?P<fin>fin\b|vert(?:ical)?\.?\s+(?:stab(?:ili[sz]er)?|fin|tail)\b|vstab\b)"
    r"|(?P<wing>wing\b(?!\s*(?:to|-to)?[\s-]*body))"
    r"|(?P<fuselage>fuselage\b|fus\b))"
)

ELEMENT_WORDS = re.compile(
    r"\b(?:(?P<floor_beam>floor\s+beam)"
    r"|(?P<seat_track>seat\s+track)"
    r"|(?P<keel_beam>keel\s+beam)"
    r"|(?P<bulkhead>(?P<which>fwd|forward|aft)?\s*(?:press(?:ure)?\.?\s+)?"
    r"(?:blkhd|bulkhead|bhd)\b)"
    r"|(?P<shear_clip>shear\s+(?:clip|tie))"
    r"|(?P<frame>fr(?:ame)?s?\b\.?\s*-?\s*(?:\d+\w?\s+)?(?P<part>web|cap)\b)"
    r"|(?P<spar_cap>spar\s+(?:cap|chord))"
    r"|(?P<spar_web>spar\s+web)"
    r"|(?P<fitting>fitting)"
    r"|(?P<fairing>fairing)"
    r"|(?P<door_structure>door\s+(?:structure|skin))"
    r"|(?P<skin>skin|lap\s+joint|butt\s+joint)\b)"
)

ELEMENT_PHRASES = {
    "floor_beam": "FLOOR BEAM",
    "seat_track": "SEAT TRACK",
    "shear_clip": "SHEAR CLIP",
    "frame_web": "FRAME WEB",
    "frame_cap": "FRAME CAP",
    "spar_cap": "SPAR CAP",
    "spar_web": "SPAR WEB",
    "fitting": "FITTING",
    "fairing": "FAIRING",
}
"""How an element other than skin is named in canonical text."""

INTERNAL = {
    "floor_beam", "seat_track", "bulkhead", "shear_clip", "frame_web", "frame_cap",
    "spar_cap", "spar_web", "rib", "stringer", "keel_beam",
}  # fmt: skip
"""Elements that do not lie on the outer surface."""
KEEL_BEAM = "KEEL BEAM"


def section_named(text: str) -> str:
    """The section a lower-case text names: "wing", "nacelle 2"; '' if none."""
    match = SECTION_WORDS.search(text)
    if match is None:
        return ""
    if match["nacelle"]:
        return f"nacelle {match['number']}"
    kinds = {"tail": "horizontal tail"}
    return kinds.get(match.lastgroup or "", match.lastgroup or "")


def element_of(text: str) -> tuple[str, str]:
    """The structural item named in a lower-case text and its label; ('', '') if none.

    A plain word for skin gives way to whatever else is named.
    """
    skin = ("", "")
    for found in ELEMENT_WORDS.finditer(text):
        name = found.lastgroup or ""
        groups = found.groupdict()
        if groups["skin"]:
            skin = ("skin", "")
            continue
        if groups["keel_beam"]:
            return "keel_beam", KEEL_BEAM
        if groups["frame"]:
            return f"frame_{groups['part']}", ""
        if groups["bulkhead"]:
            which = {"fwd": "FWD", "forward": "FWD", "aft": "AFT"}
            return "bulkhead", which.get(groups["which"] or "", "")
        return name, ""
    return skin
