"""A first text of an occurrence report, made from what is recorded.

Contents after 14 CFR 121.703(e) and GM 145.A.60(c). What is not recorded is said to be
not known yet: a report does not wait for it. No person is named in it.
"""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass

from fleet.amounts import counters_write
from fleet.due import Counters
from fleet.models import AircraftPeriod
from repairs.models import Event, Finding, OccurrenceReport
from repairs.selectors.findings import UNSTATED, size_words
from repairs.selectors.report_rules import CHARACTERS, rules_of, seen_on, zone_of
from repairs.selectors.report_triggers import level_now, triggers

NOT_KNOWN = "not known yet"
PROBLEM = "Problem text:\n"
TOO_LONG = (
    "The problem text has {count:,} characters; the form takes {most:,} ({source}). "
    "Shorten it and send the rest as a supplement."
)


@dataclass(frozen=True)
class Draft:
    """The text, and what is missing in it."""

    text: str
    lacking: tuple[str, ...]


def report_draft(report: OccurrenceReport) -> Draft:
    subject = report.finding or report.event
    assert subject is not None  # a constraint of the table
    lines = _common(report, subject)
    if isinstance(subject, Finding):
        lines += _of_finding(subject)
        problem = _problem(subject)
    else:
        lines += _of_event(subject)
        problem = subject.description or subject.get_kind_display().capitalize()
    told = [f"{label}: {value or NOT_KNOWN}" for label, value in lines]
    lacking = tuple(label.lower() for label, value in lines if not value)
    return Draft("\n".join([*told, "", PROBLEM + problem]), lacking)


def problem_text(content: str) -> str:
    """What stands under "Problem text:", or everything where the heading is gone."""
    before, heading, after = content.partition(PROBLEM)
    return (after if heading else before).strip()


def length_notice(report: OccurrenceReport, content: str) -> str:
    """Says so when the problem text is longer than the regime's form takes."""
    day = report.detected_at.date()
    row = rules_of(report.operator, report.regime, day).rows.get(CHARACTERS)
    count = len(problem_text(content))
    if row is None or count <= row.value:
        return ""
    return TOO_LONG.format(count=count, most=row.value, source=row.source)


def _common(
    report: OccurrenceReport, subject: Finding | Event
) -> list[tuple[str, str]]:
    zone, _ = zone_of(report.operator)
    aircraft = subject.aircraft
    period = _period(subject)
    kind, variant = aircraft.variant.aircraft_type, aircraft.variant
    counters = Counters(subject.at_minutes, subject.at_cycles, subject.at_landings)
    detected = report.detected_at.astimezone(zone)
    return [
        ("Operator", str(report.operator)),
        ("Operator's approval reference", ""),
        ("Operator's number", f"{subject.number} ({report.regime})"),
        ("Aircraft type", " ".join(dict.fromkeys(f"{kind} {variant}".split()))),
        ("Serial number", aircraft.serial_number),
        ("Registration", period.registration if period else aircraft.registration),
        ("Date", seen_on(subject).isoformat()),
        ("Detected", f"{detected:%Y-%m-%d %H:%M} {zone.key}"),
        ("Flight number", ""),
        ("Stage of operation", ""),
        ("Emergency procedure effected", ""),
        ("Aircraft total time", counters_write(counters)),
    ]


def _period(subject: Finding | Event) -> AircraftPeriod | None:
    day = seen_on(subject)
    begun = [row for row in subject.aircraft.periods.all() if row.from_on <= day]
    return max(begun, key=lambda row: row.from_on, default=None)


def _of_finding(finding: Finding) -> list[tuple[str, str]]:
    size = size_words(list(finding.measurements.prefetch_related("values")))
    part = finding.safe_life_part
    item = f"{finding.get_element_display()} {finding.element_label}".strip()
    cause = finding.get_cause_display()
    return [
        ("Nature of the condition", finding.get_damage_type_display()),
        ("ATA chapter", finding.ata),
        ("Structural item", "" if finding.element == "unknown" else item),
        ("Location", finding.place_text or finding.place_entered),
        ("Criticality", _known(finding.get_criticality_display())),
        ("Size", "" if size == UNSTATED else size),
        ("Part and serial number", str(part or "not on a removable part")),
        ("Time since overhaul", "" if part else "not applicable"),
        ("How discovered", _discovered(finding)),
        ("Last inspection without a finding", _clean(finding)),
        ("Apparent cause", _known(cause)),
        ("Corrosion level", _level(finding)),
        ("Action taken", _action(finding)),
        ("Aircraft grounded", _grounded(finding)),
        ("Limits that apply", "; ".join(triggers(finding)) or "none recorded"),
    ]


def _of_event(event: Event) -> list[tuple[str, str]]:
    figures = "; ".join(str(value) for value in event.values.all())
    found = ", ".join(str(finding) for finding in event.findings.all())
    return [
        ("Nature of the event", event.get_kind_display()),
        ("Recorded figures", figures),
        ("Damage found", found),
        ("Action taken", "inspection closed" if event.state == "closed" else ""),
    ]


def _known(words: str) -> str:
    return "" if words == "unknown" else words


def _level(finding: Finding) -> str:
    if finding.damage_type != "corrosion":
        return "not corrosion"
    level = level_now(finding)
    return "" if level is None else str(level)


def _discovered(finding: Finding) -> str:
    method = _known(finding.get_detection_method_display())
    parts = [finding.get_occasion_display(), finding.task_reference, method]
    return ", ".join(part for part in parts if part)


def _clean(finding: Finding) -> str:
    if finding.last_clean_on is None:
        return ""
    at = counters_write(Counters(cycles=finding.last_clean_cycles))
    parts = [_day(finding.last_clean_on), at, finding.last_clean_method]
    return ", ".join(part for part in parts if part)


def _day(day: dt.date) -> str:
    return day.isoformat()


def _action(finding: Finding) -> str:
    """Repaired, replaced, or what was decided."""
    rows = finding.repair_rows.select_related("repair")
    repaired = [f"{r.repair.number} {r.repair.get_kind_display()}" for r in rows]
    if repaired:
        return "repaired: " + ", ".join(repaired)
    decided = finding.disposition_rows.select_related("disposition").last()
    return decided.disposition.get_kind_display() if decided else ""


def _grounded(finding: Finding) -> str:
    return "yes, before further flight" if finding.state == "to_rectify" else ""


def _problem(finding: Finding) -> str:
    """One paragraph that can stand alone."""
    where = finding.place_text or finding.place_entered
    size = size_words(list(finding.measurements.prefetch_related("values")))
    words = finding.get_damage_type_display().capitalize()
    count = f" ({finding.cluster_count:,} of them)" if finding.cluster_count > 1 else ""
    sized = "" if size == UNSTATED else f", {size}"
    text = f"{words}{count} at {where}{sized}, found {finding.found_on}."
    return f"{text} {finding.description}".strip()
