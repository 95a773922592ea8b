"""A place in the tokens of a location text, and the numbers read from there on."""

from __future__ import annotations

from collections.abc import Collection
from decimal import Decimal

from fleet.location.reading import Length, Offer, Offset, Problem
from fleet.location.tokens import (
    Token,
    normalised,
    number_of,
    number_split,
    number_wrong,
    tokens_of,
)
from fleet.location.words import DIRECTIONS, OTHER_UNITS
from fleet.units import unit_known

UNIT_UNKNOWN = "“{unit}” is not a unit of length. Use in, ft, mm, cm or m."

_SPLIT_DIGITS = {"station": 4, "frame": 2, "rib": 2, "stringer": 2, "bl": 3, "wl": 3}
_COUNTED = {
    "places", "place", "ea", "each", "locations", "areas", "spots", "holes", "cracks",
    "o'clock", "off", "x",
}  # fmt: skip


class Cursor:
    """Moves over the tokens; gathers what is flagged and asked on the way."""

    def __init__(self, text: str) -> None:
        self.text = text
        self.low = normalised(text)
        self.tokens = tokens_of(self.low)
        self.at = 0
        self.sides: list[str] = []
        self.codes: list[str] = []
        self.problems: list[Problem] = []

    def ask(self, code: str, message: str, *offers: Offer) -> None:
        self.problems.append(Problem(code, message, offers))

    def peek(self, ahead: int = 0) -> Token | None:
        index = self.at + ahead
        return self.tokens[index] if index < len(self.tokens) else None

    def is_(self, *texts: str, ahead: int = 0) -> bool:
        token = self.peek(ahead)
        return token is not None and token.text in texts and token.kind != "num"

    def kind(self, kind: str, ahead: int = 0) -> bool:
        token = self.peek(ahead)
        return token is not None and token.kind == kind

    def skip(self, *texts: str) -> None:
        while self.is_(*texts):
            self.at += 1

    def touching(self, ahead: int = 0) -> bool:
        """Whether no blank stands between this token and the one before it."""
        here, before = self.peek(ahead), self.peek(ahead - 1)
        return bool(here and before and here.start == before.end)

    def length(self) -> Length | None:
        """A length at the present token: "12", "3/4 in", "1 1/2\"", "38mm"."""
        token = self.peek()
        if token is None or token.kind != "num":
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
        token = self.peek()
        if token is None or token.kind == "num":
            return ""
        if token.text == "'":
            self.at += 1
            return ""
        unit = unit_known(token.text)
        if unit:
            self.at += 1
            return unit
        if token.kind == "word" and token.text in OTHER_UNITS:
            self.ask("E_UNIT_UNKNOWN", UNIT_UNKNOWN.format(unit=token.text))
            self.at += 1
        return ""

    def value(
        self, kind: str, tails: Collection[str] = ()
    ) -> tuple[Decimal, str] | None:
        """The number at the present token with the letter that may hang on it."""
        token = self.peek()
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
        other, after = self.peek(1), self.peek(2)
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
            if after.text == "in" and self.peek(3) is not None:
                third = self.tokens[self.at + 3]
                if third.text in DIRECTIONS:
                    return None
        if other.tail and unit_known(other.tail):
            return None
        return other

    def plus(self) -> Offset | None:
        """ "+ 12", "+3/4\"" after a label."""
        if not self.is_("+") or not self.kind("num", 1):
            return None
        self.at += 1
        length = self.length()
        return None if length is None else Offset(length, 1)

    def past_key(self, keys: set[str]) -> None:
        token = self.peek()
        if token is not None and token.kind == "word" and token.text in keys:
            self.at += 1
            self.skip(".", ":", "#", "no")
            if self.is_("-") and self.kind("num", 1):
                self.at += 1


def _fraction(top: Token, under: Token) -> Decimal | None:
    if not (top.text.isdigit() and under.text.isdigit()) or not int(under.text):
        return None
    return Decimal(top.text) / Decimal(under.text) if not top.tail else None
