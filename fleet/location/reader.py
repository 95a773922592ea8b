"""First stage: what a location text says, without any aircraft type.

`read` never raises. What it cannot settle becomes a problem of the reading, a
question with offers; the value it is about is then not given.
"""

from __future__ import annotations

from collections.abc import Callable, Collection
from dataclasses import replace
from decimal import Decimal
from typing import Any

from fleet.location.reading import (
    Across,
    Along,
    Door,
    Length,
    Offer,
    Offset,
    Problem,
    Reading,
)
from fleet.location.tokens import (
    Token,
    normalised,
    number_of,
    number_split,
    number_wrong,
    tokens_of,
)
from fleet.location.words import (
    BUTT_WORDS,
    DIRECTIONS,
    FRAME_WORDS,
    OTHER_UNITS,
    RANGE_WORDS,
    RIB_WORDS,
    SECTION_WORDS,
    SIDE_WORDS,
    SPARS,
    STATION_WORDS,
    STRINGER_WORDS,
    SURFACE_NOUNS,
    SURFACES,
    WATER_WORDS,
    element_of,
)
from fleet.units import unit_known

EMPTY = "Nothing was given. Write a location such as STA 640+10 S-7R."
VALUE_MISSING = "“{word}” has no number after it. Write it as {word} 640."
NO_ALONG = "“{text}” does not say where along the section. Add a station or frame."
AMBIGUOUS = "“{text}” may be read in more than one way. Did you mean {offers}?"
UNIT_UNKNOWN = "“{unit}” is not a unit of length. Use in, ft, mm, cm or m."
NO_REFERENCE = "“{text}” does not say of what. Add a frame, station, stringer or door."
NO_CLOCK = "“{text} o'clock” is no hour of the clock. Use 12, 1 … 11, or 7:30."
TWO_POINTS = "“{first}” and “{second}” are two locations. Join a range with “to”."

_SPLIT_DIGITS = {"station": 4, "frame": 2, "rib": 2, "stringer": 2, "bl": 3, "wl": 3}
_COUNTED = {
    "places", "place", "ea", "each", "locations", "areas", "spots", "holes", "cracks",
    "o'clock", "off", "x",
}  # fmt: skip
LETTERS = frozenset("abcdefghijklmnpqrstuvwxyz")
"""What may hang on a station or frame label; O is a nought."""
BUTT_PHRASE = frozenset({"left", "right", "butt"})
SIDE_LETTERS = frozenset({"l", "r", "lh", "rh", "lt", "rt"})
Point = Along | Across


def read(text: str) -> Reading:
    """The reading of a text; problems are in it."""
    if not text.strip():
        return Reading(text, problems=(Problem("E_EMPTY", EMPTY),))
    return _Reader(text).reading()


class _Reader:
    """One pass over the tokens of a text."""

    def __init__(self, text: str) -> None:
        self.text = text
        self.low = normalised(text)
        self.tokens = tokens_of(self.low)
        self.at = 0
        self.found: dict[str, tuple[Any, ...]] = {}
        self.said: dict[str, Any] = {}
        self.sides: list[str] = []
        self.codes: list[str] = []
        self.problems: list[Problem] = []
        self.pending: Offset | None = None
        self.pending_text = ""
        self.valueless = ""

    # -- the whole ------------------------------------------------------------

    def reading(self) -> Reading:
        while self.at < len(self.tokens):
            before = self.at
            self._step()
            if self.at == before:
                self.at += 1
        self._pending_lost()
        section = self._section()
        element, label = element_of(self.low)
        reading = Reading(
            text=self.text,
            section=section,
            side=self._one_side(),
            surface=self.said.get("surface", ""),
            spar=self.said.get("spar"),
            door=self.said.get("door"),
            element=element,
            element_label=label,
            codes=tuple(dict.fromkeys(self.codes)),
            **self.found,
        )
        self._along_missing(reading)
        return replace(reading, problems=tuple(self.problems))

    def _section(self) -> str:
        match = SECTION_WORDS.search(self.low)
        if match is None:
            keys = [p.key for p in self.found.get("stations", ())]
            if keys:
                return str(keys[0])
            return "wing" if "ribs" in self.found else ""
        kind = next(k for k, v in match.groupdict().items() if v and k != "number")
        if kind == "nacelle":
            return f"nacelle {match['number']}"
        return "horizontal tail" if kind == "tail" else kind

    def _one_side(self) -> str:
        sides = set(self.sides)
        if len(sides) > 1:
            self._ask("E_SIDE_CONFLICT", "The text says both left and right; keep one.")
        return sides.pop() if len(sides) == 1 else ""

    def _along_missing(self, reading: Reading) -> None:
        given = reading.stations or reading.frames or reading.ribs or reading.door
        if given or reading.element == "bulkhead" or self.problems:
            return
        if self.valueless:
            word = self.valueless.upper()
            self._ask("E_STA_VALUE_MISSING", VALUE_MISSING.format(word=word))
        else:
            self._ask("E_NO_LONGITUDINAL", NO_ALONG.format(text=self.text.strip()))

    def _ask(self, code: str, message: str, *offers: Offer) -> None:
        self.problems.append(Problem(code, message, offers))

    # -- tokens ---------------------------------------------------------------

    def _peek(self, ahead: int = 0) -> Token | None:
        index = self.at + ahead
        return self.tokens[index] if index < len(self.tokens) else None

    def _is(self, *texts: str, ahead: int = 0) -> bool:
        token = self._peek(ahead)
        return token is not None and token.text in texts and token.kind != "num"

    def _kind(self, kind: str, ahead: int = 0) -> bool:
        token = self._peek(ahead)
        return token is not None and token.kind == kind

    def _skip(self, *texts: str) -> None:
        while self._is(*texts):
            self.at += 1

    def _touching(self, ahead: int = 0) -> bool:
        """Whether no blank stands between this token and the one before it."""
        here, before = self._peek(ahead), self._peek(ahead - 1)
        return bool(here and before and here.start == before.end)

    # -- one step -------------------------------------------------------------

    def _step(self) -> None:
        token = self.tokens[self.at]
        if token.kind == "num":
            self._number()
        elif token.kind == "side":
            self._side(token.text)
        elif token.kind == "word":
            self._word(token.text)

    def _word(self, word: str) -> None:
        if word in STATION_WORDS or self._fin_station():
            self._station(word)
        elif word in FRAME_WORDS:
            self._points("frames", "frame", self._frame, FRAME_WORDS)
        elif word in RIB_WORDS:
            self._points("ribs", "rib", self._rib, RIB_WORDS)
        elif word in BUTT_WORDS or (word in BUTT_PHRASE and self._butt_words()):
            keys = BUTT_WORDS.keys() | BUTT_PHRASE
            self._points("butt_lines", "bl", self._butt, keys)
        elif word in WATER_WORDS or (word == "water" and self._is("line", ahead=1)):
            self._points("water_lines", "wl", self._water, WATER_WORDS)
        elif word in STRINGER_WORDS and self._stringer_follows():
            self._points("stringers", "stringer", self._stringer, STRINGER_WORDS)
        elif word == "door" or self._is("door", ahead=1) or self._cargo_door():
            self._door()
        elif word in SPARS and self._is("spar", ahead=1):
            self._spar()
        elif word in SURFACES and self._surface_noun():
            self.said.setdefault("surface", SURFACES[word])
            self.at += 2
        elif word in SIDE_WORDS:
            self._side(word)
        elif word in DIRECTIONS and self._direction_of_spar():
            self._spar_side(word)
        elif word == "looking" and self._is("aft", ahead=1):
            self.said["looking_aft"] = True
            self.at += 2

    def _side(self, word: str) -> None:
        if not self._is("hand", ahead=1) or word in ("left", "right"):
            self.sides.append(SIDE_WORDS[word])
        self.at += 1

    def _surface_noun(self) -> bool:
        token = self._peek(1)
        return token is not None and token.text in SURFACE_NOUNS

    # -- lengths and numbers --------------------------------------------------

    def _number(self) -> None:
        """A number on its own: the clock, or a length from a reference."""
        if self._clock():
            return
        if self._is("door", ahead=1) and self._peek_door_name():
            self._door()
            return
        start = self.at
        length = self._length()
        token = self._peek()
        if length is None or token is None or token.text not in DIRECTIONS:
            self.at = start + 1
            return
        direction = DIRECTIONS[token.text]
        self.at += 1
        of = self._is("of", "from")
        if of:
            self.at += 1
        if not (of or self._reference_follows()):
            self.at = start + 1
            return
        if not length.unit:
            self.codes.append("W_UNIT_ASSUMED")
        self._pending_lost()
        first, last = self.tokens[start], self.tokens[self.at - 1]
        self.pending = Offset(length, 0, direction)
        self.pending_text = self.text[first.start : last.end]

    def _reference_follows(self) -> bool:
        token = self._peek()
        words = (
            STATION_WORDS.keys() | FRAME_WORDS | RIB_WORDS | STRINGER_WORDS
            | BUTT_WORDS.keys() | WATER_WORDS
        )  # fmt: skip
        return token is not None and token.text in words

    def _pending_lost(self) -> None:
        if self.pending is not None:
            self._ask("E_REL_NO_REF", NO_REFERENCE.format(text=self.pending_text))
            self.pending = None

    def _take_pending(self) -> Offset | None:
        pending, self.pending = self.pending, None
        return pending

    def _length(self) -> Length | None:
        """A length at the present token: "12", "3/4 in", "1 1/2\"", "38mm"."""
        token = self._peek()
        if token is None or token.kind != "num":
            return None
        number, code = number_of(token.text)
        if number is None:
            return None
        self.at += 1
        if self._kind("num") and self._is("/", ahead=1) and self._kind("num", 2):
            top, number_under = self.tokens[self.at], self.tokens[self.at + 2]
            part = _fraction(top, number_under)
            if part is not None and not token.tail:
                number, token = number + part, number_under
                self.at += 3
        elif not token.tail and self._is("/") and self._kind("num", 1):
            part = _fraction(token, self.tokens[self.at + 1])
            if part is not None:
                number, token = part, self.tokens[self.at + 1]
                self.at += 2
        if code:
            self.codes.append(code)
        return Length(number, self._unit(token.tail))

    def _unit(self, tail: str) -> str:
        if tail:
            return unit_known(tail) or ""
        token = self._peek()
        if token is None or token.kind == "num":
            return ""
        if token.text == "'":
            self.at += 1
            return ""
        unit = unit_known(token.text)
        if unit and not (unit == "m" and token.kind == "word" and len(token.text) > 1):
            self.at += 1
            return unit
        if token.kind == "word" and token.text in OTHER_UNITS:
            self._ask("E_UNIT_UNKNOWN", UNIT_UNKNOWN.format(unit=token.text))
            self.at += 1
        return ""

    def _value(
        self, kind: str, tails: Collection[str] = ()
    ) -> tuple[Decimal, str] | None:
        """The number at the present token with the letter that may hang on it."""
        token = self._peek()
        if token is None or token.kind != "num":
            return None
        number, code = number_of(token.text)
        letter = token.tail
        if number is None or (letter and letter not in tails):
            self.problems.append(number_wrong(token))
            self.at += 1
            return None
        split = self._split(token, kind)
        if split is not None:
            self.problems.append(number_split(token, split))
            self.at += 2
            return None
        if code:
            self.codes.append(code)
        self.at += 1
        return number, letter

    def _split(self, token: Token, kind: str) -> Token | None:
        """The second half of a number that a blank has broken."""
        other, after = self._peek(1), self._peek(2)
        if token.tail or "." in token.text or other is None or other.kind != "num":
            return None
        joined = token.text + other.text.partition(".")[0]
        if not joined.isdigit() or len(joined) > _SPLIT_DIGITS[kind]:
            return None
        if after is not None and after.kind != "num":
            follows = after.text in _COUNTED or after.text in DIRECTIONS
            if after.kind == "clock" or after.text in ("/", ":", '"') or follows:
                return None
            if unit_known(after.text) and after.text != "in":
                return None
            if after.text == "in" and self._peek(3) is not None:
                third = self.tokens[self.at + 3]
                if third.text in DIRECTIONS:
                    return None
        if other.tail and unit_known(other.tail):
            return None
        return other

    # -- ranges ---------------------------------------------------------------

    def _points(
        self,
        name: str,
        kind: str,
        one: Callable[[], Point | None],
        keys: set[str],
    ) -> None:
        """One or two points of a kind and put them on record."""
        start = self.at
        offset = self._take_pending()
        asked = len(self.problems)
        first = one()
        if first is None:
            if offset is not None and len(self.problems) == asked:
                self.pending = offset
            self.at = max(self.at, start + 1)
            return
        first = _with(first, offset)
        last = self._range_end(first, one, keys, kind)
        if len(self.problems) > asked:
            return
        self._record(name, (first,) if last is None else (first, last), start)

    def _range_end(
        self,
        first: Point,
        one: Callable[[], Point | None],
        keys: set[str],
        kind: str,
    ) -> Point | None:
        joiner = self._peek()
        if joiner is None or joiner.text not in RANGE_WORDS or joiner.kind == "num":
            return None
        back, codes, asked = self.at, len(self.codes), len(self.problems)
        self.at += 1
        self._skip("between", "of", "the")
        offset = self._offset_ahead()
        token = self._peek()
        keyed = token is not None and token.kind == "word" and token.text in keys
        if keyed or (token is not None and token.kind == "num"):
            last = one()
            if last is not None and len(self.problems) == asked:
                last = _with(last, offset)
                if _order(last) >= _order(first) or first.number == last.number:
                    return last
                if joiner.text == "-" and not keyed and kind in ("station", "frame"):
                    self._ambiguous(first, last)
                    return None
                if keyed or joiner.text in ("to", "thru", "through", "-"):
                    return last
            elif joiner.text not in ("and", "&", "/"):
                return None
        self.at = back
        del self.codes[codes:], self.problems[asked:]
        return None

    def _offset_ahead(self) -> Offset | None:
        """ "2 in above" before the end of a range."""
        back = self.at
        length = self._length()
        token = self._peek()
        if length is not None and token is not None and token.text in DIRECTIONS:
            self.at += 1
            self._skip("of")
            if self._reference_follows():
                if not length.unit:
                    self.codes.append("W_UNIT_ASSUMED")
                return Offset(length, 0, DIRECTIONS[token.text])
        self.at = back
        return None

    def _ambiguous(self, first: Point, last: Point) -> None:
        a, b = first.number, last.number
        word = "FR" if isinstance(first, Along) and first.kind == "frame" else "STA"
        offers = [Offer("minus", f"{word} {a - b:f}", (float(a - b),))]
        digits, short = f"{a:f}".partition(".")[0], f"{b:f}"
        if len(short) < len(digits) and short.isdigit():
            end = Decimal(digits[: -len(short)] + short)
            if end > a:
                text = f"{word} {a:f} to {end:f}"
                offers.append(Offer("range", text, (float(a), float(end))))
        shown = " or ".join(offer.text for offer in offers)
        text = f"{a:f}-{b:f}"
        self._ask("E_AMBIG_MINUS", AMBIGUOUS.format(text=text, offers=shown), *offers)

    def _record(self, name: str, points: tuple[Point, ...], start: int) -> None:
        before = self.found.get(name)
        if before is None:
            self.found[name] = points
        elif before != points:
            text = self.text[self.tokens[start].start : self.tokens[self.at - 1].end]
            first = " ".join(str(point_text(p)) for p in before)
            if not any(p.code == "E_TWO_POINTS" for p in self.problems):
                message = TWO_POINTS.format(first=first, second=text.strip())
                self._ask("E_TWO_POINTS", message)

    # -- stations, frames, ribs -----------------------------------------------

    def _fin_station(self) -> bool:
        return self._is("fin") and (
            self._is("sta", "station", ahead=1) or self._kind("num", 1)
        )

    def _station(self, word: str) -> None:
        key = STATION_WORDS.get(word, "fin")
        if word == "fin":
            self.at += not self._kind("num", 1)
        before = len(self.problems)
        known = dict(self.found)
        self._points(
            "stations", "station", lambda: self._station_point(key), set(STATION_WORDS)
        )
        nothing = len(self.problems) == before and known == self.found
        if nothing and not self.pending and "stations" not in self.found:
            self.valueless = self.valueless or word

    def _station_point(self, key: str) -> Along | None:
        token = self._peek()
        minus = False
        if token is not None and token.kind == "word":
            if key != "fin":
                key = STATION_WORDS.get(token.text, key)
            self.at += 1
            self._skip(".", ":", "#", "@", "no")
            if self._is("s", "y", "x") and self._kind(
                "num", 1 + self._is("=", ahead=1)
            ):
                self.at += 1
                self._skip("=")
            if self._is("-") and self._kind("num", 1):
                minus = not self._touching() and self._touching(1)
                self.at += 1
        value = self._value("station", LETTERS)
        if value is None:
            return None
        number, letter = value
        return Along("station", key, -number if minus else number, letter, self._plus())

    def _plus(self) -> Offset | None:
        """ "+ 12", "+3/4\"" after a label."""
        if not self._is("+") or not self._kind("num", 1):
            return None
        self.at += 1
        length = self._length()
        return None if length is None else Offset(length, 1)

    def _frame(self) -> Along | None:
        self._past_key(FRAME_WORDS)
        value = self._value("frame", LETTERS)
        if value is None:
            return None
        return Along("frame", "", value[0], value[1], self._plus())

    def _rib(self) -> Along | None:
        self._past_key(RIB_WORDS)
        value = self._value("rib")
        return None if value is None else Along("rib", "", value[0], "", self._plus())

    def _past_key(self, keys: set[str]) -> None:
        token = self._peek()
        if token is not None and token.kind == "word" and token.text in keys:
            self.at += 1
            self._skip(".", ":", "#", "no")
            if self._is("-") and self._kind("num", 1):
                self.at += 1

    # -- across ---------------------------------------------------------------

    def _stringer_follows(self) -> bool:
        token = self._peek()
        ahead = 1 + (self._is("-", ".", ahead=1))
        if not self._kind("num", ahead):
            return False
        number = self.tokens[self.at + ahead].text
        plain = token is not None and token.text == "s"
        return not plain or (number.isdigit() and len(number) <= 2)

    def _stringer(self) -> Across | None:
        self._past_key(STRINGER_WORDS)
        value = self._value("stringer", SIDE_LETTERS)
        if value is None:
            return None
        side = value[1][:1].upper()
        if not side and self._is("l", "r") and not self._is("&", "/", ahead=1):
            side = self.tokens[self.at].text.upper()
            self.at += 1
        elif not side and self._kind("word") and self._is(*SIDE_WORDS):
            side = SIDE_WORDS[self.tokens[self.at].text]
            if not self._butt_words():
                self.at += 1
                self.sides.append(side)
        return Across("stringer", value[0], side)

    def _butt_words(self) -> bool:
        """ "left butt line", "butt line"."""
        ahead = 1 if self._is("left", "right") else 0
        return self._is("butt", ahead=ahead) and self._is("line", ahead=ahead + 1)

    def _butt(self) -> Across | None:
        side = ""
        if self._butt_words():
            side = SIDE_WORDS.get(self.tokens[self.at].text, "")
            self.at += 3 if side else 2
        elif self._is(*BUTT_WORDS):
            side = BUTT_WORDS[self.tokens[self.at].text]
            self.at += 1
        self._skip(".", ":", "#", "=")
        if not side and self._is("l", "r"):
            side = self.tokens[self.at].text.upper()
            self.at += 1
        if self._is("-") and self._kind("num", 1):
            side = side or ("L" if not self._touching() else "")
            self.at += 1
        value = self._value("bl", SIDE_LETTERS)
        if value is None:
            return None
        return Across("bl", value[0], side or value[1][:1].upper())

    def _water(self) -> Across | None:
        if self._is("water"):
            self.at += 2
        elif self._is(*WATER_WORDS):
            self.at += 1
        self._skip(".", ":", "#", "=", "-")
        value = self._value("wl")
        return None if value is None else Across("wl", value[0])

    def _clock(self) -> bool:
        """ "4 o'clock", "7:30 o'clock"."""
        token = self.tokens[self.at]
        minutes, ahead = 0, 1
        if self._is(":", ahead=1) and self._kind("num", 2):
            minutes_text = self.tokens[self.at + 2].text
            minutes = int(minutes_text) if minutes_text.isdigit() else 60
            ahead = 3
        if not self._kind("clock", ahead):
            return False
        shown = self.text[token.start : self.tokens[self.at + ahead - 1].end]
        hour = int(token.text) if token.text.isdigit() else 0
        self.at += ahead + 1
        if not 1 <= hour <= 12 or minutes > 59:
            self._ask("E_CLOCK", NO_CLOCK.format(text=shown))
            return True
        degrees = (hour % 12) * 30.0 + minutes / 2.0
        aft = self._looking_aft()
        if not aft and not self._is("looking"):
            self.codes.append("W_VIEW_ASSUMED")
        known = self.found.get("clock_degrees", ())
        self.found["clock_degrees"] = (
            *known,
            (360.0 - degrees) % 360.0 if aft else degrees,
        )
        return True

    def _looking_aft(self) -> bool:
        ahead = 1 if self._is(",", "(") else 0
        return self._is("looking", ahead=ahead) and self._is("aft", ahead=ahead + 1)

    # -- doors and spars ------------------------------------------------------

    def _peek_door_name(self) -> bool:
        token = self.tokens[self.at]
        return (
            token.text.isdigit() and len(token.text) == 1 and token.tail in ("l", "r")
        )

    def _cargo_door(self) -> bool:
        return self._is("cargo", ahead=1) and self._is("door", ahead=2)

    def _door(self) -> None:
        """ "door 2L", "2L door", "aft cargo door"; then its edge, if said."""
        name, start = "", self.at
        if self._kind("num") and self._peek_door_name():
            token = self.tokens[self.at]
            name = f"{token.text}{token.tail}".upper()
            self.at += 2
        elif self._cargo_door():
            name = f"{self.tokens[self.at].text} cargo".upper().replace(
                "FORWARD", "FWD"
            )
            self.at += 3
        elif self._is("door"):
            self.at += 1
            if self._kind("num") and self._peek_door_name():
                token = self.tokens[self.at]
                name = f"{token.text}{token.tail}".upper()
                self.at += 1
        if not name:
            self.at = start + 1
            return
        edge = ""
        if self._is(*DIRECTIONS) and self._is("frame", "edge", "jamb", ahead=1):
            edge = DIRECTIONS[self.tokens[self.at].text]
            self.at += 2
        offset = self._take_pending()
        if offset is not None and not edge:
            self.codes.append("W_REF_EDGE")
        self.said.setdefault("door", Door(name, edge, offset))

    def _direction_of_spar(self) -> bool:
        """ "aft of rear spar" without a length."""
        ahead = 1 + self._is("of", ahead=1)
        return self._is(*SPARS, ahead=ahead) and self._is("spar", ahead=ahead + 1)

    def _spar_side(self, word: str) -> None:
        offset = Offset(Length(Decimal(0), ""), 0, DIRECTIONS[word])
        self.at += 1 + self._is("of", ahead=1)
        name = SPARS[self.tokens[self.at].text]
        self.said.setdefault("spar", Across("spar", Decimal(-1), "", offset, name))
        self.at += 2

    def _spar(self) -> None:
        name = SPARS[self.tokens[self.at].text]
        offset = self._take_pending()
        self.said.setdefault("spar", Across("spar", Decimal(0), "", offset, name))
        self.at += 2


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


def _with(point: Point, offset: Offset | None) -> Point:
    return point if offset is None else replace(point, offset=offset)


def _order(point: Point) -> tuple[Decimal, str]:
    """Labels rise by number, then by the letter of a plug."""
    return point.number, point.letter if isinstance(point, Along) else ""


def _fraction(top: Token, under: Token) -> Decimal | None:
    if not (top.text.isdigit() and under.text.isdigit()) or not int(under.text):
        return None
    return Decimal(top.text) / Decimal(under.text) if not top.tail else None
