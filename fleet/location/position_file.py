"""Where an item of a geometry file lies: its stations and its reach across."""

from __future__ import annotations

import math
import re
from typing import Any

from fleet.location.parts import TINY_MM, Box
from fleet.location.sections import Section
from fleet.location.table import Table, is_number
from fleet.units import canonical


def box_of(section: Section, unit: str, t: Table) -> Box:
    """The rectangle of the unrolled section that the item's table names."""
    return Box(*stations_of(section, unit, t), *across_of(section, t))


def stations_of(section: Section, unit: str, t: Table) -> tuple[float, float]:
    """Map positions of the two stations of an item."""
    value = t.raw("stations", "two stations [from, to]")
    if not isinstance(value, list) or len(value) != 2:
        if value is not None:
            t.wrong(f"“stations” is {value!r}; give two of them, [from, to].")
        return section.map1_mm, section.map2_mm
    first, last = (_station(section, unit, t, v) for v in value)
    if last < first:
        t.wrong(f"“stations” {value}: the second lies ahead of the first; exchange.")
    elif first < section.map1_mm - TINY_MM or last > section.map2_mm + TINY_MM:
        t.wrong(f"“stations” {value} reach outside section {section.code}.")
    return first, last


def _station(section: Section, unit: str, t: Table, value: Any) -> float:
    """Map position of a station: a number of the plug-free variant or a label."""
    if is_number(value):
        return section.map_of(canonical(value, unit), "")
    if isinstance(value, str):
        found = re.fullmatch(r"([\w.]+?)(?:\+(\d+(?:\.\d+)?))?", value.strip())
        for frame in section.frames:
            if found and frame.station_label == found[1]:
                return frame.map_mm + canonical(found[2] or 0, unit)
    t.wrong(
        f"station {value!r} is neither a number nor the label of a listed frame; "
        "write it as 560 or, in a plug, as “560A” or “560A+4”."
    )
    return section.map1_mm


def across_of(section: Section, t: Table) -> tuple[float, float]:
    """s range by stringer lines, degrees from the crown or per cent of chord."""
    keys = [k for k in ("stringers", "degrees", "chord_percent", "all") if k in t.data]
    if len(keys) != 1:
        t.wrong(
            "give its reach across by just one of stringers = [from, to], "
            "degrees = [from, to], chord_percent = [from, to], all = true."
        )
    key = keys[0] if keys else "all"
    value = t.raw(key, "two values [from, to]", optional=True)
    if key == "all":
        return section.s1_mm, section.s2_mm
    if not isinstance(value, list) or len(value) != 2:
        t.wrong(f"“{key}” is {value!r}; give two values, [from, to].")
        return section.s1_mm, section.s2_mm
    first, last = (_one_across(section, t, key, v) for v in value)
    if last < first and section.wrap_mm:
        last += section.wrap_mm
    if last < first:
        t.wrong(f"“{key}”: the second lies before the first; exchange them.")
    return first, last


def _one_across(section: Section, t: Table, key: str, value: Any) -> float:
    if key == "stringers":
        line = section.stringer(str(value))
        if line is None:
            names = ", ".join(x.label for x in section.stringers[:3])
            t.wrong(f"no stringer is called {value!r}; they are {names}, ...")
        return line.s_mm if line else 0.0
    if not is_number(value):
        t.wrong(f"“{key}” holds {value!r}, which is not a number.")
        return 0.0
    reference = section.reference_mm
    if key == "degrees":
        return float(math.radians(value) * reference)
    return float(value) / 100.0 * reference
