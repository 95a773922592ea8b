"""What was fitted held against what the approved data require, layer by layer.

A doubler of .080 in where .090 in was required went unseen in a published case (ASRS
report 972902), so a difference is put into words and must be answered before release.
"""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass
from typing import Protocol

EXACT = 1e-6
"""Of the thickness: two ways to write one size, as 1.6002 mm and 0.063 in."""
TEMPER = re.compile(r"^(?P<alloy>\d{4}|\w+?)-?(?P<temper>[TOHF]\d*\w*)$", re.IGNORECASE)
WORDS_OUT = re.compile(r"[\s,.]+")

NOT_FITTED = "layer {number}: {required} is required, fitted not recorded"
MATERIAL = "layer {number}: {fitted} fitted where {required} is required"
TEMPER_OFF = "layer {number}: temper {fitted} fitted where {required} is required"
THICKNESS = "layer {number}: {fitted} fitted where {required} required"
NO_THICKNESS = "layer {number}: thickness {required} is required, fitted not recorded"


class Ply(Protocol):
    """One layer as required or as fitted."""

    @property
    def number(self) -> int: ...
    @property
    def material_id(self) -> int | None: ...
    @property
    def material_entered(self) -> str: ...
    @property
    def thickness_mm(self) -> float | None: ...
    @property
    def thickness_entered(self) -> str: ...


@dataclass(frozen=True, slots=True)
class Difference:
    """What differs in one layer, in words; empty when nothing does."""

    number: int
    words: str


def differences(
    required: Iterable[Ply], fitted: Iterable[Ply], *, percent: int = 0
) -> list[Difference]:
    """One for each required layer; `percent` is the thickness tolerance, 0 is exact."""
    by_number = {layer.number: layer for layer in fitted}
    return [
        Difference(want.number, _words(want, by_number.get(want.number), percent))
        for want in required
    ]


def _words(want: Ply, got: Ply | None, percent: int) -> str:
    if got is None or not got.material_entered.strip():
        both = f"{want.material_entered} {_size(want)}".strip()
        return NOT_FITTED.format(number=want.number, required=both)
    found = [_material(want, got), _thickness(want, got, percent)]
    return "; ".join(words for words in found if words)


def _material(want: Ply, got: Ply) -> str:
    if want.material_id is not None and want.material_id == got.material_id:
        return ""
    asked, used = folded(want.material_entered), folded(got.material_entered)
    if asked == used:
        return ""
    one, two = _temper(want.material_entered), _temper(got.material_entered)
    if one and two and one[0] == two[0] and one[2] == two[2] and one[1] != two[1]:
        return TEMPER_OFF.format(number=want.number, fitted=two[1], required=one[1])
    return MATERIAL.format(
        number=want.number,
        fitted=got.material_entered,
        required=want.material_entered,
    )


def _thickness(want: Ply, got: Ply, percent: int) -> str:
    if want.thickness_mm is None:
        return ""
    if got.thickness_mm is None:
        return NO_THICKNESS.format(number=want.number, required=_size(want))
    allowed = want.thickness_mm * max(percent / 100, EXACT)
    if abs(got.thickness_mm - want.thickness_mm) <= allowed:
        return ""
    return THICKNESS.format(number=want.number, fitted=_size(got), required=_size(want))


def folded(words: str) -> str:
    """Case, spacing and commas do not tell one material from another."""
    return WORDS_OUT.sub(" ", words).strip().casefold()


def _temper(words: str) -> tuple[str, str, str] | None:
    """Alloy, temper and the rest: "2024-T3 clad" gives 2024, T3, clad."""
    first, _, rest = words.strip().partition(" ")
    found = TEMPER.match(first)
    if not found:
        return None
    return found["alloy"].casefold(), found["temper"].upper(), folded(rest)


def _size(ply: Ply) -> str:
    if ply.thickness_entered:
        return ply.thickness_entered
    return f"{ply.thickness_mm:g} mm" if ply.thickness_mm is not None else ""
