"""Findings assessed, decided on and closed, each by an authorised person."""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterator
from functools import partial
from itertools import groupby

from fleet.due import Counters as Amounts
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from fleet.services.signing import PROGRAM, Proof
from repairs.services.assessing import (
    finding_assess,
    finding_assess_write,
    finding_close,
)
from repairs.services.disposition_entry import Basis, DispositionEntry
from repairs.services.dispositions import disposition_write
from repairs.services.finding_guards import DataCited
from repairs.services.requirement_draft import LimitEntry, RequirementDraft
from reports.demo.load_base import Loaded
from reports.demo.load_parts import amounts
from reports.demo.load_reports import crack_report_write, level_1, level_2
from reports.demo.records import (
    DemoDisposition,
    DemoFinding,
    DemoLimit,
    DemoRepair,
    Scenario,
)
from reports.demo.timeline import Rank, Step, month_after


def decision_steps(loaded: Loaded, scenario: Scenario) -> Iterator[Step]:
    """Assessment and decision in one sitting, closing after the repair."""
    findings = {finding.key: finding for finding in scenario.findings}
    ordered = sorted(scenario.dispositions, key=lambda d: (d.msn, d.decided_on, d.key))

    def papers(decision: DemoDisposition) -> tuple[int, dt.date]:
        return decision.msn, month_after(decision.decided_on)

    for (msn, _), group in groupby(ordered, key=papers):
        decisions = list(group)
        decide = partial(_decide_all, loaded, msn, decisions)
        yield Step(decisions[-1].decided_on, Rank.DISPOSITION, str(msn), decide)
    decided = {key for d in scenario.dispositions for key in d.findings}
    for finding in scenario.findings:
        if finding.state == "assessed" and finding.key not in decided:
            assess = partial(_assess_alone, loaded, finding)
            yield Step(finding.found_on, Rank.ASSESSMENT, finding.key, assess)
    newest = max(
        (x for x in scenario.findings if x.damage_type == "corrosion"),
        key=lambda x: (x.found_on, x.key),
    )
    level = partial(level_2, loaded, newest.key)
    yield Step(newest.found_on, Rank.CLOSING, newest.key, level)
    for repair in scenario.repairs:
        for key in repair.findings:
            if findings[key].state == "closed":
                close = partial(_close, loaded, findings[key], repair)
                yield Step(repair.released_on, Rank.CLOSING, key, close)


def limit_entries(phase: str, limits: tuple[DemoLimit, ...]) -> list[LimitEntry]:
    return [LimitEntry(phase, limit.entered, limit.base) for limit in limits]


def _decide_all(
    loaded: Loaded, msn: int, decisions: list[DemoDisposition], at: dt.datetime
) -> None:
    with Writing(
        actor=loaded.users["engineer"],
        action="disposition_decide",
        at=at,
        operator=loaded.operator,
        stream=stream_of(loaded.aircraft[msn]),
        origin=PROGRAM,
    ) as w:
        for decision in decisions:
            document = decision.document
            finding_assess_write(
                w,
                finding=loaded.rows[decision.findings[0]],
                proof=Proof.by_program(loaded.people["engineer"]),
                on=decision.decided_on,
                data=DataCited(
                    document.kind, document.reference, document.revision, document.page
                ),
            )
            loaded.rows[decision.key] = disposition_write(
                w,
                _entry(loaded, decision),
                proof=Proof.by_program(loaded.people[decision.decided_by]),
            )
            for key in decision.findings:
                crack_report_write(w, loaded, loaded.rows[key])


def _assess_alone(loaded: Loaded, finding: DemoFinding, at: dt.datetime) -> None:
    finding_assess(
        finding=loaded.rows[finding.key],
        proof=Proof.by_program(loaded.people["engineer"]),
        on=finding.found_on,
        data=DataCited("repair_manual", "ARD-52 SRM 53-10-01", "14", "p. 201"),
        actor=loaded.users["engineer"],
        at=at,
    )


def _entry(loaded: Loaded, decision: DemoDisposition) -> DispositionEntry:
    document = decision.document
    limits = {limit.counter: limit.value for limit in decision.limits}
    days = limits.get("days")
    limit_on = decision.decided_on + dt.timedelta(days=days) if days else None
    return DispositionEntry(
        aircraft=loaded.aircraft[decision.msn],
        findings=[loaded.rows[key] for key in decision.findings],
        kind=decision.kind,
        basis=Basis(
            document.kind, document.reference, document.page, document.revision
        ),
        reason=decision.statement,
        decided_on=decision.decided_on,
        at=amounts(decision.at),
        limit=Amounts(cycles=limits.get("cycles")),
        limit_on=limit_on,
        crew_informed_on=decision.decided_on if limits else None,
        scale="minor",
        scale_reason="within the published manual",
        new_requirement=_inspection(loaded, decision),
    )


def _inspection(loaded: Loaded, decision: DemoDisposition) -> RequirementDraft | None:
    """The inspection that an acceptance is bound to."""
    if not decision.inspections:
        return None
    finding = loaded.rows[decision.findings[0]]
    return RequirementDraft(
        operator=loaded.operator,
        title=f"Inspect the accepted damage {finding}",
        requirement_class="operator",
        area=finding.place_text or finding.place_entered,
        criteria="No growth beyond the recorded dimensions, no crack.",
        method="detailed_visual",
        task="Measure again and compare with the baseline.",
        effective_on=decision.decided_on,
        limits=[
            *limit_entries("threshold", decision.inspections[:1]),
            *limit_entries("repeat", decision.inspections[1:]),
        ],
        aircraft=[loaded.aircraft[decision.msn]],
    )


def _close(
    loaded: Loaded, finding: DemoFinding, repair: DemoRepair, at: dt.datetime
) -> None:
    row = loaded.rows[finding.key]
    level_1(loaded, row, at)
    finding_close(
        finding=row,
        proof=Proof.by_program(loaded.people["certifier"]),
        on=repair.released_on,
        cause=finding.cause,
        actor=loaded.users["certifier"],
        at=at,
        reason=f"repaired: {loaded.rows[repair.key]}",
    )
