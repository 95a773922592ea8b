"""What a repair's description says line by line beside its first words.

Sealant, protection, work order, and how it lies to an earlier repair are lines of the
description: `Sealant: ...`, `Lies over R-0012.`, `Does not touch R-0012.`
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field

LINES = {
    "sealant": "Sealant",
    "protection": "Protection",
    "work_order": "Work order",
}
OVER, APART = "over", "apart"
LIES = {OVER: "Lies over {number}.", APART: "Does not touch {number}."}


@dataclass(frozen=True)
class Described:
    """A description read apart: the words, the named lines, how it lies to others."""

    words: str
    said: Mapping[str, str] = field(default_factory=dict)
    lies: Mapping[str, str] = field(default_factory=dict)


def described(
    words: str, said: Mapping[str, str], lies: Iterable[tuple[str, str]]
) -> str:
    """The description with its further lines; what is empty gets none."""
    lines = [words.strip()]
    lines += [f"{LINES[name]}: {said[name]}" for name in LINES if said.get(name)]
    lines += [LIES[how].format(number=number) for number, how in lies]
    return "\n".join(lines)


def read_apart(description: str) -> Described:
    """The inverse of `described`; lines it does not know stay words."""
    words: list[str] = []
    said: dict[str, str] = {}
    lies: dict[str, str] = {}
    for line in description.splitlines():
        name = next((n for n, w in LINES.items() if line.startswith(f"{w}: ")), "")
        how = _how(line)
        if name:
            said[name] = line.split(": ", 1)[1]
        elif how is not None:
            lies[how[0]] = how[1]
        else:
            words.append(line)
    return Described("\n".join(words), said, lies)


def _how(line: str) -> tuple[str, str] | None:
    for how, pattern in LIES.items():
        start, end = pattern.split("{number}")
        if line.startswith(start) and line.endswith(end):
            return line[len(start) : len(line) - len(end)], how
    return None
