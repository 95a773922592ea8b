r"""The standard load sequence of a transport wing's lower surface (TWIST).

One block is 4,000 flights of ten types, A the most severe. A flight starts from the
stress on the ground; its gusts lie about the mean stress in flight,

.. math:: S = S_{mf}(1 \pm level)

in ten levels. The ground-air-ground cycle is not added: it comes out of counting the
whole block.

The order is drawn, and the same seed draws the same order on every machine:

1. ``SeedSequence(seed)`` starts the 64-bit generator PCG64; its raw numbers are keys.
2. The 4,000 flights, listed A to J, take a key each and are put in rising order.
3. The gusts of all flights in that order, each flight's listed from level I to X, take
   a key each and are put in rising order within their flight.
4. Where both halves are drawn apart, the lower halves take keys of their own likewise.

Equal keys keep the order of the list.

References
----------
.. [1] de Jonge, Schuetz, Lowak and Schijve, A standardized load sequence for flight
   simulation tests on transport aircraft wing structures, NLR TR 73029 U, LBF FB-106,
   1973.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from enum import StrEnum
from typing import Any, Self

import numpy as np

from repairs.analysis.errors import InputError, within
from repairs.analysis.spectra.drawn import Keys, flown
from repairs.analysis.spectra.plain import Content, Kind
from repairs.analysis.spectra.sequence import (
    Floats,
    LoadSequence,
    Residue,
    Treatment,
    Whole,
)
from repairs.analysis.types import Grade, Reference, Sourced

WING_LOWER_SURFACE = "wing_lower_surface"
FULL = "full"
LEVELS = (1.60, 1.50, 1.30, 1.15, 0.995, 0.84, 0.685, 0.53, 0.375, 0.222)
"""Gust levels I to X over the mean stress in flight [-]."""
LEVEL_NAMES = ("I", "II", "III", "IV", "V", "VI", "VII", "VIII", "IX", "X")
FLIGHT_TYPES = {
    "A": (1, (1, 1, 1, 4, 8, 18, 64, 112, 391, 900)),
    "B": (1, (0, 1, 1, 2, 5, 11, 39, 76, 366, 899)),
    "C": (3, (0, 0, 1, 1, 2, 7, 22, 61, 277, 879)),
    "D": (9, (0, 0, 0, 1, 1, 2, 14, 44, 208, 680)),
    "E": (24, (0, 0, 0, 0, 1, 1, 6, 24, 165, 603)),
    "F": (60, (0, 0, 0, 0, 0, 1, 3, 19, 115, 512)),
    "G": (181, (0, 0, 0, 0, 0, 0, 1, 7, 70, 412)),
    "H": (420, (0, 0, 0, 0, 0, 0, 0, 1, 16, 233)),
    "I": (1090, (0, 0, 0, 0, 0, 0, 0, 0, 1, 69)),
    "J": (2211, (0, 0, 0, 0, 0, 0, 0, 0, 0, 25)),
}
"""Flights of each type in a block, and gust cycles of each level in one flight."""
FLIGHTS = 4000
TABLE = Reference(
    "NLR TR 73029 / LBF FB-106, 1973, flight types from memory; the flights sum to "
    "4,000 and all ten level totals to the published ones",
    Grade.MEMORY,
)
GROUND_RATIO = Sourced(
    -0.5,
    "-",
    "NLR TR 73029 / LBF FB-106, 1973, ground stress, from memory",
    Grade.MEMORY,
)
"""The standard's stress on the ground over the mean stress in flight."""

ELSEWHERE = (
    "The standard wing sequence is given for {read!r}; it holds for a transport's "
    "{place} only. Use a pressure cycle or a sequence of that location."
)
NOT_FULL = (
    "The standard wing sequence is asked for in its form {read!r}; only the full one "
    "can be made. Of the truncated form the total of level X is known (18,442 in a "
    "block) but not how it is spread over the flight types."
)
UNKNOWN_LEVEL = "No gust level is called {read!r}. Use one of: {known}."
LEVELS_CROSSED = (
    "Gusts above level {top} are cut to it and gusts below level {bottom} left out: "
    "nothing is left between them."
)
TRUNCATED = (
    "Gusts above level {level} are flown at it. Without its rare high loads a sequence "
    "loses their retardation: a growth life computed with retardation becomes shorter, "
    "one without becomes longer."
)
LEFT_OUT = (
    "Gusts below level {level} are left out ({cycles:,} of {of:,} cycles of a block): "
    "the life in flights comes out longer by what they would have done."
)


class Halves(StrEnum):
    """How the two halves of the gust cycles of a flight follow each other.

    Upper and lower halves always alternate, the upper one first. `SAME_LEVEL`: a lower
    half of equal level follows each upper one. `DRAWN_APART`: the lower halves have an
    order of their own. Which of them the standard means is from memory in either case.
    """

    SAME_LEVEL = "same_level"
    DRAWN_APART = "drawn_apart"


def _level(name: str | None) -> int | None:
    """Return the place of a gust level, 0 for I."""
    if name is not None and name not in LEVEL_NAMES:
        known = ", ".join(LEVEL_NAMES)
        raise InputError(UNKNOWN_LEVEL.format(read=name, known=known))
    return None if name is None else LEVEL_NAMES.index(name)


@dataclass(frozen=True, slots=True)
class WingSequence:
    """The standard wing sequence at a mean flight stress, with all choices.

    Parameters
    ----------
    mean_flight_stress
        Stress in undisturbed flight, S_mf [MPa].
    ground_ratio
        Stress on the ground over S_mf, below 0 on the lower surface [-].
    seed
        Start of the drawn order.
    halves
        How upper and lower halves follow each other.
    truncate_above
        Gusts of higher levels are flown at this one; None = none.
    omit_below
        Gusts of lower levels are left out; None = none.
    place
        Where it is used; refused everywhere but on a wing's lower surface.
    form
        The full form; the truncated one is refused.
    """

    mean_flight_stress: float
    ground_ratio: Sourced
    seed: int
    halves: Halves
    truncate_above: str | None
    omit_below: str | None
    place: str
    form: str = FULL

    def __post_init__(self) -> None:
        if self.place != WING_LOWER_SURFACE:
            raise InputError(
                ELSEWHERE.format(
                    read=self.place, place=WING_LOWER_SURFACE.replace("_", " ")
                )
            )
        if self.form != FULL:
            raise InputError(NOT_FULL.format(read=self.form))
        within(
            "Mean flight stress, MPa", self.mean_flight_stress, 1e-9, 1e4, "in tension"
        )
        within(
            "Ground stress over mean flight stress",
            self.ground_ratio.value,
            -2,
            0.999,
            "below the stress in flight",
        )
        Keys(self.seed)
        top, bottom = _level(self.truncate_above), _level(self.omit_below)
        if top is not None and bottom is not None and bottom < top:
            raise InputError(
                LEVELS_CROSSED.format(top=self.truncate_above, bottom=self.omit_below)
            )

    @property
    def treatment(self) -> Treatment:
        """A block that comes again; its gusts are cut and left out by level."""
        return Treatment(Residue.REPEATING)

    @property
    def warnings(self) -> tuple[str, ...]:
        """What must be said with every result of these choices."""
        told = []
        if self.truncate_above is not None:
            told.append(TRUNCATED.format(level=self.truncate_above))
        bottom = _level(self.omit_below)
        if bottom is not None:
            totals = level_totals()
            told.append(
                LEFT_OUT.format(
                    level=self.omit_below,
                    cycles=sum(totals[bottom + 1 :]),
                    of=sum(totals),
                )
            )
        return tuple(told)

    def levels(self) -> Floats:
        """Return the gust levels as they are flown, NaN where left out [-]."""
        flown = np.array(LEVELS)
        top, bottom = _level(self.truncate_above), _level(self.omit_below)
        if top is not None:
            flown[:top] = flown[top]
        if bottom is not None:
            flown[bottom + 1 :] = np.nan
        return flown

    def flight(self, flight_type: str) -> LoadSequence:
        """Return one flight of a type, its gusts listed from level I down."""
        return self._flown(np.array([list(FLIGHT_TYPES).index(flight_type)]), None)

    def sequence(self) -> LoadSequence:
        """Return the block of 4,000 flights in drawn order."""
        keys = Keys(self.seed)
        listed = np.repeat(
            np.arange(len(FLIGHT_TYPES)), [count for count, _ in FLIGHT_TYPES.values()]
        )
        return self._flown(listed[keys.order(np.zeros_like(listed))], keys)

    def _flown(self, types: Whole, keys: Keys | None) -> LoadSequence:
        """Return flights of these types, gusts in the order of the keys."""
        table = np.array([gusts for _, gusts in FLIGHT_TYPES.values()])
        levels = self.levels()
        table[:, np.isnan(levels)] = 0
        numbers = table[types]
        flight_of = np.repeat(np.arange(len(types)), numbers.sum(axis=1))
        listed = np.repeat(np.tile(levels, len(types)), numbers.ravel())
        upper = lower = listed
        if keys is not None:
            upper = lower = listed[keys.order(flight_of)]
            if self.halves is Halves.DRAWN_APART:
                lower = listed[keys.order(flight_of)]
        points, starts = flown(
            numbers.sum(axis=1), 1 + upper, 1 - lower, self.ground_ratio.value, 1.0
        )
        return LoadSequence(points * self.mean_flight_stress, len(types), True, starts)

    def as_data(self) -> dict[str, object]:
        """Return the sequence as plain data."""
        return {
            "kind": str(Kind.WING_SEQUENCE),
            "form": self.form,
            "place": self.place,
            "mean_flight_stress_mpa": self.mean_flight_stress,
            "ground_ratio": self.ground_ratio.value,
            "ground_ratio_source": self.ground_ratio.source,
            "ground_ratio_grade": str(self.ground_ratio.grade),
            "seed": self.seed,
            "halves": str(self.halves),
            "truncate_above": self.truncate_above,
            "omit_below": self.omit_below,
            "residue": str(self.treatment.residue),
        }

    @classmethod
    def from_data(cls, data: Mapping[str, Any]) -> Self:
        """Return the sequence that plain data states."""
        content = Content(Kind.WING_SEQUENCE, data)
        residue = content.word("residue", Residue)
        if residue is not Residue.REPEATING:
            raise content.refuse("residue", str(residue), str(Residue.REPEATING))
        made = cls(
            content.number("mean_flight_stress_mpa"),
            Sourced(
                content.number("ground_ratio"),
                "-",
                content.text("ground_ratio_source"),
                content.word("ground_ratio_grade", Grade),
            ),
            content.whole("seed"),
            content.word("halves", Halves),
            content.take("truncate_above"),
            content.take("omit_below"),
            content.text("place"),
            content.text("form"),
        )
        content.done()
        return made


def level_totals() -> tuple[int, ...]:
    """Return the gust cycles of each level in a block of 4,000 flights [-]."""
    columns = zip(*(gusts for _, gusts in FLIGHT_TYPES.values()), strict=True)
    flights = [count for count, _ in FLIGHT_TYPES.values()]
    return tuple(
        sum(n * gusts for n, gusts in zip(flights, column, strict=True))
        for column in columns
    )
