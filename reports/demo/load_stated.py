"""Inputs that engineers of the demo stated, and what was measured for them."""

from __future__ import annotations

import datetime as dt

from repairs.models import Finding
from repairs.services.measuring import Measuring, measurement_record
from repairs.services.stated import Document, input_state
from reports.demo.fleet import DEMO_TODAY
from reports.demo.load_base import Loaded
from reports.demo.load_findings import typed
from reports.demo.records import DemoFinding, Scenario
from reports.demo.stated import STATED, DemoStated

STATED_AT = dt.datetime.combine(DEMO_TODAY, dt.time(7), dt.UTC)
PAGE = "1"


def stated_load(loaded: Loaded, scenario: Scenario) -> None:
    """Complete the card and state, for the finding that each case falls on."""
    for number, case in enumerate(STATED):
        finding = case.of(scenario.findings)
        if finding is None:
            continue
        row: Finding = loaded.rows[finding.key]
        at = STATED_AT + dt.timedelta(minutes=number)
        if case.measured:
            _measure(loaded, case, finding, row, at)
        for name, entered in case.inputs:
            input_state(
                subject=row,
                name=name,
                entered=entered,
                document=Document(case.document, PAGE),
                actor=loaded.users["engineer"],
                at=at,
                on=DEMO_TODAY,
            )


def _measure(
    loaded: Loaded,
    case: DemoStated,
    finding: DemoFinding,
    row: Finding,
    at: dt.datetime,
) -> None:
    """The card of the day it was found says more than was typed in then."""
    measurement_record(
        finding=row,
        measuring=Measuring(
            typed=typed(case.measured),
            measured_on=finding.found_on,
            measured_by=loaded.people["inspector"],
            method="eddy current, from the inspection card",
            holes=case.holes,
        ),
        actor=loaded.users["recorder"],
        at=at,
    )
