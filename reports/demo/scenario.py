"""The whole demo as one deterministic value, and as canonical text for its digest."""

from __future__ import annotations

import csv
import datetime as dt
import hashlib
import io
from collections.abc import Iterable
from dataclasses import fields, is_dataclass

from reports.demo.ageing import corrosion_draw, cracks_draw
from reports.demo.dispositions import findings_settle
from reports.demo.findings import ramp_findings_draw
from reports.demo.fleet import DEMO_TODAY
from reports.demo.inspections import requirements_draw, requirements_plant
from reports.demo.parts import LIFE_LIMITS, PART_NUMBERS, parts_draw
from reports.demo.planted import Planting, findings_plant
from reports.demo.planted_repairs import repairs_plant
from reports.demo.records import Scenario
from reports.demo.repairs import repairs_draw
from reports.demo.usage import logbooks_draw


def draw(seed: int = 1) -> Scenario:
    """Everything the demo loads; the same seed gives the same demo anywhere."""
    logbooks = logbooks_draw(seed)
    ramp, events = ramp_findings_draw(seed, logbooks)
    findings = [*ramp, *corrosion_draw(seed, logbooks), *cracks_draw(seed, logbooks)]
    planting = Planting(seed, logbooks, findings, events, {})
    findings_plant(planting)
    planted = planting.planted
    repairs = repairs_draw(seed, logbooks, findings, planted)
    repairs_plant(logbooks, repairs, planted)
    dispositions = findings_settle(seed, logbooks, findings, repairs, planted)
    requirements = requirements_draw(seed, logbooks, repairs, planted)
    requirements_plant(logbooks, requirements, planted)
    parts = parts_draw(logbooks, planted)
    return Scenario(
        seed=seed,
        today=DEMO_TODAY,
        logbooks=logbooks,
        events=sorted(events, key=lambda event: (event.happened_on, event.key)),
        findings=sorted(findings, key=lambda f: (f.found_on, f.key)),
        dispositions=sorted(dispositions, key=lambda d: (d.decided_on, d.key)),
        repairs=sorted(repairs, key=lambda r: (r.released_on, r.key)),
        requirements=requirements,
        part_numbers=list(PART_NUMBERS),
        life_limits=list(LIFE_LIMITS),
        parts=parts,
        planted=planted,
    )


def canonical_csv(scenario: Scenario) -> str:
    """Every record as a line, sorted; numbers with a point have two decimals."""
    days = [day for book in scenario.logbooks.values() for day in book.days]
    rows = [
        [table, *_cells(record)]
        for table, records in (
            ("usage", days),
            ("event", scenario.events),
            ("finding", scenario.findings),
            ("disposition", scenario.dispositions),
            ("repair", scenario.repairs),
            ("requirement", scenario.requirements),
            ("life limit", scenario.life_limits),
            ("part", scenario.parts),
            ("planted", sorted(scenario.planted.items())),
        )
        for record in records
    ]
    out = io.StringIO()
    csv.writer(out, lineterminator="\n").writerows(sorted(rows))
    return out.getvalue()


def scenario_digest(scenario: Scenario) -> str:
    return hashlib.sha256(canonical_csv(scenario).encode()).hexdigest()


def _cells(value: object) -> list[str]:
    """A record, its parts and its lists, flattened in the order of their fields."""
    if value is None:
        return [""]
    if isinstance(value, float):
        return [f"{value:.2f}"]
    if isinstance(value, bool | int | str | dt.date):
        return [str(value)]
    if is_dataclass(value):
        inner: Iterable[object] = (getattr(value, f.name) for f in fields(value))
    elif isinstance(value, tuple | list):
        inner = ("(", *value, ")")
    else:
        raise TypeError(f"no canonical form for {value!r}")
    return [cell for part in inner for cell in _cells(part)]
