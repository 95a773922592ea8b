r"""Tables of how often stress levels are passed, and a sequence drawn from one.

A table counts either exceedances (cumulative: how often a level is passed, in one
direction) or occurrences (how often its step is reached); read as the other, the small
loads are counted many times over. It must say which.

.. math:: n_i = E_i - E_{i+1}
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Mapping
from dataclasses import dataclass
from enum import StrEnum
from typing import Any, Self

import numpy as np

from repairs.analysis.errors import InputError, within
from repairs.analysis.spectra.drawn import Keys, flown
from repairs.analysis.spectra.plain import Content, Kind
from repairs.analysis.spectra.sequence import (
    LoadSequence,
    Treatment,
    flights_of,
)

UNEVEN = "The table has {levels} levels and {counts} counts; as many of both expected."
NO_LEVELS = "The table has {read} levels; at least 2 are expected."
NOT_RISING = (
    "Level {number} reads {read:g} MPa after {before:g}; rising levels above 0 are "
    "expected."
)
BAD_COUNT = (
    "The count of level {level:g} MPa reads {read}; a finite count >= 0 expected."
)
RISES = (
    "Exceedances rise from {before:g} to {read:g} at level {level:g} MPa; cumulative "
    "counts only fall. If these are occurrences, say so."
)
OPEN_TOP = (
    "The highest level, {level:g} MPa, is still exceeded {read:g} times: there is no "
    "upper edge to count these at. Add the level that is never exceeded."
)
TOO_RARE = (
    "Less than half an occurrence in {flights} flights at {levels} MPa: these levels "
    "are not in the sequence. Longer blocks hold them."
)
AT_THEIR_LEVELS = (
    "The table counts occurrences, which stand at their own levels: say counted_at = "
    "{level}, not {read}."
)
NOTHING_FLOWN = "The table gives no whole occurrence in {flights} flights."


class Counts(StrEnum):
    """What the numbers of a table are."""

    EXCEEDANCES = "exceedances"
    OCCURRENCES = "occurrences"


class CountedAt(StrEnum):
    """Which stress the occurrences between two levels are given.

    `LEVEL`: the lower of them, for a table whose levels are the steps themselves.
    `UPPER_EDGE`: the upper, which never makes a load smaller than it was.
    """

    LEVEL = "level"
    UPPER_EDGE = "upper_edge"


@dataclass(frozen=True, slots=True)
class Occurrences:
    """How often each stress increment occurs in a block [MPa, -]."""

    increments: tuple[float, ...]
    counts: tuple[float, ...]

    def whole(self) -> tuple[int, ...]:
        """Return whole counts whose sums from the highest down are the nearest ones."""
        sums = list(itertools.accumulate(reversed(self.counts), initial=0.0))
        rounded = [math.floor(total + 0.5) for total in sums]
        return tuple(high - low for low, high in itertools.pairwise(rounded))[::-1]


@dataclass(frozen=True, slots=True)
class ExceedanceTable:
    """Levels of stress increment and their counts in a number of flights.

    Each occurrence is one cycle of equal increments above and below the mean.

    Parameters
    ----------
    levels
        Increments over the mean stress in flight, rising [MPa].
    numbers
        Count of each level in `flights` flights [-].
    counts
        What the numbers are.
    counted_at
        Which stress exceedances between two levels are given.
    flights
        Flights of the table, which are the block.
    mean, ground
        Stress in undisturbed flight and on the ground [MPa].
    seed
        Start of the drawn order.
    treatment
        Choices made.
    """

    levels: tuple[float, ...]
    numbers: tuple[float, ...]
    counts: Counts
    counted_at: CountedAt
    flights: int
    mean: float
    ground: float
    seed: int
    treatment: Treatment

    def __post_init__(self) -> None:
        if len(self.levels) != len(self.numbers):
            raise InputError(
                UNEVEN.format(levels=len(self.levels), counts=len(self.numbers))
            )
        if len(self.levels) < 2:
            raise InputError(NO_LEVELS.format(read=len(self.levels)))
        pairs = itertools.pairwise((0.0, *self.levels))
        for number, (before, level) in enumerate(pairs, 1):
            if not before < level < math.inf:
                raise InputError(
                    NOT_RISING.format(number=number, read=level, before=before)
                )
        for level, read in zip(self.levels, self.numbers, strict=True):
            if not 0 <= read < math.inf:
                raise InputError(BAD_COUNT.format(level=level, read=read))
        within("Mean stress in flight, MPa", self.mean, -1e4, 1e4, "a stress")
        within("Stress on the ground, MPa", self.ground, -1e4, self.mean, "below it")
        flights_of(self.flights)
        Keys(self.seed)
        self.occurrences()

    def occurrences(self) -> Occurrences:
        r"""Return how often each increment occurs, :math:`n_i = E_i - E_{i+1}`."""
        if self.counts is Counts.OCCURRENCES:
            if self.counted_at is not CountedAt.LEVEL:
                raise InputError(
                    AT_THEIR_LEVELS.format(level=CountedAt.LEVEL, read=self.counted_at)
                )
            return Occurrences(self.levels, self.numbers)
        pairs = itertools.pairwise(self.numbers)
        for (before, read), level in zip(pairs, self.levels[1:], strict=True):
            if read > before:
                raise InputError(RISES.format(before=before, read=read, level=level))
        steps = -np.diff(self.numbers)
        if self.counted_at is CountedAt.LEVEL:
            return Occurrences(self.levels, (*steps.tolist(), self.numbers[-1]))
        if self.numbers[-1] > 0:
            raise InputError(
                OPEN_TOP.format(level=self.levels[-1], read=self.numbers[-1])
            )
        return Occurrences(self.levels[1:], tuple(steps.tolist()))

    @property
    def warnings(self) -> tuple[str, ...]:
        """What must be said with every result of this table."""
        found = self.occurrences()
        lost = [
            f"{level:g}"
            for level, count, whole in zip(
                found.increments, found.counts, found.whole(), strict=True
            )
            if count > 0 and whole == 0
        ]
        rare = TOO_RARE.format(flights=self.flights, levels=", ".join(lost))
        return (
            *((rare,) if lost else ()),
            *self.treatment.warnings(repeats=True),
        )

    def sequence(self) -> LoadSequence:
        """Return the block: occurrences spread over its flights by the seed.

        Occurrences, listed from the lowest level up, take a key each that names their
        flight, then a key each that puts them in order within it.
        """
        found = self.occurrences()
        listed = np.repeat(found.increments, found.whole())
        if not len(listed):
            raise InputError(NOTHING_FLOWN.format(flights=self.flights))
        keys = Keys(self.seed)
        flight = keys.below(len(listed), self.flights)
        drawn = listed[keys.order(flight)]
        points, starts = flown(
            np.bincount(flight, minlength=self.flights),
            self.mean + drawn,
            self.mean - drawn,
            self.ground,
            self.mean,
        )
        return LoadSequence(points, self.flights, True, starts)

    def as_data(self) -> dict[str, object]:
        """Return the table as plain data."""
        return {
            "kind": str(Kind.EXCEEDANCE),
            "levels_mpa": list(self.levels),
            "numbers": list(self.numbers),
            "counts": str(self.counts),
            "counted_at": str(self.counted_at),
            "flights": self.flights,
            "mean_mpa": self.mean,
            "ground_mpa": self.ground,
            "seed": self.seed,
            **self.treatment.as_data(),
        }

    @classmethod
    def from_data(cls, data: Mapping[str, Any]) -> Self:
        """Return the table that plain data states."""
        content = Content(Kind.EXCEEDANCE, data)
        made = cls(
            content.numbers("levels_mpa"),
            content.numbers("numbers"),
            content.word("counts", Counts),
            content.word("counted_at", CountedAt),
            content.whole("flights"),
            content.number("mean_mpa"),
            content.number("ground_mpa"),
            content.whole("seed"),
            Treatment.taken_from(content),
        )
        content.done()
        return made
