"""What was decided about each finding, and the state it is in today because of it."""

from __future__ import annotations

import datetime as dt
from dataclasses import replace

from reports.demo.fleet import BY_MSN, DEMO_TODAY
from reports.demo.people import LAPSED_ON
from reports.demo.records import (
    DemoDisposition,
    DemoDocument,
    DemoFinding,
    DemoLimit,
    DemoRepair,
)
from reports.demo.stream import Stream
from reports.demo.usage import Logbook

Planted = dict[str, list[str]]

OPEN_QUESTIONS = ("mm_for_inch", "decimal_slip", "to_be_placed", "transpositions")
RECENT_CRACKS = ("crack_computed", "crack_near_cutout", "crack_at_lap_hole")
WATCHED_DAYS = 420
REPORTED_DAYS, ASSESSED_DAYS, DEFERRED_DAYS, CLOSED_DAYS = 25, 60, 150, 21
SIGNED_AGAIN = (
    "Within the limits of the manual. Signed on {day} by Gareth Ullswater, whose "
    "authorisation HA-C-191 had ended on {last}; decided again by the undersigned."
)
MANUAL = "ARD-52 SRM 53-10-01"


def findings_settle(
    seed: int,
    logbooks: dict[int, Logbook],
    findings: list[DemoFinding],
    repairs: list[DemoRepair],
    planted: Planted,
) -> list[DemoDisposition]:
    """Give every finding its state today; return the decisions behind them."""
    stream = Stream(seed, "dispositions")
    answered = {key: repair for repair in repairs for key in repair.findings}
    never_assessed = {key for case in OPEN_QUESTIONS for key in planted[case]}
    never_assessed |= set(planted["duplicates"][::2])
    cracks = {key for case in RECENT_CRACKS for key in planted[case]}
    decisions: list[DemoDisposition] = []
    for index, finding in enumerate(findings):
        logbook = logbooks[finding.msn]
        repair = answered.get(finding.key)
        if finding.key in never_assessed:
            continue
        if repair is not None:
            decision: DemoDisposition | None = _rectified(finding, repair)
            state = _after_repair(repair)
        elif finding.key in cracks or finding.damage_type in ("crack", "hole"):
            decision, state = _crack_decision(finding, logbook)
        else:
            decision, state = _remaining(stream, finding, logbook)
        findings[index] = replace(finding, state=state)
        if decision is not None:
            decisions.append(decision)
    _plant(findings, decisions, planted)
    return decisions


def _decision(
    finding: DemoFinding,
    kind: str,
    logbook: Logbook,
    statement: str,
    *,
    after_days: int = 1,
    decided_by: str = "certifier",
) -> DemoDisposition:
    last = logbook.days[-1].day
    decided_on = min(finding.found_on + dt.timedelta(days=after_days), last)
    page = f"p. {201 + sum(map(ord, finding.key)) % 40}"
    return DemoDisposition(
        key=f"S{finding.key[1:]}",
        msn=finding.msn,
        findings=(finding.key,),
        kind=kind,
        document=DemoDocument("repair_manual", MANUAL, "14", page, "Ardlune Aircraft"),
        decided_by=decided_by,
        decided_on=decided_on,
        at=logbook.at(decided_on),
        statement=statement,
    )


def _rectified(finding: DemoFinding, repair: DemoRepair) -> DemoDisposition:
    return DemoDisposition(
        key=f"S{finding.key[1:]}",
        msn=finding.msn,
        findings=(finding.key,),
        kind="replace" if repair.kind == "replacement" else "rectify",
        document=repair.document,
        decided_by="certifier",
        decided_on=finding.found_on,
        at=finding.at,
        statement=f"Beyond the recorded limit; {repair.description}",
    )


def _crack_decision(
    finding: DemoFinding, logbook: Logbook
) -> tuple[DemoDisposition | None, str]:
    """A crack is rectified before further flight; the repair is still to come."""
    words = "Rectify before further flight."
    return _decision(finding, "rectify", logbook, words, after_days=0), "to_rectify"


def _after_repair(repair: DemoRepair) -> str:
    """Closed, unless the repair is young or hides damage that is not shown removed."""
    hidden = repair.covers and repair.damage_removed != "yes"
    young = (DEMO_TODAY - repair.released_on).days < CLOSED_DAYS
    return "rectified" if hidden or young else "closed"


def _remaining(
    stream: Stream, finding: DemoFinding, logbook: Logbook
) -> tuple[DemoDisposition | None, str]:
    """Damage without a repair: young ones wait, some are deferred, most accepted."""
    age = (DEMO_TODAY - finding.found_on).days
    fate = stream.uniform()
    gone = BY_MSN[finding.msn].left_on is not None
    if age < REPORTED_DAYS and not gone:
        return None, "reported"
    if age < ASSESSED_DAYS and fate < 0.5:
        return None, "assessed"
    if age < DEFERRED_DAYS and fate < 0.75:
        return _deferral(stream, finding, logbook), "deferred"
    if fate < 0.03:
        statement = "Mark in the paint only; no damage to the metal."
        return _decision(finding, "not_damage", logbook, statement), "closed"
    if age < WATCHED_DAYS and fate > 0.9 and finding.damage_type == "dent":
        decision = _decision(
            finding, "accept_with_inspection", logbook, "Within the interim limits."
        )
        watch = (
            DemoLimit("cycles", 2_500, "2,500 FC", "effective"),
            DemoLimit("cycles", 2_500, "2,500 FC", "last_done"),
        )
        return replace(decision, inspections=watch), "accepted"
    statement = "Within the limits of the manual; damage remains as it is."
    return _decision(finding, "accept", logbook, statement), "accepted"


def _deferral(
    stream: Stream, finding: DemoFinding, logbook: Logbook
) -> DemoDisposition:
    decision = _decision(
        finding, "defer", logbook, "Deferred to the next check; crew informed."
    )
    cycles = 100 * stream.whole(8, 16)
    days = 30 * stream.whole(6, 10)
    limit_on = decision.decided_on + dt.timedelta(days=days)
    return replace(
        decision,
        limits=(
            DemoLimit("cycles", decision.at.cycles + cycles, f"{cycles} FC"),
            DemoLimit("days", days, f"not later than {limit_on}"),
        ),
    )


def _plant(
    findings: list[DemoFinding], decisions: list[DemoDisposition], planted: Planted
) -> None:
    """A repeat nobody raised, and a signature one day after its authority ended."""
    accepted = [i for i, d in enumerate(decisions) if d.kind == "accept"]
    index = next(i for i in accepted if decisions[i].msn == 1003)
    decisions[index] = replace(
        decisions[index],
        statement="Within the limits of the manual, paragraph 4: "
        "inspect again every 1,000 FC.",
    )
    planted["never_raised_repeat"] = [decisions[index].findings[0]]
    day_after = LAPSED_ON + dt.timedelta(days=1)
    index = next(
        i
        for i in accepted
        if decisions[i].decided_on >= day_after - dt.timedelta(days=25)
        and decisions[i].decided_on < day_after
        and decisions[i].msn != 1006
    )
    decisions[index] = replace(
        decisions[index],
        decided_on=day_after + dt.timedelta(days=2),
        statement=SIGNED_AGAIN.format(day=day_after, last=LAPSED_ON),
    )
    planted["authorisation_expired"] = [decisions[index].key]
