"""Whose rules ask for an occurrence report, when they want it, and what for.

Clocks are policy rows of the regime: `report_hours` counts from detection;
`report_period_hours` from the end of the local 24-hour period that begins at
`report_period_begins`; `report_..._days` and `_months` are follow-ups. One row
`report_holiday` in force from a day says that this day is a holiday.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterable, Iterator
from dataclasses import dataclass, field
from zoneinfo import ZoneInfo, ZoneInfoNotFoundError

from django.db.models import Q

from fleet.models import Aircraft, Operator, Policy
from repairs.models import Event, Finding
from repairs.report_clocks import ReportClock, ReportDue, follow_up_on, report_due

PREFIX = "report_"
HOURS, PERIOD_HOURS = "report_hours", "report_period_hours"
PERIOD_BEGINS, HOLIDAY = "report_period_begins", "report_holiday"
CHARACTERS = "report_text_characters"
PRELIMINARY, FINAL = "report_preliminary_days", "report_final_months"
LEVEL_3 = "report_level_3_days"
FOLLOW_UP_WORDS = {
    PRELIMINARY: "preliminary analysis",
    FINAL: "final analysis",
    LEVEL_3: "level 3 corrosion: report and fleet inspection",
}
NO_CLOCK = "no report clock is recorded for {regime}: counts as due now"
NO_BEGIN = "no {key} is recorded for {regime}: counted from detection"
NO_ZONE = "the time zone “{name}” of {operator} is not known: UTC is taken"

Subject = Finding | Event


@dataclass(frozen=True)
class Asked:
    """What one regime wants on a day: the clock's row, the deadline, and why then."""

    regime: str
    policy: Policy | None
    due_at: dt.datetime | None
    because: tuple[str, ...] = ()

    @property
    def rule(self) -> str:
        return self.policy.source if self.policy else ""


@dataclass(frozen=True)
class Rules:
    """The report rows of one regime that are in force on a day."""

    regime: str
    rows: dict[str, Policy] = field(default_factory=dict)

    def count(self, key: str) -> int | None:
        row = self.rows.get(key)
        return row.value if row else None


def seen_on(subject: Subject) -> dt.date:
    return subject.found_on if isinstance(subject, Finding) else subject.happened_on


def day_begins(operator: Operator, day: dt.date) -> dt.datetime:
    """When only the day is known, its first moment is taken: never later than true."""
    zone, _ = zone_of(operator)
    return dt.datetime.combine(day, dt.time(), tzinfo=zone).astimezone(dt.UTC)


def zone_of(operator: Operator) -> tuple[ZoneInfo, str]:
    """The operator's time zone; an unknown name is UTC, and said."""
    try:
        return ZoneInfo(operator.time_zone), ""
    except (ZoneInfoNotFoundError, ValueError):
        return ZoneInfo("UTC"), NO_ZONE.format(
            name=operator.time_zone, operator=operator
        )


def regimes_on(aircraft: Aircraft, day: dt.date) -> list[str]:
    """The operator's regime, and that of the aircraft's period on the day."""
    begun = [row for row in aircraft.periods.all() if row.from_on <= day]
    period = max(begun, key=lambda row: row.from_on, default=None)
    both = [aircraft.operator.regime, period.regime if period else ""]
    return [one for one in dict.fromkeys(both) if one]


def regimes_recorded(operator: Operator) -> list[str]:
    """Every regime with a report clock on record, for a report outside one's own."""
    rows = Policy.objects.filter(
        Q(operator=operator) | Q(operator__isnull=True),
        key__in=(HOURS, PERIOD_HOURS),
    )
    named = set(rows.exclude(regime="").values_list("regime", flat=True))
    return sorted(named | {operator.regime})


def regimes_open(subject: Subject) -> list[str]:
    """Regimes the question may still be asked under; those that apply come first."""
    applying = regimes_on(subject.aircraft, seen_on(subject))
    asked = set(subject.reports.values_list("regime", flat=True))
    every = [*applying, *regimes_recorded(subject.aircraft.operator)]
    return [one for one in dict.fromkeys(every) if one not in asked]


def rules_of(operator: Operator, regime: str, day: dt.date) -> Rules:
    """The regime's report rows that count for the operator on the day; one query."""
    rows = Policy.objects.filter(
        Q(operator=operator) | Q(operator__isnull=True), key__startswith=PREFIX
    )
    return rules_from(rows, operator, regime, day)


def rules_from(
    rows: Iterable[Policy], operator: Operator, regime: str, day: dt.date
) -> Rules:
    """The same from rows at hand. The operator's own goes before one that is offered;
    its own without a regime is of its own regime."""
    own = ("", regime) if regime == operator.regime else (regime,)
    counting = [
        row
        for row in rows
        if row.key != HOLIDAY
        and row.effective_from <= day
        and (row.effective_to is None or day <= row.effective_to)
        and (
            row.regime in own
            if row.operator_id == operator.pk
            else row.operator_id is None and row.regime in ("", regime)
        )
    ]
    counting.sort(key=lambda row: (row.operator_id is not None, row.effective_from))
    return Rules(regime, {row.key: row for row in counting})


def holidays_of(operator: Operator, regime: str) -> set[dt.date]:
    rows = Policy.objects.filter(
        Q(operator=operator) | Q(operator__isnull=True, regime__in=("", regime)),
        key=HOLIDAY,
    )
    return set(rows.values_list("effective_from", flat=True))


def asked_by(operator: Operator, regime: str, detected_at: dt.datetime) -> Asked:
    """The regime's deadline for something detected then; without a clock, none."""
    zone, note = zone_of(operator)
    rules = rules_of(operator, regime, detected_at.astimezone(zone).date())
    holidays = holidays_of(operator, regime) if PERIOD_HOURS in rules.rows else ()
    answers: list[tuple[Policy, ReportDue, str]] = [
        (row, report_due(clock, detected_at, zone=zone, holidays=holidays), said)
        for row, clock, said in _clocks(rules)
    ]
    if not answers:
        return Asked(regime, None, None, (NO_CLOCK.format(regime=regime),))
    row, due, said = min(answers, key=lambda answer: answer[1].at)
    return Asked(regime, row, due.at, tuple(filter(None, (*due.because, said, note))))


def _clocks(rules: Rules) -> Iterator[tuple[Policy, ReportClock, str]]:
    """The clocks on record. A period whose beginning is not on record is not waited
    for: its hours count from detection, and that is said."""
    if plain := rules.rows.get(HOURS):
        yield plain, ReportClock(plain.value), ""
    period = rules.rows.get(PERIOD_HOURS)
    if period is None:
        return
    begins = rules.count(PERIOD_BEGINS)
    if begins is None or not 0 <= begins < 24:
        said = NO_BEGIN.format(key=PERIOD_BEGINS, regime=rules.regime)
        yield period, ReportClock(period.value), said
    else:
        yield period, ReportClock(period.value, dt.time(begins)), ""


@dataclass(frozen=True)
class FollowUp:
    """A later answer the regime wants: by when, and the row that says so."""

    policy: Policy
    words: str
    on: dt.date


def follow_ups(
    rules: Rules, detected_on: dt.date, *, level_3: bool = False
) -> list[FollowUp]:
    """Follow-ups of a report, the first due first."""
    keys = (PRELIMINARY, FINAL, *((LEVEL_3,) if level_3 else ()))
    rows = [
        (rules.rows[key], FOLLOW_UP_WORDS[key]) for key in keys if key in rules.rows
    ]
    made = [
        FollowUp(row, words, follow_up_on(detected_on, row.value, row.unit))
        for row, words in rows
    ]
    return sorted(made, key=lambda one: one.on)
