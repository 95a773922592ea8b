"""Sequences of stress, and the choices made before their cycles are used.

A spectrum is kept as plain data with its kind and every choice that was made. From it
comes a `LoadSequence`: turning points of stress in order, for a number of flights.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from enum import StrEnum
from typing import Any, Self

import numpy as np
from numpy.typing import NDArray

from repairs.analysis.errors import InputError, within
from repairs.analysis.spectra.plain import Content, Kind

Floats = NDArray[np.float64]
Whole = NDArray[np.int64]

NOT_STRESSES = (
    "The sequence reads {read} at point {number}; finite stresses in MPa are expected."
)
TOO_FEW = "The sequence has {read} points; at least 2 are expected."
FLIGHTS = "Flights reads {read!r}; a whole number of at least 1 is expected."
ONE_OFF_REPEATED = (
    "The history is one-off, but counting is asked for a repeating one. "
    "Count the residue as half cycles, or say that the block repeats."
)
HALVES_OF_BLOCK = (
    "The block repeats, but its residue is counted as half cycles: the cycle that the "
    "join of two blocks closes is lost."
)
CLIPPED = (
    "Stresses are clipped. Without its rare high loads a sequence loses their "
    "retardation: a growth life computed with retardation becomes shorter, one "
    "without becomes longer."
)
OMITTED = (
    "Ranges below {level:g} MPa are left out before counting: the life in flights "
    "comes out longer by what they would have done."
)


class Residue(StrEnum):
    """What counting does with ranges that close no cycle.

    `HALVES`: each is half a cycle, for a history flown once (E1049, 5.4.4).
    `REPEATING`: the history starts at its maximum and comes again, and only whole
    cycles are left (E1049, simplified method for repeating histories).
    """

    HALVES = "half_cycles"
    REPEATING = "repeating"


@dataclass(frozen=True, slots=True)
class Treatment:
    """What is done to a sequence before its cycles are used; each a choice.

    Parameters
    ----------
    residue
        How counting ends.
    clip_above, clip_below
        Stresses beyond are set to this [MPa]; None = not clipped.
    omit_below_range
        Smaller ranges are removed before counting [MPa]; None = none removed.
    """

    residue: Residue
    clip_above: float | None = None
    clip_below: float | None = None
    omit_below_range: float | None = None

    def __post_init__(self) -> None:
        if self.omit_below_range is not None:
            within("Omitted range, MPa", self.omit_below_range, 0, 1e4, "a range")
        if self.clip_above is not None and self.clip_below is not None:
            within(
                "Upper clipping level, MPa",
                self.clip_above,
                self.clip_below,
                1e4,
                "above the lower one",
                "Exchange them.",
            )

    def warnings(self, *, repeats: bool) -> tuple[str, ...]:
        """Return what must be said with every result of these choices."""
        clipped = self.clip_above is not None or self.clip_below is not None
        return (
            *((CLIPPED,) if clipped else ()),
            *(
                (OMITTED.format(level=self.omit_below_range),)
                if self.omit_below_range
                else ()
            ),
            *((HALVES_OF_BLOCK,) if repeats and self.residue is Residue.HALVES else ()),
        )

    def as_data(self) -> dict[str, object]:
        """Return the choices as plain data."""
        return {
            "residue": str(self.residue),
            "clip_above_mpa": self.clip_above,
            "clip_below_mpa": self.clip_below,
            "omit_below_range_mpa": self.omit_below_range,
        }

    @classmethod
    def taken_from(cls, content: Content) -> Self:
        """Return the choices that plain data states; each must be there."""
        return cls(
            content.word("residue", Residue),
            content.number_or_none("clip_above_mpa"),
            content.number_or_none("clip_below_mpa"),
            content.number_or_none("omit_below_range_mpa"),
        )


@dataclass(frozen=True, eq=False)
class LoadSequence:
    """Turning points of stress in the order flown.

    Parameters
    ----------
    stresses
        Turning points, shape (n,) [MPa].
    flights
        Flights that the points stand for.
    repeats
        Whether the points are a block that is flown again and again.
    starts
        Index of each flight's first point, shape (flights,); None = not known.
    """

    stresses: Floats
    flights: int
    repeats: bool
    starts: Whole | None = field(default=None)

    def __post_init__(self) -> None:
        checked = stresses_of(self.stresses)
        if checked is self.stresses and checked.flags.writeable:
            checked = checked.copy()
        checked.flags.writeable = False
        object.__setattr__(self, "stresses", checked)
        flights_of(self.flights)


def flights_of(flights: object) -> int:
    """Return a number of flights, else refuse it."""
    if not isinstance(flights, int) or isinstance(flights, bool) or flights < 1:
        raise InputError(FLIGHTS.format(read=flights))
    return flights


def stresses_of(values: Sequence[float] | Floats) -> Floats:
    """Return finite stresses, shape (n,), n >= 2 [MPa], else refuse the point."""
    stresses = np.asarray(values, dtype=np.float64)
    if stresses.ndim != 1 or len(stresses) < 2:
        raise InputError(TOO_FEW.format(read=stresses.size))
    finite = np.isfinite(stresses)
    if not finite.all():
        number = int(np.argmin(finite))
        raise InputError(NOT_STRESSES.format(read=stresses[number], number=number + 1))
    return stresses


@dataclass(frozen=True, slots=True)
class UserSequence:
    """Turning points as somebody measured or calculated them.

    Parameters
    ----------
    points
        Stresses in the order flown [MPa].
    flights
        Flights that the points stand for.
    repeats
        Whether the points are a block flown again and again, or happened once.
    treatment
        Choices made.
    """

    points: tuple[float, ...]
    flights: int
    repeats: bool
    treatment: Treatment

    def __post_init__(self) -> None:
        stresses_of(self.points)
        flights_of(self.flights)
        if not self.repeats and self.treatment.residue is Residue.REPEATING:
            raise InputError(ONE_OFF_REPEATED)

    @property
    def warnings(self) -> tuple[str, ...]:
        """What must be said with every result of these choices."""
        return self.treatment.warnings(repeats=self.repeats)

    def sequence(self) -> LoadSequence:
        """Return the points as they were given; `counting.treated` treats them."""
        return LoadSequence(np.array(self.points), self.flights, self.repeats)

    def as_data(self) -> dict[str, object]:
        """Return the sequence as plain data."""
        return {
            "kind": str(Kind.SEQUENCE),
            "points_mpa": list(self.points),
            "flights": self.flights,
            "repeats": self.repeats,
            **self.treatment.as_data(),
        }

    @classmethod
    def from_data(cls, data: Mapping[str, Any]) -> Self:
        """Return the sequence that plain data states."""
        content = Content(Kind.SEQUENCE, data)
        made = cls(
            content.numbers("points_mpa"),
            content.whole("flights"),
            content.flag("repeats"),
            Treatment.taken_from(content),
        )
        content.done()
        return made
