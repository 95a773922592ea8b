"""Occurrence reports as pages show them: what is due, to whom, and how long is left."""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field

from django.db.models import Count, Q, QuerySet

from fleet.models import Policy, User
from repairs.models import ASIDE_STATES, Event, Finding, OccurrenceReport
from repairs.selectors.report_rules import (
    FOLLOW_UP_WORDS,
    FollowUp,
    Rules,
    follow_ups,
    rules_from,
    zone_of,
)

TO_ANSWER = ("to_assess", "reportable")
OPEN = (*TO_ANSWER, "sent")
LEFT = "{left} left"
OVER = "overdue by {left}"
NO_CLOCK = "no clock recorded: counts as due now"
ASKED = "is it reportable?"
TO_SEND = "to be sent"


@dataclass(frozen=True)
class ReportLine:
    """A first report with what is to be done next, and by when."""

    report: OccurrenceReport
    moment: dt.datetime
    waiting: Sequence[FollowUp] = field(default_factory=tuple)

    @property
    def subject(self) -> Finding | Event:
        subject = self.report.finding or self.report.event
        assert subject is not None  # a constraint of the table
        return subject

    @property
    def next_words(self) -> str:
        if self.report.state == "to_assess":
            return ASKED
        if self.report.state == "reportable":
            return TO_SEND
        return self.waiting[0].words if self.waiting else "to be closed"

    @property
    def due_at(self) -> dt.datetime | None:
        """The clock that runs: of the report, or of the next follow-up (its last
        moment in the operator's day)."""
        if self.report.state in TO_ANSWER:
            return self.report.due_at
        return self._ends(self.waiting[0].on) if self.waiting else None

    @property
    def runs(self) -> bool:
        return self.report.state in TO_ANSWER or bool(self.waiting)

    @property
    def late(self) -> bool:
        """A clock nobody recorded counts as run out."""
        if not self.runs:
            return False
        return self.due_at is None or self.due_at < self.moment

    @property
    def countdown(self) -> str:
        if not self.runs:
            return ""
        if self.due_at is None:
            return NO_CLOCK
        left = self.due_at - self.moment
        text = OVER if self.late else LEFT
        return text.format(left=span_words(abs(left)))

    @property
    def due_words(self) -> str:
        """In the operator's time, as its people read a clock."""
        if self.due_at is None:
            return ""
        zone, _ = zone_of(self.report.operator)
        return f"{self.due_at.astimezone(zone):%Y-%m-%d %H:%M} {zone.key}"

    @property
    def order(self) -> tuple[bool, dt.datetime, int]:
        last = dt.datetime.max.replace(tzinfo=dt.UTC)
        first = dt.datetime.min.replace(tzinfo=dt.UTC)
        at = (self.due_at or first) if self.runs else last
        return not self.late, at, self.report.pk

    def _ends(self, day: dt.date) -> dt.datetime:
        zone, _ = zone_of(self.report.operator)
        ends = dt.datetime.combine(day, dt.time(23, 59), tzinfo=zone)
        return ends.astimezone(dt.UTC)


def span_words(left: dt.timedelta) -> str:
    """As "2 d 5 h", "3 h 10 min", "40 d"; minutes are cut off, not rounded up."""
    minutes = int(left.total_seconds() // 60)
    days, rest = divmod(minutes, 24 * 60)
    hours, rest = divmod(rest, 60)
    if days > 9:
        return f"{days:,} d"
    return f"{days} d {hours} h" if days else f"{hours} h {rest} min"


def reports_shown(user: User) -> QuerySet[OccurrenceReport]:
    """First reports the user may see, with all that a line reads."""
    rows = OccurrenceReport.objects.filter(
        pk__in=OccurrenceReport.objects.visible_to(user).values("pk"),
        supplements__isnull=True,
    )
    return with_subject(rows)


def with_subject(rows: QuerySet[OccurrenceReport]) -> QuerySet[OccurrenceReport]:
    return rows.select_related(
        "operator", "policy", "finding__aircraft", "event__aircraft", "decided_by"
    ).prefetch_related("supplemented__policy", "finding__corrosion_levels")


def open_only(rows: QuerySet[OccurrenceReport]) -> QuerySet[OccurrenceReport]:
    """Undecided, to be sent, or sent and not closed; set-aside findings ask nothing."""
    return rows.filter(state__in=OPEN).exclude(
        state__in=TO_ANSWER, finding__state__in=ASIDE_STATES
    )


def report_lines(
    rows: Iterable[OccurrenceReport], *, moment: dt.datetime
) -> list[ReportLine]:
    """Lines, the overdue first; one query for the clocks of all follow-ups."""
    reports = list(rows)
    sent = [row for row in reports if row.state == "sent"]
    clocks = list(Policy.objects.filter(key__in=FOLLOW_UP_WORDS)) if sent else []
    lines = [
        ReportLine(row, moment, _waiting(row, clocks) if row.state == "sent" else ())
        for row in reports
    ]
    return sorted(lines, key=lambda line: line.order)


def finding_reports(finding: Finding, *, moment: dt.datetime) -> list[ReportLine]:
    """The reports of a finding and of the event it followed."""
    mine = Q(finding=finding)
    if finding.event_id is not None:
        mine |= Q(event=finding.event_id)
    rows = OccurrenceReport.objects.filter(mine, supplements__isnull=True)
    return report_lines(with_subject(rows), moment=moment)


def open_counts(user: User, *, moment: dt.datetime) -> dict[str, int]:
    """How many want an answer or are to be sent, and how many of them are late; one
    query."""
    rows = open_only(reports_shown(user)).filter(state__in=TO_ANSWER)
    late = Q(due_at__lt=moment) | Q(due_at__isnull=True)
    counted: dict[str, int] = rows.order_by().aggregate(
        open=Count("pk"), late=Count("pk", filter=late)
    )
    return counted


def follow_ups_of(report: OccurrenceReport, rules: Rules) -> list[FollowUp]:
    zone, _ = zone_of(report.operator)
    day = report.detected_at.astimezone(zone).date()
    return follow_ups(rules, day, level_3=_level_3(report))


def _waiting(report: OccurrenceReport, clocks: Sequence[Policy]) -> list[FollowUp]:
    """Follow-ups that no supplement has met yet, the first due first."""
    zone, _ = zone_of(report.operator)
    day = report.detected_at.astimezone(zone).date()
    rules = rules_from(clocks, report.operator, report.regime, day)
    met = {x.policy.key for x in report.supplemented.all() if x.policy is not None}
    return [x for x in follow_ups_of(report, rules) if x.policy.key not in met]


def _level_3(report: OccurrenceReport) -> bool:
    if report.finding is None:
        return False
    rows = list(report.finding.corrosion_levels.all())
    replaced = {row.replaces_id for row in rows}
    return any(row.level == 3 for row in rows if row.pk not in replaced)


HEADER = (
    "operator", "regime", "record", "aircraft", "state", "next", "detected (UTC)",
    "due (UTC)", "overdue", "sent (UTC)", "reference", "recipients", "rule", "clock",
    "grade",
)  # fmt: skip


def export_row(line: ReportLine) -> list[object]:
    """A line of the table file; nobody's name is in it."""
    row, clock = line.report, line.report.policy
    return [
        str(row.operator),
        row.regime,
        str(line.subject),
        line.subject.aircraft.registration,
        row.get_state_display(),
        line.next_words,
        _utc(row.detected_at),
        _utc(line.due_at),
        "yes" if line.late else "no",
        _utc(row.sent_at),
        row.sent_reference,
        row.recipients,
        row.rule,
        f"{clock.value} {clock.get_unit_display()}" if clock else "",
        clock.grade if clock else "",
    ]


def _utc(moment: dt.datetime | None) -> str:
    return f"{moment.astimezone(dt.UTC):%Y-%m-%d %H:%M}" if moment else ""
