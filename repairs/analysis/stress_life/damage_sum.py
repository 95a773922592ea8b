r"""Damage of a flight's counted cycles, summed after Palmgren and Miner.

.. math:: D = \sum_i \frac{n_i}{N_i(S_{max,i}, R_i)},\qquad
          \text{flights} = D_f / D

With a curve in :math:`S_{max}(1-R)^q` life falls with R if the range is held, and rises
if the largest stress is; so cycles say which pair they were stated by.

Below the last term of a curve the handbook gives no finite life. In a spectrum that is
no endurance limit: aluminium has none, and small cycles do damage once larger ones have
begun a crack. What such cycles count is therefore chosen by name, never silently.

References
----------
.. [1] Miner, J. Appl. Mech. 12 (1945); Palmgren (1924): the linear sum.
.. [2] Haibach (1970): slope 2k - 1 below the knee, from memory. It only ever shortens a
   life here.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import StrEnum

import numpy as np

from repairs.analysis.errors import InputError, within
from repairs.analysis.stress_life.curves import Array, StressLifeFamily
from repairs.analysis.types import Grade, Reference, Sourced

MINER = Reference(
    "Palmgren-Miner linear sum, as in public university notes on aircraft fatigue",
    Grade.QUOTED,
)
CONTINUED = Reference(
    "rule of this program: log life on log stress goes on straight from a stated life, "
    "with slope A₂ or 2A₂ − 1 as Haibach has it, and never above the curve",
    Grade.RECORDED,
)
AT_ONE = Sourced(
    1.0,
    "-",
    "convention of the linear sum: failure at D = 1",
    Grade.QUOTED,
)
NOT_HALF = (
    "Failure at D = {value:g} is a convention, not a chance of one half: public texts "
    "give sums of 0.33 to 3 at failure, less than 1 above all with a ground-air-ground "
    "cycle; the order of the cycles does not count here."
)
SHAPES = (
    "Cycles of a flight need largest stress, ratio and count of one length, at least "
    "one, all finite; given are {shapes}."
)
NEGATIVE = "A count of cycles reads {count:g}; zero or more per flight is expected."
NO_JOIN = (
    "“{option}” needs the life from which the curve is continued: the longest life "
    "tested on it, with its source."
)
WITHOUT_CHOICE = "“{option}” takes no life to continue from; leave it out."


class Below(StrEnum):
    """What cycles at or below the last term of a curve count."""

    NONE = "none counts"
    SLOPE = "slope continued"
    DOUBLE = "slope 2A₂ − 1"


@dataclass(frozen=True, slots=True)
class BelowLastTerm:
    """The choice for cycles at or below the last term, stored with the result.

    Parameters
    ----------
    option
        As the curve says, or continued with slope A2 or 2 A2 - 1.
    join
        Life from which the curve is continued by a straight line of log life on log
        stress [cycles]; the longest life tested, with its source.
    """

    option: Below
    join: Sourced | None = None

    def __post_init__(self) -> None:
        if self.option is Below.NONE:
            if self.join is not None:
                raise InputError(WITHOUT_CHOICE.format(option=self.option))
            return
        if self.join is None:
            raise InputError(NO_JOIN.format(option=self.option))
        within("Life to continue from", self.join.value, 1e3, 1e9, "a life tested")

    @property
    def words(self) -> str:
        """The choice as the note says it."""
        if self.join is None:
            return f"below the last term {self.option}, as the curve says"
        return f"{self.option} from {self.join.value:,.0f} cycles ({self.join.source})"


@dataclass(frozen=True, slots=True)
class NetCycles:
    """The counted cycles of one flight on the net section, shape (n,) each.

    Parameters
    ----------
    maximum
        Largest stress of each cycle [MPa]; at or below zero it does no damage.
    ratio
        Stress ratio R of each cycle [-].
    count
        How often each comes per flight [-]; half cycles and means are allowed.
    """

    maximum: Array
    ratio: Array
    count: Array

    def __post_init__(self) -> None:
        parts = (self.maximum, self.ratio, self.count)
        alike = len({part.shape for part in parts}) == 1 and self.count.ndim == 1
        if not (alike and self.count.size and all(np.isfinite(p).all() for p in parts)):
            shapes = ", ".join(str(part.shape) for part in parts)
            raise InputError(SHAPES.format(shapes=shapes))
        if (least := float(self.count.min())) < 0:
            raise InputError(NEGATIVE.format(count=least))

    @classmethod
    def of_maximum(cls, maximum: object, ratio: object, count: object) -> NetCycles:
        """Return cycles stated by largest stress [MPa], R [-] and count [-]."""
        return cls(*(np.asarray(p, dtype=np.float64) for p in (maximum, ratio, count)))

    @classmethod
    def of_range(cls, span: object, ratio: object, count: object) -> NetCycles:
        """Return cycles stated by range Smax - Smin [MPa], R [-] and count [-]."""
        ratios = np.asarray(ratio, dtype=np.float64)
        within("Largest stress ratio R", float(ratios.max()), -10, 0.999, "a range")
        return cls.of_maximum(np.asarray(span, dtype=np.float64) / (1 - ratios),
                              ratios, count)  # fmt: skip

    @property
    def pulling(self) -> np.ndarray:
        """Which cycles reach tension; only they are on a curve."""
        return np.asarray(self.maximum > 0)

    def times(self, factor: float) -> NetCycles:
        """Return the same cycles with every stress times a factor [-]."""
        return NetCycles(self.maximum * factor, self.ratio, self.count)


@dataclass(frozen=True, slots=True)
class DamageSum:
    """Damage of one flight and what it is made of.

    Parameters
    ----------
    lives
        Cycles to failure of each cycle [cycles], inf where it counts nothing.
    damage
        Share of life each takes per flight [-].
    below
        What cycles at or below the last term counted.
    failure
        Sum at failure [-].
    uncounted
        Cycles per flight that are in tension and count nothing [-].
    """

    lives: Array
    damage: Array
    below: BelowLastTerm
    failure: Sourced
    uncounted: float

    @property
    def per_flight(self) -> float:
        """D of one flight [-]."""
        return float(self.damage.sum())

    @property
    def flights(self) -> float | None:
        """Mean life [flights]; None where nothing counts, which is not unlimited."""
        total = self.per_flight
        return self.failure.value / total if total > 0 else None

    @property
    def whole_flights(self) -> int | None:
        """Mean life in whole flights, rounded down."""
        return None if self.flights is None else math.floor(self.flights)

    def largest(self, rows: int) -> list[int]:
        """Return the rows that do most damage, most first, those that do any."""
        order = np.argsort(-self.damage, kind="stable")[:rows]
        return [int(row) for row in order if self.damage[row] > 0]


def lives_of(
    family: StressLifeFamily, kt: float, cycles: NetCycles, below: BelowLastTerm
) -> Array:
    """Return cycles to failure of each cycle, by the choice below the last term.

    Parameters
    ----------
    family
        Curves of one material and form.
    kt
        Stress-concentration factor on net stress [-].
    cycles
        Counted cycles on the net section [MPa].
    below
        What cycles at or below the last term count.

    Returns
    -------
    ndarray
        Lives [cycles]; inf counts nothing.

    Notes
    -----
    Range of the curves. A continued curve is never longer than the curve itself.
    Between two curves the smaller slope is taken, which is the shorter life.

    References
    ----------
    .. [1] See `CONTINUED`.
    """
    lives = np.full(cycles.count.shape, np.inf)
    pulling = cycles.pulling
    if not pulling.any():
        return lives
    maximum, ratio = cycles.maximum[pulling], cycles.ratio[pulling]
    found = family.lives(kt, maximum, ratio)
    if below.join is not None:
        slope = min(curve.a2 for curve in family.bracket(kt))
        if below.option is Below.DOUBLE:
            slope = 2 * slope - 1
        join = below.join.value
        start = family.maxima(kt, math.log10(join), ratio)
        line = join * (start / maximum) ** slope
        found = np.where(maximum < start, np.minimum(found, line), found)
    lives[pulling] = found
    return lives


def damage_sum(
    family: StressLifeFamily,
    kt: float,
    cycles: NetCycles,
    below: BelowLastTerm,
    failure: Sourced = AT_ONE,
) -> DamageSum:
    """Return the damage of one flight.

    Parameters
    ----------
    family
        Curves of one material and form.
    kt
        Stress-concentration factor on net stress [-].
    cycles
        Counted cycles of a flight on the net section [MPa].
    below
        What cycles at or below the last term count.
    failure
        D at failure [-]; 1 by convention, and see `NOT_HALF`.

    Returns
    -------
    DamageSum
        Damage by cycle and in sum, mean life in flights.

    Notes
    -----
    Range of the curves; 0 < D_f <= 1. Linear: the order of cycles does not count.

    References
    ----------
    .. [1] See `MINER`.
    """
    within("Sum at failure", failure.value, 0.01, 1, "a linear sum at failure")
    lives = lives_of(family, kt, cycles, below)
    uncounted = cycles.pulling & np.isinf(lives)
    return DamageSum(
        lives,
        cycles.count / lives,
        below,
        failure,
        float(cycles.count[uncounted].sum()),
    )
