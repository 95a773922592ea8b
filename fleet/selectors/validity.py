"""What is left to an aircraft's limit of validity."""

from __future__ import annotations

from dataclasses import dataclass

from fleet.models import Aircraft
from fleet.selectors.counters import AircraftStanding


@dataclass(frozen=True)
class Validity:
    """The limit of validity and what is left to it; None is not recorded."""

    cycles: int | None
    minutes: int | None
    cycles_left: int | None
    minutes_left: int | None
    source: str

    @property
    def recorded(self) -> bool:
        return self.cycles is not None or self.minutes is not None

    @property
    def passed(self) -> bool:
        """Nothing is left on one counter; a counter that is unknown is not passed."""
        return any(
            left is not None and left <= 0
            for left in (self.cycles_left, self.minutes_left)
        )


def validity_of(standing: AircraftStanding) -> Validity:
    """The aircraft's own limit where it has one, else its variant's; no query."""
    cycles, minutes, source = validity_limits(standing.aircraft)
    return Validity(
        cycles=cycles,
        minutes=minutes,
        cycles_left=_left(cycles, standing.counters.cycles),
        minutes_left=_left(minutes, standing.counters.minutes),
        source=source,
    )


def validity_limits(aircraft: Aircraft) -> tuple[int | None, int | None, str]:
    """Cycles, minutes and source of the limit of validity that holds; no query."""
    own = aircraft.validity_cycles is not None or aircraft.validity_minutes is not None
    holder = aircraft if own else aircraft.variant
    source = aircraft.validity_source if own else aircraft.variant.source
    return holder.validity_cycles, holder.validity_minutes, source


def _left(limit: int | None, now: int | None) -> int | None:
    return None if limit is None or now is None else limit - now
