"""Events and findings of the demo, entered as people wrote them."""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterator, Sequence
from functools import partial
from itertools import groupby

from fleet.due import Standing
from fleet.models import Aircraft
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from repairs.measured import Typed
from repairs.services.events import event_close, event_record
from repairs.services.findings import FindingEntry, findings_record_many
from repairs.services.measuring import Measuring, measurement_record
from reports.demo.fleet import BY_MSN, day_date, day_number
from reports.demo.load_base import Loaded
from reports.demo.load_parts import amounts
from reports.demo.load_reports import event_report
from reports.demo.records import DemoEvent, DemoFinding, Dimension, Scenario, Truth
from reports.demo.timeline import Rank, Step, month_after
from reports.demo.usage import Logbook

COUNTERS_SOURCE = "technical log page of the day"
INSPECTED = ("check", "task")
PRINCIPAL_SOURCE = "type's list of principal structural elements, page 2"
ATA = {"FUS": "53", "WING": "57", "HT": "55", "FIN": "55", "NAC": "54"}
"""ATA chapter by the beginning of the section's code."""


def finding_steps(loaded: Loaded, scenario: Scenario) -> Iterator[Step]:
    """Every finding as reported, and again as measured after rework."""
    for event in scenario.events:
        yield Step(
            event.happened_on, Rank.EVENT, event.key, partial(_event, loaded, event)
        )
    for (msn, _), found in _by_month(scenario.findings):
        record = partial(_record_all, loaded, found, scenario.logbooks[msn])
        yield Step(found[-1].found_on, Rank.FINDING, str(msn), record)
    answered = {key: r.released_on for r in scenario.repairs for key in r.findings}
    for finding in scenario.findings:
        if finding.reworked:
            on = answered.get(finding.key, finding.found_on)
            book = scenario.logbooks[finding.msn]
            measure = partial(_measure, loaded, finding, on, book)
            yield Step(on, Rank.MEASUREMENT, finding.key, measure)


def _by_month(
    findings: list[DemoFinding],
) -> list[tuple[tuple[int, dt.date], list[DemoFinding]]]:
    """Findings of one aircraft and month together, as their papers come in."""

    def papers(finding: DemoFinding) -> tuple[int, dt.date]:
        return finding.msn, month_after(finding.found_on)

    ordered = sorted(findings, key=lambda f: (f.msn, f.found_on, f.key))
    return [(key, list(group)) for key, group in groupby(ordered, key=papers)]


def typed(dimensions: Sequence[Dimension]) -> list[Typed]:
    return [Typed(d.quantity, d.entered, d.worked_out) for d in dimensions]


def ata_of(truth: Truth) -> str:
    return ATA.get(truth.section.partition("-")[0], "")


def last_clean(finding: DemoFinding, book: Logbook) -> dt.date | None:
    """The last check that opened the area and found nothing there."""
    if finding.occasion not in INSPECTED:
        return None
    found = day_number(finding.found_on)
    earlier = [day for day in book.aircraft.check_days() if day < found - 30]
    return day_date(earlier[-1]) if earlier else None


def _event(loaded: Loaded, event: DemoEvent, at: dt.datetime) -> None:
    recorder = loaded.users["recorder"]
    row = event_record(
        aircraft=loaded.aircraft[event.msn],
        kind=event.kind,
        happened_on=event.happened_on,
        counters=amounts(event.at),
        description=event.description,
        actor=recorder,
        at=at,
    )
    event_report(loaded, row, at)
    loaded.rows[event.key] = event_close(
        event=row,
        reason="inspected as the manual asks; damage recorded as findings",
        actor=recorder,
        at=at,
    )


def _record_all(
    loaded: Loaded, findings: list[DemoFinding], book: Logbook, at: dt.datetime
) -> None:
    aircraft = loaded.aircraft[book.aircraft.msn]
    with Writing(
        actor=loaded.users["recorder"],
        action="finding_record",
        at=at,
        operator=loaded.operator,
        stream=stream_of(aircraft),
    ) as w:
        rows = findings_record_many(
            w,
            [_entry(loaded, finding, book) for finding in findings],
            standing_of=partial(_standing, book),
        )
    loaded.rows |= {f.key: row for f, row in zip(findings, rows, strict=True)}


def _entry(loaded: Loaded, finding: DemoFinding, book: Logbook) -> FindingEntry:
    clean_on = last_clean(finding, book)
    event = loaded.rows[finding.event] if finding.event else None
    return FindingEntry(
        aircraft=loaded.aircraft[finding.msn],
        place_entered=finding.location,
        damage_type=finding.damage_type,
        found_on=finding.found_on,
        typed=typed(finding.dimensions),
        at=amounts(finding.at),
        counters_source=COUNTERS_SOURCE,
        element=finding.element,
        element_label=finding.element_label,
        surface=finding.surface,
        criticality="" if finding.element == "skin" else "principal",
        criticality_source="" if finding.element == "skin" else PRINCIPAL_SOURCE,
        ata=ata_of(finding.truth),
        cause=finding.cause,
        cluster_count=finding.cluster_count,
        occasion=finding.occasion,
        task_reference=_task(finding),
        detection_method=finding.method,
        last_clean_on=clean_on,
        last_clean_cycles=book.at(clean_on).cycles if clean_on else None,
        last_clean_method="detailed visual" if clean_on else "",
        found_by=loaded.people[finding.reporter],
        event=event,
        description=finding.description,
    )


def _standing(book: Logbook, aircraft: Aircraft, day: dt.date) -> Standing:
    """Counters of the day by the log, so that no sum is asked of the database."""
    return Standing(amounts(book.at(day)), day)


def _measure(
    loaded: Loaded, finding: DemoFinding, on: dt.date, book: Logbook, at: dt.datetime
) -> None:
    measurement_record(
        finding=loaded.rows[finding.key],
        measuring=Measuring(
            typed=typed(finding.reworked),
            measured_on=on,
            stage="after_rework",
            measured_by=loaded.people["inspector"],
            at=amounts(book.at(on)),
            method="ultrasonic thickness gauge",
            instrument="UT gauge 7, calibrated yearly",
        ),
        actor=loaded.users["recorder"],
        at=at,
    )


def _task(finding: DemoFinding) -> str:
    """The card of the inspection that found it."""
    if finding.occasion not in INSPECTED:
        return ""
    mark = BY_MSN[finding.msn].registration[-3:]
    return f"{mark} {finding.found_on:%y}-{sum(map(ord, finding.key)) % 900 + 100}"
