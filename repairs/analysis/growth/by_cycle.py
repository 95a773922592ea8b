r"""Growth through a sequence, cycle by cycle, with or without retardation.

Between refreshes K over stress of each tip is linear in both lengths, with value and
slopes of the published factors at the crack as it is; they are refreshed whenever a
length has grown by `REFRESH`. So each factor keeps its range, and no table of it is
made.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass, field
from enum import StrEnum

import numpy as np

from repairs.analysis.errors import AnalysisError, OutOfRangeError, within
from repairs.analysis.growth import loop
from repairs.analysis.growth.blocks import CycleBlock, driven_ranges
from repairs.analysis.growth.closure import ElberLaw, NewmanLaw
from repairs.analysis.growth.laws import Floats, FormanLaw, GrowthLaw, WalkerLaw
from repairs.analysis.growth.retardation import Retardation, Willenborg
from repairs.analysis.growth.two_directions import (
    NO_FLAW,
    BreakThrough,
    FlawPath,
    History,
)

REFRESH = 0.01
"""Growth of a length after which factors are taken anew, and over which their slopes
are taken: 1e-4 on the rate. A shorter slope would see the small jump that factors may
have at a/c = 1."""
PAUSE = 100_000
"""Cycles, in whole blocks, after which it is seen whether the crack stands still."""
NO_RATIO = (
    "The generalised Willenborg model works through the stress ratio: it needs a law "
    "of Walker or Forman."
)

NOT_FOLLOWED = (
    "A law of kind {law} is not followed cycle by cycle. Use Walker's, Forman's or a "
    "closure law."
)
FOLLOWED = (WalkerLaw, FormanLaw, ElberLaw, NewmanLaw)

Intensities = Callable[[float, float], tuple[float, ...]]
"""(length, depth) [mm] -> K over S of each tip [sqrt(mm)]."""


class End(StrEnum):
    """How growth through a sequence ends."""

    REACHED = "the crack reaches the length asked for"
    FRACTURE = "K reaches the toughness"
    NOT_REACHED = "the length is not reached in the flights followed"
    ARRESTED = "the crack does not grow under this sequence"


ENDS = {loop.AT_END: End.REACHED, loop.FRACTURE: End.FRACTURE}


@dataclass(frozen=True, slots=True)
class Following:
    """How far a crack is followed, and by which model of retardation, if any.

    Parameters
    ----------
    flights
        Flights after which it is followed no further, rounded up to whole blocks.
    toughness
        K at which it fractures [MPa*sqrt(mm)]; None = the path's end alone ends it.
    retardation
        None = none; a model is computed beside the life without it.
    """

    flights: int
    toughness: float | None = None
    retardation: Retardation | None = None


@dataclass(frozen=True, slots=True)
class SequenceGrowth:
    """Growth through a sequence: whole cycles, whole flights, how it ends."""

    cycles: int
    flights: int
    end: End
    length: float
    break_through: BreakThrough | None
    history: History = field(compare=False, repr=False)


@dataclass(frozen=True, slots=True)
class SequenceLife:
    """The life without retardation, and beside it the retarded one if asked for."""

    unretarded: SequenceGrowth
    retarded: SequenceGrowth | None
    cautions: tuple[str, ...]
    counting: str


def life_by_cycle(
    law: GrowthLaw,
    block: CycleBlock,
    path: FlawPath,
    start: tuple[float, float],
    following: Following,
) -> SequenceLife:
    """Grow a crack through a repeated block, cycle by cycle.

    Parameters
    ----------
    law
        Growth law; a threshold is refused.
    block
        Cycles in the order flown [MPa].
    path
        Factors before and after break-through, thickness, and where growth ends [mm].
    start
        Depth a and length c [mm]; a depth of the thickness is a through crack.
    following
        How far, and whether retarded too.

    Returns
    -------
    SequenceLife
        Unretarded growth, and retarded growth beside it.

    Notes
    -----
    Range of law and factors. See `two_directions.BREAK_THROUGH_RULE`; an overload's
    zone along the surface is remembered through it.

    References
    ----------
    .. [1] USAF Damage Tolerant Design Handbook, section 5.
    """
    model = following.retardation
    plain = _Run(law, block, path, following, None).grown(start)
    if model is None:
        return SequenceLife(plain, None, (), block.counting)
    retarded = _Run(law, block, path, following, model).grown(start)
    return SequenceLife(plain, retarded, model.cautions, block.counting)


class _Run:
    """One run of the loop: its arrays, and the crack as it stands."""

    def __init__(
        self,
        law: GrowthLaw,
        block: CycleBlock,
        path: FlawPath,
        following: Following,
        model: Retardation | None,
        march: loop.March | None = None,
    ) -> None:
        within("Flights to follow", following.flights, 1, 1e9, "a whole number")
        self.block, self.path = block, path
        self.march = march or loop.compiled_march()
        self.driven = driven_ranges(law, block.maximum, block.ratio)
        self.maximum = np.ascontiguousarray(block.maximum, dtype=np.float64)
        self.span = self.maximum * (1 - block.ratio)
        self.constants = _constants(law, path, following)
        self.model = model.fill(self.constants) if model else loop.NONE
        if isinstance(model, Willenborg) and not isinstance(law, WalkerLaw | FormanLaw):
            raise OutOfRangeError(NO_RATIO)
        self.place = np.zeros(2, dtype=np.int64)
        self.points: list[tuple[int, float, float]] = []
        self.state = np.zeros(loop.FIRST_MEMORY + 2 * loop.MEMORY)
        blocks = math.ceil(following.flights / block.flights)
        self.most = blocks * block.cycles
        self.pause = block.cycles * math.ceil(PAUSE / block.cycles)

    def grown(self, start: tuple[float, float]) -> SequenceGrowth:
        """Run until the crack ends."""
        depth, length = start
        within("Depth over thickness", depth / self.path.thickness, 1e-9, 1, "a flaw")
        within("Crack length, mm", length, 1e-9, 1e6, "a crack")
        if self.path.part is None and depth < self.path.thickness:
            raise AnalysisError(NO_FLAW)
        self.state[loop.DEPTH], self.state[loop.LENGTH] = start
        self._keep()
        through: BreakThrough | None = None
        reason = loop.THROUGH
        if depth < self.path.thickness:
            reason = self._stage(self.path.part_intensities, 2)
            if reason == loop.THROUGH:
                through = self._broken_through()
        if reason == loop.THROUGH:
            reason = self._stage(self.path.through_intensity, 1)
        cycles, length, _ = self.points[-1]
        return SequenceGrowth(
            cycles,
            self.block.whole_flights(cycles),
            ENDS.get(reason) or self._unfinished(),
            length,
            through,
            History(*np.array(self.points, dtype=float).T),
        )

    def _unfinished(self) -> End:
        return End.NOT_REACHED if self.place[1] >= self.most else End.ARRESTED

    def _keep(self) -> None:
        """Keep the crack as it stands for the history."""
        length, depth = self.state[loop.LENGTH], self.state[loop.DEPTH]
        self.points.append((int(self.place[1]), float(length), float(depth)))

    def _broken_through(self) -> BreakThrough:
        cycles, length, _ = self.points[-1]
        self.state[loop.DEPTH] = self.path.thickness
        return BreakThrough(cycles, length, *self.path.jump(length))

    def _stage(self, intensities: Intensities, tips: int) -> int:
        """Run one stage and return why it ended.

        The loop pauses after some blocks, to see a crack that stands still.
        """
        if self.state[loop.LENGTH] >= self.path.end:
            return loop.AT_END
        reason, before = loop.OUTGROWN, self.state.copy()
        local = np.zeros(loop.FIRST_TIP + 3 * tips)
        while reason in (loop.OUTGROWN, loop.PAUSED):
            if reason == loop.OUTGROWN:
                _renew(local, intensities, self.state)
            elif self.place[1] >= self.most or np.array_equal(before, self.state):
                break
            else:
                before = self.state.copy()
            reason = self.march(
                self.maximum,
                self.span,
                self.driven,
                self.place,
                self.state,
                local,
                self.constants,
                self.model,
                tips,
                min(self.most, int(self.place[1]) + self.pause),
            )
            self._keep()
        return reason


def _constants(law: GrowthLaw, path: FlawPath, following: Following) -> Floats:
    """Return what the loop needs of law, path and end."""
    if not isinstance(law, FOLLOWED):
        raise AnalysisError(NOT_FOLLOWED.format(law=type(law).__name__))
    constants = np.zeros(loop.LAST + 1)
    constants[loop.C] = law.coefficient
    constants[loop.M] = law.exponent
    constants[loop.GAMMA] = law.gamma if isinstance(law, WalkerLaw) else 1.0
    if isinstance(law, FormanLaw):
        constants[loop.FORMAN_END] = law.toughness
    constants[loop.TOUGHNESS] = following.toughness or math.inf
    constants[loop.THICKNESS] = path.thickness
    constants[loop.LAST] = path.end
    return constants


def _renew(local: Floats, intensities: Intensities, state: Floats) -> None:
    """Take the factors anew at the crack as it is."""
    length, depth = float(state[loop.LENGTH]), float(state[loop.DEPTH])
    here = intensities(length, depth)
    along, inward = REFRESH * length, REFRESH * depth
    by_length = _beside(intensities, (length + along, depth), (length - along, depth))
    by_depth = _beside(intensities, (length, depth + inward), (length, depth - inward))
    local[: loop.FIRST_TIP] = (
        length,
        depth,
        length + along,
        depth + inward,
    )
    for tip, value in enumerate(here):
        at = loop.FIRST_TIP + 3 * tip
        local[at] = value
        local[at + 1] = by_length[1] * (by_length[0][tip] - value) / along
        local[at + 2] = by_depth[1] * (by_depth[0][tip] - value) / inward


def _beside(
    intensities: Intensities, ahead: tuple[float, float], behind: tuple[float, float]
) -> tuple[tuple[float, ...], int]:
    """Return intensities ahead of a crack and 1, or behind it and -1, inside range."""
    try:
        return intensities(*ahead), 1
    except OutOfRangeError:
        return intensities(*behind), -1
