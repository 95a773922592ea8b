r"""Chance that a plan of inspections finds a crack before it is critical.

For inspections at sizes a_i before the critical size, each done where it should be
with chance d, found by its curve with POD(a_i), and in a share q of all cases never
done there at all (wrong place, no access, not on the card),

.. math:: P_{det} = (1 - q)\Bigl[1 - \prod_i (1 - d\,POD(a_i))\Bigr]

so that a product of many looks never tends to one by itself. Several looks: their
phases are taken independent, their shares q as happening together (the worse case).

Three phases. Random: the crack may begin at any time, the mean is over where the looks
meet it. Worst: the last look comes one whole interval before the critical size, so that
looks stand at N - k I; where the life N is a whole multiple of I that is at exactly n
times I. Both fall with a longer interval. Schedule: at the threshold and every interval
after, or without a threshold at n times I; as planned, but a longer interval may by
chance do better. With a threshold there is a look there and none before.

References
----------
.. [1] Product of misses; exact under what it assumes, see `CUMULATIVE`.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray
from scipy.special import ndtri

from repairs.analysis.errors import AnalysisError, InputError, within
from repairs.analysis.inspection.looks import (
    POINTS,
    Growth,
    Look,
    Phase,
    checked,
    look_times,
    pod_at,
    together,
)
from repairs.analysis.types import Grade, Reference, Sourced

Array = NDArray[np.float64]
CUMULATIVE = Reference(
    "Chance of finding a crack in repeated looks, mean over phase and scatter of life; "
    "exact, proved against simulation",
    Grade.DERIVED,
)
OUT_OF_REACH = (
    "Even every {shortest:,} cycles {title} finds the crack with {best:.4f}, below "
    "{target:g}: no interval. Choose a better method, a second look, or rework."
)
NOT_FALLING = (
    "As scheduled, a longer interval may by chance find more, so none is the longest. "
    "Ask for the mean or the worst phase."
)
NO_LOOKS = "A plan without an inspection finds nothing. Name at least one."
MANY_LOOKS = 500
"""Looks in a life from which on single ones no longer matter."""
TABLE = 4_001
"""Points of a life at which the chance of each look is tabulated."""
SHIFTS = ((math.sqrt(5) - 1) / 2, *(math.sqrt(p) for p in (2, 3, 7, 11, 13, 17, 19)))
"""Shift of phase from one life to the next, each look its own, to fill the range."""


@dataclass(frozen=True, slots=True)
class Found:
    """How a plan does, by phase, and the sentences it must be read with."""

    mean: float
    worst: float
    scheduled: float
    stated: tuple[str, ...]

    def at(self, phase: Phase) -> float:
        """Return the chance of detection in a phase [-]."""
        return {
            Phase.RANDOM: self.mean,
            Phase.WORST: self.worst,
            Phase.SCHEDULE: self.scheduled,
        }[phase]

    @property
    def missed(self) -> float:
        """Chance that the crack is critical before it is found, mean phase [-]."""
        return 1 - self.mean


def detect(growth: Growth, looks: tuple[Look, ...]) -> Found:
    """Return the chance that a plan finds the crack before it is critical.

    Parameters
    ----------
    growth
        Crack size [mm] against cycles, to critical, with the scatter of life.
    looks
        The inspections of the plan.

    Returns
    -------
    Found
        Mean over phase, worst phase, as scheduled [-].

    Notes
    -----
    Range: at most `MOST_LOOKS` repeats in a life. Looks at the very cycle of the
    critical size do not count. With scatter the worst phase is worst for each life.

    References
    ----------
    .. [1] See `CUMULATIVE`.
    """
    mean, worst, scheduled = (chance(growth, looks, phase) for phase in Phase)
    return Found(mean, worst, scheduled, stated(growth, looks))


def chance(growth: Growth, looks: tuple[Look, ...], phase: Phase) -> float:
    """Return the chance of detection for one phase [-]; as `detect`."""
    if not looks:
        raise InputError(NO_LOOKS)
    within("Looks of different kinds", len(looks), 1, len(SHIFTS), "a real plan")
    for look in looks:
        checked(growth, look)
    most = max(growth.life / look.interval for look in looks)
    factors = _lives(growth.log_deviation, most)
    missed = [
        _missed(growth, look, phase, factors, shift)
        for look, shift in zip(looks, SHIFTS, strict=False)
    ]
    through = together(looks, missed)
    return float(np.clip(1 - through.mean(), 0.0, 1.0))


def longest_interval(
    growth: Growth,
    looks: tuple[Look, ...],
    target: float,
    phase: Phase,
    *,
    shortest: int,
    vary: int = 0,
) -> int:
    """Return the longest interval of one look with which a plan meets a target.

    Parameters
    ----------
    growth, looks
        As `detect`; the interval of `looks[vary]` is sought, the others stay.
    target
        Chance of detection asked for [-].
    phase
        Mean or worst phase.
    shortest
        Shortest interval that can be kept [cycles], from the operator.
    vary
        Which look, from 0.

    Returns
    -------
    int
        Whole cycles, rounded down; no longer than the life.

    Raises
    ------
    AnalysisError
        Where the target is not met even at the shortest interval.

    Notes
    -----
    Range 0 < target < 1. Not capped: see `intervals`.

    References
    ----------
    .. [1] See `CUMULATIVE`. Seen from the critical size, each look of a longer interval
       comes earlier and there are fewer: it finds no more, so the search is sound.
    """
    within("Target", target, 1e-6, 1 - 1e-9, "a chance of detection")
    within("Shortest interval, cycles", shortest, 1, growth.life, "within the life")
    if phase is Phase.SCHEDULE:
        raise AnalysisError(NOT_FALLING)

    def met(interval: int) -> bool:
        return _with_interval(growth, looks, vary, interval, phase) >= target

    if not met(shortest):
        best = _with_interval(growth, looks, vary, shortest, phase)
        raise AnalysisError(
            OUT_OF_REACH.format(
                shortest=shortest, title=looks[vary].title, best=best, target=target
            )
        )
    low, high = shortest, math.floor(growth.life) + 1
    while high - low > 1:
        middle = (low + high) // 2
        low, high = (middle, high) if met(middle) else (low, middle)
    return low


def stated(growth: Growth, looks: tuple[Look, ...]) -> tuple[str, ...]:
    """Return the sentences a chance of detection must be read with."""
    said = [
        f"{look.title}: done where it should be with chance {look.done.value:g} each "
        f"time; in a share {look.never.value:g} of cases at no repeat."
        for look in looks
    ]
    if growth.log_deviation is None:
        said.append("Growth taken as certain: no scatter of life was given.")
    for look in looks:
        study = look.curve.study
        if float(look.seen[-1]) > study.largest:
            said.append(
                f"{look.title}: beyond {study.largest:g} mm, the largest tried, no "
                "more is counted on than there."
            )
    return tuple(said)


def _with_interval(
    growth: Growth, looks: tuple[Look, ...], vary: int, interval: int, phase: Phase
) -> float:
    look = replace(looks[vary], interval=interval)
    return chance(growth, (*looks[:vary], look, *looks[vary + 1 :]), phase)


def _lives(log_deviation: Sourced | None, most_looks: float) -> Array:
    """Return equally likely factors on life; fewer where looks are many."""
    if log_deviation is None:
        return np.ones(1)
    count = POINTS if most_looks <= MANY_LOOKS else POINTS // 10
    share = (np.arange(count) + 0.5) / count
    return np.asarray(10 ** (log_deviation.value * ndtri(share)))


def _missed(
    growth: Growth, look: Look, phase: Phase, factors: Array, shift: float
) -> Array:
    """Return the chance that a look misses at all its repeats, for each life [-]."""
    grid = np.linspace(0.0, growth.life, TABLE)
    table = pod_at(growth, look, grid)
    times = look_times(growth, look, phase, factors, shift)
    found = np.interp(times, grid, table)
    return np.asarray((1 - found).prod(axis=0).mean(axis=-1))
