"""How far across a text reaches: one line of the section, or from line to line."""

from __future__ import annotations

from dataclasses import dataclass

from fleet.location.along import Work
from fleet.location.parts import TINY_MM
from fleet.location.place import LocationRefused
from fleet.location.reading import Offer

NO_LINES = "{what} is not a notation of this {section}; use {words}."
SIDE_MISSING = "{what} has no side. Did you mean {offers}?"
HALF_ROUND = "{what} is as far over the crown as over the keel; name a line between."

CENTRELINE_MM = 0.04
"""Nearer to the crown or keel than can be written, a point is on it."""


@dataclass(frozen=True)
class Reach:
    """Across: s1..s2 (None: not said), side, and lines as read."""

    s1_mm: float | None = None
    s2_mm: float | None = None
    side: str = ""
    bl_mm: float | None = None
    wl_mm: float | None = None
    off_skin: bool = False
    bl_ends: tuple[float, ...] = ()
    wl_ends: tuple[float, ...] = ()


def reach_between(work: Work, values: list[float]) -> Reach:
    """One line, or the shorter way round from the first line to the last."""
    section, one, other = work.section, values[0], values[-1]
    if section.wrap_mm is None:
        return arc_reach(work, min(one, other), max(one, other))
    way = section.wrapped(other - one)
    if abs(abs(way) - section.wrap_mm / 2.0) < TINY_MM:
        what = f"“{work.reading.text.strip()}”"
        raise LocationRefused("E_TWO_POINTS", HALF_ROUND.format(what=what))
    start = section.wrapped(one if way >= 0.0 else other)
    return arc_reach(work, start, start + abs(way))


def arc_reach(work: Work, s1_mm: float, s2_mm: float) -> Reach:
    """Reach of an arc, with its side: L, R, LR over the centreline, '' on it."""
    section = work.section
    if section.wrap_mm is None:
        side = "" if section.skins != ("left", "right") else "L" if s1_mm < 0 else "R"
        return Reach(s1_mm, s2_mm, side)
    half = section.wrap_mm / 2.0
    start = section.wrapped(s1_mm)
    if s1_mm == s2_mm and min(abs(start), half - abs(start)) < CENTRELINE_MM:
        start = 0.0 if abs(start) < CENTRELINE_MM else -half
        return Reach(start, start, "")
    end = start + (s2_mm - s1_mm)
    if (start < -TINY_MM < TINY_MM < end) or end > half + TINY_MM:
        work.codes.append("W_CROSSES_CENTRELINE")
        return Reach(start, end, "LR")
    return Reach(start, end, "L" if start + end < 0.0 else "R")


def side_missing(what: str, *texts: str) -> LocationRefused:
    """The question on which side, with a text for each."""
    offers = tuple(Offer("side", text) for text in texts)
    message = SIDE_MISSING.format(what=what, offers=" or ".join(texts))
    return LocationRefused("E_SIDE_MISSING", message, offers)
