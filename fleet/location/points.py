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
from fleet.location.tokens import number_lettered, number_of
from fleet.location.words import BUTT_WORDS, SIDE_WORDS, SPARS, WATER_WORDS

LETTERS = frozenset("abcdefghijklmnpqrstuvwxyz")
"""What may hang on a station or frame label; O is a nought."""
SIDE_LETTERS = frozenset({"l", "r", "lh", "rh", "lt", "rt"})
BUTT_PHRASE = frozenset({"left", "right", "butt"})
BEFORE_REFERENCE = frozenset({"the", "fin", "wing", "lh", "rh", "left", "right"})
JOINERS = frozenset({"to", "thru", "through", "and", "&", "-", "/"})
CLOCK = re.compile(r"(\d{1,2}):(\d{1,2})")
VIEW = re.compile(r"looking\s+(aft|f)")
DOOR = re.compile(r"\d[lr]")
Point = Along | Across

WHICH_WAY = "“{text}” does not say which way. Did you mean {offers}?"
TWO_POINTS = "“{first}” and “{second}” are two locations. Join a range with “to”."
AMBIGUOUS = "“{text}” may be read in more than one way. Did you mean {offers}?"
STRAY_SIGN = "“{text}” gives no length to add. Write it once, as STA 640+12."
NO_CLOCK = "“{text} o'clock” is no hour of the clock. Use 12, 1 … 11, or 7:30."


def station_point(c: Cursor, key: str) -> Along | None:
    hyphen = minus = False
    if c.kind("word"):
        if key != "fin":
            key = c.words.stations.get(c.peek().text, key)
        c.at += 1
        if not c.kind("num"):
            _marks(c)
            hyphen = c.is_("-") and c.kind("num", 1)
            minus = hyphen and not c.touching() and c.touching(1)
    elif c.is_("-") and c.touching(1):  # "-20" at the end of a range
        hyphen = minus = True
    c.at += hyphen
    value = c.value("station", LETTERS)
    if value is None:
        return None
    number, letter = value
    joined = hyphen and not minus
    offset = c.plus(number)
    return Along("station", key, -number if minus else number, letter, offset, joined)


def _marks(c: Cursor) -> None:
    """Past "STA.", "STA Y=", "STA NO."; asks of "STA l20", a letter for a digit."""
    c.skip(".", ":", "#", "@", "no")
    if c.is_("s", "y", "x") and c.kind("num", 1 + c.is_("=", ahead=1)):
        c.at += 1
        c.skip("=")
    if c.is_("l", "i", "o", "lo") and c.kind("num", 1) and c.touching(1):
        letter, token = c.peek(), c.peek(1)
        digits = letter.text.translate(str.maketrans("lio", "110"))
        read = (letter.text + token.text + token.tail).upper()
        c.problems.append(number_lettered(read, digits + token.text))
        c.at += 1


def frame_point(c: Cursor) -> Along | None:
    c.past_key(c.words.frames)
    value = c.value("frame", LETTERS)
    if value is None:
        return None
    return Along("frame", "", value[0], value[1], c.plus(value[0]))


def rib_point(c: Cursor) -> Along | None:
    c.past_key(c.words.ribs)
    value = c.value("rib")
    return None if value is None else Along("rib", "", value[0], "", c.plus(value[0]))


def stringer_follows(c: Cursor) -> bool:
    """Whether the word here names a stringer: "S-7R", "STR NO. 7", "STR L7"."""
    plain = len(c.peek().text) == 1
    ahead = 1
    while c.is_("-", ".", "#", "no", "nos", ahead=ahead) and ahead < 4:
        ahead += 1
    if not plain and c.is_("l", "r", ahead=ahead) and c.touching(ahead + 1):
        ahead += 1
    number = c.peek(ahead)
    if number.kind != "num":
        return False
    return not plain or (number.text.isdigit() and len(number.text) <= 2)


def stringer_point(c: Cursor) -> Across | None:
    c.past_key(c.words.stringers)
    before = ""
    if c.is_("l", "r") and c.kind("num", 1) and c.touching(1):
        before = c.peek().text.upper()
        c.at += 1
    value = c.value("stringer", SIDE_LETTERS)
    if value is None:
        return None
    side = value[1][:1].upper() or before
    if side:
        return Across("stringer", value[0], side)
    text = c.peek().text
    if text in ("l", "r") and not c.is_("&", "/", ahead=1):
        side = text.upper()
        c.at += 1
    elif text in SIDE_WORDS:
        side = SIDE_WORDS[text]
        if not butt_words(c):
            c.at += 1
            c.sides.append(side)
    return Across("stringer", value[0], side)


def spar_here(c: Cursor, ahead: int = 0) -> bool:
    """ "front spar", or "front" in "front and rear spar"."""
    if not c.among(SPARS, ahead):
        return False
    if c.is_("spar", "spars", ahead=ahead + 1):
        return True
    joined = c.among(JOINERS, ahead + 1) and c.among(SPARS, ahead + 2)
    return joined and c.is_("spar", "spars", ahead=ahead + 3)


def spar_point(c: Cursor) -> Across | None:
    if not spar_here(c):
        return None
    name = SPARS[c.peek().text]
    c.at += 1
    c.skip("spar", "spars")
    return Across("spar", Decimal(0), "", None, name)


def chord_follows(c: Cursor) -> bool:
    """ "30 % chord", "30% to 40% of chord": whether a share of the chord is here."""
    ahead = 1 + c.is_("%", ahead=1)
    if c.among(JOINERS, ahead) and c.kind("num", ahead + 1):
        ahead += 2 + c.is_("%", ahead=ahead + 2)
    of = ahead + c.is_("of", ahead=ahead)
    return c.is_("%", ahead=ahead - 1) and c.is_("chord", ahead=of)


def chord_point(c: Cursor) -> Across | None:
    number, _ = number_of(c.peek().text)
    if number is None:
        return None
    c.at += 1
    c.skip("%", "of", "chord")
    return Across("chord", number)


def butt_words(c: Cursor) -> bool:
    """ "left butt line", "butt line"."""
    ahead = 1 if c.is_("left", "right") else 0
    return c.is_("butt", ahead=ahead) and c.is_("line", ahead=ahead + 1)


def butt_point(c: Cursor) -> Across | None:
    side = ""
    if butt_words(c):
        side = SIDE_WORDS.get(c.tokens[c.at].text, "")
        c.at += 3 if side else 2
    elif c.among(BUTT_WORDS):
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
    elif c.among(WATER_WORDS):
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
    ranged = c.clock_range(0)
    if not (c.kind("clock", ahead) or ranged):
        return None
    shown = c.text[token.start : c.tokens[c.at + ahead - 1].end]
    minutes = c.tokens[c.at + 2].text if timed else "0"
    c.at += ahead + (not ranged)
    found = CLOCK.fullmatch(f"{token.text}:{minutes}")
    if found is None or not 1 <= int(found[1]) <= 12 or int(found[2]) > 59:
        c.ask("E_CLOCK", NO_CLOCK.format(text=shown))
        return None
    degrees = int(found[1]) % 12 * 30.0 + int(found[2]) / 2.0
    view = VIEW.search(c.low)
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
    named = token.tail and DOOR.fullmatch(token.text + token.tail)
    if not named or not (ahead or c.is_("door", ahead=1)):
        return ""
    c.at += 2
    return (token.text + token.tail).upper()


def point_text(point: Point) -> str:
    """A point as the reader understood it, for messages."""
    if isinstance(point, Along):
        plus = point.offset
        sign = "-" if plus and plus.sign < 0 else "+"
        more = f"{sign}{plus.length.number:f}" if plus and not plus.written else ""
        word = {"frame": "FR", "rib": "RIB"}.get(point.kind, "STA")
        return f"{word} {point.label.upper()}{more}"
    if point.kind == "stringer":
        return f"S-{point.number:f}{point.side}"
    return f"{point.side}{point.kind.upper()} {point.number:f}"


def reference_follows(c: Cursor, ahead: int = 0) -> bool:
    """Whether a station, frame, rib, stringer, line or spar is named ahead."""
    while c.among(BEFORE_REFERENCE, ahead) and ahead < 4:
        ahead += 1
    return c.among(c.words.references, ahead) or spar_here(c, ahead)


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
    if second.tail or not (c.kind("end", 2) or reference_follows(c, 2)):
        return
    first = c.text[c.tokens[start].start : c.tokens[c.at - 1].end]
    c.ask("E_TWO_POINTS", TWO_POINTS.format(first=first, second=second.text))


def stray_sign(c: Cursor) -> None:
    """ "STA 420+ S-9L", "STA 420+12+3": a sign that nothing can be made of."""
    if not c.is_("+"):
        return
    text = f"+ {c.peek(1).text}" if c.kind("num", 1) else "+"
    c.ask("E_NUM", STRAY_SIGN.format(text=text))


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
