"""Whether the demo's cracks and events were reported, and its corrosion levels."""

from __future__ import annotations

import datetime as dt

from fleet.services.history import Writing
from repairs.models import Event, Finding
from repairs.selectors.report_draft import report_draft
from repairs.services.corrosion import LevelEntry, corrosion_level_determine
from repairs.services.reports import (
    Reportability,
    Sending,
    finding_decide_write,
    report_close_write,
    report_decide,
    report_send_write,
)
from reports.demo.fleet import DEMO_TODAY
from reports.demo.load_base import Loaded

REPORTABLE_HOLES = 4
REPORT = Reportability(True, "several cracked holes in one row of a joint")
NO_REPORT = Reportability(False, "one crack, found by its planned inspection")
NO_DAMAGE = Reportability(False, "no serious damage of the structure came of it")
UNDECIDED_DAYS, OPEN_DAYS = 30, 150
SENT_AFTER = dt.timedelta(hours=30)
RECIPIENTS = (
    "the authority's reporting portal; Ardlune Aircraft, design approval holder"
)
DEFINITIONS = "Corrosion programme of the operator, paragraph 2.3"


def crack_report_write(w: Writing, loaded: Loaded, finding: Finding) -> None:
    """Inside a writing: answered with the decision and sent in time; the newest cracks
    still wait for the answer."""
    age = (DEMO_TODAY - finding.found_on).days
    if finding.damage_type != "crack" or age < UNDECIDED_DAYS:
        return
    answer = REPORT if finding.cluster_count >= REPORTABLE_HOLES else NO_REPORT
    certifier = loaded.people["certifier"]
    finding_decide_write(w, finding, answer, decided_by=certifier)
    if not answer.reportable:
        return
    for row in finding.reports.select_related("operator", "finding__aircraft"):
        sent_at = min(row.detected_at + SENT_AFTER, w.at)
        text = report_draft(row).text
        reference = f"OR-{finding.number[2:]}"
        report_send_write(w, row, Sending(sent_at, reference, RECIPIENTS, text))
        if age > OPEN_DAYS:
            report_close_write(w, row)


def event_report(loaded: Loaded, event: Event, at: dt.datetime) -> None:
    for row in event.reports.all():
        report_decide(
            report=row,
            answer=NO_DAMAGE,
            decided_by=loaded.people["certifier"],
            actor=loaded.users["certifier"],
            at=at,
        )


def level_1(loaded: Loaded, finding: Finding, at: dt.datetime) -> None:
    """Local corrosion, reworked within its limits."""
    if finding.damage_type == "corrosion":
        _determine(loaded, finding, at, 1, "within")


def level_2(loaded: Loaded, key: str, at: dt.datetime) -> None:
    """A single rework would exceed the limits: the question on reporting runs."""
    finding = loaded.rows[key]
    _determine(loaded, finding, at, 2, "beyond")


def _determine(
    loaded: Loaded, finding: Finding, at: dt.datetime, level: int, rework: str
) -> None:
    corrosion_level_determine(
        finding=finding,
        entry=LevelEntry(
            level=level,
            definitions=DEFINITIONS,
            task=finding.task_reference or "zonal inspection of the area",
            determined_by=loaded.people["engineer"],
            determined_on=finding.found_on,
            spread="local",
            single_rework=rework,
        ),
        actor=loaded.users["engineer"],
        at=at,
    )
