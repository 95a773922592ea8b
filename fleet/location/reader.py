"""First stage: what a location text says, without any aircraft type.

`read` never raises. What it cannot settle becomes a problem of the reading, a
question with offers; the value it is about is then not given.
"""

from __future__ import annotations

from typing import Any

from fleet.location.points import (
    BUTT_PHRASE,
    butt_point,
    butt_words,
    chord_follows,
    chord_point,
    clock_point,
    door_name,
    door_named,
    frame_point,
    reference_follows,
    rib_point,
    spar_here,
    spar_point,
    station_point,
    stringer_follows,
    stringer_point,
    water_point,
)
from fleet.location.ranges import Ranges
from fleet.location.reading import Door, Offset, Problem, Reading
from fleet.location.vocabulary import USUAL, Vocabulary
from fleet.location.words import (
    BEFORE_SURFACE,
    BUTT_WORDS,
    DIRECTIONS,
    SIDE_WORDS,
    SPARS,
    SURFACE_NOUNS,
    SURFACES,
    WATER_WORDS,
    element_of,
    section_named,
)

EMPTY = "Nothing was given. Write a location such as STA 640+10 S-7R."
VALUE_MISSING = "“{word}” has no number after it. Write it as {word} 640."
NO_ALONG = "“{text}” does not say where along the section. Add a station or frame."
HOW_FAR = "“{text} of” does not say how far. Write it as 12 in {text} of ..."

_BUTT_KEYS = BUTT_WORDS.keys() | BUTT_PHRASE


def read(text: str, words: Vocabulary = USUAL) -> Reading:
    """The reading of a text; problems are in it.

    `words` are the usual ones; those of a type's file come by `vocabulary_of`.
    """
    if not text.strip():
        return Reading(text, problems=(Problem("E_EMPTY", EMPTY),))
    return _Reader(text, words).reading()


class _Reader(Ranges):
    """One pass over the tokens of a text."""

    def __init__(self, text: str, words: Vocabulary) -> None:
        super().__init__(text, words)
        self.said: dict[str, Any] = {}
        self.valueless = ""

    # -- the whole ------------------------------------------------------------

    def reading(self) -> Reading:
        while self.at < self.end:
            before = self.at
            self._step()
            if self.at == before:
                self.at += 1
        self._pending_lost()
        words = {token.text for token in self.tokens}
        element, label = element_of(self.low, words)
        side = self._one_side()
        self._along_missing(element)
        parts: dict[str, Any] = self.found | self.said
        return Reading(
            text=self.text,
            section=self._section(words),
            side=side,
            element=element,
            element_label=label,
            codes=tuple(dict.fromkeys(self.codes)),
            problems=tuple(self.problems),
            **parts,
        )

    def _section(self, words: set[str]) -> str:
        """The section named, or else the one that the notation belongs to."""
        named = section_named(self.low, words)
        if named:
            return named
        stations = self.found.get("stations")
        return str(stations[0].key) if stations else "wing" * ("ribs" in self.found)

    def _one_side(self) -> str:
        sides = set(self.sides)
        if len(sides) > 1:
            self.ask("E_SIDE_CONFLICT", "The text says both left and right; keep one.")
        return sides.pop() if len(sides) == 1 else ""

    def _along_missing(self, element: str) -> None:
        found = self.found
        given = "stations" in found or "frames" in found or "ribs" in found
        if given or "door" in self.said or element == "bulkhead" or self.problems:
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
        elif token.kind == "word" and token.text in self.words.steps:
            self._word(token.text)

    def _word(self, word: str) -> None:
        words = self.words
        if word in words.stations or (word == "fin" and self._fin_station()):
            self._station(word)
        elif word in words.frames:
            self._points("frames", "frame", frame_point, words.frames)
        elif word in words.stringers and stringer_follows(self):
            self._points("stringers", "stringer", stringer_point, words.stringers)
        elif word in words.ribs:
            self._points("ribs", "rib", rib_point, words.ribs)
        elif word in BUTT_WORDS or (word in BUTT_PHRASE and butt_words(self)):
            self._points("butt_lines", "bl", butt_point, _BUTT_KEYS)
        elif word in WATER_WORDS or (word == "water" and self.is_("line", ahead=1)):
            self._points("water_lines", "wl", water_point, WATER_WORDS)
        else:
            self._plain_word(word)

    def _plain_word(self, word: str) -> None:
        """A word that stands before no number."""
        if word == "door" or door_named(self):
            self._door()
        elif word in SPARS and spar_here(self):
            self._points("spars", "spar", spar_point, SPARS)
        elif word in SURFACES and self._surface():
            self.said.setdefault("surface", SURFACES[word])
        elif word in SIDE_WORDS:
            self._side(word)
        elif word in DIRECTIONS and spar_here(self, 1 + self.is_("of", ahead=1)):
            self._spar_side(word)
        elif word in DIRECTIONS and self.is_("of", ahead=1):
            self._length_missing()
        elif word in DIRECTIONS and self.kind("num", 1):
            self._length_behind(word)

    def _side(self, word: str) -> None:
        if not self.is_("hand", ahead=1) or word in ("left", "right"):
            self.sides.append(SIDE_WORDS[word])
        self.at += 1

    def _surface(self) -> bool:
        """Whether "upper" here means a skin: "upper LH wing skin", "HS 64 upper"."""
        if self.kind("end", 1) or self.is_(",", ";", ahead=1):
            return self.is_("upper", "lower")
        ahead = 1
        while self.among(BEFORE_SURFACE, ahead) and ahead < 4:
            ahead += 1
        if not self.among(SURFACE_NOUNS, ahead):
            return False
        self.at += 2 if ahead == 1 else 1
        return True

    # -- lengths and numbers --------------------------------------------------

    def _number(self) -> None:
        """A number on its own: the clock, a share, or a length from a reference."""
        before = self.at
        degrees = clock_point(self)
        if degrees is not None:
            known = self.found.get("clock_degrees", ())
            self.found["clock_degrees"] = (*known, degrees)
        elif self.is_("door", ahead=1):
            self._door()
        elif chord_follows(self):
            self._points("chords", "chord", chord_point, ())
        if self.at == before:
            self._offset()

    def _offset(self) -> None:
        """ "12 in aft of": kept for the reference that must follow."""
        start = self.at
        length = self.length()
        if length is None or not self.among(DIRECTIONS):
            self.at = start + 1
            return
        direction = DIRECTIONS[self.peek().text]
        self.at += 1
        of = self.is_("of", "from")
        self.at += of
        follows = of or reference_follows(self)
        if not follows and not (self.kind("end") or self.is_(",", ";", ".", ")")):
            self.at = start + 1
            return
        if not length.unit:
            self.codes.append("W_UNIT_ASSUMED")
        self._pending_lost()
        first, last = self.tokens[start], self.tokens[self.at - 1]
        self.pending = Offset(length, 0, direction)
        self.pending_text = self.text[first.start : last.end]
        if not follows:
            self._pending_lost()

    def _length_missing(self) -> None:
        """ "aft of FR 20" with no length before it."""
        if reference_follows(self, 2) or self.is_("door", ahead=2):
            direction = self.tokens[self.at].text
            self.ask("E_REL_NO_REF", HOW_FAR.format(text=direction))
        self.at += 2

    def _length_behind(self, word: str) -> None:
        """ "FR 20 aft 12 in": the length behind its direction is asked about."""
        self.at += 1
        start = self.at
        length = self.length()
        known = self.found.keys() & {"stations", "frames", "ribs", "stringers"}
        if length is None or not length.unit or self.among(DIRECTIONS) or not known:
            self.at = start
            return
        text = self.text[self.tokens[start].start : self.tokens[self.at - 1].end]
        self.pending = Offset(length, 0, DIRECTIONS[word])
        self.pending_text = f"{text} {word}"
        self._pending_lost()

    # -- stations, doors and spars --------------------------------------------

    def _fin_station(self) -> bool:
        return self.is_("sta", "station", ahead=1) or self.kind("num", 1)

    def _station(self, word: str) -> None:
        key = self.words.stations.get(word, "fin")
        if word == "fin":
            self.at += not self.kind("num", 1)
        before, known = len(self.problems), self.found.get("stations")
        stations = self.words.stations
        self._points("stations", "station", lambda c: station_point(c, key), stations)
        nothing = len(self.problems) == before and not self.found.get("stations")
        if nothing and not known and not self.pending:
            self.valueless = self.valueless or word

    def _door(self) -> None:
        """ "door 2L", "2L door", "aft cargo door"; then its edge, if said."""
        name = door_name(self)
        if not name:
            return
        edge = ""
        if self.among(DIRECTIONS) and self.is_("frame", "edge", "jamb", ahead=1):
            edge = DIRECTIONS[self.tokens[self.at].text]
            self.at += 2
        offset = self._take_pending()
        if offset is not None and not edge:
            self.codes.append("W_REF_EDGE")
        self.said.setdefault("door", Door(name, edge, offset))

    def _spar_side(self, word: str) -> None:
        """ "aft of rear spar" without a length."""
        self.at += 1 + self.is_("of", ahead=1)
        if "spars" not in self.found:
            self.said["spar_side"] = DIRECTIONS[word]
        self._points("spars", "spar", spar_point, SPARS)
