"""The points of a location text: stations, frames, ribs, stringers, lines.

Each function reads one point from the cursor on, with or without its word before it;
None if there is none.
"""

from __future__ import annotations

import re
from dataclasses import replace
from decimal import Decimal

from fleet.location.cursor import Cursor
from fleet.location.reading import Across, Along, Offer, Offset, Problem
from fleet.location.words import (
    BUTT_WORDS,
    FRAME_WORDS,
    RIB_WORDS,
    SIDE_WORDS,
    STATION_WORDS,
    STRINGER_WORDS,
    WATER_WORDS,
)

LETTERS = frozenset("abcdefghijklmnpqrstuvwxyz")
"""What may hang on a station or frame label; O is a nought."""
SIDE_LETTERS = frozenset({"l", "r", "lh", "rh", "lt", "rt"})
BUTT_PHRASE = frozenset({"left", "right", "butt"})
REFERENCES = frozenset(
    STATION_WORDS.keys() | FRAME_WORDS | RIB_WORDS | STRINGER_WORDS
    | BUTT_WORDS.keys() | WATER_WORDS
)  # fmt: skip
Point = Along | Across

WHICH_WAY = "“{text}” does not say which way. Did you mean {offers}?"
TWO_POINTS = "“{first}” and “{second}” are two locations. Join a range with “to”."
AMBIGUOUS = "“{text}” may be read in more than one way. Did you mean {offers}?"
NO_CLOCK = "“{text} o'clock” is no hour of the clock. Use 12, 1 … 11, or 7:30."


def station_point(c: Cursor, key: str) -> Along | None:
    token = c.peek()
    minus = False
    if token is not None and token.kind == "word":
        if key != "fin":
            key = STATION_WORDS.get(token.text, key)
        c.at += 1
        c.skip(".", ":", "#", "@", "no")
        if c.is_("s", "y", "x") and c.kind("num", 1 + c.is_("=", ahead=1)):
            c.at += 1
            c.skip("=")
        if c.is_("-") and c.kind("num", 1):
            minus = not c.touching() and c.touching(1)
            c.at += 1
    value = c.value("station", LETTERS)
    if value is None:
        return None
    number, letter = value
    return Along("station", key, -number if minus else number, letter, c.plus())


def frame_point(c: Cursor) -> Along | None:
    c.past_key(FRAME_WORDS)
    value = c.value("frame", LETTERS)
    if value is None:
        return None
    return Along("frame", "", value[0], value[1], c.plus())


def rib_point(c: Cursor) -> Along | None:
    c.past_key(RIB_WORDS)
    value = c.value("rib")
    return None if value is None else Along("rib", "", value[0], "", c.plus())


def stringer_follows(c: Cursor) -> bool:
    token = c.peek()
    ahead = 1 + (c.is_("-", ".", ahead=1))
    if not c.kind("num", ahead):
        return False
    number = c.tokens[c.at + ahead].text
    plain = token is not None and token.text == "s"
    return not plain or (number.isdigit() and len(number) <= 2)


def stringer_point(c: Cursor) -> Across | None:
    c.past_key(STRINGER_WORDS)
    value = c.value("stringer", SIDE_LETTERS)
    if value is None:
        return None
    side = value[1][:1].upper()
    if not side and c.is_("l", "r") and not c.is_("&", "/", ahead=1):
        side = c.tokens[c.at].text.upper()
        c.at += 1
    elif not side and c.kind("word") and c.is_(*SIDE_WORDS):
        side = SIDE_WORDS[c.tokens[c.at].text]
        if not butt_words(c):
            c.at += 1
            c.sides.append(side)
    return Across("stringer", value[0], side)


def butt_words(c: Cursor) -> bool:
    """ "left butt line", "butt line"."""
    ahead = 1 if c.is_("left", "right") else 0
    return c.is_("butt", ahead=ahead) and c.is_("line", ahead=ahead + 1)


def butt_point(c: Cursor) -> Across | None:
    side = ""
    if butt_words(c):
        side = SIDE_WORDS.get(c.tokens[c.at].text, "")
        c.at += 3 if side else 2
    elif c.is_(*BUTT_WORDS):
        side = BUTT_WORDS[c.tokens[c.at].text]
        c.at += 1
    c.skip(".", ":", "#", "=")
    if not side and c.is_("l", "r"):
        side = c.tokens[c.at].text.upper()
        c.at += 1
    if c.is_("-") and c.kind("num", 1):
        side = side or ("L" if not c.touching() else "")
        c.at += 1
    value = c.value("bl", SIDE_LETTERS)
    if value is None:
        return None
    return Across("bl", value[0], side or value[1][:1].upper())


def water_point(c: Cursor) -> Across | None:
    if c.is_("water"):
        c.at += 2
    elif c.is_(*WATER_WORDS):
        c.at += 1
    c.skip(".", ":", "#", "=", "-")
    value = c.value("wl")
    return None if value is None else Across("wl", value[0])


def clock_point(c: Cursor) -> float | None:
    """Degrees clockwise from the crown of "4 o'clock", "7:30 o'clock".

    The view is forward unless the text says otherwise; looking aft swaps the sides.
    """
    token = c.tokens[c.at]
    timed = c.is_(":", ahead=1) and c.kind("num", 2)
    ahead = 3 if timed else 1
    if not c.kind("clock", ahead):
        return None
    shown = c.text[token.start : c.tokens[c.at + ahead - 1].end]
    minutes = c.tokens[c.at + 2].text if timed else "0"
    c.at += ahead + 1
    found = re.fullmatch(r"(\d{1,2}):(\d{1,2})", f"{token.text}:{minutes}")
    if found is None or not 1 <= int(found[1]) <= 12 or int(found[2]) > 59:
        c.ask("E_CLOCK", NO_CLOCK.format(text=shown))
        return None
    degrees = int(found[1]) % 12 * 30.0 + int(found[2]) / 2.0
    view = re.search(r"looking\s+(aft|f)", c.low)
    if view is None:
        c.codes.append("W_VIEW_ASSUMED")
    return (360.0 - degrees) % 360.0 if view and view[1] == "aft" else degrees


def door_named(c: Cursor) -> bool:
    """Whether a cargo door is named, as "aft cargo door"."""
    which = c.is_("fwd", "forward", "aft", "main", "upper", "lower", "bulk")
    return which and c.is_("cargo", ahead=1) and c.is_("door", ahead=2)


def door_name(c: Cursor) -> str:
    """The name in "door 2L", "2L door", "aft cargo door"; '' if it is none of them."""
    if door_named(c):
        c.at += 3
        which = c.tokens[c.at - 3].text.replace("forward", "fwd")
        return f"{which} cargo".upper()
    ahead = 1 if c.is_("door") else 0
    token = c.peek(ahead)
    named = token is not None and re.fullmatch(r"\d[lr]", token.text + token.tail)
    if token is None or not named or not (ahead or c.is_("door", ahead=1)):
        return ""
    c.at += 2
    return (token.text + token.tail).upper()


def point_text(point: Point) -> str:
    """A point as the reader understood it, for messages."""
    if isinstance(point, Along):
        plus = point.offset
        more = f"+{plus.length.number:f}" if plus and not plus.written else ""
        word = {"frame": "FR", "rib": "RIB"}.get(point.kind, "STA")
        return f"{word} {point.label.upper()}{more}"
    if point.kind == "stringer":
        return f"S-{point.number:f}{point.side}"
    return f"{point.side}{point.kind.upper()} {point.number:f}"


def reference_follows(c: Cursor, ahead: int = 0) -> bool:
    """Whether a word of a station, frame, rib, stringer or line is ahead."""
    token = c.peek(ahead)
    return token is not None and token.text in REFERENCES


def sign_after(c: Cursor, point: Point) -> None:
    """ "S-7R + 4 in": a sign has no meaning across, so the words are asked for."""
    start = c.at
    if not c.is_("+") or not c.kind("num", 1):
        return
    c.at += 1
    length = c.length()
    if length is not None:
        shown = f"{length.number:f} {length.unit}".strip()
        ways = ("below", "above")
        offers = [Offer(w, f"{shown} {w} {point_text(point)}") for w in ways]
        text = c.text[c.tokens[start].start : c.tokens[c.at - 1].end]
        given = " or ".join(offer.text for offer in offers)
        c.ask("E_REL_NO_REF", WHICH_WAY.format(text=text, offers=given), *offers)


def listed(c: Cursor, start: int) -> None:
    """ "STA 500, 520": a second number after a comma is a second location."""
    if not c.is_(",") or not c.kind("num", 1):
        return
    second = c.tokens[c.at + 1]
    if second.tail or not (c.peek(2) is None or reference_follows(c, 2)):
        return
    first = c.text[c.tokens[start].start : c.tokens[c.at - 1].end]
    c.ask("E_TWO_POINTS", TWO_POINTS.format(first=first, second=second.text))


def hyphen_unclear(first: Point, last: Point) -> Problem:
    """The question of "640-12": minus, or the end of a range cut short."""
    a, b = first.number, last.number
    word = "FR" if isinstance(first, Along) and first.kind == "frame" else "STA"
    offers = [Offer("minus", f"{word} {a - b:f}", (float(a - b),))]
    digits, short = f"{a:f}".partition(".")[0], f"{b:f}"
    if len(short) < len(digits) and short.isdigit():
        end = Decimal(digits[: -len(short)] + short)
        if end > a:
            text = f"{word} {a:f} to {end:f}"
            offers.append(Offer("range", text, (float(a), float(end))))
    given = " or ".join(offer.text for offer in offers)
    message = AMBIGUOUS.format(text=f"{a:f}-{b:f}", offers=given)
    return Problem("E_AMBIG_MINUS", message, tuple(offers))


def with_offset(point: Point, offset: Offset | None) -> Point:
    return point if offset is None else replace(point, offset=offset)


def order_of(point: Point) -> tuple[Decimal, str]:
    """Labels rise by number, then by the letter of a plug."""
    return point.number, point.letter if isinstance(point, Along) else ""
