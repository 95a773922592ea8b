"""Assumed flaws, thresholds, repeat intervals, and the caps on both.

Divisors come from the type's fatigue policy and detectable sizes from the inspection
method's row: there is no default of either. Cycles are rounded down.

References
----------
.. [1] JSSG-2006, Tables XXX and XXXII, as reproduced in the USAF Damage Tolerant Design
   Handbook, 1.3.4.1 and 1.3.7.2.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import StrEnum

from repairs.analysis.errors import within
from repairs.analysis.types import INCH, Grade, Interval, Reference

ROGUE_FLAW = Reference(
    "JSSG-2006 Table XXX, as reproduced in the USAF Damage Tolerant Design Handbook, "
    "1.3.4.1",
    Grade.QUOTED,
)
CONTINUING_FLAW = Reference(
    "JSSG-2006 A3.12.1 and A3.12.2, as reproduced in the USAF Damage Tolerant Design "
    "Handbook, 1.3.4.0 and 1.3.7.2.2",
    Grade.QUOTED,
)
IN_SERVICE_FLAW = Reference(
    "JSSG-2006 Table XXXII, as quoted in the USAF Damage Tolerant Design Handbook, "
    "1.3.7.2.3",
    Grade.QUOTED,
)
UNCOVERED = 0.25 * INCH
"""Uncovered length assumed after a depot penetrant or ultrasonic inspection [mm]."""
NO_CAP = ""


class FlawLocation(StrEnum):
    """Where a flaw is assumed."""

    HOLE = "hole or cut-out"
    ELSEWHERE = "elsewhere"


class FlawKind(StrEnum):
    """Shape of an assumed flaw."""

    THROUGH = "through"
    CORNER = "corner"
    SURFACE = "surface"


@dataclass(frozen=True, slots=True)
class AssumedFlaw:
    """A flaw that is assumed to be there [mm].

    `length` is from the hole edge at a hole, and tip to tip elsewhere; `depth` is the
    thickness for a through flaw.
    """

    kind: FlawKind
    length: float
    depth: float
    reference: Reference


def rogue_flaw(location: FlawLocation, thickness: float) -> AssumedFlaw:
    """Return the flaw assumed in new structure, by location and thickness.

    Parameters
    ----------
    location
        At a hole or cut-out, or elsewhere.
    thickness
        Thickness [mm].

    Returns
    -------
    AssumedFlaw
        Kind and sizes [mm].

    Notes
    -----
    Range t > 0. Hole: to 0.050 in a 0.05 in through crack on one side, above a 0.05 in
    corner crack. Elsewhere: to 0.125 in a through crack 0.25 in long, above a surface
    crack 0.125 in deep and 0.25 in long.

    References
    ----------
    .. [1] See `ROGUE_FLAW`.
    """
    within("Thickness, mm", thickness, 1e-6, 1e3, "a thickness")
    if location is FlawLocation.HOLE:
        if thickness <= 0.050 * INCH:
            return AssumedFlaw(FlawKind.THROUGH, 0.05 * INCH, thickness, ROGUE_FLAW)
        return AssumedFlaw(FlawKind.CORNER, 0.05 * INCH, 0.05 * INCH, ROGUE_FLAW)
    if thickness <= 0.125 * INCH:
        return AssumedFlaw(FlawKind.THROUGH, 0.25 * INCH, thickness, ROGUE_FLAW)
    return AssumedFlaw(FlawKind.SURFACE, 0.25 * INCH, 0.125 * INCH, ROGUE_FLAW)


def continuing_flaw(thickness: float) -> AssumedFlaw:
    """Return the flaw assumed at every other hole, of typical quality.

    Parameters
    ----------
    thickness
        Thickness [mm].

    Returns
    -------
    AssumedFlaw
        Corner crack of 0.005 in radius [mm].

    Notes
    -----
    Range t >= 0.005 in. Where the primary flaw ends in another hole or has failed its
    element, growth goes on from here; the two act together.

    References
    ----------
    .. [1] See `CONTINUING_FLAW`.
    """
    radius = 0.005 * INCH
    within("Thickness, mm", thickness, radius, 1e3, "a corner crack of 0.005 in in it")
    return AssumedFlaw(FlawKind.CORNER, radius, radius, CONTINUING_FLAW)


def in_service_flaw(thickness: float, covered: float) -> AssumedFlaw:
    """Return the flaw assumed to be left by a depot penetrant or ultrasonic inspection.

    Parameters
    ----------
    thickness
        Thickness [mm].
    covered
        Part of the crack under head, doubler or fairing [mm]; 0 = none, stated.

    Returns
    -------
    AssumedFlaw
        Through crack, covered part and 0.25 in beyond it [mm].

    Notes
    -----
    Range t > 0, covered >= 0. The least size to be assumed with that inspection; for
    other methods, or visual, it is not this.

    References
    ----------
    .. [1] See `IN_SERVICE_FLAW`.
    """
    within("Thickness, mm", thickness, 1e-6, 1e3, "a thickness")
    within("Covered length, mm", covered, 0, 1e3, "a length")
    return AssumedFlaw(
        FlawKind.THROUGH, covered + UNCOVERED, thickness, IN_SERVICE_FLAW
    )


@dataclass(frozen=True, slots=True)
class Cap:
    """A ceiling on an interval [cycles] and what it is."""

    cycles: int
    title: str


def whole_cycles(cycles: float) -> int:
    """Return cycles rounded down to a whole number."""
    return math.floor(cycles)


def capped(cycles: float, base: str, caps: tuple[Cap, ...]) -> Interval:
    """Return an interval cut down to the smallest cap, with both numbers.

    Parameters
    ----------
    cycles
        Calculated interval [cycles].
    base
        What it counts from.
    caps
        Ceilings; an empty tuple leaves the calculated value.

    Returns
    -------
    Interval
        Rounded down; without cycles where a cap leaves nothing.

    Notes
    -----
    No interval goes beyond the aircraft: the limit of validity is one of the caps.
    """
    uncapped = whole_cycles(cycles)
    lowest = min(caps, key=lambda cap: cap.cycles, default=None)
    if lowest is None or lowest.cycles >= uncapped:
        return Interval(uncapped, uncapped, NO_CAP, base)
    allowed = lowest.cycles if lowest.cycles > 0 else None
    return Interval(allowed, uncapped, lowest.title, base)
