"""Aircraft as one reader may see them: its own whole, a former one as it left."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass

from django.db.models import Q

from fleet.models import Aircraft, AircraftPeriod, User
from fleet.scoping import ScopedQuerySet
from fleet.selectors.counters import AircraftStanding, aircraft_standings
from fleet.selectors.validity import Validity, validity_of


@dataclass(frozen=True)
class Seen:
    """One aircraft with its counters on the last day its reader may know of."""

    standing: AircraftStanding
    validity: Validity

    @property
    def aircraft(self) -> Aircraft:
        return self.standing.aircraft

    @property
    def days_behind(self) -> int:
        """Days without data before the date of the page; none is expected after
        the aircraft left."""
        current_to = self.standing.current_to
        if current_to is None or self.aircraft.data_to is not None:
            return 0
        return max((self.standing.as_of - current_to).days - 1, 0)


def aircraft_visible(user: User, *, text: str = "") -> ScopedQuerySet:
    """Aircraft of the user's operators, now or once, by mark, serial or variant."""
    rows = Aircraft.objects.visible_to(user).select_related(
        "operator", "variant__aircraft_type"
    )
    if text:
        rows = rows.filter(
            Q(registration__icontains=text)
            | Q(serial_number__icontains=text)
            | Q(variant__name__icontains=text)
        )
    return rows.distinct()


def aircraft_own(user: User) -> ScopedQuerySet:
    """Aircraft that the user's operators have today; others' usage is theirs."""
    rows = aircraft_visible(user)
    if user.sees_all_operators:
        return rows
    return rows.filter(operator__in=user.operator_ids())


def is_own(user: User, aircraft: Aircraft) -> bool:
    """Whether one of the user's operators has the aircraft today."""
    return user.sees_all_operators or aircraft.operator_id in user.operator_ids()


def periods_seen(user: User, aircraft: Aircraft) -> list[AircraftPeriod]:
    """Every period of the reader's own aircraft; of a former one only its own."""
    rows = aircraft.periods.select_related("operator", "camo", "owner")
    if not is_own(user, aircraft):
        rows = rows.filter(operator__in=user.operator_ids())
    return list(rows)


def seen_until(periods: Sequence[AircraftPeriod], as_of: dt.date) -> dt.date:
    """The last day a reader of these periods may know of."""
    ends = [period.to_on or as_of for period in periods]
    return min(as_of, max(ends, default=as_of))


def fleet_seen(aircraft: Sequence[Aircraft], *, as_of: dt.date) -> list[Seen]:
    """Each aircraft with its counters as of the day; a constant number of queries."""
    standings = aircraft_standings(aircraft, as_of=as_of)
    return [
        Seen(standings[item.pk], validity_of(standings[item.pk])) for item in aircraft
    ]
