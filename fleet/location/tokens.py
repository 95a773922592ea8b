"""A location text cut into tokens, and its numbers judged."""

from __future__ import annotations

import re
from dataclasses import dataclass
from decimal import Decimal

from fleet.location.reading import Offer, Problem

_SAME = str.maketrans(
    {"–": "-", "—": "-", "−": "-", "‐": "-", "″": '"', "”": '"', "“": '"',
     "’": "'", "′": "'", "´": "'", "`": "'", "\u00a0": " "}
)  # fmt: skip

_TOKEN = re.compile(
    r"(?P<rr>\b(?:r|right)\s*(?:&|/|\band\b)\s*(?:r|right)\b)"
    r"|(?P<clock>o\s?'?\s?clock\b)"
    r"|(?P<side>\b[lr]/h\b)"
    r"|(?P<num>\d+(?:[.,]\d+)*|\.\d+(?:[.,]\d+)*)"
    r"(?P<tail>(?!o\s?'?\s?clock|(?:fr|wl|bs|sta|str|rbl|lbl|s)\d|s-\d)[a-z][a-z0-9]*)?"
    r"|(?P<word>[a-z]+)\.?"
    r"|(?P<sym>''|\S)"
)

NUM_WRONG = "“{text}” is not a number that can be read. Write it as 640 or 640.5."
NUM_LETTER = "“{text}” has a letter inside the number. Did you mean {offer}?"
NUM_SPLIT = "“{text}” is broken by a blank. Did you mean {offer}?"


@dataclass(frozen=True)
class Token:
    """One word, number or sign; `tail` are letters that hang on a number."""

    kind: str
    text: str
    tail: str = ""
    start: int = 0
    end: int = 0


def normalised(text: str) -> str:
    """Lower case, one kind of dash and quote."""
    return text.translate(_SAME).lower()


def tokens_of(text: str) -> list[Token]:
    """The tokens of a normalised text."""
    found = []
    for match in _TOKEN.finditer(text):
        kind = match.lastgroup or "sym"
        if match["num"] is not None:
            found.append(Token("num", match["num"], match["tail"] or "", *match.span()))
        elif match["word"] is not None:
            found.append(Token("word", match["word"], "", *match.span()))
        else:
            found.append(Token(kind, match[kind], "", *match.span()))
    return found


def number_of(text: str) -> tuple[Decimal | None, str]:
    """The value of "1,016", "12,5", "640.5" and the warning it deserves."""
    if re.fullmatch(r"\d+|\d*\.\d+", text):
        return Decimal(text), ""
    if re.fullmatch(r"[1-9]\d{0,2}(,\d{3})+(\.\d+)?", text):
        return Decimal(text.replace(",", "")), "W_THOUSANDS"
    if re.fullmatch(r"\d+,\d", text):
        return Decimal(text.replace(",", ".")), "W_DECIMAL_COMMA"
    return None, ""


def number_wrong(token: Token) -> Problem:
    """The problem of a number token that is none."""
    whole = (token.text + token.tail).upper()
    if token.tail and set(token.tail) <= set("oil0123456789"):
        mended = token.text + token.tail.translate(str.maketrans("oil", "011"))
        offer = Offer("letter", mended)
        message = NUM_LETTER.format(text=whole, offer=mended)
        return Problem("E_NUM_LETTER", message, (offer,))
    return Problem("E_NUM", NUM_WRONG.format(text=whole))


def number_split(first: Token, second: Token) -> Problem:
    """The question of a number broken by a blank."""
    joined = first.text + second.text
    message = NUM_SPLIT.format(text=f"{first.text} {second.text}", offer=joined)
    return Problem("E_NUM_SPLIT", message, (Offer("join", joined),))
