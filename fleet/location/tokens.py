"""A location text cut into tokens, and its numbers judged."""

from __future__ import annotations

import re
from decimal import Decimal
from typing import NamedTuple

from fleet.location.reading import Offer, Problem

_SAME = str.maketrans(
    {"–": "-", "—": "-", "−": "-", "‐": "-", "″": '"', "”": '"', "“": '"',
     "’": "'", "′": "'", "´": "'", "\u00a0": " "}
)  # fmt: skip

_TOKEN = re.compile(
    r"(?=\S)(?:(?P<num>\d+(?:[.,]\d+)*|\.\d+(?:[.,]\d+)*)"
    r"(?P<tail>(?!o\s?'?\s?clock|(?:fr|wl|bs|sta|str|rbl|lbl|s)\d|s-\d)[a-z][a-z0-9]*)?"
    r"|(?=[lor])(?:(?P<rr>\b(?:r|right)\s*(?:&|/|\band\b)\s*(?:r|right)\b)"
    r"|(?P<clock>o\s?'?\s?clock\b)"
    r"|(?P<side>\b[lr]/h\b))"
    r"|(?P<dotted>\b[a-z](?:\.[a-z])+(?![a-z])\.?)"
    r"|(?P<word>[a-z]+)\.?"
    r"|(?P<sym>''|\S))"
)
_PLAIN = re.compile(r"\d*\.\d+")
_THOUSANDS = re.compile(r"[1-9]\d{0,2}(,\d{3})+(\.\d+)?")
_COMMA = re.compile(r"\d+,\d")
_PLUG_LETTERS = frozenset("abcdefghjk")
_NOUGHT_AND_ONE = str.maketrans("oil", "011")

NUM_WRONG = "“{text}” is not a number that can be read. Write it as 640 or 640.5."
NUM_LETTER = "“{text}” has a letter inside the number. Did you mean {offer}?"
NUM_SPLIT = "“{text}” is broken by a blank. Did you mean {offer}?"


class Token(NamedTuple):
    """One word, number or sign; `tail` are letters that hang on a number."""

    kind: str
    text: str
    tail: str = ""
    start: int = 0
    end: int = 0


_token = tuple.__new__  # a third of the time of Token(...), and many are made

LOOK_AHEAD = 8
"""So many empty tokens follow the last: nobody looks further past the end."""


def normalised(text: str) -> str:
    """Lower case, one kind of dash and quote."""
    low = text.lower().replace("`", "'")
    return low if low.isascii() else low.translate(_SAME)


def tokens_of(text: str) -> list[Token]:
    """The tokens of a normalised text, and behind them empty ones."""
    found = []
    for match in _TOKEN.finditer(text):
        kind, tail = match.lastgroup or "", ""
        read = match[kind]
        if kind == "tail":
            kind, tail, read = "num", read, match["num"]
        elif kind == "dotted":  # "B.S.", "R.B.L."
            kind, read = "word", read.replace(".", "")
        found.append(_token(Token, (kind, read, tail, *match.span())))
    end = Token("end", "", "", len(text), len(text))
    return found + [end] * LOOK_AHEAD


def number_of(text: str) -> tuple[Decimal | None, str]:
    """The value of "1,016", "12,5", "640.5" and the warning it deserves."""
    if text.isdecimal() or _PLAIN.fullmatch(text):
        return Decimal(text), ""
    if _THOUSANDS.fullmatch(text):
        return Decimal(text.replace(",", "")), "W_THOUSANDS"
    if _COMMA.fullmatch(text):
        return Decimal(text.replace(",", ".")), "W_DECIMAL_COMMA"
    return None, ""


def number_wrong(token: Token) -> Problem:
    """The problem of a number token that is none."""
    whole = (token.text + token.tail).upper()
    plug = token.tail[-1:] if token.tail[:-1].strip("oil0123456789") == "" else ""
    inside = token.tail.removesuffix(plug) if plug in _PLUG_LETTERS else token.tail
    if inside and not inside.strip("oil0123456789"):
        last = token.tail[len(inside) :].upper()
        mended = token.text + inside.translate(_NOUGHT_AND_ONE) + last
        return number_lettered(whole, mended)
    return Problem("E_NUM", NUM_WRONG.format(text=whole))


def number_lettered(read: str, mended: str) -> Problem:
    """The question of a number with a letter in place of a digit."""
    offer = Offer("letter", mended)
    message = NUM_LETTER.format(text=read, offer=mended)
    return Problem("E_NUM_LETTER", message, (offer,))


def number_split(first: Token, second: Token) -> Problem:
    """The question of a number broken by a blank."""
    joined = first.text + second.text
    message = NUM_SPLIT.format(text=f"{first.text} {second.text}", offer=joined)
    return Problem("E_NUM_SPLIT", message, (Offer("join", joined),))
