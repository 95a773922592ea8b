"""Growth of a crack, the looks of a plan at it, and when they come."""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import StrEnum
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from repairs.analysis.errors import InputError, within
from repairs.analysis.inspection.detection import DetectionCurve
from repairs.analysis.types import Sourced

Array = NDArray[np.float64]
NOT_GROWING = (
    "The growth of the crack reads {what}; at least two points, cycles rising from 0 "
    "and sizes that never fall are due. Calculate the growth again."
)
NOT_SEEN = (
    "{title} has {seen} sizes for {points} points of the growth; one for each, never "
    "falling, is due."
)
TOUCHING = 1e-9
"""Share of the life within which a look is at the critical size, or at the first."""
MOST_LOOKS = 20_000
POINTS = 1_000
"""Lives and phases tried together; means are then good to about 1e-3."""


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
    log_deviation: Sourced | None

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
            s = self.log_deviation.value
            within("Deviation of log life", s, 1e-6, 1, "log10 cycles")

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
    done: Sourced
    never: Sourced

    def __post_init__(self) -> None:
        within("Interval, cycles", self.interval, 1, 1e9, "whole cycles")
        within("Chance that the inspection is done", self.done.value, 0, 1, "a share")
        within("Share never inspected", self.never.value, 0, 1, "a share")
        if self.threshold is not None:
            within("Threshold, cycles", self.threshold, 0, 1e9, "whole cycles")


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


def together(looks: tuple[Look, ...], missed: list[Array]) -> Array:
    """Return the chance that all looks miss, each missing as given where it is done.

    The shares never inspected are taken to happen together: whoever is without the
    rarer failure is without none of the others.
    """
    order = sorted(range(len(looks)), key=lambda which: looks[which].never.value)
    shares = [0.0, *(looks[which].never.value for which in order), 1.0]
    through = np.ones_like(missed[0])
    total = np.zeros_like(missed[0])
    for which, (low, high) in zip([*order, None], pairwise(shares), strict=True):
        total += (high - low) * through
        if which is not None:
            through = through * missed[which]
    return total


def look_times(
    growth: Growth, look: Look, phase: Phase, factors: Array, shift: float = 0.0
) -> Array:
    """Return the cycles of the growth at which a look comes.

    Shape (looks, lives, phases); `factors` are on the life of the crack, shape
    (lives,). Cycles at or before 0, and from the critical size on, are no looks.
    """
    life = growth.life
    step = (look.interval / factors)[None, :, None]
    first = (look.threshold or 0) / factors[None, :, None]
    count = math.ceil(life / float(step.min()))
    row = np.arange(count, dtype=np.float64)[:, None, None]
    if phase is Phase.SCHEDULE:
        return (first if look.threshold is not None else step) + row * step
    times = life - (row + _parts(phase, factors.size, count, shift)) * step
    times = np.where(times > first, times, 0.0)
    if look.threshold is None:
        return times
    at_threshold = np.broadcast_to(first, (1, *times.shape[1:]))
    return np.concatenate([times, at_threshold])


def pod_at(growth: Growth, look: Look, times: Array) -> Array:
    """Return the chance that a look at cycles of the growth finds the crack [-].

    With the chance that it is done; none where it cannot be a look.
    """
    seen = np.interp(times, growth.cycles, look.seen)
    inside = (times > growth.life * TOUCHING) & (times < growth.life * (1 - TOUCHING))
    return np.where(inside, look.done.value * look.curve.pod(seen), 0.0)


def _parts(phase: Phase, lives: int, count: int, shift: float) -> Array:
    """Return the phases as parts of an interval, shape (1, lives, phases)."""
    if phase is Phase.WORST:
        return np.ones((1, lives, 1))
    phases = max(8, POINTS // count) if lives == 1 else 1
    begin = (np.arange(lives) * shift + 0.5) % 1.0
    return ((np.arange(phases) + begin[:, None]) / phases)[None]


def checked(growth: Growth, look: Look) -> None:
    """Refuse a look that does not belong to the growth."""
    seen = look.seen
    if seen.shape != growth.cycles.shape or not (np.diff(seen) >= 0).all():
        raise InputError(
            NOT_SEEN.format(title=look.title, seen=seen.size, points=growth.cycles.size)
        )
    within("Looks in a life", growth.life / look.interval, 0, MOST_LOOKS, "a real plan")
