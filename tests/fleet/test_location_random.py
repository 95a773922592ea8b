"""Places drawn at random on every section are written and read back, nothing lost.

An ordinary run draws 100 on each section and variant; FRAMEBAY_PLACES=5000 draws so
many, which is 10,000 a section and takes minutes. The seed is always the same.
"""

from __future__ import annotations

import os
import random
from pathlib import Path

import pytest

from fleet.location import Place, place, read, text_at, vocabulary_of
from fleet.location.geometry import Section, geometry_from_toml

FILE = Path(__file__).parents[2] / "fixtures" / "ard52.toml"
GEOMETRY = geometry_from_toml(FILE.read_text())
WORDS = vocabulary_of(GEOMETRY)
COUNT = int(os.environ.get("FRAMEBAY_PLACES", "100"))
INCH = 25.4
CLOSE = 0.0006 * INCH  # half of the third decimal of an inch, and a little

Along = tuple[float, float]
Drawn = tuple[Along, Along | None, str]


def bounds(section: Section, variant: str) -> tuple[Along, Along]:
    """The stations and s of a section, or of a door in the one it fills."""
    if section.parent:
        holder = GEOMETRY.section(section.parent)
        box = next(c.box for c in holder.cutouts if c.filled_by == section.code)
        ends, across = (box.map1_mm, box.map2_mm), (box.s1_mm, box.s2_mm)
    else:
        holder = section
        ends = (section.map1_mm, section.map2_mm)
        across = (section.s1_mm, section.s2_mm)
    x1, x2 = (holder.x_of(end, variant) for end in ends)
    assert x1 is not None
    assert x2 is not None
    return (x1, x2), across


def drawn(chance: random.Random, section: Section, variant: str) -> Drawn:
    """A point, a range along, across or both, or a station alone; some on lines."""
    ends, across = bounds(section, variant)
    holder = GEOMETRY.section(section.parent) if section.parent else section

    def along() -> float:
        frames = [x for f in holder.frames if (x := f.x_mm(variant)) is not None]
        inside = [x for x in frames if ends[0] <= x <= ends[1]]
        if inside and chance.random() < 0.2:
            return chance.choice(inside)
        return chance.uniform(*ends)

    def around() -> float:
        lines = [t.s_mm for t in holder.stringers]
        inside = [s for s in lines if across[0] <= s <= across[1]]
        if inside and chance.random() < 0.2:
            return chance.choice(inside)
        return chance.uniform(*across)

    one, other = along(), along()
    x = (one, one) if chance.random() < 0.6 else (min(one, other), max(one, other))
    if chance.random() < 0.1 and not section.parent:
        return x, None, ""
    first = around()
    last = first if chance.random() < 0.6 else around()
    if holder.wrap_mm is not None and abs(last - first) > 0.49 * holder.wrap_mm:
        last = first
    if holder.skins == ("left", "right") and first * last < 0.0:
        last = first
    surface = chance.choice(
        ["", "inner"] if holder.is_shell else ["upper", "lower", ""]
    )
    if holder.skins == ("left", "right"):
        surface = ""
    return x, (min(first, last), max(first, last)), surface


def agrees(found: Place, section: Section, one: Drawn) -> None:
    """The place read is the one drawn, to what three decimals of an inch can tell."""
    (x1, x2), across, surface = one
    holder = GEOMETRY.section(section.parent) if section.parent else section
    assert (found.x1_mm, found.x2_mm) == pytest.approx((x1, x2), abs=2 * CLOSE)
    if across is None:
        assert found.s1_mm is None
        return
    assert found.s1_mm is not None
    assert found.s2_mm is not None
    scale = holder.scale_at(found.map_mm)
    for mine, its in zip(across, (found.s1_mm, found.s2_mm), strict=True):
        apart = abs(holder.wrapped(mine - its)) * scale
        assert apart < 4 * CLOSE, (mine, its)
    outer = holder.is_shell or holder.skins == ("left", "right")
    assert found.surface == (surface or "outer" * outer)


@pytest.mark.parametrize("variant", [v.code for v in GEOMETRY.variants])
@pytest.mark.parametrize("code", [s.code for s in GEOMETRY.sections])
def test_random_places_read_back(code: str, variant: str) -> None:
    section = GEOMETRY.section(code)
    chance = random.Random(f"{code} {variant}")
    for _ in range(COUNT):
        one = drawn(chance, section, variant)
        along, across, surface = one
        text = text_at(
            GEOMETRY, variant, code, along=along, across=across, surface=surface
        )
        found = place(read(text, WORDS), GEOMETRY, variant)
        agrees(found, section, one)
        assert found.canonical == text
