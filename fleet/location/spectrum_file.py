"""Load spectra of a geometry file: each kind's keys, checked, as plain content.

The content is what calculations read: kind, data in MPa and every choice. A choice that
the file leaves out was not made.
"""

from __future__ import annotations

import itertools
from collections.abc import Callable
from typing import Any

from fleet.canonical import canonical
from fleet.location.table import Table
from fleet.location.typegeometry import Spectrum
from fleet.units import canonical as in_mpa

WING_SEQUENCE = "wing_sequence"
WING_PLACE = "wing_lower_surface"
LEVELS = ("none", "I", "II", "III", "IV", "V", "VI", "VII", "VIII", "IX", "X")
GRADES = ("print", "derived", "quoted", "memory", "adopted", "recorded")
RESIDUES = ("half_cycles", "repeating")


def spectra_of(top: Table) -> tuple[Spectrum, ...]:
    """The spectra of a file, by name; panels name them."""
    found = []
    for t in top.tables("spectra", "name"):
        name, source = t.text("name"), t.text("source")
        kind = t.choice("kind", tuple(KINDS))
        content = {"kind": kind, **KINDS[kind](t)}
        if t.done():
            found.append(Spectrum(name, kind, canonical(content), source))
    return tuple(found)


def _cycle(t: Table) -> dict[str, Any]:
    top = t.measure_or_none("cycle_max", "stress", above=0.0)
    span = t.measure_or_none("cycle_range", "stress", above=0.0)
    if (top is None) == (span is None):
        t.wrong("give either “cycle_max” or “cycle_range”, with its unit in the key.")
    ratio = t.number("cycle_ratio") or 0.0
    if not -10 <= ratio < 1:
        t.wrong(
            "“cycle_ratio” is the smallest over the largest stress, -10 to below 1."
        )
    stated = {"cycle_max_mpa": top} if span is None else {"cycle_range_mpa": span}
    return {**stated, "cycle_ratio": ratio}


def _pressure(t: Table) -> dict[str, Any]:
    share, ground = t.number("share_of_normal"), t.number("ground_share_of_normal")
    share, ground = share or 0.0, ground or 0.0
    if not 0.01 <= share <= 1:
        t.wrong("“share_of_normal” is a share of the normal differential, 0.01 to 1.")
    elif not -0.1 * share <= ground <= 0.9 * share:
        t.wrong("“ground_share_of_normal” is -0.1 to 0.9 of “share_of_normal”.")
    return {
        "share_of_normal": share,
        "ground_share_of_normal": ground,
        "ground": t.text("ground"),
    }


def _wing(t: Table) -> dict[str, Any]:
    ratio = t.number("ground_ratio") or 0.0
    if not -2 <= ratio < 1:
        t.wrong("“ground_ratio” is ground over mean flight stress, -2 to below 1.")
    top = LEVELS.index(t.choice("truncate_above", LEVELS, default="none"))
    bottom = LEVELS.index(t.choice("omit_below", LEVELS, default="none"))
    if top and bottom and bottom < top:
        t.wrong("“omit_below” is above “truncate_above”; no gust would be left.")
    return {
        "form": "full",
        "place": WING_PLACE,
        "mean_flight_stress_mpa": t.measure("mean_flight_stress", "stress", above=0.0),
        "ground_ratio": ratio,
        "ground_ratio_source": t.text("ground_ratio_source"),
        "ground_ratio_grade": t.choice("ground_ratio_grade", GRADES),
        "seed": t.whole("seed"),
        "halves": t.choice("halves", ("same_level", "drawn_apart")),
        "truncate_above": LEVELS[top] if top else None,
        "omit_below": LEVELS[bottom] if bottom else None,
        "residue": "repeating",
    }


def _sequence(t: Table) -> dict[str, Any]:
    points = _stresses(t, "points")
    if len(points) < 2:
        t.wrong("“points” must list two stresses or more, in the order flown.")
    repeats = t.flag("repeats")
    treated = _treated(t)
    if not repeats and treated["residue"] == "repeating":
        t.wrong("a history that happened once is counted with residue half_cycles.")
    return {
        "points_mpa": points,
        "flights": t.whole("flights", least=1),
        "repeats": repeats,
        **treated,
    }


def _exceedance(t: Table) -> dict[str, Any]:
    levels, numbers = _stresses(t, "levels"), t.numbers("numbers")
    if len(levels) < 2 or len(levels) != len(numbers):
        t.wrong("“levels” and “numbers” must list two values or more, one for one.")
    if any(high <= low for low, high in itertools.pairwise((0.0, *levels))):
        t.wrong("“levels” must rise from above 0.")
    counts = t.choice("counts", ("exceedances", "occurrences"))
    counted_at = t.choice("counted_at", ("level", "upper_edge"))
    _check_numbers(t, numbers, counts, counted_at)
    mean = t.measure("mean", "stress")
    ground = t.measure("ground", "stress")
    if ground > mean:
        t.wrong("“ground” is above “mean”, the stress in flight; exchange or correct.")
    return {
        "levels_mpa": levels,
        "numbers": numbers,
        "counts": counts,
        "counted_at": counted_at,
        "flights": t.whole("flights", least=1),
        "mean_mpa": mean,
        "ground_mpa": ground,
        "seed": t.whole("seed"),
        **_treated(t),
    }


def _check_numbers(
    t: Table, numbers: list[float], counts: str, counted_at: str
) -> None:
    if any(number < 0 for number in numbers):
        t.wrong("“numbers” must not be below 0.")
    if counts == "occurrences":
        if counted_at != "level":
            t.wrong("occurrences are counted at their own level: counted_at = level.")
        return
    if any(high > low for low, high in itertools.pairwise(numbers)):
        t.wrong("exceedances only fall with the level; these rise.")
    if counted_at == "upper_edge" and numbers and numbers[-1] > 0:
        t.wrong("add the level that is never exceeded: the upper edge of the last.")


def _treated(t: Table) -> dict[str, Any]:
    clip = [t.measure_or_none(f"clip_{end}", "stress") for end in ("above", "below")]
    if None not in clip and clip[0] < clip[1]:  # type: ignore[operator]
        t.wrong("“clip_above” is below “clip_below”; exchange them.")
    return {
        "residue": t.choice("residue", RESIDUES),
        "clip_above_mpa": clip[0],
        "clip_below_mpa": clip[1],
        "omit_below_range_mpa": t.measure_or_none(
            "omit_below_range", "stress", least=0.0
        ),
    }


def _stresses(t: Table, name: str) -> list[float]:
    key = t.unit_key(name, "stress")
    unit = key[len(name) + 1 :]
    return [in_mpa(value, unit) for value in t.numbers(key)] if key else []


KINDS: dict[str, Callable[[Table], dict[str, Any]]] = {
    "cycle": _cycle,
    "pressure": _pressure,
    WING_SEQUENCE: _wing,
    "sequence": _sequence,
    "exceedance": _exceedance,
}
