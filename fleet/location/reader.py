"""First stage: what a location text says, without any aircraft type.

`read` never raises. What it cannot settle becomes a problem of the reading, a
question with offers; the value it is about is then not given.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from decimal import Decimal
from typing import Any

from fleet.location.cursor import Cursor
from fleet.location.points import (
    BUTT_PHRASE,
    TWO_POINTS,
    Point,
    butt_point,
    butt_words,
    clock_point,
    door_name,
    door_named,
    frame_point,
    hyphen_unclear,
    listed,
    order_of,
    point_text,
    reference_follows,
    rib_point,
    sign_after,
    station_point,
    stringer_follows,
    stringer_point,
    water_point,
    with_offset,
)
from fleet.location.reading import (
    Across,
    Door,
    Offset,
    Problem,
    Reading,
)
from fleet.location.words import (
    BUTT_WORDS,
    DIRECTIONS,
    FRAME_WORDS,
    RANGE_WORDS,
    RIB_WORDS,
    SIDE_WORDS,
    SPARS,
    STATION_WORDS,
    STRINGER_WORDS,
    SURFACE_NOUNS,
    SURFACES,
    WATER_WORDS,
    element_of,
    section_named,
)

EMPTY = "Nothing was given. Write a location such as STA 640+10 S-7R."
VALUE_MISSING = "“{word}” has no number after it. Write it as {word} 640."
NO_ALONG = "“{text}” does not say where along the section. Add a station or frame."
NO_REFERENCE = "“{text}” does not say of what. Add a frame, station, stringer or door."
HOW_FAR = "“{text} of” does not say how far. Write it as 12 in {text} of ..."


def read(text: str) -> Reading:
    """The reading of a text; problems are in it."""
    if not text.strip():
        return Reading(text, problems=(Problem("E_EMPTY", EMPTY),))
    return _Reader(text).reading()


class _Reader(Cursor):
    """One pass over the tokens of a text."""

    def __init__(self, text: str) -> None:
        super().__init__(text)
        self.found: dict[str, tuple[Any, ...]] = {}
        self.said: dict[str, Any] = {}
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
        element, label = element_of(self.low)
        parts: dict[str, Any] = self.found | self.said
        reading = Reading(
            text=self.text,
            section=self._section(),
            side=self._one_side(),
            element=element,
            element_label=label,
            codes=tuple(dict.fromkeys(self.codes)),
            **parts,
        )
        self._along_missing(reading)
        return replace(reading, problems=tuple(self.problems))

    def _section(self) -> str:
        """The section named, or else the one that the notation belongs to."""
        stations = self.found.get("stations")
        key = str(stations[0].key) if stations else "wing" * ("ribs" in self.found)
        return section_named(self.low) or key

    def _one_side(self) -> str:
        sides = set(self.sides)
        if len(sides) > 1:
            self.ask("E_SIDE_CONFLICT", "The text says both left and right; keep one.")
        return sides.pop() if len(sides) == 1 else ""

    def _along_missing(self, reading: Reading) -> None:
        given = reading.stations or reading.frames or reading.ribs or reading.door
        if given or reading.element == "bulkhead" or self.problems:
            return
        if self.valueless:
            word = self.valueless.upper()
            self.ask("E_STA_VALUE_MISSING", VALUE_MISSING.format(word=word))
        else:
            self.ask("E_NO_LONGITUDINAL", NO_ALONG.format(text=self.text.strip()))

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
            self._points("frames", "frame", frame_point, FRAME_WORDS)
        elif word in RIB_WORDS:
            self._points("ribs", "rib", rib_point, RIB_WORDS)
        elif word in BUTT_WORDS or (word in BUTT_PHRASE and butt_words(self)):
            keys = BUTT_WORDS.keys() | BUTT_PHRASE
            self._points("butt_lines", "bl", butt_point, keys)
        elif word in WATER_WORDS or (word == "water" and self.is_("line", ahead=1)):
            self._points("water_lines", "wl", water_point, WATER_WORDS)
        elif word in STRINGER_WORDS and stringer_follows(self):
            self._points("stringers", "stringer", stringer_point, STRINGER_WORDS)
        elif word == "door" or door_named(self):
            self._door()
        elif word in SPARS and self.is_("spar", ahead=1):
            self._spar()
        elif word in SURFACES and self._surface_noun():
            self.said.setdefault("surface", SURFACES[word])
            self.at += 2
        elif word in SIDE_WORDS:
            self._side(word)
        elif word in DIRECTIONS and self._direction_of_spar():
            self._spar_side(word)
        elif word in DIRECTIONS and self.is_("of", ahead=1):
            self._length_missing()

    def _side(self, word: str) -> None:
        if not self.is_("hand", ahead=1) or word in ("left", "right"):
            self.sides.append(SIDE_WORDS[word])
        self.at += 1

    def _surface_noun(self) -> bool:
        token = self.peek(1)
        return token is not None and token.text in SURFACE_NOUNS

    # -- lengths and numbers --------------------------------------------------

    def _number(self) -> None:
        """A number on its own: the clock, or a length from a reference."""
        before = self.at
        degrees = clock_point(self)
        if degrees is not None:
            known = self.found.get("clock_degrees", ())
            self.found["clock_degrees"] = (*known, degrees)
        elif self.is_("door", ahead=1):
            self._door()
        if self.at == before:
            self._offset()

    def _offset(self) -> None:
        """ "12 in aft of": kept for the reference that must follow."""
        start = self.at
        length = self.length()
        token = self.peek()
        if length is None or token is None or token.text not in DIRECTIONS:
            self.at = start + 1
            return
        direction = DIRECTIONS[token.text]
        self.at += 1
        of = self.is_("of", "from")
        if of:
            self.at += 1
        if not (of or reference_follows(self) or self._sentence_ends()):
            self.at = start + 1
            return
        if not length.unit:
            self.codes.append("W_UNIT_ASSUMED")
        self._pending_lost()
        first, last = self.tokens[start], self.tokens[self.at - 1]
        self.pending = Offset(length, 0, direction)
        self.pending_text = self.text[first.start : last.end]

    def _sentence_ends(self) -> bool:
        return self.peek() is None or self.is_(",", ";", ".", ")")

    def _pending_lost(self) -> None:
        if self.pending is not None:
            self.ask("E_REL_NO_REF", NO_REFERENCE.format(text=self.pending_text))
            self.pending = None

    def _take_pending(self) -> Offset | None:
        pending, self.pending = self.pending, None
        return pending

    def _length_missing(self) -> None:
        """ "aft of FR 20" with no length before it."""
        if reference_follows(self, 2) or self.is_("door", ahead=2):
            direction = self.tokens[self.at].text
            self.ask("E_REL_NO_REF", HOW_FAR.format(text=direction))
        self.at += 2

    # -- ranges ---------------------------------------------------------------

    def _points(
        self,
        name: str,
        kind: str,
        one: Callable[[Cursor], Point | None],
        keys: set[str],
    ) -> None:
        """One or two points of a kind and put them on record."""
        start = self.at
        offset = self._take_pending()
        asked = len(self.problems)
        first = one(self)
        if first is None:
            if offset is not None and len(self.problems) == asked:
                self.pending = offset
            self.at = max(self.at, start + 1)
            return
        first = with_offset(first, offset)
        last = self._range_end(first, one, keys, kind)
        if len(self.problems) > asked:
            return
        self._record(name, (first,) if last is None else (first, last), start)
        if kind == "stringer":
            sign_after(self, last or first)
        elif kind in ("station", "frame"):
            listed(self, start)

    def _range_end(
        self,
        first: Point,
        one: Callable[[Cursor], Point | None],
        keys: set[str],
        kind: str,
    ) -> Point | None:
        joiner = self.peek()
        if joiner is None or joiner.text not in RANGE_WORDS or joiner.kind == "num":
            return None
        back, codes, asked = self.at, len(self.codes), len(self.problems)
        self.at += 1
        self.skip("between", "of", "the")
        offset = self._offset_ahead()
        token = self.peek()
        keyed = token is not None and token.kind == "word" and token.text in keys
        if keyed or (token is not None and token.kind == "num"):
            last = one(self)
            if last is not None and len(self.problems) == asked:
                last = with_offset(last, offset)
                if order_of(last) >= order_of(first) or first.number == last.number:
                    return last
                if joiner.text == "-" and not keyed and kind in ("station", "frame"):
                    self.problems.append(hyphen_unclear(first, last))
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
        length = self.length()
        token = self.peek()
        if length is not None and token is not None and token.text in DIRECTIONS:
            self.at += 1
            self.skip("of")
            if reference_follows(self):
                if not length.unit:
                    self.codes.append("W_UNIT_ASSUMED")
                return Offset(length, 0, DIRECTIONS[token.text])
        self.at = back
        return None

    def _record(self, name: str, points: tuple[Point, ...], start: int) -> None:
        before = self.found.get(name)
        if before is None:
            self.found[name] = points
        elif before != points:
            text = self.text[self.tokens[start].start : self.tokens[self.at - 1].end]
            first = " ".join(str(point_text(p)) for p in before)
            if not any(p.code == "E_TWO_POINTS" for p in self.problems):
                message = TWO_POINTS.format(first=first, second=text.strip())
                self.ask("E_TWO_POINTS", message)

    # -- stations, frames, ribs -----------------------------------------------

    def _fin_station(self) -> bool:
        return self.is_("fin") and (
            self.is_("sta", "station", ahead=1) or self.kind("num", 1)
        )

    def _station(self, word: str) -> None:
        key = STATION_WORDS.get(word, "fin")
        if word == "fin":
            self.at += not self.kind("num", 1)
        before = len(self.problems)
        known = dict(self.found)
        self._points(
            "stations", "station", lambda c: station_point(c, key), set(STATION_WORDS)
        )
        nothing = len(self.problems) == before and known == self.found
        if nothing and not self.pending and "stations" not in self.found:
            self.valueless = self.valueless or word

    # -- doors and spars ------------------------------------------------------

    def _door(self) -> None:
        """ "door 2L", "2L door", "aft cargo door"; then its edge, if said."""
        name = door_name(self)
        if not name:
            return
        edge = ""
        if self.is_(*DIRECTIONS) and self.is_("frame", "edge", "jamb", ahead=1):
            edge = DIRECTIONS[self.tokens[self.at].text]
            self.at += 2
        offset = self._take_pending()
        if offset is not None and not edge:
            self.codes.append("W_REF_EDGE")
        self.said.setdefault("door", Door(name, edge, offset))

    def _direction_of_spar(self) -> bool:
        """ "aft of rear spar" without a length."""
        ahead = 1 + self.is_("of", ahead=1)
        return self.is_(*SPARS, ahead=ahead) and self.is_("spar", ahead=ahead + 1)

    def _spar_side(self, word: str) -> None:
        self.at += 1 + self.is_("of", ahead=1)
        if "spar" not in self.said:
            self.said["spar_side"] = DIRECTIONS[word]
        self._spar()

    def _spar(self) -> None:
        name = SPARS[self.tokens[self.at].text]
        offset = self._take_pending()
        self.said.setdefault("spar", Across("spar", Decimal(0), "", offset, name))
        self.at += 2
