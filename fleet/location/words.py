"""The words of location texts and what they stand for."""

from __future__ import annotations

import re

STATION_WORDS = {
    "sta": "fuselage", "stn": "fuselage", "station": "fuselage",
    "stations": "fuselage", "stas": "fuselage", "bs": "fuselage", "fs": "fuselage",
    "ws": "wing", "wbl": "wing", "hs": "horizontal tail", "ns": "nacelle",
}  # fmt: skip
"""Section that a station word belongs to; "FIN STA" is read as two words."""

FRAME_WORDS = frozenset({"fr", "frame", "frames", "frs"})
RIB_WORDS = frozenset({"rib", "ribs"})
STRINGER_WORDS = frozenset(
    {"s", "str", "strs", "strg", "stgr", "stgrs", "stringer", "stringers"}
)
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
BEFORE_SURFACE = {"wing", "lh", "rh", "left", "right", "tail", "horizontal", "hstab"}

RANGE_WORDS = frozenset({"to", "thru", "through", "and", "until", "&", "/", "-"})

OTHER_UNITS = {
    "yard", "yards", "yd", "yds", "mil", "mils", "mile", "miles", "micron", "microns",
    "point", "points", "pitch", "pitches", "hand", "hands",
}  # fmt: skip

SECTION_WORDS = re.compile(
    r"(?:(?:\bno\.?|\bnr\.?|\#)\s*(?P<first>\d)\s+)"
    r"(?:(?:lh|rh|left|right)\s+)?nac(?:elle)?\b"
    r"|\b(?:(?P<nacelle>nac(?:elle)?\b\s*(?:(?:no\.?|nr\.?|\#)?\s*(?P<number>\d)\b)?)"
    r"|(?P<tail>h\.?\s?stab(?:ili[sz]er)?\b|tailplane\b"
    r"|horiz(?:ontal)?\.?\s+(?:stab(?:ili[sz]er)?|tail)\b)"
    r"|(?P<fin>fin\b|vert(?:ical)?\.?\s+(?:stab(?:ili[sz]er)?|fin|tail)\b|vstab\b)"
    r"|(?P<wing>wing\b(?!\s*(?:to|-to)?[\s-]*body))"
    r"|(?P<fuselage>fuselage\b|fus\b))"
)

ELEMENT_WORDS = re.compile(
    r"\b(?:(?P<floor_beam>floor\s+beams?)"
    r"|(?P<seat_track>seat\s+tracks?)"
    r"|(?P<keel_beam>keel\s+beams?)"
    r"|(?P<bulkhead>(?P<which>fwd|forward|aft)?\s*(?:press(?:ure)?\.?\s+)?"
    r"(?:blkhd|bulkhead|bhd)\b)"
    r"|(?P<shear_clip>shear\s+(?:clip|tie)s?)"
    r"|(?P<frame>fr(?:ame)?s?\b\.?\s*-?\s*(?:\d+\w?\s+)?(?P<part>web|cap)s?)"
    r"|(?P<spar_cap>spar\s+(?:cap|chord)s?)"
    r"|(?P<spar_web>spar\s+webs?)"
    r"|(?P<fitting>fittings?)"
    r"|(?P<fairing>fairings?)"
    r"|(?P<door_structure>door\s+(?:structure|skin))"
    r"|(?P<skin>skin|lap\s+joint|butt\s+joint))\b"
)

_SECTION_HEADS = frozenset(
    {"nac", "nacelle", "h", "hstab", "hstabilizer", "hstabiliser", "tailplane",
     "horiz", "horizontal", "fin", "vert", "vertical", "vstab", "wing", "fuselage",
     "fus"}
)  # fmt: skip
_ELEMENT_HEADS = frozenset(
    {"beam", "beams", "track", "tracks", "blkhd", "bulkhead", "bhd", "clip", "clips",
     "tie", "ties", "web", "webs", "cap", "caps", "chord", "chords", "fitting",
     "fittings", "fairing", "fairings", "structure", "skin", "joint"}
)  # fmt: skip
"""Without one of these words a text names no section, or no structural item."""

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


def section_named(text: str, words: set[str]) -> str:
    """The section a lower-case text of these words names: "nacelle 2"; '' if none."""
    if _SECTION_HEADS.isdisjoint(words):
        return ""
    match = SECTION_WORDS.search(text)
    if match is None:
        return ""
    if match["first"] or match["nacelle"]:
        return f"nacelle {match['first'] or match['number'] or ''}".strip()
    kinds = {"tail": "horizontal tail"}
    return kinds.get(match.lastgroup or "", match.lastgroup or "")


def element_of(text: str, words: set[str]) -> tuple[str, str]:
    """The structural item a lower-case text names and its label; ('', '') if none.

    A plain word for skin gives way to whatever else is named.
    """
    if _ELEMENT_HEADS.isdisjoint(words):
        return "", ""
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
