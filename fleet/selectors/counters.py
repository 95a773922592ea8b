"""What each aircraft has flown: counters, data-current-to date and daily rates.

Totals are summed from usage every time; a handful of queries serve any number of
aircraft. No row is unknown, not zero: data are current to the last day before the
first gap, while every flight that is recorded counts, also beyond a gap.
"""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field
from datetime import date, datetime, timedelta
from fractions import Fraction
from typing import Any

from django.db.models import (
    Case,
    Count,
    DateField,
    F,
    Max,
    Min,
    Q,
    QuerySet,
    Sum,
    Value,
    When,
)
from django.db.models.functions import Coalesce

from fleet.due import COUNTED, Counter, Counters, Standing
from fleet.models import Aircraft, AircraftSpan, AircraftState, UsageRecord
from fleet.units import hours_write

RATE_DAYS = 90
HIGH_RATE_DAYS = (30, 365)
WINDOWS = (RATE_DAYS, *HIGH_RATE_DAYS)
FLYING = (AircraftState.IN_SERVICE, AircraftState.IN_MAINTENANCE)

HOURS_MISSING = (
    "at least {count} {flights} without hours; hours reconstructed with {longest} FH "
    "each, the longest flight or day recorded in twelve months"
)
HOURS_UNKNOWN = (
    "at least {count} {flights} without hours and no timed flight in twelve months; "
    "record the hours on the usage page"
)


@dataclass(frozen=True)
class AircraftStanding:
    """Counters of one aircraft as of a date."""

    aircraft: Aircraft
    as_of: date
    standing: Standing
    state: str
    flights_without_hours: int = 0
    longest_minutes: int | None = None
    rates_by_window: Mapping[int, Mapping[Counter, Fraction]] = field(
        default_factory=dict
    )

    @property
    def current_to(self) -> date | None:
        return self.standing.current_to

    @property
    def counters(self) -> Counters:
        return self.standing.at

    @property
    def idle(self) -> bool:
        """Parked, stored or withdrawn: nothing is counted, the calendar runs on."""
        return self.state not in FLYING

    @property
    def hours_note(self) -> str:
        """Empty when the hours of every flight are known."""
        count = self.flights_without_hours
        if not count:
            return ""
        flights = "flight" if count == 1 else "flights"
        if self.longest_minutes is None:
            return HOURS_UNKNOWN.format(count=count, flights=flights)
        longest = hours_write(self.longest_minutes)
        return HOURS_MISSING.format(count=count, flights=flights, longest=longest)


def usage_current(*, known_at: datetime | None = None) -> QuerySet[UsageRecord]:
    """Usage rows that no later row corrects, as known at an instant."""
    rows = UsageRecord.objects.all()
    if known_at is not None:
        rows = rows.filter(entered_at__lte=known_at)
    corrected = rows.filter(replaces__isnull=False).values("replaces")
    return rows.exclude(pk__in=corrected)


def aircraft_standing(
    aircraft: Aircraft, *, as_of: date, known_at: datetime | None = None
) -> AircraftStanding:
    return aircraft_standings([aircraft], as_of=as_of, known_at=known_at)[aircraft.pk]


def aircraft_standings(
    aircraft: Iterable[Aircraft], *, as_of: date, known_at: datetime | None = None
) -> dict[int, AircraftStanding]:
    """Counters of every aircraft given, by key; at most four queries."""
    fleet = {item.pk: item for item in aircraft}
    usage = usage_current(known_at=known_at).filter(
        aircraft_id__in=fleet, day__lte=as_of
    )
    totals = _totals(usage)
    current_to = _current_to(fleet, usage, totals)
    spans = _spans(fleet, as_of, known_at)
    sums = _window_sums(usage, current_to)
    return {
        pk: _standing(
            item, as_of, totals.get(pk, {}), current_to[pk], spans[pk], sums.get(pk, {})
        )
        for pk, item in fleet.items()
    }


def _totals(usage: QuerySet[UsageRecord]) -> dict[int, dict[str, Any]]:
    rows = (
        usage.order_by()
        .values("aircraft_id")
        .annotate(
            **{f"sum_{c.value}": Coalesce(Sum(c.value), 0) for c in COUNTED},
            untracked=Count("pk", filter=Q(pressurisations__isnull=True)),
            without_hours=Coalesce(Sum("cycles_without_minutes"), 0),
            first=Min("day"),
            last=Max("day"),
            days=Count("day", distinct=True),
        )
    )
    return {row["aircraft_id"]: dict(row) for row in rows}


def _current_to(
    fleet: Mapping[int, Aircraft],
    usage: QuerySet[UsageRecord],
    totals: Mapping[int, Mapping[str, Any]],
) -> dict[int, date]:
    """Last day before the first gap; one query more when there is a gap at all."""
    result: dict[int, date] = {}
    gapped: list[int] = []
    for pk, item in fleet.items():
        row = totals.get(pk)
        if row is None or row["first"] > item.data_from:
            result[pk] = item.data_from - timedelta(days=1)
        elif row["days"] == (row["last"] - row["first"]).days + 1:
            result[pk] = row["last"]
        else:
            gapped.append(pk)
    if gapped:
        days: dict[int, set[date]] = defaultdict(set)
        pairs = usage.filter(aircraft_id__in=gapped).order_by()
        for pk, day in pairs.values_list("aircraft_id", "day").distinct():
            days[pk].add(day)
        for pk in gapped:
            day = min(days[pk])
            while day + timedelta(days=1) in days[pk]:
                day += timedelta(days=1)
            result[pk] = day
    return result


def _spans(
    fleet: Iterable[int], as_of: date, known_at: datetime | None
) -> dict[int, list[AircraftSpan]]:
    rows = AircraftSpan.objects.filter(aircraft_id__in=list(fleet), from_on__lte=as_of)
    if known_at is not None:
        rows = rows.filter(entered_at__lte=known_at)
    spans: dict[int, list[AircraftSpan]] = defaultdict(list)
    for span in rows:
        spans[span.aircraft_id].append(span)
    return spans


def _window_sums(
    usage: QuerySet[UsageRecord], current_to: Mapping[int, date]
) -> dict[int, dict[str, Any]]:
    """Sums over the last 30, 90 and 365 days up to each aircraft's own date."""
    if not current_to:
        return {}
    by_day: dict[date, list[int]] = defaultdict(list)
    for pk, day in current_to.items():
        by_day[day].append(pk)
    columns: dict[str, Any] = {"longest": Max("minutes")}
    starts: dict[str, Any] = {}
    for window in WINDOWS:
        starts[f"from_{window}"] = Case(
            *(
                When(aircraft_id__in=pks, then=Value(day - timedelta(days=window)))
                for day, pks in by_day.items()
            ),
            output_field=DateField(),
        )
        inside = Q(day__gt=F(f"from_{window}"))
        for counter in COUNTED:
            columns[f"{counter.value}_{window}"] = Sum(counter.value, filter=inside)
    earliest = min(by_day) - timedelta(days=max(WINDOWS))
    rows = (
        usage.filter(day__gt=earliest)
        .annotate(**starts)
        .filter(day__gt=F(f"from_{max(WINDOWS)}"))
        .order_by()
        .values("aircraft_id")
        .annotate(**columns)
    )
    return {row["aircraft_id"]: dict(row) for row in rows}


def _standing(
    aircraft: Aircraft,
    as_of: date,
    total: Mapping[str, Any],
    current_to: date,
    spans: list[AircraftSpan],
    sums: Mapping[str, Any],
) -> AircraftStanding:
    without = total.get("without_hours", 0)
    longest: int | None = sums.get("longest")
    state = _state_on(spans, as_of)
    rates: dict[int, dict[Counter, Fraction]] = {}
    if state in FLYING:
        for window in WINDOWS:
            days = _service_days(aircraft, spans, current_to, window)
            rates[window] = _rates(sums, window, days)
    high = {
        counter: max(
            rates[window][counter]
            for window in HIGH_RATE_DAYS
            if counter in rates[window]
        )
        for counter in COUNTED
        if any(counter in rates.get(window, {}) for window in HIGH_RATE_DAYS)
    }
    at = _counters(aircraft, total, without, longest)
    return AircraftStanding(
        aircraft,
        as_of,
        Standing(
            at, current_to, rates.get(RATE_DAYS, {}), high, without * (longest or 0)
        ),
        state,
        without,
        longest,
        rates,
    )


def _counters(
    aircraft: Aircraft, total: Mapping[str, Any], without: int, longest: int | None
) -> Counters:
    def flown(counter: Counter) -> int:
        return int(total.get(f"sum_{counter.value}", 0))

    known: int = aircraft.opening_minutes + flown(Counter.MINUTES)
    minutes: int | None = known
    if without:
        minutes = None if longest is None else known + without * longest
    pressurisations = None
    if aircraft.opening_pressurisations is not None and not total.get("untracked"):
        pressurisations = aircraft.opening_pressurisations + flown(
            Counter.PRESSURISATIONS
        )
    return Counters(
        minutes,
        aircraft.opening_cycles + flown(Counter.CYCLES),
        aircraft.opening_landings + flown(Counter.LANDINGS),
        pressurisations,
    )


def _state_on(spans: list[AircraftSpan], day: date) -> str:
    for span in spans:
        if span.from_on <= day and (span.to_on is None or day <= span.to_on):
            return str(span.state)
    return AircraftState.IN_SERVICE.value


def _service_days(
    aircraft: Aircraft, spans: list[AircraftSpan], last: date, window: int
) -> int:
    """Days of the window in which the aircraft was here and in service."""
    start = max(last - timedelta(days=window - 1), aircraft.data_from)
    idle: set[date] = set()
    for span in spans:
        if span.state == AircraftState.IN_SERVICE:
            continue
        first, final = max(span.from_on, start), min(span.to_on or last, last)
        idle.update(first + timedelta(days=n) for n in range((final - first).days + 1))
    return max((last - start).days + 1 - len(idle), 0)


def _rates(sums: Mapping[str, Any], window: int, days: int) -> dict[Counter, Fraction]:
    if not days:
        return {}
    flown = {counter: sums.get(f"{counter.value}_{window}") for counter in COUNTED}
    return {
        counter: Fraction(int(amount), days)
        for counter, amount in flown.items()
        if amount
    }
