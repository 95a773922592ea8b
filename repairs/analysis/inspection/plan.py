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
.. [1] Product of misses: USAF Damage Tolerant Design Handbook, 3.1; the rest is exact.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from enum import StrEnum
from itertools import pairwise

import numpy as np
from numpy.polynomial.hermite_e import hermegauss
from numpy.typing import NDArray

from repairs.analysis.errors import AnalysisError, InputError, within
from repairs.analysis.inspection.detection import DetectionCurve
from repairs.analysis.types import Grade, Reference

Array = NDArray[np.float64]
CUMULATIVE = Reference(
    "Chance of finding a crack in repeated looks, mean over phase and scatter of life; "
    "exact, proved against simulation",
    Grade.DERIVED,
)
NOT_GROWING = (
    "The growth of the crack reads {what}; at least two points, cycles rising from 0 "
    "and sizes that never fall are due. Calculate the growth again."
)
NOT_SEEN = (
    "{title} has {seen} sizes for {points} points of the growth; one for each, never "
    "falling, is due."
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
LAST = 1 - 1e-9
"""Share of the life from which on a look comes too late, at the critical size."""
MOST_LOOKS = 20_000
POINTS = 2_000
"""Points of phase and inspection together; the mean is then good to about 1e-6."""
NODES = 21
"""Nodes of the mean over scatter of life."""


class Phase(StrEnum):
    """Where the looks of a plan meet the growth of the crack."""

    RANDOM = "mean over a random phase"
    WORST = "worst phase: the last look one interval before critical"
    SCHEDULE = "as scheduled from the start of growth"


@dataclass(frozen=True, slots=True)
class Growth:
    """A crack from its first size to critical: cycles from 0, size [mm], shape (n,).

    `log_deviation` is s of log10 life, every rate faster or slower by one lognormal
    factor; None = growth taken as certain, which is said with the result.
    """

    cycles: Array
    size: Array
    base: str
    log_deviation: float | None

    def __post_init__(self) -> None:
        n, a = self.cycles, self.size
        if n.ndim != 1 or n.shape != a.shape or n.size < 2:
            raise InputError(NOT_GROWING.format(what=f"{n.shape} and {a.shape} points"))
        if not (np.isfinite(n).all() and np.isfinite(a).all()):
            raise InputError(NOT_GROWING.format(what="a value that is no number"))
        if n[0] != 0 or not (np.diff(n) > 0).all():
            raise InputError(NOT_GROWING.format(what="cycles that do not rise from 0"))
        if not (a[0] > 0 and (np.diff(a) >= 0).all()):
            raise InputError(NOT_GROWING.format(what="a size that falls"))
        if self.log_deviation is not None:
            within("Deviation of log life", self.log_deviation, 1e-6, 1, "log10 cycles")

    @property
    def life(self) -> float:
        """Cycles to the critical size."""
        return float(self.cycles[-1])


@dataclass(frozen=True, slots=True)
class Look:
    """One inspection of a plan, repeated.

    Parameters
    ----------
    title
        In the engineer's words, as "eddy current at the C check".
    curve
        Its detection curve.
    seen
        What it sees of the crack at each point of the growth, in the meaning of its
        curve [mm], shape (n,): see `beyond_cover`.
    interval
        Repeat [cycles].
    threshold
        First look [cycles] from the growth's base, none before it; None = looks go
        on whenever the crack begins.
    done
        Chance that it is done, and there, each time anew [-].
    never
        Share of cases in which it is never done there, at no repeat [-].
    """

    title: str
    curve: DetectionCurve
    seen: Array
    interval: int
    threshold: int | None
    done: float
    never: float

    def __post_init__(self) -> None:
        within("Interval, cycles", self.interval, 1, 1e9, "whole cycles")
        within("Chance that the inspection is done", self.done, 0, 1, "a share")
        within("Share never inspected", self.never, 0, 1, "a share")
        if self.threshold is not None:
            within("Threshold, cycles", self.threshold, 0, 1e9, "whole cycles")


@dataclass(frozen=True, slots=True)
class Found:
    """How a plan does, by phase, and the sentences it must be read with."""

    mean: float
    worst: float
    scheduled: float
    stated: tuple[str, ...]

    @property
    def missed(self) -> float:
        """Chance that the crack is critical before it is found, mean phase [-]."""
        return 1 - self.mean


def beyond_cover(size: Array, covered: float) -> Array:
    """Return what shows of a crack whose first `covered` mm lie under a head [mm].

    Parameters
    ----------
    size
        Length from the hole edge [mm], shape (n,).
    covered
        Part under head, doubler or fairing, from the same edge [mm]; 0 = none, stated.

    Returns
    -------
    ndarray
        Length beyond the cover [mm], not below 0.

    Notes
    -----
    Range covered >= 0. For `SizeMeaning.BEYOND_COVER`.

    References
    ----------
    .. [1] Geometry.
    """
    within("Covered length, mm", covered, 0, 1e4, "a length")
    return np.maximum(size - covered, 0.0)


def detect(growth: Growth, looks: tuple[Look, ...]) -> Found:
    """Return the chance that a plan finds the crack before it is critical.

    Parameters
    ----------
    growth
        Crack size against cycles, to critical, with the scatter of life.
    looks
        The inspections of the plan.

    Returns
    -------
    Found
        Mean over phase, worst phase, as scheduled.

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
    for look in looks:
        _check(growth, look)
    factors, weights = _scatter(growth.log_deviation)
    found = [
        1 - together(looks, [_missed(growth, look, phase, f) for look in looks])
        for f in factors
    ]
    return float(np.clip(np.dot(weights, found), 0.0, 1.0))


def together(looks: tuple[Look, ...], missed: list[float]) -> float:
    """Return the chance that all looks miss, each missing as given where it is done.

    The shares never inspected are taken to happen together: whoever is without the
    rarer failure is without none of the others.
    """
    rising = sorted(zip(looks, missed, strict=True), key=lambda one: one[0].never)
    shares = [0.0, *(look.never for look, _ in rising), 1.0]
    through = np.cumprod([1.0, *(miss for _, miss in rising)])
    return float(np.dot([high - low for low, high in pairwise(shares)], through))


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
        f"{look.title}: done where it should be with chance {look.done:g} each time; "
        f"in a share {look.never:g} of cases at no repeat."
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


def _check(growth: Growth, look: Look) -> None:
    seen = look.seen
    if seen.shape != growth.cycles.shape or not (np.diff(seen) >= 0).all():
        raise InputError(
            NOT_SEEN.format(title=look.title, seen=seen.size, points=growth.cycles.size)
        )
    within("Looks in a life", growth.life / look.interval, 0, MOST_LOOKS, "a real plan")


def _scatter(log_deviation: float | None) -> tuple[Array, Array]:
    """Return factors on life and their weights."""
    if log_deviation is None:
        return np.ones(1), np.ones(1)
    nodes, weights = hermegauss(NODES)
    return 10 ** (log_deviation * nodes), weights / weights.sum()


def look_times(growth: Growth, look: Look, phase: Phase, factor: float = 1.0) -> Array:
    """Return the cycles of the growth at which a look comes, shape (looks, phases).

    `factor` is on the life of the crack. Cycles at or before 0 are no looks.
    """
    life, step = growth.life, look.interval / factor
    first = 0.0 if look.threshold is None else look.threshold / factor
    if phase is Phase.SCHEDULE:
        start = step if look.threshold is None else first
        return np.arange(start, life * LAST, step)[:, None]
    count = math.ceil(life / step)
    phases = max(8, math.ceil(POINTS / count)) if phase is Phase.RANDOM else 1
    part = (np.arange(phases) + 0.5) / phases if phase is Phase.RANDOM else np.ones(1)
    times = life - (np.arange(count)[:, None] + part) * step
    if look.threshold is None or first >= life * LAST:
        return np.where(times >= first, times, 0.0)
    at_threshold = np.full((1, phases), first)
    return np.concatenate([np.where(times > first, times, 0.0), at_threshold])


def pod_at(growth: Growth, look: Look, times: Array) -> Array:
    """Return the chance that a look at cycles of the growth finds the crack [-].

    With the chance that it is done; none where it cannot be a look.
    """
    seen = np.interp(times, growth.cycles, look.seen)
    inside = times > growth.life * (1 - LAST)
    return np.where(inside, look.done * look.curve.pod(seen), 0.0)


def _missed(growth: Growth, look: Look, phase: Phase, factor: float) -> float:
    """Return the chance that a look misses at all its repeats, where it is done [-]."""
    times = look_times(growth, look, phase, factor)
    return float((1 - pod_at(growth, look, times)).prod(axis=0).mean())
