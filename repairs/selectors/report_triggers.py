"""What asks whether a finding is reportable, and what stands undecided."""

from __future__ import annotations

from collections.abc import Iterable

from fleet.models import Criticality
from repairs.models import (
    OPEN_STATES,
    CorrosionLevel,
    Disposition,
    Event,
    Finding,
    OccurrenceReport,
)
from repairs.selectors.report_rules import regimes_on

CRACK_CRITICAL = "{criticality} crack: rectify before further flight"
CRACK_UNSTATED = "crack, criticality unknown: rectify before further flight"
BEYOND = "beyond recorded limit {limit}"
CRITICAL = "a crack in structure that is {criticality}"
MAJOR = "{number} calls it major"
CORRODED = "level {level} corrosion"
LEVEL_TO_ASK = 2
"""Lowest corrosion level that asks: AD 90-25-07 wants level 2 told to the design
approval holder, level 3 to the authority as well."""
UNDECIDED = "to_assess"


def is_critical_crack(finding: Finding) -> bool:
    """A crack in PSE or FCS; a criticality nobody stated counts as such."""
    return (
        finding.damage_type == "crack" and finding.criticality != Criticality.SECONDARY
    )


def crack_words(finding: Finding) -> str:
    """What holds for an open crack in PSE or FCS; empty for anything else."""
    if finding.state not in OPEN_STATES or not is_critical_crack(finding):
        return ""
    if finding.criticality == Criticality.UNKNOWN:
        return CRACK_UNSTATED
    return CRACK_CRITICAL.format(criticality=finding.get_criticality_display())


def triggers(finding: Finding) -> list[str]:
    """Why the question is asked, in words; empty: nothing on record asks it."""
    return [*_beyond(finding), *_crack(finding), *_major(finding), *_corroded(finding)]


def level_now(finding: Finding) -> CorrosionLevel | None:
    """The corrosion level that holds: the last, which no other replaces."""
    rows = finding.corrosion_levels.filter(replaced_by__isnull=True)
    return rows.select_related("determined_by").last()


def reports_undecided(finding: Finding) -> list[tuple[Finding | Event, str]]:
    """Of what, and under which regime, it is not yet said whether it is reportable.

    A finding made after an event waits for the answer on the event too.
    """
    rows = OccurrenceReport.objects.filter(supplements__isnull=True)
    mine = dict(rows.filter(finding=finding).values_list("regime", "state"))
    waiting = {regime for regime, state in mine.items() if state == UNDECIDED}
    if triggers(finding):
        asked = regimes_on(finding.aircraft, finding.found_on)
        waiting |= {regime for regime in asked if regime not in mine}
    undecided: list[tuple[Finding | Event, str]] = [
        (finding, regime) for regime in sorted(waiting)
    ]
    if finding.event is not None:
        of_event = rows.filter(event=finding.event_id, state=UNDECIDED)
        regimes = of_event.order_by("regime").values_list("regime", flat=True)
        undecided += [(finding.event, regime) for regime in regimes]
    return undecided


def _beyond(finding: Finding) -> Iterable[str]:
    rows = finding.limit_checks.filter(outcome="beyond").select_related(
        "limit__document"
    )
    limits = [row.limit for row in rows]
    words = (f"{x.document} {x.paragraph}" if x is not None else "" for x in limits)
    return [BEYOND.format(limit=limit).strip() for limit in dict.fromkeys(words)]


def _crack(finding: Finding) -> Iterable[str]:
    if not is_critical_crack(finding):
        return []
    return [CRITICAL.format(criticality=finding.get_criticality_display())]


def _major(finding: Finding) -> Iterable[str]:
    """By the substantiation that covers it, or by a decision that no other replaces."""
    folders = finding.substantiation_rows.filter(
        withdrawn=False,
        substantiation__scale="major",
        substantiation__replaced_by__isnull=True,
    ).values_list("substantiation__number", flat=True)
    decisions = Disposition.objects.filter(
        finding_rows__finding=finding, scale="major", replaced_by__isnull=True
    ).values_list("number", flat=True)
    return [MAJOR.format(number=number) for number in (*folders, *decisions)]


def _corroded(finding: Finding) -> Iterable[str]:
    if finding.damage_type != "corrosion":
        return []
    level = level_now(finding)
    if level is None or level.level < LEVEL_TO_ASK:
        return []
    return [CORRODED.format(level=level.level)]
