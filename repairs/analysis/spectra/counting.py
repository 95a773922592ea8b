r"""Rainflow counting of a load history, once or repeating, by ASTM E1049-85.

Of the last three points, X is the newest range and Y the one before it. While X < Y the
next point is read. Otherwise Y is counted and its points go: as half a cycle where it
holds the starting point of the history, else as one. Ranges left at the end are half
cycles. A repeating history starts and ends at its maximum instead; then every range Y
is one whole cycle and nothing is left.

Only reversals count; small ranges are left out before counting, never after. The loops
run in Python for short histories and compiled for long ones, from one source; the
compiler is imported only there.

References
----------
.. [1] ASTM E1049-85, Standard Practices for Cycle Counting in Fatigue Analysis: 5.4.4,
   and 5.4.5 for repeating histories.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import cache
from typing import Any

import numpy as np

from repairs.analysis.errors import InputError, within
from repairs.analysis.spectra.loops import closed_cycles, kept_reversals, turning_points
from repairs.analysis.spectra.sequence import (
    ONE_OFF_REPEATED,
    Floats,
    LoadSequence,
    Residue,
    Treatment,
    stresses_of,
)
from repairs.analysis.types import Grade, Reference

E1049 = Reference("ASTM E1049-85, 5.4.4, rainflow counting", Grade.QUOTED)
E1049_REPEATING = Reference(
    "ASTM E1049-85, simplified rainflow counting for repeating histories, Table X1.4",
    Grade.PRINT,
)
COMPILED_FROM = 10_000
"""Points from which loops run compiled: fewer take Python some 4 ms, while the first
compiled call of a process takes half a second (`tests/bench/counting.py`)."""
NO_CLASSES = "Classes of ranges reads {read}; a whole number of at least 1 is expected."


@dataclass(frozen=True, eq=False)
class CountedCycles:
    """Cycles in the order they close.

    Parameters
    ----------
    first, second
        Turning points of each, as flown, shape (n,) [MPa].
    counts
        1 for a cycle, 0.5 for half of one, shape (n,) [-].
    residue
        How what closes no cycle was handled.
    """

    first: Floats
    second: Floats
    counts: Floats
    residue: Residue

    @property
    def ranges(self) -> Floats:
        """Largest less smallest stress, shape (n,) [MPa]."""
        between = self.first - self.second
        return np.abs(between, out=between)

    @property
    def means(self) -> Floats:
        """Mean stress, shape (n,) [MPa]."""
        total = self.first + self.second
        total *= 0.5
        return total

    @property
    def maxima(self) -> Floats:
        """Largest stress, shape (n,) [MPa]."""
        return np.maximum(self.first, self.second)

    @property
    def minima(self) -> Floats:
        """Smallest stress, shape (n,) [MPa]."""
        return np.minimum(self.first, self.second)

    def by_range(self) -> tuple[tuple[float, float], ...]:
        """Return (range, counts) of every different range, rising [MPa, -]."""
        ranges, place = np.unique(self.ranges, return_inverse=True)
        sums = np.bincount(place, self.counts)
        return tuple(zip(ranges.tolist(), sums.tolist(), strict=True))


@dataclass(frozen=True, slots=True)
class RangeClass:
    """Cycles with ranges in [low, high), the last class closed; for display [MPa]."""

    low: float
    high: float
    counts: float


@cache
def _compiled(loop: Callable[..., int]) -> Callable[..., int]:
    """Return the loop as machine code, kept on disk between processes."""
    from numba import njit

    made: Callable[..., int] = njit(cache=True)(loop)
    return made


def _run(loop: Callable[..., int], points: Floats, outputs: int, *more: Any) -> Any:
    """Run a loop over the points; return its outputs, cut to what it filled."""
    size = len(points)
    if size < COMPILED_FROM:
        lists = [[0.0] * size for _ in range(outputs)]
        filled = loop(points.tolist(), *lists, *more)
        return [np.array(values[:filled]) for values in lists]
    arrays = [np.empty(size) for _ in range(outputs)]
    filled = _compiled(loop)(points, *arrays, *more)
    return [values[:filled] for values in arrays]


def reversals(stresses: Sequence[float] | Floats) -> Floats:
    """Return the turning points of a history, its ends included.

    Parameters
    ----------
    stresses
        History, shape (n,) [MPa].

    Returns
    -------
    ndarray
        Points where the direction changes, equal neighbours merged [MPa]; a single
        point where the history never moves.

    Raises
    ------
    InputError
        A point is not finite, or there are fewer than two.

    Notes
    -----
    Range: any finite history.

    References
    ----------
    .. [1] ASTM E1049-85, reversals.
    """
    (turned,) = _run(turning_points, stresses_of(stresses), 1)
    found: Floats = turned
    return found


def from_maximum(stresses: Sequence[float] | Floats) -> Floats:
    """Return a repeating history so that it starts and ends at its maximum [MPa]."""
    points = reversals(stresses)
    top = int(np.argmax(points))
    turned = np.concatenate([points[top:], points[: top + 1]])
    return reversals(turned) if len(points) > 1 else points


def rainflow(stresses: Sequence[float] | Floats, residue: Residue) -> CountedCycles:
    r"""Count the cycles of a history.

    .. math:: X = |s_n - s_{n-1}| \ge Y = |s_{n-1} - s_{n-2}| \Rightarrow
        Y\text{ is counted}

    Parameters
    ----------
    stresses
        History, shape (n,) [MPa].
    residue
        `HALVES` for a history flown once, `REPEATING` for a block that comes again.

    Returns
    -------
    CountedCycles
        In the order they close.

    Notes
    -----
    Range: any finite history. Twice the sum of counts is the number of reversals less
    one; the largest range is the largest less the smallest stress.

    References
    ----------
    .. [1] ASTM E1049-85, 5.4.4 and the simplified method for repeating histories.
    """
    repeating = residue is Residue.REPEATING
    points = from_maximum(stresses) if repeating else stresses_of(stresses)
    first, second, counts, _ = _run(closed_cycles, points, 4, repeating)
    return CountedCycles(first, second, counts, residue)


def without_small(
    stresses: Sequence[float] | Floats, smallest: float, residue: Residue
) -> Floats:
    """Return the reversals that are left without ranges below `smallest`.

    Parameters
    ----------
    stresses
        History, shape (n,) [MPa].
    smallest
        Ranges below are removed [MPa].
    residue
        As the history will be counted; a repeating one then starts at its maximum.

    Returns
    -------
    ndarray
        Turning points [MPa]. Their counted cycles are those of the whole history with
        ranges of at least `smallest`.

    Notes
    -----
    Range: any level >= 0. A small range inside a larger one goes with both its points,
    so no larger range is cut.

    References
    ----------
    .. [1] ASTM E1049-85: ranges too small to matter are eliminated before counting.
    """
    within("Omitted range, MPa", smallest, 0, 1e4, "a range of stress")
    repeating = residue is Residue.REPEATING
    points = from_maximum(stresses) if repeating else reversals(stresses)
    (kept,) = _run(kept_reversals, points, 1, smallest)
    left: Floats = kept
    return left


def treated(sequence: LoadSequence, treatment: Treatment) -> LoadSequence:
    """Return the sequence clipped first, then without its small ranges, as chosen.

    What is clipped or left out joins its neighbours, so that turning points remain; the
    starts of flights are then no longer known.
    """
    points, starts = sequence.stresses, sequence.starts
    if treatment.clip_above is not None or treatment.clip_below is not None:
        points = reversals(np.clip(points, treatment.clip_below, treatment.clip_above))
    if treatment.omit_below_range:
        points = without_small(points, treatment.omit_below_range, treatment.residue)
    if len(points) != len(sequence.stresses):
        starts = None
    return LoadSequence(points, sequence.flights, sequence.repeats, starts)


def counted(sequence: LoadSequence, treatment: Treatment) -> CountedCycles:
    """Treat a sequence as chosen and count it.

    Raises
    ------
    InputError
        The history is one-off and counting is asked for a repeating one.
    """
    if treatment.residue is Residue.REPEATING and not sequence.repeats:
        raise InputError(ONE_OFF_REPEATED)
    return rainflow(treated(sequence, treatment).stresses, treatment.residue)


def range_classes(cycles: CountedCycles, classes: int) -> tuple[RangeClass, ...]:
    """Return counts in equal classes of range, for display only [MPa, -].

    Damage is never computed from classes: their means and true ranges are lost.
    """
    if classes < 1:
        raise InputError(NO_CLASSES.format(read=classes))
    if not len(cycles.counts):
        return ()
    ranges = cycles.ranges
    sums, edges = np.histogram(
        ranges, classes, (0.0, float(ranges.max())), weights=cycles.counts
    )
    return tuple(
        RangeClass(float(low), float(high), float(count))
        for low, high, count in zip(edges[:-1], edges[1:], sums, strict=True)
    )
