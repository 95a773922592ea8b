"""A place in the tokens of a location text, and the numbers read from there on."""

from __future__ import annotations

from collections.abc import Collection
from decimal import Decimal

from fleet.location.reading import Length, Offer, Offset, Problem
from fleet.location.tokens import (
    LOOK_AHEAD,
    Token,
    normalised,
    number_of,
    number_split,
    number_wrong,
    tokens_of,
)
from fleet.location.vocabulary import Vocabulary
from fleet.location.words import DIRECTIONS, OTHER_UNITS
from fleet.units import unit_known

UNIT_UNKNOWN = "“{unit}” is not a unit of length. Use in, ft, mm, cm or m."

_SPLIT_DIGITS = {"station": 4, "frame": 2, "rib": 2, "stringer": 2, "bl": 3, "wl": 3}
_COUNTED = {
    "places", "place", "ea", "each", "locations", "areas", "spots", "holes", "cracks",
    "o'clock", "off", "x",
}  # fmt: skip
_SIGNS = {"+": 1, "-": -1, "plus": 1, "minus": -1}


class Cursor:
    """Moves over the tokens; gathers what is flagged and asked on the way."""

    def __init__(self, text: str, words: Vocabulary) -> None:
        self.text = text
        self.words = words
        self.low = normalised(text)
        self.tokens = tokens_of(self.low)
        self.end = len(self.tokens) - LOOK_AHEAD
        self.at = 0
        self.sides: list[str] = []
        self.codes: list[str] = []
        self.problems: list[Problem] = []

    def ask(self, code: str, message: str, *offers: Offer) -> None:
        self.problems.append(Problem(code, message, offers))

    def peek(self, ahead: int = 0) -> Token:
        return self.tokens[self.at + ahead]

    def is_(self, *texts: str, ahead: int = 0) -> bool:
        return self.tokens[self.at + ahead].text in texts

    def among(self, words: Collection[str], ahead: int = 0) -> bool:
        return self.tokens[self.at + ahead].text in words

    def kind(self, kind: str, ahead: int = 0) -> bool:
        return self.tokens[self.at + ahead].kind == kind

    def skip(self, *texts: str) -> None:
        while self.tokens[self.at].text in texts:
            self.at += 1

    def touching(self, ahead: int = 0) -> bool:
        """Whether no blank stands between this token and the one before it."""
        return self.peek(ahead).start == self.tokens[self.at + ahead - 1].end

    # -- lengths --------------------------------------------------------------

    def length(self, *, after_sign: bool = False) -> Length | None:
        """A length here: "12", "3/4 in", "1 1/2\"", "38mm", "1'6\"".

        A foot mark is one only before inches; else it is a stray quote. After a sign
        inches with a direction behind them ("4 in below") begin something else.
        """
        length = self._plain_length()
        marked = self.tokens[self.at - 1].text == "'"
        if length is None or not (marked or length.unit == "ft"):
            return length
        back, asked, flagged = self.at, len(self.problems), len(self.codes)
        self.at += self.is_("-")
        inches = self._plain_length()
        other = after_sign and self.among(DIRECTIONS)
        if inches is not None and inches.unit == "in" and not other:
            return Length(length.number * 12 + inches.number, "in")
        self.at = back
        del self.problems[asked:], self.codes[flagged:]
        return length

    def _plain_length(self) -> Length | None:
        token = self.peek()
        if token.kind != "num":
            return None
        number, code = number_of(token.text)
        if number is None:
            return None
        self.at += 1
        if self.kind("num") and self.is_("/", ahead=1) and self.kind("num", 2):
            top, number_under = self.tokens[self.at], self.tokens[self.at + 2]
            part = _fraction(top, number_under)
            if part is not None and not token.tail:
                number, token = number + part, number_under
                self.at += 3
        elif not token.tail and self.is_("/") and self.kind("num", 1):
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
        token = self.tokens[self.at]
        if token.kind not in ("word", "sym") or token.text in self.words.steps:
            return ""
        if token.text == "'":
            self.at += 1
            return ""
        unit = unit_known(token.text)
        if unit:
            self.at += 1
            return unit
        if token.text in OTHER_UNITS:
            self.ask("E_UNIT_UNKNOWN", UNIT_UNKNOWN.format(unit=token.text))
            self.at += 1
        return ""

    # -- numbers of labels ----------------------------------------------------

    def value(
        self, kind: str, tails: Collection[str] = ()
    ) -> tuple[Decimal, str] | None:
        """The number at the present token with the letter that may hang on it."""
        token = self.peek()
        if token.kind != "num":
            return None
        number, code = number_of(token.text)
        letter = token.tail
        if number is None or (letter and letter not in tails):
            self.problems.append(number_wrong(token))
            self.at += 1
            return None
        following = self.tokens[self.at + 1].kind == "num"
        split = self._split(token, kind) if following else None
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
        other, after = self.peek(1), self.peek(2)
        if token.tail or "." in token.text:
            return None
        joined = token.text + other.text.partition(".")[0]
        if not joined.isdigit() or len(joined) > _SPLIT_DIGITS[kind]:
            return None
        if after.kind == "clock" or after.text in ("/", ":", '"', "%"):
            return None
        if after.text in _COUNTED or after.text in DIRECTIONS or self.clock_range(1):
            return None
        in_word = after.text == "in" and not self.among(DIRECTIONS, 3)
        if unit_known(after.text) and not in_word:
            return None
        if other.tail and unit_known(other.tail):
            return None
        return other

    def clock_range(self, ahead: int) -> bool:
        """ "3 to 5 o'clock": whether an hour here is the start of a range of hours."""
        joiner = ahead + 1 + 2 * self.is_(":", ahead=ahead + 1)
        if not self.is_("to", "-", "and", "thru", ahead=joiner):
            return False
        last = joiner + 1 + 2 * self.is_(":", ahead=joiner + 2)
        return self.kind("num", joiner + 1) and self.kind("clock", last + 1)

    # -- signs and words ------------------------------------------------------

    def plus(self, number: Decimal) -> Offset | None:
        """ "+ 12", "+3/4\"", "minus 3 in" after a label of this number."""
        text = self.tokens[self.at].text
        if text not in _SIGNS or self.tokens[self.at + 1].kind != "num":
            return None
        sign, in_words = _SIGNS[text], text.isalpha()
        if text == "-" and not self._minus_length(number):
            return None
        back, asked = self.at, len(self.problems)
        self.at += 1
        length = self.length(after_sign=True)
        if length is None or (in_words and not length.unit):
            self.at = back
            del self.problems[asked:]
            return None
        return Offset(length, sign)

    def _minus_length(self, number: Decimal) -> bool:
        """Whether "- 3 in" is a length taken off: it has a unit and no range is meant.

        An inch mark may be a stray quote behind the end of a range, and "in" may be
        the word: they count only where the second number is the smaller.
        """
        back, asked, flagged = self.at, len(self.problems), len(self.codes)
        self.at += 1
        length = self.length()
        after, unit_token = self.peek(), self.tokens[self.at - 1]
        self.at = back
        del self.problems[asked:], self.codes[flagged:]
        if length is None or not length.unit:
            return False
        if length.unit != "in":
            return True
        if length.number >= abs(number):
            return False
        prose = unit_token.text == "in" and after.kind == "word"
        return not prose or after.text in self.words.steps

    def past_key(self, keys: Collection[str]) -> None:
        token = self.peek()
        if token.kind == "word" and token.text in keys:
            self.at += 1
            if self.tokens[self.at].kind == "num":
                return
            self.skip(".", ":", "#", "no", "nos")
            if self.is_("-") and self.kind("num", 1):
                self.at += 1


def _fraction(top: Token, under: Token) -> Decimal | None:
    if not (top.text.isdigit() and under.text.isdigit()) or not int(under.text):
        return None
    return Decimal(top.text) / Decimal(under.text) if not top.tail else None
