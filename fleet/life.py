"""Life of a serial-numbered part: what it has accumulated and where its life ends.

Pure, whole numbers and exact fractions. A published safe-life limit already contains
its scatter factor; nothing here adds or removes one.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction
from math import ceil, floor

from fleet.due import CarryOver


@dataclass(frozen=True)
class ConfigurationLimit:
    """A life limit on one counter in one configuration, and how its source says that
    life flown elsewhere carries over."""

    value: int
    carry_over: CarryOver = CarryOver.MOST_RESTRICTIVE


@dataclass(frozen=True)
class Flown:
    """Life on one counter flown in one configuration; `limit` None is not recorded."""

    amount: int
    limit: ConfigurationLimit | None


@dataclass(frozen=True)
class Life:
    """Status on one counter: where life ends, what is used, what is left."""

    total: int
    ends_at: int
    consumed_percent: int

    @property
    def remaining(self) -> int:
        return self.ends_at - self.total


class NoLifeLimit(ValueError):
    """Life was flown in a configuration that has no recorded limit."""


def accumulated(earlier: int, stints: Iterable[tuple[int, int]]) -> int:
    """Life brought forward plus, for each stint, the aircraft's counter at removal (or
    now) less that at installation; never the aircraft's own total."""
    return earlier + sum(off - on for on, off in stints)


def life_end(flown: Sequence[Flown], current: ConfigurationLimit) -> int:
    """The part's own counter at which its life ends in the current configuration.

    `flown` is what it flew before the current stint. Most restrictive: the smallest of
    all limits met. Linear (Palmgren 1924, Miner 1945), only if every source permits it:
    n + floor((1 - sum n_i/L_i) L_j).
    """
    before = sum(part.amount for part in flown)
    limits = [_limit(part) for part in flown if part.amount] + [current]
    if all(limit.carry_over is CarryOver.LINEAR for limit in limits):
        return before + floor((1 - consumed(flown)) * current.value)
    return min(limit.value for limit in limits)


def consumed(flown: Iterable[Flown]) -> Fraction:
    """Share of life used, the sum of n_i/L_i, exact."""
    return sum(
        (Fraction(part.amount, _limit(part).value) for part in flown if part.amount),
        Fraction(0),
    )


def life_status(flown: Sequence[Flown], current: ConfigurationLimit, now: int) -> Life:
    """Where life ends, with `now` flown in the current stint. Consumed is rounded up:
    99.2 % is shown as 100 %; remaining is rounded down."""
    total = sum(part.amount for part in flown) + now
    ends_at = life_end(flown, current)
    linear = [*flown, Flown(now, current)]
    if all(x.limit and x.limit.carry_over is CarryOver.LINEAR for x in linear):
        share = consumed(linear)
    else:
        share = Fraction(total, ends_at) if ends_at > 0 else Fraction(1)
    return Life(total, ends_at, ceil(100 * share))


def _limit(part: Flown) -> ConfigurationLimit:
    if part.limit is None:
        raise NoLifeLimit(
            f"{part.amount:,} were flown in a configuration without a recorded life "
            "limit; key that limit from its document"
        )
    return part.limit
