"""Points of a text put on record: one alone, or two that a word joins."""

from __future__ import annotations

from collections.abc import Callable, Collection
from typing import Any

from fleet.location.cursor import Cursor
from fleet.location.points import (
    JOINERS,
    TWO_POINTS,
    Point,
    hyphen_unclear,
    listed,
    order_of,
    point_text,
    reference_follows,
    sign_after,
    stray_sign,
    with_offset,
)
from fleet.location.reading import Offer, Offset
from fleet.location.vocabulary import Vocabulary
from fleet.location.words import DIRECTIONS, RANGE_WORDS

NO_REFERENCE = "“{text}” does not say of what. {mend}"
NAME_ONE = "Add a frame, station, stringer or door."
ALONG = ("frames", "stations", "ribs")
ACROSS = ("stringers", "water_lines")


class Ranges(Cursor):
    """Keeps what was found by kind, and an offset until its reference comes."""

    def __init__(self, text: str, words: Vocabulary) -> None:
        super().__init__(text, words)
        self.found: dict[str, tuple[Any, ...]] = {}
        self.pending: Offset | None = None
        self.pending_text = ""

    def _take_pending(self) -> Offset | None:
        pending, self.pending = self.pending, None
        return pending

    def _pending_lost(self) -> None:
        if self.pending is not None:
            text = self.pending_text
            across = self.pending.direction in ("above", "below")
            self.pending = None
            names = ACROSS if across else ALONG
            known = [self.found[name][-1] for name in names if name in self.found]
            of = text if across or text.endswith((" of", " from")) else f"{text} of"
            offers = [Offer("reference", f"{of} {point_text(p)}") for p in known]
            mend = NAME_ONE
            if offers:
                mend = f"Did you mean {' or '.join(o.text for o in offers)}?"
            message = NO_REFERENCE.format(text=text, mend=mend)
            self.ask("E_REL_NO_REF", message, *offers)

    def _points(
        self,
        name: str,
        kind: str,
        one: Callable[[Cursor], Point | None],
        keys: Collection[str],
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
        last = None
        if self.tokens[self.at].text in RANGE_WORDS:
            last = self._range_end(first, one, keys, kind)
        if len(self.problems) > asked:
            return
        self._record(name, (first,) if last is None else (first, last), start)
        following = self.tokens[self.at].text
        if kind == "stringer" and following == "+":
            sign_after(self, last or first)
        elif kind in ("station", "frame") and following in ("+", ","):
            listed(self, start)
            stray_sign(self)

    def _range_end(
        self,
        first: Point,
        one: Callable[[Cursor], Point | None],
        keys: Collection[str],
        kind: str,
    ) -> Point | None:
        joiner = self.peek()
        back, codes, asked = self.at, len(self.codes), len(self.problems)
        self.at += 1
        self.skip("between", "of", "the")
        offset = self._offset_ahead()
        token = self.peek()
        keyed = token.kind == "word" and token.text in keys
        signed = kind == "station" and token.text == "-" and joiner.text != "-"
        if keyed or token.kind == "num" or (signed and self.kind("num", 1)):
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
            elif joiner.text not in JOINERS - {"to", "thru", "through", "-"}:
                return None
        self.at = back
        del self.codes[codes:], self.problems[asked:]
        return None

    def _offset_ahead(self) -> Offset | None:
        """ "2 in above" before the end of a range."""
        if not self.kind("num"):
            return None
        back, codes, asked = self.at, len(self.codes), len(self.problems)
        length = self.length()
        if length is not None and self.among(DIRECTIONS):
            direction = DIRECTIONS[self.peek().text]
            self.at += 1
            self.skip("of")
            if reference_follows(self):
                if not length.unit:
                    self.codes.append("W_UNIT_ASSUMED")
                return Offset(length, 0, direction)
        self.at = back
        del self.codes[codes:], self.problems[asked:]
        return None

    def _record(self, name: str, points: tuple[Point, ...], start: int) -> None:
        before = self.found.get(name)
        if before is None:
            self.found[name] = points
        elif before != points:
            text = self.text[self.tokens[start].start : self.tokens[self.at - 1].end]
            first = " ".join(point_text(p) for p in before)
            if not any(p.code == "E_TWO_POINTS" for p in self.problems):
                message = TWO_POINTS.format(first=first, second=text.strip())
                self.ask("E_TWO_POINTS", message)
